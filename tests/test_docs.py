"""The documents say what the code does: commands, records, sources, methods and figures."""

import dataclasses
import importlib
import inspect
import pkgutil
import re
import runpy
import tokenize
from collections.abc import Callable, Iterator
from pathlib import Path

import click
import pytest
from click.testing import CliRunner

import siteassess
from siteassess.cli import main

PROJECT = Path(__file__).parent.parent
DOCS = PROJECT / "docs"
BUILDERS = PROJECT / "tests" / "builders"
PACKAGE = Path(siteassess.__file__).parent

MODULES = sorted(
    module.name
    for module in pkgutil.walk_packages(siteassess.__path__, prefix="siteassess.")
    if not module.name.endswith("__main__")
)

# What a site file holds is told key by key.
PAGE_OF_STAGE = {"site_file": "site_file.md"}
METHOD_HEADINGS = [
    "Question",
    "Inputs",
    "Equations",
    "Limits of validity",
    "Worked example",
    "Sources",
]

UNITS = {
    "_deg": "deg",
    "_deg_per_s": "deg/s",
    "_deg_per_m": "deg/m",
    "_m": "m",
    "_s": "s",
    "_hz": "Hz",
    "_k": "K",
    "_db": "dB",
    "_dbic": "dBic",
    "_dbw": "dBW",
    "_dbhz": "dB-Hz",
    "_dbw_per_hz": "dBW/Hz",
    "_db_per_k": "dB/K",
    "_dbm": "dBm",
    "_share": "1",
}


def page(name: str) -> str:
    return (DOCS / name).read_text(encoding="utf-8")


def table_rows(text: str) -> Iterator[list[str]]:
    """Cells of the tables of a page, heads and rules left out."""
    lines = text.splitlines()
    for line, following in zip(lines, [*lines[1:], ""], strict=True):
        if line.startswith("|") and not line.startswith("| ---") and not following.startswith("| ---"):
            yield [cell.strip() for cell in line.strip("|").split("|")]


# Command line

COMMANDS = ["siteassess", *(f"siteassess {name}" for name in main.commands)]


@pytest.mark.parametrize("command", COMMANDS)
def test_command_page_shows_the_help_as_it_is(command: str) -> None:
    help_block: Callable[[str], str] = runpy.run_path(str(BUILDERS / "build_command_help.py"))["help_block"]
    assert help_block(command) in page("cli.md"), "run tests/builders/build_command_help.py"


def test_command_page_shows_no_other_command() -> None:
    assert re.findall(r"^\$ (.*) --help$", page("cli.md"), re.MULTILINE) == COMMANDS


@pytest.mark.parametrize("name", main.commands)
def test_command_explains_itself_with_an_example(name: str) -> None:
    command = main.commands[name]
    assert "Example:" in (command.help or "")
    for option in command.params:
        if isinstance(option, click.Option):
            assert option.help, option.name
            assert f"{option.opts[0]}" in page("cli.md")


def test_command_page_shows_a_mistake_as_it_is_printed(write_site: Callable[..., Path]) -> None:
    path = write_site(("mast_height_m = 1.5", "mast_height_m = -3.0"))
    result = CliRunner().invoke(main, ["assess", str(path)])
    assert result.exit_code == 1
    assert result.stdout == ""
    assert f"```text\n{result.stderr}```" in page("cli.md")


# Nomenclature


def public_records() -> list[type]:
    """Dataclasses of the stages; what the report holds are texts and looks."""
    found = []
    for name in MODULES:
        if name.startswith("siteassess.report"):
            continue
        module = importlib.import_module(name)
        for public in getattr(module, "__all__", []):
            record = getattr(module, public)
            if inspect.isclass(record) and dataclasses.is_dataclass(record) and record.__module__ == name:
                found.append(record)
    return found


def nomenclature(record: type) -> list[list[str]]:
    """Rows of a record's table: field, symbol, unit, sign, meaning."""
    found = re.search(
        rf"^### {record.__name__}\n\n`{re.escape(record.__module__)}`(.*?)(?=^##|\Z)",
        page("nomenclature.md"),
        re.MULTILINE | re.DOTALL,
    )
    assert found, f"{record.__module__}.{record.__name__} is not there"
    return list(table_rows(found[1]))


@pytest.mark.parametrize("record", public_records(), ids=lambda record: record.__name__)
def test_every_field_is_in_the_nomenclature(record: type) -> None:
    rows = nomenclature(record)
    assert [row[0].strip("`") for row in rows] == [field.name for field in dataclasses.fields(record)]
    for row in rows:
        assert len(row) == 5, row
        assert row[4], f"{row[0]} has no meaning"


@pytest.mark.parametrize("record", public_records(), ids=lambda record: record.__name__)
def test_units_are_those_that_the_names_end_in(record: type) -> None:
    for field, _, unit, _, _ in nomenclature(record):
        name = field.strip("`")
        endings = [ending for ending in UNITS if name.endswith(ending)]
        if endings:
            assert unit == UNITS[max(endings, key=len)], name


def test_nomenclature_names_no_record_that_is_gone() -> None:
    headings = re.findall(r"^### (\w+)$", page("nomenclature.md"), re.MULTILINE)
    assert sorted(headings) == sorted(record.__name__ for record in public_records())


