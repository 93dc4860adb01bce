"""Many sites assessed side by side, in as many processes as there are cores."""

import multiprocessing
import os
import signal
from collections.abc import Callable, Iterable, Iterator
from concurrent.futures import ProcessPoolExecutor, as_completed
from concurrent.futures.process import BrokenProcessPool

from siteassess.assessment import assess_file
from siteassess.candidates.candidate import Candidate, RefusedCandidate, candidate_of
from siteassess.candidates.places import SitePlace, distinct_sites
from siteassess.errors import Mistake, SiteAssessError

__all__ = ["assess_sites"]

# A process must load NumPy and the tables before its first site; that pays from so many sites on.
SITES_PER_PROCESS = 4
MOST_PROCESSES = 60  # Windows waits for no more than that

Answer = Candidate | RefusedCandidate


def assess_sites(
    paths: Iterable[str | os.PathLike[str]],
    *,
    jobs: int | None = None,
    progress: Callable[[str], None] | None = None,
) -> tuple[tuple[Candidate, ...], tuple[RefusedCandidate, ...]]:
    """Assess every site; one that cannot be assessed does not stop the others.

    Parameters
    ----------
    paths : iterable of str or path
        Site files, or folders that hold `site.toml`; a site named twice counts once.
    jobs : int, optional
        Number of processes; when None, one a core, and fewer for a handful of sites.
    progress : function, optional
        Called with a few words after each site.

    Returns
    -------
    tuple
        Candidates and refused sites, each ordered by place.

    Raises
    ------
    SiteAssessError
        If a process dies, as when memory runs out.
    """
    sites = distinct_sites(paths)
    tell = progress or (lambda words: None)
    answers: list[Answer] = []
    for answer in _answers(sites, jobs):
        answers.append(answer)
        tell(f"{len(answers)} of {len(sites)} sites assessed")
    answers.sort(key=lambda answer: answer.place)
    return (
        tuple(answer for answer in answers if isinstance(answer, Candidate)),
        tuple(answer for answer in answers if isinstance(answer, RefusedCandidate)),
    )


def _answers(sites: tuple[SitePlace, ...], jobs: int | None) -> Iterator[Answer]:
    """Answers in the order in which they are ready."""
    if jobs is None:
        jobs = min(_cores(), len(sites) // SITES_PER_PROCESS)
    jobs = min(jobs, len(sites), MOST_PROCESSES)
    if jobs <= 1:
        yield from map(_answer, sites)
        return
    # Started afresh on every system: a copy of a process with threads may never end.
    started = multiprocessing.get_context("spawn")
    executor = ProcessPoolExecutor(jobs, mp_context=started, initializer=_leave_interrupts_to_the_parent)
    try:
        for future in as_completed([executor.submit(_answer, site) for site in sites]):
            yield future.result()
    except BrokenProcessPool as error:
        raise SiteAssessError(
            Mistake(
                file="rank",
                where="",
                problem="a process that assessed a site ended without an answer",
                allowed="memory may have run out; fewer jobs need less",
            )
        ) from error
    finally:
        executor.shutdown(cancel_futures=True)


def _answer(site: SitePlace) -> Answer:
    try:
        return candidate_of(assess_file(site.given), site.place)
    except SiteAssessError as error:
        return RefusedCandidate(given=site.given, place=site.place, mistakes=error.mistakes)


def _leave_interrupts_to_the_parent() -> None:
    signal.signal(signal.SIGINT, signal.SIG_IGN)


def _cores() -> int:
    """Cores that this process may use."""
    try:
        return len(os.sched_getaffinity(0))
    except AttributeError:  # not on macOS and Windows
        return os.cpu_count() or 1
