"""From the site file to report and JSON: trees after years, leaves by every model, thin things, bearings."""

from collections.abc import Callable
from pathlib import Path

import pytest

from siteassess import assess, read_site
from siteassess.report.content import report_content
from siteassess.report.results import assessment_record

HORIZON = (
    "azimuth_deg,elevation_deg,distance_m,obstacle,cover,depth_m,width_m\n0,3,,,,,\n"
    "100,12,25,grove,foliage,10,\n170,12,25,grove,foliage,10,\n"
    "200,14,,far wood,foliage,10,\n230,14,,far wood,foliage,10,\n"
    "300,50,6,mast,,,0.07\n"
)

WriteSite = Callable[..., Path]


def asked(text: str) -> tuple[str, str]:
    return ("min_cn0_dbhz = 33", f"min_cn0_dbhz = 33\n{text}")


@pytest.fixture
def grown(write_site: WriteSite):
    extra = '\n[foliage]\nmodel = "Weissberger"\ngrowth_m_per_year = 0.4\n'
    return assess(read_site(write_site(asked("good_for_years = 15"), horizon=HORIZON, extra=extra)))


def shares(assessment, criterion: str) -> dict[str, float]:
    findings = assessment.verdict.findings
    return {finding.signal: finding.value for finding in findings if finding.criterion == criterion}


def test_grown_trees_take_more_and_every_signal_is_asked_again(grown) -> None:
    now, later = shares(grown, "min_usable_share"), shares(grown, "good_for_years")
    assert set(now) == set(later)
    assert all(later[signal] < now[signal] for signal in now)


def test_grown_trees_are_those_that_a_survey_would_find_then(grown, write_site: WriteSite) -> None:
    """Authority: the same trees entered as they will stand: 6 m higher at 25 m, arctan(tan(12) + 6 / 25)."""
    later = HORIZON.replace("100,12,25", "100,24.349442,25").replace("170,12,25", "170,24.349442,25")
    extra = '\n[foliage]\nmodel = "Weissberger"\n'
    surveyed_then = assess(read_site(write_site(horizon=later, extra=extra, folder="then")))
    assert shares(grown, "good_for_years") == pytest.approx(
        shares(surveyed_then, "min_usable_share"), abs=1e-4
    )


def test_growth_is_said_in_the_assumptions(grown) -> None:
    texts = assessment_record(grown)["assumptions"]
    assert "The loss of leaves follows the model Weissberger." in texts
    assert (
        "For the time after 15 years the tops of trees were raised by their growth; how far a signal goes "
        "through their leaves, and everything else, stayed as it is."
    ) in texts
    assert "Not grown, because no distance is known: far wood." in texts


def test_nobody_asked_for_growth_and_nothing_is_said(write_site: WriteSite) -> None:
    record = assessment_record(assess(read_site(write_site(horizon=HORIZON))))
    assert "good_for_years" not in {finding["criterion"] for finding in record["findings"]}
    assert not any("years" in text for text in record["assumptions"])


def test_report_compares_the_models_and_lists_thin_things(grown) -> None:
    sections = {section.key: section for section in report_content(grown).sections}
    leaves, thin = sections["obstacles"].tables[-2:]
    assert leaves.header == (
        "No.", "Leaves", "P.833 slant path", "P.833 woodland", "Weissberger", "Spread",
    )  # fmt: skip
    by_name = {row[1]: row[2:] for row in leaves.rows}
    # ITU-R P.833 and Weissberger 1982 at 10 m on L1; slant path 0.25 f^0.39 d^0.25 12^0.05 = 8.9 dB at 12
    # degrees.
    assert by_name["grove"] == ("8.9", "2.5", "5.1", "3.6 to 1")
    assert [row[1] for row in thin.rows] == ["mast"]
    mast = next(entry for entry in assessment_record(grown)["obstacles"] if entry["name"] == "mast")
    assert 0.3 < mast["behind_loss_db"] < 1.0
    assert 0.0 < mast["grazing_hours_per_day"] < 24.0 * 120
    assert mast["foliage_loss_db"] is None


def test_thin_things_are_not_grazed_more_often_than_satellites_are_up(grown) -> None:
    """Law: satellite-hours near the mast are part of all satellite-hours above the mask."""
    mast = next(cost for cost in grown.verdict.obstacles if cost.name == "mast")
    hours = {each.satellite: each.hours_above_mask_per_day for each in grown.verdict.satellites}
    assert 0.0 < mast.grazing_hours_per_day < sum(hours.values())


def test_survey_section_tells_how_azimuths_were_turned(write_site: WriteSite) -> None:
    lines = 'complete = true\nbearings = "magnetic-north"\nsurveyed_on = 2026-11-25'
    assessment = assess(read_site(write_site(("complete = true", lines), horizon=HORIZON)))
    survey = next(section for section in report_content(assessment).sections if section.key == "survey")
    assert any(
        text.startswith(
            "horizon.csv: Azimuths from magnetic north were turned by the declination, +4.24° ± 0.36°"
        )
        for text in survey.sentences
    )
    (entry,) = assessment_record(assessment)["surveys"]
    assert (entry["bearings"], entry["correction_deg"], entry["uncertainty_deg"]) == (
        "magnetic-north",
        pytest.approx(4.24, abs=0.005),
        pytest.approx(0.36, abs=0.005),
    )


def test_height_above_sea_level_without_a_geoid_is_said_so(write_site: WriteSite) -> None:
    height = ("height_m = 600.0", 'height_m = 600.0\nheight_system = "orthometric"')
    assessment = assess(read_site(write_site(height)))
    facts = dict(report_content(assessment).facts)
    assert facts["Survey mark"].endswith("600.00 m above sea level")
    assert any("us_nga_egm08_25.tif" in text for text in assessment_record(assessment)["assumptions"])
