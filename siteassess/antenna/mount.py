"""How the antenna stands: from directions at the site to directions in the antenna's own frame."""

from collections.abc import Callable

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.angles import wrap_azimuth_deg
from siteassess.antenna.gain import cross_gain_dbic, depends_on_azimuth, gain_dbic
from siteassess.antenna.pattern import GainPattern
from siteassess.decibels import mean_db
from siteassess.site_file.model import Mount

__all__ = ["antenna_frame", "mean_mounted_gain_dbic", "mounted_cross_gain_dbic", "mounted_gain_dbic"]

FloatArray = NDArray[np.float64]

AZIMUTH_SAMPLES = 720  # half a degree apart


def antenna_frame(
    mount: Mount, azimuth_deg: ArrayLike, elevation_deg: ArrayLike
) -> tuple[FloatArray, FloatArray]:
    """Directions as the antenna sees them.

    The antenna is first turned to its heading about the vertical, then tilted the shortest way, so that its
    axis leans toward the true azimuth `tilt_azimuth_deg`.

    Parameters
    ----------
    mount : Mount
        Heading and tilt.
    azimuth_deg, elevation_deg : float or array
        Direction at the site [deg]: clockwise from true north, above the local horizon.

    Returns
    -------
    azimuth_deg, elevation_deg : array
        Clockwise from the antenna's north mark, 0 to 360, and from its plane [deg].

    Examples
    --------
    >>> tilted = Mount(mast_height_m=1.0, tilt_deg=10.0, tilt_azimuth_deg=90.0)
    >>> azimuth, elevation = antenna_frame(tilted, [90.0, 270.0], [0.0, 0.0])
    >>> elevation.round(6).tolist()
    [10.0, -10.0]
    """
    if mount.tilt_deg == 0.0:
        return (
            np.asarray(wrap_azimuth_deg(np.asarray(azimuth_deg, dtype=float) - mount.heading_deg)),
            np.asarray(elevation_deg, dtype=float),
        )
    tilt_rad = np.deg2rad(mount.tilt_deg)
    off_rad = np.deg2rad(np.asarray(azimuth_deg, dtype=float) - mount.tilt_azimuth_deg)
    elevation_rad = np.deg2rad(elevation_deg)
    ahead, aside = np.cos(elevation_rad) * np.cos(off_rad), np.cos(elevation_rad) * np.sin(off_rad)
    up = np.sin(elevation_rad)
    # Along the tilted axis, and ahead in the tilted plane; the direction aside is what the tilt turns about.
    along_axis = up * np.cos(tilt_rad) + ahead * np.sin(tilt_rad)
    in_plane = ahead * np.cos(tilt_rad) - up * np.sin(tilt_rad)
    turned_deg = mount.tilt_azimuth_deg + np.rad2deg(np.arctan2(aside, in_plane)) - mount.heading_deg
    return (
        np.asarray(wrap_azimuth_deg(turned_deg)),
        np.asarray(np.rad2deg(np.arctan2(along_axis, np.hypot(in_plane, aside)))),
    )


def mounted_gain_dbic(
    pattern: GainPattern, mount: Mount, azimuth_deg: ArrayLike, elevation_deg: ArrayLike, carrier_hz: float
) -> FloatArray:
    """Co-polar gain [dBic] of the antenna as mounted, toward directions at the site; broadcasts."""
    return _mounted(gain_dbic, pattern, mount, azimuth_deg, elevation_deg, carrier_hz)


def mounted_cross_gain_dbic(
    pattern: GainPattern, mount: Mount, azimuth_deg: ArrayLike, elevation_deg: ArrayLike, carrier_hz: float
) -> FloatArray:
    """Cross-polar gain [dBic] of the antenna as mounted; minus infinity where it is not known."""
    return _mounted(cross_gain_dbic, pattern, mount, azimuth_deg, elevation_deg, carrier_hz)


def mean_mounted_gain_dbic(
    pattern: GainPattern, mount: Mount, elevation_deg: ArrayLike, carrier_hz: float
) -> FloatArray:
    """Co-polar gain [dBic] at elevations above the horizon, averaged over all azimuths as ratios.

    Returns
    -------
    array
        Same shape as `elevation_deg`.
    """
    if mount.tilt_deg == 0.0 and not depends_on_azimuth(pattern):
        return gain_dbic(pattern, 0.0, elevation_deg, carrier_hz)
    azimuth_deg = (np.arange(AZIMUTH_SAMPLES) + 0.5) * (360.0 / AZIMUTH_SAMPLES)
    rings_deg = np.asarray(elevation_deg, dtype=float)[..., np.newaxis]
    gain = mounted_gain_dbic(pattern, mount, azimuth_deg, rings_deg, carrier_hz)
    return np.asarray(mean_db(gain, axis=-1))


def _mounted(
    gain: Callable[[GainPattern, ArrayLike, ArrayLike, float], FloatArray],
    pattern: GainPattern,
    mount: Mount,
    azimuth_deg: ArrayLike,
    elevation_deg: ArrayLike,
    carrier_hz: float,
) -> FloatArray:
    if mount.tilt_deg == 0.0 and not depends_on_azimuth(pattern):
        return gain(pattern, azimuth_deg, elevation_deg, carrier_hz)
    return gain(pattern, *antenna_frame(mount, azimuth_deg, elevation_deg), carrier_hz)
