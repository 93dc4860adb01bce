"""The skyline of grids against closed forms, and against marching along rays in small steps."""

from collections.abc import Callable

import matplotlib.cbook
import numpy as np
import pytest
from numpy.typing import NDArray
from scipy.interpolate import RegularGridInterpolator
from scipy.optimize import minimize_scalar

from siteassess.horizon.terrain.far_skyline import tangent
from siteassess.horizon.terrain.height_grid import MISSING_M, HeightGrid
from siteassess.horizon.terrain.read import terrain_skyline

FloatArray = NDArray[np.float64]

RADIUS_M = 8_500_000.0  # ITU-R P.526-8 section 1: radius of the Earth over which rays run straight
SKYLINE_DEG = 0.05
TEN_THOUSANDTH_DEG = 1e-4
THINNING_DEG = 0.011  # points are left out where that moves the line by 0.01 at most


def grid(height_m: FloatArray, cell_m: float, site: tuple[float, float] | None = None) -> HeightGrid:
    """North up; the site at a column and row, or in the middle."""
    rows, columns = height_m.shape
    column, row = site or (0.5 * (columns - 1), 0.5 * (rows - 1))
    terms = np.zeros((2, 2, 2))
    terms[:, 0, 0] = column + 1.0, row + 1.0
    terms[0, 1, 0], terms[1, 0, 1] = 1000.0 / cell_m, -1000.0 / cell_m
    framed = np.pad(height_m, 1, constant_values=MISSING_M).astype(np.float32)
    return HeightGrid(height_m=framed, terms=terms, unit_m=1000.0, cell_m=cell_m)


def ground(shape: Callable[[FloatArray, FloatArray], FloatArray], half: int, cell_m: float) -> HeightGrid:
    """A grid of heights given by east and north of the site."""
    axis_m = np.arange(-half, half + 1) * cell_m
    return grid(shape(axis_m[None, :], -axis_m[:, None]) + np.zeros((len(axis_m), len(axis_m))), cell_m)


def at(line: tuple[FloatArray, FloatArray, FloatArray], azimuth_deg: object) -> FloatArray:
    return np.interp(np.asarray(azimuth_deg), line[0], line[1])


def test_the_earth_drops_by_588_centimetres_in_10_km() -> None:
    # ITU-R P.526-8 section 1, 8 500 km: s^2 / 2R = 5.882 m at 10 km.
    def peak(east_m: FloatArray, north_m: FloatArray) -> FloatArray:
        return np.where((east_m == 10_000.0) & (north_m == 0.0), 105.882, 0.0)

    line = terrain_skyline((ground(peak, 120, 100.0),), 100.0, 100.0, 11_000.0)
    assert at(line, 90.0) == pytest.approx(0.0, abs=TEN_THOUSANDTH_DEG)
    assert 10_000.0 * -tangent(np.array(0.0), np.array(10_000.0), 0.0) == pytest.approx(5.88, abs=0.005)


def test_a_flat_sea_dips_below_the_horizontal() -> None:
    # Tangent to a sphere from the height h: tan(el) = -sqrt(2 h / R), at the distance sqrt(2 h R).
    line = terrain_skyline((ground(lambda e, n: 0.0 * e * n, 150, 200.0),), 40.0, 100.0, 29_000.0)
    np.testing.assert_allclose(line[1], -np.rad2deg(np.sqrt(80.0 / RADIUS_M)), atol=TEN_THOUSANDTH_DEG)


def test_the_earth_hides_a_far_plateau() -> None:
    # 20 m at 25 km or more, seen from 1.5 m: -0.042 deg, below the dip of 0.034 deg.
    plateau = ground(lambda e, n: np.where(e > 25_000.0, 20.0, 0.0) + 0.0 * n, 300, 100.0)
    line = terrain_skyline((plateau,), 1.5, 100.0, 29_000.0)
    np.testing.assert_allclose(line[1], -np.rad2deg(np.sqrt(3.0 / RADIUS_M)), atol=TEN_THOUSANDTH_DEG)


def test_a_slope_that_rises_evenly_is_seen_under_its_own_angle() -> None:
    # A plane z = 0.1 north: toward the azimuth az its tangent is 0.1 cos(az), less the eye and the Earth.
    plane = ground(lambda e, n: 0.1 * n + 0.0 * e, 200, 10.0)
    line = terrain_skyline((plane,), 0.0, 100.0, 1900.0)
    azimuth_deg = np.arange(0.5, 360.0)
    slope = 0.1 * np.cos(np.deg2rad(azimuth_deg))
    expected_deg = np.rad2deg(np.arctan(slope - 100.0 / (2.0 * RADIUS_M)))
    np.testing.assert_allclose(at(line, azimuth_deg), expected_deg, atol=THINNING_DEG)


