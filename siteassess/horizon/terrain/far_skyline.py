"""The skyline that heights on a grid form, found by ruling out ground that cannot reach it.

The ground is cut into beams, each beam into rings. The highest node about a ring bounds from above what may
be seen of it; ground that is seen already bounds the skyline from below. Rings that cannot reach it are
dropped, the others are cut finer, and what is left is evaluated where rays cross the lines of the grid.
"""

from dataclasses import dataclass

import numpy as np

from siteassess.horizon.curves import FloatArray, IndexArray
from siteassess.horizon.terrain.grid_lines import grid_line_crossings
from siteassess.horizon.terrain.height_grid import LOWEST_M, HeightGrid, Rays, rays_of, surface_m
from siteassess.horizon.terrain.highest import Highest, block_level, highest_of

__all__ = ["EARTH_RADIUS_M", "NOTHING_TANGENT", "RAYS", "FarSkyline", "far_skyline", "no_skyline", "tangent"]

# Radius of the Earth over which rays run straight in a standard atmosphere: 4/3 of 6 371 km, rounded [P.526].
EARTH_RADIUS_M = 8_500_000.0
RAYS, NARROW_BEAMS, WIDE_BEAMS = 2880, 1440, 360  # each a multiple of the next
NOTHING_TANGENT = -1e3  # lower than any ground, higher than what missing heights give
TRIALS = 4  # places along a ring where the surface is tried
SHORTEST_CELLS = 2.0  # rings are no shorter
HIGHEST_BULGE_CELLS = 0.15  # a cell whose corners leave the plane by more is a cliff
FARTHEST_BULGE_CELLS = 150.0  # farther away that is less than 0.06 degrees
BESIDE_CELLS = np.array([[-0.5], [-0.25], [0.25], [0.5]])


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class FarSkyline:
    """What is seen along `RAYS` rays, evenly spread, the first toward north.

    Attributes
    ----------
    tangent : array, shape (ray,)
        Tangent of the elevation of the highest ground; `NOTHING_TANGENT` where there is none.
    distance_m : array, shape (ray,)
        Its distance over the ground.
    """

    tangent: FloatArray
    distance_m: FloatArray

    def raise_to(self, ray: IndexArray, tangent: FloatArray, distance_m: FloatArray) -> None:
        """What is seen with more ground; rays may stand there several times."""
        np.maximum.at(self.tangent, ray, tangent)
        highest = tangent == self.tangent[ray]
        self.distance_m[ray[highest]] = distance_m[highest]

    def lowest(self, beams: int) -> FloatArray:
        """Smallest tangent within each beam."""
        return np.asarray(self.tangent.reshape(beams, -1).min(axis=1))


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Ground:
    grid: HeightGrid
    eye_m: float
    rays: Rays
    highest: Highest


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Rings:
    """Beams, and the edges of the rings that they are cut into."""

    beams: int
    edge_m: FloatArray

    @property
    def middle_m(self) -> FloatArray:
        return 0.5 * (self.edge_m[1:] + self.edge_m[:-1])


def no_skyline() -> FarSkyline:
    """The skyline of nothing."""
    return FarSkyline(tangent=np.full(RAYS, NOTHING_TANGENT), distance_m=np.full(RAYS, np.nan))


def tangent(height_m: FloatArray, distance_m: FloatArray, eye_m: float) -> FloatArray:
    """Tangent of the elevation at which ground is seen, above the horizontal at the eye.

    Examples
    --------
    >>> drop_m = -10_000.0 * tangent(np.array(100.0), np.array(10_000.0), 100.0)
    >>> round(float(drop_m), 2)
    5.88
    """
    return np.asarray((height_m - eye_m) / distance_m - distance_m * (0.5 / EARTH_RADIUS_M))


