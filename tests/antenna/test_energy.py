"""Gain summed over the sphere, and what an antenna catches."""

import numpy as np
import pytest

from siteassess.antenna.builtin import builtin_pattern
from siteassess.antenna.energy import effective_area_m2, efficiency, mean_gain
from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.shapes import FLOOR_DBIC, by_elevation, hemisphere, isotropic, uniform_cone
from siteassess.decibels import to_db

L1_HZ = 1575.42e6
TEN_THOUSANDTH = 1e-4
TENTH_PERCENT = 1e-3


def cosine_power(exponent: float, step_deg: float = 0.25) -> GainPattern:
    """2 (n + 1) cos^n of the angle from the zenith, nothing below: lossless by integration."""
    elevation_deg = np.concatenate([[-90.0, 0.0], np.arange(0.0, 90.0 + step_deg / 2.0, step_deg)])
    gain = 2.0 * (exponent + 1.0) * np.sin(np.deg2rad(elevation_deg)).clip(0.0) ** exponent
    return by_elevation("cosine power", elevation_deg, np.maximum(to_db(gain), FLOOR_DBIC))


# Authority: energy conservation; the closed forms integrate to 1 by hand (any antenna textbook).
@pytest.mark.parametrize(
    "pattern",
    [
        isotropic(),
        hemisphere(),
        *[uniform_cone(half_angle_deg) for half_angle_deg in (5.0, 30.0, 60.0, 90.0, 120.0)],
        *[cosine_power(exponent) for exponent in (1.0, 2.0, 4.0, 10.0)],
    ],
    ids=lambda pattern: f"{pattern.name} {pattern.gain_dbic.max():.1f} dBic",
)
def test_lossless_pattern_radiates_all_it_is_fed(pattern: GainPattern) -> None:
    assert mean_gain(pattern, L1_HZ).co == pytest.approx(1.0, abs=TEN_THOUSANDTH)
    assert mean_gain(pattern, L1_HZ).cross == 0.0


def test_mean_gain_agrees_with_numerical_integration() -> None:
    # Authority: scipy's adaptive double integration of the same bilinear table.
    from scipy.integrate import dblquad

    from siteassess.antenna.gain import gain_dbic

    azimuth_deg, elevation_deg = np.array([0.0, 120.0, 240.0, 360.0]), np.array([-90.0, -20.0, 30.0, 90.0])
    levels = np.random.default_rng(7).uniform(-12.0, 6.0, (1, 4, 4))
    levels[:, -1] = levels[:, 0]
    pattern = GainPattern(
        name="uneven",
        carrier_hz=np.array([np.nan]),
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        gain_dbic=levels,
    )

    def density(elevation: float, azimuth: float) -> float:
        level = float(gain_dbic(pattern, azimuth, elevation, L1_HZ))
        return float(10.0 ** (level / 10.0) * np.cos(np.deg2rad(elevation)))

    cells = [
        dblquad(density, *azimuth_deg[i : i + 2], *elevation_deg[j : j + 2], epsabs=1e-4)[0]
        for i in range(3)
        for j in range(3)
    ]
    expected = sum(cells) * np.deg2rad(1.0) ** 2 / (4.0 * np.pi)
    assert mean_gain(pattern, L1_HZ).total == pytest.approx(expected, abs=1e-6)


def test_turning_a_pattern_on_its_axis_keeps_its_energy() -> None:
    levels = np.array([[[-20.0, 0.0, 5.0], [-15.0, 2.0, 5.0], [-18.0, -3.0, 5.0], [-20.0, 0.0, 5.0]]])

    def pattern(order: list[int]) -> GainPattern:
        return GainPattern(
            name="lobed",
            carrier_hz=np.array([np.nan]),
            azimuth_deg=np.array([0.0, 120.0, 240.0, 360.0]),
            elevation_deg=np.array([-90.0, 0.0, 90.0]),
            gain_dbic=levels[:, order],
        )

    turned = mean_gain(pattern([1, 2, 0, 1]), L1_HZ).total
    assert turned == pytest.approx(mean_gain(pattern([0, 1, 2, 3]), L1_HZ).total, rel=1e-12)


def test_cross_polar_power_counts_as_radiated() -> None:
    half = by_elevation("half", np.array([-90.0, 90.0]), np.full(2, -3.0103), np.full(2, -3.0103))
    assert efficiency(half, L1_HZ) == pytest.approx(1.0, abs=TEN_THOUSANDTH)


@pytest.mark.parametrize("name", ["patch", "ground-plane", "choke-ring"])
def test_generic_antenna_radiates_most_of_what_it_is_fed(name: str) -> None:
    # Common practice, no source: 0.6 to 0.95 of the power leaves such antennas.
    assert 0.6 < efficiency(builtin_pattern(name), L1_HZ) < 0.95


def test_isotropic_antenna_catches_wavelength_squared_over_four_pi() -> None:
    # Authority: definition of the isotropic radiator; wavelength 0.190294 m at 1575.42 MHz.
    expected_m2 = 0.190294**2 / (4.0 * np.pi)
    assert effective_area_m2(0.0, L1_HZ) == pytest.approx(expected_m2, rel=TENTH_PERCENT)


def test_power_flux_of_the_guaranteed_signal_turns_back_into_its_power() -> None:
    # Closed form: 4 pi / wavelength squared makes -133.10 dBW/m2 of -158.5 dBW at an isotropic antenna at L1.
    assert -133.10 + to_db(effective_area_m2(0.0, L1_HZ)) == pytest.approx(-158.5, abs=0.01)
