"""The skyline of a site, from all the files that its site file names."""

from dataclasses import replace
from functools import partial

import numpy as np

from siteassess.errors import gather
from siteassess.horizon.bearings import north_turn
from siteassess.horizon.curves import FloatArray
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.outlines import Outlines, read_outlines
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.survey import Survey, read_survey
from siteassess.horizon.terrain import Terrain, read_terrain
from siteassess.site_file.model import Site

__all__ = ["read_skyline"]

NARROWEST_GAP_DEG = 1e-9  # narrower ones are rounding


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
        unsurveyed_deg=_gaps(
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


def _gaps(surveyed_deg: FloatArray) -> FloatArray:
    """Azimuth ranges that no stretch covers, shape (gap, 2)."""
    from_deg = surveyed_deg[:, 0] - 360.0 * np.floor(surveyed_deg[:, 0] / 360.0)
    to_deg = from_deg + (surveyed_deg[:, 1] - surveyed_deg[:, 0])
    from_deg, to_deg = np.append(from_deg, from_deg - 360.0), np.append(to_deg, to_deg - 360.0)
    order = np.argsort(from_deg, kind="stable")
    reached_deg = np.maximum.accumulate(np.append(0.0, to_deg[order]))
    start_deg = np.clip(reached_deg, 0.0, 360.0)
    end_deg = np.clip(np.append(from_deg[order], 360.0), 0.0, 360.0)
    is_gap = end_deg > start_deg + NARROWEST_GAP_DEG
    return np.stack([start_deg[is_gap], end_deg[is_gap]], axis=1)
