"""satellites.csv and its data frame."""

import csv
import dataclasses
import io

import pytest

from siteassess.report.satellite_table import csv_text, satellite_frame, spreadsheet_safe


def test_every_satellite_and_signal_has_a_row(markup_assessment):
    rows = list(csv.DictReader(io.StringIO(csv_text(markup_assessment))))
    shares = markup_assessment.verdict.satellites
    assert [(row["satellite"], row["signal"]) for row in rows] == [
        (share.satellite, share.signal) for share in shares
    ]
    assert list(rows[0]) == [field.name for field in dataclasses.fields(shares[0])]


def test_values_are_rounded_as_in_the_json(markup_assessment):
    frame = satellite_frame(markup_assessment)
    share = markup_assessment.verdict.satellites[0]
    assert frame.loc[0, "usable_share"] == round(share.usable_share, 6)
    assert frame.loc[0, "cn0_median_dbhz"] == round(share.cn0_median_dbhz, 3)


def test_what_is_never_seen_is_an_empty_cell(markup_assessment):
    verdict = markup_assessment.verdict
    unseen = dataclasses.replace(verdict.satellites[0], usable_share=None, cn0_min_dbhz=None)
    changed = dataclasses.replace(
        markup_assessment, verdict=dataclasses.replace(verdict, satellites=(unseen,))
    )
    row = next(csv.DictReader(io.StringIO(csv_text(changed))))
    assert (row["usable_share"], row["cn0_min_dbhz"]) == ("", "")


def test_table_without_satellites_keeps_its_header(markup_assessment):
    verdict = dataclasses.replace(markup_assessment.verdict, satellites=())
    text = csv_text(dataclasses.replace(markup_assessment, verdict=verdict))
    assert text.startswith("satellite,system,orbit_class,signal,")
    assert text.count("\n") == 1


@pytest.mark.parametrize("sign", ["=", "+", "-", "@", "\t=", "\r="])
def test_formula_signs_are_defused(markup_assessment, sign):
    """Signs that spreadsheets take for the start of a formula: OWASP, CSV Injection (from memory)."""
    assert spreadsheet_safe(f"{sign}1") == f"'{sign.strip()}1"
    verdict = markup_assessment.verdict
    named = dataclasses.replace(verdict.satellites[0], satellite=f"{sign}1")
    changed = dataclasses.replace(
        markup_assessment, verdict=dataclasses.replace(verdict, satellites=(named,))
    )
    assert next(csv.DictReader(io.StringIO(csv_text(changed))))["satellite"] == f"'{sign.strip()}1"


def test_lines_end_alike_on_every_system(markup_assessment):
    assert "\r" not in csv_text(markup_assessment)
