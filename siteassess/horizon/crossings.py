"""Where two edges on the sky cross: closed where both are of one kind, bisected between known bounds else."""

import numpy as np

from siteassess.horizon.curves import Curves, FloatArray, IndexArray, edge_elevation, tangent_terms

__all__ = ["SAME_EDGE_DEG", "crossing_azimuths"]

SAME_EDGE_DEG = 1e-10  # edges that differ less are one edge: rounding of azimuths leaves about 1e-13 degrees
BISECTIONS = 52  # halve any bracket down to the spacing of floating-point numbers


def crossing_azimuths(
    curves: Curves, first: IndexArray, second: IndexArray, start_deg: FloatArray, end_deg: FloatArray
) -> FloatArray:
    """Azimuths at which pairs of curves cross within an interval each.

    Parameters
    ----------
    curves : Curves
        The table that both indices refer to.
    first, second : integer array, shape (pair,)
        The two curves.
    start_deg, end_deg : array, shape (pair,)
        Interval that both span.

    Returns
    -------
    array, shape (pair, 2)
        Crossings inside the interval [deg]; NaN where there are fewer. Two curves of one kind cross at most
        once, a line and an arc twice.
    """
    found = np.full((len(first), 2), np.nan)
    at_start = _difference(curves, first, second, start_deg)
    at_end = _difference(curves, first, second, end_deg)
    arcs = curves.straight_in_space[first].astype(int) + curves.straight_in_space[second]
    crosses = at_start * at_end < 0.0

    lines = np.flatnonzero(crosses & (arcs == 0))
    part = at_start[lines] / (at_start[lines] - at_end[lines])
    found[lines, 0] = start_deg[lines] + part * (end_deg[lines] - start_deg[lines])

    both = np.flatnonzero(crosses & (arcs == 2))
    tangent, derivative = tangent_terms(curves, first[both], start_deg[both])
    other_tangent, other_derivative = tangent_terms(curves, second[both], start_deg[both])
    gap, closing = tangent - other_tangent, other_derivative - derivative
    # gap cos(u) = closing sin(u)
    found[both, 0] = start_deg[both] + np.rad2deg(np.arctan2(np.abs(gap), np.sign(gap) * closing))

    mixed = np.flatnonzero(arcs == 1)
    if mixed.size:
        first_is_arc = curves.straight_in_space[first[mixed]]
        arc = np.where(first_is_arc, first[mixed], second[mixed])
        line = np.where(first_is_arc, second[mixed], first[mixed])
        found[mixed] = _line_and_arc(curves, line, arc, start_deg[mixed], end_deg[mixed])
    inside = (found > start_deg[:, None]) & (found < end_deg[:, None])
    return np.where(inside, found, np.nan)


def _difference(curves: Curves, first: IndexArray, second: IndexArray, azimuth_deg: FloatArray) -> FloatArray:
    difference = edge_elevation(curves, first, azimuth_deg) - edge_elevation(curves, second, azimuth_deg)
    return np.where(np.abs(difference) < SAME_EDGE_DEG, 0.0, difference)


def _line_and_arc(
    curves: Curves, line: IndexArray, arc: IndexArray, start_deg: FloatArray, end_deg: FloatArray
) -> FloatArray:
    """Crossings on both sides of the azimuth where line and arc run parallel."""
    middle_deg = _parallel_azimuth(curves, line, arc, start_deg, end_deg)
    found = np.full((len(line), 2), np.nan)
    for column, (low_deg, high_deg) in enumerate(((start_deg, middle_deg), (middle_deg, end_deg))):
        below = _difference(curves, arc, line, low_deg)
        bracket = np.flatnonzero(below * _difference(curves, arc, line, high_deg) < 0.0)
        low, high, sign = low_deg[bracket], high_deg[bracket], np.sign(below[bracket])
        for _ in range(BISECTIONS if bracket.size else 0):
            half = 0.5 * (low + high)
            before = (
                edge_elevation(curves, arc[bracket], half) - edge_elevation(curves, line[bracket], half)
            ) * sign > 0.0
            low, high = np.where(before, half, low), np.where(before, high, half)
        found[bracket, column] = 0.5 * (low + high)
    return found


def _parallel_azimuth(
    curves: Curves, line: IndexArray, arc: IndexArray, start_deg: FloatArray, end_deg: FloatArray
) -> FloatArray:
    """Azimuth [deg] where the arc rises as fast as the line; the end of the interval where it never does."""
    level, sine, slope = curves.level[arc], curves.slope[arc], curves.slope[line]
    half_way_deg = 0.5 * (start_deg + end_deg)
    steepness = np.maximum(np.hypot(level, sine), np.finfo(float).tiny)  # tangent of the highest elevation
    root = 1.0 + np.sqrt(1.0 + 4.0 * slope**2 * (1.0 + steepness**2))
    # d/dx arctan(R cos x) = b is a quadratic in sin x; this is its root within -1..1, if it has one
    with np.errstate(over="ignore"):
        sine_from_top = -2.0 * slope * (1.0 + steepness**2) / (steepness * root)
    exists = np.abs(sine_from_top) <= 1.0
    from_top_deg = np.rad2deg(np.arcsin(np.where(exists, sine_from_top, 0.0)))
    tangent, _ = tangent_terms(curves, arc, half_way_deg)
    from_top_deg = np.where(tangent < 0.0, 180.0 - from_top_deg, from_top_deg)
    azimuth_deg = curves.origin_deg[arc] + np.rad2deg(np.arctan2(sine, level)) + from_top_deg
    azimuth_deg += 360.0 * np.round((half_way_deg - azimuth_deg) / 360.0)
    inside = exists & (azimuth_deg > start_deg) & (azimuth_deg < end_deg)
    return np.where(inside, azimuth_deg, end_deg)
