"""What stands in a direction: the edges, the outline, the obstacle that hides it.

All functions broadcast their directions; an azimuth may have any multiple of 360 degrees in it.
"""

import numpy as np
from numpy.typing import ArrayLike

from siteassess.angles import wrap_azimuth_deg
from siteassess.horizon.curves import NOTHING_DEG, BoolArray, FloatArray, IndexArray, between_on_great_circle
from siteassess.horizon.place import is_within, locate
from siteassess.horizon.skyline import Obstacle, Outline, Skyline

__all__ = [
    "covers",
    "depth_m",
    "edge_distance_m",
    "edge_elevation_deg",
    "foliage_obstacles",
    "hiding_obstacle",
    "is_unsurveyed",
    "outline_elevation_deg",
    "underside_elevation_deg",
]


def edge_elevation_deg(obstacle: Obstacle, azimuth_deg: ArrayLike) -> FloatArray:
    """Elevation of an obstacle's upper edge; NaN outside its azimuths. At a vertical edge the higher value.

    Parameters
    ----------
    obstacle : Obstacle
        Any obstacle.
    azimuth_deg : array_like
        Azimuths [deg].

    Returns
    -------
    array
        Elevations [deg], in the shape of the azimuths.

    Examples
    --------
    >>> wall = Obstacle(name="wall", cover="solid", azimuth_deg=np.array([350.0, 370.0]),
    ...                 elevation_deg=np.array([10.0, 20.0]))
    >>> edge_elevation_deg(wall, [350.0, 0.0, 9.0, 20.0]).round(6).tolist()
    [10.0, 15.0, 19.5, nan]
    """
    return _edge(obstacle, obstacle.elevation_deg, azimuth_deg)


def underside_elevation_deg(obstacle: Obstacle, azimuth_deg: ArrayLike) -> FloatArray:
    """Elevation of the lower edge of an obstacle that hangs free [deg]; -90 where it stands on the ground.

    NaN outside its azimuths.
    """
    lower_deg = obstacle.underside_deg
    return _edge(
        obstacle,
        np.full_like(obstacle.elevation_deg, NOTHING_DEG) if lower_deg is None else lower_deg,
        azimuth_deg,
    )


def depth_m(obstacle: Obstacle, azimuth_deg: ArrayLike) -> FloatArray:
    """Path through the leaves of foliage [m], linear between points; NaN outside and for what is solid."""
    if obstacle.depth_m is None:
        return np.full(np.shape(azimuth_deg), np.nan)
    place = locate(obstacle, azimuth_deg)
    return place.filled(place.linear(obstacle.depth_m))


def edge_distance_m(obstacle: Obstacle, azimuth_deg: ArrayLike) -> FloatArray:
    """Slant distance from the antenna to an obstacle's upper edge [m].

    NaN outside its azimuths and where the survey gives none. Along a straight edge it is the distance to that
    edge; else it is linear between the points.
    """
    if obstacle.distance_m is None:
        return np.full(np.shape(azimuth_deg), np.nan)
    place = locate(obstacle, azimuth_deg)
    if not obstacle.straight_in_space:
        return place.filled(place.linear(obstacle.distance_m))
    # In plan a straight line has 1/r = (sin(az1 - az) / r0 + sin(az - az0) / r1) / sin(az1 - az0).
    nearness = 1.0 / (obstacle.distance_m * np.cos(np.deg2rad(obstacle.elevation_deg)))
    horizontal_m = 1.0 / place.great_circle(nearness)
    tangent = place.great_circle(np.tan(np.deg2rad(obstacle.elevation_deg)))
    return place.filled(horizontal_m * np.hypot(1.0, tangent))


def covers(obstacle: Obstacle, azimuth_deg: ArrayLike, elevation_deg: ArrayLike) -> BoolArray:
    """Whether an obstacle stands in directions: below its upper edge and above its underside."""
    azimuth_deg, elevation_deg = np.broadcast_arrays(azimuth_deg, elevation_deg)
    inside = np.zeros(azimuth_deg.shape, dtype=np.bool_)
    # Few directions lie within the azimuths of one obstacle; only these are worth the geometry.
    near = is_within(obstacle, azimuth_deg)
    below = elevation_deg[near] < edge_elevation_deg(obstacle, azimuth_deg[near])
    if obstacle.hangs_free:
        below &= elevation_deg[near] > underside_elevation_deg(obstacle, azimuth_deg[near])
    inside[near] = below
    return inside


def foliage_obstacles(skyline: Skyline) -> tuple[int, ...]:
    """Indices of the obstacles that are foliage."""
    return tuple(i for i, obstacle in enumerate(skyline.obstacles) if obstacle.cover == "foliage")


