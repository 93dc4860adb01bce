"""What the report says, in which words."""

import dataclasses

import pytest

from siteassess.report.content import report_content
from siteassess.report.phrases import azimuth_range, compass_point, number, percent, plain, told_apart
from siteassess.report.sections.answers import answers, ranked_obstacles
from siteassess.report.sections.setting import CAUTIONS, assumptions


@pytest.fixture(scope="module")
def sections(markup_assessment):
    return {section.key: section for section in report_content(markup_assessment).sections}


def with_outcome(assessment, outcome, **changes):
    return dataclasses.replace(
        assessment, verdict=dataclasses.replace(assessment.verdict, outcome=outcome, **changes)
    )


def test_tables_are_rectangular(sections):
    for section in sections.values():
        for table in section.tables:
            assert len(table.align) == len(table.header)
            assert all(len(row) == len(table.header) for row in table.rows)
            assert len(table.tones) in (0, len(table.rows))


def test_budget_is_printed_at_five_elevations_for_each_signal(markup_assessment, sections):
    tables = sections["budget"].tables
    assert len(tables) == sum(len(budget.lines) for budget in markup_assessment.budget.signals)
    for table in tables:
        assert table.header[1:] == ("5°", "10°", "30°", "60°", "90°")


def test_printed_budget_adds_up(sections):
    """The lines are a sum: what a reader would check with a pocket calculator."""
    hundredths_of_eight_lines_db = 0.04
    for table in sections["budget"].tables:
        columns = [
            [float(cell.replace("−", "-")) for cell in column]
            for column in list(zip(*table.rows, strict=True))[1:]
        ]
        for eirp, spreading, air, received, tracked, gain, noise, inside, cn0, _ in columns:
            assert eirp + spreading + air == pytest.approx(received, abs=hundredths_of_eight_lines_db)
            assert received + tracked + gain + noise + inside == pytest.approx(
                cn0, abs=hundredths_of_eight_lines_db
            )


def test_findings_stand_required_before_advice(markup_assessment, sections):
    required, advice = sections["findings"].tables
    assert len(required.rows) == sum(finding.required for finding in markup_assessment.verdict.findings)
    assert len(advice.rows) == sum(not finding.required for finding in markup_assessment.verdict.findings)


def test_unsurveyed_azimuths_are_named(sections):
    assert "Nobody looked at these azimuths: 300.0° to 350.0°." in sections["survey"].sentences or any(
        "Nobody looked at these azimuths" in sentence for sentence in sections["survey"].sentences
    )


def test_all_cautions_are_there(markup_assessment):
    assert report_content(markup_assessment).cautions == CAUTIONS
    text = " ".join(CAUTIONS).lower()
    at_height = ("roofs", "masts", "lifting", "overhead lines", "lightning", "earthing", "falls")
    beyond = ("radio-frequency", "transmitters", "structure", "electrical", "survey", "models", "trial log")
    for subject in at_height + beyond:
        assert subject in text, subject


@pytest.mark.parametrize(
    ("outcome", "beginning"), [("pass", "Yes."), ("fail", "No."), ("unproven", "Not proven.")]
)
def test_first_answer_says_the_verdict(markup_assessment, outcome, beginning):
    assert answers(with_outcome(markup_assessment, outcome))[0].answer.startswith(beginning)


def test_reason_of_a_sky_limit_holds_both_figures(markup_assessment):
    peak = next(
        finding for finding in markup_assessment.verdict.findings if finding.criterion == "max_horizon_deg"
    )
    asked = dataclasses.replace(peak, required=True, value=47.0, limit=20.0, outcome="missed")
    why = answers(with_outcome(markup_assessment, "fail", findings=(asked,)))[1].answer
    assert why == f"Highest point of the solid skyline: 47.0°; at most 20.0° is asked. {peak.reason}"


@pytest.mark.parametrize(
    ("mount", "told"),
    [
        ({}, None),
        ({"roof_surface": "gravel"}, "gravel"),
        ({"height_above_roof_m": 2.0}, "2.00 m below the antenna"),
        ({"height_above_roof_m": 2.0, "roof_surface": "gravel"}, "2.00 m below the antenna, gravel"),
    ],
)
def test_roof_is_told_as_far_as_it_is_known(markup_assessment, mount, told):
    place = markup_assessment.site.mount.model_copy(update=mount)
    site = markup_assessment.site.model_copy(update={"mount": place})
    facts = dict(report_content(dataclasses.replace(markup_assessment, site=site)).facts)
    assert facts.get("Roof") == told


def test_site_without_obstacles_has_no_worst_direction(markup_assessment):
    sky = dataclasses.replace(markup_assessment.verdict.sky, peak_elevation_deg=0.0)
    sectors = tuple(
        dataclasses.replace(sector, lost_satellite_time_share=0.0, blocked_share=0.0)
        for sector in markup_assessment.verdict.sectors
    )
    told = answers(with_outcome(markup_assessment, "pass", obstacles=(), sectors=sectors, sky=sky))
    assert told[2].answer == "None; nothing that was surveyed stands above the mask."
    assert told[3].answer == "None; no obstacle takes anything above the mask."


def test_dearest_obstacle_is_number_one(markup_assessment):
    costs = [
        max(cost.lost_satellite_time_share.values())
        for _, cost in ranked_obstacles(markup_assessment.verdict)
    ]
    assert costs == sorted(costs, reverse=True)
    assert (
        plain(ranked_obstacles(markup_assessment.verdict)[0][1].name) in answers(markup_assessment)[3].answer
    )


def test_assumptions_follow_the_site(markup_assessment):
    text = " ".join(assumptions(markup_assessment))
    assert "guarantee" in text
    assert "do not count" in text
    sky = markup_assessment.site.sky.model_copy(update={"power": "typical"})
    require = markup_assessment.site.require.model_copy(update={"count_weakened": True})
    site = markup_assessment.site.model_copy(update={"sky": sky, "require": require})
    text = " ".join(assumptions(dataclasses.replace(markup_assessment, site=site)))
    assert "typical" in text
    assert "count as long as they are strong enough" in text


def test_numbers_in_words():
    assert number(-0.04) == "0.0"
    assert number(float("nan")) == "–"
    assert percent(1.0) == "100.0\N{NO-BREAK SPACE}%"
    assert told_apart(0.9499, 0.95, "share") == ("94.99\N{NO-BREAK SPACE}%", "95.00\N{NO-BREAK SPACE}%")
    assert told_apart(10.0, 10.0, "deg") == ("10.0°", "10.0°")
    assert azimuth_range(350.0, 372.0) == "350.0° to 12.0°"
    assert compass_point(359.0) == "north"


def test_survey_tells_what_was_changed_in_outlines(markup_assessment):
    remark = 'yard.geojson: the outline of "hall" was not closed and was closed.'
    skyline = dataclasses.replace(markup_assessment.skyline, remarks=(remark,))
    content = report_content(dataclasses.replace(markup_assessment, skyline=skyline))
    (survey,) = (section for section in content.sections if section.key == "survey")
    assert survey.sentences[-1] == remark
