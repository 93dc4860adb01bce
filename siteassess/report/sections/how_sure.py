"""How sure the verdict is: the answer of the first page, a word on each finding, and a section."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import in_unit, number, percent, plain
from siteassess.report.pieces import Section, Table
from siteassess.verdict.criteria import read_criteria
from siteassess.verdict.uncertainty.how_sure import NARROW_BELOW
from siteassess.wording import listed

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.verdict.uncertainty.error_sources import ErrorSource
    from siteassess.verdict.uncertainty.how_sure import FindingSpread, Uncertainty
    from siteassess.verdict.verdict import Finding

__all__ = ["how_sure", "how_sure_section", "on_finding", "spreads"]

WORTH_NAMING_SHARE = 0.005  # of a variance; printed with whole percents
CERTAIN = 0.9995
ERRORS = {
    "azimuth": "azimuths of the survey",
    "elevation": "elevations of the survey",
    "distance": "distances of the survey",
    "gain": "gain of the antenna",
    "power": "power of the signals",
}
UNITS = {"deg": "°", "m": "\N{NO-BREAK SPACE}m", "dB": "\N{NO-BREAK SPACE}dB"}


def spreads(sure: Uncertainty | None) -> dict[tuple[str, str | None], FindingSpread]:
    """What is known of the findings, by criterion and signal; nothing where it was not asked for."""
    return {} if sure is None else {(one.criterion, one.signal): one for one in sure.findings}


def how_sure(assessment: Assessment) -> str | None:
    """The answer of the first page; None where it was not asked for."""
    sure = assessment.uncertainty
    if sure is None:
        return None
    if sure.probability is None:
        return "No requirement depends on the survey or on levels."
    texts = [f"{_chance(sure.probability)} that all requirements which depend on the sky are met."]
    if sure.narrow:
        close = [one for one in sure.findings if one.narrow]
        on = f" on {_names(close)}" if close else ""
        texts.append(f"That is a narrow result, which might well turn{on}.")
        texts.append(_source(sure))
    else:
        texts.append("No error of survey or levels that was stated makes it doubtful.")
    texts.append(_open_points(assessment, sure))
    return " ".join(text for text in texts if text)


def on_finding(spread: FindingSpread | None) -> str:
    """A sentence on a finding that might turn; nothing where it is sure or not known."""
    if spread is None or not spread.narrow:
        return ""
    if spread.probability is None:
        return "Narrow: it is met in a good case for the signals and missed in a bad one."
    return f"Narrow: {_chance(spread.probability).lower()} that it is met."


def how_sure_section(assessment: Assessment) -> Section | None:
    """Findings with their spread, and where that comes from; None where it was not asked for."""
    sure = assessment.uncertainty
    if sure is None:
        return None
    findings = {(one.criterion, one.signal): one for one in assessment.verdict.findings}
    tables = [
        Table(
            caption=(
                "Findings that depend on survey or levels. 5 % of the draws lie below the first figure, half "
                "below the second, 95 % below the third. Findings on satellites at once carry no "
                "probability: the figures are those of a bad and of a good draw for the signals. “Met in” is "
                "the part of the draws in which the limit is met."
            ),
            header=("Criterion", "Asked", "Found", "5 %", "Half", "95 %", "Met in", ""),
            rows=tuple(_finding_row(findings[one.criterion, one.signal], one) for one in sure.findings),
            align="lrrrrrrl",
            tones=tuple("unproven" if one.narrow else "" for one in sure.findings),
        )
    ]
    if sure.sources and sure.closest is not None:
        tables.append(_sources_table(sure.sources, sure.closest))
    sentences = [
        f"All was found again {sure.draws} times, each time with other errors of the survey and of levels, "
        f"drawn at random with seed {sure.seed}. What stays as found in less than {NARROW_BELOW:.0%} of the "
        "draws is called narrow.",
        _measure(sure),
        _open_points(assessment, sure),
    ]
    return Section(
        key="how-sure",
        heading="How sure this is",
        sentences=tuple(text for text in sentences if text),
        tables=tuple(tables),
    )


def _chance(probability: float) -> str:
    if probability >= CERTAIN:
        return "It is as good as certain"
    if probability <= 1.0 - CERTAIN:
        return "It is as good as ruled out"
    return f"There is a chance of {percent(probability, 0 if 0.01 <= probability <= 0.99 else 1)}"


def _names(close: list[FindingSpread]) -> str:
    """Findings, those of signals under one title."""
    by_title: dict[str, list[str]] = {}
    for one in close:
        by_title.setdefault(read_criteria()[one.criterion].title, []).append(one.signal or "")
    return listed(
        f"“{title}”" + (f" of {listed(signals)}" if all(signals) else "")
        for title, signals in by_title.items()
    )


def _source(sure: Uncertainty) -> str:
    """Where most of the doubt comes from, and what would lessen it."""
    if not sure.sources or sure.sources[0].variance_share <= 0.0:
        return ""
    first = sure.sources[0]
    return f"Most of the doubt is the {_error(first)}, uncertain by {_deviation(first)}: {_remedy(first)}."


def _measure(sure: Uncertainty) -> str:
    """What the finding closest to turning depends on most."""
    if sure.closest is None or not sure.sources or sure.sources[0].variance_share <= 0.0:
        return ""
    first = sure.sources[0]
    return (
        f"Closest to turning is {_names([sure.closest])}: {percent(first.variance_share, 0)} of its variance "
        f"comes from the {_error(first)}, uncertain by {_deviation(first)}: {_remedy(first)}."
    )


def _remedy(source: ErrorSource) -> str:
    return {
        "azimuth": "a landmark of known bearing or a total station would help most",
        "elevation": "a finer clinometer or a total station would help most",
        "distance": "measured distances would help most",
        "gain": "a calibrated pattern of this antenna would help most",
        "power": "a trial log of C/N0 at the spot would help most",
    }[source.kind]


def _open_points(assessment: Assessment, sure: Uncertainty) -> str:
    texts = []
    if sure.unstated:
        files = listed(plain(file) for file in sure.unstated)
        texts.append(f"Nobody stated the errors of {files}: its readings count as exact.")
    if assessment.verdict.sky.unsurveyed_share > 0:
        texts.append("What nobody looked at counts as open in all of this.")
    return " ".join(texts)


def _finding_row(finding: Finding, spread: FindingSpread) -> tuple[str, ...]:
    def value(figure: float | None) -> str:
        return "" if figure is None else in_unit(figure, finding.unit, 2 if finding.unit == "share" else 1)

    title = read_criteria()[finding.criterion].title
    return (
        f"{finding.signal}: {title}" if finding.signal else title,
        value(finding.limit),
        value(finding.value),
        value(spread.p05),
        value(spread.p50),
        value(spread.p95),
        "" if spread.probability is None else percent(spread.probability),
        "narrow" if spread.narrow else "",
    )


def _sources_table(sources: tuple[ErrorSource, ...], closest: FindingSpread) -> Table:
    unit = read_criteria()[closest.criterion].unit
    return Table(
        caption=f"What {_names([closest])} depends on: each error alone, as one standard deviation.",
        header=("Error", "How large", "Spread that it gives", "Part of the variance"),
        rows=tuple(
            (
                _error(one).capitalize(),
                _deviation(one),
                in_unit(one.spread, unit, 2),
                percent(one.variance_share, 0) if one.variance_share >= WORTH_NAMING_SHARE else "none",
            )
            for one in sources
        ),
        align="lrrr",
    )


def _error(source: ErrorSource) -> str:
    name = ERRORS[source.kind]
    return name if source.file is None else f"{name} {plain(source.file)}"


def _deviation(source: ErrorSource) -> str:
    return f"{number(source.standard_deviation, 2)}{UNITS[source.unit]}"
