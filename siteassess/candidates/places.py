"""Which sites are meant: each once, with a short name that does not depend on where the command runs."""

import os
from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass
from pathlib import Path

__all__ = ["SitePlace", "distinct_sites"]

SITE_FILE = "site.toml"


@dataclass(frozen=True, slots=True, kw_only=True)
class SitePlace:
    """A site that the user named.

    Attributes
    ----------
    given : str
        As the user gave it.
    place : str
        The same as seen from the folder that all sites have in common.
    repeated : bool
        Whether it was given more than once.
    """

    given: str
    place: str
    repeated: bool


def distinct_sites(paths: Iterable[str | os.PathLike[str]]) -> tuple[SitePlace, ...]:
    """The sites named, each once, in an order that does not depend on theirs.

    A folder and the `site.toml` in it are the same site. A link to a site file is a site of its own, because
    the files that it names are looked for beside the link.

    Parameters
    ----------
    paths : iterable of str or path
        Site files, or folders that hold `site.toml`.
    """
    given = sorted(os.fspath(path) for path in paths)
    files = [_site_file(path) for path in given]
    times = Counter(files)
    first_given = dict(zip(reversed(files), reversed(given), strict=True))
    targets = {file: _target(file) for file in times}
    common = _common_folder(list(targets.values()))
    sites = [
        SitePlace(given=first_given[file], place=_as_seen_from(common, targets[file]), repeated=count > 1)
        for file, count in times.items()
    ]
    return tuple(sorted(sites, key=lambda site: (site.place, site.given)))


def _site_file(given: str) -> Path:
    path = Path(given)
    file = path / SITE_FILE if path.is_dir() else path
    return Path(os.path.realpath(file.parent)) / file.name


def _target(file: Path) -> Path:
    """What stands for the site: its folder where the file has the usual name."""
    return file.parent if file.name == SITE_FILE else file


def _common_folder(targets: list[Path]) -> Path | None:
    try:
        return Path(os.path.commonpath([target.parent for target in targets]))
    except ValueError:  # none, or on several drives
        return None


def _as_seen_from(folder: Path | None, target: Path) -> str:
    seen = target.relative_to(folder) if folder is not None else target
    # Names of files are bytes, and need not be text.
    return os.fsencode(seen.as_posix()).decode("utf-8", "replace") or "."
