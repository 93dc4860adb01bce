"""Gain patterns from the user's own CSV file."""

import os
from dataclasses import replace

import numpy as np

from siteassess.antenna.energy import efficiency
from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.pattern_grid import (
    FALL_BELOW_DB_PER_90_DEG,
    LARGEST_SEAM_DB,
    PatternGrid,
    grid_mistakes,
    grid_of,
    on_whole_sphere,
    order_mistakes,
    sphere_axes,
    spread_db,
)
from siteassess.antenna.polarisation import cross_level_db
from siteassess.antenna.units import unit_hint
from siteassess.decibels import to_db
from siteassess.errors import InputError, Mistake
from siteassess.tables import UserTable, read_user_table

__all__ = ["read_pattern_file"]

REQUIRED = ("elevation_deg", "gain_dbic")
LIMITS = {  # lowest and highest
    "carrier_hz": (1e8, 1e11),
    "azimuth_deg": (0.0, 360.0),
    "elevation_deg": (-90.0, 90.0),
    "gain_dbic": (-100.0, 40.0),
    "cross_gain_dbic": (-100.0, 40.0),
    "axial_ratio_db": (0.0, 100.0),
}
LARGEST_MEAN_GAIN = 1.12  # half a decibel, which careful gain calibrations miss by at most
ROUNDING = 1e-6


def read_pattern_file(path: str | os.PathLike[str]) -> GainPattern:
    """Gain pattern of a CSV file, checked and carried on to the whole sphere.

    Parameters
    ----------
    path : str or path
        Columns `elevation_deg` and `gain_dbic`, and optionally `azimuth_deg`, `carrier_hz` and one of
        `cross_gain_dbic` and `axial_ratio_db`. Every carrier has the same azimuths, every azimuth the same
        elevations, ascending.

    Returns
    -------
    GainPattern
        Its remarks say what had to be assumed.

    Raises
    ------
    InputError
        With all the mistakes of the first check that finds any: cells, their order, the grid, the energy.
    """
    table = read_user_table(path, numbers=tuple(LIMITS), required=REQUIRED)
    _refuse(*_given_twice(table), *table.mistakes, *_cell_mistakes(table))
    _refuse(*order_mistakes(table))
    grid = grid_of(table)
    _refuse(*grid_mistakes(table, grid))
    pattern = _pattern(table, grid)
    mean_gains = {float(carrier_hz): efficiency(pattern, carrier_hz) for carrier_hz in pattern.carrier_hz}
    hint = unit_hint(table.numbers["gain_dbic"], max(mean_gains.values()))
    _refuse(*_energy_mistakes(pattern, mean_gains, hint))
    return replace(pattern, remarks=_remarks(pattern, table, grid, mean_gains, hint))


def _refuse(*mistakes: Mistake) -> None:
    if mistakes:
        raise InputError(*mistakes)


def _given_twice(table: UserTable) -> list[Mistake]:
    if not {"cross_gain_dbic", "axial_ratio_db"} <= table.numbers.keys():
        return []
    return [
        Mistake(
            file=table.file,
            where="",
            problem="has both cross_gain_dbic and axial_ratio_db",
            allowed="they say the same thing twice: keep one",
        )
    ]


def _cell_mistakes(table: UserTable) -> list[Mistake]:
    mistakes = []
    unreadable = {mistake.where for mistake in table.mistakes}
    for column, values in table.numbers.items():
        lowest, highest = LIMITS[column]
        for row in np.flatnonzero(~((values >= lowest) & (values <= highest))):
            where, value = f"line {table.line[row]}, {column}", float(values[row])
            if where in unreadable:
                continue
            problem, allowed = f"is {value:.12g}", f"it must lie from {lowest:.12g} to {highest:.12g}"
            if np.isnan(value):
                problem, allowed = "is blank", "fill every row, or leave the column out"
            mistakes.append(
                Mistake(file=table.file, where=where, problem=problem, allowed=allowed, value=value)
            )
    return mistakes


def _pattern(table: UserTable, grid: PatternGrid) -> GainPattern:
    azimuth_deg, elevation_deg = sphere_axes(grid)
    co_dbic, cross_dbic = table.numbers["gain_dbic"], table.numbers.get("cross_gain_dbic")
    if "axial_ratio_db" in table.numbers:
        cross_dbic = co_dbic + cross_level_db(table.numbers["axial_ratio_db"])
    return GainPattern(
        name=table.file,
        carrier_hz=grid.carrier_hz,
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        gain_dbic=on_whole_sphere(grid, co_dbic),
        cross_gain_dbic=None if cross_dbic is None else on_whole_sphere(grid, cross_dbic),
        rests_on=f"the file {table.file}",
    )


def _energy_mistakes(pattern: GainPattern, mean_gains: dict[float, float], hint: str | None) -> list[Mistake]:
    columns = "gain_dbic" if pattern.cross_gain_dbic is None else "gain_dbic plus its cross-polar part"
    return [
        Mistake(
            file=pattern.name,
            where=columns,
            problem=f"has a mean of {to_db(mean_gain):.2f} dB over the sphere{_at(carrier_hz)}",
            allowed=f"it must be at most {to_db(LARGEST_MEAN_GAIN):.2f} dB, because no antenna sends out more"
            f" power than it is fed{f' ({hint})' if hint else ''}",
            value=mean_gain,
        )
        for carrier_hz, mean_gain in mean_gains.items()
        if mean_gain > LARGEST_MEAN_GAIN
    ]


def _remarks(
    pattern: GainPattern,
    table: UserTable,
    grid: PatternGrid,
    mean_gains: dict[float, float],
    hint: str | None,
) -> tuple[str, ...]:
    remarks = [
        f"The pattern's mean over the sphere{_at(carrier_hz)} is {to_db(mean_gain):.2f} dB; more than 0 dB is"
        " more power than the antenna is fed, so its gains are probably that much too high."
        for carrier_hz, mean_gain in mean_gains.items()
        if mean_gain > 1.0 + ROUNDING
    ]
    if hint:
        highest = to_db(max(mean_gains.values()))
        remarks.append(f"The pattern's mean over the sphere is {highest:.2f} dB: {hint}.")
    lowest_deg = float(grid.elevation_deg[0])
    if lowest_deg > -90.0:
        remarks.append(
            f"The pattern ends at elevation {lowest_deg:g}; below, the gain is assumed to fall by"
            f" {FALL_BELOW_DB_PER_90_DEG:g} dB in 90 degrees."
        )
    for elevation_deg, name in ((90.0, "zenith"), (-90.0, "nadir")):
        spread = spread_db(grid, table.numbers["gain_dbic"], elevation_deg)
        if spread > LARGEST_SEAM_DB:
            remarks.append(
                f"The pattern's cuts differ by up to {spread:.2f} dB at the {name}, which is one direction;"
                " their mean is used there."
            )
    missing = 1.0 - min(mean_gains.values())
    if pattern.cross_gain_dbic is None and missing > ROUNDING:
        remarks.append(
            f"The pattern names no cross-polar gain: {missing:.0%} of the power is loss or cross-polar,"
            " unknown, and its noise is taken at 290 K."
        )
    return tuple(remarks)


def _at(carrier_hz: float) -> str:
    return "" if np.isnan(carrier_hz) else f" at {carrier_hz / 1e6:.10g} MHz"
