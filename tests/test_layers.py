"""Imports run one way, along the flow of the data."""

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).parent.parent / "siteassess"

BASICS = {"errors", "constants", "angles", "decibels", "wording"}
RECORDS = {"site_file", "horizon", "antenna", "orbits", "sky_tracks", "link_budget", "verdict"}
MAY_IMPORT = {
    "errors": set(),
    "constants": set(),
    "angles": set(),
    "decibels": set(),
    "wording": set(),
    "tables": {"errors", "wording"},
    "site_file": BASICS | {"tables"},
    "horizon": BASICS | {"tables", "site_file"},
    "antenna": BASICS | {"tables", "site_file"},
    "orbits": BASICS | {"tables", "site_file"},
    "sky_tracks": BASICS | {"tables", "site_file", "orbits"},
    "link_budget": BASICS | {"tables", "site_file", "horizon", "antenna", "sky_tracks"},
    "verdict": BASICS | {"tables", "site_file", "horizon", "antenna", "sky_tracks", "link_budget"},
    "assessment": BASICS | RECORDS,
    "candidates": BASICS | RECORDS | {"assessment"},
    "report": BASICS | RECORDS | {"tables", "assessment", "candidates"},
    "cli": {"errors", "assessment", "antenna", "site_file", "horizon", "candidates", "report"},
    "__init__": {"errors", "assessment", "site_file"},
    "__main__": {"cli"},
}

# What a run that only prints JSON must not load, and what may load it inside a function.
HEAVY = {"pandas", "matplotlib", "jinja2", "typst", "shapely", "pyproj", "pygeomag"}
MAY_LOAD_HEAVY = {"report/figures/skyplot.py", "report/figures/panorama.py"}


def module_paths() -> list[Path]:
    return sorted(PACKAGE.rglob("*.py"))


def stage(path: Path) -> str:
    parts = path.relative_to(PACKAGE).with_suffix("").parts
    return parts[0]


def imported_stages(path: Path) -> set[str]:
    found = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        names = []
        if isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{path}: relative import"
            names = [node.module or ""]
        elif isinstance(node, ast.Import):
            names = [alias.name for alias in node.names]
        for name in names:
            head, _, rest = name.partition(".")
            if head == "siteassess" and rest:
                found.add(rest.partition(".")[0])
    return found


@pytest.mark.parametrize("path", module_paths(), ids=lambda path: str(path.relative_to(PACKAGE)))
def test_module_imports_only_what_flows_into_it(path: Path) -> None:
    own = stage(path)
    assert own in MAY_IMPORT, f"{path}: a new stage needs its row in the table"
    assert imported_stages(path) - {own} <= MAY_IMPORT[own]


def test_stages_import_in_one_direction() -> None:
    done: set[str] = set()
    waiting = {name: set(allowed) for name, allowed in MAY_IMPORT.items()}
    while waiting:
        ready = {name for name, allowed in waiting.items() if allowed <= done}
        assert ready, f"cycle among {sorted(waiting)}"
        done |= ready
        waiting = {name: allowed for name, allowed in waiting.items() if name not in ready}


@pytest.mark.parametrize("path", module_paths(), ids=lambda path: str(path.relative_to(PACKAGE)))
def test_heavy_libraries_are_imported_where_they_are_used(path: Path) -> None:
    if str(path.relative_to(PACKAGE)) in MAY_LOAD_HEAVY:
        return
    for node in ast.parse(path.read_text(encoding="utf-8")).body:
        names = [node.module or ""] if isinstance(node, ast.ImportFrom) else []
        names += [alias.name for alias in node.names] if isinstance(node, ast.Import) else []
        assert not {name.partition(".")[0] for name in names} & HEAVY
