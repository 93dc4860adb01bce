"""Edges with more points: so that they can be read with the other kind of line, or cut off at a level."""

from dataclasses import fields

import numpy as np

from siteassess.horizon.curves import FloatArray, IndexArray, between_on_great_circle
from siteassess.horizon.survey.carry import Points

__all__ = ["cut_off", "with_other_lines"]

CLOSE_DEG = 2e-5  # a third of a microradian; shares are then off by less than a millionth
WIDEST_DEG = 60.0  # longer sides are halved first: no straight edge spans half the circle
BISECTIONS = 52


def with_other_lines(points: Points, *, straight_in_space: bool) -> Points:
    """The same edge with so many points that the other kind of line between them leaves it where it is.

    Parameters
    ----------
    points : Points
        Azimuths ascending.
    straight_in_space : bool
        How its points are joined: by straight edges in space, or linearly.
    """
    steps_deg = np.diff(points.azimuth_deg)
    points = _cut(points, np.ceil(steps_deg / WIDEST_DEG).astype(np.int64), straight_in_space)
    apart_deg = np.zeros(len(points.azimuth_deg) - 1)
    left = np.flatnonzero(np.diff(points.azimuth_deg) > 0.0)
    middle_deg = 0.5 * (points.azimuth_deg[left] + points.azimuth_deg[left + 1])
    lines, arcs = (_between(points, left, middle_deg, straight) for straight in (False, True))
    for edge in ("elevation_deg", "underside_deg"):
        found_deg = np.abs(getattr(lines, edge) - getattr(arcs, edge))
        apart_deg[left] = np.fmax(apart_deg[left], found_deg)
    # In halves of a side both lines are a quarter as far apart.
    return _cut(points, np.ceil(np.sqrt(apart_deg / CLOSE_DEG)).astype(np.int64), straight_in_space)


def cut_off(points: Points, lowest_deg: float, *, straight_in_space: bool) -> Points:
    """The same edge above a level, and along it where the edge is lower."""
    below = points.elevation_deg < lowest_deg
    if not below.any():
        return points
    passes = np.flatnonzero((below[1:] != below[:-1]) & (np.diff(points.azimuth_deg) > 0.0))
    low_deg, high_deg = points.azimuth_deg[passes], points.azimuth_deg[passes + 1]
    for _ in range(BISECTIONS):
        half_deg = 0.5 * (low_deg + high_deg)
        is_below = _between(points, passes, half_deg, straight_in_space).elevation_deg < lowest_deg
        before = is_below == below[passes]
        low_deg, high_deg = np.where(before, half_deg, low_deg), np.where(before, high_deg, half_deg)
    more = _with(points, passes, 0.5 * (low_deg + high_deg), straight_in_space)
    return Points(
        azimuth_deg=more.azimuth_deg,
        elevation_deg=np.maximum(more.elevation_deg, lowest_deg),
        underside_deg=np.minimum(more.underside_deg, np.maximum(more.elevation_deg, lowest_deg)),
        distance_m=more.distance_m,
        depth_m=more.depth_m,
    )


def _cut(points: Points, parts: IndexArray, straight_in_space: bool) -> Points:
    """The edge with each side cut into so many parts of one width; 0 and 1 leave it whole."""
    more = np.maximum(parts - 1, 0)
    left = np.repeat(np.arange(len(parts)), more)
    number = np.arange(len(left)) - np.repeat(np.cumsum(more) - more, more) + 1
    part = number / parts[left]
    start_deg, end_deg = points.azimuth_deg[left], points.azimuth_deg[left + 1]
    return _with(points, left, start_deg + part * (end_deg - start_deg), straight_in_space)


def _with(points: Points, left: IndexArray, azimuth_deg: FloatArray, straight_in_space: bool) -> Points:
    """The edge with further points, each behind the point `left`."""
    further = _between(points, left, azimuth_deg, straight_in_space)
    columns = {
        field.name: np.insert(getattr(points, field.name), left + 1, getattr(further, field.name))
        for field in fields(Points)
    }
    return Points(**columns)


def _between(points: Points, left: IndexArray, azimuth_deg: FloatArray, straight_in_space: bool) -> Points:
    """Points of the edge at azimuths, each between the points `left` and the next."""
    start_deg, end_deg = points.azimuth_deg[left], points.azimuth_deg[left + 1]
    part = (azimuth_deg - start_deg) / (end_deg - start_deg)

    def line(values: FloatArray) -> FloatArray:
        return np.asarray(values[left] + part * (values[left + 1] - values[left]))

    def arc(values: FloatArray) -> FloatArray:
        return between_on_great_circle(azimuth_deg, start_deg, end_deg, values[left], values[left + 1])

    if not straight_in_space:
        elevation_deg, underside_deg = line(points.elevation_deg), line(points.underside_deg)
        distance_m = line(points.distance_m)
    else:
        tangent = arc(np.tan(np.deg2rad(points.elevation_deg)))
        elevation_deg = np.rad2deg(np.arctan(tangent))
        underside_deg = np.rad2deg(np.arctan(arc(np.tan(np.deg2rad(points.underside_deg)))))
        # In plan 1/r follows the rule of the tangent.
        distance_m = np.hypot(1.0, tangent) / arc(1.0 / points.horizontal_m)
    return Points(
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        underside_deg=underside_deg,
        distance_m=distance_m,
        depth_m=line(points.depth_m),
    )
