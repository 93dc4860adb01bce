from datetime import datetime

import numpy as np
import pytest
from numpy.typing import NDArray

from siteassess.orbits.constellations import SYSTEMS, nominal_orbits
from siteassess.orbits.elements import CircularOrbits
from siteassess.orbits.propagation import earth_fixed_m

START = datetime(2026, 1, 1)
MILLIMETRE_M = 0.001
TWO_SECONDS = 2.0
THOUSANDTH_DEG = 0.001


def rotated_m(orbits: CircularOrbits, time_s: NDArray[np.float64]) -> NDArray[np.float64]:
    """Positions by the user algorithm of IS-GPS-200, Table 20-IV, for a circle."""
    u = np.radians(
        orbits.argument_of_latitude_deg[:, None]
        + orbits.argument_of_latitude_rate_deg_per_s[:, None] * time_s
    )
    node = np.radians(
        orbits.node_longitude_deg[:, None] + orbits.node_longitude_rate_deg_per_s[:, None] * time_s
    )
    tilt = np.radians(orbits.inclination_deg)[:, None]
    in_plane_x = orbits.radius_m[:, None] * np.cos(u)
    in_plane_y = orbits.radius_m[:, None] * np.sin(u)
    return np.stack(
        [
            in_plane_x * np.cos(node) - in_plane_y * np.cos(tilt) * np.sin(node),
            in_plane_x * np.sin(node) + in_plane_y * np.cos(tilt) * np.cos(node),
            in_plane_y * np.sin(tilt),
        ]
    )


def node_crossings(
    position_m: NDArray[np.float64], time_s: NDArray[np.float64]
) -> tuple[list[float], list[float]]:
    """Times [s] and longitudes [deg] at which a satellite crosses the equator northward."""
    x, y, z = position_m
    before = np.flatnonzero((z[:-1] < 0) & (z[1:] >= 0))
    part = -z[before] / (z[before + 1] - z[before])
    times = time_s[before] + part * (time_s[before + 1] - time_s[before])
    xs, ys = (values[before] + part * (values[before + 1] - values[before]) for values in (x, y))
    return times.tolist(), np.degrees(np.arctan2(ys, xs)).tolist()


def test_positions_are_those_of_the_user_algorithm() -> None:
    orbits = nominal_orbits(SYSTEMS, START)
    time_s = np.linspace(0.0, 864_000.0, 300)
    np.testing.assert_allclose(
        earth_fixed_m(orbits, time_s), rotated_m(orbits, time_s), rtol=0, atol=MILLIMETRE_M
    )


def test_satellites_keep_their_distance() -> None:
    orbits = nominal_orbits(SYSTEMS, START)
    distance_m = np.linalg.norm(earth_fixed_m(orbits, [0.0, 1e4, 1e6]), axis=0)
    np.testing.assert_allclose(
        distance_m, np.repeat(orbits.radius_m[:, None], 3, axis=1), rtol=0, atol=MILLIMETRE_M
    )


@pytest.mark.parametrize(
    ("satellite", "period_s"),
    [("GPS A1", 43_077.3), ("GLONASS 1", 40_544.1), ("Galileo A1", 50_680.9), ("BeiDou MEO A1", 46_392.4)],
)
def test_nodal_period_between_node_crossings_is_the_measured_one(satellite: str, period_s: float) -> None:
    # Authority: mean nodal periods computed from the precise orbits (SP3) of 2021-12-12.
    orbits = nominal_orbits(SYSTEMS, START)
    time_s = np.arange(0.0, 200_000.0, 30.0)
    times, _ = node_crossings(earth_fixed_m(orbits, time_s)[:, orbits.satellite.index(satellite)], time_s)
    assert len(times) >= 3
    assert np.diff(times) == pytest.approx(period_s, abs=TWO_SECONDS)


@pytest.mark.parametrize(
    ("satellite", "revolutions", "cycle_s"),
    [
        ("GPS A1", 2, 86_154.6),
        ("GLONASS 1", 17, 689_250.0),
        ("Galileo A1", 17, 861_575.0),
        ("BeiDou MEO A1", 13, 603_101.0),
    ],
)
def test_ground_track_repeats_after_its_cycle(satellite: str, revolutions: int, cycle_s: float) -> None:
    # Authority: the published ratios 2/1, 17/8, 17/10 and 13/7 of revolutions to turns of the Earth.
    orbits = nominal_orbits(SYSTEMS, START)
    row = orbits.satellite.index(satellite)
    time_s = np.arange(0.0, cycle_s + 60_000.0, 30.0)
    times, longitudes_deg = node_crossings(earth_fixed_m(orbits, time_s)[:, row], time_s)
    assert times[revolutions] - times[0] == pytest.approx(cycle_s, abs=TWO_SECONDS)
    back_deg = (longitudes_deg[revolutions] - longitudes_deg[0] + 180) % 360 - 180
    assert back_deg == pytest.approx(0.0, abs=0.05)  # far below the width of a cell of the sky


def test_gps_track_crosses_the_equator_every_half_turn_of_the_earth() -> None:
    orbits = nominal_orbits(["GPS"], START)
    time_s = np.arange(0.0, 30 * 86_154.6, 60.0)
    _, longitudes_deg = node_crossings(earth_fixed_m(orbits, time_s)[:, 0], time_s)
    folded_deg = np.mod(longitudes_deg, 180.0)
    assert np.ptp(folded_deg) < THOUSANDTH_DEG * 10  # linear interpolation over 60 s


def test_geostationary_satellites_stand_and_inclined_ones_draw_a_figure_of_eight() -> None:
    orbits = nominal_orbits(["BeiDou"], START)
    time_s = np.arange(0.0, 10 * 86_400.0, 600.0)
    x, y, z = earth_fixed_m(orbits, time_s)
    geostationary = np.array(orbits.orbit_class) == "GEO"
    longitude_deg = np.degrees(np.arctan2(y, x))
    # Authority: BeiDou Open Service Performance Standard 3.0: 80, 110.5 and 140 E (value from memory).
    expected_deg = np.array([[80.0], [110.5], [140.0]])
    assert np.abs(longitude_deg[geostationary] - expected_deg).max() < THOUSANDTH_DEG
    assert np.abs(z[geostationary]).max() < MILLIMETRE_M
    for inclined in np.flatnonzero(np.array(orbits.orbit_class) == "IGSO"):
        _, crossing_deg = node_crossings(np.stack([x, y, z])[:, inclined], time_s)
        assert np.array(crossing_deg) == pytest.approx(
            118.0, abs=0.01
        )  # the same standard: crossing at 118 E
        assert np.degrees(np.arcsin(z[inclined] / orbits.radius_m[inclined])).max() == pytest.approx(
            55.0, abs=0.1
        )


def test_no_satellites_and_no_epochs() -> None:
    orbits = nominal_orbits([], START)
    assert earth_fixed_m(orbits, [0.0, 1.0]).shape == (3, 0, 2)
    assert earth_fixed_m(nominal_orbits(["GPS"], START), []).shape == (3, 27, 0)


def test_a_start_in_mid_cycle_only_shifts_the_clock() -> None:
    early, late = (
        nominal_orbits(["Galileo"], datetime(2026, 1, 1)),
        nominal_orbits(["Galileo"], datetime(2026, 1, 2)),
    )
    np.testing.assert_allclose(earth_fixed_m(early, [86_400.0]), earth_fixed_m(late, [0.0]), rtol=0, atol=1.0)
