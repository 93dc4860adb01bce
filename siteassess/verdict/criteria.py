"""The criteria: what can be asked of a site, who asks for it, and which way the limit points."""

from dataclasses import dataclass
from functools import cache
from typing import Literal

from siteassess.site_file.model import Requirements
from siteassess.tables import packaged_rows

__all__ = ["Criterion", "limit_or_advice", "read_criteria"]


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
        "share", "deg", "m", "s", "satellites", "dB", "dB-Hz", "dB/m", "V", or nothing for a ratio.
    sense : str
        "at least" or "at most".
    advice_limit : float or None
        Limit used as advice when the site file sets none; None where the site file always sets one.
    part_of : str or None
        The criterion in whose finding this limit takes part; None where it has a finding of its own.
    source : str
        Who gives that advice.
    status : str
        Whether that source was seen, remembered, or is the tool's own default.
    """

    key: str
    title: str
    unit: str
    sense: Literal["at least", "at most"]
    advice_limit: float | None
    part_of: str | None
    source: str
    status: str

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
            part_of=row["part_of"] or None,
            source=row["source"],
            status=row["status"],
        )
        for row in packaged_rows("verdict/criteria.csv")
    }


def limit_or_advice(require: Requirements, key: str) -> float:
    """The limit that the site file or its set gives, or else the published advice."""
    asked, advice = getattr(require, key), read_criteria()[key].advice_limit
    limit = asked if asked is not None else advice
    assert limit is not None, key  # asked only where the table gives an advice
    return float(limit)
