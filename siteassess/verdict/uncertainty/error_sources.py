"""Which error a finding's spread comes from: what to measure better."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import hypot
from typing import Literal

import numpy as np

from siteassess.site_file.model import Site
from siteassess.verdict.uncertainty.drawn_site import DrawnSite, drawn_values
from siteassess.verdict.uncertainty.draws import Draws, Kind, only, some
from siteassess.verdict.uncertainty.survey_errors import SurveyErrors
from siteassess.verdict.verdict import Finding

__all__ = ["ErrorSource", "error_sources"]

DRAWS_OF_ONE = 250  # with one error alone


@dataclass(frozen=True, slots=True, kw_only=True)
class ErrorSource:
    """What one error alone does to a finding.

    Attributes
    ----------
    kind : str
        "azimuth", "elevation", "distance", "gain" or "power".
    file : str or None
        The survey that it is about, where it is about one.
    standard_deviation, unit : float, str
        Of the error itself ("deg", "m", "dB").
    spread : float
        Standard deviation that it gives the finding's value, in the finding's unit.
    variance_share : float
        Its part of the sum of the variances that all errors give one by one.
    """

    kind: Kind
    file: str | None
    standard_deviation: float
    unit: Literal["deg", "m", "dB"]
    spread: float
    variance_share: float


def error_sources(
    site: Site, model: DrawnSite, errors: Sequence[SurveyErrors], draws: Draws, finding: Finding
) -> tuple[ErrorSource, ...]:
    """Every error that is not zero, the one that spreads a finding most first.

    Parameters
    ----------
    site, model : Site, DrawnSite
        The site.
    errors : sequence of SurveyErrors
        Survey by survey.
    draws : Draws
        All errors together; of each one alone the first draws are taken.
    finding : Finding
        The finding.
    """
    few = some(draws, slice(0, DRAWS_OF_ONE))
    found = []
    for kind, survey, deviation, unit in _kinds(site, errors):
        (values,) = drawn_values(model, [finding], only(few, kind, survey))
        # The standard deviation of equal values need not be 0 to the last digit.
        spread = float(values.std()) if np.ptp(values) > 0.0 else 0.0
        found.append((kind, survey, deviation, unit, spread))
    total = sum(spread**2 for *_, spread in found)
    return tuple(
        ErrorSource(
            kind=kind,
            file=errors[survey].file if survey >= 0 else None,
            standard_deviation=deviation,
            unit=unit,
            spread=spread,
            variance_share=spread**2 / total if total > 0.0 else 0.0,
        )
        for kind, survey, deviation, unit, spread in sorted(found, key=lambda one: -one[-1])
    )


def _kinds(
    site: Site, errors: Sequence[SurveyErrors]
) -> Iterator[tuple[Kind, int, float, Literal["deg", "m", "dB"]]]:
    """Kind, survey (-1: about none), standard deviation and unit of each error that is not zero."""
    for survey, one in enumerate(errors):
        if one.azimuth_deg > 0.0:
            yield "azimuth", survey, one.azimuth_deg, "deg"
        elevation_deg = hypot(one.elevation_common_deg, one.elevation_point_deg)
        if elevation_deg > 0.0:
            yield "elevation", survey, elevation_deg, "deg"
        if one.distance_m > 0.0:
            yield "distance", survey, one.distance_m, "m"
    if site.antenna.gain_error_db > 0.0:
        yield "gain", -1, site.antenna.gain_error_db, "dB"
    if site.sky.power_error_db > 0.0:
        yield "power", -1, site.sky.power_error_db, "dB"
