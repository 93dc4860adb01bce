"""Dilution of precision: what the geometry of the satellites makes of errors of range."""

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["Dilution", "dilution_of_precision", "not_exceeded"]

FloatArray = NDArray[np.float64]

# Determinant over that of as many satellites all round. Below, a PDOP beyond some 100 000 would rest on
# rounding: satellites that lie on one cone, or in one plane, do not tell where the antenna is.
LEAST_DETERMINANT = 1e-12


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Dilution:
    """Dilution of precision at every epoch; arrays of shape (epoch,), NaN where it is undetermined.

    Attributes
    ----------
    horizontal, vertical, position : array
        HDOP, VDOP and PDOP.
    time : array
        TDOP: the root of the summed squares over the clocks of all systems in view.
    geometric : array
        GDOP: position and all clocks.
    """

    horizontal: FloatArray
    vertical: FloatArray
    position: FloatArray
    time: FloatArray
    geometric: FloatArray


def dilution_of_precision(
    toward: FloatArray, epoch: NDArray[np.int64], system: NDArray[np.int64], *, epochs: int
) -> Dilution:
    """Dilution of precision at many epochs at once, with one receiver clock a system.

    Parameters
    ----------
    toward : array, shape (3, sample)
        Unit vectors toward the satellites: east, north and up.
    epoch : integer array, shape (sample,)
        At which epoch each stands there, from 0 to `epochs` - 1.
    system : integer array, shape (sample,)
        Which clock each belongs to, counted from 0. A system without satellites has no clock; one with a
        single satellite tells its clock and nothing else.
    epochs : int
        Number of epochs.

    Returns
    -------
    Dilution
        NaN where fewer satellites than unknowns are there, or where their directions leave one open.

    Notes
    -----
    A clock only adds the same length to all ranges of its system. Eliminating the clocks from the normal
    matrix (its Schur complement) leaves a matrix of three by three: the scatter of the unit vectors toward
    the satellites, each system about its own mean. Its inverse is written out, so that no epoch needs a
    solver of its own.

    References
    ----------
    [SPS PS] 2020, appendix B: geometry matrix and the dilutions from its inverse.

    Examples
    --------
    Zenith and three satellites at 30 degrees elevation, 120 degrees apart:

    >>> from siteassess.angles import direction
    >>> toward = direction([0.0, 0.0, 120.0, 240.0], [90.0, 30.0, 30.0, 30.0])
    >>> together = np.zeros(4, dtype=int)
    >>> dops = dilution_of_precision(toward, together, together, epochs=1)
    >>> round(float(dops.position[0]), 4), round(float(dops.geometric[0]), 4)
    (2.6667, 3.0732)
    """
    systems = int(system.max(initial=0)) + 1
    count, means = _system_means(toward, system * epochs + epoch, systems, epochs)
    inverse = _inverse(_scatter(toward, epoch, count, means), count)
    ee, nn, uu = inverse[:3]
    clocks = _clock_variance(inverse, count, means)
    return Dilution(
        horizontal=np.sqrt(ee + nn),
        vertical=np.sqrt(uu),
        position=np.sqrt(ee + nn + uu),
        time=np.sqrt(clocks),
        geometric=np.sqrt(ee + nn + uu + clocks),
    )


def _system_means(
    toward: FloatArray, place: NDArray[np.int64], systems: int, epochs: int
) -> tuple[FloatArray, list[FloatArray]]:
    """Satellites of each system, and the mean of their unit vectors; arrays of shape (system, epoch)."""
    shape = systems, epochs
    count = np.bincount(place, minlength=systems * epochs).reshape(shape).astype(float)
    at_least_one = np.maximum(count, 1.0)
    sums = [np.bincount(place, weights=axis, minlength=systems * epochs).reshape(shape) for axis in toward]
    return count, [total / at_least_one for total in sums]


def _scatter(
    toward: FloatArray, epoch: NDArray[np.int64], count: FloatArray, means: list[FloatArray]
) -> list[FloatArray]:
    """East-east, north-north, up-up, east-north, east-up and north-up entries, shape (epoch,)."""

    def moment(one: int, other: int) -> FloatArray:
        summed = np.bincount(epoch, weights=toward[one] * toward[other], minlength=count.shape[1])
        return summed.astype(float)  # without samples, bincount counts in whole numbers

    east_east, north_north = moment(0, 0), moment(1, 1)
    up_up = count.sum(axis=0) - east_east - north_north  # the squares of a unit vector add up to 1
    moments = [east_east, north_north, up_up, moment(0, 1), moment(0, 2), moment(1, 2)]
    pairs = ((0, 0), (1, 1), (2, 2), (0, 1), (0, 2), (1, 2))
    return [
        total - (count * means[one] * means[other]).sum(axis=0)
        for total, (one, other) in zip(moments, pairs, strict=True)
    ]


def _inverse(scatter: list[FloatArray], count: FloatArray) -> tuple[FloatArray, ...]:
    """Entries of the inverse, in the order of the scatter; NaN where there is none."""
    ee, nn, uu, en, eu, nu = scatter
    adjugate = (
        nn * uu - nu * nu,
        ee * uu - eu * eu,
        ee * nn - en * en,
        eu * nu - en * uu,
        en * nu - eu * nn,
        en * eu - ee * nu,
    )
    determinant = ee * adjugate[0] + en * adjugate[3] + eu * adjugate[4]
    satellites, clocks = count.sum(axis=0), (count > 0).sum(axis=0)
    roundest = (satellites / 3.0) ** 3
    determined = (satellites >= 3 + clocks) & (determinant > LEAST_DETERMINANT * roundest)
    divisor = np.where(determined, determinant, np.nan)
    return tuple(entry / divisor for entry in adjugate)


def _clock_variance(
    inverse: tuple[FloatArray, ...], count: FloatArray, means: list[FloatArray]
) -> FloatArray:
    """Sum over the systems in view of the variance of their clocks, shape (epoch,)."""
    ee, nn, uu, en, eu, nu = inverse
    east, north, up = means
    from_position = (
        ee * east**2
        + nn * north**2
        + uu * up**2
        + 2.0 * (en * east * north + eu * east * up + nu * north * up)
    )
    variance: FloatArray = np.where(count > 0, 1.0 / np.maximum(count, 1.0) + from_position, 0.0).sum(axis=0)
    return np.where(np.isnan(ee), np.nan, variance)


def not_exceeded(dilution: FloatArray, shares: tuple[float, ...]) -> list[float]:
    """The smallest figures that are not exceeded for shares of the epochs; infinite if undetermined then.

    Parameters
    ----------
    dilution : array, shape (epoch,)
        One of the figures of :class:`Dilution`.
    shares : tuple of float
        Above 0, at most 1.

    Examples
    --------
    >>> not_exceeded(np.array([1.2, np.nan, 0.9, 1.5]), (0.5, 0.75, 1.0))
    [1.2, 1.5, inf]
    """
    ascending = np.sort(np.where(np.isnan(dilution), np.inf, dilution))
    return [float(ascending[math.ceil(share * len(ascending) - 1e-9) - 1]) for share in shares]
