"""The skyline of a site, from all the files that its site file names."""

from dataclasses import replace
from functools import partial
from math import hypot
from os import PathLike
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np

from siteassess.errors import InputError, gather
from siteassess.horizon.disagreement import SURVEY_ERRORS_DEG, Source, disagreements
from siteassess.horizon.looked_at import gaps_between
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.survey.bearings import north_turn
from siteassess.horizon.survey.read import Survey, read_survey
from siteassess.site_file.model import HorizonSource, Site
from siteassess.site_file.read import RefusedSiteError, read_site
from siteassess.tables import packaged_rows
from siteassess.wording import listed

if TYPE_CHECKING:
    from siteassess.horizon.buildings.read import Outlines
    from siteassess.horizon.terrain.read import Terrain

__all__ = ["read_site_skyline", "read_skyline"]


def read_skyline(site: Site, *, years: float = 0.0) -> Skyline:
    """Everything that the site's horizon files put between the antenna and the sky.

    Parameters
    ----------
    site : Site
        Its files lie beside the site file. Without any, the whole sky is unsurveyed.
    years : float
        Time after the surveys for which trees are grown.

    Raises
    ------
    InputError
        With the mistakes of all the files.
    """
    surveys = gather(*(partial(_source, site, index, years) for index in range(len(site.horizon))))
    obstacles = tuple(
        replace(obstacle, foliage_model=site.foliage.model) if obstacle.cover == "foliage" else obstacle
        for survey in surveys
        for obstacle in survey.obstacles
    )
    return Skyline(
        obstacles=obstacles,
        outline=upper_envelope(obstacles),
        unsurveyed_deg=gaps_between(
            np.concatenate([np.empty((0, 2)), *(survey.surveyed_deg for survey in surveys)])
        ),
        surveys=tuple(survey.facts for survey in surveys if isinstance(survey, Survey)),
        remarks=tuple(remark for one in surveys if not isinstance(one, Survey) for remark in one.remarks),
        disagreements=disagreements(list(map(_held_against_others, site.horizon, surveys))),
    )


def read_site_skyline(path: str | PathLike[str]) -> tuple[Site, Skyline]:
    """A site file and its skyline; the mistakes of all the files are told together.

    Parameters
    ----------
    path : str or path
        The site file, or a folder that holds `site.toml`.

    Raises
    ------
    InputError
        With the mistakes of the site file and of its horizon files.
    """
    try:
        site = read_site(path)
    except RefusedSiteError as refused:
        try:
            read_skyline(refused.legible)
        except InputError as others:
            raise InputError(*refused.mistakes, *others.mistakes) from refused
        raise
    return site, read_skyline(site)


def _held_against_others(block: HorizonSource, found: "Survey | Outlines | Terrain") -> Source:
    azimuth_error_deg, elevation_error_deg = (
        _stated(block, key) for key in ("azimuth_error_deg", "elevation_error_deg")
    )
    if isinstance(found, Survey) and found.facts.uncertainty_deg:
        stated_deg = SURVEY_ERRORS_DEG[0] if azimuth_error_deg is None else azimuth_error_deg
        azimuth_error_deg = hypot(stated_deg, found.facts.uncertainty_deg)
    return Source(
        kind=block.source,
        file=listed(Path(file.replace("\\", "/")).name for file in block.files),
        obstacles=found.obstacles,
        surveyed_deg=found.surveyed_deg,
        complete=block.complete,
        azimuth_error_deg=azimuth_error_deg,
        elevation_error_deg=elevation_error_deg,
    )


def _stated(block: HorizonSource, key: str) -> float | None:
    """An error of a survey: its own, or else that of its instrument's class."""
    own: float | None = getattr(block, key)
    if own is not None or block.instrument is None:
        return own
    classes = {row["instrument"]: row for row in packaged_rows("verdict/uncertainty/instrument_classes.csv")}
    return float(classes[block.instrument][key])


def _source(site: Site, index: int, years: float) -> "Survey | Outlines | Terrain":
    source = site.horizon[index]
    if source.source == "terrain":
        from siteassess.horizon.terrain.read import read_terrain

        return read_terrain(site, source)
    path = site.path.parent / source.files[0]
    if source.source == "outlines":
        from siteassess.horizon.buildings.read import read_outlines

        return read_outlines(
            path,
            source,
            site.mount,
            site.position,
            years=years,
            growth_m_per_year=site.foliage.growth_m_per_year,
        )
    return read_survey(
        path,
        source,
        site.mount,
        turn=north_turn(site, index),
        years=years,
        growth_m_per_year=site.foliage.growth_m_per_year,
    )
