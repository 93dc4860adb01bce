"""Time 1,000 draws against the plain assessment of the same site to JSON, in processor seconds.

Run with ``python tests/benchmarks/time_uncertainty.py [--quick]``. Nothing here fails on a time.
"""

import argparse
import time
from collections.abc import Callable
from pathlib import Path

from siteassess.assessment import assess_file
from siteassess.report.results import json_text
from siteassess.verdict.uncertainty.drawn_site import ANGULAR, drawn_site, drawn_values
from siteassess.verdict.uncertainty.draws import drawn
from siteassess.verdict.uncertainty.how_sure import DRAWS, uncertainty
from siteassess.verdict.uncertainty.survey_errors import survey_errors

HARBOUR = Path(__file__).parents[2] / "example_sites" / "harbour"
AIM = 1.0  # of the plain assessment, for the draws of all findings that depend on directions


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
    repeats = 1 if parser.parse_args().quick else 7
    print(f"{'site':<13}{'assess':>9}{'edges':>9}{'draws':>9}{'ratio':>8}{'aim':>6}{'all':>9}{'ratio':>8}")
    for name in ("quay_office", "silo_yard", "tree_line"):
        site = HARBOUR / name
        found = assess_file(site)
        errors = survey_errors(found.site, found.skyline)
        inputs = found.site, found.skyline, found.tracks, found.budget
        model = drawn_site(*inputs, errors)
        draws = drawn(
            errors,
            [sum(len(mover.rise_deg_per_m) for mover in model.movers)],
            gain_error_db=1.0,
            power_error_db=1.0,
            signals=len(model.signals),
            draws=DRAWS,
            seed=1,
        )
        angular = [one for one in found.verdict.findings if one.criterion in ANGULAR]
        plain = best_seconds(lambda site=site: json_text(assess_file(site)), repeats)
        edges = best_seconds(lambda inputs=inputs, errors=errors: drawn_site(*inputs, errors), repeats)
        values = best_seconds(
            lambda model=model, angular=angular, draws=draws: drawn_values(model, angular, draws), repeats
        )
        everything = best_seconds(
            lambda inputs=inputs, found=found: uncertainty(*inputs, found.verdict), repeats
        )
        print(
            f"{name:<13}{plain:>9.3f}{edges:>9.3f}{values:>9.3f}{(edges + values) / plain:>8.2f}{AIM:>6.1f}"
            f"{everything:>9.3f}{everything / plain:>8.2f}"
        )


if __name__ == "__main__":
    main()
