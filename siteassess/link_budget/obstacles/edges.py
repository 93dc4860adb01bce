"""The edges of one obstacle as short arcs on the sky, and the detour that they force upon a wave."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.angles import direction, wrap_difference_deg
from siteassess.horizon.skyline import Obstacle
from siteassess.horizon.view import edge_distance_m, edge_elevation_deg, underside_elevation_deg

__all__ = ["Edges", "highest_within_reach_deg", "lower_edges", "smallest_detour_m", "upper_edges"]

FloatArray = NDArray[np.float64]

LONGEST_ARC_DEG = 5.0  # an arc of a great circle leaves a linear edge of this length by at most 0.03 degrees
GROUND_DEG = -45.0  # sides of what stands on the ground run down to here, out of reach of any satellite
NOTHING_DEG = -89.0  # points of a skyline that lie lower say that there is no edge
MOST_NEIGHBOURS = 12  # arcs looked at on either side of a direction; a survey that is finer bends smoothly


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Edges:
    """Arcs of great circles in ascending azimuth; those of unknown distance are left out.

    Attributes
    ----------
    start_deg, end_deg : array, shape (arc,)
        Unwrapped azimuths; equal where an arc is vertical.
    top_deg : array, shape (arc,)
        Elevation of the higher end.
    start_m, end_m : array, shape (arc,)
        Slant distance of both ends.
    nearest_m : array, shape (arc,)
        Distance that no point of the edge falls below.
    axes : array, shape (arc, 5, 3)
        East, north, up of five vectors: normal of the arc's plane; the two directions in that plane at right
        angles to its ends and pointing inward, over the sine of the arc and the distance of the other end
        [1/m]; and the ends themselves.
    closed : bool
        Whether the edge runs round the whole circle.
    """

    start_deg: FloatArray
    end_deg: FloatArray
    top_deg: FloatArray
    start_m: FloatArray
    end_m: FloatArray
    nearest_m: FloatArray
    axes: FloatArray
    closed: bool


def upper_edges(obstacle: Obstacle) -> Edges:
    """Upper edge of an obstacle, with its two sides down to its underside or to the ground.

    Vertical parts stand upright in space, as far away in plan as their higher end, to which they belong.
    """
    azimuth_deg, elevation_deg, distance_m = _nodes(obstacle, obstacle.elevation_deg, edge_elevation_deg)
    if not _is_closed(obstacle):
        foot_deg = (
            np.full(2, GROUND_DEG) if obstacle.underside_deg is None else obstacle.underside_deg[[0, -1]]
        )
        azimuth_deg, distance_m = (np.concatenate([x[:1], x, x[-1:]]) for x in (azimuth_deg, distance_m))
        elevation_deg = np.concatenate([foot_deg[:1], elevation_deg, foot_deg[1:]])
    return _arcs(azimuth_deg, elevation_deg, distance_m, closed=_is_closed(obstacle))


def lower_edges(obstacle: Obstacle) -> Edges:
    """Underside of an obstacle that hangs free, at the distance of its upper edge."""
    assert obstacle.underside_deg is not None
    nodes = _nodes(obstacle, obstacle.underside_deg, underside_elevation_deg)
    return _arcs(*nodes, closed=_is_closed(obstacle))


def smallest_detour_m(
    edges: Edges, azimuth_deg: FloatArray, elevation_deg: FloatArray, within_m: float
) -> FloatArray:
    """Smallest detour [m] over the edges of an obstacle from directions at infinity.

    The detour over a point at distance d and angle theta from the line of sight is d (1 - cos theta).

    Parameters
    ----------
    edges : Edges
        Of one obstacle.
    azimuth_deg, elevation_deg : array, shape (n,)
        Lines of sight.
    within_m : float
        Up to here the smallest detour is found; a larger one may come out too large.

    Returns
    -------
    array, shape (n,)
        Infinite where the obstacle has no edge of known distance.
    """
    smallest_m = np.full(azimuth_deg.shape, np.inf)
    count = len(edges.start_deg)
    if count == 0:
        return smallest_m
    middle_deg = 0.5 * (edges.start_deg[0] + edges.end_deg[-1])
    unwrapped_deg = middle_deg + wrap_difference_deg(azimuth_deg - middle_deg)
    nearest = np.searchsorted(edges.start_deg, unwrapped_deg, side="right") - 1
    line = direction(azimuth_deg, elevation_deg).T
    neighbours = _neighbours(edges, within_m)
    for offset in range(-neighbours, neighbours + 1):
        arc = np.mod(nearest + offset, count) if edges.closed else np.clip(nearest + offset, 0, count - 1)
        np.minimum(smallest_m, _detour_m(edges, arc, line), out=smallest_m)
    return smallest_m


def highest_within_reach_deg(edges: Edges, detour_m: float) -> FloatArray:
    """For each whole degree of azimuth, an elevation above which every detour is larger than the given one.

    Returns
    -------
    array, shape (360,)
        Elevations [deg]; -90 where no edge is near.
    """
    highest_deg = np.full(360, -90.0)
    reach_deg, sideways_deg = _reach_deg(edges, detour_m)
    first = np.floor(edges.start_deg - sideways_deg).astype(int)
    last = np.minimum(np.floor(edges.end_deg + sideways_deg).astype(int), first + 359)
    for low, high, level_deg in zip(first, last, edges.top_deg + reach_deg, strict=True):
        degree = np.arange(low, high + 1) % 360
        highest_deg[degree] = np.maximum(highest_deg[degree], level_deg)
    return highest_deg


def _reach_deg(edges: Edges, detour_m: float) -> tuple[FloatArray, FloatArray]:
    """How far from each arc a detour may begin, as an angle and as an azimuth at the elevation of the arc."""
    reach_rad = np.arccos(np.maximum(1.0 - detour_m / edges.nearest_m, -1.0))
    top_rad = np.deg2rad(np.maximum(edges.top_deg, 0.0))
    over_zenith = top_rad + reach_rad >= np.pi / 2.0
    sine = np.where(over_zenith, 0.0, np.sin(reach_rad) / np.cos(top_rad))
    return np.rad2deg(reach_rad), np.where(over_zenith, 180.0, np.rad2deg(np.arcsin(np.clip(sine, 0.0, 1.0))))


def _neighbours(edges: Edges, within_m: float) -> int:
    """Number of arcs to look at on either side of a direction, so that none within reach is left out."""
    _, sideways_deg = _reach_deg(edges, within_m)
    count = len(edges.start_deg)
    starts_deg, before = edges.start_deg, 0
    if edges.closed:
        starts_deg, before = np.concatenate([starts_deg - 360.0, starts_deg, starts_deg + 360.0]), count
    own = np.arange(before, before + count)
    first = np.searchsorted(starts_deg, edges.start_deg - sideways_deg, side="right") - 1
    last = np.searchsorted(starts_deg, edges.end_deg + sideways_deg, side="right") - 1
    return int(min(np.max([own - first, last - own]), MOST_NEIGHBOURS, count - 1))


def _is_closed(obstacle: Obstacle) -> bool:
    return bool(obstacle.azimuth_deg[-1] - obstacle.azimuth_deg[0] >= 360.0 - 1e-9)


def _nodes(
    obstacle: Obstacle, edge_deg: FloatArray, elevation_at: Callable[[Obstacle, ArrayLike], FloatArray]
) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Azimuth, elevation and distance of break points and of points between that cut long edges."""
    width_deg = np.diff(obstacle.azimuth_deg)
    rise_deg = np.where((width_deg > 0.0) & (not obstacle.straight_in_space), np.abs(np.diff(edge_deg)), 0.0)
    pieces = np.maximum(np.ceil(np.maximum(width_deg, rise_deg) / LONGEST_ARC_DEG), 1.0).astype(int)
    segment = np.repeat(np.arange(len(width_deg)), pieces)
    part = (np.arange(len(segment)) - np.repeat(np.cumsum(pieces) - pieces, pieces)) / pieces[segment]
    azimuth_deg = np.append(
        obstacle.azimuth_deg[segment] + part * width_deg[segment], obstacle.azimuth_deg[-1]
    )
    point = np.append(segment, len(width_deg))
    known_m = np.full(len(edge_deg), np.nan) if obstacle.distance_m is None else obstacle.distance_m
    elevation_deg, distance_m = edge_deg[point], known_m[point]
    between = np.append(part > 0.0, False)
    elevation_deg[between] = elevation_at(obstacle, azimuth_deg[between])
    distance_m[between] = edge_distance_m(obstacle, azimuth_deg[between])
    return azimuth_deg, elevation_deg, distance_m


