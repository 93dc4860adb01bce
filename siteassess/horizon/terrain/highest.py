"""The highest ground within blocks of a grid, from four nodes a side up to the whole grid."""

from dataclasses import dataclass

import numpy as np

from siteassess.horizon.curves import FloatArray, IndexArray
from siteassess.horizon.terrain.height_grid import MISSING_M, HeightArray

__all__ = ["Highest", "block_level", "highest_of"]

SMALLEST = 2  # level of the smallest blocks: 2**2 nodes a side


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Highest:
    """Highest node among the four blocks that meet at a corner, for blocks of 2**level nodes a side.

    All levels lie in one flat array, so that one look-up serves places of different levels.

    Attributes
    ----------
    height_m : array, shape (corner of any level,)
        Highest nodes.
    start, columns, rows : integer arrays, shape (level,)
        First corner of a level in the flat array, and how many corners it has each way.
    """

    height_m: HeightArray
    start: IndexArray
    columns: IndexArray
    rows: IndexArray

    def about(self, place: FloatArray, level: IndexArray) -> HeightArray:
        """Upper bound of the surface about places.

        Parameters
        ----------
        place : array, shape (2, ...)
            Columns and rows.
        level : integer array
            From `block_level`; broadcasts.
        """
        of_block = 0.5**level
        # Corners lie half a node before the first node of a block: blocks hold whole nodes.
        corner = ((place + 0.5) * of_block + 0.5).astype(np.int64)
        level = level - SMALLEST
        column = np.clip(corner[0] + 1, 0, self.columns[level] - 1)
        row = np.clip(corner[1] + 1, 0, self.rows[level] - 1)
        return np.asarray(self.height_m.take(self.start[level] + row * self.columns[level] + column))


def block_level(radius: FloatArray) -> IndexArray:
    """The level whose four blocks about the nearest corner hold all cells within a radius in cells."""
    # The nearest corner is within half a block; the cell at the rim needs its outer node too.
    return np.maximum(np.ceil(np.log2(2.0 * radius + 1.0)), SMALLEST).astype(np.int64)


def highest_of(height_m: HeightArray, largest: int) -> Highest:
    """The highest ground in blocks of up to 2**largest nodes a side."""
    block = _merged(height_m, 2**SMALLEST)
    levels = []
    for level in range(SMALLEST, max(largest, SMALLEST) + 1):
        if level > SMALLEST:
            block = _merged(block, 2)
        # One more corner on every side, beyond the grid: nothing stands there.
        about = np.full((block.shape[0] + 3, block.shape[1] + 3), MISSING_M, dtype=np.float32)
        about[1:-2, 1:-2] = block
        about[2:-1] = np.maximum(about[2:-1], about[1:-2])
        about[:, 2:-1] = np.maximum(about[:, 2:-1], about[:, 1:-2])
        levels.append(about)
    size = np.array([about.size for about in levels])
    return Highest(
        height_m=np.concatenate([about.ravel() for about in levels]),
        start=np.cumsum(size) - size,
        columns=np.array([about.shape[1] for about in levels]),
        rows=np.array([about.shape[0] for about in levels]),
    )


def _merged(block: HeightArray, count: int) -> HeightArray:
    """The highest of every so many rows and columns; the last ones may be fewer."""
    rows = block[::count].copy()
    for offset in range(1, count):
        other = block[offset::count]
        np.maximum(rows[: len(other)], other, out=rows[: len(other)])
    columns = rows[:, ::count].copy()
    for offset in range(1, count):
        other = rows[:, offset::count]
        np.maximum(columns[:, : other.shape[1]], other, out=columns[:, : other.shape[1]])
    return columns
