"""What another cable, preamplifier or antenna would change."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.antenna.builtin import builtin_pattern
from siteassess.antenna.gain import depends_on_azimuth, gain_dbic
from siteassess.antenna.mount import mean_mounted_gain_dbic, mounted_gain_dbic
from siteassess.antenna.pattern import GainPattern
from siteassess.decibels import to_db
from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.budget import LinkBudget, SignalBudget, SkySamples
from siteassess.link_budget.chain.changes import chain_changes
from siteassess.link_budget.chain.receive_chain import cascade
from siteassess.link_budget.noise.antenna_noise import noise_of_seen
from siteassess.link_budget.noise.seen_sky import seen_sky
from siteassess.site_file.model import Mount, Site
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.states import WEAKENED_FROM_DB, sample_weights

__all__ = ["WHAT_IF_ELEVATIONS_DEG", "Change", "what_if"]

FloatArray = NDArray[np.float64]

WHAT_IF_ELEVATIONS_DEG = (5.0, 10.0, 30.0)
OTHER_ANTENNAS = ("patch", "ground-plane", "choke-ring")  # closed forms are no antennas


@dataclass(frozen=True, slots=True, kw_only=True)
class Change:
    """What one change of the installation would do for one signal.

    Attributes
    ----------
    change : str
        In words.
    signal : str
        Name of the signal.
    cn0_gain_db : tuple of float
        Gain of C/N0 at `WHAT_IF_ELEVATIONS_DEG`, averaged over azimuth; negative is a loss.
    usable_share, usable_share_now : float
        Usable share with the change and without.
    """

    change: str
    signal: str
    cn0_gain_db: tuple[float, ...]
    usable_share: float
    usable_share_now: float


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Counted:
    """Samples of one signal that count as usable when they are strong enough."""

    margin_db: FloatArray  # of C/N0 above the minimum
    weight: FloatArray
    sample: NDArray[np.int64]  # place among the signal's own
    total: float  # weight of all the signal's samples

    def usable_share(self, gain_db: FloatArray | float) -> float:
        if self.total <= 0.0:
            return 0.0
        weak = self.weight[self.margin_db < -np.asarray(gain_db)]  # mostly few
        return float(self.weight.sum() - weak.sum()) / self.total


def what_if(
    site: Site, skyline: Skyline, pattern: GainPattern, tracks: SkyTracks, budget: LinkBudget
) -> tuple[Change, ...]:
    """Changes of cable, preamplifier and antenna, one at a time, all else as it is.

    A change of the chain acts through the noise alone. Another antenna acts through its gain and through the
    noise it picks up at this place, at the same heading and tilt.

    Parameters
    ----------
    site : Site
        Mount, and the chain with all its values.
    skyline, pattern, tracks, budget : Skyline, GainPattern, SkyTracks, LinkBudget
        The assessment as it stands.

    Returns
    -------
    tuple of Change
        Change by change, and within one by signal.
    """
    weight = sample_weights(budget.samples, tracks)
    counted = [
        _counted(signal, budget, weight, count_weakened=site.require.count_weakened)
        for signal in budget.signals
    ]
    return (
        *_chain_changes(site, budget.signals, counted),
        *_antenna_changes(site, skyline, pattern, budget, counted),
    )


def _counted(
    signal: SignalBudget, budget: LinkBudget, weight: FloatArray, *, count_weakened: bool
) -> _Counted:
    counts = budget.samples.hiding_obstacle[signal.sample] < 0
    if not count_weakened:
        counts &= signal.obstacle_loss_db < WEAKENED_FROM_DB
    own = weight[signal.sample]
    counts &= own > 0.0
    return _Counted(
        margin_db=signal.cn0_dbhz[counts] - signal.min_cn0_dbhz,
        weight=own[counts],
        sample=np.flatnonzero(counts),
        total=float(own.sum()),
    )


def _chain_changes(
    site: Site, signals: Sequence[SignalBudget], counted: Sequence[_Counted]
) -> Iterator[Change]:
    for words, chain in chain_changes(site.chain):
        for signal, samples in zip(signals, counted, strict=True):
            noise = signal.noise
            system_k = noise.antenna_temperature_k + cascade(chain, noise.carrier_hz).temperature_k
            gain_db = float(to_db(noise.system_temperature_k / system_k))
            yield Change(
                change=words,
                signal=signal.signal.name,
                cn0_gain_db=(gain_db,) * len(WHAT_IF_ELEVATIONS_DEG),
                usable_share=samples.usable_share(gain_db),
                usable_share_now=samples.usable_share(0.0),
            )


def _antenna_changes(
    site: Site,
    skyline: Skyline,
    pattern: GainPattern,
    budget: LinkBudget,
    counted: Sequence[_Counted],
) -> Iterator[Change]:
    carriers_hz = {signal.signal.carrier_hz for signal in budget.signals}
    seen = {carrier_hz: seen_sky(skyline, carrier_hz) for carrier_hz in carriers_hz}
    for name in OTHER_ANTENNAS:
        if name == pattern.name:
            continue
        other = builtin_pattern(name)
        quieter_db = {}
        for signal in budget.signals:
            noise = signal.noise
            if noise.carrier_hz not in quieter_db:
                antenna = noise_of_seen(other, site.mount, seen[noise.carrier_hz], noise.carrier_hz)
                system_k = antenna.temperature_k + noise.chain_temperature_k
                quieter_db[noise.carrier_hz] = float(to_db(noise.system_temperature_k / system_k))
        for signal, samples in zip(budget.signals, counted, strict=True):
            carrier_hz = signal.noise.carrier_hz
            more_db = quieter_db[carrier_hz]
            at_elevations_db = _mean_difference_db(site.mount, pattern, other, carrier_hz)
            least_db = _least_difference_db(site.mount, pattern, other, carrier_hz) + more_db
            close = np.flatnonzero(samples.margin_db < -least_db)  # no other sample can be lost
            gain_db = np.full(samples.margin_db.size, least_db)
            gain_db[close] = more_db + _sample_difference_db(
                site.mount, other, budget.samples, signal, samples.sample[close]
            )
            yield Change(
                change=f"antenna: {name}",
                signal=signal.signal.name,
                cn0_gain_db=tuple((at_elevations_db + more_db).tolist()),
                usable_share=samples.usable_share(gain_db),
                usable_share_now=samples.usable_share(0.0),
            )


def _mean_difference_db(
    mount: Mount, pattern: GainPattern, other: GainPattern, carrier_hz: float
) -> FloatArray:
    """Gain of another antenna over that of this one at the elevations of the table."""
    elevations_deg = np.array(WHAT_IF_ELEVATIONS_DEG)
    return mean_mounted_gain_dbic(other, mount, elevations_deg, carrier_hz) - mean_mounted_gain_dbic(
        pattern, mount, elevations_deg, carrier_hz
    )


def _least_difference_db(mount: Mount, pattern: GainPattern, other: GainPattern, carrier_hz: float) -> float:
    """What the other antenna gains over this one above the horizon at least; minus infinity if not known.

    Where both depend on elevation alone, the difference is linear between the elevations of their tables.
    """
    elevations_deg = np.union1d(pattern.elevation_deg, other.elevation_deg)
    has_step = any((np.diff(one.elevation_deg) == 0.0).any() for one in (pattern, other))
    if mount.tilt_deg or has_step or depends_on_azimuth(pattern) or depends_on_azimuth(other):
        return -np.inf
    above_deg = np.append(elevations_deg[elevations_deg > 0.0], 0.0)
    return float(
        np.min(gain_dbic(other, 0.0, above_deg, carrier_hz) - gain_dbic(pattern, 0.0, above_deg, carrier_hz))
    )


def _sample_difference_db(
    mount: Mount, other: GainPattern, samples: SkySamples, signal: SignalBudget, own: NDArray[np.int64]
) -> FloatArray:
    """Gain of another antenna over that of this one at samples, given by their place among the signal's."""
    at = signal.sample[own]
    toward_dbic = mounted_gain_dbic(
        other, mount, samples.azimuth_deg[at], samples.elevation_deg[at], signal.signal.carrier_hz
    )
    return np.asarray(toward_dbic - signal.antenna_gain_dbic[own])
