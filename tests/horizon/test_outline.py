from collections.abc import Callable

import numpy as np
import pytest

from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.view import edge_elevation_deg, outline_elevation_deg

ROUNDING_DEG = 1e-8
Build = Callable[..., Obstacle]
BuildSkyline = Callable[..., Skyline]


def random_obstacles(seed: int, build: Build, count: int = 7) -> list[Obstacle]:
    generator = np.random.default_rng(seed)
    obstacles = []
    for _ in range(count):
        points = int(generator.integers(2, 6))
        azimuth_deg = generator.uniform(0, 360) + np.append(
            0, np.cumsum(generator.uniform(0, 60, points - 1))
        )
        if points > 3 and generator.random() < 0.5:
            azimuth_deg[2] = azimuth_deg[1]  # a vertical edge
        straight = bool(generator.integers(2))
        obstacles.append(build(azimuth_deg, generator.uniform(-5, 80, points), straight_in_space=straight))
    return obstacles


def highest_edge_deg(obstacles: list[Obstacle], azimuth_deg: np.ndarray) -> np.ndarray:
    edges = np.array([edge_elevation_deg(obstacle, azimuth_deg) for obstacle in obstacles])
    return np.where(np.isnan(edges), -90.0, edges).max(axis=0)


@pytest.mark.parametrize("seed", range(12))
def test_outline_is_the_highest_edge_everywhere(seed: int, obstacle: Build, skyline: BuildSkyline) -> None:
    obstacles = random_obstacles(seed, obstacle)
    azimuth_deg = np.random.default_rng(seed + 100).uniform(0, 360, 5000)
    seen = outline_elevation_deg(skyline(*obstacles), azimuth_deg)
    np.testing.assert_allclose(seen, highest_edge_deg(obstacles, azimuth_deg), atol=ROUNDING_DEG)


@pytest.mark.parametrize("seed", range(6))
def test_outline_does_not_depend_on_the_order_of_obstacles(
    seed: int, obstacle: Build, skyline: BuildSkyline
) -> None:
    obstacles = random_obstacles(seed, obstacle)
    azimuth_deg = np.linspace(0, 360, 3001)
    forth = outline_elevation_deg(skyline(*obstacles), azimuth_deg)
    back = outline_elevation_deg(skyline(*obstacles[::-1]), azimuth_deg)
    np.testing.assert_allclose(forth, back, atol=ROUNDING_DEG)


@pytest.mark.parametrize("seed", range(6))
def test_pieces_cover_the_circle_once(seed: int, obstacle: Build) -> None:
    outline = upper_envelope(random_obstacles(seed, obstacle))
    assert outline.start_deg[0] == 0.0
    assert outline.end_deg[-1] == 360.0
    np.testing.assert_array_equal(outline.end_deg[:-1], outline.start_deg[1:])
    assert (outline.end_deg > outline.start_deg).all()
    nothing = outline.obstacle < 0
    assert (outline.start_elevation_deg[nothing] == -90.0).all()
    assert (outline.end_elevation_deg[nothing] == -90.0).all()


def test_a_long_survey_among_walls_is_their_highest_edge(obstacle: Build, skyline: BuildSkyline) -> None:
    # A survey longer than all the rest is merged last; it must not matter.
    long_deg = np.linspace(0, 360, 2001)
    obstacles = [obstacle(long_deg, 15 + 10 * np.sin(long_deg)), *random_obstacles(1, obstacle)]
    azimuth_deg = np.random.default_rng(7).uniform(0, 360, 5000)
    seen = outline_elevation_deg(skyline(*obstacles), azimuth_deg)
    np.testing.assert_allclose(seen, highest_edge_deg(obstacles, azimuth_deg), atol=ROUNDING_DEG)


def test_two_sloping_edges_cross_where_the_lines_meet(obstacle: Build) -> None:
    # By hand: 0.1 az = 20 - 0.1 az at 100 degrees, where both stand at 10 degrees.
    outline = upper_envelope([obstacle([0, 200], [0, 20]), obstacle([0, 200], [20, 0])])
    assert outline.start_deg.tolist() == pytest.approx([0.0, 100.0, 200.0], abs=ROUNDING_DEG)
    assert outline.obstacle.tolist() == [1, 0, -1]
    assert outline.end_elevation_deg[0] == pytest.approx(10.0, abs=ROUNDING_DEG)


def test_a_straight_wall_passes_a_level_skyline_twice(obstacle: Build) -> None:
    # By hand: a wall along a great circle of 30 degrees at its top stands at 20 degrees where
    # cos x = tan 20 / tan 30, x = 50.92 degrees to either side of the top.
    half_deg = np.rad2deg(np.arccos(np.tan(np.deg2rad(20.0)) / np.tan(np.deg2rad(30.0))))
    end_deg = np.rad2deg(np.arctan(np.tan(np.deg2rad(30.0)) * np.cos(np.deg2rad(80.0))))
    wall = obstacle([100, 260], [end_deg, end_deg], straight_in_space=True)
    outline = upper_envelope([obstacle([0, 360], [20, 20]), wall])
    assert outline.start_deg.tolist() == pytest.approx(
        [0, 180 - half_deg, 180, 180 + half_deg], abs=ROUNDING_DEG
    )
    assert outline.obstacle.tolist() == [0, 1, 1, 0]
    assert outline.end_elevation_deg[1] == pytest.approx(30.0, abs=ROUNDING_DEG)


def test_the_earlier_of_two_equal_obstacles_counts(obstacle: Build) -> None:
    outline = upper_envelope([obstacle([10, 50], [20, 30]), obstacle([10, 50], [20, 30])])
    assert outline.obstacle.tolist() == [-1, 0, -1]


def test_foliage_and_what_hangs_free_form_no_outline(obstacle: Build) -> None:
    trees = obstacle([0, 90], [20, 20], cover="foliage", depth_m=[5, 5])
    jib = obstacle([100, 140], [50, 60], underside_deg=[40, 50])
    wall = obstacle([350, 370], [5, 5])
    outline = upper_envelope([trees, jib, wall])
    assert set(outline.obstacle.tolist()) == {-1, 2}
    assert upper_envelope([trees, jib]).obstacle.tolist() == [-1]
    assert upper_envelope([]).start_elevation_deg.tolist() == [-90.0]


def test_arrays_of_a_skyline_cannot_be_changed(obstacle: Build, skyline: BuildSkyline) -> None:
    built = skyline(obstacle([0, 90], [20, 20]))
    for array in (built.outline.start_deg, built.obstacles[0].azimuth_deg, built.unsurveyed_deg):
        with pytest.raises(ValueError, match="read-only"):
            array[...] = 1.0
