"""Surveys held against models: what is told, where, and what errors explain. Expected values by hand."""

from collections.abc import Callable

import numpy as np
import pytest

from siteassess.horizon.disagreement import Source, disagreements
from siteassess.horizon.skyline import Disagreement, Obstacle

MakeObstacle = Callable[..., Obstacle]

STEP_DEG = 0.1  # of azimuth, in which sources are compared
TENTH_DEG = 0.1
ALL_ROUND = np.array([[0.0, 360.0]])
NOWHERE = np.empty((0, 2))


def survey(*obstacles: Obstacle, surveyed_deg: np.ndarray = ALL_ROUND, **more: float) -> Source:
    errors = {"azimuth_error_deg": 0.5, "elevation_error_deg": 0.5} | more
    return Source(kind="survey", file="horizon.csv", obstacles=obstacles, surveyed_deg=surveyed_deg, **errors)


def outlines(*obstacles: Obstacle, complete: bool = False) -> Source:
    surveyed_deg = ALL_ROUND if complete else NOWHERE
    return Source(
        kind="outlines",
        file="town.geojson",
        obstacles=obstacles,
        surveyed_deg=surveyed_deg,
        complete=complete,
    )


def terrain(*obstacles: Obstacle) -> Source:
    return Source(kind="terrain", file="dem.tif", obstacles=obstacles, surveyed_deg=NOWHERE)


@pytest.fixture
def level(obstacle: MakeObstacle) -> Obstacle:
    return obstacle([0, 360], [2, 2], name="general skyline")


@pytest.fixture
def hall(obstacle: MakeObstacle) -> Callable[..., Obstacle]:
    def build(first: float, last: float, up: float, away_m: float | None = 200.0) -> Obstacle:
        distance = {} if away_m is None else {"distance_m": [away_m, away_m]}
        return obstacle([first, last], [up, up], name="hall", **distance)

    return build


def test_a_model_that_stands_above_what_was_surveyed_is_told(level: Obstacle, hall: MakeObstacle) -> None:
    # 1 m at 200 m is 0.286 degrees; with 0.5 of the survey two standard deviations are 1.152.
    (found,) = disagreements([survey(level), outlines(hall(100, 120, 10))])
    assert (found.survey, found.model) == ("horizon.csv", "town.geojson")
    assert (found.survey_obstacle, found.model_obstacle) == ("general skyline", "hall")
    assert (found.start_deg, found.end_deg) == pytest.approx((100.0, 120.0), abs=STEP_DEG)
    assert found.difference_deg == pytest.approx(-8.0, abs=TENTH_DEG)
    assert found.tolerance_deg == pytest.approx(2.0 * np.hypot(0.5, np.rad2deg(1.0 / 200.0)), abs=0.01)


def test_what_errors_explain_is_not_told(level: Obstacle, hall: MakeObstacle) -> None:
    model = outlines(hall(100, 120, 10))
    assert disagreements([survey(level, hall(100, 120, 10.9)), model]) == ()
    assert disagreements([survey(level, hall(101, 119, 10)), model]) == ()  # 1.0 and more of azimuth
    assert len(disagreements([survey(level, hall(100, 120, 11.5)), model])) == 1
    left, right = disagreements([survey(level, hall(103, 117, 10)), model])
    assert (left.start_deg, left.end_deg) == pytest.approx((100.0, 103.0 - 1.15), abs=2 * STEP_DEG)
    assert (right.start_deg, right.end_deg) == pytest.approx((117.0 + 1.15, 120.0), abs=2 * STEP_DEG)


def test_a_wider_stated_error_explains_more(level: Obstacle, hall: MakeObstacle) -> None:
    model = outlines(hall(100, 120, 10))
    assert len(disagreements([survey(level, hall(103, 117, 10)), model])) == 2
    assert disagreements([survey(level, hall(103, 117, 10), azimuth_error_deg=2.0), model]) == ()
    assert disagreements([survey(level, hall(100, 120, 14), elevation_error_deg=2.5), model]) == ()


