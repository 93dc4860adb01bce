from dataclasses import dataclass, replace
from datetime import datetime

import numpy as np
import pytest
from numpy.typing import NDArray

from siteassess.orbits.constellations import SYSTEMS, baseline_gps_orbits, nominal_orbits
from siteassess.orbits.elements import CircularOrbits
from siteassess.orbits.propagation import earth_fixed_m
from siteassess.sky_tracks.frames import look_angles
from siteassess.sky_tracks.tracks import sky_tracks

START = datetime(2026, 1, 1)
MICRODEGREE_DEG = 1e-6
MILLIMETRE_M = 0.001
HALF_PER_CENT_POINT = 0.005
THREE_PER_CENT = 0.03
EQUATOR_RADIUS_M = 6_378_137.0
MEAN_RADIUS_M = 6_371_000.0


@dataclass(frozen=True)
class Point:
    latitude_deg: float
    longitude_deg: float
    height_m: float


MUNICH_LATITUDE = Point(48.0, 11.0, 0.0)
PLACES = [
    MUNICH_LATITUDE,
    Point(0.0, 0.0, 0.0),
    Point(90.0, 0.0, 0.0),
    Point(-90.0, 45.0, 2835.0),
    Point(-17.0, 180.0, 5.0),
    Point(-17.0, -179.9999, 5.0),
    Point(28.0, 86.9, 4000.0),
    Point(51.0, 359.0, -20.0),
]


@pytest.mark.parametrize("place", PLACES)
def test_tracks_are_the_positions_of_the_orbits_seen_from_the_place(place: Point) -> None:
    # The position of every satellite at every epoch, taken straight from its elements, without blocks.
    orbits = nominal_orbits(SYSTEMS, START)
    tracks = sky_tracks(orbits, place, days=2.0, step_s=600.0)
    azimuth_deg, elevation_deg, range_m = look_angles(earth_fixed_m(orbits, tracks.time_s), place)
    difference_deg = np.mod(tracks.azimuth_deg - azimuth_deg + 180.0, 360.0) - 180.0
    np.testing.assert_allclose(
        difference_deg * np.cos(np.radians(elevation_deg)), 0.0, rtol=0, atol=MICRODEGREE_DEG
    )
    np.testing.assert_allclose(tracks.elevation_deg, elevation_deg, rtol=0, atol=MICRODEGREE_DEG)
    np.testing.assert_allclose(tracks.range_m, range_m, rtol=0, atol=MILLIMETRE_M)
    assert tracks.azimuth_deg.min() >= 0.0
    assert tracks.azimuth_deg.max() < 360.0
    assert tracks.satellite == orbits.satellite


def test_two_sides_of_the_date_line_see_the_same_sky() -> None:
    orbits = nominal_orbits(["GPS"], START)
    east, west, round_trip = (
        sky_tracks(orbits, Point(10.0, longitude_deg, 0.0), days=1.0, step_s=600.0)
        for longitude_deg in (180.0, -180.0, 540.0)
    )
    np.testing.assert_allclose(east.elevation_deg, west.elevation_deg, rtol=0, atol=MICRODEGREE_DEG)
    np.testing.assert_allclose(east.elevation_deg, round_trip.elevation_deg, rtol=0, atol=MICRODEGREE_DEG)


def test_a_satellite_due_north_has_azimuth_zero_and_never_360() -> None:
    orbits = nominal_orbits(["BeiDou"], START)
    tracks = sky_tracks(orbits, Point(-30.0, 80.0, 0.0), days=10.0, step_s=120.0)
    azimuth_deg = tracks.azimuth_deg[tracks.satellite.index("BeiDou GEO 80E")]
    assert np.all((azimuth_deg < MICRODEGREE_DEG) | (azimuth_deg > 360.0 - MICRODEGREE_DEG))
    assert azimuth_deg.max() < 360.0


