"""Interpolation on even and uneven axes."""

import numpy as np
import pytest

from siteassess.antenna.interpolate import PIECE, along_line, even_step_deg, over_sphere

AZIMUTHS_DEG, ELEVATIONS_DEG = np.arange(0.0, 361.0, 5.0), np.arange(-90.0, 91.0, 3.0)


def levels() -> np.ndarray:
    table = np.random.default_rng(3).uniform(-20.0, 6.0, (AZIMUTHS_DEG.size, ELEVATIONS_DEG.size))
    table[-1] = table[0]
    table[:, [0, -1]] = table[0, [0, -1]]
    return table


@pytest.mark.parametrize("drop", [None, 7], ids=["even", "uneven"])
def test_sphere_agrees_with_scipy(drop: int | None) -> None:
    # Authority: scipy.interpolate.RegularGridInterpolator, linear; more directions than fit into one piece.
    from scipy.interpolate import RegularGridInterpolator

    keep = [index for index in range(AZIMUTHS_DEG.size) if index != drop]
    table, axis_deg = levels()[keep], AZIMUTHS_DEG[keep]
    random = np.random.default_rng(4)
    azimuth_deg = random.uniform(0.0, 360.0, 2 * PIECE + 11)
    elevation_deg = random.uniform(-90.0, 90.0, azimuth_deg.size)
    expected = RegularGridInterpolator((axis_deg, ELEVATIONS_DEG), table)(
        np.column_stack([azimuth_deg, elevation_deg])
    )
    seen = over_sphere(axis_deg, ELEVATIONS_DEG, table, azimuth_deg, elevation_deg)
    assert seen == pytest.approx(expected, abs=1e-9)


@pytest.mark.parametrize("elevation_deg", [90.0, -90.0])
def test_azimuth_does_not_matter_at_the_poles(elevation_deg: float) -> None:
    seen = over_sphere(AZIMUTHS_DEG, ELEVATIONS_DEG, levels(), np.linspace(-400.0, 800.0, 97), elevation_deg)
    assert np.ptp(seen) < 1e-12


def test_north_has_no_seam() -> None:
    around_deg = np.array([-1e-9, -1e-20, 0.0, 360.0 - 1e-9, 360.0, 720.0])
    assert np.ptp(over_sphere(AZIMUTHS_DEG, ELEVATIONS_DEG, levels(), around_deg, 12.0)) < 1e-6


@pytest.mark.parametrize("axis_deg", [ELEVATIONS_DEG, np.array([-90.0, 0.0, 0.0, 20.0, 90.0])])
def test_line_agrees_with_numpy(axis_deg: np.ndarray) -> None:
    table = np.random.default_rng(6).uniform(-20.0, 6.0, axis_deg.size)
    value_deg = np.concatenate([np.random.default_rng(7).uniform(-90.0, 90.0, 9000), axis_deg, [-91.0, 95.0]])
    assert along_line(axis_deg, table, value_deg) == pytest.approx(
        np.interp(value_deg, axis_deg, table), abs=1e-9
    )


def test_unknown_directions_stay_unknown() -> None:
    unknown = np.full(500, np.nan)
    assert np.isnan(along_line(ELEVATIONS_DEG, levels()[0], unknown)).all()
    assert np.isnan(over_sphere(AZIMUTHS_DEG, ELEVATIONS_DEG, levels(), 0.0, unknown)).all()
    assert np.isnan(over_sphere(AZIMUTHS_DEG, ELEVATIONS_DEG, levels(), unknown, 0.0)).all()


def test_axis_of_one_point_has_no_step() -> None:
    assert even_step_deg(np.array([5.0])) is None
