"""Heights of the mast, held against whole assessments of edited sites."""

from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import numpy as np
import pytest

from siteassess import Assessment, assess, read_site
from siteassess.assessment import explained
from siteassess.site_file.model import Site
from siteassess.verdict.cures.heights import Heights, at_height

HARBOUR = Path(__file__).parents[2] / "example_sites" / "harbour"
TWO_TENTHS_OF_A_PERCENT = 0.002
FIVE_CENTIMETRES_M = 0.05
CENTIMETRE_M = 0.01

WALL = """\
azimuth_deg,elevation_deg,distance_m,obstacle
0,0,,
150,24,20,wall
210,24,20,wall
"""


def found_heights(site: Site) -> Heights | None:
    explanation = explained(assess(site)).explanation
    assert explanation is not None
    return explanation.heights


@pytest.fixture(scope="module")
def tree_line() -> Assessment:
    return explained(assess(read_site(HARBOUR / "tree_line")))


def heights_of(assessment: Assessment) -> Heights:
    assert assessment.explanation is not None
    assert assessment.explanation.heights is not None
    return assessment.explanation.heights


def test_at_the_height_found_the_assessment_passes_and_five_centimetres_lower_it_fails(
    tree_line: Assessment,
) -> None:
    lowest_m = heights_of(tree_line).lowest_passing_m
    assert tree_line.verdict.outcome == "fail"
    assert lowest_m is not None
    assert lowest_m > tree_line.site.mount.mast_height_m
    assert assess(at_height(tree_line.site, lowest_m)).verdict.outcome == "pass"
    assert assess(at_height(tree_line.site, lowest_m - FIVE_CENTIMETRES_M)).verdict.outcome == "fail"
    assert assess(at_height(tree_line.site, lowest_m - CENTIMETRE_M)).verdict.outcome == "fail"


def test_steps_are_what_whole_assessments_say(tree_line: Assessment) -> None:
    heights = heights_of(tree_line)
    assert len(heights.steps) == 21
    for step in (heights.steps[4], heights.steps[-1]):
        whole = assess(at_height(tree_line.site, step.mast_height_m)).verdict
        for one in whole.signals:
            quick = step.usable_share[one.signal]
            assert quick == pytest.approx(one.usable_share, abs=TWO_TENTHS_OF_A_PERCENT)
        assert step.misses == (whole.outcome == "fail")


@pytest.fixture
def behind_a_wall(write_site: Callable[..., Path]) -> Callable[..., Site]:
    """A site with a wall to the south; faster than usual."""

    def site(*replacements: tuple[str, str], extra: str = "") -> Site:
        text = '\n[sky]\nsystems = ["GPS"]\ndays = 1\nstep_s = 300\n' + extra
        return read_site(write_site(*replacements, horizon=WALL, extra=text))

    return site


def test_steps_run_from_the_present_to_the_tallest_mast(behind_a_wall: Callable[..., Site]) -> None:
    heights = found_heights(behind_a_wall())
    assert heights is not None
    masts_m = [step.mast_height_m for step in heights.steps]
    np.testing.assert_allclose(masts_m, np.linspace(1.5, 6.5, 21))
    allowed = ("mast_height_m = 1.5", "mast_height_m = 1.5\nmax_mast_height_m = 3.5")
    limited = found_heights(behind_a_wall(allowed))
    assert limited is not None
    assert (limited.present_m, limited.highest_m) == (1.5, 3.5)
    assert limited.steps[-1].mast_height_m == 3.5


def test_where_even_the_tallest_misses_it_is_said_what(behind_a_wall: Callable[..., Site]) -> None:
    # The wall's top is 20 m tan 24 = 8.9 m above the antenna: 0.5 m more opens little.
    heights = found_heights(
        behind_a_wall(
            ("mast_height_m = 1.5", "mast_height_m = 1.5\nmax_mast_height_m = 2.0"),
            ("min_cn0_dbhz = 33", "min_cn0_dbhz = 33\nmin_usable_share = 0.999"),
        )
    )
    assert heights is not None
    assert heights.lowest_passing_m is None
    assert [one.criterion for one in heights.missed_at_highest] == ["min_usable_share"]


def test_required_solid_angles_are_told_against_height(behind_a_wall: Callable[..., Site]) -> None:
    site = behind_a_wall(("min_cn0_dbhz = 33", "min_cn0_dbhz = 33\nmax_horizon_deg = 15"))
    heights = found_heights(site)
    assert heights is not None
    peaks_deg = [step.values["max_horizon_deg"] for step in heights.steps]
    # A straight wall is highest half-way between its ends, 20 m cos(30) away and 20 m tan(24) above.
    top_m, away_m = 20.0 * np.tan(np.deg2rad(24.0)), 20.0 * np.cos(np.deg2rad(30.0))
    expected_deg = [np.rad2deg(np.arctan2(top_m - rise_m, away_m)) for rise_m in np.linspace(0.0, 5.0, 21)]
    np.testing.assert_allclose(peaks_deg, expected_deg, atol=0.001)
    assert heights.lowest_passing_m is not None
    # 15 degrees: the antenna stands away tan(15) below the top.
    needed_m = 1.5 + top_m - away_m * np.tan(np.deg2rad(15.0))
    assert needed_m <= heights.lowest_passing_m <= needed_m + CENTIMETRE_M


def test_without_distances_nothing_is_said_of_height(write_site: Callable[..., Path]) -> None:
    horizon = "azimuth_deg,elevation_deg,obstacle\n0,0,\n150,24,wall\n210,24,wall\n"
    extra = '\n[sky]\nsystems = ["GPS"]\ndays = 1\nstep_s = 300\n'
    assert found_heights(read_site(write_site(horizon=horizon, extra=extra))) is None


def test_obstacles_without_a_distance_are_named(write_site: Callable[..., Path]) -> None:
    horizon = "azimuth_deg,elevation_deg,distance_m,obstacle\n0,4,,\n150,24,20,wall\n210,24,20,wall\n"
    extra = '\n[sky]\nsystems = ["GPS"]\ndays = 1\nstep_s = 300\n'
    heights = found_heights(read_site(write_site(horizon=horizon, extra=extra)))
    assert heights is not None
    assert heights.keep_angles == ("general skyline",)


def test_survey_stays_where_it_was_made_and_the_roof_below(behind_a_wall: Callable[..., Site]) -> None:
    site = behind_a_wall(("mast_height_m = 1.5", "mast_height_m = 1.5\nheight_above_roof_m = 1.0"))
    taller = at_height(site, 3.0)
    assert taller.mount.mast_height_m == 3.0
    assert taller.mount.height_above_roof_m == 2.5
    assert [source.instrument_up_m for source in taller.horizon] == [1.5]


def test_passing_site_keeps_its_mast(behind_a_wall: Callable[..., Site]) -> None:
    lenient = ("min_cn0_dbhz = 33", "min_cn0_dbhz = 33\nmin_usable_share = 0.5")
    assert found_heights(behind_a_wall(lenient)) is None
    named = ("mast_height_m = 1.5", "mast_height_m = 1.5\nmax_mast_height_m = 4.0")
    heights = found_heights(behind_a_wall(lenient, named))
    assert heights is not None
    assert heights.lowest_passing_m == 1.5
    assert heights.missed_at_highest == ()


def test_explained_changes_nothing_but_what_it_adds(tree_line: Assessment) -> None:
    plain = assess(tree_line.site).verdict
    told = tree_line.verdict
    bare = tuple(replace(one, returned_satellite_time_share=None) for one in told.obstacles)
    assert bare == plain.obstacles
    assert told.findings == plain.findings
