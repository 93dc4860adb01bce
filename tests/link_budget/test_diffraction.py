"""Diffraction losses against ITU-R P.526, SciPy and limiting cases."""

import numpy as np
import pytest
from scipy.special import fresnel

from siteassess.link_budget.obstacles.diffraction import (
    exact_knife_edge_loss_db,
    fresnel_integrals,
    fresnel_parameter,
    knife_edge_loss_db,
    strip_loss_db,
)

MILLIBEL_TENTH = 1e-3
HUNDREDTH_DB = 0.01
TENTH_DB = 0.1
ONE_MILLIONTH = 1e-6
L1_WAVELENGTH_M = 299_792_458 / 1575.42e6


def test_fresnel_integrals_agree_with_scipy() -> None:
    x = np.linspace(-40.0, 40.0, 40_001)
    sine, cosine = fresnel(x)
    assert fresnel_integrals(x)[0] == pytest.approx(cosine, abs=ONE_MILLIONTH)
    assert fresnel_integrals(x)[1] == pytest.approx(sine, abs=ONE_MILLIONTH)


def test_fresnel_integrals_end_at_one_half() -> None:
    # Abramowitz and Stegun 7.3.20.
    cosine, sine = fresnel_integrals([-np.inf, np.inf])
    assert cosine == pytest.approx([-0.5, 0.5], abs=ONE_MILLIONTH)
    assert sine == pytest.approx([-0.5, 0.5], abs=ONE_MILLIONTH)


# ITU-R P.526 4.1, eq. 31, evaluated; 0 at and below -0.78 by its rule.
@pytest.mark.parametrize(
    ("nu", "loss_db"),
    [
        (-np.inf, 0.0),
        (-1.0, 0.0),
        (-0.78, 0.0),
        (0.0, 6.0329),
        (1.0, 13.9257),
        (2.0, 19.0429),
        (2.4, 20.539),
        (3.0, 22.416),
        (10.0, 32.855),
    ],
)
def test_approximation_has_the_values_of_the_recommendation(nu: float, loss_db: float) -> None:
    assert knife_edge_loss_db(nu) == pytest.approx(loss_db, abs=MILLIBEL_TENTH)


# ITU-R P.526 4.1, eq. 30, evaluated with SciPy.
@pytest.mark.parametrize(
    ("nu", "loss_db"),
    [
        (-1.2172, -1.3686),
        (-1.0, -1.0010),
        (-0.78, -0.0111),
        (0.0, 6.0206),
        (1.0, 13.8641),
        (2.0, 19.0910),
        (2.4, 20.618),
        (3.0, 22.522),
        (10.0, 32.954),
    ],
)
def test_exact_form_has_the_values_of_the_recommendation(nu: float, loss_db: float) -> None:
    assert exact_knife_edge_loss_db(nu) == pytest.approx(loss_db, abs=MILLIBEL_TENTH)


def test_the_largest_gain_of_the_ripple_lies_where_the_integrals_put_it() -> None:
    # ITU-R P.526 4.1, eq. 30: 1.3686 dB at nu = -1.2172.
    nu = np.linspace(-2.0, 0.0, 20_001)
    assert nu[np.argmin(exact_knife_edge_loss_db(nu))] == pytest.approx(-1.2172, abs=2e-3)


def test_approximation_stays_near_the_exact_form() -> None:
    # ITU-R P.526 4.1: the two differ by 0.106 dB at most from -0.78 to 3, and by 0.123 dB to 5 (evaluated).
    nu = np.linspace(-0.78, 5.0, 5_001)
    difference_db = np.abs(knife_edge_loss_db(nu) - exact_knife_edge_loss_db(nu))
    assert np.max(difference_db[nu <= 3.0]) == pytest.approx(0.106, abs=0.005)
    assert np.max(difference_db) == pytest.approx(0.123, abs=0.005)


# ITU-R P.526 4.1 with the far terminal at infinity, L1: nu for one degree.
@pytest.mark.parametrize(
    ("distance_m", "nu"),
    [(5, 0.1265), (10, 0.1789), (20, 0.2530), (50, 0.4001), (100, 0.5658), (500, 1.2652)],
)
def test_fresnel_parameter_of_a_plane_wave(distance_m: float, nu: float) -> None:
    assert fresnel_parameter(1.0, distance_m, L1_WAVELENGTH_M) == pytest.approx(nu, abs=5e-4)


def test_fresnel_parameter_is_that_of_a_very_far_source() -> None:
    # ITU-R P.526 eq. 26: nu = h sqrt(2 / lambda (1 / d1 + 1 / d2)); at small angles h = d1 times the angle.
    height_m, near_m, far_m = 20.0 * np.deg2rad(0.5), 20.0, 25e6
    nu = height_m * np.sqrt(2.0 / L1_WAVELENGTH_M * (1.0 / near_m + 1.0 / far_m))
    assert fresnel_parameter(0.5, near_m, L1_WAVELENGTH_M) == pytest.approx(nu, abs=1e-5)


# ITU-R P.526 4.1 by eq. 31, L1: distance, angle below the edge (above it where negative), loss.
@pytest.mark.parametrize(
    ("distance_m", "angle_deg", "loss_db"),
    [(20, 1, 8.22), (20, 2, 10.34), (20, 5, 15.53), (20, -1, 3.89), (100, 1, 10.81)],
)
def test_worked_edges_on_l1(distance_m: float, angle_deg: float, loss_db: float) -> None:
    nu = fresnel_parameter(angle_deg, distance_m, L1_WAVELENGTH_M)
    assert knife_edge_loss_db(nu) == pytest.approx(loss_db, abs=HUNDREDTH_DB)


