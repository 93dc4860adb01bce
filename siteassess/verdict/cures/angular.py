"""The angular form: shares of satellite-time as sums over directions of the sky.

Whatever changes only the skyline or a limit costs one look at these directions in place of one at every
satellite position. Edges and limits that run through a direction's cell take the part of it that lies on
their far side.
"""

from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from siteassess.antenna.energy import efficiency
from siteassess.antenna.mount import mounted_gain_dbic
from siteassess.antenna.pattern import GainPattern
from siteassess.link_budget.budget import LinkBudget, SignalBudget
from siteassess.link_budget.chain.receive_chain import ChainNoise
from siteassess.link_budget.noise.antenna_noise import ring_gain
from siteassess.link_budget.noise.brightness import sky_brightness_k
from siteassess.link_budget.noise.seen_sky import RING_DEG
from siteassess.link_budget.power.received import received_power
from siteassess.link_budget.power.signals import Signal
from siteassess.site_file.model import Site
from siteassess.sky_tracks.refraction import apparent_elevation_deg
from siteassess.sky_tracks.thinned import ThinnedSky, thinned_sky
from siteassess.sky_tracks.tracks import SkyTracks

__all__ = ["AngularForm", "AngularSignal", "NoiseForm", "angular_form", "taken"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]

# Height matters less than width, since an edge that crosses a cell takes its part of the height. On 50 random
# sites these cells kept within 0.09 % of satellite-time of whole budgets; 1 degree of width, within 0.21 %.
RING_HEIGHT_DEG = 0.5
SECTOR_WIDTH_DEG = 0.5
THINNEST_DEG, THINNEST_DB = 1e-9, 1e-9


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class NoiseForm:
    """What it takes to find the noise at one carrier for another skyline.

    Attributes
    ----------
    taken_in : array, shape (ring, sector)
        What each piece of sky adds to the antenna's gain over the sphere.
    sky_k : array, shape (ring,)
        Brightness of the open sky.
    chain_k, system_k : float
        Noise of the chain, and of antenna and chain at the present skyline.
    """

    taken_in: FloatArray
    sky_k: FloatArray
    chain_k: float
    system_k: float


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class AngularSignal:
    """One signal in the angular form; arrays have shape (n,).

    Attributes
    ----------
    signal : Signal
        Row of the signal table.
    min_cn0_dbhz : float
        What is asked of it.
    direction : integer array
        Which directions send it, ascending.
    cn0_open_sky_dbhz : array
        C/N0 under an open sky with the noise of the present skyline.
    half_range_db : array
        How far C/N0 within the cell lies above and below that.
    """

    signal: Signal
    min_cn0_dbhz: float
    direction: IndexArray
    cn0_open_sky_dbhz: FloatArray
    half_range_db: FloatArray


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class AngularForm:
    """A site's satellite-time, direction by direction; arrays have shape (direction,).

    Attributes
    ----------
    azimuth_deg, elevation_deg, apparent_elevation_deg : array
        Directions, from the horizon up.
    half_height_deg : array
        How far the satellite positions of a direction lie above and below it.
    weight : array
        Satellite-time.
    mask_deg : float
        The site's elevation mask.
    count_weakened : bool
        As in the site file.
    signals : tuple of AngularSignal
        In the order of the site file.
    noise : dict of float to NoiseForm
        By carrier.
    """

    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    apparent_elevation_deg: FloatArray
    half_height_deg: FloatArray
    weight: FloatArray
    mask_deg: float
    count_weakened: bool
    signals: tuple[AngularSignal, ...]
    noise: dict[float, NoiseForm]


