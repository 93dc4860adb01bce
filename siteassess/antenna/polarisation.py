"""Axial ratio, cross-polar gain and what a mismatch of polarisation costs."""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from siteassess.decibels import to_db

__all__ = ["PUREST_DB", "axial_ratio_db", "cross_level_db", "polarisation_loss_db"]

PUREST_DB = -60.0  # cross- against co-polar level that stands for an axial ratio of 0 dB


def axial_ratio_db(cross_level_db: ArrayLike) -> Any:
    """Axial ratio [dB] of a wave whose cross-polar level is so far from its co-polar one.

    Parameters
    ----------
    cross_level_db : float or array
        Cross- less co-polar level [dB]. Which of the two is stronger makes no difference.

    Returns
    -------
    float or array
        0 for a circular wave, infinite for a linear one.

    References
    ----------
    [IEEE 145] Definitions of terms for antennas: axial ratio.

    Examples
    --------
    >>> round(float(axial_ratio_db(-20.0)), 3)
    1.743
    """
    cross = 10.0 ** (np.asarray(cross_level_db, dtype=float) / 20.0)  # against a co-polar field of 1
    with np.errstate(divide="ignore"):
        return 20.0 * np.log10((1.0 + cross) / np.abs(1.0 - cross))


def cross_level_db(axial_ratio_db: ArrayLike) -> Any:
    """Cross- less co-polar level [dB] of a wave of some axial ratio [dB]; at least `PUREST_DB`.

    Examples
    --------
    >>> round(float(cross_level_db(3.0)), 2)
    -15.34
    """
    return np.maximum(2.0 * to_db(_cross_field(axial_ratio_db)), PUREST_DB)


def polarisation_loss_db(
    antenna_axial_ratio_db: ArrayLike, wave_axial_ratio_db: ArrayLike = 0.0, crossed_deg: ArrayLike = 90.0
) -> Any:
    """Power that an antenna misses of a wave turning the same way, against an antenna that matches it.

    Gain in dBic is co-polar gain and has this loss against a circular wave in it already; the rest is what a
    wave that is not quite circular costs on top.

    Parameters
    ----------
    antenna_axial_ratio_db, wave_axial_ratio_db : float or array
        Axial ratios [dB].
    crossed_deg : float or array
        Angle between the long axes of the two ellipses [deg]; 90 is the worst.

    References
    ----------
    [IEEE 145] Definitions of terms for antennas: polarisation efficiency.

    Examples
    --------
    >>> round(float(polarisation_loss_db(3.0)), 3)
    0.125
    """
    antenna, wave = _cross_field(antenna_axial_ratio_db), _cross_field(wave_axial_ratio_db)
    # Of fields (1, a) and (1, w exp(2i x)), right- and left-hand, the antenna takes the inner product.
    turned = wave * np.exp(2j * np.deg2rad(crossed_deg))
    matched = np.abs(1.0 + antenna * turned) ** 2 / ((1.0 + antenna**2) * (1.0 + wave**2))
    return -to_db(matched)


def _cross_field(axial_ratio_db: ArrayLike) -> Any:
    """Cross-polar field of a wave whose co-polar field is 1."""
    ratio = 10.0 ** (np.asarray(axial_ratio_db, dtype=float) / 20.0)
    return 1.0 - 2.0 / (ratio + 1.0)
