"""Directions and gain of an antenna that is turned and tilted."""

import numpy as np
import pytest

from siteassess.antenna.gain import gain_dbic
from siteassess.antenna.mount import (
    antenna_frame,
    mean_mounted_gain_dbic,
    mounted_cross_gain_dbic,
    mounted_gain_dbic,
)
from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.shapes import by_elevation, isotropic, uniform_cone
from siteassess.site_file.model import Mount

L1_HZ = 1575.42e6
MICRODEGREE = 1e-6
HUNDREDTH_DB = 0.01


def mount(heading_deg: float = 0.0, tilt_deg: float = 0.0, tilt_azimuth_deg: float = 0.0) -> Mount:
    return Mount(
        mast_height_m=1.5, heading_deg=heading_deg, tilt_deg=tilt_deg, tilt_azimuth_deg=tilt_azimuth_deg
    )


@pytest.fixture
def lobed() -> GainPattern:
    return GainPattern(
        name="lobed",
        carrier_hz=np.array([np.nan]),
        azimuth_deg=np.array([0.0, 90.0, 180.0, 270.0, 360.0]),
        elevation_deg=np.array([-90.0, 0.0, 90.0]),
        gain_dbic=np.array([[[-20, 0, 5], [-20, 2, 5], [-20, 4, 5], [-20, -6, 5], [-20, 0, 5]]], dtype=float),
    )


@pytest.mark.parametrize("heading_deg", [0.0, 75.0, 310.0])
@pytest.mark.parametrize(
    ("tilt_deg", "tilt_azimuth_deg"), [(5.0, 0.0), (40.0, 123.0), (90.0, 270.0), (180.0, 30.0)]
)
def test_tilt_agrees_with_rotations_of_scipy(
    heading_deg: float, tilt_deg: float, tilt_azimuth_deg: float
) -> None:
    # Authority: scipy.spatial.transform.Rotation. In east, north, up the heading turns clockwise about up,
    # and the tilt takes up toward the azimuth, so it turns about their cross product (-cos, sin, 0).
    from scipy.spatial.transform import Rotation

    toward_rad = np.deg2rad(tilt_azimuth_deg)
    heading = Rotation.from_rotvec([0.0, 0.0, -heading_deg], degrees=True)
    hinge = np.array([-np.cos(toward_rad), np.sin(toward_rad), 0.0])
    tilt = Rotation.from_rotvec(tilt_deg * hinge, degrees=True)
    random = np.random.default_rng(11)
    azimuth_deg, elevation_deg = random.uniform(0.0, 360.0, 200), random.uniform(-89.0, 89.0, 200)
    azimuth_rad, elevation_rad = np.deg2rad(azimuth_deg), np.deg2rad(elevation_deg)
    site = np.column_stack(
        [
            np.cos(elevation_rad) * np.sin(azimuth_rad),
            np.cos(elevation_rad) * np.cos(azimuth_rad),
            np.sin(elevation_rad),
        ]
    )
    east, north, up = (tilt * heading).inv().apply(site).T
    seen_azimuth_deg, seen_elevation_deg = antenna_frame(
        mount(heading_deg, tilt_deg, tilt_azimuth_deg), azimuth_deg, elevation_deg
    )
    difference_deg = seen_azimuth_deg - np.rad2deg(np.arctan2(east, north))
    assert np.cos(np.deg2rad(difference_deg)) == pytest.approx(1.0, abs=1e-12)
    assert seen_elevation_deg == pytest.approx(np.rad2deg(np.arcsin(up)), abs=MICRODEGREE)


def test_axis_of_a_tilted_antenna_points_where_it_leans() -> None:
    _, elevation_deg = antenna_frame(mount(33.0, 20.0, 145.0), 145.0, 70.0)
    assert elevation_deg == pytest.approx(90.0, abs=MICRODEGREE)
    _, elevation_deg = antenna_frame(mount(33.0, 20.0, 145.0), [145.0, 325.0, 55.0], [0.0, 0.0, 0.0])
    assert elevation_deg == pytest.approx([20.0, -20.0, 0.0], abs=MICRODEGREE)


