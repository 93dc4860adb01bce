"""Gain toward a direction, read off a pattern in the antenna's own frame."""

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.antenna.interpolate import along_line, over_sphere
from siteassess.antenna.pattern import GainPattern

__all__ = ["at_carrier_dbic", "cross_gain_dbic", "depends_on_azimuth", "gain_dbic"]

FloatArray = NDArray[np.float64]


def gain_dbic(
    pattern: GainPattern, azimuth_deg: ArrayLike, elevation_deg: ArrayLike, carrier_hz: float
) -> FloatArray:
    """Co-polar gain toward directions in the antenna's own frame.

    Parameters
    ----------
    pattern : GainPattern
        The antenna.
    azimuth_deg : float or array
        Clockwise from the antenna's north mark [deg], any turn.
    elevation_deg : float or array
        From the plane of the antenna [deg], -90 to 90.
    carrier_hz : float
        Carrier [Hz].

    Returns
    -------
    array
        Gain [dBic] with the broadcast shape of the two angles. Levels are interpolated linearly in dB over
        elevation, azimuth and carrier; beyond the outer carriers theirs hold. At a step
        the upper side counts.

    Examples
    --------
    >>> from siteassess.antenna.shapes import hemisphere
    >>> gain_dbic(hemisphere(), 0.0, [-1.0, 0.0, 90.0], 1575.42e6).round(2).tolist()
    [-200.0, 3.01, 3.01]
    """
    return _interpolated_dbic(pattern, pattern.gain_dbic, azimuth_deg, elevation_deg, carrier_hz)


def cross_gain_dbic(
    pattern: GainPattern, azimuth_deg: ArrayLike, elevation_deg: ArrayLike, carrier_hz: float
) -> FloatArray:
    """Cross-polar gain toward directions in the antenna's own frame; see :func:`gain_dbic`.

    Returns
    -------
    array
        Gain [dBic]; minus infinity everywhere when the pattern does not know it.
    """
    if pattern.cross_gain_dbic is None:
        return np.full(np.broadcast_shapes(np.shape(azimuth_deg), np.shape(elevation_deg)), -np.inf)
    return _interpolated_dbic(pattern, pattern.cross_gain_dbic, azimuth_deg, elevation_deg, carrier_hz)


def depends_on_azimuth(pattern: GainPattern) -> bool:
    """Whether the gain changes with azimuth."""
    return pattern.azimuth_deg.size > 2


def at_carrier_dbic(pattern: GainPattern, levels_dbic: FloatArray, carrier_hz: float) -> FloatArray:
    """Levels of shape (carrier, azimuth, elevation) at one carrier, shape (azimuth, elevation)."""
    if pattern.carrier_hz.size == 1:
        return np.asarray(levels_dbic[0])
    position = float(np.interp(carrier_hz, pattern.carrier_hz, np.arange(pattern.carrier_hz.size)))
    below = min(int(position), pattern.carrier_hz.size - 2)
    above_share = position - below
    return np.asarray((1.0 - above_share) * levels_dbic[below] + above_share * levels_dbic[below + 1])


def _interpolated_dbic(
    pattern: GainPattern,
    levels_dbic: FloatArray,
    azimuth_deg: ArrayLike,
    elevation_deg: ArrayLike,
    carrier_hz: float,
) -> FloatArray:
    levels = at_carrier_dbic(pattern, levels_dbic, carrier_hz)
    if depends_on_azimuth(pattern):
        return over_sphere(pattern.azimuth_deg, pattern.elevation_deg, levels, azimuth_deg, elevation_deg)
    shape = np.broadcast_shapes(np.shape(azimuth_deg), np.shape(elevation_deg))
    gain = along_line(pattern.elevation_deg, levels[0], elevation_deg)
    return gain if gain.shape == shape else np.broadcast_to(gain, shape).copy()
