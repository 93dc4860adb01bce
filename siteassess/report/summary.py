"""The result on a terminal: at most 25 short lines."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import number, percent, plain
from siteassess.report.sections.answers import VERDICTS, answers

if TYPE_CHECKING:
    from siteassess.assessment import Assessment

__all__ = ["MOST_LINES", "summary_lines"]

MOST_LINES = 25
WIDTH = 100
# A redirected output need not be able to hold the signs of the printed report.
PLAIN_SIGNS = str.maketrans({"−": "-", "–": "-", "°": " deg", "“": '"', "”": '"', "\N{NO-BREAK SPACE}": " "})


def summary_lines(assessment: Assessment) -> list[str]:
    """Verdict, reasons, worst direction and one line a signal, for a terminal.

    Returns
    -------
    list of str
        At most `MOST_LINES` lines.
    """
    from textwrap import wrap

    verdict = assessment.verdict
    lines = [f"{plain(assessment.site.place.name)}: {VERDICTS[verdict.outcome].upper()}"]
    for answer in answers(assessment):
        lines += wrap(
            f"{answer.label}: {answer.answer}".translate(PLAIN_SIGNS),
            WIDTH,
            initial_indent="  ",
            subsequent_indent="    ",
            max_lines=4,
            break_on_hyphens=False,
            placeholder=" ...",
        )
    room = MOST_LINES - len(lines)
    signals = [_signal_line(assessment, index) for index in range(len(verdict.signals))]
    if len(signals) > room:
        signals = [*signals[: room - 1], f"  ... and {len(signals) - room + 1} more signals in the report"]
    return [line.translate(PLAIN_SIGNS) for line in (*lines, *signals)]


def _signal_line(assessment: Assessment, index: int) -> str:
    shares, budget = assessment.verdict.signals[index], assessment.budget.signals[index]
    median = f"median C/N0 {number(shares.cn0_median_dbhz)} dB-Hz, {budget.min_cn0_dbhz:g} asked"
    return f"  {shares.signal:<14} usable {percent(shares.usable_share):>8}   {median}"
