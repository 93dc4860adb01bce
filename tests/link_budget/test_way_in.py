"""The way in past obstacles, against ITU-R P.526 and P.833 and against geometry by brute force."""

import numpy as np
import pytest
from numpy.typing import NDArray

from siteassess.angles import direction
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import GENERAL_SKYLINE, Obstacle, Skyline
from siteassess.link_budget.obstacles.edges import lower_edges, smallest_detour_m, upper_edges
from siteassess.link_budget.obstacles.way_in import is_narrow, skyline_loss_db

HUNDREDTH_DB = 0.01
TENTH_DB = 0.1
# Arcs of great circles stand in for edges that are linear in azimuth and elevation, to 0.03 degrees.
ARC_DEG = 0.03
L1_HZ = 1575.42e6
L1_WAVELENGTH_M = 299_792_458 / L1_HZ


def skyline(*obstacles: Obstacle) -> Skyline:
    return Skyline(obstacles=obstacles, outline=upper_envelope(obstacles), unsurveyed_deg=np.empty((0, 2)))


def solid(
    azimuth_deg: list[float],
    elevation_deg: list[float],
    distance_m: list[float] | None,
    underside_deg: list[float] | None = None,
    name: str = "obstacle",
    straight: bool = False,
) -> Obstacle:
    return Obstacle(
        name=name,
        cover="solid",
        azimuth_deg=np.array(azimuth_deg),
        elevation_deg=np.array(elevation_deg),
        distance_m=None if distance_m is None else np.array(distance_m),
        underside_deg=None if underside_deg is None else np.array(underside_deg),
        straight_in_space=straight,
    )


def loss_db(obstacle: Obstacle, azimuth_deg: float, elevation_deg: float) -> float:
    loss, _ = skyline_loss_db(skyline(obstacle), np.array([azimuth_deg]), np.array([elevation_deg]), L1_HZ)
    return float(loss[0])


def upright_m(distance_m: float, elevation_deg: float, top_deg: float) -> float:
    """Slant distance to the top of an upright obstacle that is `distance_m` away at an elevation."""
    return float(distance_m * np.cos(np.deg2rad(elevation_deg)) / np.cos(np.deg2rad(top_deg)))


LONG_EDGE = solid([90.0, 270.0], [20.0, 20.0], [20.0, 20.0])
RING = solid([0.0, 360.0], [20.0, 20.0], [20.0, 20.0], name=GENERAL_SKYLINE)
WALL = solid([60.0, 120.0], [40.0, 40.0], [20.0, 20.0], straight=True)


# ITU-R P.526 4.1 by eq. 31, L1, edge at 20 m: 1, 2 and 5 degrees below it and 1 degree above.
@pytest.mark.parametrize("obstacle", [LONG_EDGE, RING])
@pytest.mark.parametrize(
    ("elevation_deg", "expected_db"), [(19.0, 8.22), (18.0, 10.34), (15.0, 15.53), (21.0, 3.89), (24.0, 0.0)]
)
def test_a_long_edge_is_a_knife_edge(obstacle: Obstacle, elevation_deg: float, expected_db: float) -> None:
    assert loss_db(obstacle, 180.0, elevation_deg) == pytest.approx(expected_db, abs=2 * HUNDREDTH_DB)


# ITU-R P.526 4.1 by eq. 31: one degree beside a vertical edge at 20 m costs 3.89 dB, one degree behind it
# 8.22 dB. The azimuth gap at the elevation of the satellite is an angle of gap times cosine of elevation.
@pytest.mark.parametrize("elevation_deg", [0.0, 10.0, 30.0])
@pytest.mark.parametrize(("side", "expected_db"), [(1.0, 3.89), (-1.0, 8.22)])
def test_a_side_is_an_edge_like_the_top(elevation_deg: float, side: float, expected_db: float) -> None:
    wall = solid([60.0, 120.0], [40.0, 40.0], [upright_m(20.0, elevation_deg, 40.0)] * 2, straight=True)
    gap_deg = side / np.cos(np.deg2rad(elevation_deg))
    for azimuth_deg in (60.0 - gap_deg, 120.0 + gap_deg):
        assert loss_db(wall, azimuth_deg, elevation_deg) == pytest.approx(expected_db, abs=HUNDREDTH_DB)