def test_a_cone_is_seen_as_its_silhouette() -> None:
    # Highest line of sight along each azimuth, found by scipy on the cone itself, not on the grid.
    def cone(east_m: FloatArray, north_m: FloatArray) -> FloatArray:
        return np.maximum(400.0 - 0.5 * np.hypot(east_m - 3000.0, north_m), 0.0)

    line = terrain_skyline((ground(cone, 400, 10.0),), 20.0, 100.0, 3900.0)

    def seen_deg(azimuth_deg: float) -> float:
        east, north = np.sin(np.deg2rad(azimuth_deg)), np.cos(np.deg2rad(azimuth_deg))

        def below(s: float) -> float:
            return -(float(cone(s * east, s * north)) - 20.0) / s + s / (2.0 * RADIUS_M)

        return np.rad2deg(np.arctan(-minimize_scalar(below, bounds=(2300, 3700), method="bounded").fun))

    for azimuth_deg in (78.3, 81.0, 85.7, 89.9, 90.0, 93.2, 101.4):
        assert at(line, azimuth_deg) == pytest.approx(seen_deg(azimuth_deg), abs=SKYLINE_DEG)
    apex_deg = np.rad2deg(np.arctan(380.0 / 3000.0 - 3000.0 / (2.0 * RADIUS_M)))
    assert at(line, 90.0) == pytest.approx(apex_deg, abs=THINNING_DEG)


def test_a_ring_of_hills_stands_equally_high_all_round() -> None:
    # The top of the ring, at 4 km: arctan(150 / 4000 - 4000 / 2R); its width of 300 m moves it by 0.003.
    ring = ground(lambda e, n: 200.0 * np.exp(-(((np.hypot(e, n) - 4000.0) / 300.0) ** 2)), 260, 20.0)
    line = terrain_skyline((ring,), 50.0, 100.0, 5000.0)
    expected_deg = np.rad2deg(np.arctan(150.0 / 4000.0 - 4000.0 / (2.0 * RADIUS_M)))
    np.testing.assert_allclose(line[1], expected_deg, atol=SKYLINE_DEG / 2.0)
    np.testing.assert_allclose(line[2], 4000.0, atol=40.0)


def test_a_thin_peak_between_two_rays_keeps_its_height() -> None:
    # One node of a 10 m grid at 8.9 km: a fifteenth of a degree wide.
    def peak(east_m: FloatArray, north_m: FloatArray) -> FloatArray:
        return np.where((east_m == 3330.0) & (north_m == 8270.0), 200.0, 0.0)

    line = terrain_skyline((ground(peak, 900, 10.0),), 10.0, 100.0, 9000.0)
    away_m = np.hypot(3330.0, 8270.0)
    expected_deg = np.rad2deg(np.arctan(190.0 / away_m - away_m / (2.0 * RADIUS_M)))
    azimuth_deg = np.rad2deg(np.arctan2(3330.0, 8270.0))
    assert at(line, azimuth_deg) == pytest.approx(expected_deg, abs=TEN_THOUSANDTH_DEG)
    assert at(line, azimuth_deg + 0.2) == pytest.approx(-np.rad2deg(np.sqrt(20.0 / RADIUS_M)), abs=0.03)


def elevation_model() -> FloatArray:
    """Heights that matplotlib ships: 344 x 403 cells of about 90 m, 236 to 1 076 m high."""
    return np.asarray(matplotlib.cbook.get_sample_data("jacksboro_fault_dem.npz")["elevation"], dtype=float)


