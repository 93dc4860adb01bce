"""Loss in the gases of the air."""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from siteassess.constants import WGS84_SEMI_MAJOR_AXIS_M

__all__ = ["gas_loss_db"]

# [P.676] line by line at sea level: 1013.25 hPa, 288.15 K, 7.5 g/m3 of water vapour.
CARRIER_HZ = np.array([1176.45e6, 1227.60e6, 1575.42e6])
ZENITH_LOSS_DB = np.array([0.0327, 0.0330, 0.0344])

# Own fit to the slant values of [P.676] at 1575.42 MHz: 0.0487, 0.195 and 0.370 dB at 45, 10 and 5 degrees.
SHELL_HEIGHT_M = 7_000.0


def gas_loss_db(carrier_hz: ArrayLike, elevation_deg: ArrayLike) -> Any:
    """Loss [dB] in oxygen and water vapour on the path from space to a site at sea level.

    The zenith loss times the path through a uniform spherical shell. Below 5 degrees it is an extrapolation,
    finite at and below the horizon.

    Parameters
    ----------
    carrier_hz : array
        Carrier [Hz]; from 1176 to 1606 MHz, within which the zenith loss hardly changes.
    elevation_deg : array
        Elevation [deg], of a shape that broadcasts with the carrier.

    References
    ----------
    [P.676] ITU-R P.676, attenuation by atmospheric gases.

    Examples
    --------
    >>> round(float(gas_loss_db(1575.42e6, 5.0)), 2)
    0.37
    """
    radius_in_shells = WGS84_SEMI_MAJOR_AXIS_M / SHELL_HEIGHT_M
    vertical = radius_in_shells * np.sin(np.deg2rad(elevation_deg))
    air_mass = np.sqrt(vertical**2 + 2.0 * radius_in_shells + 1.0) - vertical
    return np.interp(np.asarray(carrier_hz, float), CARRIER_HZ, ZENITH_LOSS_DB) * air_mass
