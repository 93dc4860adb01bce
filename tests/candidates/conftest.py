"""Candidates made to measure: one real assessment, its findings replaced."""

import dataclasses
from collections.abc import Callable

import pytest

from siteassess.assessment import assess_file
from siteassess.candidates.candidate import Candidate, candidate_of
from siteassess.site_file.starter import write_starter
from siteassess.verdict.verdict import Finding

UNITS = {"_deg": "deg", "_m": "m", "share": "share"}


def finding(
    criterion: str, value: float, limit: float, signal: str | None = None, *, required: bool = True
) -> Finding:
    """One criterion held against a value; whether it is met follows from both."""
    missed = value < limit if criterion.startswith("min_") else value > limit
    return Finding(
        criterion=criterion,
        signal=signal,
        value=value,
        limit=limit,
        unit=next(unit for ending, unit in UNITS.items() if criterion.endswith(ending)),
        required=required,
        outcome="missed" if missed else "met",
        source="site file",
        reason="Made for a test.",
    )


@pytest.fixture(scope="session")
def found() -> Callable[..., Finding]:
    return finding


@pytest.fixture(scope="session")
def made(tmp_path_factory: pytest.TempPathFactory) -> Callable[..., Candidate]:
    """Makes a candidate with given findings; its verdict follows from them."""
    folder = tmp_path_factory.mktemp("roofs") / "roof"
    write_starter(folder)
    template = candidate_of(assess_file(folder), "roof")

    def make(
        name: str,
        *findings: Finding,
        satellites: float = 30.0,
        unsurveyed_share: float = 0.0,
        place: str | None = None,
    ) -> Candidate:
        missed = any(finding.required and finding.outcome == "missed" for finding in findings)
        return dataclasses.replace(
            template,
            name=name,
            place=place or name,
            outcome="fail" if missed else "unproven" if unsurveyed_share else "pass",
            findings=findings,
            counts=tuple(dataclasses.replace(count, usable_mean=satellites) for count in template.counts),
            sky=dataclasses.replace(template.sky, unsurveyed_share=unsurveyed_share),
        )

    return make
