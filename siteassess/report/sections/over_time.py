"""Section on satellites at once: how many, for how long too few, and how well they stand."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import NOTHING, number, percent
from siteassess.report.pieces import Section, Table
from siteassess.report.time_results import DILUTION_SHARES, DILUTIONS
from siteassess.sky_tracks.dilution import not_exceeded

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.verdict.time.timeline import Timeline

__all__ = ["over_time_section"]


def over_time_section(assessment: Assessment) -> Section:
    """Satellites at once over the window of the joint counts."""
    timeline = assessment.verdict.timeline
    hours = number(timeline.window_s / 3600.0, 0)
    tables = (
        _counts_table(assessment, hours),
        _shortfalls_table(timeline),
        _missing_table(timeline),
        _sectors_table(timeline),
        _dilution_table(timeline),
    )
    return Section(
        key="counts",
        heading="Satellites at once, over time",
        sentences=(
            f"Counted over {hours} hours of nominal orbits in steps of {timeline.step_s:g} s. They say how "
            "often and how long, never at what time of day.",
        ),
        figure="over-time",
        figure_caption=(
            "Above, left: share of the time with at least so many usable satellites, of all systems and of "
            "each; above, right: share of the time with a PDOP of at most so much. Pale: all systems in view "
            "above the mask; dark: usable. Below: satellites of all systems against the hours that have gone "
            "by, the fewest in each stretch of the drawing; marks below the zero line say where they are "
            "fewer than asked, or the PDOP is beyond its limit."
        ),
        tables=tuple(table for table in tables if table is not None),
    )


def _counts_table(assessment: Assessment, hours: str) -> Table:
    counts = assessment.verdict.counts
    return Table(
        caption=(
            f"Over {hours} hours. In view: above the mask, and sending at least one of the site's signals; "
            "usable: with at least one of them usable. “95 % of the time”: at least so many are."
        ),
        header=("System", "In view, mean", "Usable, mean", "95 % of the time", "Fewest"),
        rows=tuple(
            (
                count.system,
                number(count.above_mask_mean),
                number(count.usable_mean),
                str(count.usable_p05),
                str(count.usable_min),
            )
            for count in counts
        ),
        align="lrrrr",
        tones=tuple("total" if count.system == counts[-1].system else "" for count in counts),
    )


def _shortfalls_table(timeline: Timeline) -> Table:
    return Table(
        caption="How often and for how long the sky falls short.",
        header=("Falls short of", "System", "Share of time", "Times", "Longest, minutes"),
        rows=tuple(
            (
                f"{short.limit:g} satellites"
                if short.what == "satellites"
                else f"a PDOP of at most {short.limit:g}",
                short.system,
                percent(short.share, 2),
                str(short.times),
                number(short.longest_s / 60.0, 0) if short.times else NOTHING,
            )
            for short in timeline.shortfalls
        ),
        align="llrrr",
    )


def _missing_table(timeline: Timeline) -> Table | None:
    """Who and which directions are missing while it falls short."""
    short = [one for one in timeline.shortfalls if one.times]
    if not short:
        return None
    systems = timeline.systems[:-1]
    sectors = tuple(sector.name for sector in timeline.sectors)
    return Table(
        caption=(
            "What is missing then: satellites above the mask that are not usable, on average, by system and "
            "by sector of 45°."
        ),
        header=("Falls short of", *systems, *sectors),
        rows=tuple(
            (
                f"{one.what}, {one.system}",
                *(number(one.missing_by_system[system]) for system in systems),
                *(number(one.missing_by_sector[sector]) for sector in sectors),
            )
            for one in short
        ),
        align="l" + "r" * (len(systems) + len(sectors)),
    )


def _sectors_table(timeline: Timeline) -> Table:
    sectors = timeline.sectors
    return Table(
        caption="Mean number of satellites by sector of 45°, centred on the compass points.",
        header=("", *(sector.name for sector in sectors)),
        rows=(
            ("In view", *(number(sector.in_view_mean) for sector in sectors)),
            ("Usable", *(number(sector.usable_mean) for sector in sectors)),
        ),
        align="l" + "r" * len(sectors),
    )


def _dilution_table(timeline: Timeline) -> Table:
    """Figures that hold for half, 90 % and 95 % of the time."""
    both = timeline.dilution_in_view, timeline.dilution
    shares = tuple(DILUTION_SHARES.values())
    return Table(
        caption=(
            "Dilution of precision with one clock a system: not exceeded for half, 90 % and 95 % of the "
            "time. A dash means undetermined for longer than the rest."
        ),
        header=(
            "",
            *(f"In view, {percent(share, 0)}" for share in shares),
            *(f"Usable, {percent(share, 0)}" for share in shares),
        ),
        rows=tuple(
            (
                name.upper(),
                *(_figure(value) for one in both for value in not_exceeded(getattr(one, field), shares)),
            )
            for name, field in DILUTIONS.items()
        ),
        align="lrrrrrr",
    )


def _figure(value: float) -> str:
    return number(value, 2) if value < float("inf") else NOTHING
