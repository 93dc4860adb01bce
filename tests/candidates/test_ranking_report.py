"""Outputs of a ranking: the same facts in all, no name that turns into markup, a chart that can be read."""

import csv
import dataclasses
import io
import itertools
import json
import math
import re
import xml.etree.ElementTree as ElementTree
from collections.abc import Callable, Iterator
from html.parser import HTMLParser
from importlib import resources
from typing import Any

import matplotlib
import pytest
import typst

from siteassess.candidates.candidate import Candidate, RefusedCandidate
from siteassess.candidates.rank import rank_candidates
from siteassess.candidates.ranking import Ranking
from siteassess.errors import Mistake
from siteassess.report.document import document_pdf
from siteassess.report.page import page_html
from siteassess.report.pieces import Content
from siteassess.report.ranking import chart as ranking_chart
from siteassess.report.ranking.chart import MARKS, MOST_ROWS, chart_svg
from siteassess.report.ranking.content import ranking_content
from siteassess.report.ranking.results import ranking_csv, ranking_json
from siteassess.report.ranking.summary import ranking_lines
from siteassess.report.ranking.write import RANKING_FILES, write_ranking
from siteassess.report.sections.setting import CAUTIONS
from siteassess.report.write import FILES
from siteassess.verdict.verdict import Finding

Found = Callable[..., Finding]
Made = Callable[..., Candidate]

HOSTILE = '=1+1 <b>&amp; "x"</b> #let $x_1$ *y*\x1b[31m \u202e\u5317\u5854'


class Page(HTMLParser):
    """Texts and elements of a page, as a browser would take them apart."""

    def __init__(self, html: str) -> None:
        super().__init__(convert_charrefs=True)
        self.texts: list[str] = []
        self.elements: list[str] = []
        self.feed(html)

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.elements.append(tag)

    def handle_data(self, data: str) -> None:
        self.texts.append(" ".join(data.split()))

    @property
    def text(self) -> str:
        return " ".join(self.texts)


@pytest.fixture(scope="module")
def ranking(found: Found, made: Made) -> Ranking:
    """A pass, an unproven site and two that fail, one of them beyond every scale; names full of markup."""
    share, horizon = "min_usable_share", "max_horizon_deg"
    return rank_candidates(
        (
            made(HOSTILE, found(share, 0.99, 0.95, "GPS L1 C/A"), found(horizon, 5.0, 10.0)),
            made("unproven", found(share, 0.97, 0.95, "GPS L1 C/A"), found(horizon, 9.0, 10.0),
                 unsurveyed_share=0.2),
            made("near", found(share, 0.94996, 0.95, "GPS L1 C/A"), found(horizon, 2.0, 10.0),
                 satellites=31.0),
            made("far", found(share, 0.1, 0.95, "GPS L1 C/A"), found(horizon, 60.0, 0.0)),
        ),
        [
            RefusedCandidate(
                given="/home/somebody/<i>gone</i>",
                place="<i>gone</i>",
                mistakes=(
                    Mistake(file="site.toml", where="", problem="there is no such file",
                            allowed="it was looked for as /home/somebody/<i>gone</i>/site.toml"),
                ),
            )
        ],
    )  # fmt: skip


@pytest.fixture(scope="module")
def content(ranking: Ranking) -> Content:
    return ranking_content(ranking)


def many(found: Found, made: Made, count: int) -> Ranking:
    return rank_candidates(
        made(
            f"{number:03d} Warehouses north of the market hall",
            found("min_usable_share", 1.0 - 0.004 * number, 0.95, "GPS L1 C/A"),
        )
        for number in range(count)
    )


def said(content: Content) -> Iterator[str]:
    yield from (content.title, content.site, content.verdict, *content.cautions)
    for answer in content.answers:
        yield from (answer.question, answer.answer)
    for fact in content.facts:
        yield from fact
    for section in content.sections:
        yield from (section.heading, section.figure_caption, *section.sentences, *section.points)
        for table in section.tables:
            yield from (table.caption, *table.header)
            for row in table.rows:
                yield from row


def test_page_says_all_of_the_content_and_nothing_is_markup(ranking: Ranking, content: Content) -> None:
    html = page_html(content, {"ranking": chart_svg(ranking)})
    page = Page(html)
    assert [words for words in said(content) if " ".join(words.split()) not in page.text] == []
    assert not {"b", "i", "script", "link", "img", "iframe"} & set(page.elements)
    assert not re.search(r'(href|src)="(?!#)', html)
    assert all(caution in page.text for caution in CAUTIONS)


def test_document_has_the_headings_of_the_content(ranking: Ranking, content: Content) -> None:
    layout = resources.files("siteassess.report").joinpath("document.typ").read_bytes()
    inputs = {
        "content": json.dumps(dataclasses.asdict(content)),
        "figures": json.dumps({"ranking": chart_svg(ranking)}),
    }
    headings = json.loads(
        typst.query(layout, "heading", field="body", ignore_system_fonts=True, sys_inputs=inputs)
    )
    assert len(headings) == 1 + len(content.sections)  # no room for signatures, no appendix
    pdf = document_pdf(content, {"ranking": chart_svg(ranking)})
    assert pdf.startswith(b"%PDF-")
    assert b"CreationDate" not in pdf


