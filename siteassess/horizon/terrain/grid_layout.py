"""Where the columns and rows of a raster lie about a site, whatever its reference system."""

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.polynomial.polynomial import polyder, polyval2d

from siteassess.angles import wrap_difference_deg
from siteassess.errors import InputError, Mistake
from siteassess.horizon.curves import FloatArray
from siteassess.site_file.model import Position

if TYPE_CHECKING:
    from affine import Affine

__all__ = ["Layout", "layout_about"]

FITTED, CHECKED = 13, 10  # places each way
HIGHEST_DEGREE = 8
TOLERANCE_CELLS = 0.02


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Layout:
    """Columns and rows, whole numbers at the middle of the cells, as polynomials in east and north.

    Attributes
    ----------
    terms : array, shape (2, power, power)
        As in `HeightGrid`.
    unit_m : float
        The distance that they take as 1: the reach.
    cell_m : float
        The shorter side of the smallest cell within reach.
    """

    terms: FloatArray
    unit_m: float
    cell_m: float

    def bounds(self) -> tuple[FloatArray, FloatArray]:
        """Lowest and highest column and row within reach."""
        angle = np.linspace(0.0, 2.0 * np.pi, 257)
        rim = np.stack([polyval2d(np.sin(angle), np.cos(angle), terms) for terms in self.terms])
        return rim.min(axis=1), rim.max(axis=1)


def layout_about(
    wkt: str, transform: "Affine", size: tuple[int, int], position: Position, reach_m: float, file: str
) -> Layout:
    """The layout of a raster about a site.

    Parameters
    ----------
    wkt : str
        Reference system of the raster.
    transform : Affine
        From columns and rows, counted from the corner of the first cell, to coordinates in that system.
    size : tuple of int
        How many columns and rows it has.
    position : Position
        The site.
    reach_m : float
        Distance over the ground within which it must hold.
    file : str
        Name of the raster, for messages.

    Raises
    ------
    InputError
        If the reference system does not lead to places on the Earth all round the site.
    """
    nodes = np.cos(np.pi * (np.arange(FITTED) + 0.5) / FITTED)
    checks = np.linspace(-1.0, 1.0, CHECKED)
    (east, north), (other_east, other_north) = (
        (values.ravel() for values in np.meshgrid(each, each)) for each in (nodes, checks)
    )
    all_east, all_north = np.append(east, other_east), np.append(north, other_north)
    place = _places(wkt, transform, size, position, reach_m * all_east, reach_m * all_north)
    if place is None or not np.isfinite(place).all():
        raise _refusal(
            file, "does not say where its cells lie about the site", "its reference system does not reach"
        )
    for degree in range(1, HIGHEST_DEGREE + 1):
        terms = _fitted(east, north, place[:, : len(east)], degree)
        found = np.stack([polyval2d(other_east, other_north, one) for one in terms])
        if np.abs(found - place[:, len(east) :]).max() <= TOLERANCE_CELLS:
            return Layout(
                terms=terms, unit_m=reach_m, cell_m=_cell_m(terms, other_east, other_north, reach_m)
            )
    raise _refusal(
        file, "is bent too much about the site", "give it in a projected reference system, or lower reach_m"
    )


def _places(
    wkt: str,
    transform: "Affine",
    size: tuple[int, int],
    position: Position,
    east_m: FloatArray,
    north_m: FloatArray,
) -> FloatArray | None:
    """Columns and rows of places on the ground, shape (2, place)."""
    from pyproj import CRS, Transformer
    from pyproj.exceptions import CRSError, ProjError

    try:
        system = CRS.from_wkt(wkt)
        system = (system.sub_crs_list[0] if system.is_compound else system).to_2d()
        about = CRS.from_dict(
            {
                "proj": "aeqd",
                "lat_0": position.latitude_deg,
                "lon_0": position.longitude_deg,
                "datum": "WGS84",
            }
        )
        x, y = Transformer.from_crs(about, system, always_xy=True).transform(east_m, north_m)
    except (CRSError, ProjError):
        return None
    if system.is_geographic:
        # Longitudes run on through the date line, and are counted so that the site is nearest to the middle.
        middle = transform.a * 0.5 * size[0] + transform.b * 0.5 * size[1] + transform.c
        turns = round((middle - position.longitude_deg) / 360.0)
        x = position.longitude_deg + 360.0 * turns + wrap_difference_deg(x - position.longitude_deg)
    inverse: Any = ~transform
    return (
        np.stack([inverse.a * x + inverse.b * y + inverse.c, inverse.d * x + inverse.e * y + inverse.f]) - 0.5
    )


def _fitted(east: FloatArray, north: FloatArray, place: FloatArray, degree: int) -> FloatArray:
    powers = [(i, j) for i in range(degree + 1) for j in range(degree + 1 - i)]
    columns = np.stack([east**i * north**j for i, j in powers], axis=1)
    found, *_ = np.linalg.lstsq(columns, place.T, rcond=None)
    terms = np.zeros((2, degree + 1, degree + 1))
    for (i, j), pair in zip(powers, found, strict=True):
        terms[:, i, j] = pair
    return terms


def _cell_m(terms: FloatArray, east: FloatArray, north: FloatArray, unit_m: float) -> float:
    """The distance within which no column or row is passed anywhere, at least."""
    steps = [
        np.hypot(*(polyval2d(east, north, polyder(one, axis=axis)) for axis in (0, 1))).max() for one in terms
    ]
    return float(unit_m / max(steps))


def _refusal(file: str, problem: str, allowed: str) -> InputError:
    return InputError(Mistake(file=file, where="", problem=problem, allowed=allowed))