# ITU-R P.526 4.1, eq. 30, L1: angle in the shadow for 10, 15 and 20 dB, and the last angle in the open with
# a loss.
@pytest.mark.parametrize(
    ("distance_m", "angle_10_db", "angle_15_db", "angle_20_db", "angle_clear"),
    [
        (5, 3.72, 9.34, 17.6, 6.15),
        (10, 2.63, 6.60, 12.5, 4.35),
        (20, 1.86, 4.67, 8.81, 3.08),
        (50, 1.18, 2.95, 5.57, 1.95),
        (100, 0.83, 2.09, 3.94, 1.38),
        (500, 0.37, 0.93, 1.76, 0.62),
    ],
)
def test_angles_of_given_losses_on_l1(
    distance_m: float, angle_10_db: float, angle_15_db: float, angle_20_db: float, angle_clear: float
) -> None:
    angle_deg = np.array([angle_10_db, angle_15_db, angle_20_db, -angle_clear])
    loss_db = exact_knife_edge_loss_db(fresnel_parameter(angle_deg, distance_m, L1_WAVELENGTH_M))
    # The angles are rounded to 0.01 degree, or to 0.1 degree where they are large: worth less than 0.1 dB.
    assert loss_db == pytest.approx([10.0, 15.0, 20.0, 0.0], abs=TENTH_DB)


def test_a_strip_without_sides_is_a_knife_edge() -> None:
    # Limit: a screen of endless width is a half plane.
    nu = np.linspace(-0.7, 5.0, 50)
    endless_db = strip_loss_db(-np.inf, np.inf, nu)
    assert endless_db == pytest.approx(exact_knife_edge_loss_db(nu), abs=MILLIBEL_TENTH)
    assert strip_loss_db(nu * -1.0, np.inf, np.inf) == pytest.approx(endless_db, abs=MILLIBEL_TENTH)


def test_a_strip_is_the_same_from_both_sides_and_upside_down() -> None:
    # Symmetry.
    assert strip_loss_db(-0.2, 0.7, 1.1) == pytest.approx(float(strip_loss_db(-0.7, 0.2, 1.1)), abs=1e-9)
    upright = float(strip_loss_db(-0.2, 0.7, 1.1, -0.4))
    assert strip_loss_db(-0.2, 0.7, 0.4, -1.1) == pytest.approx(upright, abs=1e-9)


def test_a_strip_agrees_with_the_integral_over_its_area() -> None:
    # Kirchhoff integral over a rectangle, summed numerically: what the screen takes away is
    # j/2 times the integral of exp(-j pi (x^2 + y^2) / 2) over it.
    def part(low: float, high: float) -> complex:
        edges = np.linspace(low, high, 20_001)
        middles = 0.5 * (edges[1:] + edges[:-1])
        return complex(np.sum(np.exp(-0.5j * np.pi * middles**2)) * (edges[1] - edges[0]))

    field = 1.0 - 0.5j * part(-0.3, 0.5) * part(-1.2, 0.8)
    assert strip_loss_db(-0.3, 0.5, 0.8, -1.2) == pytest.approx(
        -20 * np.log10(abs(field)), abs=MILLIBEL_TENTH
    )


def test_a_vanishing_strip_costs_nothing_and_no_strip_gives_a_gain() -> None:
    assert strip_loss_db(0.1, 0.1, 2.0) == pytest.approx(0.0, abs=1e-9)
    nu = np.linspace(-4.0, 4.0, 201)
    assert np.all(strip_loss_db(nu, nu + 0.8, 5.0) >= 0.0)


def test_a_crane_mast_costs_a_tenth_of_a_wall() -> None:
    # Half a width of 1 m at 60 m, nu = 1 m sqrt(2 / (lambda 60 m)) (ITU-R P.526 eq. 26), the top 30 degrees
    # above: 3.6 dB by its two edges alone; a wall of that height costs 35 dB (eq. 31).
    side = np.sqrt(2.0 / (L1_WAVELENGTH_M * 60.0))
    top = fresnel_parameter(30.0, 60.0, L1_WAVELENGTH_M)
    assert strip_loss_db(-side, side, np.inf) == pytest.approx(3.6, abs=TENTH_DB)
    assert strip_loss_db(-side, side, top) == pytest.approx(3.6, abs=2 * TENTH_DB)
    assert knife_edge_loss_db(top) == pytest.approx(35.0, abs=0.5)


def test_a_thin_pole_close_by_costs_half_a_decibel() -> None:
    # ITU-R P.526 eq. 26 and the difference of two edges: 5 cm at 2 m, on L1.
    side = 0.025 * np.sqrt(2.0 / (L1_WAVELENGTH_M * 2.0))
    assert strip_loss_db(-side, side, np.inf) == pytest.approx(0.5, abs=0.05)


@pytest.mark.parametrize("shape", [(), (3,), (2, 3), (0,)])
def test_shapes_broadcast_and_nan_stays(shape: tuple[int, ...]) -> None:
    nu = np.full(shape, 0.5)
    assert np.shape(knife_edge_loss_db(nu)) == shape
    assert np.shape(exact_knife_edge_loss_db(nu)) == shape
    assert np.shape(strip_loss_db(-nu, nu, 2.0)) == shape
    assert np.shape(fresnel_integrals(nu)[0]) == shape
    assert np.isnan(knife_edge_loss_db(np.nan))
    assert np.isnan(exact_knife_edge_loss_db(np.nan))
    assert np.isnan(strip_loss_db(-1.0, np.nan, 1.0))
