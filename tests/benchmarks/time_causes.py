"""Time causes and cures against the plain assessment of the same site to JSON; whole assessments apart.

Run with ``python tests/benchmarks/time_causes.py [--quick]``. Nothing here fails on a time.
"""

import argparse
import time
from collections.abc import Callable
from pathlib import Path

from siteassess.assessment import assess_file, explained
from siteassess.report.results import json_text
from siteassess.verdict.cures.angular import angular_form
from siteassess.verdict.cures.heights import heights
from siteassess.verdict.cures.returns import lost_sky, returned_alone, returned_in_order
from siteassess.verdict.states import sample_states, sample_weights

HARBOUR = Path(__file__).parents[2] / "example_sites" / "harbour"
AIM = 1.0  # of the plain assessment, without the whole assessments that find the height to the centimetre


def best_seconds(work: Callable[[], object], repeats: int) -> float:
    def once() -> float:
        begun = time.process_time()
        work()
        return time.process_time() - begun

    once()
    return min(once() for _ in range(repeats))


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="one repeat each")
    repeats = 1 if parser.parse_args().quick else 5
    print(f"{'site':<13}{'assess':>9}{'returns':>9}{'form':>9}{'heights':>9}{'ratio':>8}{'aim':>6}{'all':>9}")
    for name in ("quay_office", "silo_yard", "tree_line"):
        site = HARBOUR / name
        found = assess_file(site)
        weight = sample_weights(found.budget.samples, found.tracks)

        def returns(found=found, weight=weight) -> None:
            for one in found.budget.signals:
                states = sample_states(one, found.budget.samples, weight, count_weakened=False)
                lost = lost_sky(found.skyline, found.budget.samples, one, states, count_weakened=False)
                returned_alone(lost)
                returned_in_order(lost, range(len(found.skyline.obstacles)))

        inputs = found.site, found.pattern, found.tracks, found.budget
        form = angular_form(*inputs)

        def by_height(found=found, form=form) -> None:
            heights(found.site, found.skyline, form, found.verdict, lambda height_m: found.verdict)

        plain = best_seconds(lambda site=site: json_text(assess_file(site)), repeats)
        works = (returns, lambda inputs=inputs: angular_form(*inputs), by_height)
        parts = [best_seconds(work, repeats) for work in works]
        everything = best_seconds(lambda found=found: explained(found), repeats)
        figures = "".join(f"{seconds:>9.3f}" for seconds in (plain, *parts))
        print(f"{name:<13}{figures}{sum(parts) / plain:>8.2f}{AIM:>6.1f}{everything:>9.3f}")


if __name__ == "__main__":
    main()
