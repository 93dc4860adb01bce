"""Tables of a ranking that show every criterion of every site."""

from __future__ import annotations

from math import ceil
from textwrap import wrap
from typing import TYPE_CHECKING

from siteassess.report.phrases import NOTHING, in_unit, plain, told_apart
from siteassess.report.pieces import Table
from siteassess.report.ranking.words import criterion_name, site_names
from siteassess.verdict.criteria import read_criteria

if TYPE_CHECKING:
    from siteassess.candidates.candidate import Candidate
    from siteassess.candidates.ranking import Ranking
    from siteassess.verdict.verdict import Finding

__all__ = ["criteria_tables", "criterion_columns"]

MOST_COLUMNS = 6
HEADING_LETTERS = 14
SIGNS = {"met": "", "missed": "*", "unproven": "?"}


def criterion_columns(ranking: Ranking) -> tuple[tuple[str, str | None], ...]:
    """Criteria and signals of all sites, in the order of the criteria table and of the site files."""
    signals: dict[str, None] = {}
    found: dict[tuple[str, str | None], None] = {}
    for site in ranking.sites:
        signals |= dict.fromkeys(shares.signal for shares in site.candidate.signals)
        found |= {(finding.criterion, finding.signal): None for finding in site.candidate.findings}
    criteria, order = list(read_criteria()), list(signals)
    return tuple(
        sorted(
            found,
            key=lambda column: (
                criteria.index(column[0]),
                -1 if column[1] is None else order.index(column[1]),
            ),
        )
    )


def criteria_tables(ranking: Ranking) -> tuple[Table, ...]:
    """Values of what any site requires, then of advice, a few columns a table."""
    required = {
        (finding.criterion, finding.signal) for site in ranking.sites for finding in site.candidate.required
    }
    columns = criterion_columns(ranking)
    asked = [column for column in columns if column in required]
    advised = [column for column in columns if column not in required]
    return _tables(
        ranking,
        asked,
        "Required by at least one site. The name of a signal stands for its usable share. "
        "* misses its limit; ? met only if the unsurveyed sky is open.",
    ) + _tables(ranking, advised, "Advice, which fails no site. * is beyond it; ? as above.")


def _tables(ranking: Ranking, columns: list[tuple[str, str | None]], caption: str) -> tuple[Table, ...]:
    names = site_names(ranking)
    width = ceil(len(columns) / max(ceil(len(columns) / MOST_COLUMNS), 1)) or 1
    parts = [columns[start : start + width] for start in range(0, len(columns), width)]
    return tuple(
        Table(
            caption=caption,
            header=("No.", "Spot", *(_heading(ranking, column) for column in part)),
            rows=tuple(
                (str(site.rank), name, *(_cell(site.candidate, column) for column in part))
                for site, name in zip(ranking.sites, names, strict=True)
            ),
            align="rl" + "r" * len(part),
        )
        for part in parts
    )


def _finding(candidate: Candidate, column: tuple[str, str | None]) -> Finding | None:
    return next(
        (finding for finding in candidate.findings if (finding.criterion, finding.signal) == column), None
    )


def _heading(ranking: Ranking, column: tuple[str, str | None]) -> str:
    """Name of the criterion, and its limit where all sites have the same."""
    findings = [_finding(site.candidate, column) for site in ranking.sites]
    limits = {(finding.limit, finding.unit) for finding in findings if finding is not None}
    name = plain(criterion_name(*column))
    asked = "limits differ"
    if len(limits) == 1:
        limit, unit = limits.pop()
        asked = f"{read_criteria()[column[0]].sense} {in_unit(limit, unit)}"
    lines = wrap(name, HEADING_LETTERS, break_long_words=False, break_on_hyphens=False)
    return "\n".join([*lines, asked])


def _cell(candidate: Candidate, column: tuple[str, str | None]) -> str:
    finding = _finding(candidate, column)
    if finding is None:
        return NOTHING
    return told_apart(finding.value, finding.limit, finding.unit)[0] + SIGNS[finding.outcome]