def test_an_underside_is_an_edge_like_the_top() -> None:
    # ITU-R P.526 4.1 by eq. 31: one degree under a wide canopy at 20 m, and one degree into it from below.
    canopy = solid([90.0, 270.0], [60.0, 60.0], [20.0, 20.0], underside_deg=[30.0, 30.0])
    assert loss_db(canopy, 180.0, 29.0) == pytest.approx(3.89, abs=2 * HUNDREDTH_DB)
    assert loss_db(canopy, 180.0, 31.0) == pytest.approx(8.22, abs=2 * HUNDREDTH_DB)
    assert loss_db(canopy, 180.0, 10.0) == 0.0


def test_a_vertical_edge_of_the_general_skyline_is_a_side() -> None:
    # ITU-R P.526 4.1 by eq. 31: one degree beside the edge of a tower at 20 m in a far, low skyline.
    top_m = upright_m(20.0, 15.0, 40.0)
    tower = solid(
        [0.0, 100.0, 100.0, 130.0, 130.0, 360.0],
        [2.0, 2.0, 40.0, 40.0, 2.0, 2.0],
        [500.0, 500.0, top_m, top_m, 500.0, 500.0],
        name=GENERAL_SKYLINE,
    )
    gap_deg = 1.0 / np.cos(np.deg2rad(15.0))
    assert loss_db(tower, 100.0 - gap_deg, 15.0) == pytest.approx(3.89, abs=HUNDREDTH_DB)
    assert loss_db(tower, 130.0 + gap_deg, 15.0) == pytest.approx(3.89, abs=HUNDREDTH_DB)


def test_a_crane_mast_costs_a_tenth_of_a_wall() -> None:
    # 2 m wide at 60 m, axis on the line of sight, top 30 degrees above it: 3.6 dB by the difference of its
    # edges (ITU-R P.526 eqs. 26 and 30); a wall as high costs 35 dB (eq. 31).
    half_deg = np.rad2deg(1.0 / 60.0)
    mast = solid([90.0 - half_deg, 90.0 + half_deg], [35.0, 35.0], [upright_m(60.0, 5.0, 35.0)] * 2)
    wall = solid([0.0, 180.0], [35.0, 35.0], [60.0, 60.0])
    assert loss_db(mast, 90.0, 5.0) == pytest.approx(3.6, abs=2 * TENTH_DB)
    assert loss_db(wall, 90.0, 5.0) == pytest.approx(35.0, abs=5 * TENTH_DB)


def test_a_pole_through_north_costs_half_a_decibel_all_round_it() -> None:
    # 5 cm at 2 m: 0.5 dB by the difference of its edges (ITU-R P.526 eqs. 26 and 30).
    half_deg = np.rad2deg(0.025 / 2.0)
    pole = solid([360.0 - half_deg, 360.0 + half_deg], [40.0, 40.0], [upright_m(2.0, 5.0, 40.0)] * 2)
    assert is_narrow(pole, L1_WAVELENGTH_M)
    for azimuth_deg in (0.0, 360.0, 359.9):
        assert loss_db(pole, azimuth_deg, 5.0) == pytest.approx(0.5, abs=TENTH_DB)
    assert loss_db(pole, 180.0, 5.0) == 0.0
    assert loss_db(pole, 0.0, 75.0) == 0.0


def test_a_mast_seen_steeply_spans_more_azimuth_for_its_width() -> None:
    # Geometry: at 60 degrees of elevation an azimuth gap is half as wide on the sky, so a mast of twice the
    # azimuth span costs what it costs at the horizon: 2 m at 60 m, 3.6 dB.
    half_deg = 2.0 * np.rad2deg(1.0 / 60.0)
    mast = solid([90.0 - half_deg, 90.0 + half_deg], [85.0, 85.0], [upright_m(60.0, 60.0, 85.0)] * 2)
    assert loss_db(mast, 90.0, 60.0) == pytest.approx(3.6, abs=2 * TENTH_DB)


# Kirchhoff integral over an upright screen, 10 m away in plan and 60 degrees high, met by a plane wave on L1:
# summed point by point over the screen, without the small-angle terms that Fresnel integrals leave out.
@pytest.mark.parametrize("width_m", [0.2, 0.6, 1.2, 2.0])
@pytest.mark.parametrize("elevation_deg", [10.0, 30.0, 50.0, 61.0])
@pytest.mark.parametrize("beside_deg", [-4.0, 1.0, 2.0, 4.0])
def test_a_narrow_screen_is_a_kirchhoff_integral(
    width_m: float, elevation_deg: float, beside_deg: float
) -> None:
    plan_m, top_deg = 10.0, 60.0
    half_deg = float(np.rad2deg(np.arctan2(width_m / 2.0, plan_m)))
    beside_deg = max(half_deg + beside_deg, 0.0)
    top_m = upright_m(plan_m, 0.0, top_deg)
    screen = solid([180.0 - half_deg, 180.0 + half_deg], [top_deg] * 2, [top_m] * 2)
    expected_db = kirchhoff_loss_db(width_m, plan_m, top_deg, beside_deg, elevation_deg)
    loss = loss_db(screen, 180.0 + beside_deg, elevation_deg)
    assert loss == pytest.approx(max(expected_db, 0.0), abs=4 * TENTH_DB)


