"""Edges on the sky as curves of elevation over azimuth: their values, their areas, their level crossings.

Two kinds: linear in azimuth and elevation, and straight in space, which is an arc of a great circle,
tan(el) = c cos(az - az0) + s sin(az - az0). Arcs are cut at their highest point and at the horizon, so that
every curve is monotonic and bends one way only; that is what makes crossings unique or closed.
"""

from dataclasses import dataclass, fields
from typing import Any

import numpy as np
from numpy.typing import NDArray

__all__ = [
    "NOTHING_DEG",
    "BoolArray",
    "Curves",
    "FloatArray",
    "IndexArray",
    "between_on_great_circle",
    "capped_area",
    "curves_between",
    "edge_elevation",
    "join_curves",
    "level_azimuth",
    "tangent_terms",
]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]
BoolArray = NDArray[np.bool_]

NOTHING_DEG = -90.0  # elevation of the outline where nothing forms it


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Curves:
    """A table of monotonic curves within 0..360 degrees of azimuth; the last one is "nothing", at -90.

    The index -1 therefore means "nothing" wherever curves are named by index.

    Attributes
    ----------
    start_deg, end_deg : array, shape (curve,)
        Azimuths that the curve spans, 0 <= start < end <= 360.
    origin_deg : array, shape (curve,)
        Azimuth from which it is counted.
    straight_in_space : boolean array, shape (curve,)
        Arc of a great circle (True) or linear (False).
    level : array, shape (curve,)
        Elevation at the origin [deg]; its tangent for arcs.
    slope : array, shape (curve,)
        Degrees of elevation per degree of azimuth; factor of the sine for arcs.
    obstacle : integer array, shape (curve,)
        Index of the obstacle it belongs to; -1 for nothing.
    """

    start_deg: FloatArray
    end_deg: FloatArray
    origin_deg: FloatArray
    straight_in_space: BoolArray
    level: FloatArray
    slope: FloatArray
    obstacle: IndexArray

    def __len__(self) -> int:
        return len(self.start_deg)


def curves_between(
    *,
    start_deg: FloatArray,
    end_deg: FloatArray,
    start_elevation_deg: FloatArray,
    end_elevation_deg: FloatArray,
    straight_in_space: BoolArray,
    obstacle: IndexArray,
) -> Curves:
    """Curves between pairs of points, cut at north, at the top and at the horizon.

    Parameters
    ----------
    start_deg, end_deg : array, shape (segment,)
        Unwrapped azimuths, 0 <= start < 360, start <= end <= start + 360. Vertical segments are left out,
        and those that lie at -90 degrees.
    start_elevation_deg, end_elevation_deg : array, shape (segment,)
        Elevations at both ends.
    straight_in_space : boolean array, shape (segment,)
        Kind of curve; arcs span less than 180 degrees.
    obstacle : integer array, shape (segment,)
        Owner of each segment.

    Returns
    -------
    Curves
        Ascending by owner, then by azimuth, if the segments were.
    """
    real = (end_deg > start_deg) & ~(
        (start_elevation_deg == NOTHING_DEG) & (end_elevation_deg == NOTHING_DEG)
    )
    start_deg, end_deg, straight_in_space = start_deg[real], end_deg[real], straight_in_space[real]
    low_deg, high_deg = start_elevation_deg[real], end_elevation_deg[real]
    level, slope = low_deg.copy(), (high_deg - low_deg) / (end_deg - start_deg)
    arc = np.flatnonzero(straight_in_space)
    span_rad = np.deg2rad(end_deg[arc] - start_deg[arc])
    level[arc] = np.tan(np.deg2rad(low_deg[arc]))
    end_tangent = np.tan(np.deg2rad(high_deg[arc]))
    slope[arc] = (end_tangent - level[arc] * np.cos(span_rad)) / np.sin(span_rad)

    cuts = np.stack([start_deg, end_deg, end_deg, end_deg, np.clip(360.0, start_deg, end_deg)])
    top_deg = np.rad2deg(np.arctan2(slope[arc], level[arc]))
    for row, turn_deg in ((1, top_deg), (2, top_deg + 90.0)):  # highest or lowest point; horizon
        cut_deg = start_deg[arc] + np.mod(turn_deg, 180.0)
        cuts[row, arc] = np.minimum(cut_deg, end_deg[arc])
    if arc.size:
        cuts.sort(axis=0)
    else:
        cuts = cuts[[0, 4, 1]]
    piece_start, piece_end = cuts[:-1].T, cuts[1:].T
    keep = piece_end > piece_start
    segment = np.nonzero(keep)[0]
    piece_start, piece_end = piece_start[keep], piece_end[keep]
    turn = np.where(piece_start >= 360.0, 360.0, 0.0)
    owner = np.asarray(obstacle, dtype=np.int64)[real][segment]
    first_deg = piece_start - turn
    order = np.lexsort((first_deg, owner)) if turn.any() else slice(None)
    return Curves(
        start_deg=np.append(first_deg[order], 0.0),
        end_deg=np.append((piece_end - turn)[order], 360.0),
        origin_deg=np.append((start_deg[segment] - turn)[order], 0.0),
        straight_in_space=np.append(straight_in_space[segment][order], False),
        level=np.append(level[segment][order], NOTHING_DEG),
        slope=np.append(slope[segment][order], 0.0),
        obstacle=np.append(owner[order], -1),
    )


def join_curves(*tables: Curves) -> Curves:
    """One table of several; each keeps its order, and "nothing" stands last again."""
    columns: dict[str, Any] = {
        field.name: np.concatenate(
            [getattr(table, field.name)[:-1] for table in tables] + [getattr(tables[0], field.name)[-1:]]
        )
        for field in fields(Curves)
    }
    return Curves(**columns)


