"""What the obstacles of a skyline cost a signal on its way in."""

import numpy as np
from numpy.typing import NDArray

from siteassess.angles import wrap_azimuth_deg, wrap_difference_deg
from siteassess.constants import SPEED_OF_LIGHT_M_PER_S
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.view import (
    covers,
    depth_m,
    edge_distance_m,
    edge_elevation_deg,
    underside_elevation_deg,
)
from siteassess.link_budget.obstacles.diffraction import (
    LOSS_FREE_NU,
    fresnel_parameter,
    knife_edge_loss_db,
    strip_loss_db,
)
from siteassess.link_budget.obstacles.edges import (
    Edges,
    highest_within_reach_deg,
    lower_edges,
    smallest_detour_m,
    upper_edges,
)
from siteassess.link_budget.obstacles.foliage import leaves_loss_db

__all__ = ["is_narrow", "is_standing_wall", "obstacle_loss_db", "skyline_loss_db"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]

# The first loss lobe beside a thin strip ends at 1.22, that beside a wide one at 0.78. Like the knife edge
# of P.526, the strip carries none of the fainter lobes beyond, which real edges wash out.
STRIP_REACH_NU = 1.25


def skyline_loss_db(
    skyline: Skyline, azimuth_deg: FloatArray, apparent_elevation_deg: FloatArray, carrier_hz: float
) -> tuple[FloatArray, IndexArray]:
    """Loss by diffraction and leaves toward directions.

    A solid obstacle of known distance acts by its nearest edge, sides and underside included, as a knife
    edge; a narrow one by the difference of its two edges. Without a distance an edge is hard: no loss beside
    it, and none computed behind it, where the line of sight is hidden anyway. Walls that stand on the ground
    are one outline, of which the nearest edge counts; the losses of leaves, narrow and hanging obstacles add.

    Parameters
    ----------
    skyline : Skyline
        What stands round the antenna.
    azimuth_deg, apparent_elevation_deg : array, shape (n,)
        Directions of satellites, as seen through the air [deg].
    carrier_hz : float
        Carrier [Hz].

    Returns
    -------
    loss_db : array, shape (n,)
        At least 0; defined behind edges too.
    costly_obstacle : integer array, shape (n,)
        Index in `Skyline.obstacles` of the one that costs most; -1 where none costs anything.

    References
    ----------
    [P.526] ITU-R P.526, 4.1 and 5.1. [P.833] ITU-R P.833-10, 2.2.
    """
    added_db, outline_db = np.zeros(azimuth_deg.shape), np.zeros(azimuth_deg.shape)
    largest_db = np.zeros(azimuth_deg.shape)
    costly_obstacle = np.full(azimuth_deg.shape, -1, dtype=np.int64)
    for index, obstacle in enumerate(skyline.obstacles):
        near, near_loss_db = obstacle_loss_db(obstacle, azimuth_deg, apparent_elevation_deg, carrier_hz)
        if is_standing_wall(obstacle, carrier_hz):
            outline_db[near] = np.maximum(outline_db[near], near_loss_db)
        else:
            added_db[near] += near_loss_db
        costs_most = near_loss_db > largest_db[near]
        largest_db[near[costs_most]] = near_loss_db[costs_most]
        costly_obstacle[near[costs_most]] = index
    return added_db + outline_db, costly_obstacle


def obstacle_loss_db(
    obstacle: Obstacle, azimuth_deg: FloatArray, apparent_elevation_deg: FloatArray, carrier_hz: float
) -> tuple[IndexArray, FloatArray]:
    """Loss at one obstacle alone.

    Parameters
    ----------
    obstacle : Obstacle
        Solid or leaves.
    azimuth_deg, apparent_elevation_deg : array, shape (n,)
        Directions of satellites, as seen through the air [deg].
    carrier_hz : float
        Carrier [Hz].

    Returns
    -------
    near : integer array, shape (m,)
        Which of the directions it may cost anything; none other.
    loss_db : array, shape (m,)
        The loss there, at least 0.
    """
    one = _foliage_loss_db if obstacle.cover == "foliage" else _solid_loss_db
    return one(obstacle, azimuth_deg, apparent_elevation_deg, carrier_hz)


def is_narrow(obstacle: Obstacle, wavelength_m: float) -> bool:
    """Whether an obstacle of known distance is narrower than the first Fresnel zone, across or upward.

    Then a wave passes on both sides of it at once.
    """
    if obstacle.distance_m is None or np.isnan(obstacle.distance_m).any():
        return False
    distance_m = float(np.mean(obstacle.distance_m))
    horizontal_m = float(np.mean(obstacle.distance_m * np.cos(np.deg2rad(obstacle.elevation_deg))))
    half_span_rad = np.deg2rad(obstacle.azimuth_deg[-1] - obstacle.azimuth_deg[0]) / 2.0
    across_m = 2.0 * horizontal_m * np.sin(min(half_span_rad, np.pi / 2.0))
    upward_m = np.inf
    if obstacle.underside_deg is not None:
        height_rad = np.deg2rad(np.max(obstacle.elevation_deg - obstacle.underside_deg))
        upward_m = distance_m * height_rad
    return bool(
        min(across_m, upward_m) < 2.0 * np.sqrt(wavelength_m * distance_m)
    )  # [P.526] eq. 2, both radii