def marched_deg(
    height_m: FloatArray,
    cell_m: float,
    site: tuple[float, float],
    eye_m: float,
    reach_m: float,
    azimuth_deg: FloatArray,
) -> FloatArray:
    """Bilinear heights along rays, the highest of all angles.

    Steps of a quarter of a cell miss ridges near the antenna by up to a degree, so they are a thirty-second
    of a cell, and near the antenna a 2 500th of the distance.
    """
    rows, columns = np.arange(height_m.shape[0]), np.arange(height_m.shape[1])
    surface = RegularGridInterpolator((rows, columns), height_m, bounds_error=False)
    turn_m = 2500.0 * cell_m / 32.0
    near_m = np.exp(np.arange(np.log(100.0), np.log(turn_m), 1.0 / 2500.0))
    s = np.concatenate([near_m, np.arange(turn_m, reach_m, cell_m / 32.0), [reach_m]])[:, None]
    found = []
    for some in np.array_split(azimuth_deg, 8):
        azimuth = np.deg2rad(some)
        place = np.stack(
            [site[1] - s * np.cos(azimuth) / cell_m, site[0] + s * np.sin(azimuth) / cell_m], axis=-1
        )
        found.append(np.nanmax((surface(place) - eye_m) / s - s / (2.0 * RADIUS_M), axis=0))
    return np.rad2deg(np.arctan(np.concatenate(found)))


@pytest.mark.parametrize(
    ("column", "row", "mast_m"),
    [(200, 172, 1.5), (201, 20, 1.5), (300, 60, 30.0), (61.3, 250.7, 1.5), (200, 3, 5.0), (396, 330, 1.5)],
    ids=["middle", "north", "high mast", "between nodes", "edge", "corner"],
)
def test_real_ground_agrees_with_marching(column: float, row: float, mast_m: float) -> None:
    height_m, cell_m = elevation_model(), 90.0
    nodes = RegularGridInterpolator((np.arange(344), np.arange(403)), height_m)
    eye_m = float(nodes((row, column))) + mast_m
    line = terrain_skyline((grid(height_m, cell_m, (column, row)),), eye_m, 100.0, 12_000.0)
    azimuth_deg = np.random.default_rng(7).uniform(0.0, 360.0, 240)
    expected_deg = marched_deg(height_m, cell_m, (column, row), eye_m, 12_000.0, azimuth_deg)
    np.testing.assert_allclose(at(line, azimuth_deg), expected_deg, atol=SKYLINE_DEG)


@pytest.mark.parametrize("which", ["argmin", "argmax"], ids=["valley", "ridge"])
def test_the_lowest_and_the_highest_place_agree_with_marching(which: str) -> None:
    height_m, cell_m = elevation_model(), 90.0
    row, column = np.unravel_index(getattr(height_m, which)(), height_m.shape)
    eye_m = height_m[row, column] + 2.0
    line = terrain_skyline((grid(height_m, cell_m, (column, row)),), eye_m, 100.0, 12_000.0)
    azimuth_deg = np.random.default_rng(8).uniform(0.0, 360.0, 240)
    expected_deg = marched_deg(height_m, cell_m, (column, row), eye_m, 12_000.0, azimuth_deg)
    np.testing.assert_allclose(at(line, azimuth_deg), expected_deg, atol=SKYLINE_DEG)


def test_two_grids_together_are_as_high_as_the_higher_one() -> None:
    low = ground(lambda e, n: 0.0 * e * n, 100, 50.0)
    hill = ground(lambda e, n: 100.0 * np.exp(-((e - 2000.0) ** 2 + n**2) / 300.0**2), 100, 50.0)
    alone = terrain_skyline((hill,), 5.0, 100.0, 4900.0)
    for pair in ((low, hill), (hill, low)):
        both = terrain_skyline(pair, 5.0, 100.0, 4900.0)
        azimuth_deg = np.arange(0.0, 360.0, 0.3)
        np.testing.assert_allclose(at(both, azimuth_deg), at(alone, azimuth_deg), atol=2.0 * THINNING_DEG)


def test_missing_heights_hide_nothing_and_leave_no_trace() -> None:
    # Where nothing is known the line lies at -90; elsewhere it is that of the heights that are there.
    whole = ground(lambda e, n: 0.05 * np.hypot(e, n), 100, 50.0)
    holed = whole.height_m.copy()
    holed[:, 102:] = MISSING_M  # everything east of the site
    line = terrain_skyline(
        (HeightGrid(height_m=holed, terms=whole.terms, unit_m=whole.unit_m, cell_m=50.0),), 0.0, 100.0, 4900.0
    )
    assert (at(line, [10.0, 90.0, 170.0]) == -90.0).all()
    full = terrain_skyline((whole,), 0.0, 100.0, 4900.0)
    np.testing.assert_allclose(at(line, [200, 270, 340]), at(full, [200, 270, 340]), atol=2.0 * THINNING_DEG)
