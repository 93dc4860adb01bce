"""Thin things: rods, poles, masts and cables, which a wave passes on both sides."""

import numpy as np
from numpy.typing import NDArray

from siteassess.angles import wrap_azimuth_deg
from siteassess.constants import SPEED_OF_LIGHT_M_PER_S
from siteassess.horizon.skyline import Obstacle
from siteassess.horizon.view import covers, edge_distance_m, edge_elevation_deg, underside_elevation_deg
from siteassess.link_budget.obstacles.diffraction import fresnel_parameter, strip_loss_db
from siteassess.link_budget.obstacles.edges import (
    highest_within_reach_deg,
    lower_edges,
    smallest_detour_m,
    upper_edges,
)
from siteassess.link_budget.obstacles.way_in import is_narrow

__all__ = ["grazes", "is_thin", "loss_behind_db"]

FloatArray = NDArray[np.float64]
BoolArray = NDArray[np.bool_]


def is_thin(obstacle: Obstacle, carrier_hz: float) -> bool:
    """Whether an obstacle is a pole or hangs free, and is narrower than the first Fresnel zone."""
    is_thing = obstacle.cover == "solid" and (obstacle.width_m is not None or obstacle.hangs_free)
    return is_thing and is_narrow(obstacle, SPEED_OF_LIGHT_M_PER_S / carrier_hz)


def loss_behind_db(obstacle: Obstacle, carrier_hz: float) -> float:
    """Loss [dB] straight behind a thin thing, by diffraction at both its edges.

    Behind a pole at the height of the antenna, far below its top; behind what hangs free in its middle.

    Parameters
    ----------
    obstacle : Obstacle
        For which :func:`is_thin` holds.
    carrier_hz : float
        Carrier [Hz].

    References
    ----------
    [P.526] ITU-R P.526, 5.1.
    """
    wavelength_m = SPEED_OF_LIGHT_M_PER_S / carrier_hz
    first_deg, last_deg = obstacle.azimuth_deg[0], obstacle.azimuth_deg[-1]
    middle_deg, half_deg = 0.5 * (first_deg + last_deg), 0.5 * (last_deg - first_deg)
    top_deg = float(edge_elevation_deg(obstacle, middle_deg))
    slant_m = float(edge_distance_m(obstacle, middle_deg))
    if not obstacle.hangs_free:
        side = fresnel_parameter(half_deg, slant_m * np.cos(np.deg2rad(top_deg)), wavelength_m)
        return float(strip_loss_db(-side, side, np.inf))
    lower_deg = float(underside_elevation_deg(obstacle, middle_deg))
    narrowing = np.cos(np.deg2rad(0.5 * (top_deg + lower_deg)))
    side = fresnel_parameter(half_deg * narrowing, slant_m, wavelength_m)
    upward = fresnel_parameter(0.5 * (top_deg - lower_deg), slant_m, wavelength_m)
    return float(strip_loss_db(-side, side, upward, -upward))


def grazes(
    obstacle: Obstacle, azimuth_deg: FloatArray, elevation_deg: FloatArray, carrier_hz: float
) -> BoolArray:
    """Whether a thing stands within the first Fresnel zone of lines of sight, or in them.

    Parameters
    ----------
    obstacle : Obstacle
        Of known distance.
    azimuth_deg, elevation_deg : array, shape (n,)
        Directions as seen through the air [deg].
    carrier_hz : float
        Carrier [Hz].

    Returns
    -------
    boolean array, shape (n,)
        True where the detour over the nearest edge is at most half a wavelength.

    References
    ----------
    [P.526] ITU-R P.526, 2: the first Fresnel ellipsoid.
    """
    zone_m = SPEED_OF_LIGHT_M_PER_S / carrier_hz / 2.0
    found = np.zeros(azimuth_deg.shape, dtype=np.bool_)
    edges = upper_edges(obstacle)
    reach_deg = highest_within_reach_deg(edges, zone_m)
    low = np.flatnonzero(elevation_deg < np.max(reach_deg))
    near = low[elevation_deg[low] < reach_deg[wrap_azimuth_deg(azimuth_deg[low]).astype(np.int64)]]
    azimuth_deg, elevation_deg = azimuth_deg[near], elevation_deg[near]
    detour_m = smallest_detour_m(edges, azimuth_deg, elevation_deg, zone_m)
    if obstacle.hangs_free:
        below_m = smallest_detour_m(lower_edges(obstacle), azimuth_deg, elevation_deg, zone_m)
        detour_m = np.minimum(detour_m, below_m)
    found[near] = (detour_m <= zone_m) | covers(obstacle, azimuth_deg, elevation_deg)
    return found
