"""Where rays cross the lines of a grid of heights: between these the ground is smooth."""

from dataclasses import dataclass

import numpy as np

from siteassess.horizon.curves import FloatArray, IndexArray
from siteassess.horizon.terrain.height_grid import HeightGrid, Rays

__all__ = ["Crossings", "grid_line_crossings"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Crossings:
    """Crossings, shape (crossing,): whose ray, how far, and how high the ground is there."""

    ray: IndexArray
    distance_m: FloatArray
    height_m: FloatArray


def grid_line_crossings(
    grid: HeightGrid, rays: Rays, ray: IndexArray, from_m: FloatArray, to_m: FloatArray
) -> list[Crossings]:
    """Crossings of pieces of rays with the columns of a grid, then with its rows.

    Parameters
    ----------
    grid : HeightGrid
        The ground.
    rays : Rays
        All rays.
    ray, from_m, to_m : array, shape (piece,)
        Rays, and stretches of them that are so short that they are straight on the grid.
    """
    begin, end = rays.at(ray, from_m), rays.at(ray, to_m)
    rows, columns = grid.height_m.shape
    crossings = []
    for across, along, lines, places, line_step, place_step in (
        (0, 1, columns, rows, 1, columns),
        (1, 0, rows, columns, columns, 1),
    ):
        low, high = np.minimum(begin[across], end[across]), np.maximum(begin[across], end[across])
        first = np.ceil(np.clip(low, 0.0, lines)).astype(np.int64)
        count = np.maximum(np.floor(np.clip(high, -1.0, lines - 1)).astype(np.int64) - first + 1, 0)
        piece = np.repeat(np.arange(len(count)), count)
        line = np.arange(len(piece)) - np.repeat(np.cumsum(count) - count - first, count)
        step = end[across] - begin[across]
        step[step == 0.0] = 1.0  # runs along the line: its beginning will do
        part = (line - begin[across][piece]) / step[piece]
        place = begin[along][piece] + part * (end[along] - begin[along])[piece]
        place = np.clip(place, 0.0, places - 1.001)
        before = place.astype(np.int64)
        place -= before
        node = line * line_step + before * place_step
        height_m = grid.height_m.ravel()
        crossings.append(
            Crossings(
                ray=ray[piece],
                distance_m=from_m[piece] + part * (to_m - from_m)[piece],
                height_m=height_m.take(node) * (1.0 - place) + height_m.take(node + place_step) * place,
            )
        )
    return crossings