def outline_elevation_deg(skyline: Skyline, azimuth_deg: ArrayLike) -> FloatArray:
    """Elevation of the solid outline [deg]; -90 where nothing forms it; at a vertical edge the higher one."""
    return _outline_at(skyline.outline, np.asarray(azimuth_deg, dtype=float))[0]


def hiding_obstacle(skyline: Skyline, azimuth_deg: ArrayLike, elevation_deg: ArrayLike) -> IndexArray:
    """The solid obstacle that hides each direction.

    Parameters
    ----------
    skyline : Skyline
        Outline and obstacles.
    azimuth_deg, elevation_deg : array_like
        Directions [deg], apparent elevation.

    Returns
    -------
    integer array
        Index in `Skyline.obstacles` of the obstacle with the highest upper edge among those that hide the
        direction; -1 where the sky is open, and for NaN.
    """
    azimuth_deg, elevation_deg = np.broadcast_arrays(
        np.asarray(azimuth_deg, dtype=float), np.asarray(elevation_deg, dtype=float)
    )
    top_deg, hiding = _outline_at(skyline.outline, azimuth_deg)
    is_open = ~(elevation_deg < top_deg)
    hiding[is_open], top_deg[is_open] = -1, NOTHING_DEG
    for index, obstacle in enumerate(skyline.obstacles):
        if obstacle.cover == "solid" and obstacle.hangs_free:
            behind = covers(obstacle, azimuth_deg, elevation_deg)
            edge_deg = edge_elevation_deg(obstacle, azimuth_deg[behind])
            higher = edge_deg > top_deg[behind]
            hiding[behind] = np.where(higher, index, hiding[behind])
            top_deg[behind] = np.where(higher, edge_deg, top_deg[behind])
    return hiding


def is_unsurveyed(skyline: Skyline, azimuth_deg: ArrayLike, elevation_deg: ArrayLike) -> BoolArray:
    """Whether nobody looked at a direction and nothing known hides it."""
    azimuth_deg, elevation_deg = np.broadcast_arrays(
        np.asarray(azimuth_deg, dtype=float), np.asarray(elevation_deg, dtype=float)
    )
    in_gap = np.zeros(azimuth_deg.shape, dtype=np.bool_)
    if len(skyline.unsurveyed_deg):
        # The gaps are ascending and disjoint: inside one, an odd number of their ends lies behind.
        ends_behind = np.searchsorted(
            skyline.unsurveyed_deg.ravel(), wrap_azimuth_deg(azimuth_deg), side="right"
        )
        in_gap = np.asarray((ends_behind % 2 == 1) & ~np.isnan(elevation_deg))
        in_gap[in_gap] = hiding_obstacle(skyline, azimuth_deg[in_gap], elevation_deg[in_gap]) < 0
    return in_gap


def _outline_at(outline: Outline, azimuth_deg: FloatArray) -> tuple[FloatArray, IndexArray]:
    """Elevation of the outline, and the obstacle that forms it; at a break the higher side."""
    azimuth_deg = np.asarray(wrap_azimuth_deg(azimuth_deg))
    piece = np.searchsorted(outline.start_deg, azimuth_deg, side="right") - 1
    before = piece - 1  # -1 before the first: the last piece ends there
    at_break = (azimuth_deg == outline.start_deg[piece]) & (
        outline.end_elevation_deg[before] > outline.start_elevation_deg[piece]
    )
    start_deg, end_deg = outline.start_deg[piece], outline.end_deg[piece]
    start_level, end_level = outline.start_elevation_deg[piece], outline.end_elevation_deg[piece]
    elevation_deg = np.asarray(
        start_level + (end_level - start_level) * ((azimuth_deg - start_deg) / (end_deg - start_deg))
    )
    arc = outline.straight_in_space[piece]
    if arc.any():
        tangent = between_on_great_circle(
            azimuth_deg[arc],
            start_deg[arc],
            end_deg[arc],
            np.tan(np.deg2rad(start_level[arc])),
            np.tan(np.deg2rad(end_level[arc])),
        )
        elevation_deg[arc] = np.rad2deg(np.arctan(tangent))
    elevation_deg = np.where(at_break, outline.end_elevation_deg[before], elevation_deg)
    return elevation_deg, np.where(at_break, outline.obstacle[before], outline.obstacle[piece])


def _edge(obstacle: Obstacle, edge_deg: FloatArray, azimuth_deg: ArrayLike) -> FloatArray:
    place = locate(obstacle, azimuth_deg)
    if obstacle.straight_in_space:
        elevation_deg = np.rad2deg(np.arctan(place.great_circle(np.tan(np.deg2rad(edge_deg)))))
    else:
        elevation_deg = place.linear(edge_deg)
    if edge_deg is obstacle.elevation_deg:
        # Along its gaps a general skyline is no edge.
        elevation_deg = np.where(elevation_deg > NOTHING_DEG, elevation_deg, np.nan)
    return place.filled(elevation_deg)
