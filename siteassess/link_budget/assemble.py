"""From skyline, antenna and tracks to the link budget of every sample."""

from dataclasses import replace
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from siteassess.antenna.mount import mean_mounted_gain_dbic, mounted_gain_dbic
from siteassess.antenna.pattern import GainPattern
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import hiding_obstacle, is_unsurveyed
from siteassess.link_budget.budget import BudgetLines, LinkBudget, SignalBudget, SkySamples
from siteassess.link_budget.chain.receive_chain import ChainNoise
from siteassess.link_budget.noise.chain_noise import chain_noise
from siteassess.link_budget.obstacles.way_in import skyline_loss_db
from siteassess.link_budget.power.received import received_power
from siteassess.link_budget.power.signals import Signal, read_signals
from siteassess.site_file.model import Site
from siteassess.sky_tracks.refraction import apparent_elevation_deg
from siteassess.sky_tracks.tracks import SkyTracks

__all__ = ["LINE_ELEVATIONS_DEG", "PRINTED_ELEVATIONS_DEG", "link_budget"]

FloatArray = NDArray[np.float64]

PRINTED_ELEVATIONS_DEG = np.array([5.0, 10.0, 30.0, 60.0, 90.0])
# Not np.union1d, which would load numpy.ma at every start.
LINE_ELEVATIONS_DEG = np.sort(np.concatenate([np.arange(2.5, 90.0, 5.0), PRINTED_ELEVATIONS_DEG]))
# Received power against elevation is smooth: read off a grid, it is within 0.001 dB of the formula.
POWER_GRID_DEG = np.linspace(-2.0, 90.0, 921)


def link_budget(site: Site, skyline: Skyline, pattern: GainPattern, tracks: SkyTracks) -> LinkBudget:
    """Link budget of every signal of the site file toward every satellite above the mask.

    Parameters
    ----------
    site : Site
        Mount, chain, signals and limits.
    skyline : Skyline
        What hides or weakens.
    pattern : GainPattern
        Gain in the antenna's own frame.
    tracks : SkyTracks
        Where the satellites stand.

    Returns
    -------
    LinkBudget
        Samples above the mask, and one budget a signal.
    """
    samples = sky_samples(skyline, tracks, site.require.elevation_mask_deg, _antenna_height_m(site))
    signals = [_as_tracked(read_signals()[name], site.sky.tracked) for name in site.sky.signals]
    noise_by_carrier = {
        carrier_hz: chain_noise(site.chain, pattern, site.mount, skyline, carrier_hz)
        for carrier_hz in {signal.carrier_hz for signal in signals}
    }
    return LinkBudget(
        samples=samples,
        signals=tuple(
            _signal_budget(
                signal, noise_by_carrier[signal.carrier_hz], site, skyline, pattern, tracks, samples
            )
            for signal in signals
        ),
    )


def _as_tracked(signal: Signal, tracked: Literal["pilot", "whole-signal"]) -> Signal:
    """The signal as the receiver tracks it: the component of the table, or all of it."""
    if tracked == "pilot":
        return signal
    return replace(signal, tracked_component="whole signal", tracked_share_db=0.0)


def sky_samples(skyline: Skyline, tracks: SkyTracks, mask_deg: float, height_m: float) -> SkySamples:
    """Every satellite position at or above the mask, and what stands in its direct line.

    The mask is held against the geometric elevation, the skyline against the apparent one, because a surveyed
    outline has been seen through the same air.
    """
    satellite, epoch = np.nonzero(tracks.elevation_deg >= mask_deg)
    azimuth_deg = tracks.azimuth_deg[satellite, epoch]
    elevation_deg = tracks.elevation_deg[satellite, epoch]
    apparent_deg = apparent_elevation_deg(elevation_deg, height_m)
    hiding = hiding_obstacle(skyline, azimuth_deg, apparent_deg)
    return SkySamples(
        satellite=satellite,
        epoch=epoch,
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        apparent_elevation_deg=apparent_deg,
        counts_for_shares=epoch < tracks.own_epochs[satellite],
        hiding_obstacle=hiding,
        unsurveyed=is_unsurveyed(skyline, azimuth_deg, apparent_deg) & (hiding < 0),
    )


def _antenna_height_m(site: Site) -> float:
    return site.position.height_m + site.mount.phase_centre_height_m


