"""Range, off-boresight angle and free-space loss against closed forms of a sphere and circular orbits."""

import numpy as np
import pytest

from siteassess.link_budget.power.spreading import free_space_loss_db, off_boresight_deg, slant_range_m

TENTH_KM = 100.0
THOUSANDTH_DEG = 0.001
HUNDREDTH_DB = 0.01
L1_HZ = 1575.42e6

# Law of cosines and of sines on a sphere of 6378.137 km, computed apart from this package. Orbit radii: GPS
# Standard Positioning Service Performance Standard 2001 (26 559.7 km), Galileo OS SDD (29 599.8 km), BeiDou
# OS PS 3.0 (27 906.1 km) and GLONASS ICD 5.1 (about 25 508 km), the last two from memory; 42 164.2 km for
# one sidereal day.
RADIUS_KM = {
    "GPS": 26559.7,
    "GLONASS": 25508.0,
    "Galileo": 29599.8,
    "BeiDou": 27906.1,
    "sidereal day": 42164.2,
}
GEOMETRY = [
    ("GPS", 0, 25782.5, 13.895),
    ("GPS", 5, 25232.6, 13.841),
    ("GPS", 10, 24698.7, 13.680),
    ("GPS", 15, 24184.5, 13.413),
    ("GPS", 40, 22006.6, 10.601),
    ("GPS", 90, 20181.6, 0.0),
    ("GLONASS", 5, 24148.1, 14.424),
    ("GLONASS", 90, 19129.9, 0.0),
    ("Galileo", 5, 28353.9, 12.396),
    ("Galileo", 40, 25094.0, 9.501),
    ("BeiDou", 5, 26617.2, 13.161),
    ("BeiDou", 15, 25566.8, 12.754),
    ("sidereal day", 5, 41126.8, 8.667),
    ("sidereal day", 90, 35786.1, 0.0),
]


@pytest.mark.parametrize(("orbit", "elevation_deg", "range_km", "theta_deg"), GEOMETRY)
def test_range_and_angle_follow_the_triangle(
    orbit: str, elevation_deg: float, range_km: float, theta_deg: float
) -> None:
    radius_m = RADIUS_KM[orbit] * 1e3
    assert slant_range_m(radius_m, elevation_deg) == pytest.approx(range_km * 1e3, abs=TENTH_KM)
    assert off_boresight_deg(radius_m, elevation_deg) == pytest.approx(theta_deg, abs=THOUSANDTH_DEG)


@pytest.mark.parametrize(
    ("elevation_deg", "loss_db"),
    [(0, 184.62), (5, 184.43), (10, 184.25), (15, 184.07), (40, 183.25), (90, 182.49)],
)
def test_free_space_loss_from_gps_on_l1(elevation_deg: float, loss_db: float) -> None:
    # ITU-R P.525, 20 log10(4 pi d / lambda), with the ranges above.
    range_m = slant_range_m(26559.7e3, elevation_deg)
    assert free_space_loss_db(range_m, L1_HZ) == pytest.approx(loss_db, abs=HUNDREDTH_DB)


def test_the_earth_lies_well_inside_the_beam_of_a_navigation_satellite() -> None:
    # Common practice, no source: from the altitude of GPS the edge of the Earth stands 13.9 degrees off the
    # axis.
    assert off_boresight_deg(26559.7e3, 0.0) == pytest.approx(13.9, abs=0.05)


@pytest.mark.parametrize("shape", [(), (3,), (2, 3), (0,)])
def test_shapes_broadcast_and_nan_stays(shape: tuple[int, ...]) -> None:
    elevation_deg = np.full(shape, 30.0)
    assert np.shape(slant_range_m(26559.7e3, elevation_deg)) == shape
    assert np.shape(off_boresight_deg(26559.7e3, elevation_deg)) == shape
    assert np.isnan(slant_range_m(26559.7e3, np.nan))