def angular_form(
    site: Site,
    pattern: GainPattern,
    tracks: SkyTracks,
    budget: LinkBudget,
    *,
    ring_deg: float = RING_HEIGHT_DEG,
    sector_deg: float = SECTOR_WIDTH_DEG,
) -> AngularForm:
    """The angular form of an assessment.

    Parameters
    ----------
    site, pattern, tracks, budget : Site, GainPattern, SkyTracks, LinkBudget
        The assessment as it stands.
    ring_deg, sector_deg : float
        Height of the cells, and about how wide they are on the sky.
    """
    mask_deg = site.require.elevation_mask_deg
    edges_deg = np.append(np.arange(0.0, 90.0, ring_deg), 90.0 + 1e-6)
    edges_deg = np.unique(np.append(edges_deg, mask_deg))
    around = 360.0 * np.cos(np.deg2rad(0.5 * (edges_deg[1:] + edges_deg[:-1])))
    sky = thinned_sky(tracks, edges_deg, 360.0 / np.maximum(np.rint(around / sector_deg), 1.0))
    height_m = site.position.height_m + site.mount.phase_centre_height_m
    carriers = {signal.noise.carrier_hz: signal.noise for signal in budget.signals}
    return AngularForm(
        azimuth_deg=sky.azimuth_deg,
        elevation_deg=sky.elevation_deg,
        apparent_elevation_deg=apparent_elevation_deg(sky.elevation_deg, height_m),
        half_height_deg=np.maximum(np.sqrt(3.0) * sky.spread_deg, THINNEST_DEG),  # as if spread evenly
        weight=sky.weight,
        mask_deg=mask_deg,
        count_weakened=site.require.count_weakened,
        signals=tuple(_angular_signal(signal, site, pattern, sky) for signal in budget.signals),
        noise={carrier_hz: _noise_form(noise, site, pattern) for carrier_hz, noise in carriers.items()},
    )


def taken(form: AngularForm, which: NDArray[np.bool_]) -> AngularForm:
    """The part of an angular form that some of its directions make up; `which` has shape (direction,)."""
    place = np.cumsum(which) - 1
    signals = []
    for one in form.signals:
        own = which[one.direction]
        signals.append(
            replace(
                one,
                direction=place[one.direction[own]],
                cn0_open_sky_dbhz=one.cn0_open_sky_dbhz[own],
                half_range_db=one.half_range_db[own],
            )
        )
    return replace(
        form,
        azimuth_deg=form.azimuth_deg[which],
        elevation_deg=form.elevation_deg[which],
        apparent_elevation_deg=form.apparent_elevation_deg[which],
        half_height_deg=form.half_height_deg[which],
        weight=form.weight[which],
        signals=tuple(signals),
    )


def _angular_signal(budget: SignalBudget, site: Site, pattern: GainPattern, sky: ThinnedSky) -> AngularSignal:
    signal, noise = budget.signal, budget.noise
    lines = {line.orbit_class: line for line in budget.lines}
    sends = np.array(
        [
            system == signal.system and orbit_class in lines
            for system, orbit_class in zip(sky.system, sky.orbit_class, strict=True)
        ],
        dtype=np.bool_,
    )
    direction = np.flatnonzero(sends[sky.group])
    group, elevation_deg = sky.group[direction], sky.elevation_deg[direction]
    received_dbw, slope_db_per_deg = np.empty((2, len(direction)))
    for index in np.flatnonzero(sends):
        own, line = group == index, lines[sky.orbit_class[index]]
        terms = received_power(
            signal, line.orbit_class, elevation_deg[own], sky.radius_m[index], power=site.sky.power
        )
        received_dbw[own] = terms.received_power_dbw
        slope = np.abs(np.gradient(line.cn0_open_sky_dbhz, line.elevation_deg))
        slope_db_per_deg[own] = np.interp(elevation_deg[own], line.elevation_deg, slope)
    gain_dbic = mounted_gain_dbic(
        pattern, site.mount, sky.azimuth_deg[direction], elevation_deg, signal.carrier_hz
    )
    receiver_db = signal.tracked_share_db - noise.noise_density_dbw_per_hz - noise.implementation_loss_db
    return AngularSignal(
        signal=signal,
        min_cn0_dbhz=budget.min_cn0_dbhz,
        direction=direction,
        cn0_open_sky_dbhz=received_dbw + gain_dbic + receiver_db,
        half_range_db=np.maximum(np.sqrt(3.0) * slope_db_per_deg * sky.spread_deg[direction], THINNEST_DB),
    )


def _noise_form(noise: ChainNoise, site: Site, pattern: GainPattern) -> NoiseForm:
    carrier_hz = noise.carrier_hz
    return NoiseForm(
        taken_in=ring_gain(pattern, site.mount, carrier_hz) / max(1.0, efficiency(pattern, carrier_hz)),
        sky_k=sky_brightness_k(carrier_hz, RING_DEG),
        chain_k=noise.chain_temperature_k,
        system_k=noise.system_temperature_k,
    )
