"""The first page: does it pass, why, which direction is worst, and what costs the most."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import azimuth_range, compass_point, number, percent, plain, told_apart
from siteassess.report.pieces import Answer
from siteassess.report.sections.how_sure import how_sure
from siteassess.verdict.causes import cost_rank
from siteassess.verdict.criteria import read_criteria

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.verdict.verdict import Finding, ObstacleCost, SectorShare, Verdict

__all__ = ["VERDICTS", "answers", "ranked_obstacles", "worst_direction", "worst_obstacle"]

VERDICTS = {"pass": "Pass", "fail": "Fail", "unproven": "Unproven"}
SECTOR_WORDS = {
    "N": "north",
    "NE": "north-east",
    "E": "east",
    "SE": "south-east",
    "S": "south",
    "SW": "south-west",
    "W": "west",
    "NW": "north-west",
}


def answers(assessment: Assessment) -> tuple[Answer, ...]:
    """Questions of the reader and their answers, the verdict first."""
    verdict, sure = assessment.verdict, how_sure(assessment)
    return (
        Answer(label="Result", question="Does the spot pass?", answer=_passes(assessment)),
        Answer(
            label="Reason",
            question="Why?" if verdict.outcome == "pass" else "Why not?",
            answer=_why(verdict),
        ),
        *([Answer(label="How sure", question="How sure is that?", answer=sure)] if sure else []),
        Answer(
            label="Worst direction",
            question="Which direction is worst?",
            answer=worst_direction(verdict),
        ),
        Answer(
            label="Worst obstacle",
            question="Which obstacle costs the most?",
            answer=worst_obstacle(verdict),
        ),
        Answer(label="Hidden", question="How much sky is hidden?", answer=_hidden(assessment)),
    )


def _required(verdict: Verdict) -> list[Finding]:
    return [finding for finding in verdict.findings if finding.required]


def _passes(assessment: Assessment) -> str:
    verdict, sure = assessment.verdict, assessment.uncertainty
    narrowly = ", narrowly" if sure is not None and sure.narrow else ""
    required = _required(verdict)
    asked = f"{len(required)} requirement{'s' if len(required) != 1 else ''}"
    missed = sum(finding.outcome == "missed" for finding in required)
    if verdict.outcome == "pass":
        return f"Yes{narrowly}. It meets {'the one requirement' if len(required) == 1 else f'all {asked}'}."
    if verdict.outcome == "fail":
        return f"No{narrowly}. It misses {missed} of {asked}."
    if verdict.sky.unsurveyed_share == 0:
        return "Not proven. No requirement is missed, but the survey does not answer all of them."
    return (
        "Not proven. No requirement is missed, but "
        f"{percent(verdict.sky.unsurveyed_share)} of the sky above the mask was not surveyed."
    )


def _why(verdict: Verdict) -> str:
    """The reasons of the worst findings: all that are missed, at most four, or else the closest one."""
    missed = [finding for finding in _required(verdict) if finding.outcome == "missed"]
    told = (missed or _required(verdict)[:1])[:4]
    more = len(missed) - len(told)
    reasons = [_reason(finding) for finding in told]
    if more > 0:
        reasons.append(f"{more} more under “Asked and found”.")
    return " ".join(reasons)


def _reason(finding: Finding) -> str:
    """What a finding is about, and why; the reasons of signals hold their figures already."""
    if finding.signal is not None:
        return f"{finding.signal}: {plain(finding.reason)}"
    criterion = read_criteria()[finding.criterion]
    value, limit = told_apart(finding.value, finding.limit, finding.unit)
    return f"{criterion.title}: {value}; {criterion.sense} {limit} is asked. {plain(finding.reason)}"


def _worst_sector(verdict: Verdict) -> SectorShare | None:
    """The sector that loses the most satellite-time; where none loses any, the one with most hidden sky."""
    worst = max(
        verdict.sectors,
        key=lambda sector: (sector.lost_satellite_time_share, sector.blocked_share),
        default=None,
    )
    if worst is None or (worst.lost_satellite_time_share <= 0 and worst.blocked_share <= 0):
        return None
    return worst


def worst_direction(verdict: Verdict) -> str:
    """The sector that costs the most, in a sentence."""
    sector = _worst_sector(verdict)
    if sector is None:
        return "None; nothing that was surveyed stands above the mask."
    name = SECTOR_WORDS[sector.name].capitalize()
    text = (
        f"{name}: {percent(sector.blocked_share)} of its own sky above the mask is hidden, and "
        f"obstacles there take {percent(sector.lost_satellite_time_share)} of all satellite-time."
    )
    if verdict.sky.peak_elevation_deg > 0:
        text += (
            f" The skyline is highest, {number(verdict.sky.peak_elevation_deg)}°, at azimuth "
            f"{number(verdict.sky.peak_azimuth_deg)}° ({compass_point(verdict.sky.peak_azimuth_deg)})."
        )
    return text


def ranked_obstacles(verdict: Verdict) -> list[tuple[int, ObstacleCost]]:
    """Obstacles with their index in the skyline, the dearest first: numbered so in the report."""
    return sorted(enumerate(verdict.obstacles), key=lambda entry: cost_rank(entry[1]), reverse=True)


def worst_obstacle(verdict: Verdict) -> str:
    """The obstacle that takes the most satellite-time from one signal, in a sentence."""
    ranked = ranked_obstacles(verdict)
    if not ranked or cost_rank(ranked[0][1]) <= (0.0, 0.0, 0.0):
        return "None; no obstacle takes anything above the mask."
    obstacle = ranked[0][1]
    signal, lost_share = max(
        obstacle.lost_satellite_time_share.items(), key=lambda entry: entry[1], default=("", 0.0)
    )
    where = azimuth_range(obstacle.azimuth_from_deg, obstacle.azimuth_to_deg)
    text = f"“{plain(obstacle.name)}” ({where}, up to {number(obstacle.peak_elevation_deg)}°)"
    if lost_share <= 0:
        return f"{text}: it takes {percent(obstacle.blocked_share_above_mask)} of the sky above the mask."
    return f"{text}: it takes {percent(lost_share)} of the satellite-time of {signal}."


def _hidden(assessment: Assessment) -> str:
    sky, verdict = assessment.verdict.sky, assessment.verdict
    text = (
        f"{percent(sky.blocked_share_above_mask)} of the sky above the "
        f"{assessment.site.require.elevation_mask_deg:g}° mask, {percent(sky.blocked_share_of_hemisphere)} "
        f"of the hemisphere, and {percent(verdict.blocked_satellite_time_share)} of the satellite-time "
        "above the mask."
    )
    if sky.foliage_share_above_mask > 0:
        text += (
            f" Leaves stand before another {percent(sky.foliage_share_above_mask)} of the sky above the mask."
        )
    if sky.unsurveyed_share > 0:
        text += f" Nobody looked at {percent(sky.unsurveyed_share)} of it."
    return text
