"""A site as far as errors of survey and levels act on it, and its findings in each draw."""

from collections.abc import Sequence
from dataclasses import dataclass
from functools import partial

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.budget import LinkBudget, SignalBudget
from siteassess.site_file.model import Site
from siteassess.sky_tracks.refraction import apparent_elevation_deg
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.criteria import limit_or_advice
from siteassess.verdict.states import WEAKENED_FROM_DB, sample_weights
from siteassess.verdict.uncertainty.draws import Draws, only, some
from siteassess.verdict.uncertainty.movers import Mover, carrier_key, movers
from siteassess.verdict.uncertainty.possible_values import hidden_shares, peak_deg, usable_shares
from siteassess.verdict.uncertainty.signal_density import SignalDensity, signal_density
from siteassess.verdict.uncertainty.survey_errors import SurveyErrors
from siteassess.verdict.verdict import Finding

__all__ = ["ANGULAR", "DrawnSite", "drawn_site", "drawn_values"]

FloatArray = NDArray[np.float64]

ANGULAR = (  # findings that depend on directions
    *("min_usable_share", "good_for_years", "max_blocked_sky_share", "max_block_share"),
    *("max_horizon_deg", "max_reflector_deg"),
)
FARTHEST = 6.0  # standard deviations; one draw of 500 million is farther off


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class DrawnSite:
    """What draws act on.

    Attributes
    ----------
    movers : tuple of Mover
        The skyline, part by part.
    signals, carriers_hz, densities : tuple
        Names, carriers and satellite-time of the signals, in the order of the site file.
    mask_deg : float
        Elevation mask.
    floor_deg : float
        Elevation below which an edge takes nothing in any draw.
    """

    movers: tuple[Mover, ...]
    signals: tuple[str, ...]
    carriers_hz: tuple[float, ...]
    densities: tuple[SignalDensity, ...]
    mask_deg: float
    floor_deg: float


def drawn_site(
    site: Site, skyline: Skyline, tracks: SkyTracks, budget: LinkBudget, errors: Sequence[SurveyErrors]
) -> DrawnSite:
    """The site as far as errors of survey and levels act on it."""
    mask_deg, height_m = site.require.elevation_mask_deg, site.position.height_m
    first_deg = float(apparent_elevation_deg(mask_deg, height_m + site.mount.phase_centre_height_m))
    farthest_deg = max((one.elevation_common_deg + one.elevation_point_deg for one in errors), default=0.0)
    floor_deg = max(mask_deg - FARTHEST * farthest_deg - 1.0, -90.0)
    weight = sample_weights(budget.samples, tracks)
    by_carrier = {carrier_key(signal.signal.carrier_hz): signal for signal in budget.signals}
    return DrawnSite(
        movers=movers(
            skyline,
            errors,
            max(floor_deg, 0.0),
            {key: signal.signal.carrier_hz for key, signal in by_carrier.items()},
            {
                key: partial(_bearable_db, signal, count_weakened=site.require.count_weakened)
                for key, signal in by_carrier.items()
            },
            near_m=limit_or_advice(site.require, "reflector_distance_m"),
        ),
        signals=tuple(signal.signal.name for signal in budget.signals),
        carriers_hz=tuple(signal.signal.carrier_hz for signal in budget.signals),
        densities=tuple(
            signal_density(signal, budget.samples, weight, first_deg) for signal in budget.signals
        ),
        mask_deg=mask_deg,
        floor_deg=floor_deg,
    )


def drawn_values(model: DrawnSite, findings: Sequence[Finding], draws: Draws) -> list[FloatArray]:
    """Values of findings in each draw: as found, and what the draw changes.

    Parameters
    ----------
    model : DrawnSite
        The site.
    findings : sequence of Finding
        Some of `ANGULAR`.
    draws : Draws
        What is off.

    Returns
    -------
    list of array, shape (draw,)
        One array a finding. Without any error it holds the finding's own value.
    """
    quantities = [_quantity(finding) for finding in findings]
    drawn = _quantities(model, set(quantities), draws)
    as_found = _quantities(model, set(quantities), only(some(draws, slice(0, 1)), None))
    return [
        np.clip(
            finding.value + (drawn[quantity] - as_found[quantity]),
            0.0,
            1.0 if finding.unit == "share" else 90.0,
        )
        for finding, quantity in zip(findings, quantities, strict=True)
    ]


def _quantity(finding: Finding) -> str:
    """What draws change about a finding: the share of its signal, or what its criterion is about.

    Grown trees move like the trees of today.
    """
    return finding.criterion if finding.signal is None else finding.signal


def _quantities(model: DrawnSite, wanted: set[str], draws: Draws) -> dict[str, FloatArray]:
    found: dict[str, FloatArray] = {}
    by_edges: dict[int, list[int]] = {}
    for index, name in enumerate(model.signals):
        if name in wanted:
            by_edges.setdefault(carrier_key(model.carriers_hz[index]), []).append(index)
    for signals in by_edges.values():
        shares = usable_shares(
            model.movers,
            [model.densities[index] for index in signals],
            model.carriers_hz[signals[0]],
            [draws.gain_db + draws.power_db[:, index] for index in signals],
            model.floor_deg,
            draws,
        )
        found |= {model.signals[index]: share for index, share in zip(signals, shares, strict=True)}
    if wanted & {"max_blocked_sky_share", "max_block_share"}:
        found["max_blocked_sky_share"], found["max_block_share"] = hidden_shares(
            model.movers, model.mask_deg, model.floor_deg, draws
        )
    if "max_horizon_deg" in wanted:
        found["max_horizon_deg"] = peak_deg([(mover, mover.highest) for mover in model.movers], draws)
    if "max_reflector_deg" in wanted:
        found["max_reflector_deg"] = peak_deg([(mover, mover.near) for mover in model.movers], draws)
    return found


def _bearable_db(signal: SignalBudget, elevation_deg: FloatArray, *, count_weakened: bool) -> FloatArray:
    """Loss at which a direction is lost: what weakens, or if that counts, what an open sky has to spare."""
    if not count_weakened:
        return np.full_like(elevation_deg, WEAKENED_FROM_DB)
    line = signal.lines[0]
    spare_db = np.interp(elevation_deg, line.elevation_deg, line.cn0_open_sky_dbhz) - signal.min_cn0_dbhz
    return np.maximum(spare_db, 1e-6)
