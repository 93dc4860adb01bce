"""Rods, poles and masts: the loss straight behind them, and the lines of sight that graze them."""

import numpy as np
import pytest
from scipy.special import fresnel

from siteassess.angles import direction
from siteassess.horizon.skyline import Obstacle
from siteassess.link_budget.obstacles.thin import grazes, is_thin, loss_behind_db

HUNDREDTH_DB = 0.01
L1_HZ = 1575.42e6
L1_WAVELENGTH_M = 299_792_458 / L1_HZ


def pole(width_m: float, distance_m: float, top_deg: float = 40.0, azimuth_deg: float = 100.0) -> Obstacle:
    half_deg = np.rad2deg(np.arctan2(width_m / 2, distance_m))
    return Obstacle(
        name="pole",
        cover="solid",
        azimuth_deg=np.array([azimuth_deg - half_deg, azimuth_deg + half_deg]),
        elevation_deg=np.array([top_deg, top_deg]),
        distance_m=np.full(2, distance_m / np.cos(np.deg2rad(top_deg))),
        width_m=width_m,
    )


def share_taken(nu: float) -> complex:
    """Part of the undisturbed field between -nu and nu, by SciPy's Fresnel integrals."""
    sine, cosine = fresnel(nu)
    return complex((1 + 1j) * (cosine - 1j * sine))


def loss_of_two_edges_db(width_m: float, distance_m: float, across_nu: float = np.inf) -> float:
    """What passes on both sides of a strip, which may end on the other two sides."""
    taken = share_taken(width_m / 2 * np.sqrt(2 / (L1_WAVELENGTH_M * distance_m)))
    return float(-20 * np.log10(abs(1 - taken * share_taken(across_nu))))


@pytest.mark.parametrize(
    ("width_m", "distance_m"), [(0.02, 1.0), (0.05, 2.0), (0.07, 6.0), (0.3, 15.0), (2.0, 60.0)]
)
def test_loss_straight_behind_a_pole_against_scipy(width_m: float, distance_m: float) -> None:
    # Authority: P.526 5.1, a screen of two edges, with scipy.special.fresnel, for a source at infinity.
    found_db = loss_behind_db(pole(width_m, distance_m), L1_HZ)
    assert found_db == pytest.approx(max(loss_of_two_edges_db(width_m, distance_m), 0.0), abs=HUNDREDTH_DB)


def test_a_thin_rod_costs_a_fraction_of_a_decibel_and_a_mast_some() -> None:
    # A rod 2 cm wide at 1 m takes sqrt(2) nu of the field at most: 20 log10(1 / (1 - 0.04)) = 0.4 dB.
    losses_db = [loss_behind_db(pole(width_m, 6.0), L1_HZ) for width_m in (0.01, 0.07, 0.3)]
    assert losses_db == sorted(losses_db)
    assert losses_db[0] < 0.1
    assert 0.3 < losses_db[1] < 1.0


def test_loss_behind_what_hangs_free_against_scipy() -> None:
    """Authority: Kirchhoff's integral over a rectangle by SciPy; a jib 2 m high, 160 degrees long."""
    half_deg = np.rad2deg(np.arctan(1.0 / 60.0))
    jib = Obstacle(
        name="jib",
        cover="solid",
        azimuth_deg=np.array([100.0, 260.0]),
        elevation_deg=np.full(2, half_deg),
        underside_deg=np.full(2, -half_deg),
        distance_m=np.full(2, 60.0 / np.cos(np.deg2rad(half_deg))),
    )
    assert is_thin(jib, L1_HZ)
    end_nu = 2 * np.sqrt(2 * 60.0 / L1_WAVELENGTH_M) * np.sin(np.deg2rad(40.0))
    expected_db = loss_of_two_edges_db(2.0, 60.0, end_nu)
    assert loss_behind_db(jib, L1_HZ) == pytest.approx(expected_db, abs=HUNDREDTH_DB)
    assert expected_db == pytest.approx(loss_of_two_edges_db(2.0, 60.0), abs=0.2)  # the ends count little


def test_what_counts_as_thin() -> None:
    assert is_thin(pole(0.05, 2.0), L1_HZ)
    assert not is_thin(pole(8.0, 20.0), L1_HZ)  # wider than the first Fresnel zone, 3.9 m
    wall = Obstacle(
        name="wall",
        cover="solid",
        azimuth_deg=np.array([10.0, 12.0]),
        elevation_deg=np.array([10.0, 10.0]),
        distance_m=np.array([20.0, 20.0]),
    )
    assert not is_thin(wall, L1_HZ)


@pytest.mark.parametrize("distance_m", [2.0, 20.0, 60.0])
def test_grazing_is_within_half_a_wavelength_of_detour(distance_m: float) -> None:
    """Authority: the detour over points of the pole in space, by brute force."""
    thing = pole(0.1, distance_m, top_deg=35.0, azimuth_deg=2.0)
    azimuth_deg, elevation_deg = (
        grid.ravel() for grid in np.meshgrid(np.arange(330.0, 400.0, 0.7) % 360.0, np.arange(5.0, 75.0, 0.7))
    )
    up_m = np.linspace(0.0, distance_m * np.tan(np.deg2rad(35.0)), 4001)
    east_m, north_m = distance_m * np.sin(np.deg2rad(2.0)), distance_m * np.cos(np.deg2rad(2.0))
    points_m = np.stack([np.full_like(up_m, east_m), np.full_like(up_m, north_m), up_m])
    sights = direction(azimuth_deg, elevation_deg)
    detour_m = (np.linalg.norm(points_m, axis=0)[:, None] - points_m.T @ sights).min(axis=0)
    near = grazes(thing, azimuth_deg, elevation_deg, L1_HZ)
    # Its sides are taken at the distance of its top: nearer or further by the cosine of their elevations.
    slack = 1.3
    assert near[detour_m < L1_WAVELENGTH_M / 2 / slack].all()
    assert not near[detour_m > L1_WAVELENGTH_M / 2 * slack].any()
    assert near.any()
    assert not near.all()


def test_no_direction_grazes_nothing() -> None:
    assert grazes(pole(0.1, 5.0), np.empty(0), np.empty(0), L1_HZ).shape == (0,)
