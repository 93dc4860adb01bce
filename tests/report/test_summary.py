"""The result on a terminal."""

import dataclasses

from siteassess.report.summary import MOST_LINES, summary_lines


def test_summary_is_short_and_says_the_verdict_first(markup_assessment):
    lines = summary_lines(markup_assessment)
    assert len(lines) <= MOST_LINES == 25
    assert lines[0].endswith(": " + markup_assessment.verdict.outcome.upper())
    assert all(len(line) <= 100 for line in lines[1:])
    for signal in markup_assessment.verdict.signals:
        assert any(line.startswith(f"  {signal.signal} ") for line in lines)


def test_summary_can_be_shown_by_any_terminal(markup_assessment):
    """Own words in ASCII; only names may hold other letters."""
    text = "\n".join(summary_lines(markup_assessment)).replace("\u5317\u5854", "")
    assert text.isascii()


def test_summary_of_many_signals_stays_short(markup_assessment):
    verdict, budget = markup_assessment.verdict, markup_assessment.budget
    many = dataclasses.replace(
        markup_assessment,
        verdict=dataclasses.replace(verdict, signals=verdict.signals * 10),
        budget=dataclasses.replace(budget, signals=budget.signals * 10),
    )
    lines = summary_lines(many)
    assert len(lines) == MOST_LINES
    assert lines[-1].endswith("more signals in the report")


def test_names_cannot_steer_the_terminal(markup_assessment):
    place = markup_assessment.site.place.model_copy(update={"name": "Roof \x1b[31m\r\nPASS \u202eabc"})
    site = markup_assessment.site.model_copy(update={"place": place})
    text = "\n".join(summary_lines(dataclasses.replace(markup_assessment, site=site)))
    assert text.startswith("Roof [31m PASS abc: ")
    assert not {"\x1b", "\r", "\u202e"} & set(text)
