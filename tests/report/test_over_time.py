"""Satellites at once in JSON, report and chart."""

import re

from siteassess.report.figures.time_chart import time_chart_svg
from siteassess.report.results import assessment_record
from siteassess.report.sections.over_time import over_time_section


def test_time_in_json_agrees_with_the_counts(markup_assessment):
    record = assessment_record(markup_assessment)
    time = record["time"]
    assert set(time) == {"window_hours", "step_s", "at_once", "dilution", "sectors", "shortfalls"}
    assert (time["window_hours"], time["step_s"]) == (24.0, 600.0)
    for count, at_once in zip(record["counts"], time["at_once"], strict=True):
        assert at_once["system"] == count["system"]
        assert at_once["usable"]["min"] == count["usable_min"]
        assert at_once["usable"]["mean"] == count["usable_mean"]
        assert at_once["in_view"]["mean"] == count["above_mask_mean"]
        share = at_once["usable"]["at_least_share"]
        assert share[0] == 1.0
        assert len(share) == at_once["usable"]["max"] + 1
        # The mean of a count is the sum over n >= 1 of the share with at least n.
        assert abs(sum(share[1:]) - at_once["usable"]["mean"]) < 1e-3


def test_fewer_satellites_never_stand_better(markup_assessment):
    dilution = assessment_record(markup_assessment)["time"]["dilution"]
    for name in ("hdop", "vdop", "pdop", "tdop", "gdop"):
        for share in ("median", "p90", "p95"):
            assert dilution["usable"][name][share] >= dilution["in_view"][name][share]


def test_section_tells_hours_that_have_gone_by_and_no_time_of_day(markup_assessment):
    section = over_time_section(markup_assessment)
    words = " ".join([*section.sentences, section.figure_caption])
    assert "24 hours" in words
    assert not re.search(r"\d:\d\d|o.clock|UTC", words)


def test_chart_is_the_same_every_time(markup_assessment):
    assert time_chart_svg(markup_assessment) == time_chart_svg(markup_assessment)