def test_turned_antenna_shows_its_north_mark_at_its_heading(lobed: GainPattern) -> None:
    turned = mounted_gain_dbic(lobed, mount(heading_deg=90.0), [90.0, 180.0, 0.0, 360.0], 0.0, L1_HZ)
    assert turned == pytest.approx([0.0, 2.0, -6.0, -6.0])


def test_untilted_antenna_is_not_rotated() -> None:
    azimuth_deg, elevation_deg = antenna_frame(
        mount(350.0, 0.0, 77.0), [350.0, 0.0, 360.0], [12.3, 90.0, -90.0]
    )
    assert azimuth_deg.tolist() == [0.0, 10.0, 10.0]
    assert elevation_deg.tolist() == [12.3, 90.0, -90.0]


def test_small_tilt_runs_into_none(lobed: GainPattern) -> None:
    random = np.random.default_rng(3)
    azimuth_deg, elevation_deg = random.uniform(0.0, 360.0, 50), random.uniform(0.0, 80.0, 50)
    flat = mounted_gain_dbic(lobed, mount(40.0), azimuth_deg, elevation_deg, L1_HZ)
    tilted = mounted_gain_dbic(lobed, mount(40.0, 1e-6, 200.0), azimuth_deg, elevation_deg, L1_HZ)
    assert tilted == pytest.approx(flat, abs=1e-5)


def test_mean_over_azimuth_is_taken_of_ratios(lobed: GainPattern) -> None:
    # Authority: scipy's adaptive integration of the ratios round the horizon.
    from scipy.integrate import quad

    def ratio(azimuth_deg: float) -> float:
        return float(10.0 ** (gain_dbic(lobed, azimuth_deg, 0.0, L1_HZ) / 10.0))

    expected = quad(ratio, 0.0, 360.0, points=[90.0, 180.0, 270.0])[0] / 360.0
    mean_dbic = mean_mounted_gain_dbic(lobed, mount(77.0), 0.0, L1_HZ)
    assert mean_dbic == pytest.approx(10.0 * np.log10(expected), abs=HUNDREDTH_DB)


@pytest.mark.parametrize("elevation_deg", [0.0, 20.0, 40.0])
def test_tilted_hemisphere_loses_part_of_each_ring(elevation_deg: float) -> None:
    # Authority: spherical geometry. A plane tilted by 50 degrees cuts the ring at elevation e at the angles
    # acos(-tan e / tan 50) from the azimuth that it leans to.
    cut_deg = np.rad2deg(np.arccos(-np.tan(np.deg2rad(elevation_deg)) / np.tan(np.deg2rad(50.0))))
    mean_dbic = mean_mounted_gain_dbic(uniform_cone(90.0), mount(0.0, 50.0, 10.0), elevation_deg, L1_HZ)
    assert 10.0 ** (mean_dbic / 10.0) / 2.0 == pytest.approx(cut_deg / 180.0, abs=1.0 / 720.0)


@pytest.mark.parametrize("elevation_deg", [10.0, np.zeros(3), np.zeros((2, 3)), np.zeros(0)], ids=np.shape)
def test_mean_has_the_shape_of_its_elevations(lobed: GainPattern, elevation_deg: np.ndarray) -> None:
    for pattern in (isotropic(), lobed):
        assert mean_mounted_gain_dbic(pattern, mount(), elevation_deg, L1_HZ).shape == np.shape(elevation_deg)


def test_cross_polar_gain_turns_with_the_antenna() -> None:
    pattern = by_elevation("crossed", np.array([-90.0, 90.0]), np.zeros(2), np.array([-30.0, -12.0]))
    tilted = mounted_cross_gain_dbic(pattern, mount(0.0, 90.0, 90.0), [90.0, 270.0], 0.0, L1_HZ)
    assert tilted == pytest.approx([-12.0, -30.0])
