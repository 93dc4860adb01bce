"""Silhouettes of solid buildings that stand on the ground: the upper envelope of their walls, exact."""

from dataclasses import dataclass

import numpy as np

from siteassess.horizon.buildings.hidden_walls import surely_hidden
from siteassess.horizon.buildings.stretches import unbroken
from siteassess.horizon.buildings.walls import Walls
from siteassess.horizon.curves import Curves, FloatArray, IndexArray, curves_between
from siteassess.horizon.outline import envelope, envelopes

__all__ = ["Edge", "visible_edges"]

LOWEST_DEG = -5.0  # what nowhere rises above this costs nothing


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Edge:
    """An unbroken edge on the sky; arrays have shape (point,).

    Attributes
    ----------
    building : int
        Whose it is.
    azimuth_deg, elevation_deg, distance_m : array
        As in `Obstacle`.
    """

    building: int
    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    distance_m: FloatArray


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Stretches:
    """Parts of walls that form silhouettes, ascending by building and start; shape (stretch,)."""

    wall: IndexArray
    start_deg: FloatArray
    end_deg: FloatArray


def visible_edges(walls: Walls, level_m: FloatArray, screen: FloatArray) -> list[Edge]:
    """Silhouettes of the buildings that are part of the outline anywhere.

    Parameters
    ----------
    walls : Walls
        Of solid buildings that stand on the ground.
    level_m : array, shape (wall,)
        Top of each wall above the antenna.
    screen : array
        What hides other walls for certain, from `screen_tangent`.

    Returns
    -------
    list of Edge
        Ascending by building, then by azimuth. A building whose parts stand in different directions has
        several. Hidden walls of a building take no part.
    """
    walls, level_m = _facing(walls, level_m)
    maybe = ~surely_hidden(walls, level_m, screen)
    shown = _shown_buildings(walls.taken(maybe), level_m[maybe])
    which = np.isin(walls.building, shown)
    if not which.any():
        return []
    walls, level_m = walls.taken(which), level_m[which]
    return _edges(walls, level_m, _stretches(walls, level_m))


def _facing(walls: Walls, level_m: FloatArray) -> tuple[Walls, FloatArray]:
    """Walls that may form a silhouette."""
    # Above the horizon the nearest wall is the highest, and that one shows its outer side.
    high = level_m > np.tan(np.deg2rad(LOWEST_DEG)) * np.maximum(walls.start_m, walls.end_m)
    seen = (walls.faces_antenna | (level_m <= 0.0)) & high & (walls.end_deg > walls.start_deg)
    return walls.taken(seen), level_m[seen]


def _curves(walls: Walls, level_m: FloatArray) -> Curves:
    return curves_between(
        start_deg=walls.start_deg,
        end_deg=walls.end_deg,
        start_elevation_deg=np.rad2deg(np.arctan(level_m / walls.start_m)),
        end_elevation_deg=np.rad2deg(np.arctan(level_m / walls.end_m)),
        straight_in_space=np.ones(len(walls), dtype=np.bool_),
        obstacle=np.arange(len(walls)),
    )


def _shown_buildings(walls: Walls, level_m: FloatArray) -> IndexArray:
    """Buildings that form the common outline anywhere."""
    if not len(walls):
        return np.empty(0, dtype=np.int64)
    curves = _curves(walls, level_m)
    wall = curves.obstacle[envelope(curves, _groups(walls)[curves.obstacle[:-1]]).curve]
    return np.unique(walls.building[wall[wall >= 0]])


def _order(walls: Walls) -> tuple[IndexArray, IndexArray]:
    """Walls ascending by building and azimuth, and the buildings whose walls overlap on the sky."""
    order = np.lexsort((walls.start_deg, walls.building))
    building, start_deg, end_deg = walls.building[order], walls.start_deg[order], walls.end_deg[order]
    same = building[1:] == building[:-1]
    first = np.flatnonzero(np.append(True, ~same))
    last = np.append(first[1:], len(order)) - 1
    overlaps = building[1:][same & (start_deg[1:] < end_deg[:-1])]
    round_north = building[first][end_deg[last] - 360.0 > start_deg[first]]
    return order, np.union1d(overlaps, round_north)


def _groups(walls: Walls) -> IndexArray:
    """A number for each wall; walls of one number do not overlap on the sky."""
    _, folded = _order(walls)
    runs = np.append(
        True,
        (walls.ring[1:] != walls.ring[:-1])
        | (walls.backwards[1:] != walls.backwards[:-1])
        | np.where(
            walls.backwards[1:],
            np.mod(walls.end_deg[1:], 360.0) != walls.start_deg[:-1],
            walls.start_deg[1:] != np.mod(walls.end_deg[:-1], 360.0),
        ),
    )
    run = np.cumsum(runs) - 1
    width_deg = np.bincount(run, weights=walls.end_deg - walls.start_deg)
    # A run that winds round the antenna more than once overlaps itself.
    alone = width_deg[run] > 360.0
    number = np.where(alone, len(run) + np.arange(len(run)), run)
    return np.where(np.isin(walls.building, folded), number, 2 * len(run) + walls.building)


def _stretches(walls: Walls, level_m: FloatArray) -> _Stretches:
    order, folded = _order(walls)
    plain = order[~np.isin(walls.building[order], folded)]
    bent = np.flatnonzero(np.isin(walls.building, folded))
    wall, start_deg, end_deg = plain, walls.start_deg[plain], walls.end_deg[plain]
    if bent.size:
        part = _envelope_stretches(walls.taken(bent), level_m[bent])
        wall = np.append(wall, bent[part[0]])
        start_deg, end_deg = np.append(start_deg, part[1]), np.append(end_deg, part[2])
    order = np.lexsort((start_deg, walls.building[wall]))
    return _Stretches(wall=wall[order], start_deg=start_deg[order], end_deg=end_deg[order])


def _envelope_stretches(walls: Walls, level_m: FloatArray) -> tuple[IndexArray, FloatArray, FloatArray]:
    """Stretches of buildings whose walls cover each other: wall, start and end within 0..360."""
    curves = _curves(walls, level_m)
    own = curves.obstacle[:-1]
    owner, start_deg, curve = envelopes(curves, _groups(walls)[own], walls.building[own])
    end_deg = np.append(start_deg[1:], 360.0)
    end_deg[np.flatnonzero(owner[1:] != owner[:-1])] = 360.0
    wall = np.where(curve < 0, -1, curves.obstacle[curve])
    # Arcs are cut at their tops: neighbours of one wall are one stretch again.
    new = np.append(True, (wall[1:] != wall[:-1]) | (owner[1:] != owner[:-1]))
    wall, start_deg, end_deg = wall[new], start_deg[new], end_deg[np.append(new[1:], True)]
    real = (wall >= 0) & (end_deg > start_deg)
    return wall[real], start_deg[real], end_deg[real]


def _edges(walls: Walls, level_m: FloatArray, stretches: _Stretches) -> list[Edge]:
    wall = stretches.wall
    ends = (stretches.start_deg, stretches.end_deg)
    horizontal_m = np.stack([walls.distance_m(wall, azimuth_deg) for azimuth_deg in ends], axis=1)
    tangent = level_m[wall, None] / horizontal_m
    columns = [np.stack(ends, axis=1), np.rad2deg(np.arctan(tangent)), horizontal_m * np.hypot(1.0, tangent)]
    return [
        Edge(building=building, azimuth_deg=edge[0], elevation_deg=edge[1], distance_m=edge[2])
        for building, edge in unbroken(walls.building[wall], np.stack(columns))
    ]
