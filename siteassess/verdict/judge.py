"""From link budget and solid angles to findings and one word."""

from typing import Literal

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.shares import SkyShares, sky_shares
from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.budget import LinkBudget
from siteassess.site_file.model import Requirements, Site
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.causes import obstacle_costs, sector_shares
from siteassess.verdict.findings.chain import chain_findings
from siteassess.verdict.findings.growth import growth_findings
from siteassess.verdict.findings.near import near_findings
from siteassess.verdict.findings.over_time import time_findings
from siteassess.verdict.findings.site_findings import site_findings, worst_first
from siteassess.verdict.shares import satellite_shares, signal_shares
from siteassess.verdict.states import SampleStates, sample_states, sample_weights, share
from siteassess.verdict.time.counts import joint_samples, usable_counts
from siteassess.verdict.time.over_time import over_time
from siteassess.verdict.verdict import Finding, SignalShares, Verdict

__all__ = ["judge"]

FloatArray = NDArray[np.float64]


def judge(
    site: Site, skyline: Skyline, tracks: SkyTracks, budget: LinkBudget, later: LinkBudget | None = None
) -> Verdict:
    """Hold the site against what its file requires, and against the published advice.

    Parameters
    ----------
    site : Site
        Requirements.
    skyline : Skyline
        What hides the sky.
    tracks : SkyTracks
        Where the satellites stand.
    budget : LinkBudget
        How strong what arrives is.
    later : LinkBudget or None
        The same with grown trees, where the site file asks for it.

    Returns
    -------
    Verdict
        The one word, the findings behind it, and all shares.
    """
    sky = sky_shares(skyline, site.require.elevation_mask_deg)
    weight = sample_weights(budget.samples, tracks)
    states = _states(budget, weight, site.require)
    signals = _signals(budget, states)
    growth: tuple[Finding, ...] = ()
    if later is not None:
        signals_later = _signals(later, _states(later, weight, site.require))
        growth = growth_findings(site.require, signals, signals_later, sky)
    obstacles = obstacle_costs(skyline, sky, budget.samples, weight, states)
    noises = tuple({signal.noise.carrier_hz: signal.noise for signal in budget.signals}.values())
    joint = joint_samples(budget, tracks, states)
    timeline = over_time(joint, budget.samples, site.require, site.sky.step_s)
    findings = worst_first(
        (
            *site_findings(site.require, site.mount, sky, signals, obstacles),
            *near_findings(site.require, site.mount, skyline, sky),
            *time_findings(site.require, timeline, sky),
            *growth,
            *chain_findings(site.require, site.chain, noises, site.antenna.unwanted_level_dbm),
        )
    )
    return Verdict(
        outcome=_outcome(findings, sky),
        findings=findings,
        sky=sky,
        blocked_satellite_time_share=share(budget.samples.hidden, weight),
        signals=signals,
        satellites=tuple(
            satellite
            for signal in budget.signals
            for satellite in satellite_shares(signal, states[signal.signal.name], budget.samples, tracks)
        ),
        obstacles=obstacles,
        sectors=sector_shares(sky, budget, states),
        counts=usable_counts(joint.systems, timeline.in_view, timeline.usable),
        timeline=timeline,
    )


def _states(budget: LinkBudget, weight: FloatArray, require: Requirements) -> dict[str, SampleStates]:
    return {
        signal.signal.name: sample_states(
            signal, budget.samples, weight, count_weakened=require.count_weakened
        )
        for signal in budget.signals
    }


def _signals(budget: LinkBudget, states: dict[str, SampleStates]) -> tuple[SignalShares, ...]:
    return tuple(signal_shares(signal, states[signal.signal.name]) for signal in budget.signals)


def _outcome(findings: tuple[Finding, ...], sky: SkyShares) -> Literal["pass", "fail", "unproven"]:
    """Fail when a required criterion is missed; pass only when all was looked at that they depend on."""
    required = [finding.outcome for finding in findings if finding.required]
    if "missed" in required:
        return "fail"
    return "unproven" if sky.unsurveyed_share > 0 or "unproven" in required else "pass"
