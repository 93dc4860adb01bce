"""Slow changes of an orbit under the flattening of the Earth."""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from siteassess.constants import EARTH_GRAVITY_M3_PER_S2, EARTH_J2, WGS84_SEMI_MAJOR_AXIS_M

__all__ = ["secular_rates"]


def secular_rates(radius_m: ArrayLike, inclination_deg: ArrayLike) -> tuple[Any, Any]:
    """Rates of argument of latitude and node of circular orbits, to first order in J2.

    Parameters
    ----------
    radius_m : array_like
        Mean semi-major axis.
    inclination_deg : array_like
        Inclination, broadcast against `radius_m`.

    Returns
    -------
    argument_of_latitude_rate_deg_per_s : array
        360 degrees in a nodal period.
    node_rate_deg_per_s : array
        Against the stars; negative is westward.

    References
    ----------
    [Kaula 1966] section 3.2, without eccentricity: the rates of the argument of perigee and of the mean
    anomaly add up to that of the argument of latitude.

    Examples
    --------
    >>> along_deg_per_s, node_deg_per_s = secular_rates(26_559_700.0, 55.0)
    >>> round(float(360.0 / along_deg_per_s), 1), round(float(node_deg_per_s * 86_400), 4)
    (43075.8, -0.0388)
    """
    radius_m = np.asarray(radius_m, dtype=float)
    cosine = np.cos(np.deg2rad(inclination_deg))
    mean_motion_deg_per_s = np.rad2deg(np.sqrt(EARTH_GRAVITY_M3_PER_S2 / radius_m**3))
    flattening = 1.5 * EARTH_J2 * (WGS84_SEMI_MAJOR_AXIS_M / radius_m) ** 2
    along_deg_per_s = mean_motion_deg_per_s * (1.0 + flattening * (4.0 * cosine**2 - 1.0))
    return along_deg_per_s, -mean_motion_deg_per_s * flattening * cosine