def test_every_table_row_has_a_cell_a_column(content: Content) -> None:
    for section in content.sections:
        for table in section.tables:
            assert {len(row) for row in table.rows} == {len(table.header)} == {len(table.align)}


def test_first_page_answers_what_the_reader_asks(content: Content) -> None:
    answers = {
        answer.question: answer.answer.replace("\N{NO-BREAK SPACE}", " ") for answer in content.answers
    }
    assert content.outcome == "pass"
    assert answers["Why this one?"] == (
        "It passes. Its margin is +4.2 %; its closest criterion is GPS L1 C/A, 99.0 % against 95.0 %."
    )
    assert answers["What is the second choice, and what does it cost?"] == (
        "unproven; it is unproven. It gives up: Highest point of the solid skyline 9.0° instead of 5.0°; "
        "GPS L1 C/A 97.0 % instead of 99.0 %. It gains: nothing."
    )
    assert answers["How many are good enough?"] == (
        "1 of 4 pass, 1 unproven, 2 failing. One spot could not be assessed."
    )


def test_page_says_so_when_no_spot_passes(ranking: Ranking) -> None:
    without = rank_candidates(site.candidate for site in ranking.sites[1:])
    why = ranking_content(without).answers[0].answer.replace("\N{NO-BREAK SPACE}", " ")
    assert why.startswith(
        "No spot passes. This one misses nothing, with a margin of +2.1 %, but 20.0 % of its sky"
    )
    failing = rank_candidates(site.candidate for site in ranking.sites[2:])
    why = ranking_content(failing).answers[0].answer.replace("\N{NO-BREAK SPACE}", " ")
    assert why == (
        "No spot passes. This one misses 1 of 2 required criteria, by −0.004 % at worst: "
        "GPS L1 C/A, 94.996 % against 95.000 %."
    )


def test_one_site_is_a_ranking_too(ranking: Ranking) -> None:
    alone = rank_candidates([ranking.sites[0].candidate])
    content = ranking_content(alone)
    assert content.site == "One spot compared"
    assert "prices" not in [section.key for section in content.sections]
    assert document_pdf(content, {"ranking": chart_svg(alone)}).startswith(b"%PDF-")


def test_sites_of_one_name_are_told_apart_by_their_place(found: Found, made: Made) -> None:
    same = found("min_usable_share", 0.97, 0.95, "GPS L1 C/A")
    twins = rank_candidates((made("roof", same, place="a"), made("roof", same, place="b")))
    assert ranking_content(twins).verdict == "First: roof (a)"


def values(record: Any) -> Iterator[Any]:
    if isinstance(record, dict):
        record = list(record.values())
    if isinstance(record, list):
        for item in record:
            yield from values(item)
    else:
        yield record


KEYS = {
    "": {"format", "tool_version", "ranking", "refused", "asked_differently", "same_criteria", "cautions"},
    "ranking": {
        "rank", "name", "site", "latitude_deg", "longitude_deg", "height_m", "verdict", "required",
        "required_missed", "margin", "usable_satellites", "beaten_by", "dominated_by", "sky", "findings",
        "signals", "against_first",
    },
    "findings": {"criterion", "signal", "value", "limit", "unit", "required", "outcome", "room"},
    "signals": {"signal", "usable_share", "lost_share", "hidden_share", "cn0_median_dbhz"},
    "against_first": {"criterion", "signal", "unit", "required", "value", "first_value", "gain"},
    "refused": {"site", "mistakes"},
}  # fmt: skip


def test_keys_are_those_of_the_format(ranking: Ranking) -> None:
    record = json.loads(ranking_json(ranking))
    assert record["format"] == "siteassess-ranking/1"
    assert record.keys() == KEYS[""]
    for site in record["ranking"]:
        assert site.keys() == KEYS["ranking"]
        for part in ("findings", "signals", "against_first"):
            assert all(entry.keys() == KEYS[part] for entry in site[part])
    assert [site.keys() for site in record["refused"]] == [KEYS["refused"]]


def test_results_hold_finite_numbers_the_names_as_given_and_no_folder_of_the_machine(
    ranking: Ranking,
) -> None:
    text = ranking_json(ranking)
    record = json.loads(text)
    assert all(math.isfinite(value) for value in values(record) if isinstance(value, float))
    assert "\x1b" not in text
    assert "\u202e" not in text
    assert record["ranking"][0]["name"] == HOSTILE
    assert record["refused"] == [{"site": "<i>gone</i>", "mistakes": ["site.toml: there is no such file"]}]
    assert [site["dominated_by"] for site in record["ranking"]] == [[], [1], [], [1, 2, 3]]
    assert record["ranking"][0]["against_first"] == []


