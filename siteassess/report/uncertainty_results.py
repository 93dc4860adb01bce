"""How sure the verdict is as plain dictionaries and rounded numbers."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from siteassess.report.plain_json import rounded
from siteassess.verdict.criteria import read_criteria

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.verdict.uncertainty.how_sure import FindingSpread

__all__ = ["uncertainty_record"]


def uncertainty_record(assessment: Assessment) -> dict[str, Any] | None:
    """Probabilities, spreads and where they come from; None where that was not asked for."""
    sure = assessment.uncertainty
    if sure is None:
        return None
    closest = sure.closest
    return {
        "draws": sure.draws,
        "seed": sure.seed,
        "probability_share": rounded(sure.probability, "share"),
        "narrow": sure.narrow,
        "findings": [_spread(one) for one in sure.findings],
        "closest": None if closest is None else {"criterion": closest.criterion, "signal": closest.signal},
        "sources": [
            {
                "error": one.kind,
                "file": one.file,
                "standard_deviation": rounded(one.standard_deviation, one.unit.lower()),
                "unit": one.unit,
                "spread": None if closest is None else rounded(one.spread, _unit(closest)),
                "variance_share": rounded(one.variance_share, "share"),
            }
            for one in sure.sources
        ],
        "unstated": list(sure.unstated),
    }


def _spread(spread: FindingSpread) -> dict[str, Any]:
    unit = _unit(spread)
    return {
        "criterion": spread.criterion,
        "signal": spread.signal,
        "probability_share": rounded(spread.probability, "share"),
        "p05": rounded(spread.p05, unit),
        "p50": rounded(spread.p50, unit),
        "p95": rounded(spread.p95, unit),
        "narrow": spread.narrow,
    }


def _unit(spread: FindingSpread) -> str:
    return read_criteria()[spread.criterion].unit
