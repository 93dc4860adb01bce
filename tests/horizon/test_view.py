from collections.abc import Callable

import numpy as np
import pytest

from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.view import (
    covers,
    depth_m,
    edge_distance_m,
    edge_elevation_deg,
    foliage_obstacles,
    hiding_obstacle,
    is_unsurveyed,
    outline_elevation_deg,
    underside_elevation_deg,
)

ROUNDING = 1e-9
Build = Callable[..., Obstacle]
BuildSkyline = Callable[..., Skyline]


@pytest.fixture
def street(obstacle: Build, skyline: BuildSkyline) -> Skyline:
    """A level horizon, a hall through north, a tree, and a jib that hangs over the hall."""
    return skyline(
        obstacle([0, 360], [5, 5]),
        obstacle([340, 380], [20, 20]),
        obstacle([90, 110], [30, 30], cover="foliage", depth_m=[4, 8]),
        obstacle([350, 365], [40, 40], underside_deg=[15, 15]),
        gaps_deg=[(200, 300)],
    )


@pytest.mark.parametrize(
    ("azimuth_deg", "elevation_deg", "expected"),
    [
        (0, 4, 1),  # the jib reaches no lower than 15: below it the hall is the highest that hides
        (0, 16, 3),
        (0, 39, 3),
        (0, 41, -1),
        (375, 19, 1),
        (-15, 19, 1),
        (345, 21, -1),
        (180, 4.9, 0),
        (180, 5.1, -1),
        (100, 20, -1),
        (np.nan, 1, -1),
        (180, np.nan, -1),
        (77, 90, -1),
        (0, -3, 1),
    ],
)
def test_the_highest_obstacle_that_hides_a_direction(
    street: Skyline, azimuth_deg: float, elevation_deg: float, expected: int
) -> None:
    assert hiding_obstacle(street, azimuth_deg, elevation_deg) == expected


def test_directions_keep_their_shape(street: Skyline) -> None:
    for azimuth_deg in (10.0, np.zeros(3), np.zeros((4, 5)), np.zeros((0, 2))):
        shape = np.shape(azimuth_deg)
        assert hiding_obstacle(street, azimuth_deg, 10.0).shape == shape
        assert hiding_obstacle(street, azimuth_deg, 10.0).dtype == np.int64
        assert is_unsurveyed(street, azimuth_deg, 10.0).shape == shape
        assert outline_elevation_deg(street, azimuth_deg).shape == shape
        for function in (edge_elevation_deg, underside_elevation_deg, edge_distance_m, depth_m):
            assert function(street.obstacles[2], azimuth_deg).shape == shape
        assert covers(street.obstacles[2], azimuth_deg, 10.0).shape == shape
    assert hiding_obstacle(street, np.zeros((4, 1)), np.zeros(3)).shape == (4, 3)


def test_unsurveyed_is_what_nobody_saw_and_nothing_known_hides(street: Skyline) -> None:
    seen = is_unsurveyed(street, [199, 201, 201, 299, 301, -100, np.nan], [10, 10, 4, 10, 10, 10, 10])
    assert seen.tolist() == [False, True, False, True, False, True, False]


def test_an_edge_reaches_from_its_first_to_its_last_point(obstacle: Build) -> None:
    wall = obstacle([350, 358, 364, 372], [10, 14, 14, 2])
    seen = edge_elevation_deg(wall, [349.9, 350, 354, 358, 0, 8, 12, 12.1, -10, np.nan])
    np.testing.assert_allclose(seen, [np.nan, 10, 12, 14, 14, 8, 2, np.nan, 10, np.nan], atol=ROUNDING)


def test_at_a_vertical_edge_the_higher_value_counts(obstacle: Build, skyline: BuildSkyline) -> None:
    step = obstacle([0, 90, 90, 180, 180, 360], [5, 5, 30, 30, 2, 5])
    assert edge_elevation_deg(step, [90, 180]).tolist() == [30.0, 30.0]
    assert outline_elevation_deg(skyline(step), [90, 180]).tolist() == [30.0, 30.0]
    sides = obstacle([0, 0, 40, 40], [0, 20, 20, 0])
    assert edge_elevation_deg(sides, [0, 360, 40]).tolist() == [20.0, 20.0, 20.0]
    assert outline_elevation_deg(skyline(sides), [0, 360, 40, 41]).tolist() == [20.0, 20.0, 20.0, -90.0]
    north = obstacle([320, 360], [20, 10])
    assert outline_elevation_deg(skyline(north), [0, 360]).tolist() == [10.0, 10.0]


def test_the_gaps_of_a_general_skyline_are_no_edge(obstacle: Build) -> None:
    open_part = obstacle([0, 20, 20, 80, 80, 100], [5, 5, -90, -90, 7, 7])
    np.testing.assert_array_equal(edge_elevation_deg(open_part, [10, 50, 90]), [5, np.nan, 7])


def test_a_straight_wall_nears_and_rises_between_its_ends(obstacle: Build) -> None:
    # By hand: a wall 3 m above the antenna at 10 m, seen to 60 degrees either side. Its ends are 20 m away in
    # plan and stand at arctan(3/20) = 8.53 degrees; its middle at arctan(3/10) = 16.70 degrees, sqrt(109) m
    # away.
    end_deg, end_m = np.rad2deg(np.arctan(3 / 20)), np.hypot(20, 3)
    wall = obstacle([300, 420], [end_deg, end_deg], distance_m=[end_m, end_m], straight_in_space=True)
    assert edge_elevation_deg(wall, 0) == pytest.approx(np.rad2deg(np.arctan(0.3)), abs=ROUNDING)
    assert edge_distance_m(wall, 0) == pytest.approx(np.sqrt(109.0), abs=ROUNDING)
    # At 30 degrees the wall is 10 / cos 30 m away in plan.
    plan_m = 10 / np.cos(np.deg2rad(30))
    assert edge_distance_m(wall, 30) == pytest.approx(np.hypot(plan_m, 3), abs=ROUNDING)
    np.testing.assert_allclose(edge_distance_m(wall, [300, 60, 90]), [end_m, end_m, np.nan], atol=ROUNDING)


def test_distances_of_a_general_skyline_count_where_both_neighbours_have_one(obstacle: Build) -> None:
    ridge = obstacle([0, 10, 20, 30], [5, 5, 5, 5], distance_m=[10, 20, float("nan"), 40])
    np.testing.assert_array_equal(edge_distance_m(ridge, [5, 10, 15, 30]), [15, 20, np.nan, 40])
    assert np.isnan(edge_distance_m(obstacle([0, 10], [5, 5]), 5))


def test_leaves_hang_between_underside_and_top(obstacle: Build, skyline: BuildSkyline) -> None:
    crown = obstacle([10, 30], [40, 50], underside_deg=[10, 20], cover="foliage", depth_m=[4, 8])
    assert depth_m(crown, [10, 20, 30]).tolist() == [4.0, 6.0, 8.0]
    assert underside_elevation_deg(crown, 20) == pytest.approx(15.0, abs=ROUNDING)
    assert covers(crown, 20, [14, 16, 44, 46]).tolist() == [False, True, True, False]
    assert underside_elevation_deg(obstacle([0, 10], [5, 5]), [5, 20]).tolist()[0] == -90.0
    assert foliage_obstacles(skyline(obstacle([0, 10], [5, 5]), crown)) == (1,)
    assert hiding_obstacle(skyline(crown), 20, 30) == -1
