"""How much noise the open sky sends down: brightness temperature against elevation."""

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.decibels import to_ratio
from siteassess.link_budget.power.gases import gas_loss_db

__all__ = [
    "ATMOSPHERE_K",
    "COSMIC_BACKGROUND_K",
    "atmosphere_brightness_k",
    "galactic_brightness_k",
    "sky_brightness_k",
]

FloatArray = NDArray[np.float64]

COSMIC_BACKGROUND_K = 2.725  # microwave background (value from memory)
ATMOSPHERE_K = 270.0  # mean radiating temperature, [P.618] 37.34 + 0.81 x 288 K (from memory), rounded
# Own default; [P.372] figures have 1 to 10 K away from the plane of the Galaxy at 1 to 2 GHz (from memory).
GALACTIC_AT_1420_MHZ_K = 2.0
GALACTIC_EXPONENT = -2.7  # of synchrotron radiation against frequency (value from memory)


def sky_brightness_k(carrier_hz: float, elevation_deg: ArrayLike) -> FloatArray:
    """Brightness temperature [K] of the clear sky at elevations above the horizon.

    The Sun, the plane of the Galaxy, clouds and rain are not in it.

    Parameters
    ----------
    carrier_hz : float
        Carrier [Hz].
    elevation_deg : float or array
        0 to 90 [deg].

    Returns
    -------
    array
        Same shape as `elevation_deg`: what comes from behind the air, weakened by it, plus the air's own.

    References
    ----------
    [P.372] Radio noise.
    [P.618] Propagation data and prediction methods for Earth-space links.
    """
    behind_k = COSMIC_BACKGROUND_K + galactic_brightness_k(carrier_hz)
    transmitted = to_ratio(-np.asarray(gas_loss_db(carrier_hz, elevation_deg)))
    return np.asarray(behind_k * transmitted) + atmosphere_brightness_k(carrier_hz, elevation_deg)


def atmosphere_brightness_k(carrier_hz: float, elevation_deg: ArrayLike) -> FloatArray:
    """The air's own part [K] of :func:`sky_brightness_k`."""
    return np.asarray(ATMOSPHERE_K * (1.0 - to_ratio(-np.asarray(gas_loss_db(carrier_hz, elevation_deg)))))


def galactic_brightness_k(carrier_hz: float) -> float:
    """Brightness temperature [K] of the Galaxy away from its plane, one value for the whole sky."""
    return float(GALACTIC_AT_1420_MHZ_K * (carrier_hz / 1420e6) ** GALACTIC_EXPONENT)
