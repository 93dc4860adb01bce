"""Geometry of the path from a satellite to the ground, and the loss by spreading along it.

The Earth is a sphere of the equatorial radius here: against the ellipsoid the free-space loss changes by less
than 0.01 dB.
"""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from siteassess.constants import SPEED_OF_LIGHT_M_PER_S, WGS84_SEMI_MAJOR_AXIS_M

__all__ = ["free_space_loss_db", "off_boresight_deg", "slant_range_m"]


def slant_range_m(radius_m: ArrayLike, elevation_deg: ArrayLike) -> Any:
    """Distance [m] from a site to a satellite on a circular orbit.

    Parameters
    ----------
    radius_m : array
        Distance of the satellite from the centre of the Earth [m].
    elevation_deg : array
        Geometric elevation [deg], of a shape that broadcasts with the radius.

    Examples
    --------
    >>> round(float(slant_range_m(26_559.7e3, 90.0)) / 1e3, 1)
    20181.6
    """
    elevation_rad = np.deg2rad(elevation_deg)
    earth_m = WGS84_SEMI_MAJOR_AXIS_M
    half_chord_m = np.sqrt(np.asarray(radius_m) ** 2 - (earth_m * np.cos(elevation_rad)) ** 2)
    return half_chord_m - earth_m * np.sin(elevation_rad)  # law of cosines, solved for the range


def off_boresight_deg(radius_m: ArrayLike, elevation_deg: ArrayLike) -> Any:
    """Angle [deg] at the satellite between the centre of the Earth and the site.

    Examples
    --------
    >>> round(float(off_boresight_deg(26_559.7e3, 5.0)), 3)
    13.841
    """
    horizontal = WGS84_SEMI_MAJOR_AXIS_M / np.asarray(radius_m) * np.cos(np.deg2rad(elevation_deg))
    return np.rad2deg(np.arcsin(horizontal))  # law of sines


def free_space_loss_db(range_m: ArrayLike, carrier_hz: ArrayLike) -> Any:
    """Loss [dB] between isotropic antennas in free space.

    References
    ----------
    [P.525] ITU-R P.525, free-space attenuation.

    Examples
    --------
    >>> round(float(free_space_loss_db(20_181.6e3, 1575.42e6)), 2)
    182.49
    """
    wavelength_m = SPEED_OF_LIGHT_M_PER_S / np.asarray(carrier_hz)
    return 20.0 * np.log10(4.0 * np.pi * np.asarray(range_m) / wavelength_m)  # [P.525]
