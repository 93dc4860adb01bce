"""The order of choice, and who is better in everything than whom."""

from typing import Any

import numpy as np
from numpy.typing import NDArray

from siteassess.candidates.candidate import Candidate, room
from siteassess.verdict.verdict import Finding

__all__ = ["CriterionKey", "criterion_key", "dominators", "in_order"]

CriterionKey = tuple[str, str | None, bool]

OUTCOMES = {"pass": 0, "unproven": 1, "fail": 2}
FINDINGS = {"met": 0, "unproven": 1, "missed": 2}


def criterion_key(finding: Finding) -> CriterionKey:
    """What makes findings of two sites comparable: criterion, signal, and whether it is required."""
    return finding.criterion, finding.signal, finding.required


def in_order(candidates: tuple[Candidate, ...]) -> tuple[Candidate, ...]:
    """Candidates with the best first; the order in which they are given does not matter.

    Pass before unproven before fail; then the fewest required criteria missed; then the largest margin, which
    is the smallest room of the required findings; where margins are equal, the second smallest room, and so
    on; then the mean number of usable satellites; then the rooms of the advice in the same way; then name and
    place.
    """
    return tuple(sorted(candidates, key=_sort_key))


def _sort_key(candidate: Candidate) -> tuple[Any, ...]:
    advice = tuple(finding for finding in candidate.findings if not finding.required)
    return (
        OUTCOMES[candidate.outcome],
        candidate.missed,
        _rooms_worst_first(candidate.required),
        -candidate.usable_satellites,
        _rooms_worst_first(advice),
        candidate.name,
        candidate.place,
    )


def _rooms_worst_first(findings: tuple[Finding, ...]) -> tuple[float, ...]:
    """Negative rooms, largest first: of two such tuples the smaller belongs to the better site."""
    return tuple(-value for value in sorted(room(finding) for finding in findings))


def dominators(ordered: tuple[Candidate, ...], *, with_advice: bool) -> tuple[tuple[int, ...], ...]:
    """For each candidate, the indices of those that are nowhere worse and somewhere better.

    What is compared is the verdict, every finding (its outcome, then its room) and the mean number of usable
    satellites. Candidates that are held against different criteria are not compared.

    Parameters
    ----------
    ordered : tuple of Candidate
        From :func:`in_order`, so that whoever dominates stands above.
    with_advice : bool
        Whether findings that are advice count, or only those that are required.
    """
    groups: dict[tuple[CriterionKey, ...], list[int]] = {}
    rows = []
    for index, candidate in enumerate(ordered):
        counted = candidate.findings if with_advice else candidate.required
        by_key = {criterion_key(finding): finding for finding in counted}
        keys = tuple(sorted(by_key, key=str))
        groups.setdefault(keys, []).append(index)
        rows.append(_goods(candidate, [by_key[key] for key in keys]))
    found: list[tuple[int, ...]] = [()] * len(ordered)
    for members in groups.values():
        goods, member = np.array([rows[index] for index in members]), np.array(members)
        for number, index in enumerate(members):
            found[index] = tuple(member[:number][_dominate(goods[:number], goods[number])].tolist())
    return tuple(found)


def _goods(candidate: Candidate, findings: list[Finding]) -> list[float]:
    """Figures of which more is better."""
    goods = [-float(OUTCOMES[candidate.outcome]), candidate.usable_satellites]
    for finding in findings:
        goods += [-float(FINDINGS[finding.outcome]), room(finding)]
    return goods


def _dominate(others: NDArray[np.float64], own: NDArray[np.float64]) -> NDArray[np.bool_]:
    """Which rows of others, shape (other, good), are nowhere worse and somewhere better."""
    better: NDArray[np.bool_] = np.all(others >= own, axis=-1) & np.any(others > own, axis=-1)
    return better