def between_on_great_circle(
    azimuth_deg: FloatArray, start_deg: FloatArray, end_deg: FloatArray, start: FloatArray, end: FloatArray
) -> FloatArray:
    """A quantity c cos(az) + s sin(az), such as the tangent of elevation, from its values at two azimuths."""
    before, behind = np.deg2rad(azimuth_deg - start_deg), np.deg2rad(end_deg - azimuth_deg)
    return np.asarray((start * np.sin(behind) + end * np.sin(before)) / np.sin(before + behind))


def tangent_terms(
    curves: Curves, index: IndexArray, azimuth_deg: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Tangent of the elevation of arcs at an azimuth, and its derivative by azimuth [1/rad]."""
    along_rad = np.deg2rad(azimuth_deg - curves.origin_deg[index])
    cosine, sine = np.cos(along_rad), np.sin(along_rad)
    level, slope = curves.level[index], curves.slope[index]
    return level * cosine + slope * sine, slope * cosine - level * sine


def edge_elevation(curves: Curves, index: IndexArray, azimuth_deg: FloatArray) -> FloatArray:
    """Elevation of curves [deg] at one azimuth each; -90 for nothing."""
    elevation_deg: FloatArray = curves.level[index] + curves.slope[index] * (
        azimuth_deg - curves.origin_deg[index]
    )
    arc = curves.straight_in_space[index]
    if arc.any():
        tangent, _ = tangent_terms(curves, index[arc], azimuth_deg[arc])
        elevation_deg[arc] = np.rad2deg(np.arctan(tangent))
    return elevation_deg


def _area(curves: Curves, index: IndexArray, start_deg: FloatArray, end_deg: FloatArray) -> FloatArray:
    """Integral of sin(elevation) over azimuth [rad] below curves, in closed form."""
    width_deg = end_deg - start_deg
    slope = curves.slope[index]
    middle_deg = curves.level[index] + slope * (0.5 * (start_deg + end_deg) - curves.origin_deg[index])
    # int sin(a + b az) d az = width sin(middle) sinc(b width / 2)
    with np.errstate(over="ignore", invalid="ignore"):
        area: FloatArray = (
            np.deg2rad(width_deg) * np.sin(np.deg2rad(middle_deg)) * np.sinc(slope * width_deg / 360.0)
        )
    arc = curves.straight_in_space[index]
    if arc.any():
        ends = []
        for azimuth_deg in (start_deg[arc], end_deg[arc]):
            tangent, derivative = tangent_terms(curves, index[arc], azimuth_deg)
            # int t / sqrt(1 + t^2) d az = -arctan(t' / sqrt(1 + t^2))
            ends.append(-np.arctan2(derivative, np.hypot(1.0, tangent)))
        area[arc] = ends[1] - ends[0]
    return area


def level_azimuth(
    curves: Curves, index: IndexArray, start_deg: FloatArray, end_deg: FloatArray, level_deg: FloatArray
) -> FloatArray:
    """Azimuth [deg] between start and end at which a curve passes a level between its end values."""
    with np.errstate(divide="ignore", invalid="ignore"):
        azimuth_deg: FloatArray = (
            curves.origin_deg[index] + (level_deg - curves.level[index]) / curves.slope[index]
        )
    arc = curves.straight_in_space[index]
    if arc.any():
        which, middle_deg = index[arc], 0.5 * (start_deg[arc] + end_deg[arc])
        level, slope = curves.level[which], curves.slope[which]
        top_deg = curves.origin_deg[which] + np.rad2deg(np.arctan2(slope, level))
        top_deg += 360.0 * np.round((middle_deg - top_deg) / 360.0)
        steepness = np.maximum(np.hypot(level, slope), np.finfo(float).tiny)
        cosine = np.clip(np.tan(np.deg2rad(level_deg[arc])) / steepness, -1.0, 1.0)
        away_deg = np.rad2deg(np.arccos(cosine))
        azimuth_deg[arc] = np.where(middle_deg < top_deg, top_deg - away_deg, top_deg + away_deg)
    return np.clip(azimuth_deg, start_deg, end_deg)


def capped_area(
    curves: Curves, index: IndexArray, start_deg: FloatArray, end_deg: FloatArray, cap_deg: float
) -> FloatArray:
    """Integral of sin(min(elevation, cap)) over azimuth [rad] below curves, between two azimuths each.

    The solid angle that a curve covers between two levels is the difference of the integrals capped at them.
    """
    first_deg = edge_elevation(curves, index, start_deg)
    last_deg = edge_elevation(curves, index, end_deg)
    area: FloatArray = np.deg2rad(end_deg - start_deg) * np.sin(np.deg2rad(cap_deg))
    whole = np.maximum(first_deg, last_deg) <= cap_deg
    area[whole] = _area(curves, index[whole], start_deg[whole], end_deg[whole])
    part = ~whole & (np.minimum(first_deg, last_deg) < cap_deg)
    if part.any():
        rising = last_deg[part] > first_deg[part]
        begin, end, which = start_deg[part], end_deg[part], index[part]
        pass_deg = level_azimuth(curves, which, begin, end, np.full(len(which), cap_deg))
        low, high = np.where(rising, begin, pass_deg), np.where(rising, pass_deg, end)
        capped_deg = (end - begin) - (high - low)
        area[part] = _area(curves, which, low, high) + np.deg2rad(capped_deg) * np.sin(np.deg2rad(cap_deg))
    return area
