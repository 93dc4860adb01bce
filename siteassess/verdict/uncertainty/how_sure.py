"""How sure the verdict is: its findings found again and again, each time with other errors."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.budget import LinkBudget
from siteassess.site_file.model import Site
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.criteria import read_criteria
from siteassess.verdict.uncertainty.drawn_site import ANGULAR, DrawnSite, drawn_site, drawn_values
from siteassess.verdict.uncertainty.draws import Draws, drawn, some
from siteassess.verdict.uncertainty.error_sources import ErrorSource, error_sources
from siteassess.verdict.uncertainty.survey_errors import SurveyErrors, survey_errors
from siteassess.verdict.uncertainty.time_bounds import time_bounds
from siteassess.verdict.verdict import Finding, Verdict

__all__ = ["DRAWS", "NARROW_BELOW", "FindingSpread", "Uncertainty", "uncertainty"]

FloatArray = NDArray[np.float64]
BoolArray = NDArray[np.bool_]

DRAWS = 1000
NARROW_BELOW = 0.95  # own default: what is less likely than this to stay as found is called narrow
SEEN_SHARES = (0.05, 0.5, 0.95)


@dataclass(frozen=True, slots=True, kw_only=True)
class FindingSpread:
    """How sure one finding is.

    Attributes
    ----------
    criterion, signal : str, str or None
        Which finding.
    probability : float or None
        That its limit is met; None where only bounds are known.
    p05, p50, p95 : float, or None for p50
        Of the draws 5 %, half and 95 % lie below, in the finding's unit. Where only bounds are known, its
        values in a bad and in a good draw for the signals, the smaller first, and no middle.
    narrow : bool
        Whether a finding that is required might well turn out the other way.
    """

    criterion: str
    signal: str | None
    probability: float | None
    p05: float
    p50: float | None
    p95: float
    narrow: bool


@dataclass(frozen=True, slots=True, kw_only=True)
class Uncertainty:
    """How sure the verdict is.

    Attributes
    ----------
    draws, seed : int
        Number of draws, and what they were made from.
    probability : float or None
        That all requirements are met that depend on directions; None where none does.
    narrow : bool
        Whether the verdict might well turn out the other way.
    findings : tuple of FindingSpread
        Those that depend on survey or levels, in the order of `Verdict.findings`.
    closest : FindingSpread or None
        The required one whose limit is nearest to its value, measured by its spread; None where nothing is
        off.
    sources : tuple of ErrorSource
        What the spread of the closest one comes from, the largest part first.
    unstated : tuple of str
        Survey files whose errors nobody stated, and which count as exact.
    """

    draws: int
    seed: int
    probability: float | None
    narrow: bool
    findings: tuple[FindingSpread, ...]
    closest: FindingSpread | None
    sources: tuple[ErrorSource, ...]
    unstated: tuple[str, ...]


def uncertainty(
    site: Site,
    skyline: Skyline,
    tracks: SkyTracks,
    budget: LinkBudget,
    verdict: Verdict,
    *,
    errors: Sequence[SurveyErrors] | None = None,
    draws: int = DRAWS,
) -> Uncertainty:
    """How sure a verdict is.

    Parameters
    ----------
    site, skyline, tracks, budget, verdict : Site, Skyline and so on
        The assessment as it stands.
    errors : sequence of SurveyErrors, or None
        Errors of the surveys; None takes those that the site file states.
    draws : int
        How many times the findings are found again.
    """
    errors = survey_errors(site, skyline) if errors is None else tuple(errors)
    model = drawn_site(site, skyline, tracks, budget, errors)
    sample = drawn(
        errors,
        [_nodes(model, survey) for survey in range(len(errors))],
        gain_error_db=site.antenna.gain_error_db,
        power_error_db=site.sky.power_error_db,
        signals=len(model.signals),
        draws=draws,
        seed=site.sky.seed,
    )
    angular = [finding for finding in verdict.findings if finding.criterion in ANGULAR]
    values = drawn_values(model, angular, sample)
    spreads = {_key(one): _spread(one, of_one) for one, of_one in zip(angular, values, strict=True)}
    for finding, low, high in time_bounds(
        site, tracks, budget, verdict, model, _bad_and_good(sample, angular, values)
    ):
        spreads[_key(finding)] = _bounds(finding, low, high)
    found = tuple(spreads[_key(one)] for one in verdict.findings if _key(one) in spreads)
    required = [(one, of_one) for one, of_one in zip(angular, values, strict=True) if one.required]
    closest = _closest(required)
    probability = float(np.all([_met(*one) for one in required], axis=0).mean()) if required else None
    return Uncertainty(
        draws=draws,
        seed=site.sky.seed,
        probability=probability,
        narrow=_is_narrow(verdict, found, probability),
        findings=found,
        closest=None if closest is None else spreads[_key(closest)],
        sources=() if closest is None else error_sources(site, model, errors, sample, closest),
        unstated=tuple(one.file for one in errors if not one.stated),
    )


def _nodes(model: DrawnSite, survey: int) -> int:
    return sum(len(mover.rise_deg_per_m) for mover in model.movers if mover.survey == survey)


def _key(finding: Finding) -> tuple[str, str | None]:
    return finding.criterion, finding.signal


def _met(finding: Finding, values: FloatArray) -> BoolArray:
    at_least = read_criteria()[finding.criterion].sense == "at least"
    return np.asarray(values >= finding.limit if at_least else values <= finding.limit, dtype=np.bool_)


def _closest(required: Sequence[tuple[Finding, FloatArray]]) -> Finding | None:
    """The finding with the fewest standard deviations between value and limit; None where nothing varies."""
    room = [
        (abs(finding.limit - finding.value) / float(values.std()), index)
        for index, (finding, values) in enumerate(required)
        if np.ptp(values) > 0.0
    ]
    return required[min(room)[1]][0] if room else None


def _spread(finding: Finding, values: FloatArray) -> FindingSpread:
    probability = float(_met(finding, values).mean())
    stays = 1.0 - probability if finding.outcome == "missed" else probability
    p05, p50, p95 = np.quantile(values, SEEN_SHARES).tolist()
    return FindingSpread(
        criterion=finding.criterion,
        signal=finding.signal,
        probability=probability,
        p05=p05,
        p50=p50,
        p95=p95,
        narrow=finding.required and stays < NARROW_BELOW,
    )


def _is_narrow(verdict: Verdict, found: Sequence[FindingSpread], probability: float | None) -> bool:
    """Whether a miss may be none, with no other that stands; or whether a pass may be a miss."""
    narrow = {(one.criterion, one.signal) for one in found if one.narrow}
    missed = {_key(one) for one in verdict.findings if one.required and one.outcome == "missed"}
    if missed:
        return missed <= narrow
    return bool(narrow) or (probability is not None and probability < NARROW_BELOW)


def _bounds(finding: Finding, low: float, high: float) -> FindingSpread:
    met = _met(finding, np.array([low, high]))
    return FindingSpread(
        criterion=finding.criterion,
        signal=finding.signal,
        probability=None,
        p05=low,
        p50=None,
        p95=high,
        narrow=finding.required and bool(met.any() and not met.all()),
    )


def _bad_and_good(
    sample: Draws, angular: Sequence[Finding], values: Sequence[FloatArray]
) -> tuple[Draws, Draws]:
    """The draws that 5 % and 95 % of all lie below, by the usable share of all signals together."""
    total = np.sum(
        [of_one for one, of_one in zip(angular, values, strict=True) if one.criterion == "min_usable_share"],
        axis=0,
    )
    order = np.argsort(total, kind="stable")
    bad, good = (int(order[round(share * (len(order) - 1))]) for share in (SEEN_SHARES[0], SEEN_SHARES[-1]))
    return some(sample, slice(bad, bad + 1)), some(sample, slice(good, good + 1))
