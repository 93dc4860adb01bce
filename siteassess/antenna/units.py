"""What the values of a pattern file betray of other units than dBic."""

import numpy as np

from siteassess.antenna.pattern import FloatArray
from siteassess.decibels import to_db

__all__ = ["unit_hint"]

DIPOLE_DB = 2.15  # a half-wave dipole over an isotropic antenna
CIRCULAR_DB = 3.01  # circular over linear
NEAR_DB = 0.35
# A gain that falls short by so much is rarer among antennas than a wrong unit; own default.
RARE_MEAN_DB = -1.9
PEAK_IS_ZERO_DB = 0.005


def unit_hint(gain_dbic: FloatArray, mean_gain: float) -> str | None:
    """A suspicion that the gains are in other units, in words; None where nothing points to it.

    Parameters
    ----------
    gain_dbic : array, shape (row,)
        As the file has them.
    mean_gain : float
        Mean over the sphere of the highest carrier, co- plus cross-polar, as a ratio.

    Examples
    --------
    >>> unit_hint(np.array([0.01, 0.2, 3.9]), 1.5)
    'no gain is below 0: they may be ratios instead of decibels'
    """
    mean_db = float(to_db(mean_gain))
    uneven = np.ptp(gain_dbic) > 0.0
    if mean_db > 0.0 and uneven and gain_dbic.min() >= 0.0:
        return "no gain is below 0: they may be ratios instead of decibels"
    for excess_db, reason in (
        (DIPOLE_DB, "2.15 dB from dBd to dBi"),
        (CIRCULAR_DB, "3 dB from linear to circular"),
    ):
        if abs(mean_db - excess_db) <= NEAR_DB:
            return f"the {reason} may have been added once too often"
    if mean_db < RARE_MEAN_DB and uneven:
        if abs(gain_dbic.max()) < PEAK_IS_ZERO_DB:
            return "the highest gain is 0, as in a pattern relative to its peak, which gives no gain"
        return "so little power is rare; gains in dBd would be 2.15 dB lower than in dBic"
    return None
