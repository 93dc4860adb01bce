from datetime import datetime
from typing import Any

import numpy as np
import pytest

from siteassess.orbits.constellations import SYSTEMS, baseline_gps_orbits, nominal_orbits
from siteassess.orbits.elements import CircularOrbits
from siteassess.orbits.sidereal import mean_sidereal_angle_deg

GPS_EPOCH = datetime(1993, 7, 1)
MEASURED = datetime(2021, 12, 12, 0, 19, 42)  # 00:20:00 GPS time
TWO_HUNDREDTHS_DEG = 0.02
THREE_DEG = 3.0


def apart_deg(first: Any, second: Any) -> Any:
    return np.abs((np.asarray(first) - np.asarray(second) + 180.0) % 360.0 - 180.0)


def crossing_deg(orbits: CircularOrbits, satellite: str) -> float:
    """Longitude where the ground track crosses northward, modulo 180, for two revolutions a day."""
    row = orbits.satellite.index(satellite)
    return float((orbits.node_longitude_deg[row] + orbits.argument_of_latitude_deg[row] / 2) % 180)


def test_number_of_slots_by_system_and_orbit_class() -> None:
    # Authority: SPS PS 2008 (27 slots in the expanded arrangement), OS SDD, GLONASS ICD 5.1, BDS OS PS 3.0.
    orbits = nominal_orbits(SYSTEMS, GPS_EPOCH)
    kinds = list(zip(orbits.system, orbits.orbit_class, strict=True))
    counts = {kind: kinds.count(kind) for kind in kinds}
    assert counts == {
        ("GPS", "MEO"): 27,
        ("Galileo", "MEO"): 24,
        ("GLONASS", "MEO"): 24,
        ("BeiDou", "MEO"): 24,
        ("BeiDou", "IGSO"): 3,
        ("BeiDou", "GEO"): 3,
    }
    assert len(set(orbits.satellite)) == 105


def test_baseline_keeps_the_slots_that_the_pairs_replace() -> None:
    baseline = set(baseline_gps_orbits(GPS_EPOCH).satellite)
    expanded = set(nominal_orbits(["GPS"], GPS_EPOCH).satellite)
    assert len(baseline) == 24
    assert baseline - expanded == {"GPS B1", "GPS D2", "GPS F2"}
    assert expanded - baseline == {"GPS B1F", "GPS B1A", "GPS D2F", "GPS D2A", "GPS F2F", "GPS F2A"}


@pytest.mark.parametrize(
    ("satellite", "longitude_deg"),
    [
        ("GPS A1", 127.85),
        ("GPS A3", 179.62),
        ("GPS B1", 94.27),
        ("GPS C3", 103.62),
        ("GPS D3", 11.37),
        ("GPS F4", 1.46),
    ],
)
def test_ground_track_crossings_of_gps_slots(satellite: str, longitude_deg: float) -> None:
    # Authority: elements and hour angle of GPS SPS PS 2001, Table 3-1; GLAN = (RAAN - GHA + u / 2) mod 180.
    at_epoch = crossing_deg(baseline_gps_orbits(GPS_EPOCH), satellite)
    assert at_epoch == pytest.approx(longitude_deg, abs=TWO_HUNDREDTHS_DEG)
    decades_later = crossing_deg(baseline_gps_orbits(datetime(2026, 1, 1)), satellite)
    assert decades_later == pytest.approx(longitude_deg, abs=TWO_HUNDREDTHS_DEG)


def test_ground_track_crossings_of_the_expanded_slots() -> None:
    # Authority: slot elements of SPS PS 2008, Table 3.2-2 (values from memory), by the same formula. The
    # satellites that held these slots on 2021-12-12 were 1.1 to 5.5 degrees away.
    orbits = nominal_orbits(["GPS"], MEASURED)
    published = {"B1F": 101.24, "B1A": 86.96, "D2F": 135.12, "D2A": 122.77, "F2F": 114.01, "F2A": 100.79}
    for slot, longitude_deg in published.items():
        assert crossing_deg(orbits, f"GPS {slot}") == pytest.approx(longitude_deg, abs=TWO_HUNDREDTHS_DEG)


