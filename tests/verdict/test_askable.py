"""What could be asked: asked for it, the spot passes; asked for a little more, it does not."""

from pathlib import Path

import pytest

from siteassess import Assessment, assess, read_site
from siteassess.assessment import explained
from siteassess.verdict.cures.explanation import Explanation

HARBOUR = Path(__file__).parents[2] / "example_sites" / "harbour"
HUNDREDTH_DB = 0.01
TWO_TENTHS_OF_A_PERCENT = 0.002


@pytest.fixture(scope="module")
def tree_line() -> Assessment:
    return explained(assess(read_site(HARBOUR / "tree_line")))


def found(assessment: Assessment) -> Explanation:
    assert assessment.explanation is not None
    return assessment.explanation


def usable_share(assessment: Assessment, signal: str, **asked: object) -> float:
    require = assessment.site.require.model_copy(update=asked)
    verdict = assess(assessment.site.model_copy(update={"require": require})).verdict
    return next(one.usable_share for one in verdict.signals if one.signal == signal)


def test_highest_cn0_passes_and_a_hundredth_more_does_not(tree_line: Assessment) -> None:
    limit = tree_line.site.require.min_usable_share
    one = next(one for one in found(tree_line).askable if one.signal == "Galileo E1")
    assert one.highest_min_cn0_dbhz is not None
    assert usable_share(tree_line, one.signal, min_cn0_dbhz=one.highest_min_cn0_dbhz) >= limit
    assert usable_share(tree_line, one.signal, min_cn0_dbhz=one.highest_min_cn0_dbhz + HUNDREDTH_DB) < limit


def test_where_obstacles_alone_take_too_much_no_cn0_passes(tree_line: Assessment) -> None:
    one = next(one for one in found(tree_line).askable if one.signal == "GPS L1 C/A")
    assert one.highest_min_cn0_dbhz is None
    limit = tree_line.site.require.min_usable_share
    assert usable_share(tree_line, one.signal, min_cn0_dbhz=0.0) < limit


@pytest.mark.parametrize("signal", ["GPS L1 C/A", "GLONASS L1OF"])
def test_lowest_mask_passes_and_a_degree_less_does_not_or_hardly(tree_line: Assessment, signal: str) -> None:
    limit = tree_line.site.require.min_usable_share
    mask_deg = next(one.lowest_mask_deg for one in found(tree_line).askable if one.signal == signal)
    assert mask_deg is not None
    assert usable_share(tree_line, signal, elevation_mask_deg=mask_deg) >= limit
    # Masks are on the safe side by what the angular form may be off, which itself may be off as far again.
    lower = usable_share(tree_line, signal, elevation_mask_deg=mask_deg - 1.0)
    assert lower < limit + 2.0 * TWO_TENTHS_OF_A_PERCENT


def test_mask_for_all_lets_every_signal_pass(tree_line: Assessment) -> None:
    mask_deg = found(tree_line).lowest_mask_for_all_deg
    require = tree_line.site.require.model_copy(update={"elevation_mask_deg": mask_deg})
    verdict = assess(tree_line.site.model_copy(update={"require": require})).verdict
    assert all(one.usable_share >= require.min_usable_share for one in verdict.signals)


def test_cutting_trees_returns_less_the_higher_the_cut(tree_line: Assessment) -> None:
    cuts = found(tree_line).tree_cuts
    assert [cut.cut_to_deg for cut in cuts] == [10.0, 15.0, 20.0]  # the mask is 10, the top 23
    returned = [cut.returned_satellite_time_share["GPS L1 C/A"] for cut in cuts]
    assert returned == sorted(returned, reverse=True)
    # Cut to the mask, the row is gone.
    poplars = next(one for one in tree_line.verdict.obstacles if one.name == "poplar row")
    assert poplars.returned_satellite_time_share is not None
    assert returned[0] == pytest.approx(poplars.returned_satellite_time_share["GPS L1 C/A"])
