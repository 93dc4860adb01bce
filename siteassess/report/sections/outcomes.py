"""Sections on what was found: findings, signals, obstacles, sectors, satellites."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import azimuth_range, decibels, number, percent, plain, told_apart
from siteassess.report.pieces import Section, Table
from siteassess.report.sections.answers import ranked_obstacles
from siteassess.report.sections.how_sure import on_finding, spreads
from siteassess.report.sections.obstacle_tables import leaves_table, thin_table
from siteassess.verdict.criteria import read_criteria

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.verdict.uncertainty.how_sure import FindingSpread
    from siteassess.verdict.verdict import Finding, Verdict

__all__ = [
    "findings_section",
    "obstacles_section",
    "satellites_section",
    "sectors_section",
    "signals_section",
]

OUTCOMES = {"met": "met", "missed": "missed", "unproven": "not proven"}


def findings_section(assessment: Assessment) -> Section:
    """Criteria held against the site: first what is required, then what is advice."""
    verdict, spread = assessment.verdict, spreads(assessment.uncertainty)
    required = [finding for finding in verdict.findings if finding.required]
    advice = [finding for finding in verdict.findings if not finding.required]
    tables = [_findings_table("Required by the site file; the worst first.", required, spread)]
    if advice:
        tables.append(_findings_table("Advice, which never fails a site.", advice, spread))
    return Section(key="findings", heading="Asked and found", tables=tuple(tables))


def _findings_table(
    caption: str, findings: list[Finding], spread: dict[tuple[str, str | None], FindingSpread]
) -> Table:
    return Table(
        caption=caption,
        header=("Outcome", "Criterion", "Found", "Asked", "Asked by", "Reason"),
        rows=tuple(
            _finding_row(finding, spread.get((finding.criterion, finding.signal))) for finding in findings
        ),
        align="llrrll",
        tones=tuple(finding.outcome for finding in findings),
    )


def _finding_row(finding: Finding, spread: FindingSpread | None) -> tuple[str, ...]:
    criterion = read_criteria()[finding.criterion]
    value, limit = told_apart(finding.value, finding.limit, finding.unit)
    title = f"{finding.signal}: {criterion.title}" if finding.signal else criterion.title
    return (
        OUTCOMES[finding.outcome],
        title,
        value,
        f"{criterion.sense} {limit}",
        finding.source,
        f"{plain(finding.reason)} {on_finding(spread)}".strip(),
    )


def signals_section(assessment: Assessment) -> Section:
    """How each signal fares."""
    rows = tuple(
        (
            shares.signal,
            percent(shares.usable_share),
            percent(shares.open_sky_usable_share),
            percent(shares.usable_share_of_open_sky),
            percent(shares.lost_share),
            percent(shares.hidden_share),
            percent(shares.weakened_share),
            decibels(budget.min_cn0_dbhz),
            decibels(shares.cn0_p05_dbhz),
            decibels(shares.cn0_median_dbhz),
            decibels(shares.cn0_p95_dbhz),
        )
        for shares, budget in zip(assessment.verdict.signals, assessment.budget.signals, strict=True)
    )
    table = Table(
        caption=(
            "Shares of the open-sky satellite-time above the mask. “Open sky” is what antenna and chain "
            "alone would leave usable, “of open sky” the usable part of that; “lost” is what obstacles and "
            "leaves take from it. C/N0 in dB-Hz, of what is not hidden: 5 % of the time lies below the "
            "first figure, half below the second, 95 % below the third."
        ),
        header=(
            "Signal",
            "Usable",
            "Open sky",
            "Of open sky",
            "Lost",
            "Hidden",
            "Weakened",
            "C/N0 asked",
            "C/N0 5 %",
            "C/N0 half",
            "C/N0 95 %",
        ),
        rows=rows,
        align="lrrrrrrrrrr",
    )
    return Section(key="signals", heading="Signal by signal", tables=(table,))


def obstacles_section(assessment: Assessment) -> Section:
    """What each obstacle costs, the dearest first; what leaves and thin things do."""
    verdict = assessment.verdict
    if not verdict.obstacles:
        return Section(key="obstacles", heading="Obstacles", sentences=("No obstacle is known.",))
    rows = []
    ranked = [(rank, obstacle) for rank, (_, obstacle) in enumerate(ranked_obstacles(verdict), start=1)]
    for rank, obstacle in ranked:
        lost = obstacle.lost_satellite_time_share
        dearest = max(lost, key=lambda signal: lost[signal], default=None)
        rows.append(
            (
                str(rank),
                plain(obstacle.name),
                "leaves" if obstacle.cover == "foliage" else "solid",
                azimuth_range(obstacle.azimuth_from_deg, obstacle.azimuth_to_deg),
                f"{number(obstacle.peak_elevation_deg)}° at {number(obstacle.peak_azimuth_deg)}°",
                percent(obstacle.blocked_share_above_mask, 2),
                percent(obstacle.blocked_satellite_time_share, 2),
                f"{percent(lost[dearest], 2)} ({dearest})" if dearest and lost[dearest] > 0 else "none",
            )
        )
    table = Table(
        caption=(
            "The dearest first. Sky: the part of the sky above the mask where the obstacle is the highest; "
            "for leaves, the part they stand before. Satellite-time hidden: all satellites together. Lost: "
            "satellite-time usable without obstacles that this one takes, for the signal that loses most."
        ),
        header=("No.", "Obstacle", "Kind", "Azimuths", "Highest", "Sky", "Satellite-time hidden", "Lost"),
        rows=tuple(rows),
        align="rlllrrrr",
    )
    details = (leaves_table(assessment, ranked), thin_table(ranked))
    return Section(
        key="obstacles",
        heading="Obstacles and what each costs",
        tables=(table, *(detail for detail in details if detail is not None)),
    )


def sectors_section(verdict: Verdict) -> Section:
    """Losses by compass point."""
    table = Table(
        caption=(
            "Sectors of 45°, all signals pooled. Hidden sky: of the sector's own sky above the mask. "
            "Satellite-time: the sector's part of all satellite-time above the mask, and how much of all "
            "that time obstacles take there."
        ),
        header=("Sector", "Azimuths", "Hidden sky", "Satellite-time", "Lost there"),
        rows=tuple(
            (
                sector.name,
                azimuth_range(sector.azimuth_from_deg, sector.azimuth_to_deg),
                percent(sector.blocked_share),
                percent(sector.satellite_time_share),
                percent(sector.lost_satellite_time_share),
            )
            for sector in verdict.sectors
        ),
        align="llrrr",
    )
    return Section(key="sectors", heading="Direction by direction", tables=(table,))


def satellites_section(verdict: Verdict) -> Section:
    """Every satellite, for the appendix."""
    table = Table(
        caption=(
            "Nominal slots, signal by signal: hours above the mask a day, usable share of that time, power "
            "of the whole signal at a 0 dBic antenna, and C/N0 where it is not hidden. The same table is "
            "in satellites.csv."
        ),
        header=(
            "Satellite",
            "Orbit",
            "Signal",
            "Hours a day",
            "Usable",
            "Power, dBW",
            "C/N0 least",
            "C/N0 median",
            "C/N0 most",
        ),
        rows=tuple(
            (
                plain(satellite.satellite),
                satellite.orbit_class,
                satellite.signal,
                number(satellite.hours_above_mask_per_day),
                percent(satellite.usable_share),
                _span(satellite.received_power_min_dbw, satellite.received_power_max_dbw),
                decibels(satellite.cn0_min_dbhz),
                decibels(satellite.cn0_median_dbhz),
                decibels(satellite.cn0_max_dbhz),
            )
            for satellite in verdict.satellites
        ),
        align="lllrrrrrr",
    )
    return Section(key="satellites", heading="Appendix: satellite by satellite", tables=(table,))


def _span(least: float | None, most: float | None) -> str:
    if least is None or most is None:
        return decibels(None)
    low, high = decibels(least), decibels(most)
    return low if low == high else f"{low} to {high}"
