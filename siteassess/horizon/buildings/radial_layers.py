"""What hangs free or is made of leaves, cut along the corners' azimuths: layer behind layer, exact.

Between two neighbouring azimuths of corners every line of sight passes the same walls in the same order. The
first and second, the third and fourth bound what is passed; from within an outline the first one alone does.
"""

from dataclasses import dataclass

import numpy as np

from siteassess.horizon.buildings.walls import Walls
from siteassess.horizon.curves import FloatArray, IndexArray

__all__ = ["NOWHERE", "Layers", "count_of_layers", "radial_layers"]

NOWHERE = -1  # wall index of the antenna's own axis, where a layer that surrounds it begins


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Layers:
    """Layers of one outline between neighbouring azimuths; all arrays have shape (layer,).

    Attributes
    ----------
    start_deg, end_deg : array
        Azimuths, ascending.
    rank : integer array
        0 for the nearest layer.
    near, far : integer array
        Index of the walls in front and behind; near is -1 where the layer begins at the antenna.
    """

    start_deg: FloatArray
    end_deg: FloatArray
    rank: IndexArray
    near: IndexArray
    far: IndexArray


def count_of_layers(walls: Walls) -> int:
    """Number of pieces that the walls of one outline are cut into."""
    breaks_deg = _breaks(walls)
    return int(sum((high - low).sum() for low, high in _spans(walls, breaks_deg)))


def radial_layers(walls: Walls, surrounds: bool) -> Layers:
    """The layers of one polygon.

    Parameters
    ----------
    walls : Walls
        Of one part, those seen end on left out.
    surrounds : bool
        Whether the antenna's axis runs through it.
    """
    breaks_deg = _breaks(walls)
    wall, piece = [], []
    for low, high in _spans(walls, breaks_deg):
        count = high - low
        wall.append(np.repeat(np.arange(len(walls)), count))
        piece.append(
            np.arange(count.sum()) - np.repeat(np.cumsum(count) - count, count) + np.repeat(low, count)
        )
    all_wall, all_piece = np.concatenate(wall), np.concatenate(piece)
    middle_deg = 0.5 * (breaks_deg[all_piece] + breaks_deg[all_piece + 1])
    unwrapped_deg = middle_deg + 360.0 * (middle_deg < walls.start_deg[all_wall])
    distance_m = walls.distance_m(all_wall, unwrapped_deg)
    if surrounds:
        pieces = np.arange(len(breaks_deg) - 1)
        all_wall = np.append(all_wall, np.full(len(pieces), NOWHERE))
        all_piece, distance_m = np.append(all_piece, pieces), np.append(distance_m, np.zeros(len(pieces)))
    order = np.lexsort((distance_m, all_piece))
    all_wall, all_piece = all_wall[order], all_piece[order]
    number = np.arange(len(order)) - np.searchsorted(all_piece, all_piece)
    near = np.flatnonzero(number % 2 == 0)
    near = near[near + 1 < len(order)]
    near = near[all_piece[near + 1] == all_piece[near]]
    return Layers(
        start_deg=breaks_deg[all_piece[near]],
        end_deg=breaks_deg[all_piece[near] + 1],
        rank=number[near] // 2,
        near=all_wall[near],
        far=all_wall[near + 1],
    )


def _breaks(walls: Walls) -> FloatArray:
    return np.unique(np.concatenate([walls.start_deg, np.mod(walls.end_deg, 360.0), [0.0, 360.0]]))


def _spans(walls: Walls, breaks_deg: FloatArray) -> list[tuple[IndexArray, IndexArray]]:
    """For each wall, pieces from and up to which it stands, before and beyond north."""
    before = np.minimum(walls.end_deg, 360.0)
    low, high = np.searchsorted(breaks_deg, walls.start_deg), np.searchsorted(breaks_deg, before)
    beyond = np.searchsorted(breaks_deg, np.maximum(walls.end_deg - 360.0, 0.0))
    return [(low, high), (np.zeros_like(beyond), beyond)]