def test_gps_planes_have_drifted_to_where_they_were_measured() -> None:
    # Authority: precise orbits of 2021-12-12. Real planes keep no exact distance of 60 degrees; ground tracks
    # held since 1993 bring every plane within 6 degrees. The nominal almanac's node rate alone would miss by
    # up to 16.
    measured_deg = {"A1": 216.0, "B2": 279.0, "C1": 338.0, "D1": 34.0, "E1": 94.0, "F1": 156.0}
    orbits = nominal_orbits(["GPS"], MEASURED)
    turned_deg = mean_sidereal_angle_deg(MEASURED)
    for slot, node_deg in measured_deg.items():
        row = orbits.satellite.index(f"GPS {slot}")
        assert apart_deg(orbits.node_longitude_deg[row] + turned_deg, node_deg) < 6.0


@pytest.mark.parametrize(
    ("satellites", "node_deg", "argument_deg", "step_deg"),
    [
        (["Galileo A1", "Galileo A8"], 266.98, 93.7, 45.0),
        (["Galileo B1", "Galileo B8"], 26.36, 109.3, 45.0),
        (["Galileo C1", "Galileo C8"], 146.72, 123.8, 45.0),
        (["GLONASS 1", "GLONASS 8"], 128.74, 155.4, -45.0),
        (["GLONASS 9", "GLONASS 16"], 248.11, 170.6, -45.0),
        (["GLONASS 17", "GLONASS 24"], 9.89, 186.8, -45.0),
        (["BeiDou MEO A1", "BeiDou MEO A8"], 357.51, 292.67, 45.0),
        (["BeiDou MEO B1", "BeiDou MEO B8"], 117.89, 307.80, 45.0),
        (["BeiDou MEO C1", "BeiDou MEO C8"], 238.11, 323.85, 45.0),
    ],
)
def test_plane_and_phase_of_the_slots_are_those_measured(
    satellites: list[str], node_deg: float, argument_deg: float, step_deg: float
) -> None:
    # Authority: plane means of the precise orbits (SP3) of 2021-12-12 00:20 GPS time, equator of date.
    # Galileo gets there from its reference epoch in 2016 by its published rates.
    orbits = nominal_orbits(SYSTEMS, MEASURED)
    turned_deg = mean_sidereal_angle_deg(MEASURED)
    first, last = (orbits.satellite.index(satellite) for satellite in satellites)
    plane = np.arange(first, last + 1)
    assert plane.size == 8
    assert np.all(apart_deg(orbits.node_longitude_deg[plane] + turned_deg, node_deg) < THREE_DEG)
    expected_deg = argument_deg + step_deg * np.arange(8)
    assert np.all(apart_deg(orbits.argument_of_latitude_deg[plane], expected_deg) < THREE_DEG)


def test_inclined_geosynchronous_satellites_follow_each_other_on_one_track() -> None:
    # Authority: BDS OS PS 3.0 (values from memory): one track, crossing at 118 E, nodes 120 degrees apart.
    orbits = nominal_orbits(["BeiDou"], MEASURED)
    inclined = np.array(orbits.orbit_class) == "IGSO"
    crossing = orbits.node_longitude_deg[inclined] + orbits.argument_of_latitude_deg[inclined]
    assert np.all(apart_deg(crossing, 118.0) < 1e-6)
    assert np.diff(np.sort(orbits.node_longitude_deg[inclined])) == pytest.approx(120.0)


def test_systems_come_in_the_order_asked_for() -> None:
    orbits = nominal_orbits(["GLONASS", "GPS"], GPS_EPOCH)
    assert orbits.satellite[0] == "GLONASS 1"
    assert orbits.satellite[24] == "GPS A1"


def test_an_unknown_system_is_named_with_those_that_there_are() -> None:
    with pytest.raises(ValueError) as raised:
        nominal_orbits(["NavIC"], GPS_EPOCH)
    assert str(raised.value) == "no nominal constellation of 'NavIC'; there are GPS, Galileo, GLONASS, BeiDou"
