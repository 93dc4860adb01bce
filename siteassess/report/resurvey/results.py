"""Two surveys of one spot for programs, and for a terminal."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from siteassess.candidates.resurvey import surveyed_on
from siteassess.report.phrases import plain
from siteassess.report.plain_json import as_json, rounded
from siteassess.report.resurvey.content import resurvey_answers
from siteassess.report.sections.answers import VERDICTS
from siteassess.report.sections.setting import CAUTIONS
from siteassess.report.summary import PLAIN_SIGNS, WIDTH

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.candidates.resurvey import FindingChange, Resurvey
    from siteassess.verdict.verdict import ObstacleCost

__all__ = ["FORMAT", "resurvey_json", "resurvey_lines", "resurvey_record"]

FORMAT = "siteassess-changes/1"
MOST_LINES_OF_ONE = 5


def resurvey_json(changes: Resurvey) -> str:
    """The record of two surveys as JSON, ending in a newline; the same text for the same surveys."""
    return as_json(resurvey_record(changes))


def resurvey_record(changes: Resurvey) -> dict[str, Any]:
    """Two surveys as plain dictionaries, lists, texts and rounded numbers; what does not exist is None.

    Returns
    -------
    dict
        Keys as in docs/methods/candidates.md.
    """
    from siteassess import __version__

    return {
        "format": FORMAT,
        "tool_version": __version__,
        "before": _survey(changes.before),
        "after": _survey(changes.after),
        "marks_apart_m": rounded(changes.apart_m, "m"),
        "antenna_risen_m": rounded(changes.risen_m, "m"),
        "tolerance": {
            "azimuth_deg": rounded(changes.tolerance.azimuth_deg, "deg"),
            "elevation_deg": rounded(changes.tolerance.elevation_deg, "deg"),
        },
        "outline": [
            {
                "change": change.kind,
                "azimuth_from_deg": rounded(change.azimuth_from_deg, "deg"),
                "azimuth_to_deg": rounded(change.azimuth_to_deg, "deg"),
                "largest_deg": rounded(change.largest_deg, "deg"),
                "at_azimuth_deg": rounded(change.at_azimuth_deg, "deg"),
                "before_deg": rounded(change.before_deg, "deg"),
                "after_deg": rounded(change.after_deg, "deg"),
                "name": change.name,
            }
            for change in changes.outline
        ],
        "obstacles": [
            {"name": one.name, "before": _obstacle(one.before), "after": _obstacle(one.after)}
            for one in changes.obstacles
        ],
        "findings": [_finding(one) for one in changes.findings],
        "cautions": list(CAUTIONS),
    }


def resurvey_lines(changes: Resurvey) -> list[str]:
    """Verdicts and the answers of the first page, for a terminal."""
    from textwrap import wrap

    before, after = (VERDICTS[one.verdict.outcome].upper() for one in (changes.before, changes.after))
    lines = [f"{plain(changes.after.site.place.name)}: {before} -> {after}"]
    for answer in resurvey_answers(changes):
        lines += wrap(
            f"{answer.label}: {answer.answer}".translate(PLAIN_SIGNS),
            WIDTH,
            initial_indent="  ",
            subsequent_indent="    ",
            max_lines=MOST_LINES_OF_ONE,
            break_on_hyphens=False,
            placeholder=" ...",
        )
    return [line.translate(PLAIN_SIGNS) for line in lines]


def _survey(assessment: Assessment) -> dict[str, Any]:
    day = surveyed_on(assessment.site)
    return {
        "name": assessment.site.place.name,
        "surveyed_on": None if day is None else day.isoformat(),
        "verdict": assessment.verdict.outcome,
    }


def _obstacle(cost: ObstacleCost | None) -> dict[str, Any] | None:
    if cost is None:
        return None
    return {
        "peak_elevation_deg": rounded(cost.peak_elevation_deg, "deg"),
        "blocked_share_above_mask": rounded(cost.blocked_share_above_mask, "share"),
        "lost_satellite_time_share": {
            signal: rounded(share, "share") for signal, share in cost.lost_satellite_time_share.items()
        },
    }


def _finding(change: FindingChange) -> dict[str, Any]:
    finding = change.finding
    return {
        "criterion": finding.criterion,
        "signal": finding.signal,
        "unit": finding.unit,
        "required": finding.required,
        "change": change.direction,
        **{
            when: None
            if one is None
            else {
                "value": rounded(one.value, one.unit),
                "limit": rounded(one.limit, one.unit),
                "outcome": one.outcome,
            }
            for when, one in (("before", change.before), ("after", change.after))
        },
    }
