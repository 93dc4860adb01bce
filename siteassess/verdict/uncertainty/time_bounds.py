"""What the findings on satellites at once come to in a bad and in a good draw."""

from collections.abc import Iterator, Sequence
from dataclasses import replace

import numpy as np
from numpy.typing import NDArray

from siteassess.link_budget.budget import LinkBudget, SignalBudget, SkySamples
from siteassess.site_file.model import Site
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.findings.over_time import time_findings
from siteassess.verdict.states import sample_states, sample_weights
from siteassess.verdict.time.counts import joint_samples
from siteassess.verdict.time.over_time import over_time
from siteassess.verdict.uncertainty.drawn_site import DrawnSite
from siteassess.verdict.uncertainty.draws import Draws, only
from siteassess.verdict.uncertainty.possible_values import pieces, tops_deg
from siteassess.verdict.uncertainty.taken_sky import COLUMN_DEG, COLUMNS
from siteassess.verdict.verdict import Finding, Verdict

__all__ = ["time_bounds"]

BoolArray = NDArray[np.bool_]
FloatArray = NDArray[np.float64]


def time_bounds(
    site: Site,
    tracks: SkyTracks,
    budget: LinkBudget,
    verdict: Verdict,
    model: DrawnSite,
    draws: Sequence[Draws],
) -> Iterator[tuple[Finding, float, float]]:
    """Findings on satellites at once, each with its smallest and its largest value in some draws.

    Parameters
    ----------
    site, tracks, budget, verdict : Site, SkyTracks, LinkBudget, Verdict
        The assessment as it stands.
    model : DrawnSite
        What the draws act on.
    draws : sequence of Draws
        Of one draw each.
    """
    weight = sample_weights(budget.samples, tracks)
    weakened = site.require.count_weakened
    states = {
        signal.signal.name: sample_states(signal, budget.samples, weight, count_weakened=weakened)
        for signal in budget.signals
    }
    as_found = [
        _usable(signal, budget.samples, model, index, only(draws[0], None))
        for index, signal in enumerate(budget.signals)
    ]
    found: list[dict[str, float]] = []
    for draw in draws:
        moved = {}
        for index, signal in enumerate(budget.signals):
            before, after = as_found[index], _usable(signal, budget.samples, model, index, draw)
            own = states[signal.signal.name]
            # As judged, but for the samples on which the draw and no error at all differ.
            moved[signal.signal.name] = replace(own, usable=np.where(before == after, own.usable, after))
        joint = joint_samples(budget, tracks, moved)
        timeline = over_time(joint, budget.samples, site.require, site.sky.step_s)
        findings = time_findings(site.require, timeline, verdict.sky)
        found.append({finding.criterion: finding.value for finding in findings})
    for finding in verdict.findings:
        if finding.criterion in found[0]:
            values = [one[finding.criterion] for one in found]
            yield finding, min(values), max(values)


def _usable(
    signal: SignalBudget, samples: SkySamples, model: DrawnSite, index: int, draw: Draws
) -> BoolArray:
    carrier_hz = signal.signal.carrier_hz
    gain_db = float(draw.gain_db[0] + draw.power_db[0, index])
    column = np.minimum((samples.azimuth_deg[signal.sample] / COLUMN_DEG).astype(np.int64), COLUMNS - 1)
    elevation_deg = samples.apparent_elevation_deg[signal.sample]
    usable = signal.cn0_open_sky_dbhz + gain_db >= signal.min_cn0_dbhz
    # Of an edge shared between two turns the case with the larger weight stands for both.
    cases = tops_deg(model.movers, carrier_hz, model.floor_deg, draw)
    _, top_deg = max(cases, key=lambda case: 1.0 if case[0] is None else float(case[0][0, 0]))
    usable &= elevation_deg >= top_deg[0, column]
    for low_deg, high_deg in _hanging(model, carrier_hz, draw):
        usable &= (elevation_deg < low_deg[column]) | (elevation_deg >= high_deg[column])
    return np.asarray(usable, dtype=np.bool_)


def _hanging(model: DrawnSite, carrier_hz: float, draw: Draws) -> Iterator[tuple[FloatArray, FloatArray]]:
    """From and to of what is taken over open sky, by column, as often as columns hold more than one piece."""
    for mover in model.movers:
        for weight, at, low_deg, high_deg in pieces(mover, carrier_hz, draw):
            # Of a piece shared between two columns the larger part stands for all of it.
            rest = np.flatnonzero(weight[0] >= 0.5)
            while rest.size:
                column, now = np.unique(at[0, rest], return_index=True)
                low, high = np.full((2, COLUMNS), 90.0)
                low[column], high[column] = low_deg[0, rest[now]], high_deg[0, rest[now]]
                yield low, high
                rest = np.delete(rest, now)
