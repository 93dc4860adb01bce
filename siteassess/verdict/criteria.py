"""The criteria: what can be asked of a site, who asks for it, and which way the limit points."""

from dataclasses import dataclass
from functools import cache
from typing import Literal

from siteassess.tables import packaged_rows

__all__ = ["Criterion", "read_criteria"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Criterion:
    """One row of the criteria table.

    Attributes
    ----------
    key : str
        Its key in the table `[require]`.
    title : str
        What it is about, for the report.
    unit : str
        "share", "deg", "m", "dB", "dB/m" or "V".
    sense : str
        "at least" or "at most".
    advice_limit : float or None
        Limit used as advice when the site file sets none; None where the site file always sets one.
    source : str
        Who gives that advice.
    """

    key: str
    title: str
    unit: str
    sense: Literal["at least", "at most"]
    advice_limit: float | None
    source: str

    def shortfall(self, value: float, limit: float) -> float:
        """How far the value misses the limit, relative to it; negative when it is met with room to spare."""
        missing = limit - value if self.sense == "at least" else value - limit
        return missing / max(abs(limit), 1e-9)


@cache
def read_criteria() -> dict[str, Criterion]:
    """Criteria table, by key, in the order of the report."""
    return {
        row["key"]: Criterion(
            key=row["key"],
            title=row["title"],
            unit=row["unit"],
            sense="at least" if row["sense"] == "at least" else "at most",
            advice_limit=float(row["advice_limit"]) if row["advice_limit"] else None,
            source=row["source"],
        )
        for row in packaged_rows("verdict/criteria.csv")
    }