def kirchhoff_loss_db(
    width_m: float, plan_m: float, top_deg: float, azimuth_deg: float, elevation_deg: float
) -> float:
    """Loss behind an upright screen square to the azimuth 0, its lower end faded out far below."""
    wave_number = 2.0 * np.pi / L1_WAVELENGTH_M
    top_m = plan_m * np.tan(np.deg2rad(top_deg))
    low_m = -20.0
    across_m, across_step_m = middles(-width_m / 2.0, width_m / 2.0)
    up_m, up_step_m = middles(low_m, top_m)
    fade = 1.0 / (1.0 + np.exp(low_m + 6.0 - up_m))
    east, north, up = direction(azimuth_deg, elevation_deg)
    range_m = np.sqrt(across_m[:, None] ** 2 + plan_m**2 + up_m**2)
    ahead_m = east * across_m[:, None] + north * plan_m + up * up_m
    wave = np.exp(1j * wave_number * (range_m - ahead_m)) * (plan_m / range_m + north) / (2.0 * range_m)
    taken = wave_number / (2j * np.pi) * np.sum(wave * fade) * across_step_m * up_step_m
    return float(-20.0 * np.log10(np.abs(1.0 - taken)))


def middles(low: float, high: float) -> tuple[NDArray[np.float64], float]:
    """Middles of steps of about 2 cm, a tenth of the wavelength, and the exact step."""
    steps = int(np.ceil((high - low) / 0.02))
    step = (high - low) / steps
    return low + step * (np.arange(steps) + 0.5), step


@pytest.mark.parametrize("elevation_deg", [15.2, 16.0, 17.0])
def test_two_walls_that_touch_are_one_wall(elevation_deg: float) -> None:
    # Geometry: a label in the middle of a wall moves no edge.
    azimuth_deg = np.array([100.0, 116.0, 119.0, 120.0, 120.5, 149.0, 151.0])
    elevations_deg = np.full(azimuth_deg.shape, elevation_deg)
    whole = solid([90.0, 120.0, 150.0], [15.0] * 3, [30.0] * 3)
    halves = (
        solid([90.0, 120.0], [15.0] * 2, [30.0] * 2, name="first"),
        solid([120.0, 150.0], [15.0] * 2, [30.0] * 2, name="second"),
    )
    expected_db, _ = skyline_loss_db(skyline(whole), azimuth_deg, elevations_deg, L1_HZ)
    parts_db, _ = skyline_loss_db(skyline(*halves), azimuth_deg, elevations_deg, L1_HZ)
    assert parts_db == pytest.approx(expected_db, abs=HUNDREDTH_DB)


def test_an_obstacle_that_costs_nothing_is_not_named() -> None:
    canopy = solid([90.0, 270.0], [60.0, 60.0], [20.0, 20.0], underside_deg=[30.0, 30.0])
    loss, costly = skyline_loss_db(skyline(canopy), np.array([180.0]), np.array([10.0]), L1_HZ)
    assert (loss.tolist(), costly.tolist()) == ([0.0], [-1])


def test_a_thin_jib_costs_as_much_lying_as_a_mast_standing() -> None:
    # Symmetry: a bar 1 m deep at 50 m overhead loses by its two long edges what a mast 1 m wide loses.
    half_deg = np.rad2deg(0.5 / 50.0)
    jib = solid([120.0, 240.0], [30.0 + half_deg] * 2, [50.0, 50.0], underside_deg=[30.0 - half_deg] * 2)
    mast = solid([180.0 - half_deg, 180.0 + half_deg], [60.0, 60.0], [upright_m(50.0, 0.0, 60.0)] * 2)
    assert is_narrow(jib, L1_WAVELENGTH_M)
    assert loss_db(jib, 180.0, 30.0) == pytest.approx(loss_db(mast, 180.0, 0.0), abs=3 * TENTH_DB)


def test_an_edge_of_unknown_distance_is_hard() -> None:
    assert loss_db(solid([90.0, 270.0], [20.0, 20.0], None), 180.0, 20.1) == 0.0
    part = solid([0.0, 180.0, 360.0], [20.0] * 3, [20.0, np.nan, 20.0], name=GENERAL_SKYLINE)
    assert loss_db(part, 90.0, 20.1) == 0.0


