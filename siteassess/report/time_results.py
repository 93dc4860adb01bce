"""The window of the joint counts for programs."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from siteassess.report.plain_json import rounded
from siteassess.sky_tracks.dilution import not_exceeded
from siteassess.verdict.time.counts import at_least_share, number_reached

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from siteassess.sky_tracks.dilution import Dilution
    from siteassess.verdict.time.timeline import Shortfall, Timeline

__all__ = ["DILUTIONS", "DILUTION_SHARES", "time_record"]

DILUTIONS = {
    "hdop": "horizontal",
    "vdop": "vertical",
    "pdop": "position",
    "tdop": "time",
    "gdop": "geometric",
}
DILUTION_SHARES = {"median": 0.5, "p90": 0.9, "p95": 0.95}


def time_record(timeline: Timeline) -> dict[str, Any]:
    """Counts, dilution of precision and shortfalls as plain dictionaries, lists and rounded numbers."""
    return {
        "window_hours": rounded(timeline.window_s / 3600.0, "count"),
        "step_s": rounded(timeline.step_s, "s"),
        "at_once": [
            {"system": system, "in_view": _counts(in_view), "usable": _counts(usable)}
            for system, in_view, usable in zip(
                timeline.systems, timeline.in_view, timeline.usable, strict=True
            )
        ],
        "dilution": {
            "in_view": _dilution(timeline.dilution_in_view),
            "usable": _dilution(timeline.dilution),
        },
        "sectors": [
            {
                "sector": sector.name,
                "in_view_mean": rounded(sector.in_view_mean, "count"),
                "usable_mean": rounded(sector.usable_mean, "count"),
            }
            for sector in timeline.sectors
        ],
        "shortfalls": [_shortfall(shortfall) for shortfall in timeline.shortfalls],
    }


def _counts(count: NDArray[Any]) -> dict[str, Any]:
    """`at_least_share` holds the share of time with at least 0, 1, 2, ... satellites."""
    return {
        "min": int(count.min()),
        "p05": number_reached(count, 0.95),
        "median": number_reached(count, 0.5),
        "mean": rounded(float(count.mean()), "count"),
        "max": int(count.max()),
        "at_least_share": [rounded(share, "share") for share in at_least_share(count).tolist()],
    }


def _dilution(dilution: Dilution) -> dict[str, Any]:
    """Figures that are not exceeded for a share of the time; None where they are undetermined then."""
    return {
        name: {
            label: rounded(value, "count")
            for label, value in zip(
                DILUTION_SHARES,
                not_exceeded(getattr(dilution, field), tuple(DILUTION_SHARES.values())),
                strict=True,
            )
        }
        for name, field in DILUTIONS.items()
    }


def _shortfall(shortfall: Shortfall) -> dict[str, Any]:
    return {
        "what": shortfall.what,
        "system": shortfall.system,
        "limit": rounded(shortfall.limit, "count"),
        "share": rounded(shortfall.share, "share"),
        "times": shortfall.times,
        "longest_s": rounded(shortfall.longest_s, "s"),
        "missing_by_system": _means(shortfall.missing_by_system),
        "missing_by_sector": _means(shortfall.missing_by_sector),
    }


def _means(by_name: Any) -> dict[str, float | None]:
    return {name: rounded(number, "count") for name, number in by_name.items()}
