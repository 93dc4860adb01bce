"""States of samples and the shares made from them: hand-counted cases."""

from types import SimpleNamespace

import numpy as np
import pytest

from siteassess.verdict.shares import weighted_quantiles
from siteassess.verdict.states import sample_states, share


def states(*, cn0_open, loss, hiding, min_cn0=35.0, count_weakened=False):
    cn0_open, loss = np.array(cn0_open, dtype=float), np.array(loss, dtype=float)
    budget = SimpleNamespace(
        sample=np.arange(len(loss)),
        obstacle_loss_db=loss,
        cn0_dbhz=cn0_open - loss,
        cn0_open_sky_dbhz=cn0_open,
        min_cn0_dbhz=min_cn0,
        costly_obstacle=np.where(loss > 0, 7, -1),
    )
    samples = SimpleNamespace(hiding_obstacle=np.array(hiding))
    return sample_states(budget, samples, np.ones(len(loss)), count_weakened=count_weakened)


def test_hidden_sky_is_never_usable_however_small_the_loss() -> None:
    result = states(cn0_open=[50, 50], loss=[0.3, 0.3], hiding=[2, -1])
    assert result.hidden.tolist() == [True, False]
    assert result.usable.tolist() == [False, True]
    assert result.blamed_obstacle.tolist() == [2, 7]


@pytest.mark.parametrize(("loss_db", "weakened"), [(0.999, False), (1.0, True), (6.0, True)])
def test_weakened_begins_at_one_decibel(loss_db: float, weakened: bool) -> None:
    assert states(cn0_open=[50], loss=[loss_db], hiding=[-1]).weakened.tolist() == [weakened]


def test_weakened_counts_as_usable_only_when_asked_and_strong_enough() -> None:
    strict = states(cn0_open=[50, 36], loss=[6, 6], hiding=[-1, -1])
    lenient = states(cn0_open=[50, 36], loss=[6, 6], hiding=[-1, -1], count_weakened=True)
    assert strict.usable.tolist() == [False, False]
    assert lenient.usable.tolist() == [True, False]
    assert strict.lost.tolist() == [True, True]


def test_what_is_weak_under_an_open_sky_is_not_lost_to_obstacles() -> None:
    result = states(cn0_open=[30, 30], loss=[0, 9], hiding=[-1, 0])
    assert result.usable.tolist() == [False, False]
    assert not result.lost.any()


def test_the_limit_itself_is_good_enough() -> None:
    assert states(cn0_open=[35.0], loss=[0.0], hiding=[-1]).usable.all()


def test_share_weighs_samples_and_is_zero_without_any() -> None:
    assert share(np.array([True, False]), np.array([1.0, 3.0])) == 0.25
    assert share(np.array([], dtype=bool), np.array([])) == 0.0


def test_weighted_quantiles_agree_with_numpy_for_equal_weights() -> None:
    """Authority: numpy.quantile, method "hazen" (Hazen 1914)."""
    values = np.random.default_rng(3).normal(size=101)
    expected = np.quantile(values, [0.05, 0.5, 0.95], method="hazen")
    assert weighted_quantiles(values, np.full(101, 0.5), (0.05, 0.5, 0.95)) == pytest.approx(expected)


def test_a_heavier_sample_counts_as_several() -> None:
    once = weighted_quantiles(np.array([1.0, 2.0, 2.0, 2.0]), np.ones(4), (0.5,))
    heavy = weighted_quantiles(np.array([1.0, 2.0]), np.array([1.0, 3.0]), (0.5,))
    assert once[0] == pytest.approx(2.0)
    assert heavy[0] == pytest.approx(1.75)  # between the middles of both weights: 1/8 and 5/8


def test_quantiles_of_nothing_are_none() -> None:
    assert weighted_quantiles(np.array([1.0]), np.array([0.0]), (0.5, 0.9)) == [None, None]
