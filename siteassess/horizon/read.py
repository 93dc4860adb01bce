"""The skyline of a site, from all the files that its site file names."""

from dataclasses import replace
from functools import partial

import numpy as np

from siteassess.errors import gather
from siteassess.horizon.bearings import north_turn
from siteassess.horizon.looked_at import gaps_between
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.outlines import Outlines, read_outlines
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.survey import Survey, read_survey
from siteassess.horizon.terrain import Terrain, read_terrain
from siteassess.site_file.model import Site

__all__ = ["read_skyline"]


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
    )


def _source(site: Site, index: int, years: float) -> Survey | Outlines | Terrain:
    source = site.horizon[index]
    if source.source == "terrain":
        return read_terrain(site, source)
    path = site.path.parent / source.files[0]
    if source.source == "outlines":
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
