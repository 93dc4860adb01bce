"""How each signal fares, over all its satellites and satellite by satellite."""

import numpy as np
from numpy.typing import NDArray

from siteassess.link_budget.budget import SignalBudget, SkySamples
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.states import SampleStates, share
from siteassess.verdict.verdict import SatelliteShare, SignalShares

__all__ = ["satellite_shares", "signal_shares", "weighted_quantiles"]

FloatArray = NDArray[np.float64]


def signal_shares(budget: SignalBudget, states: SampleStates) -> SignalShares:
    """How one signal fares over all its satellites."""
    usable, open_sky = share(states.usable, states.weight), share(states.usable_open_sky, states.weight)
    p05, median, p95 = weighted_quantiles(
        budget.cn0_dbhz, np.where(states.hidden, 0.0, states.weight), (0.05, 0.5, 0.95)
    )
    return SignalShares(
        signal=budget.signal.name,
        usable_share=usable,
        open_sky_usable_share=open_sky,
        usable_share_of_open_sky=usable / open_sky if open_sky > 0 else None,
        weakened_share=share(states.weakened, states.weight),
        lost_share=share(states.lost, states.weight),
        hidden_share=share(states.hidden, states.weight),
        samples_share=share(~states.hidden, states.weight),
        cn0_p05_dbhz=p05,
        cn0_median_dbhz=median,
        cn0_p95_dbhz=p95,
    )


def weighted_quantiles(
    values: FloatArray, weights: FloatArray, shares: tuple[float, ...]
) -> list[float | None]:
    """Values below which the given shares of the weight lie; None when there is no weight."""
    counted = weights > 0
    if not counted.any():
        return [None] * len(shares)
    order = np.argsort(values[counted])
    cumulative = np.cumsum(weights[counted][order])
    # Each value stands for the middle of its weight, as in Hazen's plotting position (i - 1/2) / n.
    position = (cumulative - weights[counted][order] / 2) / cumulative[-1]
    return [float(value) for value in np.interp(shares, position, values[counted][order])]


def satellite_shares(
    budget: SignalBudget, states: SampleStates, samples: SkySamples, tracks: SkyTracks
) -> tuple[SatelliteShare, ...]:
    """How one signal of each satellite that sends it fares."""
    satellite = samples.satellite[budget.sample]  # ascending, because samples are
    sends = [
        index
        for index, (system, orbit_class) in enumerate(zip(tracks.system, tracks.orbit_class, strict=True))
        if system == budget.signal.system and orbit_class in budget.signal.guaranteed_dbw
    ]
    first, last = np.searchsorted(satellite, sends), np.searchsorted(satellite, sends, side="right")
    return tuple(
        _satellite_share(budget, states, tracks, index, slice(start, stop))
        for index, start, stop in zip(sends, first, last, strict=True)
    )


def _satellite_share(
    budget: SignalBudget, states: SampleStates, tracks: SkyTracks, satellite: int, part: slice
) -> SatelliteShare:
    weight = states.weight[part]
    above = weight > 0
    seen = above & ~states.hidden[part]
    power_dbw, cn0_dbhz = budget.received_power_dbw[part][above], budget.cn0_dbhz[part][seen]
    return SatelliteShare(
        satellite=tracks.satellite[satellite],
        system=tracks.system[satellite],
        orbit_class=tracks.orbit_class[satellite],
        signal=budget.signal.name,
        hours_above_mask_per_day=24.0 * float(weight.sum()),
        usable_share=share(states.usable[part], weight) if above.any() else None,
        received_power_min_dbw=float(power_dbw.min()) if power_dbw.size else None,
        received_power_max_dbw=float(power_dbw.max()) if power_dbw.size else None,
        cn0_min_dbhz=float(cn0_dbhz.min()) if cn0_dbhz.size else None,
        cn0_median_dbhz=float(np.median(cn0_dbhz)) if cn0_dbhz.size else None,
        cn0_max_dbhz=float(cn0_dbhz.max()) if cn0_dbhz.size else None,
    )
