"""Noise at the antenna port: what the antenna picks up, and what the chain adds."""

from collections.abc import Sequence

import numpy as np
from numpy.typing import NDArray

from siteassess.antenna.energy import efficiency
from siteassess.antenna.mount import mounted_cross_gain_dbic, mounted_gain_dbic
from siteassess.antenna.pattern import GainPattern
from siteassess.constants import BOLTZMANN_J_PER_K, REFERENCE_TEMPERATURE_K
from siteassess.decibels import to_db, to_ratio
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import outline_elevation_deg
from siteassess.link_budget.brightness import sky_brightness_k
from siteassess.link_budget.receive_chain import ChainNoise, cascade, part_noises, receiver_loss_db
from siteassess.site_file.model import Mount, Part

__all__ = ["RING_DEG", "antenna_temperature_k", "chain_noise", "open_sky_share", "seen_temperature_k"]

FloatArray = NDArray[np.float64]

# Rings of sky between these elevations: finer near the horizon, where the air's brightness rises fast.
RING_EDGES_DEG = np.concatenate([np.arange(0.0, 5.0, 0.25), np.arange(5.0, 91.0)])
RING_DEG = (RING_EDGES_DEG[:-1] + RING_EDGES_DEG[1:]) / 2.0
RING_SHARE = np.diff(np.sin(np.deg2rad(RING_EDGES_DEG))) / 2.0  # of the whole sphere
SECTORS = 180
OUTLINE_POINTS = 4  # in each sector


def chain_noise(
    chain: Sequence[Part], pattern: GainPattern, mount: Mount, skyline: Skyline, carrier_hz: float
) -> ChainNoise:
    """Noise of a site at one carrier, referred to the antenna port.

    Parameters
    ----------
    chain : sequence of Part
        From the antenna port on; the last part is the receiver.
    pattern, mount : GainPattern, Mount
        The antenna and how it stands.
    skyline : Skyline
        What hides the sky.
    carrier_hz : float
        Carrier [Hz].

    References
    ----------
    [Friis 1944] Noise figures of radio receivers.
    """
    parts = cascade(chain, carrier_hz)
    antenna_k = antenna_temperature_k(pattern, mount, skyline, carrier_hz)
    system_k = antenna_k + parts.temperature_k
    zenith_dbic = float(mounted_gain_dbic(pattern, mount, 0.0, 90.0, carrier_hz))
    return ChainNoise(
        carrier_hz=carrier_hz,
        antenna_temperature_k=antenna_k,
        chain_temperature_k=parts.temperature_k,
        system_temperature_k=system_k,
        noise_figure_db=parts.noise_figure_db,
        net_gain_db=parts.net_gain_db,
        gain_over_temperature_db_per_k=zenith_dbic - float(to_db(system_k)),
        noise_density_dbw_per_hz=float(to_db(BOLTZMANN_J_PER_K * system_k)),
        implementation_loss_db=receiver_loss_db(chain[-1], carrier_hz),
        antenna_efficiency=efficiency(pattern, carrier_hz),
        parts=part_noises(chain, carrier_hz),
    )


def antenna_temperature_k(pattern: GainPattern, mount: Mount, skyline: Skyline, carrier_hz: float) -> float:
    """Noise temperature [K] that the antenna delivers.

    Ground, solid obstacles, the antenna's own loss and, where no cross-polar gain is known, all the power
    that is missing, are at 290 K; the rest is open sky. Leaves and free-hanging obstacles count as open sky.
    """
    share = open_sky_share(pattern, mount, skyline, carrier_hz)
    return seen_temperature_k(share, sky_brightness_k(carrier_hz, RING_DEG), REFERENCE_TEMPERATURE_K)


def open_sky_share(pattern: GainPattern, mount: Mount, skyline: Skyline, carrier_hz: float) -> FloatArray:
    """Share of all that the antenna takes in which comes from open sky, ring by ring.

    Returns
    -------
    array, shape (ring,)
        One element for each of `RING_DEG`; what the sum lacks to 1 comes from ground, obstacles and loss.
    """
    azimuth_deg = (np.arange(SECTORS) + 0.5) * (360.0 / SECTORS)
    co_dbic = mounted_gain_dbic(pattern, mount, azimuth_deg, RING_DEG[:, np.newaxis], carrier_hz)
    cross_dbic = mounted_cross_gain_dbic(pattern, mount, azimuth_deg, RING_DEG[:, np.newaxis], carrier_hz)
    taken_in = to_ratio(co_dbic) + to_ratio(cross_dbic)
    open_share = RING_SHARE * np.mean(taken_in * _open_part(skyline), axis=1)
    # A measured pattern may add up to slightly more than 1; it is then taken as one without loss.
    return np.asarray(open_share / max(1.0, efficiency(pattern, carrier_hz)))


def seen_temperature_k(open_share: FloatArray, sky_k: FloatArray, surroundings_k: float) -> float:
    """Mean temperature [K] of the open sky, ring by ring, and of all the rest."""
    return float(surroundings_k - np.sum(open_share * (surroundings_k - sky_k)))


def _open_part(skyline: Skyline) -> FloatArray:
    """Share of each piece of sky that lies above the solid outline, shape (ring, sector)."""
    count = SECTORS * OUTLINE_POINTS
    outline_deg = outline_elevation_deg(skyline, (np.arange(count) + 0.5) * (360.0 / count))
    edges, outline = np.sin(np.deg2rad(RING_EDGES_DEG)), np.sin(np.deg2rad(outline_deg))
    hidden = (outline - edges[:-1, np.newaxis]) / np.diff(edges)[:, np.newaxis]
    open_part = 1.0 - np.clip(hidden, 0.0, 1.0)
    return np.asarray(open_part.reshape(RING_DEG.size, SECTORS, OUTLINE_POINTS).mean(axis=2))
