"""The antenna that a site file names."""

from siteassess.antenna.builtin import builtin_pattern
from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.pattern_file import read_pattern_file
from siteassess.site_file.model import Site

__all__ = ["read_pattern"]


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
