"""Section on what comes back when obstacles go or trees are cut."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import percent, plain
from siteassess.report.pieces import Section, Table

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.verdict.cures.explanation import Explanation

__all__ = ["causes_section"]

MOST_SIGNALS = 6
MOST_ROWS = 20


def causes_section(assessment: Assessment) -> Section | None:
    """What each obstacle returns by going; None where nothing was asked for or nothing is lost."""
    found = assessment.explanation
    if found is None or not any(
        returned and returned[-1] > 0.0 for returned in found.returned_in_order.values()
    ):
        return None
    signals = _shown_signals(found)
    tables = [_returns_table(assessment, found, signals)]
    if found.tree_cuts:
        tables.append(_cuts_table(found, signals))
    sentences = [
        "An obstacle returns less than it takes where another one stands behind it. What the first obstacles "
        "return together, all others standing, is in the last column.",
    ]
    if len(signals) < len(found.returned_in_order):
        sentences.append("Signals that lose the most; all others are in assessment.json.")
    return Section(
        key="causes",
        heading="What comes back if an obstacle goes",
        sentences=tuple(sentences),
        tables=tuple(tables),
    )


def _shown_signals(found: Explanation) -> list[str]:
    """The signals that lose most, in the order of the site file."""
    lost = {signal: returned[-1] if returned else 0.0 for signal, returned in found.returned_in_order.items()}
    most = sorted(lost, key=lambda signal: -lost[signal])[:MOST_SIGNALS]
    return [signal for signal in lost if signal in most]


def _returns_table(assessment: Assessment, found: Explanation, signals: list[str]) -> Table:
    in_order = found.returned_in_order
    worst = max(in_order, key=lambda signal: in_order[signal][-1])
    rows = []
    for place, index in enumerate(found.order[:MOST_ROWS]):
        cost = assessment.verdict.obstacles[index]
        returned = cost.returned_satellite_time_share or {}
        alone = [percent(returned[signal], 2) for signal in signals]
        rows.append((str(place + 1), plain(cost.name), *alone, percent(in_order[worst][place], 2)))
    several = [percent(found.held_by_several_share[signal], 2) for signal in signals]
    rows.append(("", "only if several go", *several, ""))
    everything = [percent(in_order[signal][-1], 2) for signal in signals]
    rows.append(("", "all of them: the open sky", *everything, percent(in_order[worst][-1], 2)))
    return Table(
        caption=(
            "Satellite-time above the mask that becomes usable when one obstacle alone goes, by signal; the "
            f"largest first. Last column: {plain(worst)}, this obstacle and all above it gone. The noise "
            "that obstacles radiate is kept."
        ),
        header=("No.", "Obstacle", *map(plain, signals), "With those above"),
        rows=tuple(rows),
        align="rl" + "r" * (len(signals) + 1),
        tones=("",) * (len(rows) - 1) + ("total",),
    )


def _cuts_table(found: Explanation, signals: list[str]) -> Table:
    return Table(
        caption=(
            "Trees cut so that nothing of them stands above an elevation, all else as it is: satellite-time "
            "that becomes usable. The lowest cut is the mask."
        ),
        header=("Leaves", "Cut to", *map(plain, signals)),
        rows=tuple(
            (
                plain(cut.obstacle),
                f"{cut.cut_to_deg:g}°",
                *(percent(cut.returned_satellite_time_share[signal], 2) for signal in signals),
            )
            for cut in found.tree_cuts
        ),
        align="lr" + "r" * len(signals),
    )
