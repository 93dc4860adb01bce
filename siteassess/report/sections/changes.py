"""Section on what another cable, preamplifier or antenna would change."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import number, percent, plain
from siteassess.report.pieces import Section, Table
from siteassess.verdict.cures.what_if import WHAT_IF_ELEVATIONS_DEG, Change

if TYPE_CHECKING:
    from siteassess.assessment import Assessment

__all__ = ["changes_section"]


def changes_section(assessment: Assessment) -> Section | None:
    """Changes for the first signal and for the one usable least; None where that was not asked for."""
    if not assessment.what_if:
        return None
    by_signal: dict[str, list[Change]] = {}
    for change in assessment.what_if:
        by_signal.setdefault(change.signal, []).append(change)
    shown = dict.fromkeys(
        [next(iter(by_signal)), min(by_signal, key=lambda name: by_signal[name][0].usable_share_now)]
    )
    return Section(
        key="what-if",
        heading="What if: another cable, preamplifier or antenna",
        sentences=(
            "One change at a time, all else as it is. Another antenna keeps place, heading, tilt and the "
            "chain behind it; the built-in antennas are generic. All signals are in assessment.json.",
        ),
        tables=tuple(_table(name, by_signal[name]) for name in shown),
    )


def _table(signal: str, changes: list[Change]) -> Table:
    return Table(
        caption=(
            f"{plain(signal)}: gain of C/N0 by elevation, averaged over azimuth, and the usable share; it is "
            f"{percent(changes[0].usable_share_now)} now."
        ),
        header=(
            "Change",
            *(f"C/N0 at {elevation_deg:g}°, dB" for elevation_deg in WHAT_IF_ELEVATIONS_DEG),
            "Usable share",
            "Change, points",
        ),
        rows=tuple(
            (
                plain(change.change),
                *(_signed(gain_db) for gain_db in change.cn0_gain_db),
                percent(change.usable_share),
                _signed(100.0 * (change.usable_share - change.usable_share_now), 1),
            )
            for change in changes
        ),
        align="lrrrrr",
    )


def _signed(value: float, decimals: int = 2) -> str:
    text = number(value, decimals)
    return f"+{text}" if round(value, decimals) > 0.0 else text
