"""The silhouette of an edge that folds back: where its parts cover each other, the highest counts."""

from dataclasses import dataclass

import numpy as np

from siteassess.angles import wrap_difference_deg
from siteassess.horizon.curves import (
    NOTHING_DEG,
    FloatArray,
    IndexArray,
    between_on_great_circle,
    curves_between,
    edge_elevation,
)
from siteassess.horizon.outline import Circle, envelope
from siteassess.horizon.survey.carry import Points

__all__ = ["is_ascending", "silhouette"]

SAME_POINT_DEG = 1e-9  # points that differ less are one


def is_ascending(points: Points) -> bool:
    """Whether an edge runs clockwise without folding back or overlapping itself."""
    azimuth_deg = points.azimuth_deg
    return bool((np.diff(azimuth_deg) >= 0.0).all() and azimuth_deg[-1] - azimuth_deg[0] <= 360.0)


def silhouette(points: Points, *, straight_in_space: bool, closed: bool) -> Points:
    """The upper envelope of one edge, with what its points carry.

    Parameters
    ----------
    points : Points
        In the order of the survey; azimuths unwrapped but not ascending.
    straight_in_space : bool
        Whether neighbours are joined by straight edges in space.
    closed : bool
        Whether it runs round the whole circle; parts of the circle without an edge then lie at -90 degrees.

    Returns
    -------
    Points
        Ascending. Unless closed, an edge that leaves part of the circle free starts behind that part.
    """
    if not straight_in_space:
        points = _halved(points)
    sides = _sides(points)
    turn_deg = 360.0 * np.floor(sides.start_deg / 360.0)
    curves = curves_between(
        start_deg=sides.start_deg - turn_deg,
        end_deg=sides.end_deg - turn_deg,
        start_elevation_deg=points.elevation_deg[sides.first],
        end_elevation_deg=points.elevation_deg[sides.last],
        straight_in_space=np.full(len(turn_deg), straight_in_space),
        obstacle=np.arange(len(turn_deg)),
    )
    # Curves of one direction and one turn of the circle do not overlap.
    part = curves.obstacle[:-1]
    turn = np.rint(turn_deg[part] / 360.0).astype(np.int64) + (curves.origin_deg[:-1] < 0.0)
    turn -= turn.min(initial=0)
    circle = envelope(curves, sides.run[part] * (turn.max(initial=0) + 1) + turn)
    piece, unwrap_deg = _every_piece(circle) if closed else _from_the_gap_on(circle)
    curve, ends_deg = circle.curve[piece], (circle.start_deg[piece], circle.end_deg[piece])
    seen = [
        _seen(points, sides, curves.obstacle[curve], azimuth_deg, straight_in_space)
        for azimuth_deg in ends_deg
    ]
    elevation_deg = [edge_elevation(curves, curve, azimuth_deg) for azimuth_deg in ends_deg]
    both_ends = Points(
        azimuth_deg=np.stack(ends_deg, axis=1).ravel() + np.repeat(unwrap_deg, 2),
        elevation_deg=np.stack(elevation_deg, axis=1).ravel(),
        underside_deg=np.stack([end.underside_deg for end in seen], axis=1).ravel(),
        distance_m=np.stack([end.distance_m for end in seen], axis=1).ravel(),
        depth_m=np.stack([end.depth_m for end in seen], axis=1).ravel(),
    )
    same = (np.abs(np.diff(both_ends.azimuth_deg)) < SAME_POINT_DEG) & (
        np.abs(np.diff(both_ends.elevation_deg)) < SAME_POINT_DEG
    )
    return both_ends.taken(np.append(True, ~same))


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Sides:
    """The sides of an edge, each turned clockwise; arrays have shape (side,)."""

    first: IndexArray  # points at its ends
    last: IndexArray
    start_deg: FloatArray
    end_deg: FloatArray
    run: IndexArray  # number of the stretch that keeps one direction


def _halved(points: Points) -> Points:
    """The same edge with a point in the middle of its longest sides, so that none goes round the circle."""
    long = np.flatnonzero(np.abs(np.diff(points.azimuth_deg)) > 180.0)

    def filled(values: FloatArray) -> FloatArray:
        return np.insert(values, long + 1, 0.5 * (values[long] + values[long + 1]))

    return Points(
        azimuth_deg=filled(points.azimuth_deg),
        elevation_deg=filled(points.elevation_deg),
        underside_deg=filled(points.underside_deg),
        distance_m=filled(points.distance_m),
        depth_m=filled(points.depth_m),
    )


def _sides(points: Points) -> _Sides:
    left = np.arange(len(points.azimuth_deg) - 1)
    back = points.azimuth_deg[left + 1] < points.azimuth_deg[left]
    first, last = np.where(back, left + 1, left), np.where(back, left, left + 1)
    return _Sides(
        first=first,
        last=last,
        start_deg=points.azimuth_deg[first],
        end_deg=points.azimuth_deg[last],
        run=np.append(0, np.cumsum(back[1:] != back[:-1])),
    )


def _every_piece(circle: Circle) -> tuple[IndexArray, FloatArray]:
    return np.arange(len(circle.curve)), np.zeros(len(circle.curve))


def _from_the_gap_on(circle: Circle) -> tuple[IndexArray, FloatArray]:
    """Pieces of an edge in one ascending row, and what unwraps their azimuths."""
    is_edge = circle.curve >= 0
    begins = np.flatnonzero(is_edge & ~np.roll(is_edge, 1))
    begin = int(begins[-1]) if begins.size else 0
    order = np.roll(np.arange(len(is_edge)), -begin)
    order = order[is_edge[order]]
    return order, np.where(order < begin, 360.0, 0.0)


def _seen(
    points: Points, sides: _Sides, side: IndexArray, azimuth_deg: FloatArray, straight_in_space: bool
) -> Points:
    """What the points carry, between the ends of one side each; NaN where there is no side."""
    first, last = sides.first[side], sides.last[side]
    start_deg, end_deg = sides.start_deg[side], sides.end_deg[side]
    middle_deg = 0.5 * (start_deg + end_deg)
    azimuth_deg = np.clip(middle_deg + wrap_difference_deg(azimuth_deg - middle_deg), start_deg, end_deg)
    part = np.divide(
        azimuth_deg - start_deg, end_deg - start_deg, out=np.full(len(side), np.nan), where=side >= 0
    )

    def line(values: FloatArray) -> FloatArray:
        # A neighbour without a value says nothing about a point itself.
        between = values[first] + part * (values[last] - values[first])
        return np.where(part == 0.0, values[first], np.where(part == 1.0, values[last], between))

    def arc(values: FloatArray) -> FloatArray:
        return between_on_great_circle(azimuth_deg, start_deg, end_deg, values[first], values[last])

    tangent = np.tan(np.deg2rad(points.elevation_deg))
    lower_tangent = np.tan(np.deg2rad(points.underside_deg))
    return Points(
        azimuth_deg=azimuth_deg,
        elevation_deg=np.full(len(side), NOTHING_DEG),
        underside_deg=np.rad2deg(np.arctan(arc(lower_tangent)))
        if straight_in_space
        else line(points.underside_deg),
        # In plan a straight line has 1/r = (sin(az1 - az) / r0 + sin(az - az0) / r1) / sin(az1 - az0).
        distance_m=np.hypot(1.0, arc(tangent)) / arc(1.0 / points.horizontal_m)
        if straight_in_space
        else line(points.distance_m),
        depth_m=line(points.depth_m),
    )
