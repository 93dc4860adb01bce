"""Heights on a grid, laid out about the antenna: which cell lies where along a ray."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.horizon.curves import FloatArray, IndexArray

__all__ = ["LOWEST_M", "MISSING_M", "HeightArray", "HeightGrid", "Rays", "rays_of", "surface_m"]

HeightArray = NDArray[np.float32]

LOWEST_M = -500.0  # no land lies lower
MISSING_M = -1e9  # height of what is not known: so low that nothing interpolated from it is seen


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class HeightGrid:
    """Heights about the antenna, linear along the lines of the grid and bilinear within its cells.

    Attributes
    ----------
    height_m : array, shape (row, column), 32-bit floats
        Heights of the nodes, `MISSING_M` where there are none, as all along the border.
    terms : array, shape (2, power, power)
        Column and row of a place as a polynomial in its east and north from the antenna, along the ground
        and in units of `unit_m`: the sum of terms[., i, j] east**i north**j.
    unit_m : float
        The distance that the polynomial takes as 1.
    cell_m : float
        The shorter side of the smallest cell.
    """

    height_m: HeightArray
    terms: FloatArray
    unit_m: float
    cell_m: float


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Rays:
    """Rays from the antenna: columns and rows of a grid as polynomials in the distance.

    Attributes
    ----------
    terms : array, shape (power, 2, ray)
        Column and row, by powers of the distance in `unit_m`.
    """

    terms: FloatArray
    unit_m: float

    def at(self, ray: IndexArray, distance_m: FloatArray) -> FloatArray:
        """Columns and rows of places, shape (2, ...): the rays along the last axis of the distances."""
        along = distance_m / self.unit_m
        terms = self.terms[:, :, ray]
        terms = terms.reshape(*terms.shape[:2], *(1,) * (along.ndim - 1), terms.shape[2])
        place = terms[-1] * along
        for term in terms[-2:0:-1]:
            place += term
            place *= along
        return np.asarray(place + terms[0])


def rays_of(grid: HeightGrid, azimuth_deg: ArrayLike) -> Rays:
    """Rays toward azimuths, straight over the ground and therefore slightly bent on the grid."""
    azimuth_rad = np.deg2rad(azimuth_deg)
    east, north = np.sin(azimuth_rad), np.cos(azimuth_rad)
    powers = grid.terms.shape[-1]
    terms = np.zeros((powers, 2, np.size(azimuth_rad)))
    for i in range(powers):
        for j in range(powers - i):
            terms[i + j] += grid.terms[:, i, j, None] * (east**i * north**j)
    return Rays(terms=terms, unit_m=grid.unit_m)


def surface_m(grid: HeightGrid, place: FloatArray) -> FloatArray:
    """Bilinear heights at columns and rows, shape (2, ...); far below everything where they are missing."""
    rows, columns = grid.height_m.shape
    column = np.clip(place[0], 0.0, columns - 1.001)
    row = np.clip(place[1], 0.0, rows - 1.001)
    left, upper = column.astype(np.int64), row.astype(np.int64)
    column -= left
    row -= upper
    height_m = grid.height_m.ravel()
    node = upper * columns + left
    before = height_m.take(node) * (1.0 - column) + height_m.take(node + 1) * column
    node += columns
    behind = height_m.take(node) * (1.0 - column) + height_m.take(node + 1) * column
    return np.asarray(before * (1.0 - row) + behind * row)
