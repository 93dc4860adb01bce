"""Which obstacle takes which part of the sky: disjoint regions between an upper and a lower edge.

Where several hide a direction, the one with the highest upper edge counts. At one azimuth that leaves one
interval of each: from its own underside up to its top, or to the lowest underside among the higher ones.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from itertools import combinations

import numpy as np
from numpy.typing import NDArray

from siteassess.angles import distinct
from siteassess.horizon.crossings import SAME_EDGE_DEG, crossing_azimuths
from siteassess.horizon.curves import NOTHING_DEG, Curves, FloatArray, IndexArray, edge_elevation, join_curves
from siteassess.horizon.outline import Circle, circle_of, envelope, obstacle_curves, outline_curves
from siteassess.horizon.skyline import Obstacle, Skyline

__all__ = ["Region", "foliage_region", "solid_region"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Region:
    """Part of the sky, as pieces of the edges that bound it; all arrays have shape (piece,).

    Attributes
    ----------
    curves : Curves
        The table that `curve` refers to.
    start_deg, end_deg : array
        Azimuths of the piece, within 0..360.
    curve : integer array
        The edge.
    sign : array
        1 for an upper edge, -1 for a lower one: the part between two levels is the signed sum of what lies
        below.
    obstacle : integer array
        Index in `Skyline.obstacles` of what takes this part.
    """

    curves: Curves
    start_deg: FloatArray
    end_deg: FloatArray
    curve: IndexArray
    sign: FloatArray
    obstacle: IndexArray


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Band:
    """An upper edge round the circle, and the lower one where it hangs free."""

    top: Circle
    bottom: Circle | None


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Interval:
    """What is left of one band, azimuth by azimuth; all arrays have shape (interval,)."""

    valid: NDArray[np.bool_]
    upper: IndexArray
    lower: IndexArray
    upper_deg: FloatArray
    lower_deg: FloatArray
    obstacle: IndexArray


def solid_region(skyline: Skyline) -> Region:
    """All that is solid, each direction given to the obstacle with the highest upper edge."""
    if not _hanging(skyline.obstacles, "solid"):
        curves, circle = outline_curves(skyline.outline)
        solid = circle.curve >= 0
        return Region(
            curves=curves,
            start_deg=circle.start_deg[solid],
            end_deg=circle.end_deg[solid],
            curve=circle.curve[solid],
            sign=np.ones(int(solid.sum())),
            obstacle=curves.obstacle[circle.curve[solid]],
        )
    curves, bands = _solid_bands(skyline)
    breaks_deg = _all_breaks(curves, bands)
    parts = []
    for left in _remaining(curves, bands, breaks_deg):
        parts += [(left.valid, left.upper, 1.0, left.obstacle), (left.valid, left.lower, -1.0, left.obstacle)]
    return _region(curves, breaks_deg, parts)


def foliage_region(skyline: Skyline) -> Region:
    """Foliage before sky that nothing solid hides, each direction given to the highest foliage."""
    if all(obstacle.cover != "foliage" for obstacle in skyline.obstacles):
        return _region(obstacle_curves((), ()), np.array([0.0, 360.0]), [])
    solid_curves, solid_bands = _solid_bands(skyline)
    curves, bands = _foliage_bands(skyline.obstacles, solid_curves)
    breaks_deg = _all_breaks(curves, solid_bands + bands)
    solid = _remaining(curves, solid_bands, breaks_deg)
    parts = []
    for leaves in _remaining(curves, bands, breaks_deg):
        parts += [
            (leaves.valid, leaves.upper, 1.0, leaves.obstacle),
            (leaves.valid, leaves.lower, -1.0, leaves.obstacle),
        ]
        for wall in solid:
            common = (
                leaves.valid
                & wall.valid
                & (
                    np.minimum(leaves.upper_deg, wall.upper_deg)
                    > np.maximum(leaves.lower_deg, wall.lower_deg)
                )
            )
            upper = np.where(leaves.upper_deg < wall.upper_deg, leaves.upper, wall.upper)
            lower = np.where(leaves.lower_deg > wall.lower_deg, leaves.lower, wall.lower)
            parts += [(common, upper, -1.0, leaves.obstacle), (common, lower, 1.0, leaves.obstacle)]
    return _region(curves, breaks_deg, parts)


def _hanging(obstacles: Sequence[Obstacle], cover: str) -> list[int]:
    return [i for i, obstacle in enumerate(obstacles) if obstacle.cover == cover and obstacle.hangs_free]


def _solid_bands(skyline: Skyline) -> tuple[Curves, list[_Band]]:
    curves, circle = outline_curves(skyline.outline)
    return _with_hanging(skyline.obstacles, "solid", curves, [_Band(top=circle, bottom=None)])


def _foliage_bands(obstacles: Sequence[Obstacle], before: Curves) -> tuple[Curves, list[_Band]]:
    """Bands of foliage, their curves behind those of another table."""
    standing = [i for i, one in enumerate(obstacles) if one.cover == "foliage" and not one.hangs_free]
    own = obstacle_curves(obstacles, standing)
    circle = _shifted(envelope(own, own.obstacle[:-1]), len(before) - 1)
    bands = [_Band(top=circle, bottom=None)] if standing else []
    return _with_hanging(obstacles, "foliage", join_curves(before, own), bands)


def _with_hanging(
    obstacles: Sequence[Obstacle], cover: str, curves: Curves, bands: list[_Band]
) -> tuple[Curves, list[_Band]]:
    for index in _hanging(obstacles, cover):
        edges = []
        for underside in (False, True):
            own = obstacle_curves(obstacles, [index], underside=underside)
            edges.append(_shifted(circle_of(own), len(curves) - 1))
            curves = join_curves(curves, own)
        bands.append(_Band(top=edges[0], bottom=edges[1]))
    return curves, bands


def _shifted(circle: Circle, by: int) -> Circle:
    return Circle(start_deg=circle.start_deg, curve=np.where(circle.curve < 0, -1, circle.curve + by))


def _all_breaks(curves: Curves, bands: list[_Band]) -> FloatArray:
    """Azimuths between which no two edges start, end or cross."""
    circles = [circle for band in bands for circle in (band.top, band.bottom) if circle is not None]
    breaks_deg = distinct(np.concatenate([circle.start_deg for circle in circles] + [np.array([360.0])]))
    start_deg, end_deg = breaks_deg[:-1], breaks_deg[1:]
    found = [breaks_deg]
    for one, other in combinations([circle.curve_at(start_deg) for circle in circles], 2):
        both = np.flatnonzero((one >= 0) & (other >= 0))
        if both.size:
            found.append(
                crossing_azimuths(curves, one[both], other[both], start_deg[both], end_deg[both]).ravel()
            )
    return distinct(np.concatenate(found))


def _remaining(curves: Curves, bands: list[_Band], breaks_deg: FloatArray) -> list[_Interval]:
    """What every band keeps once the higher ones have taken theirs."""
    start_deg, middle_deg = breaks_deg[:-1], 0.5 * (breaks_deg[:-1] + breaks_deg[1:])
    nothing = np.full(len(start_deg), -1)
    tops = [band.top.curve_at(start_deg) for band in bands]
    bottoms = [nothing if band.bottom is None else band.bottom.curve_at(start_deg) for band in bands]
    top_deg = [edge_elevation(curves, curve, middle_deg) for curve in tops]
    bottom_deg = [edge_elevation(curves, curve, middle_deg) for curve in bottoms]
    remaining = []
    for this, curve in enumerate(tops):
        upper, upper_deg = curve, top_deg[this]
        for other in range(len(bands)):
            lead_deg = top_deg[other] - top_deg[this]
            is_higher = np.where(np.abs(lead_deg) < SAME_EDGE_DEG, other < this, lead_deg > 0.0)
            cuts = is_higher & (bottom_deg[other] < upper_deg) & (top_deg[other] > NOTHING_DEG)
            upper, upper_deg = (
                np.where(cuts, bottoms[other], upper),
                np.where(cuts, bottom_deg[other], upper_deg),
            )
        remaining.append(
            _Interval(
                valid=(curve >= 0) & (upper_deg > bottom_deg[this]),
                upper=upper,
                lower=bottoms[this],
                upper_deg=upper_deg,
                lower_deg=bottom_deg[this],
                obstacle=curves.obstacle[curve],
            )
        )
    return remaining


def _region(
    curves: Curves,
    breaks_deg: FloatArray,
    parts: list[tuple[NDArray[np.bool_], IndexArray, float, IndexArray]],
) -> Region:
    pieces = [
        (np.flatnonzero(valid & (curve >= 0)), curve, sign, owner) for valid, curve, sign, owner in parts
    ]
    kept = [np.empty(0, dtype=np.int64), *(which for which, *_ in pieces)]
    which = np.concatenate(kept)
    none = np.empty(0, dtype=np.int64)
    return Region(
        curves=curves,
        start_deg=breaks_deg[:-1][which],
        end_deg=breaks_deg[1:][which],
        curve=np.concatenate([none, *(curve[rows] for rows, curve, _, _ in pieces)]),
        sign=np.concatenate([np.empty(0), *(np.full(len(rows), sign) for rows, _, sign, _ in pieces)]),
        obstacle=np.concatenate([none, *(owner[rows] for rows, _, _, owner in pieces)]),
    )