def test_a_geostationary_satellite_stands_in_the_sky() -> None:
    # Authority: closed form of the geostationary link geometry on a sphere at the equator, where the plumb
    # line meets the centre: tan(el) = (cos(dl) - Re / r) / sin(dl), with the difference dl of the longitudes.
    tracks = sky_tracks(nominal_orbits(["BeiDou"], START), Point(0.0, 110.5, 0.0), days=10.0, step_s=300.0)
    for satellite, longitude_deg in (
        ("BeiDou GEO 80E", 80.0),
        ("BeiDou GEO 110.5E", 110.5),
        ("BeiDou GEO 140E", 140.0),
    ):
        row = tracks.satellite.index(satellite)
        apart_rad = np.radians(abs(longitude_deg - 110.5))
        expected_deg = np.degrees(
            np.arctan2(np.cos(apart_rad) - EQUATOR_RADIUS_M / 42_164_200.0, np.sin(apart_rad))
        )
        assert tracks.elevation_deg[row].min() == pytest.approx(expected_deg, abs=1e-4)
        assert tracks.elevation_deg[row].max() == pytest.approx(expected_deg, abs=1e-4)


def test_run_covers_the_longest_cycle_and_every_satellite_its_whole_cycles() -> None:
    orbits = nominal_orbits(SYSTEMS, START)
    tracks = sky_tracks(orbits, MUNICH_LATITUDE, days=10.0, step_s=120.0)
    assert tracks.joint_epochs == tracks.time_s.size == 7200
    # Authority: published cycles over 120 s: ten of GPS, one each of Galileo, GLONASS and BeiDou MEO, ten
    # sidereal days.
    own = dict(zip(tracks.satellite, tracks.own_epochs.tolist(), strict=True))
    assert own["GPS A1"] == round(10 * 86_154.6 / 120)
    assert own["Galileo A1"] == round(861_575 / 120)
    assert own["GLONASS 1"] == round(689_250 / 120)
    assert own["BeiDou MEO A1"] == round(603_101 / 120)
    assert own["BeiDou IGSO 1"] == own["BeiDou GEO 80E"] == round(10 * 86_164.0905 / 120)


def test_a_short_window_still_runs_over_the_longest_cycle() -> None:
    tracks = sky_tracks(nominal_orbits(["Galileo"], START), MUNICH_LATITUDE, days=1.0, step_s=120.0)
    assert tracks.joint_epochs == 720
    assert tracks.time_s.size == tracks.own_epochs.max() == 7180
    assert tracks.time_s[1] == 120.0
    alone = sky_tracks(nominal_orbits(["GPS"], START), MUNICH_LATITUDE, days=0.25, step_s=900.0)
    assert alone.joint_epochs == 24
    assert set(alone.own_epochs.tolist()) == {96}  # 86 154.6 s are 95.7 steps of 900 s


def test_sky_repeats_after_the_ground_track_cycle() -> None:
    # Authority: cycles of IS-GPS-200 (2 revolutions) and the published 17/8, 17/10 and 13/7. A step of one 1
    # 000th of a cycle brings the last epoch back to the first; the residual rates move a satellite by
    # hundredths of a degree.
    for satellite in ("GPS B1A", "GLONASS 5", "Galileo B2", "BeiDou MEO C3", "BeiDou IGSO 2"):
        one = _only(nominal_orbits(SYSTEMS, START), satellite)
        step_s = float(one.cycle_s[0]) / 1000
        tracks = sky_tracks(one, MUNICH_LATITUDE, days=1001 * step_s / 86_400, step_s=step_s)
        assert tracks.time_s.size == 1001
        assert tracks.elevation_deg[0, 1000] == pytest.approx(tracks.elevation_deg[0, 0], abs=0.1)


@pytest.mark.parametrize(
    ("mask_deg", "published_share"), [(0.0, 0.3801), (5.0, 0.3387), (10.0, 0.2993), (15.0, 0.2622)]
)
def test_mean_visible_share_of_gps_over_globe_and_cycle(mask_deg: float, published_share: float) -> None:
    # Authority: closed form (1 - cos g) / 2, g = acos(Re cos m / r) - m, r = 26 560 km, Re = 6 371 km.
    assert closed_form_share(26_560_000.0, mask_deg) == pytest.approx(published_share, abs=1e-4)
    own_share = globe_share(baseline_gps_orbits(START), mask_deg, step_s=600.0, longitudes=12)
    assert own_share == pytest.approx(published_share, abs=HALF_PER_CENT_POINT)


