"""Brightness of the open sky."""

import numpy as np
import pytest

from siteassess.link_budget.noise.brightness import (
    ATMOSPHERE_K,
    COSMIC_BACKGROUND_K,
    atmosphere_brightness_k,
    galactic_brightness_k,
    sky_brightness_k,
)

L1_HZ, L5_HZ = 1575.42e6, 1176.45e6
ONE_K = 1.0


@pytest.mark.parametrize(("elevation_deg", "expected_k"), [(5.0, 22.0), (50.0, 3.0), (90.0, 2.0)])
def test_clear_air_at_l1(elevation_deg: float, expected_k: float) -> None:
    # Authority: a published note on navigation-satellite links: 22, 3 and 2 K at 5, 50 and 90 degrees.
    assert atmosphere_brightness_k(L1_HZ, elevation_deg) == pytest.approx(expected_k, abs=ONE_K)


def test_air_at_the_horizon() -> None:
    # Authority: P.372 figures, about 100 K at the horizon between 1 and 2 GHz (value from memory), within a
    # factor of two.
    assert 50.0 < atmosphere_brightness_k(L1_HZ, 0.0) < 200.0


def test_galaxy_between_one_and_ten_kelvin() -> None:
    # Authority: P.372 figures away from the plane of the Galaxy (value from memory).
    assert 1.0 < galactic_brightness_k(L1_HZ) < galactic_brightness_k(L5_HZ) < 10.0


def test_sky_lies_between_what_is_behind_the_air_and_the_air() -> None:
    # Law: radiative transfer through one layer mixes the two temperatures.
    sky_k = sky_brightness_k(L1_HZ, np.linspace(0.0, 90.0, 181))
    assert np.all(sky_k > COSMIC_BACKGROUND_K + galactic_brightness_k(L1_HZ))
    assert np.all(sky_k < ATMOSPHERE_K)
    assert np.all(np.diff(sky_k) < 0.0)


@pytest.mark.parametrize("elevation_deg", [10.0, np.zeros(3), np.zeros((2, 3)), np.zeros(0)], ids=np.shape)
def test_brightness_has_the_shape_of_its_elevations(elevation_deg: np.ndarray) -> None:
    assert sky_brightness_k(L1_HZ, elevation_deg).shape == np.shape(elevation_deg)


def test_unknown_elevation_has_no_brightness() -> None:
    assert np.isnan(sky_brightness_k(L1_HZ, np.nan))
