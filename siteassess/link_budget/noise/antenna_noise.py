"""Noise that the antenna picks up: from the sky, its surroundings, the ground and itself."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.antenna.energy import efficiency
from siteassess.antenna.mount import mounted_cross_gain_dbic, mounted_gain_dbic
from siteassess.antenna.pattern import GainPattern
from siteassess.constants import REFERENCE_TEMPERATURE_K
from siteassess.decibels import to_ratio
from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.noise.brightness import sky_brightness_k
from siteassess.link_budget.noise.seen_sky import RING_DEG, RING_SHARE, SECTOR_DEG, SeenSky, seen_sky
from siteassess.site_file.model import Mount

__all__ = ["AntennaNoise", "antenna_noise", "noise_of_seen", "ring_gain", "seen_temperature_k"]

FloatArray = NDArray[np.float64]


@dataclass(frozen=True, slots=True, kw_only=True)
class AntennaNoise:
    """Noise temperature that an antenna delivers at one carrier, and where it comes from.

    Attributes
    ----------
    temperature_k : float
        All together.
    sky_k, leaves_k, obstacles_k, ground_k, loss_k : float
        Parts of it: open sky, leaves, solid obstacles above the horizon, everything below the horizon, and
        the antenna's own loss (with the cross-polar power, where that is not known).
    open_site_k : float
        What the same antenna would deliver over level ground with nothing in sight.
    """

    temperature_k: float
    sky_k: float
    leaves_k: float
    obstacles_k: float
    ground_k: float
    loss_k: float
    open_site_k: float


def antenna_noise(pattern: GainPattern, mount: Mount, skyline: Skyline, carrier_hz: float) -> AntennaNoise:
    """Noise of an antenna as mounted, in both polarisations.

    Ground, obstacles, leaves, the antenna's own loss and, where no cross-polar gain is known, all the power
    that is missing, are at 290 K.

    Parameters
    ----------
    pattern, mount : GainPattern, Mount
        The antenna and how it stands.
    skyline : Skyline
        What stands round it.
    carrier_hz : float
        Carrier [Hz].

    References
    ----------
    [P.372] Radio noise.
    """
    return noise_of_seen(pattern, mount, seen_sky(skyline, carrier_hz), carrier_hz)


def noise_of_seen(pattern: GainPattern, mount: Mount, seen: SeenSky, carrier_hz: float) -> AntennaNoise:
    """The same, of a sky that was looked at before; see :func:`antenna_noise`."""
    radiated = efficiency(pattern, carrier_hz)
    taken_in = ring_gain(pattern, mount, carrier_hz) / max(1.0, radiated)
    sky_k = sky_brightness_k(carrier_hz, RING_DEG)
    above, leaves, solid = (
        float(np.sum(taken_in * share)) for share in (1.0, seen.leaves_share, seen.solid_share)
    )
    lost = max(0.0, 1.0 - radiated)
    return AntennaNoise(
        temperature_k=seen_temperature_k(taken_in, seen, sky_k, REFERENCE_TEMPERATURE_K),
        sky_k=float(np.sum(np.sum(taken_in * seen.open_share, axis=1) * sky_k)),
        leaves_k=leaves * REFERENCE_TEMPERATURE_K,
        obstacles_k=solid * REFERENCE_TEMPERATURE_K,
        # By rounding the rings may add up to a little more than the antenna takes in.
        ground_k=max(0.0, 1.0 - above - lost) * REFERENCE_TEMPERATURE_K,
        loss_k=lost * REFERENCE_TEMPERATURE_K,
        open_site_k=REFERENCE_TEMPERATURE_K
        - float(np.sum(taken_in.sum(axis=1) * (REFERENCE_TEMPERATURE_K - sky_k))),
    )


def ring_gain(pattern: GainPattern, mount: Mount, carrier_hz: float) -> FloatArray:
    """What each piece of sky adds to the mean gain over the sphere, both polarisations.

    Returns
    -------
    array, shape (ring, sector)
        Ratios; what their sum lacks to the efficiency goes below the horizon.
    """
    rings_deg = RING_DEG[:, np.newaxis]
    gain = to_ratio(mounted_gain_dbic(pattern, mount, SECTOR_DEG, rings_deg, carrier_hz))
    if pattern.cross_gain_dbic is not None:
        gain += to_ratio(mounted_cross_gain_dbic(pattern, mount, SECTOR_DEG, rings_deg, carrier_hz))
    return np.asarray(gain * (RING_SHARE[:, np.newaxis] / SECTOR_DEG.size))


def seen_temperature_k(
    taken_in: FloatArray, seen: SeenSky, sky_k: FloatArray, surroundings_k: float
) -> float:
    """Mean temperature [K] of the open sky, ring by ring, and of all the rest.

    Parameters
    ----------
    taken_in : array, shape (ring, sector)
        Share of what the antenna takes in; what the sum lacks to 1 is at `surroundings_k` too.
    seen : SeenSky
        What is open.
    sky_k : array, shape (ring,)
        Brightness of the open sky.
    surroundings_k : float
        Temperature of everything else.
    """
    open_share = np.sum(taken_in * seen.open_share, axis=1)
    return float(surroundings_k - np.sum(open_share * (surroundings_k - sky_k)))