@pytest.mark.parametrize(
    ("system", "published_share"),
    [("GPS", 0.3387), ("GLONASS", 0.3339), ("Galileo", 0.3506), ("BeiDou", 0.3443)],
)
def test_mean_visible_share_of_every_system_at_five_degrees(system: str, published_share: float) -> None:
    # Authority: the same closed form; BeiDou by its satellites in medium orbit.
    orbits = _medium(nominal_orbits([system], START))
    assert globe_share(orbits, 5.0, step_s=900.0, longitudes=4) == pytest.approx(
        published_share, abs=HALF_PER_CENT_POINT
    )


def test_mean_number_above_ten_degrees_over_central_europe() -> None:
    # Authority: precise orbits (SP3) of 2021-12-12 over 48 N, 11 E, 24 h in steps of 5 min: GPS 8.67 of 31
    # satellites, Galileo 6.96 of 24, two of them in eccentric orbits. The nominal constellation of GPS has 27
    # slots, so its mean is compared per satellite. Real slots are not filled evenly: a few per cent.
    orbits = nominal_orbits(["GPS", "Galileo"], START)
    tracks = sky_tracks(orbits, MUNICH_LATITUDE, days=10.0, step_s=300.0)
    gps = np.array(tracks.system) == "GPS"
    share_above = (tracks.elevation_deg > 10.0).mean(axis=1)
    assert share_above[gps].mean() == pytest.approx(8.67 / 31, rel=THREE_PER_CENT)
    assert share_above[~gps].sum() == pytest.approx(6.96, rel=THREE_PER_CENT)


def test_height_lowers_no_satellite() -> None:
    orbits = nominal_orbits(["GPS"], START)
    low = sky_tracks(orbits, Point(28.0, 86.9, 0.0), days=1.0, step_s=600.0)
    high = sky_tracks(orbits, Point(28.0, 86.9, 4000.0), days=1.0, step_s=600.0)
    assert np.all(high.elevation_deg < low.elevation_deg)  # seen from higher up, everything stands lower,
    assert np.abs(high.elevation_deg - low.elevation_deg).max() < 0.012  # by 4 km over 20 000 km at most


def test_no_satellites_give_empty_tracks() -> None:
    tracks = sky_tracks(nominal_orbits([], START), MUNICH_LATITUDE, days=1.0, step_s=600.0)
    assert tracks.elevation_deg.shape == (0, 144)
    assert tracks.own_epochs.shape == (0,)


def closed_form_share(radius_m: float, mask_deg: float) -> float:
    mask_rad = np.radians(mask_deg)
    cap_rad = np.arccos(MEAN_RADIUS_M * np.cos(mask_rad) / radius_m) - mask_rad
    return float((1.0 - np.cos(cap_rad)) / 2.0)


def globe_share(orbits: CircularOrbits, mask_deg: float, *, step_s: float, longitudes: int) -> float:
    """Share of satellites above the mask, averaged over the area of the globe and one ground-track cycle."""
    sines, weights = np.polynomial.legendre.leggauss(12)
    shares = []
    for latitude_deg in np.degrees(np.arcsin(sines)):
        places = [Point(float(latitude_deg), 360.0 * k / longitudes, 0.0) for k in range(longitudes)]
        tracks = [sky_tracks(orbits, place, days=0.1, step_s=step_s) for place in places]
        shares.append(np.mean([track.elevation_deg[:, : track.own_epochs[0]] > mask_deg for track in tracks]))
    return float(np.average(shares, weights=weights))


def _only(orbits: CircularOrbits, satellite: str) -> CircularOrbits:
    return _choose(orbits, np.array([orbits.satellite.index(satellite)]))


def _medium(orbits: CircularOrbits) -> CircularOrbits:
    return _choose(orbits, np.flatnonzero(np.array(orbits.orbit_class) == "MEO"))


def _choose(orbits: CircularOrbits, rows: NDArray[np.int64]) -> CircularOrbits:
    return replace(
        orbits,
        satellite=tuple(orbits.satellite[row] for row in rows),
        system=tuple(orbits.system[row] for row in rows),
        orbit_class=tuple(orbits.orbit_class[row] for row in rows),
        **{name: getattr(orbits, name)[rows] for name in ARRAYS},
    )


ARRAYS = (
    "radius_m",
    "inclination_deg",
    "node_longitude_deg",
    "node_longitude_rate_deg_per_s",
    "argument_of_latitude_deg",
    "argument_of_latitude_rate_deg_per_s",
    "cycle_s",
)