def far_skyline(
    grid: HeightGrid, eye_m: float, nearest_m: float, reach_m: float, before: FarSkyline
) -> FarSkyline:
    """What is seen with one more grid.

    Parameters
    ----------
    grid : HeightGrid
        The ground.
    eye_m : float
        Height of the antenna's phase centre, in the heights of the grid.
    nearest_m, reach_m : float
        Distances over the ground between which it counts.
    before : FarSkyline
        What is seen without it.
    """
    wide, narrow = _rings(grid, nearest_m, reach_m)
    ground = _Ground(
        grid=grid,
        eye_m=eye_m,
        rays=rays_of(grid, np.arange(RAYS) * (360.0 / RAYS)),
        highest=highest_of(grid.height_m, int(_level(grid, wide).max())),
    )
    seen = FarSkyline(tangent=before.tangent.copy(), distance_m=before.distance_m.copy())
    every = np.arange(RAYS)
    _try_surface(ground, seen, every, np.repeat([[nearest_m], [reach_m]], RAYS, axis=1))

    rings = len(wide.edge_m) - 1
    beam, ring, _ = _contenders(ground, seen, wide, *np.divmod(np.arange(WIDE_BEAMS * rings), rings))
    beam, ring, bound = _contenders(ground, seen, narrow, *_cut(wide, narrow, beam, ring))

    per_beam = RAYS // NARROW_BEAMS
    ray = (beam[:, None] * per_beam + np.arange(per_beam)).ravel()
    left = np.flatnonzero(np.repeat(bound, per_beam) > seen.tangent[ray])
    ray, ring = ray[left], np.repeat(ring, per_beam)[left]
    pieces = narrow.edge_m[ring], narrow.edge_m[ring + 1]
    crossings = grid_line_crossings(grid, ground.rays, ray, *pieces)
    tangents = [tangent(crossing.height_m, crossing.distance_m, eye_m) for crossing in crossings]
    for crossing, found in zip(crossings, tangents, strict=True):
        seen.raise_to(crossing.ray, found, crossing.distance_m)
    # Between the lines a bilinear surface may bulge: look for it beside the highest crossings, then closer.
    for crossing, found in zip(crossings, tangents, strict=True):
        away_cells = crossing.distance_m / grid.cell_m
        bulge = np.where(away_cells < FARTHEST_BULGE_CELLS, HIGHEST_BULGE_CELLS / away_cells, 0.0)
        high = np.flatnonzero(found >= seen.tangent[crossing.ray] - bulge)
        beside_m = crossing.distance_m[high] + BESIDE_CELLS * grid.cell_m
        _try_surface(ground, seen, crossing.ray[high], np.clip(beside_m, nearest_m, reach_m))
    met = np.flatnonzero(seen.tangent > before.tangent)
    for step_m in (grid.cell_m / 8.0, grid.cell_m / 16.0):
        beside_m = seen.distance_m[met] + np.array([[-step_m], [step_m]])
        _try_surface(ground, seen, met, np.clip(beside_m, nearest_m, reach_m))
    return _without_missing(seen, before, eye_m)


def _without_missing(seen: FarSkyline, before: FarSkyline, eye_m: float) -> FarSkyline:
    """Rays that met nothing but what was interpolated from missing heights met nothing."""
    height_m = eye_m + seen.distance_m * (seen.tangent + seen.distance_m * (0.5 / EARTH_RADIUS_M))
    met = height_m >= LOWEST_M  # not where the distance is NaN
    return FarSkyline(
        tangent=np.where(met, seen.tangent, before.tangent),
        distance_m=np.where(met, seen.distance_m, before.distance_m),
    )


def _rings(grid: HeightGrid, nearest_m: float, reach_m: float) -> tuple[_Rings, _Rings]:
    """Rings of wide beams, about as long as wide, and rings of narrow ones, cut from them."""
    shortest_m = SHORTEST_CELLS * grid.cell_m
    edges = [nearest_m]
    while edges[-1] < reach_m:
        edges.append(edges[-1] + max(shortest_m, edges[-1] * 2.0 * np.pi / WIDE_BEAMS))
    edges[-1] = reach_m
    edge_m = np.array(edges)
    ideal_m = np.maximum(shortest_m, edge_m[:-1] * 2.0 * np.pi / NARROW_BEAMS)
    parts = np.maximum(np.round(np.diff(edge_m) / ideal_m), 1).astype(np.int64)
    ring, part = _counted(parts)
    finer_m = edge_m[ring] + np.diff(edge_m)[ring] * (part / parts[ring])
    return (
        _Rings(beams=WIDE_BEAMS, edge_m=edge_m),
        _Rings(beams=NARROW_BEAMS, edge_m=np.append(finer_m, reach_m)),
    )


