"""How much of the power an antenna is fed it sends out: gain summed over the sphere."""

import math
from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.antenna.gain import at_carrier_dbic, depends_on_azimuth
from siteassess.antenna.pattern import GainPattern
from siteassess.constants import SPEED_OF_LIGHT_M_PER_S
from siteassess.decibels import to_ratio

__all__ = ["MeanGain", "effective_area_m2", "efficiency", "mean_gain"]

FloatArray = NDArray[np.float64]

# Gauss-Legendre points in each azimuth interval, by the largest change of gain across one [dB]: their error,
# c^2n (n!)^4 / ((2n + 1) (2n)!^3) of the change c in nepers, stays below one part in a million.
AZIMUTH_NODES = ((1.1, 2), (5.0, 3), (np.inf, 6))


@dataclass(frozen=True, slots=True, kw_only=True)
class MeanGain:
    """Mean gain over the sphere, as ratios.

    Attributes
    ----------
    co : float
        Co-polar part.
    cross : float
        Cross-polar part; 0 when it is not known.
    """

    co: float
    cross: float

    @property
    def total(self) -> float:
        """Both together: the radiation efficiency when both are known."""
        return self.co + self.cross


def mean_gain(pattern: GainPattern, carrier_hz: float) -> MeanGain:
    """Mean gain over the sphere at one carrier.

    Levels between grid points are linear in dB. The integral over elevation is the closed form of
    exp(b x) cos x, that over azimuth a Gauss-Legendre sum in each grid interval.

    Examples
    --------
    >>> from siteassess.antenna.shapes import hemisphere
    >>> round(mean_gain(hemisphere(), 1575.42e6).total, 9)
    1.0
    """
    cross = pattern.cross_gain_dbic
    return MeanGain(
        co=_sphere_mean(pattern, pattern.gain_dbic, carrier_hz),
        cross=0.0 if cross is None else _sphere_mean(pattern, cross, carrier_hz),
    )


def efficiency(pattern: GainPattern, carrier_hz: float) -> float:
    """Mean of co- plus cross-polar gain over the sphere [1]."""
    return mean_gain(pattern, carrier_hz).total


def effective_area_m2(gain_dbic: ArrayLike, carrier_hz: float) -> Any:
    """Effective area [m2] of an antenna of some gain: gain times wavelength squared over 4 pi.

    Examples
    --------
    >>> round(float(effective_area_m2(0.0, 1575.42e6)), 6)
    0.002882
    """
    wavelength_m = SPEED_OF_LIGHT_M_PER_S / carrier_hz
    return to_ratio(gain_dbic) * wavelength_m**2 / (4.0 * math.pi)


def _sphere_mean(pattern: GainPattern, levels_dbic: FloatArray, carrier_hz: float) -> float:
    cuts_dbic = at_carrier_dbic(pattern, levels_dbic, carrier_hz)
    if not depends_on_azimuth(pattern):
        return float(_cut_mean(pattern.elevation_deg, cuts_dbic[0]))
    change_db = np.diff(cuts_dbic, axis=0)
    largest_db = float(np.abs(change_db).max())
    nodes = next(count for limit_db, count in AZIMUTH_NODES if largest_db <= limit_db)
    width_share = np.diff(pattern.azimuth_deg) / 360.0
    mean = 0.0
    for node, weight in zip(*np.polynomial.legendre.leggauss(nodes), strict=True):
        between_dbic = change_db * ((node + 1.0) / 2.0)
        between_dbic += cuts_dbic[:-1]
        mean += float(_cut_mean(pattern.elevation_deg, between_dbic) @ width_share) * weight / 2.0
    return float(mean)


def _cut_mean(elevation_deg: FloatArray, levels_dbic: FloatArray) -> FloatArray:
    """Mean over the sphere of a gain that depends on elevation alone; the last axis is elevation."""
    elevation_rad = np.deg2rad(elevation_deg)
    width_rad = np.diff(elevation_rad)
    step = width_rad <= 0.0
    per_width = np.where(step, 0.0, math.log(10.0) / 10.0 / np.where(step, 1.0, width_rad))
    slope = np.diff(levels_dbic)
    slope *= per_width
    ratio = np.exp(levels_dbic * (math.log(10.0) / 10.0))
    sine, cosine = np.sin(elevation_rad), np.cos(elevation_rad)
    # The integral of exp(b x) cos x is exp(b x) (b cos x + sin x) / (1 + b^2).
    pieces = ratio[..., 1:] * (slope * cosine[1:] + sine[1:])
    pieces -= ratio[..., :-1] * (slope * cosine[:-1] + sine[:-1])
    slope *= slope
    slope += 1.0
    pieces /= slope
    pieces[..., step] = 0.0
    return np.asarray(pieces.sum(axis=-1) / 2.0)
