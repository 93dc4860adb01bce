"""What two surveys of one spot say, once: the page, the document and the terminal only lay it out."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.candidates.resurvey import SAME_SPOT_M, surveyed_on
from siteassess.report.phrases import NOTHING, azimuth_range, number, percent, plain, told_apart
from siteassess.report.pieces import Answer, Content, Section, Table
from siteassess.report.ranking.words import criterion_name
from siteassess.report.sections.answers import VERDICTS
from siteassess.report.sections.setting import CAUTIONS
from siteassess.wording import listed

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.candidates.outline_changes import OutlineChange
    from siteassess.candidates.resurvey import FindingChange, ObstacleChange, Resurvey
    from siteassess.verdict.verdict import ObstacleCost

__all__ = ["resurvey_answers", "resurvey_content"]

MOST_NAMED = 3
OUTCOMES = {"met": "met", "missed": "missed", "unproven": "not proven"}
SPOT = {"pass": "passes", "fail": "fails", "unproven": "is unproven"}
TONES = {"better": "met", "worse": "missed"}


def resurvey_content(changes: Resurvey) -> Content:
    """Everything that page and document say about two surveys, in the order of reading.

    Parameters
    ----------
    changes : Resurvey
        Two surveys of one spot.
    """
    from siteassess import __version__

    before, after = changes.before.verdict.outcome, changes.after.verdict.outcome
    same = "as before" if before == after else f"{VERDICTS[before].lower()} before"
    return Content(
        title="Two surveys of a spot for a GNSS reference-station antenna",
        site=plain(changes.after.site.place.name),
        outcome=after,
        verdict=f"{VERDICTS[after]}, {same}",
        answers=resurvey_answers(changes),
        facts=_facts(changes),
        cautions_heading="Cautions",
        cautions=CAUTIONS,
        sections=(
            _horizon_section(changes),
            _findings_section(changes),
            _obstacles_section(changes),
            _how_section(changes),
        ),
        maker=f"siteassess {__version__}",
    )


def resurvey_answers(changes: Resurvey) -> tuple[Answer, ...]:
    """Questions of the reader and their answers."""
    return (
        Answer(label="Result", question="What did it do to the verdict?", answer=_result(changes)),
        Answer(label="Rose", question="What rose?", answer=_stretches(changes, "rose")),
        Answer(label="Fell", question="What fell?", answer=_stretches(changes, "fell")),
        Answer(label="Findings", question="Which findings changed?", answer=_turned(changes)),
    )


def _result(changes: Resurvey) -> str:
    before, after = changes.before.verdict.outcome, changes.after.verdict.outcome
    if before == after:
        return f"Nothing: the spot {SPOT[after]} by both surveys."
    return f"By the earlier survey the spot {SPOT[before]}; by the later one it {SPOT[after]}."


def _stretches(changes: Resurvey, kind: str) -> str:
    found = [change for change in changes.outline if change.kind == kind]
    if not found:
        return "Nothing, beyond what the errors of the surveys explain."
    told = [_stretch(change) for change in found[:MOST_NAMED]]
    more = len(found) - len(told)
    return "; ".join([*told, f"and {more} more"] if more > 0 else told) + "."


def _stretch(change: OutlineChange) -> str:
    where = azimuth_range(change.azimuth_from_deg, change.azimuth_to_deg)
    name = f"“{plain(change.name)}”, " if change.name else ""
    return (
        f"{name}{where}, from {number(change.before_deg)}° to {number(change.after_deg)}° at azimuth "
        f"{number(change.at_azimuth_deg)}°"
    )


def _turned(changes: Resurvey) -> str:
    turned = [
        f"{criterion_name(one.finding.criterion, one.finding.signal)} was {OUTCOMES[one.before.outcome]} and "
        f"is {OUTCOMES[one.after.outcome]}"
        for one in changes.findings
        if one.before is not None and one.after is not None and one.before.outcome != one.after.outcome
    ]
    better, worse = (
        sum(one.direction == direction for one in changes.findings) for direction in ("better", "worse")
    )
    count = f"{worse} worse, {better} better, {len(changes.findings) - worse - better} neither."
    return f"{count} {listed(turned)}." if turned else f"{count} None turned."


def _facts(changes: Resurvey) -> tuple[tuple[str, str], ...]:
    risen = number(abs(changes.risen_m), 2)
    stands = (
        "as high as before"
        if risen == "0.00"
        else f"{risen} m {'higher' if changes.risen_m > 0 else 'lower'}"
    )
    return (
        ("Earlier survey", _survey(changes.before)),
        ("Later survey", _survey(changes.after)),
        ("Survey marks", f"{number(changes.apart_m, 2)} m apart"),
        ("Antenna", f"stands {stands}"),
    )


def _survey(assessment: Assessment) -> str:
    day = surveyed_on(assessment.site)
    name = plain(assessment.site.place.name)
    return f"{name}, {day.isoformat() if day else 'not dated'}"


def _horizon_section(changes: Resurvey) -> Section:
    rows = tuple(
        (
            change.kind,
            azimuth_range(change.azimuth_from_deg, change.azimuth_to_deg),
            plain(change.name) if change.name else NOTHING,
            f"{number(change.at_azimuth_deg)}°",
            f"{number(change.before_deg)}°",
            f"{number(change.after_deg)}°",
        )
        for change in changes.outline
    )
    table = Table(
        caption="Stretches that rose or fell, the largest difference first; elevations where it is largest.",
        header=("", "Azimuths", "What", "Largest at", "Before", "Now"),
        rows=rows,
        align="lllrrr",
        tones=tuple("missed" if change.kind == "rose" else "met" for change in changes.outline),
    )
    return Section(
        key="horizon",
        heading="The horizon, before and now",
        sentences=() if rows else ("No edge rose or fell beyond what the errors of the surveys explain.",),
        figure="resurvey",
        figure_caption=(
            "Both horizons as seen from the antenna, upper edges of everything. Dashed: the earlier survey; "
            "drawn through: the later one. Dark and hatched: what rose; light and dotted: what fell."
        ),
        tables=(table,) if rows else (),
    )


def _findings_section(changes: Resurvey) -> Section:
    required = [one for one in changes.findings if one.finding.required]
    advice = [one for one in changes.findings if not one.finding.required]
    tables = [_findings_table("Required by the later site file.", required)]
    if advice:
        tables.append(_findings_table("Advice, which never fails a site.", advice))
    return Section(key="findings", heading="Asked and found, before and now", tables=tuple(tables))


def _findings_table(caption: str, findings: list[FindingChange]) -> Table:
    return Table(
        caption=caption,
        header=("Change", "Criterion", "Before", "Now", "Asked", "Outcome before", "Outcome now"),
        rows=tuple(_finding_row(one) for one in findings),
        align="llrrrll",
        tones=tuple(TONES.get(one.direction, "") for one in findings),
    )


def _finding_row(change: FindingChange) -> tuple[str, ...]:
    before, after, finding = change.before, change.after, change.finding
    values = [
        NOTHING if one is None else told_apart(one.value, one.limit, one.unit)[0] for one in (before, after)
    ]
    if before is not None and after is not None:
        values = list(told_apart(before.value, after.value, after.unit))
    limits = [told_apart(one.limit, one.limit, one.unit)[0] for one in (before, after) if one is not None]
    return (
        change.direction,
        criterion_name(finding.criterion, finding.signal),
        *values,
        " → ".join(dict.fromkeys(limits)),
        NOTHING if before is None else OUTCOMES[before.outcome],
        NOTHING if after is None else OUTCOMES[after.outcome],
    )


def _obstacles_section(changes: Resurvey) -> Section:
    if not changes.obstacles:
        return Section(
            key="obstacles", heading="Obstacles, before and now", sentences=("No obstacle is known.",)
        )
    table = Table(
        caption=(
            "Obstacles by their names: their highest points, and the largest satellite-time that each takes "
            "from a signal."
        ),
        header=("", "Obstacle", "Top before", "Top now", "Takes before", "Takes now"),
        rows=tuple(_obstacle_row(change) for change in changes.obstacles),
        align="llrrrr",
    )
    return Section(key="obstacles", heading="Obstacles, before and now", tables=(table,))


def _obstacle_row(change: ObstacleChange) -> tuple[str, ...]:
    kind = "" if change.before and change.after else "gone" if change.before else "new"

    def top(cost: ObstacleCost | None) -> str:
        return NOTHING if cost is None else f"{number(cost.peak_elevation_deg)}°"

    def takes(cost: ObstacleCost | None) -> str:
        if cost is None:
            return NOTHING
        return percent(max(cost.lost_satellite_time_share.values(), default=0.0), 2)

    return (
        kind,
        plain(change.name),
        top(change.before),
        top(change.after),
        takes(change.before),
        takes(change.after),
    )


def _how_section(changes: Resurvey) -> Section:
    allowed = changes.tolerance
    return Section(
        key="how",
        heading="How the surveys were compared",
        points=(
            f"Survey marks may be {SAME_SPOT_M:g} m apart at most. Each survey is seen from its own antenna.",
            f"An edge counts as unchanged within {number(allowed.elevation_deg, 2)}° up or down and "
            f"{number(allowed.azimuth_deg, 2)}° left or right: two standard deviations of the stated errors "
            "of both surveys together, half a degree at least.",
            "An obstacle is known by its name. One that was named otherwise is told as gone and as new.",
            "Each survey is held against the requirements of its own site file.",
        ),
    )
