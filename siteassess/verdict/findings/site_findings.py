"""Findings: each criterion held against the site, with one sentence for the reader."""

from typing import Literal

from siteassess.horizon.shares import SkyShares
from siteassess.site_file.model import Mount, Requirements
from siteassess.verdict.criteria import Criterion, limit_or_advice, read_criteria
from siteassess.verdict.verdict import Finding, ObstacleCost, SignalShares

__all__ = ["BY_SITE_FILE", "outcome_of", "site_findings", "sky_finding", "told_apart", "worst_first"]

# Shares are printed with one decimal of a percent; a smaller part of it is not worth naming.
WORTH_NAMING_SHARE = 0.0005
BY_SITE_FILE = "site file"


def site_findings(
    require: Requirements,
    mount: Mount,
    sky: SkyShares,
    signals: tuple[SignalShares, ...],
    obstacles: tuple[ObstacleCost, ...],
) -> tuple[Finding, ...]:
    """All findings of a site, signals first, in the order of the criteria table.

    Parameters
    ----------
    require : Requirements
        Limits of the site file; those that are None turn into advice.
    mount : Mount
        Heights.
    sky : SkyShares
        Solid angles.
    signals, obstacles : tuple
        Shares of satellite-time.
    """
    sky_fraction_above_mask = _hemisphere_share_above(require.elevation_mask_deg)
    values = {
        "max_blocked_sky_share": sky.blocked_share_above_mask * sky_fraction_above_mask,
        "max_block_share": sky.largest_block_share,
        "max_horizon_deg": sky.peak_elevation_deg,
        "min_height_above_roof_m": mount.height_above_roof_m,
    }
    reasons = {
        "max_blocked_sky_share": "Hidden sky above the mask.",
        "max_block_share": _block_reason(sky),
        "max_horizon_deg": f"The solid skyline peaks at azimuth {sky.peak_azimuth_deg:.0f} degrees.",
        "min_height_above_roof_m": "Height of the antenna above the roof as given in the site file.",
    }
    criteria = read_criteria()
    return tuple(
        _signal_finding(criteria["min_usable_share"], require, signal, sky, obstacles) for signal in signals
    ) + tuple(
        sky_finding(key, require, value, sky, reasons[key])
        for key, value in values.items()
        if value is not None
    )


def worst_first(findings: tuple[Finding, ...]) -> tuple[Finding, ...]:
    """Required before advice, missed before unproven before met, then the largest relative shortfall."""
    rank = {"missed": 0, "unproven": 1, "met": 2}
    criteria = read_criteria()
    return tuple(
        sorted(
            findings,
            key=lambda finding: (
                not finding.required,
                rank[finding.outcome],
                -criteria[finding.criterion].shortfall(finding.value, finding.limit),
            ),
        )
    )


def _hemisphere_share_above(elevation_deg: float) -> float:
    """Share of the hemisphere above an elevation: the zone of a sphere."""
    from math import radians, sin

    return 1.0 - sin(radians(elevation_deg))


def outcome_of(missed: bool, depends_on_sky: bool, sky: SkyShares) -> Literal["met", "missed", "unproven"]:
    """What nobody looked at is counted as open, so a miss stands whatever is there, and a pass does not."""
    if missed:
        return "missed"
    return "unproven" if depends_on_sky and sky.unsurveyed_share > 0 else "met"


def _signal_finding(
    criterion: Criterion,
    require: Requirements,
    signal: SignalShares,
    sky: SkyShares,
    obstacles: tuple[ObstacleCost, ...],
) -> Finding:
    limit = require.min_usable_share
    outcome = outcome_of(signal.usable_share < limit, True, sky)
    return Finding(
        criterion=criterion.key,
        signal=signal.signal,
        value=signal.usable_share,
        limit=limit,
        unit=criterion.unit,
        required=True,
        outcome=outcome,
        source=require.asked_by(criterion.key) or BY_SITE_FILE,
        reason=_signal_reason(signal, require, obstacles, sky, outcome),
    )


def _signal_reason(
    signal: SignalShares,
    require: Requirements,
    obstacles: tuple[ObstacleCost, ...],
    sky: SkyShares,
    outcome: str,
) -> str:
    min_cn0_dbhz, limit = require.min_cn0_for(signal.signal), require.min_usable_share
    if signal.hidden_share == signal.samples_share == 0.0:
        return f"No satellite that sends it rises above the mask of {require.elevation_mask_deg:g} degrees."
    usable, asked = told_apart(signal.usable_share, limit)
    sentences = [f"Usable for {usable} of the satellite-time above the mask; {asked} is asked."]
    if signal.open_sky_usable_share < limit:
        sentences.append(
            "Antenna and chain alone miss the limit: even under an open sky only "
            f"{told_apart(signal.open_sky_usable_share, limit)[0]} reaches {min_cn0_dbhz:g} dB-Hz."
        )
    if signal.lost_share >= WORTH_NAMING_SHARE:
        sentences.append(
            f"Obstacles take {signal.lost_share:.1%}{_worst_obstacle(signal.signal, obstacles)}."
        )
    if outcome == "unproven":
        sentences.append(
            f"Holds only if the unsurveyed sky ({sky.unsurveyed_share:.1%} of the sky above the mask) "
            "is open."
        )
    return " ".join(sentences)


def told_apart(share: float, limit: float) -> tuple[str, str]:
    """Both in percent, with as many decimals as it takes to see which is larger."""
    for decimals in (1, 2, 3, 4):
        texts = f"{share:.{decimals}%}", f"{limit:.{decimals}%}"
        if texts[0] != texts[1] or share == limit:
            return texts
    return texts


def _worst_obstacle(signal: str, obstacles: tuple[ObstacleCost, ...]) -> str:
    if not obstacles:
        return ""
    worst = max(obstacles, key=lambda obstacle: obstacle.lost_satellite_time_share[signal])
    taken = worst.lost_satellite_time_share[signal]
    return f", most of it {worst.name} ({taken:.1%})" if taken >= WORTH_NAMING_SHARE else ""


def _block_reason(sky: SkyShares) -> str:
    if sky.largest_block_deg is None:
        return "Nothing solid stands above the mask."
    start, end = sky.largest_block_deg
    return f"It runs clockwise from azimuth {start:.0f} to {end % 360.0:.0f} degrees."


def sky_finding(
    key: str,
    require: Requirements,
    value: float,
    sky: SkyShares,
    reason: str,
    *,
    limit: float | None = None,
    asked_with: str = "",
) -> Finding:
    """A finding against the limit of the site file or its set, or against the published advice.

    Parameters
    ----------
    key : str
        The criterion.
    require : Requirements
        Limits.
    value : float
        What the site reaches.
    sky : SkyShares
        Whether all of it was looked at.
    reason : str
        One sentence or more for the reader.
    limit : float, optional
        Where the key holds more than one number.
    asked_with : str, optional
        Another key that takes part in the finding: who asks for that, asks for this.
    """
    criterion = read_criteria()[key]
    source = require.asked_by(key) or (require.asked_by(asked_with) if asked_with else None)
    limit = limit_or_advice(require, key) if limit is None else limit
    depends_on_sky = criterion.unit != "m"
    return Finding(
        criterion=key,
        signal=None,
        value=value,
        limit=limit,
        unit=criterion.unit,
        required=source is not None,
        outcome=outcome_of(criterion.shortfall(value, limit) > 0, depends_on_sky, sky),
        source=source or criterion.source,
        reason=reason,
    )
