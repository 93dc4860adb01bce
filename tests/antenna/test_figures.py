"""Directivity, beam width and front-to-back ratio."""

import numpy as np
import pytest

from siteassess.antenna.builtin import builtin_pattern
from siteassess.antenna.figures import antenna_figures, half_power_width_deg
from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.shapes import FLOOR_DBIC, by_elevation, hemisphere, isotropic, uniform_cone
from siteassess.decibels import to_db

L1_HZ = 1575.42e6
HUNDREDTH_DB = 0.01
TENTH_DEG = 0.1
ELEVATION_DEG = np.arange(-90.0, 90.1, 0.25)


def cosine_power(exponent: float) -> GainPattern:
    up = np.sin(np.deg2rad(ELEVATION_DEG)).clip(0.0)
    gain_dbic = np.maximum(to_db(2.0 * (exponent + 1.0) * up**exponent), FLOOR_DBIC)
    return by_elevation("cosine power", ELEVATION_DEG, gain_dbic)


@pytest.mark.parametrize("exponent", [1.0, 2.0, 4.0, 10.0])
def test_cosine_power_has_the_figures_of_its_closed_form(exponent: float) -> None:
    # Authority: integration by hand. Directivity 2 (n + 1); half power at the angle whose cosine is 2^(-1/n).
    figures = antenna_figures(cosine_power(exponent), L1_HZ)
    assert figures.directivity_dbic == pytest.approx(
        10.0 * np.log10(2.0 * (exponent + 1.0)), abs=HUNDREDTH_DB
    )
    expected_deg = 2.0 * np.rad2deg(np.arccos(2.0 ** (-1.0 / exponent)))
    assert figures.half_power_width_deg == pytest.approx(expected_deg, abs=TENTH_DEG)
    assert figures.narrowest_deg == figures.widest_deg
    assert figures.efficiency.total == pytest.approx(1.0, abs=1e-4)


def test_crossed_dipoles_agree_with_integration() -> None:
    # Authority: scipy. Crossed dipoles in quadrature radiate ((1 + |sin e|) / 2)^2 right- and
    # ((1 - |sin e|) / 2)^2 left-hand upward (short dipoles, textbook form).
    from scipy.integrate import quad
    from scipy.optimize import brentq

    def co(elevation_rad: float) -> float:
        return float((1.0 + np.sin(elevation_rad)) / 2.0) ** 2

    def cross(elevation_rad: float) -> float:
        return float((1.0 - np.sin(elevation_rad)) / 2.0) ** 2

    mean = quad(lambda e: (co(e) + cross(e)) * np.cos(e) / 2.0, -np.pi / 2.0, np.pi / 2.0)[0]
    half_rad = brentq(lambda e: co(e) - 0.5, 0.0, np.pi / 2.0)
    elevation_rad = np.deg2rad(ELEVATION_DEG)
    pattern = by_elevation(
        "crossed dipoles",
        ELEVATION_DEG,
        np.maximum(to_db([co(e) / mean for e in elevation_rad]), FLOOR_DBIC),
        np.maximum(to_db([cross(e) / mean for e in elevation_rad]), FLOOR_DBIC),
    )
    figures = antenna_figures(pattern, L1_HZ)
    assert figures.directivity_dbic == pytest.approx(10.0 * np.log10(1.0 / mean), abs=HUNDREDTH_DB)
    assert figures.half_power_width_deg == pytest.approx(180.0 - 2.0 * np.rad2deg(half_rad), abs=TENTH_DEG)
    zenith, low = figures.gains[-1], figures.gains[2]
    assert zenith.axial_ratio_db == pytest.approx(0.0, abs=HUNDREDTH_DB)
    # At elevation 30 one dipole pair is foreshortened by sin 30: axial ratio 2, or 6.02 dB.
    assert low.axial_ratio_db == pytest.approx(6.02, abs=HUNDREDTH_DB)
    assert low.polarisation_loss_db == pytest.approx(
        10.0 * np.log10(1.0 + (0.5 / 1.5) ** 2), abs=HUNDREDTH_DB
    )


@pytest.mark.parametrize("half_angle_deg", [20.0, 60.0, 120.0])
def test_cone_is_as_wide_as_it_is(half_angle_deg: float) -> None:
    assert half_power_width_deg(uniform_cone(half_angle_deg), L1_HZ) == pytest.approx(2.0 * half_angle_deg)


def test_figures_of_simple_shapes() -> None:
    even, half = antenna_figures(isotropic(), np.nan), antenna_figures(hemisphere(), L1_HZ)
    assert (even.half_power_width_deg, even.front_to_back_db, even.effective_area_m2) == (None, 0.0, None)
    assert half.half_power_width_deg == pytest.approx(180.0)
    assert half.directivity_dbic == pytest.approx(3.0103, abs=1e-3)
    assert half.front_to_back_db == pytest.approx(203.0, abs=0.1)
    assert half.effective_area_m2 == pytest.approx(2.0 * 0.190294**2 / (4.0 * np.pi), rel=1e-3)


def test_width_differs_from_plane_to_plane() -> None:
    azimuth_deg = np.arange(0.0, 361.0, 90.0)
    elevation_deg = np.array([-90.0, 0.0, 90.0])
    levels = np.array([[[-30.0, low, 0.0] for low in (-9.0, -6.0, -9.0, -6.0, -9.0)]])
    pattern = GainPattern(
        name="oval",
        carrier_hz=np.array([np.nan]),
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        gain_dbic=levels,
    )
    figures = antenna_figures(pattern, L1_HZ)
    # 3.0103 dB below the zenith at 3.0103 / 9 and 3.0103 / 6 of the quarter circle, on both sides.
    assert figures.narrowest_deg == pytest.approx(180.0 * 3.0103 / 9.0, abs=TENTH_DEG)
    assert figures.widest_deg == pytest.approx(180.0 * 3.0103 / 6.0, abs=TENTH_DEG)
    assert figures.gains[0].lowest_dbic < figures.gains[0].mean_dbic < figures.gains[0].highest_dbic


def test_unknown_cross_polar_gain_has_no_axial_ratio() -> None:
    gains = antenna_figures(isotropic(), L1_HZ).gains
    assert {gain.axial_ratio_db for gain in gains} == {None}
    known = antenna_figures(builtin_pattern("patch"), L1_HZ).gains
    assert all(gain.axial_ratio_db is not None and gain.axial_ratio_db > 0.0 for gain in known)


def test_loss_takes_gain_and_leaves_directivity() -> None:
    # Definition: directivity counts what is radiated, gain what is fed.
    whole, lossy = hemisphere(), by_elevation(
        "lossy", np.array([-90.0, 0.0, 0.0, 90.0]), np.array([FLOOR_DBIC, FLOOR_DBIC, 1.0103, 1.0103])
    )  # fmt: skip
    assert antenna_figures(lossy, L1_HZ).directivity_dbic == pytest.approx(
        antenna_figures(whole, L1_HZ).directivity_dbic, abs=HUNDREDTH_DB
    )
    assert antenna_figures(lossy, L1_HZ).peak_gain_dbic == pytest.approx(1.0103)
