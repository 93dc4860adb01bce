"""Dilution of precision against closed cases, a published distribution and a solver of its own."""

from datetime import datetime
from types import SimpleNamespace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from siteassess.angles import direction
from siteassess.orbits.constellations import baseline_gps_orbits
from siteassess.sky_tracks.dilution import dilution_of_precision
from siteassess.sky_tracks.tracks import sky_tracks

HAND_CALCULATION = 1e-4
AS_ANOTHER_SOLVER = 1e-9  # relative
TWO_HUNDREDTHS = 0.02  # of the published figures, which have two decimals


def one_sky(azimuth_deg, elevation_deg, system=None):
    number = len(azimuth_deg)
    system = np.zeros(number, dtype=int) if system is None else system
    toward = direction(np.array(azimuth_deg, dtype=float), np.array(elevation_deg, dtype=float))
    return dilution_of_precision(toward, np.zeros(number, dtype=int), system, epochs=1)


def by_least_squares(azimuth_deg, elevation_deg, system):
    """PDOP and GDOP from the normal equations of a whole design matrix, as textbooks write them."""
    azimuth, elevation = np.deg2rad(azimuth_deg), np.deg2rad(elevation_deg)
    rows = [-np.cos(elevation) * np.sin(azimuth), -np.cos(elevation) * np.cos(azimuth), -np.sin(elevation)]
    clocks = [(system == one).astype(float) for one in np.unique(system)]
    _, triangle = np.linalg.qr(np.stack([*rows, *clocks], axis=1))
    inverse = np.linalg.inv(triangle)
    variance = (inverse**2).sum(axis=1)
    return {
        "horizontal": np.sqrt(variance[:2].sum()),
        "vertical": np.sqrt(variance[2]),
        "position": np.sqrt(variance[:3].sum()),
        "time": np.sqrt(variance[3:].sum()),
        "geometric": np.sqrt(variance.sum()),
    }


def test_zenith_and_three_at_thirty_degrees() -> None:
    """Authority: hand derivation in the GPS SPS Performance Standard 2020; HDOP, VDOP and TDOP recomputed."""
    dops = one_sky([0.0, 0.0, 120.0, 240.0], [90.0, 30.0, 30.0, 30.0])
    assert dops.position[0] == pytest.approx(8 / 3, abs=HAND_CALCULATION)
    assert dops.geometric[0] == pytest.approx(3.0732, abs=HAND_CALCULATION)
    assert dops.horizontal[0] == pytest.approx(4 / 3, abs=HAND_CALCULATION)
    assert dops.vertical[0] == pytest.approx(2.3094, abs=HAND_CALCULATION)
    assert dops.time[0] == pytest.approx(1.5275, abs=HAND_CALCULATION)


def test_zenith_and_three_at_the_horizon() -> None:
    """Authority: algebra."""
    dops = one_sky([0.0, 0.0, 120.0, 240.0], [90.0, 0.0, 0.0, 0.0])
    assert dops.geometric[0] == pytest.approx(np.sqrt(3.0), abs=HAND_CALCULATION)
    assert dops.position[0] == pytest.approx(1.63299, abs=HAND_CALCULATION)
    assert dops.horizontal[0] == pytest.approx(1.15470, abs=HAND_CALCULATION)
    assert dops.vertical[0] == pytest.approx(1.15470, abs=HAND_CALCULATION)
    assert dops.time[0] == pytest.approx(0.57735, abs=HAND_CALCULATION)


def test_a_thousand_random_skies_agree_with_an_orthogonal_least_squares() -> None:
    """Authority: QR factorisation of the whole design matrix (numpy.linalg), one clock column a system."""
    random = np.random.default_rng(20)
    skies = []
    for epoch in range(1000):
        number = int(random.integers(9, 40))
        system = random.integers(0, 4, number)
        skies.append(
            (random.uniform(0, 360, number), random.uniform(5, 90, number), np.full(number, epoch), system)
        )
    azimuth_deg, elevation_deg, epoch, system = (
        np.concatenate(column) for column in zip(*skies, strict=True)
    )
    dops = dilution_of_precision(direction(azimuth_deg, elevation_deg), epoch, system, epochs=1000)
    for index, sky in enumerate(skies):
        expected = by_least_squares(sky[0], sky[1], sky[3])
        for name, value in expected.items():
            assert getattr(dops, name)[index] == pytest.approx(value, rel=AS_ANOTHER_SOLVER), (index, name)


