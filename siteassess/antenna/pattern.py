"""The gain of an antenna by direction, in the antenna's own frame."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["GainPattern"]

FloatArray = NDArray[np.float64]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class GainPattern:
    """Gain toward every direction, at one or several carriers.

    Elevation is counted from the plane of the antenna, azimuth clockwise from its north mark, so both move
    with heading and tilt. The gain includes the antenna's own loss and excludes the preamplifier.

    Attributes
    ----------
    name : str
        Name of the built-in pattern, or of the file.
    carrier_hz : array, shape (carrier,)
        Ascending; one element, NaN, when the pattern holds for every carrier.
    azimuth_deg : array, shape (azimuth,)
        Ascending from 0 to 360, both ends given and equal; two elements when the gain does not depend on it.
    elevation_deg : array, shape (elevation,)
        Ascending from -90 to 90, both ends given; two equal neighbours are a step.
    gain_dbic : array, shape (carrier, azimuth, elevation)
        Co-polar (right-hand) gain.
    cross_gain_dbic : array of the same shape, or None
        Cross-polar (left-hand) gain; None when it is not known.
    rests_on : str
        One sentence: where the values come from.
    remarks : tuple of str
        What a reader of the report must know about the pattern.
    """

    name: str
    carrier_hz: FloatArray
    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    gain_dbic: FloatArray
    cross_gain_dbic: FloatArray | None = None
    rests_on: str = ""
    remarks: tuple[str, ...] = ()
