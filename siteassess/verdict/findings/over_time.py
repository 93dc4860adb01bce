"""Findings on satellites at once: how many, how long too few, and how well they stand."""

from siteassess.horizon.shares import SkyShares
from siteassess.site_file.model import Requirements
from siteassess.verdict.causes import SECTOR_NAMES
from siteassess.verdict.criteria import limit_or_advice, read_criteria
from siteassess.verdict.findings.site_findings import sky_finding, told_apart
from siteassess.verdict.time.counts import ALL_SYSTEMS, number_reached
from siteassess.verdict.time.timeline import Shortfall, Timeline
from siteassess.verdict.verdict import Finding
from siteassess.wording import listed

__all__ = ["time_findings"]

SECTORS = ("north", "north-east", "east", "south-east", "south", "south-west", "west", "north-west")
WORTH_NAMING = 0.05  # satellites; numbers are printed with one decimal


def time_findings(require: Requirements, timeline: Timeline, sky: SkyShares) -> tuple[Finding, ...]:
    """All findings on satellites at once, in the order of the criteria table.

    Parameters
    ----------
    require : Requirements
        Limits of the site file; those that are None turn into advice.
    timeline : Timeline
        The window of the joint counts.
    sky : SkyShares
        Whether all of it was looked at.
    """
    return (
        _number(require, timeline, sky),
        *_number_by_system(require, timeline, sky),
        _gap(require, timeline, sky),
        _pdop(require, timeline, sky),
    )


def _number(require: Requirements, timeline: Timeline, sky: SkyShares) -> Finding:
    share = limit_or_advice(require, "min_satellites_share")
    count = timeline.usable[-1]
    reason = f"For {share:.1%} of the time so many are usable; the fewest at once are {count.min()}."
    short = _satellites_short(timeline.shortfall("satellites", ALL_SYSTEMS), "")
    value = float(number_reached(count, share))
    return sky_finding("min_satellites", require, value, sky, f"{reason}{short}")


def _number_by_system(require: Requirements, timeline: Timeline, sky: SkyShares) -> tuple[Finding, ...]:
    """One finding for all systems that the site file names: that of the one farthest below its number."""
    asked = require.min_satellites_by_system
    if not asked:
        return ()
    share, criterion = (
        limit_or_advice(require, "min_satellites_share"),
        read_criteria()["min_satellites_by_system"],
    )
    reached = {
        system: number_reached(timeline.usable[timeline.systems.index(system)], share) for system in asked
    }
    worst = max(asked, key=lambda system: criterion.shortfall(reached[system], asked[system]))
    each = listed(f"{number} of {system}" for system, number in reached.items())
    reason = f"{worst} is the system farthest from its number: for {share:.1%} of the time {each} are usable."
    short = _satellites_short(timeline.shortfall("satellites", worst), f" of {worst}")
    return (
        sky_finding(
            criterion.key, require, float(reached[worst]), sky, f"{reason}{short}", limit=float(asked[worst])
        ),
    )


def _gap(require: Requirements, timeline: Timeline, sky: SkyShares) -> Finding:
    short = timeline.shortfall("satellites", ALL_SYSTEMS)
    reason = f"Counted are fewer than {short.limit:g} satellites of all systems."
    return sky_finding(
        "max_gap_s", require, short.longest_s, sky, f"{reason}{_satellites_short(short, '', 'Never fewer.')}"
    )


def _pdop(require: Requirements, timeline: Timeline, sky: SkyShares) -> Finding:
    short = timeline.shortfall("PDOP", ALL_SYSTEMS)
    share = 1.0 - short.share
    within, asked = told_apart(share, limit_or_advice(require, "min_pdop_share"))
    reason = (
        f"PDOP, with one clock a system, is at most {short.limit:g} for {within} of the time above the mask "
        f"of {require.elevation_mask_deg:g} degrees; {asked} is asked."
    )
    if short.times:
        reason += f" It is not {_stretches(short)}.{_missing(short)}"
    return sky_finding("min_pdop_share", require, share, sky, reason, asked_with="max_pdop")


def _satellites_short(short: Shortfall, of_system: str, otherwise: str = "") -> str:
    """When there are too few, and who is missing then."""
    if not short.times:
        return f" {otherwise}".rstrip()
    return f" Fewer than {short.limit:g}{of_system} are usable {_stretches(short)}.{_missing(short)}"


def _stretches(short: Shortfall) -> str:
    times = "once" if short.times == 1 else f"{short.times} times"
    return f"for {short.share:.1%} of the time, {times}, at the longest {_duration(short.longest_s)}"


def _duration(seconds: float) -> str:
    return f"{seconds / 60:.0f} minutes" if seconds < 7200 else f"{seconds / 3600:.1f} hours"


def _missing(short: Shortfall) -> str:
    """Who stands above the mask then, and where, and is not usable."""
    systems = [
        f"{number:.1f} of {system}"
        for system, number in sorted(short.missing_by_system.items(), key=lambda one: -one[1])
        if number >= WORTH_NAMING
    ]
    if not systems:
        return " No satellite above the mask is missing then: the constellations alone fall short."
    sector, number = max(short.missing_by_sector.items(), key=lambda one: one[1])
    where = SECTORS[SECTOR_NAMES.index(sector)]
    return f" Not usable then are, on average, {listed(systems)}; most in the {where} ({number:.1f})."
