"""From the rows of a pattern file to a grid over carrier, azimuth and elevation that covers the sphere."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.antenna.interpolate import even_step_deg
from siteassess.antenna.pattern import FloatArray
from siteassess.decibels import mean_db
from siteassess.errors import Mistake
from siteassess.tables import UserTable

__all__ = [
    "FALL_BELOW_DB_PER_90_DEG",
    "LARGEST_SEAM_DB",
    "PatternGrid",
    "grid_mistakes",
    "grid_of",
    "on_whole_sphere",
    "order_mistakes",
    "sphere_axes",
    "spread_db",
]

WIDEST_ELEVATION_STEP_DEG = 30.0
WIDEST_AZIMUTH_STEP_DEG = 120.0
LARGEST_SEAM_DB = 0.05  # between azimuths 0 and 360, which are one direction
LARGEST_ZENITH_SPREAD_DB = 1.0  # of the cuts at elevation 90, which is one direction too
EVEN = 1e-6  # of a step
FALL_BELOW_DB_PER_90_DEG = 20.0  # own default, where the file ends above the nadir


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class PatternGrid:
    """Axes of a pattern file, and where its rows lie on them.

    Attributes
    ----------
    carrier_hz, azimuth_deg, elevation_deg : array
        Distinct values, ascending. NaN alone when the file has no such column.
    row : integer array, shape (carrier, azimuth, elevation)
        Row of the file for each combination; -1 where there is none.
    """

    carrier_hz: FloatArray
    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    row: NDArray[np.int64]


def grid_of(table: UserTable) -> PatternGrid:
    """Grid that the rows of a file span."""
    count = len(table.line)
    carrier_hz, at_carrier = _axis(table, "carrier_hz")
    azimuth_deg, at_azimuth = _axis(table, "azimuth_deg")
    elevation_deg, at_elevation = _axis(table, "elevation_deg")
    row = np.full((carrier_hz.size, azimuth_deg.size, elevation_deg.size), -1, dtype=np.int64)
    row[at_carrier, at_azimuth, at_elevation] = np.arange(count)
    return PatternGrid(carrier_hz=carrier_hz, azimuth_deg=azimuth_deg, elevation_deg=elevation_deg, row=row)


def order_mistakes(table: UserTable) -> list[Mistake]:
    """The first row that does not ascend in elevation, which is how slips of the pen show."""
    cut = _axis(table, "carrier_hz")[1] * len(table.line) + _axis(table, "azimuth_deg")[1]
    order = np.argsort(cut, kind="stable")
    elevation_deg = table.numbers["elevation_deg"][order]
    falls = np.flatnonzero((np.diff(cut[order]) == 0) & (np.diff(elevation_deg) <= 0.0))
    if not falls.size:
        return []
    before = falls[np.argmin(order[falls + 1])]
    one_cut = [name for name in ("carrier_hz", "azimuth_deg") if name in table.numbers]
    within = f" within one {' and '.join(one_cut)}" if one_cut else ""
    return [
        Mistake(
            file=table.file,
            where=f"line {table.line[order[before + 1]]}, elevation_deg",
            problem=f"is {elevation_deg[before + 1]:g}",
            allowed=f"it must be above {elevation_deg[before]:g}, that of line {table.line[order[before]]}:"
            f" rows ascend in elevation{within}",
            value=float(elevation_deg[before + 1]),
        )
    ]


def grid_mistakes(table: UserTable, grid: PatternGrid) -> list[Mistake]:
    """Holes in the grid, and directions that it leaves out."""
    return [
        *_elevations_left_out(table.file, grid.elevation_deg),
        *_azimuths_left_out(table.file, grid.azimuth_deg),
        *(_holes(table, grid) or [*_open_seam(table, grid), *_uneven_zenith(table, grid)]),
    ]


def sphere_axes(grid: PatternGrid) -> tuple[FloatArray, FloatArray]:
    """Azimuths from 0 to 360 and elevations from -90 to 90, as a `GainPattern` holds them."""
    elevation_deg = grid.elevation_deg
    elevation_deg = np.concatenate([_below_deg(elevation_deg), elevation_deg])
    if np.isnan(grid.azimuth_deg[0]):
        return np.array([0.0, 360.0]), elevation_deg
    return np.unique(np.concatenate([[0.0], grid.azimuth_deg, [360.0]])), elevation_deg


def on_whole_sphere(grid: PatternGrid, levels_dbic: FloatArray) -> FloatArray:
    """Levels of shape (row,) on the axes of :func:`sphere_axes`, shape (carrier, azimuth, elevation)."""
    levels = levels_dbic[grid.row]
    fall_db = FALL_BELOW_DB_PER_90_DEG / 90.0 * (grid.elevation_deg[0] - _below_deg(grid.elevation_deg))
    levels = np.concatenate([levels[..., :1] - fall_db, levels], axis=2)
    levels[..., [0, -1]] = mean_db(levels[..., [0, -1]], axis=1)[:, np.newaxis]
    if np.isnan(grid.azimuth_deg[0]):
        levels = np.repeat(levels, 2, axis=1)
    else:
        levels = _closed(grid.azimuth_deg, levels)
    levels.flags.writeable = False
    return levels


def spread_db(grid: PatternGrid, levels_dbic: FloatArray, elevation_deg: float) -> float:
    """How far the cuts of a file differ at an elevation [dB]; 0 where the file does not have it."""
    levels = levels_dbic[grid.row[..., grid.elevation_deg == elevation_deg]]
    return float(np.max(np.ptp(levels, axis=1))) if levels.size else 0.0


def _below_deg(elevation_deg: FloatArray) -> FloatArray:
    """Elevations from -90 to below the file's first one, in its own step when that leads there."""
    missing_deg = elevation_deg[0] + 90.0
    step_deg = even_step_deg(elevation_deg)
    if missing_deg <= 0.0:
        return np.empty(0)
    if step_deg is None or abs(missing_deg / step_deg - round(missing_deg / step_deg)) > EVEN:
        return np.array([-90.0])
    return np.linspace(-90.0, elevation_deg[0], round(missing_deg / step_deg), endpoint=False)


