"""From a site file on disk to a checked `Site`."""

import os
import re
import tomllib
from collections.abc import Mapping
from datetime import UTC
from pathlib import Path
from typing import Any

from pydantic import ValidationError

from siteassess.errors import InputError, Mistake
from siteassess.site_file.checks.bearings import bearing_mistakes
from siteassess.site_file.checks.cross import Sections, cross_mistakes, signals_of, systems_of
from siteassess.site_file.criteria_sets import with_criteria_set
from siteassess.site_file.legible import legible_site
from siteassess.site_file.model import Place, Position, Site, SkyModel
from siteassess.site_file.position import survey_mark
from siteassess.site_file.refusals import PATH_HINT, refusals
from siteassess.tables import read_user_text

__all__ = ["RefusedSiteError", "read_site"]

TOML_PLACE = re.compile(r"^(.*) \(at (?:line (\d+), column (\d+)|end of document)\)$", re.DOTALL)
# A backslash in a basic string ("..."), the only place where TOML gives it a meaning.
BACKSLASH = re.compile(r'"[^"\n]*\\')


class RefusedSiteError(InputError):
    """A site file with mistakes.

    Attributes
    ----------
    legible : Site
        Only `mount`, `antenna`, `horizon` and `path`, enough to read the files that the site names, so that
        their mistakes can be told in the same breath.
    """

    def __init__(self, *mistakes: Mistake, legible: Site) -> None:
        super().__init__(*mistakes)
        self.legible = legible


def read_site(path: str | os.PathLike[str]) -> Site:
    """A site file, checked as a whole; no other file of the user is opened.

    Parameters
    ----------
    path : str or path
        The site file, or a folder that holds `site.toml`.

    Returns
    -------
    Site
        With `position` in WGS 84, times in UTC, and the default signals that belong to the chosen systems.

    Raises
    ------
    InputError
        With every mistake of the file: a `RefusedSiteError` when it is TOML.
    """
    path = Path(path)
    if path.is_dir():
        path = path / "site.toml"
    file = path.name
    raw, asked_by = with_criteria_set(_parsed(read_user_text(path), file))
    site, mistakes = _validated(raw, file)
    sections = Sections.of(raw) if site is None else Sections.of_site(site)
    position, place_mistakes = _surveyed(sections.place, file)
    mistakes += place_mistakes
    mistakes += cross_mistakes(sections, file)
    mistakes += bearing_mistakes(sections.horizon, sections.place, position, file)
    if mistakes or site is None or position is None:
        raise RefusedSiteError(*mistakes, legible=legible_site(raw, path))
    site = site.model_copy(update={"sky": _completed(site.sky)})
    site._path, site._position, site.require._asked_by = path, position, asked_by
    return site


def _validated(raw: Mapping[str, Any], file: str) -> tuple[Site | None, list[Mistake]]:
    try:
        return Site.model_validate(raw), []
    except ValidationError as error:
        return None, list(refusals(error, file))


def _surveyed(place: Place | None, file: str) -> tuple[Position | None, list[Mistake]]:
    try:
        return (survey_mark(place, file) if place is not None else None), []
    except InputError as error:
        return None, list(error.mistakes)


def _completed(sky: SkyModel) -> SkyModel:
    """The sky with what follows from its own keys: signals from systems or systems from signals, and UTC."""
    start = sky.start if sky.start.tzinfo is None else sky.start.astimezone(UTC).replace(tzinfo=None)
    return sky.model_copy(update={"systems": systems_of(sky), "signals": signals_of(sky), "start": start})


def _parsed(text: str, file: str) -> dict[str, Any]:
    try:
        return {key: _frozen(value) for key, value in tomllib.loads(text).items()}
    except RecursionError as error:
        raise InputError(Mistake(file=file, where="", problem="is nested too deeply", allowed="")) from error
    except tomllib.TOMLDecodeError as error:
        raise InputError(_toml_mistake(str(error), text, file)) from error
    except ValueError as error:  # from the conversion of a number of thousands of digits
        mistake = Mistake(file=file, where="", problem="holds a number of too many digits", allowed="")
        raise InputError(mistake) from error


def _frozen(value: Any) -> Any:
    """Lists as tuples, which the records ask for."""
    if isinstance(value, list):
        return tuple(_frozen(item) for item in value)
    return {key: _frozen(item) for key, item in value.items()} if isinstance(value, dict) else value


def _toml_mistake(message: str, text: str, file: str) -> Mistake:
    found = TOML_PLACE.match(message)
    reason, line, column = found.groups() if found else (message, None, None)
    if line is not None and BACKSLASH.search(text.split("\n")[int(line) - 1]):
        problem = "holds a backslash that TOML cannot read"
        return Mistake(file=file, where=f"line {line}", problem=problem, allowed=PATH_HINT)
    where = f"line {line}, column {column}" if line else "the end of the file" if found else ""
    words = " ".join(reason[:200].split())
    return Mistake(file=file, where=where, problem="is not TOML", allowed=words[:1].lower() + words[1:])
