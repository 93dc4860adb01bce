"""What the report says about how sure the verdict is, against the records behind it."""

from collections.abc import Callable
from dataclasses import replace
from pathlib import Path

import pytest

from siteassess import Assessment, assess, read_site
from siteassess.assessment import explained
from siteassess.report.content import report_content
from siteassess.report.pieces import Section
from siteassess.report.results import assessment_record, json_text
from siteassess.report.sections.answers import answers
from siteassess.report.summary import MOST_LINES, summary_lines
from siteassess.verdict.uncertainty.how_sure import uncertainty

WriteSite = Callable[..., Path]
WALL = "azimuth_deg,elevation_deg,obstacle\n0,0,\n120,30,wall\n240,30,wall\n"


def sure_of(path: Path) -> Assessment:
    found = assess(read_site(path))
    sure = uncertainty(found.site, found.skyline, found.tracks, found.budget, found.verdict)
    return replace(found, uncertainty=sure)


def walled(write_site: WriteSite, limit_deg: float, more: str = "elevation_error_deg = 1.0") -> Assessment:
    """Without the usable share, so that one finding alone decides."""
    return sure_of(
        write_site(
            ("complete = true", f"complete = true\n{more}"),
            ("min_cn0_dbhz = 33", f"min_cn0_dbhz = 33\nmin_usable_share = 0\nmax_horizon_deg = {limit_deg}"),
            horizon=WALL,
        )
    )


def section(told: Assessment, key: str) -> Section:
    return next(one for one in report_content(told).sections if one.key == key)


def test_without_being_asked_for_nothing_is_said(markup_assessment: Assessment) -> None:
    assert markup_assessment.uncertainty is None
    assert "how-sure" not in {one.key for one in report_content(markup_assessment).sections}
    assert "How sure" not in {one.label for one in answers(markup_assessment)}
    assert assessment_record(markup_assessment)["uncertainty"] is None


@pytest.mark.parametrize(("limit_deg", "word"), [(31.0, "Yes, narrowly."), (29.0, "No, narrowly.")])
def test_a_narrow_result_is_called_so_on_the_first_page(
    write_site: WriteSite, limit_deg: float, word: str
) -> None:
    told = walled(write_site, limit_deg)
    page = {one.label: one.answer for one in answers(told)}
    assert page["Result"].startswith(word)
    assert told.uncertainty is not None
    assert told.uncertainty.probability is not None
    chance = f"{100 * told.uncertainty.probability:.0f}\N{NO-BREAK SPACE}%"
    assert page["How sure"] == (
        f"There is a chance of {chance} that all requirements which depend on the sky are met. That is a "
        "narrow result, which might well turn on “Highest point of the solid skyline”. Most of the doubt is "
        "the elevations of the survey horizon.csv, uncertain by 1.00°: "
        "a finer clinometer or a total station would help most."
    )
    reasons = [row[-1] for row in section(told, "findings").tables[0].rows]
    assert sum("Narrow: there is a chance of" in reason for reason in reasons) == 1


def test_a_clear_result_is_not_called_narrow(write_site: WriteSite) -> None:
    told = walled(write_site, 40.0)
    page = {one.label: one.answer for one in answers(told)}
    assert page["Result"].startswith("Yes. ")
    assert page["How sure"] == (
        "It is as good as certain that all requirements which depend on the sky are met. "
        "No error of survey or levels that was stated makes it doubtful."
    )


def test_a_survey_without_errors_counts_as_exact_and_is_named(write_site: WriteSite) -> None:
    told = walled(write_site, 40.0, more="")
    page = {one.label: one.answer for one in answers(told)}
    assert page["How sure"].endswith("Nobody stated the errors of horizon.csv: its readings count as exact.")


def test_table_of_errors_adds_up_and_names_the_instrument(write_site: WriteSite) -> None:
    told = walled(write_site, 31.0, more='instrument = "smartphone"')
    spread, errors = section(told, "how-sure").tables
    assert {row[0] for row in errors.rows} >= {"Elevations of the survey horizon.csv", "Gain of the antenna"}
    assert errors.rows[0][3] == "100\N{NO-BREAK SPACE}%"
    assert [row[-1] for row in spread.rows].count("narrow") == 1
    (source,) = section(told, "survey").tables[0].rows
    assert "3° (smartphone)" in source
    assert "1° (smartphone)" in source


def test_results_hold_what_the_report_says(write_site: WriteSite) -> None:
    told = walled(write_site, 31.0)
    assert told.uncertainty is not None
    record = assessment_record(told)["uncertainty"]
    assert set(record) == {
        *("draws", "seed", "probability_share", "narrow", "findings", "closest", "sources", "unstated"),
    }
    assert record["probability_share"] == pytest.approx(told.uncertainty.probability)
    assert record["closest"] == {"criterion": "max_horizon_deg", "signal": None}
    assert record["sources"][0]["error"] == "elevation"
    assert {one["criterion"] for one in record["findings"]} >= {"min_usable_share", "min_satellites"}


def test_explained_is_sure_and_the_same_bytes_every_time(write_site: WriteSite) -> None:
    path = write_site(("[require]", "[sky]\ndays = 1\nstep_s = 600\n[require]"), horizon=WALL)
    once, again = (explained(assess(read_site(path))) for _ in range(2))
    assert once.uncertainty is not None
    assert json_text(once) == json_text(again)
    assert len(summary_lines(once)) <= MOST_LINES
