"""The results for programs: one JSON text with fixed keys."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, Any

from siteassess.link_budget.chain.supply import preamplifier_voltage_v
from siteassess.report.disagreement_results import disagreement_records
from siteassess.report.explanation_results import causes_record, cures_record
from siteassess.report.plain_json import as_json
from siteassess.report.plain_json import rounded as _rounded
from siteassess.report.sections.setting import CAUTIONS, assumptions
from siteassess.report.time_results import time_record
from siteassess.report.uncertainty_results import uncertainty_record

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.link_budget.budget import BudgetLines, SignalBudget
    from siteassess.verdict.cures.what_if import Change
    from siteassess.verdict.verdict import Finding, SatelliteShare, SignalShares

__all__ = ["FORMAT", "assessment_record", "json_text"]

FORMAT = "siteassess-assessment/1"


def json_text(assessment: Assessment) -> str:
    """The record of an assessment as JSON, ending in a newline; the same text for the same input.

    Parameters
    ----------
    assessment : Assessment
        What `assess` returned.
    """
    return as_json(assessment_record(assessment))


def assessment_record(assessment: Assessment) -> dict[str, Any]:
    """Everything found about a site as plain dictionaries, lists, texts and rounded numbers.

    Shares have 6 decimals, decibels 3, degrees 4. A value that does not exist is None, never NaN.

    Parameters
    ----------
    assessment : Assessment
        What `assess` returned.

    Returns
    -------
    dict
        Keys as in docs/methods/report.md.
    """
    from siteassess import __version__

    site, verdict = assessment.site, assessment.verdict
    return {
        "format": FORMAT,
        "tool_version": __version__,
        "site": {
            "name": site.place.name,
            "latitude_deg": _rounded(site.position.latitude_deg, "deg"),
            "longitude_deg": _rounded(site.position.longitude_deg, "deg"),
            "height_m": _rounded(site.position.height_m, "m"),
        },
        "verdict": verdict.outcome,
        "findings": [_finding(finding) for finding in verdict.findings],
        "sky": _sky(assessment),
        "obstacles": [
            {
                "name": obstacle.name,
                "blocked_share_above_mask": _rounded(obstacle.blocked_share_above_mask, "share"),
                "blocked_satellite_time_share": _rounded(obstacle.blocked_satellite_time_share, "share"),
                "lost_satellite_time_share": {
                    signal: _rounded(share, "share")
                    for signal, share in obstacle.lost_satellite_time_share.items()
                },
                "foliage_loss_db": None
                if obstacle.foliage_loss_db is None
                else {model: _rounded(loss, "db") for model, loss in obstacle.foliage_loss_db.items()},
                "behind_loss_db": _rounded(obstacle.behind_loss_db, "db"),
                "grazing_hours_per_day": _rounded(obstacle.grazing_hours_per_day, "count"),
            }
            for obstacle in verdict.obstacles
        ],
        "surveys": [
            {
                "file": survey.file,
                "bearings": survey.bearings,
                "correction_deg": _rounded(survey.correction_deg, "deg"),
                "uncertainty_deg": _rounded(survey.uncertainty_deg, "deg"),
                "instrument_offset_m": _rounded(survey.offset_m, "m"),
                "rows": survey.rows,
                "rows_without_distance": survey.rows_without_distance,
                "parallax_bound_deg": _rounded(survey.parallax_bound_deg, "deg"),
                "parallax_distance_m": _rounded(survey.parallax_distance_m, "m"),
                "remarks": list(survey.remarks),
            }
            for survey in assessment.skyline.surveys
        ],
        "disagreements": disagreement_records(assessment.skyline),
        "sectors": [
            {
                "sector": sector.name,
                "satellite_time_share": _rounded(sector.satellite_time_share, "share"),
                "lost_satellite_time_share": _rounded(sector.lost_satellite_time_share, "share"),
                "blocked_share": _rounded(sector.blocked_share, "share"),
            }
            for sector in verdict.sectors
        ],
        "counts": [
            {
                "system": count.system,
                "above_mask_mean": _rounded(count.above_mask_mean, "count"),
                "usable_mean": _rounded(count.usable_mean, "count"),
                "usable_min": count.usable_min,
                "usable_p05": count.usable_p05,
            }
            for count in verdict.counts
        ],
        "time": time_record(verdict.timeline),
        "signals": [
            _signal(shares, budget)
            for shares, budget in zip(verdict.signals, assessment.budget.signals, strict=True)
        ],
        "satellites": [_satellite(share) for share in verdict.satellites],
        "noise": _noise(assessment),
        "what_if": [_change(change) for change in assessment.what_if],
        "causes": causes_record(assessment),
        "cures": cures_record(assessment),
        "uncertainty": uncertainty_record(assessment),
        "assumptions": list(assumptions(assessment)),
        "cautions": list(CAUTIONS),
    }


def _finding(finding: Finding) -> dict[str, Any]:
    return {
        "criterion": finding.criterion,
        "signal": finding.signal,
        "value": _rounded(finding.value, finding.unit),
        "limit": _rounded(finding.limit, finding.unit),
        "unit": finding.unit,
        "required": finding.required,
        "outcome": finding.outcome,
        "source": finding.source,
        "reason": finding.reason,
    }


def _sky(assessment: Assessment) -> dict[str, float | None]:
    sky = assessment.verdict.sky
    shares = {
        "blocked_share_of_hemisphere": sky.blocked_share_of_hemisphere,
        "blocked_share_above_mask": sky.blocked_share_above_mask,
        "largest_block_share": sky.largest_block_share,
        "foliage_share_above_mask": sky.foliage_share_above_mask,
        "unsurveyed_share": sky.unsurveyed_share,
        "blocked_satellite_time_share": assessment.verdict.blocked_satellite_time_share,
    }
    return {key: _rounded(share, "share") for key, share in shares.items()}


def _signal(shares: SignalShares, budget: SignalBudget) -> dict[str, Any]:
    return {
        "signal": shares.signal,
        "system": budget.signal.system,
        "carrier_hz": _rounded(budget.signal.carrier_hz, "hz"),
        "usable_share": _rounded(shares.usable_share, "share"),
        "usable_share_of_open_sky": _rounded(shares.usable_share_of_open_sky, "share"),
        "weakened_share": _rounded(shares.weakened_share, "share"),
        "lost_share": _rounded(shares.lost_share, "share"),
        "hidden_share": _rounded(shares.hidden_share, "share"),
        "samples_share": _rounded(shares.samples_share, "share"),
        "cn0_dbhz": {
            "p05": _rounded(shares.cn0_p05_dbhz, "db"),
            "median": _rounded(shares.cn0_median_dbhz, "db"),
            "p95": _rounded(shares.cn0_p95_dbhz, "db"),
        },
        "by_elevation": [entry for lines in budget.lines for entry in _by_elevation(budget, lines)],
    }


def _by_elevation(budget: SignalBudget, lines: BudgetLines) -> list[dict[str, Any]]:
    return [
        {
            "elevation_deg": _rounded(elevation_deg, "deg"),
            "orbit_class": lines.orbit_class,
            "received_power_dbw": _rounded(lines.received_power_dbw[index], "db"),
            "tracked_share_db": _rounded(budget.signal.tracked_share_db, "db"),
            "antenna_gain_dbic": _rounded(lines.antenna_gain_dbic[index], "db"),
            "cn0_open_sky_dbhz": _rounded(lines.cn0_open_sky_dbhz[index], "db"),
        }
        for index, elevation_deg in enumerate(lines.elevation_deg)
        if math.isclose(elevation_deg % 5.0, 2.5)  # the other elevations are for the printed budget
    ]


def _satellite(share: SatelliteShare) -> dict[str, Any]:
    return {
        "satellite": share.satellite,
        "system": share.system,
        "orbit_class": share.orbit_class,
        "signal": share.signal,
        "hours_above_mask_per_day": _rounded(share.hours_above_mask_per_day, "count"),
        "usable_share": _rounded(share.usable_share, "share"),
        "received_power_dbw": {
            "min": _rounded(share.received_power_min_dbw, "db"),
            "max": _rounded(share.received_power_max_dbw, "db"),
        },
        "cn0_dbhz": {
            "min": _rounded(share.cn0_min_dbhz, "db"),
            "median": _rounded(share.cn0_median_dbhz, "db"),
            "max": _rounded(share.cn0_max_dbhz, "db"),
        },
    }


def _noise(assessment: Assessment) -> list[dict[str, Any]]:
    """One entry a carrier, in the order of the signals that use it first."""
    by_carrier = {budget.noise.carrier_hz: budget.noise for budget in assessment.budget.signals}
    return [
        {
            "carrier_hz": _rounded(noise.carrier_hz, "hz"),
            "antenna_temperature_k": _rounded(noise.antenna_temperature_k, "k"),
            "antenna_noise_k": {
                "sky": _rounded(noise.antenna.sky_k, "k"),
                "leaves": _rounded(noise.antenna.leaves_k, "k"),
                "obstacles": _rounded(noise.antenna.obstacles_k, "k"),
                "ground": _rounded(noise.antenna.ground_k, "k"),
                "loss": _rounded(noise.antenna.loss_k, "k"),
                "open_site": _rounded(noise.antenna.open_site_k, "k"),
            },
            "surroundings_cost_db": _rounded(noise.surroundings_cost_db, "db"),
            "system_temperature_k": _rounded(noise.system_temperature_k, "k"),
            "noise_figure_db": _rounded(noise.noise_figure_db, "db"),
            "net_gain_db": _rounded(noise.net_gain_db, "db"),
            "gain_over_temperature_db_per_k": _rounded(noise.gain_over_temperature_db_per_k, "db"),
            "supply_voltage_v": _rounded(preamplifier_voltage_v(assessment.site.chain), "v"),
            "parts": [
                {
                    "part": part.part,
                    "gain_db": _rounded(part.gain_db, "db"),
                    "added_temperature_k": _rounded(part.added_temperature_k, "k"),
                }
                for part in noise.parts
            ],
        }
        for noise in by_carrier.values()
    ]


def _change(change: Change) -> dict[str, Any]:
    from siteassess.verdict.cures.what_if import WHAT_IF_ELEVATIONS_DEG

    at_elevations = zip(WHAT_IF_ELEVATIONS_DEG, change.cn0_gain_db, strict=True)
    return {
        "change": change.change,
        "signal": change.signal,
        "cn0_gain_db": {
            f"at_{elevation_deg:g}_deg": _rounded(gain_db, "db") for elevation_deg, gain_db in at_elevations
        },
        "usable_share": _rounded(change.usable_share, "share"),
        "usable_share_now": _rounded(change.usable_share_now, "share"),
    }
