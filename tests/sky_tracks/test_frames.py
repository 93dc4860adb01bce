from dataclasses import dataclass

import numpy as np
import pymap3d
import pyproj
import pytest

from siteassess.sky_tracks.frames import earth_fixed_of_geodetic_m, east_north_up, look_angles

MILLIMETRE_M = 0.001
METRE_M = 1.0
THOUSANDTH_DEG = 0.001
MICRODEGREE_DEG = 1e-6
HUNDRED_METRES_M = 100.0


@dataclass(frozen=True)
class Point:
    latitude_deg: float
    longitude_deg: float
    height_m: float


PLACES = [
    Point(48.0, 11.0, 600.0),
    Point(0.0, 0.0, 0.0),
    Point(-33.9, 151.2, 40.0),
    Point(64.0, -179.9999, 12.0),
    Point(64.0, 180.0, 12.0),
    Point(20.0, 359.5, 4000.0),
    Point(90.0, 0.0, 0.0),
    Point(-90.0, 45.0, 2835.0),
]


@pytest.mark.parametrize("place", PLACES)
def test_earth_fixed_coordinates_are_those_of_pyproj(place: Point) -> None:
    # Authority: PROJ, EPSG:4979 (WGS 84, three dimensions) to EPSG:4978 (WGS 84, geocentric).
    transformer = pyproj.Transformer.from_crs(4979, 4978, always_xy=True)
    expected_m = transformer.transform(place.longitude_deg, place.latitude_deg, place.height_m)
    own_m = earth_fixed_of_geodetic_m(place.latitude_deg, place.longitude_deg, place.height_m)
    np.testing.assert_allclose(own_m, expected_m, rtol=0, atol=MILLIMETRE_M)


@pytest.mark.parametrize("place", PLACES)
def test_look_angles_are_those_of_pymap3d(place: Point) -> None:
    # Authority: pymap3d, ecef2aer.
    generator = np.random.default_rng(7)
    points_m = generator.normal(size=(3, 5, 4))
    points_m *= generator.uniform(7e6, 4.2e7, (5, 4)) / np.linalg.norm(points_m, axis=0)
    azimuth_deg, elevation_deg, range_m = look_angles(points_m, place)
    expected = pymap3d.ecef2aer(*points_m, place.latitude_deg, place.longitude_deg, place.height_m)
    assert azimuth_deg.shape == elevation_deg.shape == range_m.shape == (5, 4)
    difference_deg = np.mod(azimuth_deg - expected[0] + 180.0, 360.0) - 180.0
    np.testing.assert_allclose(difference_deg * np.cos(np.radians(elevation_deg)), 0.0, atol=MICRODEGREE_DEG)
    np.testing.assert_allclose(elevation_deg, expected[1], rtol=0, atol=MICRODEGREE_DEG)
    np.testing.assert_allclose(range_m, expected[2], rtol=0, atol=MILLIMETRE_M)


@pytest.mark.parametrize(
    ("position_m", "azimuth_deg", "elevation_deg", "range_m"),
    [
        ((20688636.653, -10335387.303, 18486192.053), 264.989, 54.235, 24_205_149.0),
        ((17125517.715, -19870167.075, 443275.501), 247.662, 6.199, 24_765_177.0),
        ((-13462439.424, 8521400.998, 21070022.207), 25.686, 3.486, 25_271_735.0),
        ((-10288831.927, -8216352.027, 21858151.827), 345.335, 4.908, 24_191_846.0),
    ],
    ids=["E01", "G21", "G13", "R11"],
)
def test_look_angles_of_four_satellites_from_precise_orbits(
    position_m: tuple[float, float, float], azimuth_deg: float, elevation_deg: float, range_m: float
) -> None:
    # Authority: positions of the ESA precise orbits (SP3) of 2021-12-12 00:00 GPS time over 48 N, 11 E, 600
    # m.
    own = look_angles(position_m, Point(48.0, 11.0, 600.0))
    assert own[0] == pytest.approx(azimuth_deg, abs=THOUSANDTH_DEG)
    assert own[1] == pytest.approx(elevation_deg, abs=THOUSANDTH_DEG)
    assert own[2] == pytest.approx(range_m, abs=METRE_M)


@pytest.mark.parametrize(
    ("elevation_deg", "range_m", "off_nadir_deg"),
    [
        (0.0, 25_782_500.0, 13.895),
        (5.0, 25_232_600.0, 13.841),
        (10.0, 24_698_700.0, 13.680),
        (40.0, 22_006_600.0, 10.601),
        (90.0, 20_181_600.0, 0.0),
    ],
)
def test_range_of_a_gps_orbit_by_elevation(
    elevation_deg: float, range_m: float, off_nadir_deg: float
) -> None:
    # Authority: triangle of the centre of the Earth, the site and the satellite, r = 26 559.7 km, at the
    # equator: R = -Re sin(el) + sqrt(r^2 - (Re cos(el))^2), sin(theta) = Re / r cos(el).
    central_rad = np.radians(90.0 - elevation_deg - off_nadir_deg)
    position_m = 26_559_700.0 * np.array([np.cos(central_rad), np.sin(central_rad), 0.0])
    _, own_elevation_deg, own_range_m = look_angles(position_m, Point(0.0, 0.0, 0.0))
    assert own_elevation_deg == pytest.approx(elevation_deg, abs=2 * THOUSANDTH_DEG)
    assert own_range_m == pytest.approx(range_m, abs=HUNDRED_METRES_M)


def test_zenith_nadir_and_due_north() -> None:
    site = Point(0.0, 0.0, 0.0)
    _, elevation_deg, range_m = look_angles([[7_378_137.0, 5_378_137.0], [0.0, 0.0], [0.0, 0.0]], site)
    assert elevation_deg.tolist() == [90.0, -90.0]
    assert range_m.tolist() == [1_000_000.0, 1_000_000.0]
    azimuth_deg, _, _ = look_angles([6_378_137.0, -1e-12, 1e6], site)
    assert azimuth_deg == 0.0  # a hair west of north is north, never 360


@pytest.mark.parametrize("latitude_deg", [-90.0, -37.0, 0.0, 51.0, 90.0])
@pytest.mark.parametrize("longitude_deg", [-180.0, 0.0, 77.0, 360.0])
def test_local_axes_are_a_right_handed_orthonormal_set(latitude_deg: float, longitude_deg: float) -> None:
    axes = east_north_up(latitude_deg, longitude_deg)
    np.testing.assert_allclose(axes @ axes.T, np.eye(3), atol=1e-15)
    assert np.linalg.det(axes) == pytest.approx(1.0)


def test_scalars_arrays_and_not_a_number() -> None:
    assert earth_fixed_of_geodetic_m(10.0, 20.0, 0.0).shape == (3,)
    assert earth_fixed_of_geodetic_m([10.0, 20.0], 20.0, [[0.0], [1.0], [2.0]]).shape == (3, 3, 2)
    assert all(np.isnan(look_angles([np.nan, 0.0, 0.0], PLACES[0])))