def test_published_distribution_of_hdop_over_globe_and_day() -> None:
    """Authority: GPS SPS Performance Standard 2020, appendix B: baseline constellation, all in view above
    5 degrees; median 0.94, 90 % 1.16, 95 % 1.25.
    """
    orbits, places = baseline_gps_orbits(datetime(2026, 1, 1)), 240
    golden_deg = 180.0 * (3.0 - np.sqrt(5.0))
    found = []
    for index in range(places):  # equal areas: even steps in the sine of the latitude
        place = SimpleNamespace(
            latitude_deg=float(np.rad2deg(np.arcsin((2 * index + 1) / places - 1))),
            longitude_deg=float(index * golden_deg % 360.0),
            height_m=0.0,
        )
        tracks = sky_tracks(orbits, place, days=1.0, step_s=300.0)
        satellite, epoch = np.nonzero(tracks.elevation_deg >= 5.0)
        dops = dilution_of_precision(
            direction(tracks.azimuth_deg[satellite, epoch], tracks.elevation_deg[satellite, epoch]),
            epoch,
            np.zeros_like(epoch),
            epochs=len(tracks.time_s),
        )
        found.append(dops.horizontal)
    hdop = np.concatenate(found)
    assert np.median(hdop) == pytest.approx(0.94, abs=TWO_HUNDREDTHS)
    assert np.quantile(hdop, 0.90) == pytest.approx(1.16, abs=TWO_HUNDREDTHS)
    assert np.quantile(hdop, 0.95) == pytest.approx(1.25, abs=TWO_HUNDREDTHS)


@pytest.mark.parametrize(
    ("azimuth_deg", "elevation_deg"),
    [
        ([], []),
        ([0.0, 120.0, 240.0], [30.0, 30.0, 90.0]),  # three satellites, four unknowns
        ([0.0, 90.0, 180.0, 270.0, 45.0], [30.0] * 5),  # on a cone: height and clock are one
        ([0.0, 0.0, 180.0, 180.0, 0.0], [20.0, 50.0, 30.0, 60.0, 90.0]),  # in one plane
        ([10.0] * 6, [40.0] * 6),  # all in one place
    ],
)
def test_what_is_undetermined_is_not_a_number(azimuth_deg, elevation_deg) -> None:
    dops = one_sky(azimuth_deg, elevation_deg)
    for name in ("horizontal", "vertical", "position", "time", "geometric"):
        assert np.isnan(getattr(dops, name)).tolist() == [True]


def test_a_system_with_one_satellite_tells_its_clock_only() -> None:
    azimuth_deg, elevation_deg = [0.0, 0.0, 120.0, 240.0], [90.0, 30.0, 30.0, 30.0]
    alone = one_sky(azimuth_deg, elevation_deg)
    joined = one_sky([*azimuth_deg, 77.0], [*elevation_deg, 12.0], np.array([0, 0, 0, 0, 1]))
    assert joined.position[0] == pytest.approx(alone.position[0], rel=AS_ANOTHER_SOLVER)
    assert joined.time[0] > alone.time[0]


def test_an_epoch_without_satellites_stands_between_others() -> None:
    azimuth_deg, elevation_deg = [0.0, 0.0, 120.0, 240.0], [90.0, 30.0, 30.0, 30.0]
    toward = direction(azimuth_deg * 2, elevation_deg * 2)
    epoch, system = np.repeat([0, 2], 4), np.repeat([0, 1], 4)
    dops = dilution_of_precision(toward, epoch, system, epochs=4)
    assert np.isnan(dops.position).tolist() == [False, True, False, True]
    assert dops.position[2] == pytest.approx(8 / 3, abs=HAND_CALCULATION)
    assert dops.time[2] == pytest.approx(1.5275, abs=HAND_CALCULATION)


SKY = st.lists(st.tuples(st.floats(0, 360), st.floats(0, 90), st.integers(0, 3)), min_size=4, max_size=20)


@settings(max_examples=60, deadline=None)
@given(sky=SKY, more=SKY)
def test_another_constellation_never_makes_the_position_worse(sky, more) -> None:
    """A system with a clock of its own adds what it knows of the position, and takes nothing away."""

    def of(satellites):
        azimuth_deg, elevation_deg, system = (np.array(column) for column in zip(*satellites, strict=True))
        return one_sky(azimuth_deg, elevation_deg, system).position[0]

    before = of(sky)
    after = of([*sky, *((azimuth, elevation, 4 + system) for azimuth, elevation, system in more)])
    if before < 1e3:  # beyond, rounding shows
        assert after <= before * (1 + 1e-6)


def test_turning_the_sky_changes_no_dilution() -> None:
    """Law: all five are sums over axes of the horizontal plane, the vertical and the clocks."""
    random = np.random.default_rng(1)
    azimuth_deg, elevation_deg = random.uniform(0, 360, 12), random.uniform(5, 90, 12)
    system = random.integers(0, 3, 12)
    here, turned = (
        one_sky(azimuth_deg, elevation_deg, system),
        one_sky(azimuth_deg + 77.0, elevation_deg, system),
    )
    for name in ("horizontal", "vertical", "position", "time", "geometric"):
        assert getattr(turned, name) == pytest.approx(getattr(here, name), rel=AS_ANOTHER_SOLVER)