# ITU-R P.833-10, 2.2: 10 m at 30 degrees on L1, 9.306 dB; leafless a sixth less.
@pytest.mark.parametrize(
    ("leaf", "expected_db"), [("in-leaf", 9.306), ("evergreen", 9.306), ("leafless", 9.306 / 1.2)]
)
def test_leaves_cost_by_the_depth_in_their_azimuth(leaf: str, expected_db: float) -> None:
    tree = Obstacle(
        name="tree",
        cover="foliage",
        leaf=leaf,  # type: ignore[arg-type]
        azimuth_deg=np.array([350.0, 370.0]),
        elevation_deg=np.array([50.0, 50.0]),
        underside_deg=np.array([12.0, 12.0]),
        depth_m=np.array([5.0, 15.0]),
    )
    assert loss_db(tree, 0.0, 30.0) == pytest.approx(expected_db, abs=HUNDREDTH_DB)
    assert loss_db(tree, 0.0, 51.0) == 0.0
    assert loss_db(tree, 0.0, 11.0) == 0.0
    assert loss_db(tree, 20.0, 30.0) == 0.0


def test_leaves_reach_as_high_as_a_straight_row_bulges() -> None:
    # A straight level row, 30 degrees high at its ends 45 degrees aside: arctan(tan 30 / cos 45) = 39.23.
    row = Obstacle(
        name="row",
        cover="foliage",
        azimuth_deg=np.array([135.0, 225.0]),
        elevation_deg=np.array([30.0, 30.0]),
        distance_m=np.array([40.0, 40.0]),
        depth_m=np.array([5.0, 5.0]),
        straight_in_space=True,
    )
    assert loss_db(row, 180.0, 39.2) > 1.0
    assert loss_db(row, 180.0, 39.3) == 0.0


def test_losses_add_and_the_costliest_obstacle_is_named() -> None:
    tree = Obstacle(
        name="tree",
        cover="foliage",
        azimuth_deg=np.array([170.0, 190.0]),
        elevation_deg=np.array([50.0, 50.0]),
        depth_m=np.array([10.0, 10.0]),
    )
    directions = np.array([180.0, 180.0, 100.0, 0.0]), np.array([21.0, 45.0, 21.0, 45.0])
    loss, costly = skyline_loss_db(skyline(LONG_EDGE, tree), *directions, L1_HZ)
    edge_db, leaves_db = loss_db(LONG_EDGE, 180.0, 21.0), loss_db(tree, 180.0, 21.0)
    assert loss[0] == pytest.approx(edge_db + leaves_db)
    assert costly.tolist() == [1, 1, 0, -1]
    assert loss[3] == 0.0


def test_an_open_sky_and_no_directions_cost_nothing() -> None:
    loss, costly = skyline_loss_db(skyline(), np.array([10.0]), np.array([5.0]), L1_HZ)
    assert (loss.tolist(), costly.tolist()) == ([0.0], [-1])
    loss, costly = skyline_loss_db(skyline(LONG_EDGE, RING), np.empty(0), np.empty(0), L1_HZ)
    assert loss.shape == costly.shape == (0,)


@pytest.mark.parametrize(
    "obstacle",
    [
        WALL,
        LONG_EDGE,
        RING,
        solid(
            [340.0, 350.0, 350.0, 365.0, 380.0],
            [10.0, 20.0, 45.0, 70.0, 15.0],
            [30.0, 25.0, 12.0, 12.0, 18.0],
        ),
        solid([300.0, 420.0], [80.0, 75.0], [60.0, 90.0], straight=True),
        solid([10.0, 40.0, 60.0], [60.0, 65.0, 55.0], [15.0, 15.0, 15.0], underside_deg=[40.0, 35.0, 42.0]),
    ],
)
def test_the_smallest_detour_is_that_over_the_nearest_point_of_the_outline(obstacle: Obstacle) -> None:
    # Brute force: the smallest d (1 - cos theta) over points set closely along every edge. Only directions
    # near an edge matter: within its first Fresnel zone.
    rng = np.random.default_rng(11)
    azimuth_deg, elevation_deg = rng.uniform(0.0, 360.0, 1200), rng.uniform(0.0, 89.0, 1200)
    points, distance_m = closely_set_points(obstacle)
    cosine = direction(azimuth_deg, elevation_deg).T @ points
    expected_m = np.min(distance_m * (1.0 - cosine), axis=1)
    detour_m = smallest_detour_m(upper_edges(obstacle), azimuth_deg, elevation_deg, L1_WAVELENGTH_M / 2.0)
    if obstacle.hangs_free:
        under_m = smallest_detour_m(lower_edges(obstacle), azimuth_deg, elevation_deg, L1_WAVELENGTH_M / 2.0)
        detour_m = np.minimum(detour_m, under_m)
    near = expected_m < L1_WAVELENGTH_M / 2.0
    assert np.count_nonzero(near) > 20
    shortest_m = np.nanmin(distance_m)
    angle_deg, expected_deg = (
        np.rad2deg(np.arccos(1.0 - x[near] / shortest_m)) for x in (detour_m, expected_m)
    )
    # Where the distance changes along an edge, the point of the smallest detour is not quite the nearest one.
    assert angle_deg == pytest.approx(expected_deg, abs=2 * ARC_DEG, rel=0.02)


