"""Elevation rasters: the part about the site, with every node that has a height."""

import warnings
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING, Any

import numpy as np

from siteassess.errors import InputError, Mistake
from siteassess.horizon.curves import FloatArray
from siteassess.horizon.terrain.grid_layout import Layout, layout_about
from siteassess.horizon.terrain.height_grid import LOWEST_M, MISSING_M, HeightArray
from siteassess.site_file.model import Position
from siteassess.wording import shown

if TYPE_CHECKING:
    from rasterio.io import DatasetReader

__all__ = ["Tile", "read_tile"]

METRES = {"": 1.0, "m": 1.0, "metre": 1.0, "meter": 1.0, "metres": 1.0, "meters": 1.0}
FEET = {"ft": 0.3048, "foot": 0.3048, "feet": 0.3048, "us survey foot": 1200.0 / 3937.0}
HIGHEST_M = (
    9000.0  # no land lies higher; what does is a mark for missing heights that the file does not declare
)
MOST_CELLS = 64_000_000


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Tile:
    """The part of a raster that lies within reach of the site.

    Attributes
    ----------
    file : str
        Name of the raster.
    grid : tuple
        Reference system, and the vectors that lead from column to column and from row to row: equal for
        tiles of one grid.
    layout : Layout
        Where columns and rows of the whole raster lie.
    height_m : array, shape (row, column)
        `MISSING_M` where there is no height; no rows and columns where the raster ends short of the reach.
    first : tuple of int
        Column and row of its first node in the whole raster.
    holds_site : bool
        Whether the site lies in the raster.
    """

    file: str
    grid: tuple[Any, ...]
    layout: Layout
    height_m: HeightArray
    first: tuple[int, int]
    holds_site: bool


def read_tile(path: Path, position: Position, reach_m: float) -> Tile:
    """The heights of a raster about a site.

    Parameters
    ----------
    path : Path
        A raster of one band.
    position : Position
        The site.
    reach_m : float
        Distance from it that is read.

    Raises
    ------
    InputError
        If the library is not there, or the file does not hold heights at known places.
    """
    try:
        import rasterio
        from rasterio.errors import NotGeoreferencedWarning, RasterioError, RasterioIOError
    except ImportError as error:
        raise _refusal(path, "needs an extra library", 'pip install "siteassess[terrain]"') from error
    if not path.is_file():
        raise _refusal(path, "there is no such file", f"it was looked for as {path}")
    try:
        with warnings.catch_warnings():
            warnings.simplefilter("ignore", NotGeoreferencedWarning)
            dataset = rasterio.open(path)
    except RasterioIOError as error:
        raise _refusal(path, "is no raster that can be read", "it must be one such as GeoTIFF") from error
    with dataset:
        metres = _metres(path, dataset)
        size = dataset.width, dataset.height
        layout = layout_about(dataset.crs.to_wkt(), dataset.transform, size, position, reach_m, path.name)
        column, row = layout.terms[:, 0, 0].tolist()
        first, last = _window(dataset, layout)
        cells = max(last[0] - first[0], 0) * max(last[1] - first[1], 0)
        if cells > MOST_CELLS:
            problem = f"has {cells / 1e6:.0f} million cells within reach_m"
            allowed = f"at most {MOST_CELLS / 1e6:.0f} million can be read; lower reach_m, or give it coarser"
            raise _refusal(path, problem, allowed)
        try:
            height_m = _heights_m(dataset, first, last, metres)
        except RasterioError as error:
            raise _refusal(path, "its heights cannot be read", "the file may be cut off") from error
        return Tile(
            file=path.name,
            grid=(dataset.crs.to_wkt(), *(round(step, 9) for step in _steps(dataset))),
            layout=layout,
            height_m=height_m,
            first=first,
            holds_site=-0.5 <= column <= dataset.width - 0.5 and -0.5 <= row <= dataset.height - 0.5,
        )


def _metres(path: Path, dataset: "DatasetReader") -> float:
    """What the unit of the heights is in metres; refuses what holds no heights."""
    if dataset.crs is None:
        problem, allowed = "has no reference system", "it must say where its cells lie, as a GeoTIFF does"
        raise _refusal(path, problem, allowed)
    if dataset.count != 1:
        raise _refusal(path, f"has {dataset.count} bands", "it must have one, of heights")
    if np.dtype(dataset.dtypes[0]).kind not in "iuf":
        raise _refusal(path, f"holds numbers of type {dataset.dtypes[0]}", "they must be heights")
    unit = (dataset.units[0] or "").strip().lower()
    if unit not in METRES | FEET:
        raise _refusal(path, f"has heights in {shown(unit)}", "they must be in metres or feet")
    return (METRES | FEET)[unit]


def _steps(dataset: "DatasetReader") -> tuple[float, float, float, float]:
    transform = dataset.transform
    return transform.a, transform.b, transform.d, transform.e


def _window(dataset: "DatasetReader", layout: Layout) -> tuple[tuple[int, int], tuple[int, int]]:
    """First node of the part within reach, and the one behind its last, as columns and rows."""
    low, high = layout.bounds()
    size = np.array([dataset.width, dataset.height])
    first = np.clip(np.floor(low).astype(np.int64) - 1, 0, size)
    last = np.clip(np.ceil(high).astype(np.int64) + 2, 0, size)
    return (int(first[0]), int(first[1])), (int(last[0]), int(last[1]))


def _heights_m(
    dataset: "DatasetReader", first: tuple[int, int], last: tuple[int, int], metres: float
) -> HeightArray:
    from rasterio.windows import Window

    columns, rows = last[0] - first[0], last[1] - first[1]
    if columns <= 0 or rows <= 0:
        return np.empty((0, 0), dtype=np.float32)
    read = dataset.read(1, window=Window(*first, columns, rows), masked=True)
    scale, offset = dataset.scales[0] * metres, dataset.offsets[0] * metres
    with np.errstate(invalid="ignore", over="ignore"):
        height_m: FloatArray = read.data * scale + offset
    known = ~np.ma.getmaskarray(read) & (height_m >= LOWEST_M) & (height_m <= HIGHEST_M)
    return np.where(known, height_m, MISSING_M).astype(np.float32)


def _refusal(path: Path, problem: str, allowed: str) -> InputError:
    return InputError(Mistake(file=path.name, where="", problem=problem, allowed=allowed))