# Sources


def known_keys() -> dict[str, list[str]]:
    return {row[0].strip("`[]"): row for row in table_rows(page("sources.md")) if row[0].startswith("`[")}


def docstrings(name: str) -> Iterator[str]:
    module = importlib.import_module(name)
    yield module.__doc__ or ""
    for item in vars(module).values():
        if getattr(item, "__module__", None) == name and (inspect.isclass(item) or callable(item)):
            yield inspect.getdoc(item) or ""


def cited_keys(name: str) -> set[str]:
    """Keys in References sections of docstrings, and keys with a number in any other prose."""
    cited = set()
    for text in docstrings(name):
        for section in re.findall(r"References\n-+\n(.*?)(?=\n\n\S|\Z)", text, re.DOTALL):
            cited |= set(re.findall(r"\[([^\[\]]+)\]", section))
    path = importlib.import_module(name).__file__
    assert path is not None
    with tokenize.open(path) as source:
        for token in tokenize.generate_tokens(source.readline):
            if token.type == tokenize.COMMENT or token.string.startswith('"""'):
                cited |= set(re.findall(r"\[([A-Z][A-Za-z&. -]*\d[\w.-]*)\]", token.string))
    return cited


@pytest.mark.parametrize("name", MODULES)
def test_every_key_in_the_code_is_on_the_sources_page(name: str) -> None:
    assert cited_keys(name) <= known_keys().keys()


@pytest.mark.parametrize("path", sorted(DOCS.rglob("*.md")), ids=lambda path: str(path.relative_to(DOCS)))
def test_every_key_in_the_documents_is_on_the_sources_page(path: Path) -> None:
    text = re.sub(r"```.*?```|`[^`\n]*`", "", path.read_text(encoding="utf-8"), flags=re.DOTALL)
    prose = "\n\n".join(paragraph for paragraph in text.split("\n\n") if ">>> " not in paragraph)
    cited = set(re.findall(r"(?<!\!)\[([A-Z][^\[\]]*)\](?!\()", prose))
    assert cited <= known_keys().keys()


def test_sources_say_what_was_used_and_whether_it_was_seen() -> None:
    for key, row in known_keys().items():
        assert len(row) == 5, key
        assert all(row), f"{key} has an empty cell"
        assert any(word in row[4] for word in ("seen", "computed", "memory")), f"{key}: {row[4]}"


def test_every_packaged_table_is_on_the_sources_page() -> None:
    listed = {row[0].strip("`"): row[1] for row in table_rows(page("sources.md")) if ".csv" in row[0]}
    tables = {path.relative_to(PACKAGE).as_posix() for path in PACKAGE.rglob("*.csv")}
    # A starter site is an example, not a table.
    assert {table for table in tables if "starter" not in table} == set(listed)
    for table, sources in listed.items():
        keys = set(re.findall(r"\[([^\[\]]+)\]", sources))
        assert keys <= known_keys().keys(), table
        assert keys or "own" in sources or "practice" in sources, table


# Methods

STAGES = sorted(path.parent.name for path in PACKAGE.glob("*/__init__.py"))


@pytest.mark.parametrize("stage", STAGES)
def test_every_stage_has_its_page(stage: str) -> None:
    assert (DOCS / PAGE_OF_STAGE.get(stage, f"methods/{stage}.md")).is_file()


@pytest.mark.parametrize("path", sorted(DOCS.glob("methods/*.md")), ids=lambda path: path.stem)
def test_method_pages_answer_the_same_questions_and_show_an_example(path: Path) -> None:
    text = path.read_text(encoding="utf-8")
    assert re.findall(r"^## (.*)$", text, re.MULTILINE) == METHOD_HEADINGS
    example = text.partition("## Worked example")[2].partition("\n## ")[0]
    assert ">>> " in example


# Criteria


def test_criteria_page_holds_the_tables_of_the_package() -> None:
    with_tables: Callable[[str], str] = runpy.run_path(str(BUILDERS / "build_criteria_page.py"))[
        "with_tables"
    ]
    assert page("criteria.md") == with_tables(page("criteria.md")), (
        "run tests/builders/build_criteria_page.py"
    )


# Accuracy


def test_accuracy_page_holds_what_its_builder_computes() -> None:
    with_tables: Callable[[str], str] = runpy.run_path(str(BUILDERS / "build_accuracy_table.py"))[
        "with_tables"
    ]
    assert page("accuracy.md") == with_tables(page("accuracy.md")), (
        "run tests/builders/build_accuracy_table.py"
    )


# Links


@pytest.mark.parametrize(
    "path",
    [*sorted(DOCS.rglob("*.md")), PROJECT / "README.md", PROJECT / "DEVELOPERS.md"],
    ids=lambda path: str(path.relative_to(PROJECT)),
)
def test_links_lead_somewhere(path: Path) -> None:
    for target in re.findall(r"\]\(([^)#\s]+)[^)]*\)", path.read_text(encoding="utf-8")):
        if not target.startswith(("http:", "https:", "mailto:")):
            assert (path.parent / target).exists(), target
