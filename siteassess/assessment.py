"""The whole flow, from a site to its verdict: the map of the package."""

from dataclasses import dataclass

from siteassess.antenna.pattern import GainPattern
from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.budget import LinkBudget
from siteassess.site_file.model import Site
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.verdict import Verdict

__all__ = ["Assessment"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Assessment:
    """A site and everything that was found about it, stage by stage.

    Attributes
    ----------
    site : Site
        What the user wrote.
    skyline : Skyline
        What hides the sky.
    pattern : GainPattern
        What the antenna does with direction.
    tracks : SkyTracks
        Where the satellites stand.
    budget : LinkBudget
        How strong what arrives is.
    verdict : Verdict
        Whether it is good enough.
    """

    site: Site
    skyline: Skyline
    pattern: GainPattern
    tracks: SkyTracks
    budget: LinkBudget
    verdict: Verdict
