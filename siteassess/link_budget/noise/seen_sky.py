"""What the antenna sees in every piece of the sky: open sky, leaves or something solid."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.constants import REFERENCE_TEMPERATURE_K
from siteassess.decibels import to_ratio
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.view import (
    depth_m,
    edge_elevation_deg,
    outline_elevation_deg,
    underside_elevation_deg,
)
from siteassess.link_budget.noise.brightness import sky_brightness_k
from siteassess.link_budget.obstacles.foliage import leaves_loss_db

__all__ = [
    "RING_DEG",
    "RING_EDGES_DEG",
    "RING_SHARE",
    "SECTOR_DEG",
    "SeenSky",
    "seen_brightness_k",
    "seen_sky",
]

FloatArray = NDArray[np.float64]

# Rings of sky between these elevations: finer near the horizon, where the air's brightness rises fast.
RING_EDGES_DEG = np.concatenate([np.arange(0.0, 5.0, 0.25), np.arange(5.0, 91.0)])
RING_DEG = (RING_EDGES_DEG[:-1] + RING_EDGES_DEG[1:]) / 2.0
RING_SHARE = np.diff(np.sin(np.deg2rad(RING_EDGES_DEG))) / 2.0  # of the whole sphere
SECTORS = 180
SECTOR_DEG = (np.arange(SECTORS) + 0.5) * (360.0 / SECTORS)
POINTS = 4  # of an edge, in each sector
POINT_DEG = np.asarray((np.arange(SECTORS * POINTS) + 0.5) * (360.0 / (SECTORS * POINTS)), dtype=np.float64)


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SeenSky:
    """Shares of each piece of sky above the horizon, adding up to 1; arrays of shape (ring, sector).

    Attributes
    ----------
    open_share : array
        Where the open sky is seen, the share that leaves let through included.
    leaves_share : array
        What leaves hold back.
    solid_share : array
        What solid obstacles hide.
    """

    open_share: FloatArray
    leaves_share: FloatArray
    solid_share: FloatArray


def seen_sky(skyline: Skyline, carrier_hz: float) -> SeenSky:
    """What the antenna sees, ring by ring and sector by sector.

    Leaves let through what their loss leaves, each obstacle of what those before it do. Obstacles that hang
    free hide the sky between their edges.

    Parameters
    ----------
    skyline : Skyline
        What stands round the antenna.
    carrier_hz : float
        Carrier [Hz]; leaves lose more at higher ones.

    References
    ----------
    [P.833] ITU-R P.833-10, 2.2.
    """
    below_deg = np.full(POINT_DEG.size, -90.0)
    clear = 1.0 - _covered(below_deg, outline_elevation_deg(skyline, POINT_DEG))
    through = np.ones_like(clear)
    for obstacle in skyline.obstacles:
        if obstacle.cover == "solid" and not obstacle.hangs_free:
            continue  # part of the outline
        top_deg = edge_elevation_deg(obstacle, POINT_DEG)
        at = np.flatnonzero(np.nan_to_num(top_deg, nan=-90.0) > 0.0)
        covered = _covered(underside_elevation_deg(obstacle, POINT_DEG[at]), top_deg[at])
        if obstacle.cover == "solid":
            clear[:, at] *= 1.0 - covered
        else:
            held_back = 1.0 - _transmitted(obstacle, POINT_DEG[at], carrier_hz)
            through[:, at] *= 1.0 - covered * held_back
    open_share, clear_share = _by_sector(clear * through), _by_sector(clear)
    return SeenSky(
        open_share=open_share, leaves_share=clear_share - open_share, solid_share=1.0 - clear_share
    )


def seen_brightness_k(seen: SeenSky, carrier_hz: float) -> FloatArray:
    """Brightness temperature [K] of each piece of sky, obstacles at 290 K, shape (ring, sector)."""
    sky_k = sky_brightness_k(carrier_hz, RING_DEG)[:, np.newaxis]
    return np.asarray(REFERENCE_TEMPERATURE_K - seen.open_share * (REFERENCE_TEMPERATURE_K - sky_k))


def _covered(lower_deg: FloatArray, upper_deg: FloatArray) -> FloatArray:
    """Share of each ring between two edges, shape (ring, point)."""
    rings = np.sin(np.deg2rad(RING_EDGES_DEG))[:, np.newaxis]
    lower, upper = np.sin(np.deg2rad(lower_deg)), np.sin(np.deg2rad(upper_deg))
    between = np.minimum(upper, rings[1:]) - np.maximum(lower, rings[:-1])
    return np.asarray(np.clip(between / np.diff(rings, axis=0), 0.0, 1.0))


def _transmitted(obstacle: Obstacle, azimuth_deg: FloatArray, carrier_hz: float) -> FloatArray:
    through_m = depth_m(obstacle, azimuth_deg)
    loss_db = leaves_loss_db(
        obstacle.foliage_model, obstacle.leaf, through_m, carrier_hz, RING_DEG[:, np.newaxis]
    )
    transmitted: FloatArray = to_ratio(-loss_db)
    return transmitted


def _by_sector(share: FloatArray) -> FloatArray:
    return np.asarray(share.reshape(RING_DEG.size, SECTORS, POINTS).mean(axis=2))
