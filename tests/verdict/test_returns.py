"""What comes back when obstacles go: laws of sets, and assessments without the obstacle."""

from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from siteassess import Assessment, assess, read_site
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.link_budget.assemble import sky_samples
from siteassess.link_budget.obstacles.way_in import skyline_loss_db
from siteassess.verdict.cures.returns import (
    LostSky,
    lost_sky,
    returned_alone,
    returned_in_order,
    returned_share,
    returned_without,
)
from siteassess.verdict.states import SampleStates, sample_states, sample_weights

HARBOUR = Path(__file__).parents[2] / "example_sites" / "harbour"
ROUNDING = 1e-9


def skyline_of(*obstacles: Obstacle) -> Skyline:
    return Skyline(obstacles=obstacles, outline=upper_envelope(obstacles), unsurveyed_deg=np.empty((0, 2)))


def judged(assessment: Assessment, skyline: Skyline, signal: int = 0) -> tuple[SampleStates, LostSky]:
    """States with another skyline and the present noise, and what is lost then."""
    site, budget = assessment.site, assessment.budget.signals[signal]
    height_m = site.position.height_m + site.mount.phase_centre_height_m
    samples = sky_samples(skyline, assessment.tracks, site.require.elevation_mask_deg, height_m)
    loss_db, costly = skyline_loss_db(
        skyline,
        samples.azimuth_deg[budget.sample],
        samples.apparent_elevation_deg[budget.sample],
        budget.signal.carrier_hz,
    )
    changed = replace(
        budget,
        obstacle_loss_db=loss_db,
        costly_obstacle=costly,
        cn0_dbhz=budget.cn0_open_sky_dbhz - loss_db,
    )
    weight = sample_weights(samples, assessment.tracks)
    states = sample_states(changed, samples, weight, count_weakened=False)
    return states, lost_sky(skyline, samples, changed, states, count_weakened=False)


def lost_share(states: SampleStates) -> float:
    return float((states.weight * states.lost).sum() / states.weight.sum())


@pytest.fixture(scope="module")
def silo_yard() -> Assessment:
    return assess(read_site(HARBOUR / "silo_yard"))


@pytest.fixture(scope="module")
def lost(silo_yard: Assessment) -> LostSky:
    return judged(silo_yard, silo_yard.skyline)[1]


def test_without_any_obstacle_all_that_is_lost_comes_back(silo_yard: Assessment, lost: LostSky) -> None:
    everything = silo_yard.verdict.signals[0].lost_share
    order = range(len(silo_yard.skyline.obstacles))
    assert returned_share(lost, returned_without(lost, order)) == pytest.approx(everything, abs=ROUNDING)
    assert returned_in_order(lost, order)[-1] == pytest.approx(everything, abs=ROUNDING)


@pytest.mark.parametrize("gone", range(5))
def test_one_returns_what_an_assessment_without_it_gains(
    silo_yard: Assessment, lost: LostSky, gone: int
) -> None:
    left = [one for index, one in enumerate(silo_yard.skyline.obstacles) if index != gone]
    without, _ = judged(silo_yard, skyline_of(*left))
    gained = silo_yard.verdict.signals[0].lost_share - lost_share(without)
    assert returned_share(lost, returned_alone(lost)[gone]) == pytest.approx(gained, abs=ROUNDING)
    assert returned_share(lost, returned_without(lost, [gone])) == pytest.approx(gained, abs=ROUNDING)


def test_in_order_is_together_step_by_step(lost: LostSky) -> None:
    order = [3, 1, 0, 4, 2]
    together = [returned_share(lost, returned_without(lost, order[: n + 1])) for n in range(len(order))]
    np.testing.assert_allclose(returned_in_order(lost, order), together, atol=ROUNDING)
    assert (np.diff(together) >= 0.0).all()


def test_alone_and_alone_standing_bracket_what_is_lost(silo_yard: Assessment, lost: LostSky) -> None:
    # Inclusion and exclusion, where every lost moment is taken by at least one obstacle by itself: what only
    # one of them holds, at most all of it, at most what each would take if it stood alone.
    total = silo_yard.verdict.signals[0].lost_share
    alone = returned_alone(lost)
    own = sum(returned_share(lost, one) for one in alone)
    standing = sum(lost_share(judged(silo_yard, skyline_of(one))[0]) for one in silo_yard.skyline.obstacles)
    assert own <= total <= standing
    # What only goes together closes the first gap exactly.
    several = returned_share(lost, ~alone.any(axis=0))
    counted_twice = float((lost.weight * np.maximum(alone.sum(axis=0) - 1, 0)).sum())
    assert own + several - counted_twice == pytest.approx(total, abs=ROUNDING)
    assert several > 0.0


def wall(elevation_deg: float, distance_m: float | None = None) -> Obstacle:
    return Obstacle(
        name="wall",
        cover="solid",
        azimuth_deg=np.array([100.0, 200.0]),
        elevation_deg=np.full(2, elevation_deg),
        distance_m=None if distance_m is None else np.full(2, distance_m),
        straight_in_space=distance_m is not None,
    )


def trees(depth_m: float) -> Obstacle:
    return Obstacle(
        name="trees",
        cover="foliage",
        azimuth_deg=np.array([100.0, 200.0]),
        elevation_deg=np.full(2, 30.0),
        distance_m=np.full(2, 20.0),
        depth_m=np.full(2, depth_m),
    )


def test_of_two_equal_walls_neither_returns_anything_alone(silo_yard: Assessment) -> None:
    _, lost = judged(silo_yard, skyline_of(wall(30.0), wall(30.0)))
    assert not returned_alone(lost).any()
    assert returned_in_order(lost, [0, 1])[0] == 0.0
    assert returned_in_order(lost, [0, 1])[1] > 0.1


def test_lower_wall_behind_a_higher_one_returns_nothing(silo_yard: Assessment) -> None:
    states, lost = judged(silo_yard, skyline_of(wall(30.0, 15.0), wall(12.0, 40.0)))
    high, low = (returned_share(lost, one) for one in returned_alone(lost))
    only_low = lost_share(judged(silo_yard, skyline_of(wall(12.0, 40.0)))[0])
    assert low == 0.0
    assert high == pytest.approx(lost_share(states) - only_low, abs=ROUNDING)


def test_thin_leaves_that_weaken_only_together_return_all_by_either(silo_yard: Assessment) -> None:
    depth_m = 0.15  # about 0.75 dB each: one alone weakens nothing
    states, lost = judged(silo_yard, skyline_of(trees(depth_m), trees(depth_m)))
    assert lost_share(judged(silo_yard, skyline_of(trees(depth_m)))[0]) == 0.0
    total = lost_share(states)
    assert total > 0.05
    for one in returned_alone(lost):
        assert returned_share(lost, one) == pytest.approx(total, abs=ROUNDING)


def test_nothing_lost_gives_nothing_back(silo_yard: Assessment) -> None:
    _, lost = judged(silo_yard, skyline_of(wall(1.0)))
    assert returned_alone(lost).shape == (1, 0)
    assert returned_in_order(lost, [0]) == [0.0]
