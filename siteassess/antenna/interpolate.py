"""Linear interpolation on a line and on the sphere, quick on axes of even steps.

Directions go through in pieces that stay in the processor's cache, and an axis of even steps is indexed
directly instead of being searched.
"""

from collections.abc import Iterator

import numpy as np
from numpy.typing import ArrayLike, NDArray

__all__ = ["along_line", "even_step_deg", "over_sphere"]

FloatArray = NDArray[np.float64]

PIECE = 8192  # directions at a time
EVEN_DEG = 1e-9


def even_step_deg(axis_deg: FloatArray) -> float | None:
    """Step [deg] of an ascending axis; None when its steps differ.

    Examples
    --------
    >>> even_step_deg(np.array([-90.0, 0.0, 90.0])), even_step_deg(np.array([-90.0, 0.0, 0.0, 90.0]))
    (90.0, None)
    """
    steps_deg = np.diff(axis_deg)
    if steps_deg.size == 0 or np.ptp(steps_deg) > EVEN_DEG:
        return None
    return float(axis_deg[-1] - axis_deg[0]) / steps_deg.size


def along_line(axis_deg: FloatArray, levels: FloatArray, value_deg: ArrayLike) -> FloatArray:
    """Levels of shape (axis,) at values on the axis; at a step the upper side, NaN for NaN.

    Beyond its ends those of the axis hold.

    Examples
    --------
    >>> along_line(np.array([0.0, 10.0, 20.0]), np.array([0.0, 1.0, 4.0]), [5.0, 20.0, 15.0]).tolist()
    [0.5, 4.0, 2.5]
    """
    value = np.asarray(value_deg, dtype=float)
    step_deg = even_step_deg(axis_deg)
    if step_deg is None or value.size < axis_deg.size:
        return np.array(np.interp(value, axis_deg, levels))
    seen = np.empty(value.size)
    for part, (values,) in _pieces(value):
        share, cell = _regular_cells(values, axis_deg, step_deg)
        seen[part] = _between(levels, _whole(cell), share)
    return seen.reshape(value.shape)


def over_sphere(
    azimuths_deg: FloatArray,
    elevations_deg: FloatArray,
    levels: FloatArray,
    azimuth_deg: ArrayLike,
    elevation_deg: ArrayLike,
) -> FloatArray:
    """Levels between the cuts of a sphere, linear in azimuth and elevation.

    Parameters
    ----------
    azimuths_deg, elevations_deg : array
        Ascending, from 0 to 360 and from -90 to 90 [deg]. Two equal elevations are a step.
    levels : array, shape (azimuth, elevation)
        Equal at 0 and 360 degrees.
    azimuth_deg, elevation_deg : float or array
        Directions [deg], any turn; they broadcast.

    Returns
    -------
    array
        With the broadcast shape of the directions.
    """
    azimuth, elevation = np.broadcast_arrays(
        np.asarray(azimuth_deg, dtype=float), np.asarray(elevation_deg, dtype=float)
    )
    azimuth_step_deg, elevation_step_deg = even_step_deg(azimuths_deg), even_step_deg(elevations_deg)
    flat, rows = levels.ravel(), elevations_deg.size
    seen = np.empty(azimuth.size)
    for part, (azimuths, elevations) in _pieces(azimuth, elevation):
        right, column = _azimuth_cells(azimuths, azimuths_deg, azimuth_step_deg)
        upper, row = _cells(elevations, elevations_deg, elevation_step_deg)
        column *= rows
        column += row
        corner = _whole(column)
        at_left = _between(flat, corner, upper)
        corner += rows
        at_right = _between(flat, corner, upper)
        at_right -= at_left
        at_right *= right
        at_right += at_left
        seen[part] = at_right
    return seen.reshape(azimuth.shape)


def _pieces(*directions: FloatArray) -> Iterator[tuple[slice, list[FloatArray]]]:
    flat = [angle_deg.ravel() for angle_deg in directions]
    for start in range(0, flat[0].size, PIECE):
        part = slice(start, start + PIECE)
        yield part, [angle_deg[part] for angle_deg in flat]


def _azimuth_cells(
    azimuth_deg: FloatArray, axis_deg: FloatArray, step_deg: float | None
) -> tuple[FloatArray, FloatArray]:
    turns = azimuth_deg / 360.0
    turns -= np.floor(turns)
    turns *= 360.0
    return _cells(turns, axis_deg, step_deg)


def _cells(
    value_deg: FloatArray, axis_deg: FloatArray, step_deg: float | None
) -> tuple[FloatArray, FloatArray]:
    """Share of the way through the interval that holds a value, and the number of that interval."""
    if step_deg is not None:
        return _regular_cells(value_deg, axis_deg, step_deg)
    # A step is an interval without width, into which no value falls: interp gives the upper of its ends.
    return _split(np.asarray(np.interp(value_deg, axis_deg, np.arange(axis_deg.size))), axis_deg.size - 2)


def _regular_cells(
    value_deg: FloatArray, axis_deg: FloatArray, step_deg: float
) -> tuple[FloatArray, FloatArray]:
    position = value_deg - axis_deg[0]
    position *= 1.0 / step_deg
    np.clip(position, 0.0, axis_deg.size - 1, out=position)
    return _split(position, axis_deg.size - 2)


def _split(position: FloatArray, last: int) -> tuple[FloatArray, FloatArray]:
    cell = np.floor(position)
    np.minimum(cell, last, out=cell)
    position -= cell
    return position, cell


def _whole(number: FloatArray) -> NDArray[np.int64]:
    with np.errstate(invalid="ignore"):  # NaN becomes some number, and is NaN again by its share
        return number.astype(np.int64)


def _between(levels: FloatArray, lower: NDArray[np.int64], share: FloatArray) -> FloatArray:
    """Levels a share of the way from one element to the next."""
    low = np.take(levels, lower, mode="clip")
    high = np.take(levels, lower + 1, mode="clip")
    high -= low
    high *= share
    high += low
    return high
