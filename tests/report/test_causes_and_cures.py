"""What the report says about causes and cures, against the records behind it."""

import json
from collections.abc import Callable
from pathlib import Path

import pytest
from click.testing import CliRunner

from siteassess import Assessment, assess, read_site
from siteassess.assessment import explained
from siteassess.cli import main
from siteassess.report.content import report_content
from siteassess.report.phrases import percent, plain
from siteassess.report.pieces import Section
from siteassess.report.results import assessment_record
from siteassess.report.sections.answers import ranked_obstacles

HARBOUR = Path(__file__).parents[2] / "example_sites" / "harbour"


@pytest.fixture(scope="module")
def told(markup_assessment: Assessment) -> Assessment:
    return explained(markup_assessment)


def section(assessment: Assessment, key: str) -> Section:
    return next(one for one in report_content(assessment).sections if one.key == key)


def test_plain_assessment_says_nothing_of_them(markup_assessment: Assessment) -> None:
    keys = {one.key for one in report_content(markup_assessment).sections}
    assert not keys & {"causes", "cures"}
    record = assessment_record(markup_assessment)
    assert record["causes"] is None
    assert record["cures"] is None


def test_obstacles_are_numbered_by_what_they_return(told: Assessment) -> None:
    ranked = [index for index, _ in ranked_obstacles(told.verdict)]
    assert told.explanation is not None
    assert tuple(ranked) == told.explanation.order
    returned = [
        max((told.verdict.obstacles[index].returned_satellite_time_share or {}).values()) for index in ranked
    ]
    assert returned == sorted(returned, reverse=True)
    causes = section(told, "causes").tables[0]
    names = [plain(told.verdict.obstacles[index].name) for index in ranked]
    assert [row[:2] for row in causes.rows[: len(names)]] == [
        (str(place), name) for place, name in enumerate(names, start=1)
    ]


def test_last_row_is_all_that_obstacles_take(told: Assessment) -> None:
    last = section(told, "causes").tables[0].rows[-1]
    assert last[2:-1] == tuple(percent(one.lost_share, 2) for one in told.verdict.signals)


def test_json_holds_the_same(told: Assessment) -> None:
    record = assessment_record(told)
    assert [one["rank"] for one in record["causes"]] == list(range(1, len(told.verdict.obstacles) + 1))
    last = record["causes"][-1]["returned_with_those_above_share"]
    for one in told.verdict.signals:
        assert last[one.signal] == pytest.approx(one.lost_share, abs=1e-6)
    mast = record["cures"]["mast"]
    assert len(mast["steps"]) == 21
    assert mast["keep_angles"] == list(told.explanation.heights.keep_angles)
    json.dumps(record, allow_nan=False)


def test_height_that_passes_is_named_with_its_price() -> None:
    told = explained(assess(read_site(HARBOUR / "tree_line")))
    sentences = " ".join(section(told, "cures").sentences)
    assert told.explanation is not None
    assert told.explanation.heights is not None
    lowest_m = told.explanation.heights.lowest_passing_m
    assert lowest_m is not None
    assert f"nothing required is missed is {lowest_m:.2f} m tall; it is 2.50 m now." in sentences
    assert "A taller mast costs stability." in sentences
    assert "instrument_up_m = 2.610 keeps it there" in sentences
    assert "keep their angles at every height: general skyline." in sentences


TALLEST = ("mast_height_m = 1.5", "mast_height_m = 1.5\nmax_mast_height_m = 1.5")


@pytest.mark.parametrize(
    ("replacements", "horizon", "sentence"),
    [
        ([TALLEST], "20,15,30", "The mast is as tall as the site file allows."),
        ([], "20,15,", "What a taller mast brings is not known: no obstacle carries a distance."),
    ],
)
def test_where_no_height_is_looked_at_the_reason_is_given(
    write_site: Callable[..., Path], replacements: list[tuple[str, str]], horizon: str, sentence: str
) -> None:
    extra = '\n[sky]\nsystems = ["GPS"]\ndays = 1\nstep_s = 600\n'
    rows = f"azimuth_deg,elevation_deg,distance_m\n{horizon}\n"
    told = explained(assess(read_site(write_site(*replacements, horizon=rows, extra=extra))))
    assert sentence in " ".join(section(told, "cures").sentences)


def test_explain_adds_causes_and_cures_to_plain_json(markup_site: Path) -> None:
    path = str(markup_site)
    bare = json.loads(CliRunner().invoke(main, ["assess", path, "--json"]).stdout)
    full = json.loads(CliRunner().invoke(main, ["assess", path, "--json", "--explain"]).stdout)
    assert bare["causes"] is None
    assert full["causes"][0]["rank"] == 1
    assert full["cures"]["askable"]