def closely_set_points(obstacle: Obstacle) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    """Directions (3, point) along all edges of an obstacle, and distances, apart from the package."""

    def upright(top_m: float, top_deg: float, level_deg: NDArray[np.float64]) -> NDArray[np.float64]:
        return np.asarray(top_m * np.cos(np.deg2rad(top_deg)) / np.cos(np.deg2rad(level_deg)))

    assert obstacle.distance_m is not None
    azimuth, elevation, distance_m = obstacle.azimuth_deg, obstacle.elevation_deg, obstacle.distance_m
    chains = [(azimuth, elevation)]
    if obstacle.underside_deg is not None:
        chains.append((azimuth, obstacle.underside_deg))
    points, distances = [], []
    part = np.linspace(0.0, 1.0, 3001)
    for chain_azimuth, chain_elevation in chains:
        for i in range(len(azimuth) - 1):
            if obstacle.straight_in_space:
                ends = direction(chain_azimuth[i : i + 2], chain_elevation[i : i + 2]) * distance_m[i : i + 2]
                line = ends[:, :1] + (ends[:, 1:] - ends[:, :1]) * part
                distances.append(np.linalg.norm(line, axis=0))
                points.append(line / distances[-1])
            else:
                between = [
                    x[i] + (x[i + 1] - x[i]) * part for x in (chain_azimuth, chain_elevation, distance_m)
                ]
                if azimuth[i] == azimuth[i + 1]:
                    owner = i + int(np.argmax(elevation[i : i + 2]))
                    between[2] = upright(distance_m[owner], elevation[owner], between[1])
                points.append(direction(between[0], between[1]))
                distances.append(between[2])
    if azimuth[-1] - azimuth[0] < 360.0:
        for end in (0, -1):
            foot_deg = -45.0 if obstacle.underside_deg is None else obstacle.underside_deg[end]
            side_deg = foot_deg + (elevation[end] - foot_deg) * part
            points.append(direction(np.full_like(part, azimuth[end]), side_deg))
            distances.append(upright(distance_m[end], elevation[end], side_deg))
    return np.concatenate(points, axis=1), np.concatenate(distances)


def test_directions_left_out_as_far_away_would_cost_nothing() -> None:
    # ITU-R P.526 4.1: no loss where nu <= -0.78, here by brute force over the whole sky.
    azimuth_deg, elevation_deg = (
        grid.ravel() for grid in np.meshgrid(np.arange(0.0, 360.0, 1.5), np.arange(0.5, 90.0, 1.0))
    )
    loss, _ = skyline_loss_db(skyline(WALL), azimuth_deg, elevation_deg, L1_HZ)
    points, distance_m = closely_set_points(WALL)
    cosine = direction(azimuth_deg, elevation_deg).T @ points[:, ::20]
    nu = -2.0 * np.sqrt(np.min(distance_m[::20] * (1.0 - cosine), axis=1) / L1_WAVELENGTH_M)
    assert np.all(loss[nu > -0.75] > 0.0)
    outside = elevation_deg > 50.0
    assert np.all(loss[outside & (nu < -0.8)] == 0.0)


def test_a_wide_obstacle_is_not_narrow_and_a_mast_is() -> None:
    # ITU-R P.526 eq. 2, far terminal at infinity: the first Fresnel zone has a radius of 1.95 m at 20 m on
    # L1.
    for width_m, expected in ((3.5, True), (4.3, False)):
        half_deg = np.rad2deg(np.arcsin(width_m / 2.0 / 20.0))
        block = solid([90.0 - half_deg, 90.0 + half_deg], [0.0, 0.0], [20.0, 20.0])
        assert is_narrow(block, L1_WAVELENGTH_M) is expected