def _arcs(
    azimuth_deg: FloatArray, elevation_deg: FloatArray, distance_m: FloatArray, *, closed: bool
) -> Edges:
    start_m, end_m = distance_m[:-1], distance_m[1:]
    rises = elevation_deg[1:] > elevation_deg[:-1]
    is_vertical = azimuth_deg[1:] == azimuth_deg[:-1]
    cosine = np.cos(np.deg2rad(elevation_deg))
    in_plan_m = np.where(rises, end_m * cosine[1:], start_m * cosine[:-1])  # of the higher end
    start_m = np.where(is_vertical, in_plan_m / cosine[:-1], start_m)
    end_m = np.where(is_vertical, in_plan_m / cosine[1:], end_m)
    nearest_m = np.where(is_vertical, in_plan_m, np.minimum(start_m, end_m))
    points = direction(azimuth_deg, elevation_deg).T
    normal = np.cross(points[:-1], points[1:])
    length = np.linalg.norm(normal, axis=1)
    lowest_deg = np.minimum(elevation_deg[:-1], elevation_deg[1:])  # NaN, like the distance, is no edge
    real = (lowest_deg > NOTHING_DEG) & np.isfinite(start_m + end_m) & (length > 1e-12)
    normal, start, end = normal[real] / length[real, None], points[:-1][real], points[1:][real]
    from_start = np.cross(normal, start) / (length * end_m)[real, None]
    to_end = np.cross(end, normal) / (length * start_m)[real, None]
    return Edges(
        start_deg=azimuth_deg[:-1][real],
        end_deg=azimuth_deg[1:][real],
        top_deg=np.maximum(elevation_deg[:-1], elevation_deg[1:])[real],
        start_m=start_m[real],
        end_m=end_m[real],
        nearest_m=nearest_m[real],
        axes=np.stack([normal, from_start, to_end, start, end], axis=1),
        closed=closed,
    )


def _detour_m(edges: Edges, arc: NDArray[np.int64], line: FloatArray) -> FloatArray:
    """Smallest detour over one arc for each line of sight, at the nearest point or at an end."""
    off, from_start, to_end, at_start, at_end = np.einsum("nij,nj->in", edges.axes[arc], line)
    ends_m = np.minimum(edges.start_m[arc] * (1.0 - at_start), edges.end_m[arc] * (1.0 - at_end))
    abreast = (from_start > 0.0) & (to_end > 0.0)
    cosine = np.sqrt(np.maximum(1.0 - off**2, 0.0))
    # A straight line seen at an angle b from its start and c from its end, which are b + c apart, is at the
    # distance d with 1/d = (sin(b) / d_end + sin(c) / d_start) / sin(b + c).
    foot_m = cosine / np.where(abreast, from_start + to_end, 1.0)
    abreast_m = foot_m * off**2 / (1.0 + cosine)
    detour_m: FloatArray = np.where(abreast, abreast_m, np.maximum(ends_m, 0.0))
    return detour_m
