"""Tiles of one grid put together, so that the ground runs on across their seams."""

from collections.abc import Sequence

import numpy as np

from siteassess.horizon.terrain.height_grid import MISSING_M, HeightGrid
from siteassess.horizon.terrain.raster import Tile

__all__ = ["height_grids"]

ONE_NODE = 0.01  # tiles whose nodes fall together to this many cells are of one grid


def height_grids(tiles: Sequence[Tile]) -> tuple[HeightGrid, ...]:
    """The ground of all tiles: one grid for those of one reference system, cell size and alignment.

    Where tiles of one grid overlap, the earlier one counts if it has a height there.
    """
    groups: list[list[Tile]] = []
    for tile in tiles:
        if tile.height_m.size:
            group = next((group for group in groups if _is_of_one_grid(group[0], tile)), None)
            if group is None:
                groups.append([tile])
            else:
                group.append(tile)
    return tuple(_joined(group) for group in groups)


def _shift(tile: Tile, other: Tile) -> tuple[float, float]:
    """Columns and rows to add to those of a tile for those of another."""
    column, row = (other.layout.terms[:, 0, 0] - tile.layout.terms[:, 0, 0]).tolist()
    return column, row


def _is_of_one_grid(tile: Tile, other: Tile) -> bool:
    return tile.grid == other.grid and all(abs(x - round(x)) < ONE_NODE for x in _shift(tile, other))


def _joined(tiles: Sequence[Tile]) -> HeightGrid:
    """Counted in the columns and rows of the first, with a border of missing nodes all round."""
    begins = []
    for tile in tiles:
        column, row = (round(x) for x in _shift(tile, tiles[0]))
        begins.append((tile.first[0] + column, tile.first[1] + row))
    left, top = (min(begin[axis] for begin in begins) for axis in (0, 1))
    right = max(begin[0] + tile.height_m.shape[1] for begin, tile in zip(begins, tiles, strict=True))
    bottom = max(begin[1] + tile.height_m.shape[0] for begin, tile in zip(begins, tiles, strict=True))
    height_m = np.full((bottom - top + 2, right - left + 2), MISSING_M, dtype=np.float32)
    for (column, row), tile in reversed(list(zip(begins, tiles, strict=True))):
        rows, columns = tile.height_m.shape
        part = height_m[row - top + 1 :, column - left + 1 :][:rows, :columns]
        np.copyto(part, tile.height_m, where=tile.height_m > MISSING_M)
    terms = tiles[0].layout.terms.copy()
    terms[:, 0, 0] += (1 - left, 1 - top)
    return HeightGrid(
        height_m=height_m, terms=terms, unit_m=tiles[0].layout.unit_m, cell_m=tiles[0].layout.cell_m
    )