def _cut(wide: _Rings, narrow: _Rings, beam: IndexArray, ring: IndexArray) -> tuple[IndexArray, IndexArray]:
    """Beams and rings of the narrow beams that rings of wide ones are cut into, by beam."""
    first = np.searchsorted(narrow.edge_m, wide.edge_m)
    per_beam = narrow.beams // wide.beams
    parent, child = _counted(np.diff(first)[ring] * per_beam)
    beam, ring = beam[parent] * per_beam + child % per_beam, first[ring[parent]] + child // per_beam
    order = np.argsort(beam, kind="stable")
    return beam[order], ring[order]


def _counted(count: IndexArray) -> tuple[IndexArray, IndexArray]:
    """For counts 2, 0, 3: whose turn it is, 0 0 2 2 2, and which of its turns, 0 1 0 1 2."""
    owner = np.repeat(np.arange(len(count)), count)
    return owner, np.arange(len(owner)) - np.repeat(np.cumsum(count) - count, count)


def _level(grid: HeightGrid, rings: _Rings) -> IndexArray:
    """Level of the blocks that hold a ring of a beam, whatever way it lies on the grid."""
    per_beam = RAYS // rings.beams
    width_m = rings.edge_m[1:] * (2.0 * np.pi / rings.beams) * (1.0 - 1.0 / per_beam)
    return block_level(0.5 * np.hypot(np.diff(rings.edge_m), width_m) / grid.cell_m)


def _contenders(
    ground: _Ground, seen: FarSkyline, rings: _Rings, beam: IndexArray, ring: IndexArray
) -> tuple[IndexArray, IndexArray, FloatArray]:
    """Those of the rings, ascending by beam, that may reach the skyline, and how high each may reach.

    The most promising ring of each beam is tried on the way, which raises what is seen.
    """
    per_beam, edge_m, middle_m = RAYS // rings.beams, rings.edge_m, rings.middle_m
    centre_deg = (np.arange(rings.beams) + 0.5 - 0.5 / per_beam) * (360.0 / rings.beams)
    place = rays_of(ground.grid, centre_deg).at(beam, middle_m[ring])
    above_m = ground.highest.about(place, _level(ground.grid, rings)[ring]) - ground.eye_m
    nearer_m, farther_m = edge_m[:-1][ring], edge_m[1:][ring]
    bound = above_m / np.where(above_m > 0.0, nearer_m, farther_m) - nearer_m * (0.5 / EARTH_RADIUS_M)
    left = np.flatnonzero(bound > seen.lowest(rings.beams)[beam])
    beam, ring, bound = beam[left], ring[left], bound[left]
    if not len(left):
        return beam, ring, bound

    promise = tangent(_nearest_node_m(ground.grid, place[:, left]), middle_m[ring], ground.eye_m)
    first = np.flatnonzero(np.append(True, beam[1:] != beam[:-1]))
    best = np.repeat(np.maximum.reduceat(promise, first), np.diff(np.append(first, len(left))))
    tried = np.flatnonzero(promise == best)
    ray = (beam[tried, None] * per_beam + np.arange(per_beam)).ravel()
    edge = np.repeat(ring[tried], per_beam)
    part = ((np.arange(TRIALS) + 0.5) / TRIALS)[:, None]
    _try_surface(ground, seen, ray, edge_m[edge] * (1.0 - part) + edge_m[edge + 1] * part)
    left = np.flatnonzero(bound > seen.lowest(rings.beams)[beam])
    return beam[left], ring[left], bound[left]


def _try_surface(ground: _Ground, seen: FarSkyline, ray: IndexArray, distance_m: FloatArray) -> None:
    """What is seen with the surface at distances, shape (trial, ray)."""
    height_m = surface_m(ground.grid, ground.rays.at(ray, distance_m))
    found = tangent(height_m, distance_m, ground.eye_m)
    best = found.argmax(axis=0), np.arange(len(ray))
    seen.raise_to(ray, found[best], distance_m[best])


def _nearest_node_m(grid: HeightGrid, place: FloatArray) -> FloatArray:
    rows, columns = grid.height_m.shape
    node = (place + 0.5).astype(np.int64)
    column, row = np.clip(node[0], 0, columns - 1), np.clip(node[1], 0, rows - 1)
    return np.asarray(grid.height_m.ravel().take(row * columns + column), dtype=float)