def _axis(table: UserTable, column: str) -> tuple[FloatArray, NDArray[np.int64]]:
    """Distinct values of a column, and the index of each row's value among them."""
    if column not in table.numbers:
        return np.array([np.nan]), np.zeros(len(table.line), dtype=np.int64)
    return np.unique(table.numbers[column], return_inverse=True)


def _closed(azimuth_deg: FloatArray, levels: FloatArray) -> FloatArray:
    """Levels with cuts at 0 and 360 degrees, where the file lacks them interpolated across north."""
    from_north = azimuth_deg[0] == 0.0
    to_north = azimuth_deg[-1] == 360.0
    if from_north and to_north:
        return levels
    if from_north:
        return np.concatenate([levels, levels[:, :1]], axis=1)
    if to_north:
        return np.concatenate([levels[:, -1:], levels], axis=1)
    before_deg, after_deg = 360.0 - azimuth_deg[-1], azimuth_deg[0]
    north = (levels[:, -1:] * after_deg + levels[:, :1] * before_deg) / (before_deg + after_deg)
    return np.concatenate([north, levels, north], axis=1)


def _holes(table: UserTable, grid: PatternGrid) -> list[Mistake]:
    holes = np.argwhere(grid.row < 0)
    if not holes.size:
        return []
    axes = (grid.carrier_hz, grid.azimuth_deg, grid.elevation_deg)
    first = ", ".join(
        f"{name} {axis[index]:.12g}"
        for name, axis, index in zip(
            ("carrier_hz", "azimuth_deg", "elevation_deg"), axes, holes[0], strict=True
        )
        if name in table.numbers
    )
    further = f", nor for {len(holes) - 1} more directions" if len(holes) > 1 else ""
    return [
        Mistake(
            file=table.file,
            where="",
            problem=f"there is no row for {first}{further}",
            allowed="the grid of directions must be full",
        )
    ]


def _elevations_left_out(file: str, elevation_deg: FloatArray) -> list[Mistake]:
    mistakes = []
    lowest, highest = float(elevation_deg[0]), float(elevation_deg[-1])
    if lowest > 0.0:
        allowed = "it must reach down to 0 at least"
        mistakes.append(_left_out(file, "elevation_deg", f"starts at {lowest:g}", allowed, lowest))
    if highest < 90.0:
        allowed = "it must reach 90"
        mistakes.append(_left_out(file, "elevation_deg", f"ends at {highest:g}", allowed, highest))
    wide = np.flatnonzero(np.diff(elevation_deg) > WIDEST_ELEVATION_STEP_DEG)
    allowed = f"neighbouring elevations must lie at most {WIDEST_ELEVATION_STEP_DEG:g} apart"
    for index in wide:
        problem = f"leaves out {elevation_deg[index]:g} to {elevation_deg[index + 1]:g}"
        mistakes.append(_left_out(file, "elevation_deg", problem, allowed, float(elevation_deg[index])))
    return mistakes


def _azimuths_left_out(file: str, azimuth_deg: FloatArray) -> list[Mistake]:
    if np.isnan(azimuth_deg[0]):
        return []
    following = np.append(azimuth_deg[1:], azimuth_deg[0] + 360.0)
    wide = np.flatnonzero(following - azimuth_deg > WIDEST_AZIMUTH_STEP_DEG)
    allowed = f"neighbouring azimuths must lie at most {WIDEST_AZIMUTH_STEP_DEG:g} apart"
    return [
        _left_out(
            file,
            "azimuth_deg",
            f"leaves out {azimuth_deg[index]:g} to {following[index] % 360.0:g}",
            allowed,
            float(azimuth_deg[index]),
        )
        for index in wide
    ]


def _open_seam(table: UserTable, grid: PatternGrid) -> list[Mistake]:
    if grid.azimuth_deg[0] != 0.0 or grid.azimuth_deg[-1] != 360.0:
        return []
    mistakes = []
    for column in ("gain_dbic", "cross_gain_dbic"):
        if column in table.numbers:
            levels = table.numbers[column][grid.row]
            seam_db = float(np.max(np.abs(levels[:, 0] - levels[:, -1])))
            if seam_db > LARGEST_SEAM_DB:
                problem = f"differs by up to {seam_db:.2f} dB between azimuths 0 and 360"
                mistakes.append(
                    _left_out(table.file, column, problem, "they are one direction and must agree", seam_db)
                )
    return mistakes


def _uneven_zenith(table: UserTable, grid: PatternGrid) -> list[Mistake]:
    spread = spread_db(grid, table.numbers["gain_dbic"], 90.0)
    if spread <= LARGEST_ZENITH_SPREAD_DB:
        return []
    problem = f"differs by up to {spread:.2f} dB between azimuths at elevation 90"
    allowed = f"they are one direction and must agree within {LARGEST_ZENITH_SPREAD_DB:g} dB"
    return [_left_out(table.file, "gain_dbic", problem, allowed, spread)]


def _left_out(file: str, where: str, problem: str, allowed: str, value: float) -> Mistake:
    return Mistake(file=file, where=where, problem=problem, allowed=allowed, value=value)
