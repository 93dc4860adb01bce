"""Angles in degrees: wrapping, unit vectors and solid angles."""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

__all__ = ["direction", "distinct", "wrap_azimuth_deg", "wrap_difference_deg"]


def wrap_azimuth_deg(azimuth_deg: ArrayLike) -> Any:
    """Azimuth brought into 0 <= azimuth < 360.

    Examples
    --------
    >>> wrap_azimuth_deg([-10.0, 360.0, 725.0]).tolist()
    [350.0, 0.0, 5.0]
    """
    wrapped = np.mod(azimuth_deg, 360.0)
    return np.where(wrapped == 360.0, 0.0, wrapped)  # np.mod(-1e-20, 360) rounds up to 360


def wrap_difference_deg(difference_deg: ArrayLike) -> Any:
    """Difference of two azimuths brought into -180 <= difference < 180.

    Examples
    --------
    >>> wrap_difference_deg([359.0, -359.0]).tolist()
    [-1.0, 1.0]
    """
    return np.mod(np.asarray(difference_deg, dtype=float) + 180.0, 360.0) - 180.0


def distinct(values: NDArray[np.float64]) -> NDArray[np.float64]:
    """Values in ascending order, each once, NaN left out.

    What numpy.unique gives, which loads masked arrays at its first call.

    Examples
    --------
    >>> distinct(np.array([3.0, 1.0, 3.0, np.nan])).tolist()
    [1.0, 3.0]
    """
    ordered = np.sort(values[~np.isnan(values)])
    once: NDArray[np.float64] = ordered[np.append(True, ordered[1:] > ordered[:-1])[: len(ordered)]]
    return once


def direction(azimuth_deg: ArrayLike, elevation_deg: ArrayLike) -> NDArray[np.float64]:
    """Unit vectors toward directions, in east, north, up.

    Returns
    -------
    array, shape (3, ...)
        East, north and up components [1], with the broadcast shape of the arguments behind.
    """
    azimuth_rad, elevation_rad = np.deg2rad(azimuth_deg), np.deg2rad(elevation_deg)
    horizontal = np.cos(elevation_rad)
    return np.stack(
        np.broadcast_arrays(
            horizontal * np.sin(azimuth_rad), horizontal * np.cos(azimuth_rad), np.sin(elevation_rad)
        )
    )
