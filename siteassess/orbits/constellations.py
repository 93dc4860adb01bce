"""Nominal constellations: every slot of a system, filled, from the published tables beside this module."""

import math
from collections.abc import Callable, Mapping, Sequence
from datetime import datetime

import numpy as np
from numpy.typing import NDArray

from siteassess.orbits.elements import CircularOrbits
from siteassess.orbits.secular import secular_rates
from siteassess.orbits.sidereal import SIDEREAL_RATE_DEG_PER_S, days_between, mean_sidereal_angle_deg
from siteassess.tables import packaged_rows

__all__ = ["SYSTEMS", "baseline_gps_orbits", "nominal_orbits"]

SYSTEMS = ("GPS", "Galileo", "GLONASS", "BeiDou")

Row = Mapping[str, str]
FloatArray = NDArray[np.float64]


def nominal_orbits(systems: Sequence[str], start: datetime) -> CircularOrbits:
    """Orbits of the nominal constellations: 27 GPS, 24 Galileo, 24 GLONASS and 30 BeiDou slots.

    Nominal orbits say how often and how long satellites stand where, never at what o'clock.

    Parameters
    ----------
    systems : sequence of str
        Names from `SYSTEMS`; the satellites come in this order.
    start : datetime
        Start of the run, UTC unless it carries a time zone.

    Returns
    -------
    CircularOrbits
        One element a slot.

    Raises
    ------
    ValueError
        If a system has no nominal constellation here.

    References
    ----------
    [SPS PS], [OS SDD], [GLONASS ICD], [BDS OS PS]; the headers of the CSV files tell row by row.

    Examples
    --------
    >>> orbits = nominal_orbits(["GPS", "BeiDou"], datetime(2026, 1, 1))
    >>> len(orbits.satellite), orbits.satellite[0], orbits.satellite[-1]
    (57, 'GPS A1', 'BeiDou GEO 140E')
    """
    for system in systems:
        if system not in SYSTEMS:
            raise ValueError(f"no nominal constellation of {system!r}; there are {', '.join(SYSTEMS)}")
    slots = [
        (system, row) for system in systems for row in _rows(system) if row.get("arrangement") != "baseline"
    ]
    return _orbits(slots, start)


def baseline_gps_orbits(start: datetime) -> CircularOrbits:
    """Orbits of the 24 baseline slots of GPS, without the pairs that replace B1, D2 and F2.

    References
    ----------
    [SPS PS] 2001, Table 3-1.
    """
    return _orbits([("GPS", row) for row in _rows("GPS") if row["arrangement"] != "expanded"], start)


def _rows(system: str) -> tuple[Row, ...]:
    return packaged_rows(f"orbits/{system.lower()}.csv")


def _orbits(slots: Sequence[tuple[str, Row]], start: datetime) -> CircularOrbits:
    def column(name: str) -> FloatArray:
        return np.array([float(row.get(name) or math.nan) for _, row in slots])

    epochs = [datetime.fromisoformat(row["epoch_utc"]) for _, row in slots]
    elapsed_s = np.array([days_between(epoch, start) * 86_400.0 for epoch in epochs])
    node_longitude_deg = column("node_deg") - np.array([mean_sidereal_angle_deg(epoch) for epoch in epochs])
    argument_deg = _published_or(
        column("argument_of_latitude_deg"), column("crossing_longitude_deg") - node_longitude_deg
    )
    argument_rate, node_longitude_rate = _rates_deg_per_s(column)
    return CircularOrbits(
        satellite=tuple(f"{system} {row['slot']}" for system, row in slots),
        system=tuple(system for system, _ in slots),
        orbit_class=tuple(row["orbit_class"] for _, row in slots),
        radius_m=column("radius_m"),
        inclination_deg=column("inclination_deg"),
        node_longitude_deg=(node_longitude_deg + node_longitude_rate * elapsed_s) % 360.0,
        node_longitude_rate_deg_per_s=node_longitude_rate,
        argument_of_latitude_deg=(argument_deg + argument_rate * elapsed_s) % 360.0,
        argument_of_latitude_rate_deg_per_s=argument_rate,
        cycle_s=column("cycle_s"),
    )


def _rates_deg_per_s(column: Callable[[str], FloatArray]) -> tuple[FloatArray, FloatArray]:
    """Rates of the argument of latitude and of the Earth-fixed longitude of the node."""
    secular_argument_rate, secular_node_rate = secular_rates(column("radius_m"), column("inclination_deg"))
    argument_rate = _published_or(360.0 / column("nodal_period_s"), secular_argument_rate)
    node_rate = _published_or(column("node_rate_deg_per_day") / 86_400.0, secular_node_rate)
    # Station keeping holds the ground track: in one turn of the Earth below the node the satellite makes a
    # whole number of revolutions. Free rates would let the track drift away over the decades since the epoch.
    held_rate = -argument_rate / column("held_revolutions_per_day")
    return argument_rate, _published_or(held_rate, node_rate - SIDEREAL_RATE_DEG_PER_S)


def _published_or(published: FloatArray, otherwise: FloatArray) -> FloatArray:
    return np.where(np.isnan(published), otherwise, published)
