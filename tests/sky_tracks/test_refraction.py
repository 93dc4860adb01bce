import numpy as np
import pytest

from siteassess.sky_tracks.refraction import apparent_elevation_deg

HUNDREDTH_ARCMIN = 0.01
QUARTER_ARCMIN_DEG = 0.25 / 60
FITS_APART_DEG = (
    0.015  # two separate fits of one ray tracing; 0.6 arcmin, a thirtieth of the bend at the horizon
)


@pytest.mark.parametrize(
    ("elevation_deg", "bend_arcmin"), [(0.0, 34.72), (1.0, 26.02), (2.0, 20.28), (5.0, 11.19), (10.0, 5.52)]
)
def test_bend_at_sea_level(elevation_deg: float, bend_arcmin: float) -> None:
    # Authority: ITU-R P.834 as P.619-5, Attachment B, free-space elevation in; evaluated by hand.
    bend_deg = apparent_elevation_deg(elevation_deg, 0.0) - elevation_deg
    assert bend_deg * 60 == pytest.approx(bend_arcmin, abs=HUNDREDTH_ARCMIN)


@pytest.mark.parametrize(
    ("elevation_deg", "height_m", "bend_arcmin"),
    [(0.0, 1000.0, 31.14), (5.0, 2000.0, 8.24), (10.0, 1000.0, 4.56)],
)
def test_bend_on_a_mountain(elevation_deg: float, height_m: float, bend_arcmin: float) -> None:
    # Authority: the same formula, evaluated by hand: 1 / 1.92677, 1 / 7.27929 and 1 / 13.15085 degrees.
    bend_deg = apparent_elevation_deg(elevation_deg, height_m) - elevation_deg
    assert bend_deg * 60 == pytest.approx(bend_arcmin, abs=HUNDREDTH_ARCMIN)


@pytest.mark.parametrize("height_m", [0.0, 500.0, 1500.0, 3000.0])
@pytest.mark.parametrize("elevation_deg", [0.0, 1.0, 3.0, 6.0, 10.0])
def test_bend_agrees_with_the_inverse_formula(elevation_deg: float, height_m: float) -> None:
    # Authority: the companion formula of P.619-5, Attachment B, from apparent to free-space elevation. The
    # two are separate fits of the same ray tracing.
    apparent_deg = float(apparent_elevation_deg(elevation_deg, height_m))
    t, h = apparent_deg, height_m / 1000
    bend_deg = 1 / (
        1.314 + 0.6437 * t + 0.02869 * t**2 + h * (0.2305 + 0.09428 * t + 0.01096 * t**2) + 0.008583 * h**2
    )
    assert apparent_deg - bend_deg == pytest.approx(elevation_deg, abs=FITS_APART_DEG)


@pytest.mark.parametrize("elevation_deg", [10.0, 12.0, 15.0, 20.0, 30.0, 45.0, 60.0, 80.0])
def test_bend_above_ten_degrees_is_near_the_optical_one(elevation_deg: float) -> None:
    # Authority: Saemundsson's formula (Meeus, Astronomical Algorithms, 16.4), optical, at sea level. Radio
    # waves bend up to a tenth more, for the water vapour.
    optical_arcmin = 1.02 / np.tan(np.radians(elevation_deg + 10.3 / (elevation_deg + 5.11)))
    bend_deg = apparent_elevation_deg(elevation_deg, 0.0) - elevation_deg
    assert bend_deg == pytest.approx(optical_arcmin / 60, abs=QUARTER_ARCMIN_DEG)


def test_no_step_at_ten_degrees_and_none_at_the_zenith() -> None:
    below, above = apparent_elevation_deg([10.0, np.nextafter(10.0, 11.0)], 0.0)
    assert above == pytest.approx(below, abs=1e-12)
    assert apparent_elevation_deg(90.0, 0.0) == 90.0


@pytest.mark.parametrize("height_m", [0.0, 1000.0, 3000.0])
def test_apparent_elevation_rises_with_elevation_and_never_falls_below_it(height_m: float) -> None:
    elevation_deg = np.linspace(-5.0, 90.0, 4001)
    apparent_deg = apparent_elevation_deg(elevation_deg, height_m)
    assert np.all(np.diff(apparent_deg) > 0)
    assert np.all(apparent_deg >= elevation_deg)
    assert apparent_deg.max() == 90.0


def test_heights_outside_the_validity_count_as_its_ends() -> None:
    assert apparent_elevation_deg(2.0, -430.0) == apparent_elevation_deg(2.0, 0.0)
    assert apparent_elevation_deg(2.0, 8848.0) == apparent_elevation_deg(2.0, 3000.0)
    assert apparent_elevation_deg(2.0, 3000.0) < apparent_elevation_deg(2.0, 0.0)  # thinner air bends less


def test_below_minus_one_degree_nothing_is_bent() -> None:
    assert apparent_elevation_deg([-1.001, -30.0, -90.0], 0.0).tolist() == [-1.001, -30.0, -90.0]
    assert apparent_elevation_deg(-1.0, 0.0) < 0.0


def test_shapes_and_not_a_number() -> None:
    assert apparent_elevation_deg(3.0, 0.0).shape == ()
    assert apparent_elevation_deg([], 0.0).shape == (0,)
    assert apparent_elevation_deg(np.zeros((2, 3)), 100.0).shape == (2, 3)
    assert apparent_elevation_deg([1.0, 2.0], [[0.0], [1000.0]]).shape == (2, 2)
    assert np.isnan(apparent_elevation_deg(np.nan, 0.0))