def is_standing_wall(obstacle: Obstacle, carrier_hz: float) -> bool:
    """Whether an obstacle is solid, wide and has no open sky below it; such losses do not add."""
    is_wall = obstacle.cover == "solid" and not obstacle.hangs_free
    return is_wall and not is_narrow(obstacle, SPEED_OF_LIGHT_M_PER_S / carrier_hz)


def _foliage_loss_db(
    obstacle: Obstacle, azimuth_deg: FloatArray, elevation_deg: FloatArray, carrier_hz: float
) -> tuple[IndexArray, FloatArray]:
    """Indices of the directions that look through leaves, and the loss there."""
    near = np.flatnonzero(covers(obstacle, azimuth_deg, elevation_deg))
    through_m = depth_m(obstacle, azimuth_deg[near])
    return near, leaves_loss_db(
        obstacle.foliage_model, obstacle.leaf, through_m, carrier_hz, elevation_deg[near]
    )


def _solid_loss_db(
    obstacle: Obstacle, azimuth_deg: FloatArray, elevation_deg: FloatArray, carrier_hz: float
) -> tuple[IndexArray, FloatArray]:
    """Indices of the directions that pass near a solid obstacle, and the loss there."""
    if obstacle.distance_m is None:
        return np.empty(0, dtype=np.int64), np.empty(0)
    wavelength_m = SPEED_OF_LIGHT_M_PER_S / carrier_hz
    narrow = is_narrow(obstacle, wavelength_m)
    reach_nu = STRIP_REACH_NU if narrow else -LOSS_FREE_NU
    edges = upper_edges(obstacle)
    # nu = 2 sqrt(detour / wavelength), [P.526] 4.1
    reach_deg = highest_within_reach_deg(edges, wavelength_m * (reach_nu / 2.0) ** 2)
    low = np.flatnonzero(elevation_deg < np.max(reach_deg))
    degree = wrap_azimuth_deg(azimuth_deg[low]).astype(np.int64)
    near = low[elevation_deg[low] < reach_deg[degree]]
    azimuth_deg, elevation_deg = azimuth_deg[near], elevation_deg[near]
    if narrow:
        return near, _strip_loss_db(obstacle, azimuth_deg, elevation_deg, wavelength_m)
    return near, _edge_loss_db(obstacle, edges, azimuth_deg, elevation_deg, wavelength_m)


def _edge_loss_db(
    obstacle: Obstacle, edges: Edges, azimuth_deg: FloatArray, elevation_deg: FloatArray, wavelength_m: float
) -> FloatArray:
    """Knife-edge loss over the nearest edge of an obstacle."""
    zone_m = wavelength_m / 2.0  # detour over the rim of the first Fresnel zone
    detour_m = smallest_detour_m(edges, azimuth_deg, elevation_deg, zone_m)
    if obstacle.hangs_free:
        below_m = smallest_detour_m(lower_edges(obstacle), azimuth_deg, elevation_deg, zone_m)
        detour_m = np.minimum(detour_m, below_m)
    sign = np.where(covers(obstacle, azimuth_deg, elevation_deg), 1.0, -1.0)
    has_edge = np.isfinite(detour_m)
    nu = 2.0 * sign * np.sqrt(np.where(has_edge, detour_m, 0.0) / wavelength_m)  # [P.526] 4.1
    loss_db: FloatArray = np.where(has_edge, knife_edge_loss_db(nu), 0.0)
    return loss_db


def _strip_loss_db(
    obstacle: Obstacle, azimuth_deg: FloatArray, elevation_deg: FloatArray, wavelength_m: float
) -> FloatArray:
    """Loss behind and beside a narrow obstacle, by the difference of its edges."""
    first_deg, last_deg = obstacle.azimuth_deg[0], obstacle.azimuth_deg[-1]
    middle_deg, half_deg = 0.5 * (first_deg + last_deg), 0.5 * (last_deg - first_deg)
    aside_deg = wrap_difference_deg(azimuth_deg - middle_deg)
    nearest_deg = middle_deg + np.clip(aside_deg, -half_deg, half_deg)
    top_deg = edge_elevation_deg(obstacle, nearest_deg)
    meets_deg = np.minimum(elevation_deg, top_deg)
    in_plan_m = edge_distance_m(obstacle, nearest_deg) * np.cos(np.deg2rad(top_deg))

    def edge_nu(angle_deg: FloatArray, level_deg: FloatArray) -> FloatArray:
        # It stands upright, so at every level it is equally far away in plan.
        distance_m = in_plan_m / np.cos(np.deg2rad(level_deg))
        return np.asarray(fresnel_parameter(angle_deg, distance_m, wavelength_m))

    narrowing = np.cos(np.deg2rad(meets_deg))  # of an azimuth gap, where the line of sight meets the obstacle
    nu_from = edge_nu((-half_deg - aside_deg) * narrowing, meets_deg)
    nu_to = edge_nu((half_deg - aside_deg) * narrowing, meets_deg)
    nu_top = edge_nu(top_deg - elevation_deg, top_deg)
    nu_bottom = np.full_like(nu_top, -np.inf)
    if obstacle.hangs_free:
        bottom_deg = underside_elevation_deg(obstacle, nearest_deg)
        nu_bottom = edge_nu(bottom_deg - elevation_deg, bottom_deg)
    is_clear = (np.maximum(nu_from, nu_bottom) > STRIP_REACH_NU) | (
        np.minimum(nu_to, nu_top) < -STRIP_REACH_NU
    )
    return np.where(is_clear, 0.0, strip_loss_db(nu_from, nu_to, nu_top, nu_bottom))
