"""The angular form against whole link budgets, which it stands in for."""

import runpy
from pathlib import Path

import numpy as np
import pytest

from siteassess import Assessment, assess, read_site
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.raised import raised
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.link_budget.assemble import link_budget
from siteassess.verdict.cures.angular import AngularForm, angular_form, taken
from siteassess.verdict.cures.angular_shares import (
    noise_gain_db,
    shares_above,
    usable_shares,
    usable_weights,
    within_reach,
)
from siteassess.verdict.cures.heights import OPEN_SKY
from siteassess.verdict.judge import judge

BUILDERS = Path(__file__).parents[1] / "builders"
HARBOUR = Path(__file__).parents[2] / "example_sites" / "harbour"
TWO_TENTHS_OF_A_PERCENT = 0.002
ROUNDING_DB = 1e-9


@pytest.fixture(scope="module")
def assessment() -> Assessment:
    return assess(read_site(HARBOUR / "silo_yard"))


@pytest.fixture(scope="module")
def form(assessment: Assessment) -> AngularForm:
    return angular_form(assessment.site, assessment.pattern, assessment.tracks, assessment.budget)


def test_random_sites_agree_with_whole_budgets() -> None:
    # Its builder looked at 50; these are others.
    differences = runpy.run_path(str(BUILDERS / "compare_angular_form.py"))["differences"]
    assert np.abs(differences(8, seed=20)).max() < TWO_TENTHS_OF_A_PERCENT


def test_present_skyline_returns_the_assessment(assessment: Assessment, form: AngularForm) -> None:
    quick = usable_shares(form, assessment.skyline)
    for one in assessment.verdict.signals:
        assert quick[one.signal] == pytest.approx(one.usable_share, abs=TWO_TENTHS_OF_A_PERCENT)


def test_straight_wall_that_bulges_between_its_ends(assessment: Assessment, form: AngularForm) -> None:
    # 20 degrees high at its ends, arctan(tan 20 / cos 60) = 36 degrees in the middle.
    wall = Obstacle(
        name="wall",
        cover="solid",
        azimuth_deg=np.array([90.0, 210.0]),
        elevation_deg=np.array([20.0, 20.0]),
        distance_m=np.array([60.0, 60.0]),
        straight_in_space=True,
    )
    skyline = Skyline(obstacles=(wall,), outline=upper_envelope((wall,)), unsurveyed_deg=np.empty((0, 2)))
    budget = link_budget(assessment.site, skyline, assessment.pattern, assessment.tracks)
    whole = judge(assessment.site, skyline, assessment.tracks, budget)
    quick = usable_shares(form, skyline, noise_gain_db(form, skyline))
    for one in whole.signals:
        assert quick[one.signal] == pytest.approx(one.usable_share, abs=TWO_TENTHS_OF_A_PERCENT)


def test_present_skyline_has_the_present_noise(assessment: Assessment, form: AngularForm) -> None:
    for gain_db in noise_gain_db(form, assessment.skyline).values():
        assert gain_db == pytest.approx(0.0, abs=ROUNDING_DB)


def test_parts_of_a_form_add_up_to_it(assessment: Assessment, form: AngularForm) -> None:
    low = form.elevation_deg < 30.0
    whole = usable_weights(form, assessment.skyline)
    parts = [usable_weights(taken(form, which), assessment.skyline) for which in (low, ~low)]
    for signal, weights in whole.items():
        np.testing.assert_allclose(np.sum([part[signal] for part in parts], axis=0), weights)


def test_what_is_out_of_reach_is_open_from_any_height(assessment: Assessment, form: AngularForm) -> None:
    far = taken(form, ~within_reach(form, assessment.skyline))
    assert (
        0.5
        < far.weight[far.elevation_deg >= 10.0].sum() / form.weight[form.elevation_deg >= 10.0].sum()
        < 0.95
    )
    everything = usable_weights(far, OPEN_SKY)
    for rise_m in (0.0, 0.5, 2.0, 5.0, 12.0):
        assert usable_weights(far, raised(assessment.skyline, rise_m)) == everything


@pytest.mark.parametrize("mask_deg", [5.0, 10.0, 25.0])
def test_shares_above_masks_are_those_of_assessments(
    assessment: Assessment, form: AngularForm, mask_deg: float
) -> None:
    require = assessment.site.require.model_copy(update={"elevation_mask_deg": mask_deg})
    whole = assess(assessment.site.model_copy(update={"require": require}))
    masks_deg = np.arange(0.0, 61.0)
    quick = shares_above(form, assessment.skyline, masks_deg)
    for one in whole.verdict.signals:
        found = quick[one.signal][masks_deg == mask_deg][0]
        assert found == pytest.approx(one.usable_share, abs=TWO_TENTHS_OF_A_PERCENT)
