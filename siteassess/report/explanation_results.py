"""Causes and cures as plain dictionaries and rounded numbers."""

from __future__ import annotations

from collections.abc import Mapping
from typing import TYPE_CHECKING, Any

from siteassess.report.plain_json import rounded
from siteassess.verdict.criteria import read_criteria

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.verdict.cures.heights import Heights

__all__ = ["causes_record", "cures_record"]


def causes_record(assessment: Assessment) -> list[dict[str, Any]] | None:
    """Obstacles, the one that returns most first; None where that was not asked for."""
    found = assessment.explanation
    if found is None:
        return None
    return [
        {
            "rank": place + 1,
            "name": assessment.verdict.obstacles[index].name,
            "returned_satellite_time_share": _shares(
                assessment.verdict.obstacles[index].returned_satellite_time_share or {}
            ),
            "returned_with_those_above_share": _shares(
                {signal: returned[place] for signal, returned in found.returned_in_order.items()}
            ),
        }
        for place, index in enumerate(found.order)
    ]


def cures_record(assessment: Assessment) -> dict[str, Any] | None:
    """Cuts of trees, heights of the mast and what could be asked; None where that was not asked for."""
    found = assessment.explanation
    if found is None:
        return None
    return {
        "held_by_several_share": _shares(found.held_by_several_share),
        "tree_cuts": [
            {
                "name": cut.obstacle,
                "cut_to_deg": rounded(cut.cut_to_deg, "deg"),
                "returned_satellite_time_share": _shares(cut.returned_satellite_time_share),
            }
            for cut in found.tree_cuts
        ],
        "mast": None if found.heights is None else _heights(found.heights),
        "askable": [
            {
                "signal": one.signal,
                "min_cn0_dbhz": rounded(one.min_cn0_dbhz, "db"),
                "highest_min_cn0_dbhz": rounded(one.highest_min_cn0_dbhz, "db"),
                "lowest_mask_deg": rounded(one.lowest_mask_deg, "deg"),
            }
            for one in found.askable
        ],
        "lowest_mask_for_all_deg": rounded(found.lowest_mask_for_all_deg, "deg"),
    }


def _heights(heights: Heights) -> dict[str, Any]:
    criteria = read_criteria()
    return {
        "present_m": rounded(heights.present_m, "m"),
        "highest_m": rounded(heights.highest_m, "m"),
        "lowest_passing_m": rounded(heights.lowest_passing_m, "m"),
        "missed_at_highest": [
            {
                "criterion": one.criterion,
                "signal": one.signal,
                "value": rounded(one.value, one.unit),
                "limit": rounded(one.limit, one.unit),
            }
            for one in heights.missed_at_highest
        ],
        "keep_angles": list(heights.keep_angles),
        "steps": [
            {
                "mast_height_m": rounded(step.mast_height_m, "m"),
                "usable_share": _shares(step.usable_share),
                "values": {key: rounded(value, criteria[key].unit) for key, value in step.values.items()},
                "misses": step.misses,
            }
            for step in heights.steps
        ],
    }


def _shares(by_signal: Mapping[str, float]) -> dict[str, float | None]:
    return {signal: rounded(share, "share") for signal, share in by_signal.items()}
