"""Findings on satellites at once, and that a looser limit never fails what passed."""

from dataclasses import replace
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from siteassess import Assessment, assess, read_site
from siteassess.verdict.judge import judge
from siteassess.verdict.verdict import Verdict

SITE = """\
format = 1
[site]
name = "Courtyard"
latitude_deg = 48.0
longitude_deg = 11.0
[mount]
mast_height_m = 1.5
[antenna]
pattern = "choke-ring"
[[chain]]
part = "preamplifier"
gain_db = 40.0
noise_figure_db = 1.5
[[chain]]
part = "receiver"
noise_figure_db = 8.0
[[horizon]]
source = "survey"
file = "horizon.csv"
complete = true
[sky]
systems = ["GPS", "Galileo"]
days = 1
step_s = 900
[require]
elevation_mask_deg = 10
min_cn0_dbhz = 35
min_usable_share = 0.3
"""
WALLS = "azimuth_deg,elevation_deg,distance_m\n0,45,18\n90,45,18\n90,10,60\n180,10,60\n180,55,30\n360,55,30\n"


@pytest.fixture(scope="module")
def courtyard(tmp_path_factory: pytest.TempPathFactory) -> Assessment:
    folder: Path = tmp_path_factory.mktemp("courtyard")
    (folder / "site.toml").write_text(SITE, encoding="utf-8")
    (folder / "horizon.csv").write_text(WALLS, encoding="utf-8")
    return assess(read_site(folder))


def judged(assessment: Assessment, **require: object) -> Verdict:
    """The same link budget, other limits; a minimum of C/N0 goes into the budget."""
    site, budget = assessment.site, assessment.budget
    min_cn0_dbhz = require.pop("min_cn0_dbhz", 35.0)
    budget = replace(
        budget, signals=tuple(replace(signal, min_cn0_dbhz=min_cn0_dbhz) for signal in budget.signals)
    )
    site = site.model_copy(update={"require": site.require.model_copy(update=require)})
    return judge(site, assessment.skyline, assessment.tracks, budget)


# Limit, its range, and whether a smaller value asks for less.
LIMITS = {
    "min_cn0_dbhz": (st.floats(20, 55), True),
    "min_usable_share": (st.floats(0, 1), True),
    "max_blocked_sky_share": (st.floats(0, 1), False),
    "max_block_share": (st.floats(0, 1), False),
    "max_horizon_deg": (st.floats(0, 90), False),
    "max_reflector_deg": (st.floats(0, 90), False),
    "reflector_distance_m": (st.floats(0, 100), True),
    "min_satellites": (st.integers(1, 20), True),
    "min_satellites_share": (st.floats(0, 1), True),
    "max_gap_s": (st.floats(0, 90_000), False),
    "max_pdop": (st.floats(0.5, 30), False),
    "min_pdop_share": (st.floats(0, 1), True),
}


@pytest.mark.parametrize("key", LIMITS)
@settings(max_examples=12, deadline=None)
@given(data=st.data())
def test_loosening_a_limit_never_turns_a_pass_into_a_fail(courtyard: Assessment, key: str, data) -> None:
    values, smaller_asks_less = LIMITS[key]
    low, high = sorted([data.draw(values), data.draw(values)])
    loose, strict = (low, high) if smaller_asks_less else (high, low)
    beside = {"min_satellites": 6} if key in ("min_satellites_share", "max_gap_s") else {}
    if judged(courtyard, **beside, **{key: strict}).outcome == "pass":
        assert judged(courtyard, **beside, **{key: loose}).outcome == "pass"


def test_no_limit_of_satellites_or_geometry_is_advice_only(courtyard: Assessment) -> None:
    verdict = judged(courtyard)
    advice = {one.criterion: one for one in verdict.findings if not one.required}
    assert {"min_satellites", "max_gap_s", "min_pdop_share"} <= set(advice)
    assert verdict.outcome == "pass"


def test_satellites_at_once_are_held_against_what_is_asked(courtyard: Assessment) -> None:
    verdict = judged(courtyard, min_satellites=20, min_satellites_by_system={"GPS": 1, "Galileo": 12})
    found = {one.criterion: one for one in verdict.findings}
    together = found["min_satellites"]
    assert (together.outcome, together.required, together.unit) == ("missed", True, "satellites")
    assert together.value == verdict.counts[-1].usable_p05
    assert (
        "Fewer than 20 are usable for 100.0% of the time, once, at the longest 24.0 hours." in together.reason
    )
    assert "Not usable then are, on average, " in together.reason
    alone = found["min_satellites_by_system"]
    assert (alone.outcome, alone.limit) == ("missed", 12.0)
    assert alone.reason.startswith("Galileo is the system farthest from its number: ")
    assert verdict.outcome == "fail"


def test_pdop_says_what_it_is_counted_with(courtyard: Assessment) -> None:
    asked = {one.criterion: one for one in judged(courtyard, max_pdop=1.0).findings}["min_pdop_share"]
    assert (asked.required, asked.limit, asked.outcome, asked.source) == (True, 0.98, "missed", "site file")
    assert asked.reason.startswith("PDOP, with one clock a system, is at most 1 for ")
    advice = {one.criterion: one for one in judged(courtyard).findings}["min_pdop_share"]
    assert advice.source == (
        "GPS SPS Performance Standard 2020, Table 3.8-1: a mean over the globe; its worst site has 88 %"
    )


def test_the_longest_gap_is_that_of_too_few_satellites(courtyard: Assessment) -> None:
    verdict = judged(courtyard, min_satellites=8, max_gap_s=0.0)
    gap = {one.criterion: one for one in verdict.findings}["max_gap_s"]
    assert gap.value == verdict.timeline.shortfall("satellites", "all systems").longest_s > 0.0
    assert gap.value % 900.0 == 0.0
