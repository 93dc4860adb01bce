"""From assessed sites to a ranking."""

import os
from collections.abc import Callable, Iterable

from siteassess.candidates.assess_many import assess_sites
from siteassess.candidates.candidate import Candidate, RefusedCandidate, room
from siteassess.candidates.order import criterion_key, dominators, in_order
from siteassess.candidates.ranking import USABLE_SATELLITES, Difference, RankedSite, Ranking

__all__ = ["rank_candidates", "rank_sites"]


def rank_sites(
    paths: Iterable[str | os.PathLike[str]],
    *,
    jobs: int | None = None,
    progress: Callable[[str], None] | None = None,
) -> Ranking:
    """Assess many sites and put them in order.

    With more than one job, processes are started afresh: a script that calls this needs the usual
    ``if __name__ == "__main__":``.

    Parameters
    ----------
    paths : iterable of str or path
        Site files, or folders that hold `site.toml`; a site named twice counts once.
    jobs : int, optional
        Number of processes; as many as there are cores when None.
    progress : function, optional
        Called with a few words after each site.

    Examples
    --------
    >>> harbour = "example_sites/harbour/"
    >>> ranking = rank_sites([harbour + "silo_yard", harbour + "quay_office"], jobs=1)
    >>> [(site.rank, site.candidate.place, site.candidate.outcome) for site in ranking.sites]
    [(1, 'quay_office', 'pass'), (2, 'silo_yard', 'fail')]
    >>> lost = ranking.sites[1].differences[0]
    >>> lost.criterion, lost.signal, lost.gain < 0
    ('min_usable_share', 'GPS L1 C/A', True)
    """
    candidates, refused = assess_sites(paths, jobs=jobs, progress=progress)
    return rank_candidates(candidates, refused)


def rank_candidates(candidates: Iterable[Candidate], refused: Iterable[RefusedCandidate] = ()) -> Ranking:
    """Put assessed sites in order, compare each with all, and price each against the first."""
    ordered = in_order(tuple(candidates))
    beaten = dominators(ordered, with_advice=False)
    dominated = dominators(ordered, with_advice=True)
    return Ranking(
        sites=tuple(
            RankedSite(
                rank=index + 1,
                candidate=candidate,
                beaten_by=tuple(other + 1 for other in beaten[index]),
                dominated_by=tuple(other + 1 for other in dominated[index]),
                differences=_differences(candidate, ordered[0]),
            )
            for index, candidate in enumerate(ordered)
        ),
        refused=tuple(sorted(refused, key=lambda site: (site.place, site.given))),
        asked_differently=_asked_differently(ordered),
        same_criteria=len({_criteria(candidate) for candidate in ordered}) <= 1,
    )


def _criteria(candidate: Candidate) -> frozenset[tuple[str, str | None, bool]]:
    return frozenset(criterion_key(finding) for finding in candidate.findings)


def _asked_differently(candidates: tuple[Candidate, ...]) -> tuple[str, ...]:
    values: dict[str, set[str]] = {}
    for candidate in candidates:
        for key, value in candidate.asked:
            values.setdefault(key, set()).add(value)
    return tuple(key for key, different in values.items() if len(different) > 1)


def _differences(candidate: Candidate, first: Candidate) -> tuple[Difference, ...]:
    """Criteria that both sites have, where they differ."""
    of_first = {criterion_key(finding): finding for finding in first.findings}
    found = [_satellites_difference(candidate, first)]
    for finding in candidate.findings:
        other = of_first.get(criterion_key(finding))
        if other is not None:
            found.append(
                Difference(
                    criterion=finding.criterion,
                    signal=finding.signal,
                    unit=finding.unit,
                    required=finding.required,
                    value=finding.value,
                    first_value=other.value,
                    gain=room(finding) - room(other),
                )
            )
    return tuple(
        sorted(
            (difference for difference in found if difference.gain != 0.0),
            key=lambda difference: (
                not difference.required,
                -abs(difference.gain),
                difference.criterion,
                difference.signal or "",
            ),
        )
    )


def _satellites_difference(candidate: Candidate, first: Candidate) -> Difference:
    value, first_value = candidate.usable_satellites, first.usable_satellites
    return Difference(
        criterion=USABLE_SATELLITES,
        signal=None,
        unit="count",
        required=False,
        value=value,
        first_value=first_value,
        gain=(value - first_value) / max(first_value, 1.0),
    )