def _signal_budget(
    signal: Signal,
    noise: ChainNoise,
    site: Site,
    skyline: Skyline,
    pattern: GainPattern,
    tracks: SkyTracks,
    samples: SkySamples,
) -> SignalBudget:
    sends = np.array(
        [
            system == signal.system and orbit_class in signal.guaranteed_dbw
            for system, orbit_class in zip(tracks.system, tracks.orbit_class, strict=True)
        ],
        dtype=bool,
    )
    sample = np.flatnonzero(sends[samples.satellite])
    azimuth_deg, elevation_deg = samples.azimuth_deg[sample], samples.elevation_deg[sample]
    received_dbw = _received_power_dbw(
        signal, site.sky.power, tracks, samples.satellite[sample], elevation_deg
    )
    gain_dbic = mounted_gain_dbic(pattern, site.mount, azimuth_deg, elevation_deg, signal.carrier_hz)
    loss_db, costly_obstacle = skyline_loss_db(
        skyline, azimuth_deg, samples.apparent_elevation_deg[sample], signal.carrier_hz
    )
    cn0_open_dbhz = received_dbw + gain_dbic + _receiver_terms_db(signal, noise)
    return SignalBudget(
        signal=signal,
        noise=noise,
        min_cn0_dbhz=site.require.min_cn0_for(signal.name),
        sample=sample,
        received_power_dbw=received_dbw,
        antenna_gain_dbic=gain_dbic,
        obstacle_loss_db=loss_db,
        cn0_dbhz=cn0_open_dbhz - loss_db,
        cn0_open_sky_dbhz=cn0_open_dbhz,
        costly_obstacle=costly_obstacle,
        lines=tuple(
            _lines(signal, orbit_class, noise, site, pattern, radius_m)
            for orbit_class, radius_m in _class_radii_m(signal, tracks).items()
        ),
    )


def _receiver_terms_db(signal: Signal, noise: ChainNoise) -> float:
    """What turns power at the antenna port into C/N0 of the tracked component [dB(1/W/Hz)]."""
    return signal.tracked_share_db - noise.noise_density_dbw_per_hz - noise.implementation_loss_db


def _class_radii_m(signal: Signal, tracks: SkyTracks) -> dict[str, float]:
    """Orbit radius of each orbit class that sends the signal, in the order of the satellites."""
    radii_m: dict[str, float] = {}
    for system, orbit_class, radius_m in zip(tracks.system, tracks.orbit_class, tracks.radius_m, strict=True):
        if system == signal.system and orbit_class in signal.guaranteed_dbw:
            radii_m.setdefault(orbit_class, float(radius_m))
    return radii_m


def _received_power_dbw(
    signal: Signal,
    power: Literal["guaranteed", "typical"],
    tracks: SkyTracks,
    satellite: NDArray[np.int64],
    elevation_deg: FloatArray,
) -> FloatArray:
    received_dbw = np.empty(len(elevation_deg))
    orbit_class_of = np.array(tracks.orbit_class)[satellite]
    for orbit_class, radius_m in _class_radii_m(signal, tracks).items():
        grid = received_power(signal, orbit_class, POWER_GRID_DEG, radius_m, power=power).received_power_dbw
        of_class = orbit_class_of == orbit_class
        received_dbw[of_class] = np.interp(elevation_deg[of_class], POWER_GRID_DEG, grid)
    return received_dbw


def _lines(
    signal: Signal, orbit_class: str, noise: ChainNoise, site: Site, pattern: GainPattern, radius_m: float
) -> BudgetLines:
    terms = received_power(signal, orbit_class, LINE_ELEVATIONS_DEG, radius_m, power=site.sky.power)
    gain_dbic = mean_mounted_gain_dbic(pattern, site.mount, LINE_ELEVATIONS_DEG, signal.carrier_hz)
    return BudgetLines(
        orbit_class=orbit_class,
        elevation_deg=LINE_ELEVATIONS_DEG,
        eirp_dbw=terms.eirp_dbw,
        spreading_loss_db=terms.spreading_loss_db,
        atmosphere_loss_db=terms.atmosphere_loss_db,
        received_power_dbw=terms.received_power_dbw,
        antenna_gain_dbic=gain_dbic,
        cn0_open_sky_dbhz=terms.received_power_dbw + gain_dbic + _receiver_terms_db(signal, noise),
    )