def test_a_survey_may_show_what_a_model_lacks(level: Obstacle, hall: MakeObstacle) -> None:
    town = hall(200, 220, 5)
    both = level, hall(200, 220, 5)
    assert disagreements([survey(*both, hall(100, 120, 30)), outlines(town)]) == ()
    (found,) = disagreements([survey(*both, hall(100, 120, 30)), outlines(town, complete=True)])[:1]
    assert (found.model_obstacle, found.model_elevation_deg) == ("", 0.0)


@pytest.mark.parametrize(("away_m", "told"), [(200.0, 1), (None, 1), (60.0, 0)])
def test_a_higher_survey_contradicts_the_same_obstacle_only(
    away_m: float | None, told: int, level: Obstacle, hall: MakeObstacle
) -> None:
    """By distance where both have one; a thing with a name is a building else."""
    found = disagreements([survey(level, hall(100, 120, 30, away_m)), outlines(hall(100, 120, 10))])
    assert len(found) == told


def test_hills_are_held_against_the_general_skyline(obstacle: MakeObstacle, hall: MakeObstacle) -> None:
    hills = obstacle([0, 360], [4, 4], name="terrain", distance_m=[5000.0, 5000.0])
    for up, told in ((1.0, 1), (4.5, 0), (8.0, 1)):
        general = obstacle([0, 360], [up, up], name="general skyline")
        assert len(disagreements([survey(general), terrain(hills)])) == told, up
    near = survey(obstacle([0, 360], [4, 4], name="general skyline"), hall(100, 120, 30, None))
    assert disagreements([near, terrain(hills)]) == ()


def test_where_nobody_looked_nothing_is_contradicted(obstacle: MakeObstacle, hall: MakeObstacle) -> None:
    part = obstacle([0, 90], [2, 2], name="general skyline")
    looked_at_deg = np.array([[0.0, 90.0]])
    model = outlines(hall(100, 120, 10))
    assert disagreements([survey(part, surveyed_deg=looked_at_deg), model]) == ()
    assert len(disagreements([survey(part, surveyed_deg=ALL_ROUND), model])) == 1


def test_a_disagreement_runs_through_north(level: Obstacle, obstacle: MakeObstacle) -> None:
    model = obstacle([340, 380], [10, 10], name="hall", distance_m=[200.0, 200.0])
    (found,) = disagreements([survey(level), outlines(model)])
    assert (found.start_deg, found.end_deg) == pytest.approx((340.0, 380.0), abs=STEP_DEG)


def test_it_may_hold_all_round(level: Obstacle, obstacle: MakeObstacle) -> None:
    model = obstacle([0, 360], [20, 20], name="terrain", distance_m=[2000.0, 2000.0])
    (found,) = disagreements([survey(level), terrain(model)])
    assert (found.start_deg, found.end_deg) == (0.0, 360.0)


def test_what_lies_below_the_horizon_counts_as_nothing(obstacle: MakeObstacle) -> None:
    low = obstacle([0, 360], [-1, -1], name="general skyline")
    lower = obstacle([0, 360], [-4, -4], name="terrain", distance_m=[2000.0, 2000.0])
    assert disagreements([survey(low), terrain(lower)]) == ()


def test_surveys_alone_and_models_alone_are_not_compared(level: Obstacle, hall: MakeObstacle) -> None:
    assert disagreements([]) == ()
    assert disagreements([survey(level), survey(level, hall(100, 120, 30))]) == ()
    assert disagreements([outlines(hall(100, 120, 30)), terrain(level)]) == ()


def test_leaves_are_compared_and_what_hangs_free_is_not(level: Obstacle, obstacle: MakeObstacle) -> None:
    trees = obstacle([100, 120], [20, 20], name="trees", cover="foliage", depth_m=[5.0, 5.0])
    assert [one.model_obstacle for one in disagreements([survey(level), outlines(trees)])] == ["trees"]
    jib = obstacle([100, 120], [20, 20], name="jib", underside_deg=[15.0, 15.0])
    assert disagreements([survey(level), outlines(jib)]) == ()


def test_the_difference_is_survey_less_model() -> None:
    found = Disagreement(
        survey="a", model="b", start_deg=0.0, end_deg=1.0, azimuth_deg=0.5, survey_elevation_deg=3.0,
        model_elevation_deg=5.0, tolerance_deg=1.0, survey_obstacle="", model_obstacle="",
    )  # fmt: skip
    assert found.difference_deg == -2.0
