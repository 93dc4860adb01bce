"""The antenna that a site file names."""

from pathlib import Path

from siteassess.antenna.builtin import builtin_pattern, builtin_patterns
from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.pattern_file import read_pattern_file
from siteassess.errors import InputError, Mistake
from siteassess.site_file.model import Site
from siteassess.wording import did_you_mean, listed

__all__ = ["named_pattern", "read_pattern"]


def read_pattern(site: Site) -> GainPattern:
    """Gain pattern of a site's antenna: a built-in one, or a file beside the site file.

    Raises
    ------
    InputError
        If the pattern file is wrong; it holds all the mistakes.
    """
    if site.antenna.is_file:
        return read_pattern_file(site.path.parent / site.antenna.pattern)
    return builtin_pattern(site.antenna.pattern)


def named_pattern(name: str) -> GainPattern:
    """Gain pattern by what a user typed: the name of a built-in one, or the path of a file in .csv.

    Raises
    ------
    InputError
        If there is no such pattern, or the file is wrong.
    """
    if name.lower().endswith(".csv"):
        return read_pattern_file(Path(name))
    known = builtin_patterns()
    if name in known:
        return builtin_pattern(name)
    allowed = did_you_mean(name, known, f"built in are {listed(known)}; a file ends in .csv")
    raise InputError(
        Mistake(
            file=name or '""',
            where="",
            problem="there is no such antenna pattern",
            allowed=allowed,
            value=name,
        )
    )