def test_table_has_a_row_a_site_and_no_formula(ranking: Ranking) -> None:
    rows = list(csv.DictReader(io.StringIO(ranking_csv(ranking))))
    assert [row["rank"] for row in rows] == ["1", "2", "3", "4"]
    assert rows[0]["name"].startswith("'=1+1 ")
    assert [row["min_usable_share GPS L1 C/A"] for row in rows] == ["0.99", "0.97", "0.94996", "0.1"]
    assert rows[3]["dominated_by"] == "1 2 3"


def test_criterion_that_a_site_lacks_is_an_empty_cell(found: Found, made: Made) -> None:
    ranking = rank_candidates(
        (
            made("a", found("min_usable_share", 0.99, 0.95, "GPS L1 C/A")),
            made("b", found("min_usable_share", 0.98, 0.9, "Galileo E1")),
        )
    )
    rows = {row["name"]: row for row in csv.DictReader(io.StringIO(ranking_csv(ranking)))}
    assert rows["a"]["min_usable_share Galileo E1"] == ""
    assert rows["b"]["min_usable_share Galileo E1"] == "0.98"
    assert ("Not compared", "Spots with different criteria or signals do not beat each other.") in (
        ranking_content(ranking).facts
    )


# The chart


def test_chart_is_well_formed_and_carries_no_text_and_no_date(ranking: Ranking) -> None:
    elements = {
        element.tag.rpartition("}")[2] for element in ElementTree.fromstring(chart_svg(ranking)).iter()
    }
    assert not {"text", "image", "script", "date"} & elements


def test_chart_does_not_depend_on_the_settings_of_the_user(ranking: Ranking) -> None:
    expected = chart_svg(ranking)
    with matplotlib.rc_context({"axes.facecolor": "red", "font.size": 20, "lines.linewidth": 9}):
        assert chart_svg(ranking) == expected


@pytest.mark.parametrize("count", [1, 3, 25, 60, 200])
def test_rows_leave_room_for_their_letters(found: Found, made: Made, count: int) -> None:
    """Texts of neighbouring rows and of neighbouring columns do not touch; measured on the drawn figure."""
    from matplotlib.backends.backend_agg import FigureCanvasAgg

    figure = ranking_chart._figure(many(found, made, count))
    renderer = FigureCanvasAgg(figure).get_renderer()  # type: ignore[no-untyped-call]
    (axes,) = figure.axes
    boxes = [text.get_window_extent(renderer) for text in axes.texts]
    for index, box in enumerate(boxes):
        assert box.x0 >= 0.0
        assert box.x1 <= figure.bbox.width
        assert not any(box.overlaps(other) for other in boxes[index + 1 :])
    ticks = [label.get_window_extent(renderer) for label in axes.get_xticklabels()]
    assert not any(one.overlaps(other) for one, other in itertools.pairwise(ticks))
    assert figure.get_figheight() < 9.6  # with heading and caption, it fits on a page of A4


def test_chart_draws_the_first_sixty(found: Found, made: Made) -> None:
    ranking = many(found, made, MOST_ROWS + 5)
    assert "The first 60 of 65 spots." in ranking_content(ranking).sections[1].figure_caption
    assert len(ranking_content(ranking).sections[0].tables[0].rows) == MOST_ROWS + 5


def test_marks_differ_by_shape_and_by_filling() -> None:
    assert len({shape for shape, *_ in MARKS.values()}) == len(MARKS)
    assert MARKS["unproven"][2] == "white"


# The terminal


def test_lines_fit_a_terminal_and_stop_where_there_are_many(found: Found, made: Made) -> None:
    lines = ranking_lines(many(found, made, 200))
    assert len(lines) <= 25
    assert max(map(len, lines)) <= 100
    assert lines[-1] == "      ... and 178 more in the report"


def test_line_of_a_hostile_name_is_plain(ranking: Ranking) -> None:
    assert all(line.isprintable() for line in ranking_lines(ranking))


# Putting it in place


def test_files_are_the_five_of_a_ranking_and_never_those_of_an_assessment(
    ranking: Ranking, tmp_path: Any
) -> None:
    write_ranking(ranking, tmp_path / "ranking")
    assert sorted(path.name for path in (tmp_path / "ranking").iterdir()) == sorted(RANKING_FILES)
    assert not set(RANKING_FILES) & set(FILES)


def test_error_leaves_the_old_ranking(
    ranking: Ranking, tmp_path: Any, monkeypatch: pytest.MonkeyPatch
) -> None:
    from siteassess.report.ranking import results as ranking_results

    def broken(_: Ranking) -> str:
        raise RuntimeError("table")

    write_ranking(ranking, tmp_path / "ranking")
    before = {path.name: path.read_bytes() for path in (tmp_path / "ranking").iterdir()}
    monkeypatch.setattr(ranking_results, "ranking_csv", broken)
    with pytest.raises(RuntimeError):
        write_ranking(rank_candidates([ranking.sites[0].candidate]), tmp_path / "ranking")
    assert {path.name: path.read_bytes() for path in (tmp_path / "ranking").iterdir()} == before
