"""Assess an installation site for a fixed GNSS reference-station antenna.

A site file goes in, a verdict and a report come out; the folders stand in the order in which the data flows::

    site_file -> horizon -+
              -> antenna -+-> link_budget -> verdict -> report
              -> orbits -> sky_tracks -+

``siteassess.assessment`` calls the stages in that order and is the map of the package.

Examples
--------
>>> from siteassess import assess, read_site
>>> assessment = assess(read_site("example_sites/harbour/quay_office"))
>>> assessment.verdict.outcome
'pass'
"""

from typing import TYPE_CHECKING, Any

from siteassess.errors import SiteAssessError

if TYPE_CHECKING:
    from siteassess.assessment import Assessment, assess
    from siteassess.site_file.model import Site
    from siteassess.site_file.read import read_site

__all__ = ["Assessment", "Site", "SiteAssessError", "__version__", "assess", "read_site"]

# Imported on first use, so that `siteassess --help` need not wait for NumPy and pydantic.
_HOMES = {
    "Assessment": "siteassess.assessment",
    "assess": "siteassess.assessment",
    "Site": "siteassess.site_file.model",
    "read_site": "siteassess.site_file.read",
}


def __getattr__(name: str) -> Any:
    from importlib import import_module

    if name == "__version__":
        from importlib.metadata import version

        return version("siteassess")
    if name in _HOMES:
        return getattr(import_module(_HOMES[name]), name)
    raise AttributeError(f"module 'siteassess' has no attribute {name!r}")


def __dir__() -> list[str]:
    return sorted(__all__)
