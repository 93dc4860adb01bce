"""Rewrite what the example sites are expected to give.

Run with ``python tests/builders/build_example_expectations.py``. The figures guard against unintended change;
what the models are worth is tested against outside authorities.
"""

import json
from pathlib import Path
from typing import Any

from siteassess import Assessment, assess, read_site

ROOT = Path(__file__).parent.parent.parent
EXPECTED = ROOT / "tests" / "example_sites_expected.json"
SITES = ("harbour/quay_office", "harbour/silo_yard", "harbour/tree_line", "chain_mistake", "ridge_mast")


def figures(assessment: Assessment) -> dict[str, Any]:
    """The figures of one site that the tests hold on to."""
    verdict = assessment.verdict
    return {
        "verdict": verdict.outcome,
        "worst_finding": [verdict.findings[0].criterion, verdict.findings[0].signal],
        "blocked_share_above_mask": round(verdict.sky.blocked_share_above_mask, 5),
        "blocked_satellite_time_share": round(verdict.blocked_satellite_time_share, 5),
        "usable_share": {signal.signal: round(signal.usable_share, 5) for signal in verdict.signals},
        "median_cn0_dbhz": {
            signal.signal: round(signal.cn0_median_dbhz or 0.0, 3) for signal in verdict.signals
        },
        "obstacle_blocked_share": {
            obstacle.name: round(obstacle.blocked_share_above_mask, 5) for obstacle in verdict.obstacles
        },
    }


def main() -> None:
    expected = {site: figures(assess(read_site(ROOT / "example_sites" / site))) for site in SITES}
    EXPECTED.write_text(json.dumps(expected, indent=2) + "\n", encoding="utf-8", newline="\n")


if __name__ == "__main__":
    main()
