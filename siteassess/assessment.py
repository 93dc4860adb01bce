"""The whole flow, from a site to its verdict: the map of the package."""

from dataclasses import dataclass, replace
from os import PathLike
from typing import TYPE_CHECKING

from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.read import read_pattern
from siteassess.errors import InputError, gather
from siteassess.horizon.read import read_skyline
from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.assemble import link_budget
from siteassess.link_budget.budget import LinkBudget
from siteassess.link_budget.chain.read import read_chain, read_kinds
from siteassess.orbits.constellations import nominal_orbits
from siteassess.site_file.model import Part, Site
from siteassess.site_file.read import RefusedSiteError, read_site
from siteassess.sky_tracks.tracks import SkyTracks, sky_tracks
from siteassess.verdict.judge import judge
from siteassess.verdict.verdict import Verdict

if TYPE_CHECKING:
    from siteassess.verdict.cures.explanation import Explanation
    from siteassess.verdict.cures.what_if import Change
    from siteassess.verdict.uncertainty.how_sure import Uncertainty

__all__ = ["Assessment", "assess", "assess_file", "explained"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Assessment:
    """A site and everything that was found about it, stage by stage.

    Attributes
    ----------
    site : Site
        What the user wrote, its chain with what the parts table gives.
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
    what_if : tuple of Change
        What another cable, preamplifier or antenna would change, from :func:`explained`.
    explanation : Explanation or None
        Causes and cures, from :func:`explained`.
    uncertainty : Uncertainty or None
        How sure the verdict is, from :func:`explained`.
    """

    site: Site
    skyline: Skyline
    pattern: GainPattern
    tracks: SkyTracks
    budget: LinkBudget
    verdict: Verdict
    what_if: "tuple[Change, ...]" = ()
    explanation: "Explanation | None" = None
    uncertainty: "Uncertainty | None" = None


def assess(site: Site) -> Assessment:
    """Assess a site: from its skyline and antenna, through the sky above it, to a verdict.

    Parameters
    ----------
    site : Site
        From :func:`siteassess.read_site`.

    Returns
    -------
    Assessment
        Every stage's result; `verdict` holds the answer.

    Raises
    ------
    InputError
        If a file that the site names is wrong; it holds the mistakes of all of them.
    """
    skyline, pattern, chain = _read_inputs(site)
    site = site.model_copy(update={"chain": chain})
    orbits = nominal_orbits(site.sky.systems, site.sky.start)
    tracks = sky_tracks(orbits, site.position, days=site.sky.days, step_s=site.sky.step_s)
    budget = link_budget(site, skyline, pattern, tracks)
    return Assessment(
        site=site,
        skyline=skyline,
        pattern=pattern,
        tracks=tracks,
        budget=budget,
        verdict=_judged(site, skyline, pattern, tracks, budget),
    )


def explained(assessment: Assessment) -> Assessment:
    """The same assessment with causes, cures, and how sure the verdict is.

    What each obstacle returns by going stands in `verdict.obstacles`, all else in `explanation` and
    `uncertainty`. Where a taller mast turns a fail into a pass, finding its height takes some more whole
    assessments.

    Parameters
    ----------
    assessment : Assessment
        What :func:`assess` returned.
    """
    # Loaded here, because most runs ask for the verdict alone.
    from siteassess.verdict.cures.explanation import explanation
    from siteassess.verdict.cures.heights import at_height
    from siteassess.verdict.cures.what_if import what_if
    from siteassess.verdict.uncertainty.how_sure import uncertainty

    site, pattern, tracks = assessment.site, assessment.pattern, assessment.tracks

    def assessed_at(mast_height_m: float) -> Verdict:
        taller = at_height(site, mast_height_m)
        skyline = read_skyline(taller)
        budget = link_budget(taller, skyline, pattern, tracks)
        return _judged(taller, skyline, pattern, tracks, budget)

    verdict, found = explanation(
        site, assessment.skyline, pattern, tracks, assessment.budget, assessment.verdict, assessed_at
    )
    sure = uncertainty(site, assessment.skyline, tracks, assessment.budget, verdict)
    changes = what_if(site, assessment.skyline, pattern, tracks, assessment.budget)
    return replace(assessment, verdict=verdict, what_if=changes, explanation=found, uncertainty=sure)


def _judged(
    site: Site, skyline: Skyline, pattern: GainPattern, tracks: SkyTracks, budget: LinkBudget
) -> Verdict:
    later, years = None, site.require.good_for_years
    if years is not None:
        later = link_budget(site, read_skyline(site, years=years), pattern, tracks)
    return judge(site, skyline, tracks, budget, later)


def assess_file(path: str | PathLike[str]) -> Assessment:
    """Read a site file and assess the site; the mistakes of all its files are told together.

    Parameters
    ----------
    path : str or path
        The site file, or a folder that holds `site.toml`.

    Raises
    ------
    InputError
        With the mistakes of the site file and of the files it names.
    """
    try:
        site = read_site(path)
    except RefusedSiteError as refused:
        try:
            legible = refused.legible
            gather(lambda: read_skyline(legible), lambda: read_pattern(legible), lambda: read_kinds(legible))
        except InputError as others:
            raise InputError(*refused.mistakes, *others.mistakes) from refused
        raise
    return assess(site)


def _read_inputs(site: Site) -> tuple[Skyline, GainPattern, tuple[Part, ...]]:
    skyline, pattern, chain = gather(
        lambda: read_skyline(site), lambda: read_pattern(site), lambda: read_chain(site)
    )
    return skyline, pattern, chain
