"""Diffraction over and round the edges of obstacles, for a plane wave: the satellite is infinitely far away.

A positive Fresnel parameter means that the edge stands in the line of sight.
"""

from functools import cache
from typing import Any

import numpy as np
from numpy.polynomial.chebyshev import chebval
from numpy.typing import ArrayLike, NDArray

from siteassess.tables import packaged_columns

__all__ = [
    "LOSS_FREE_NU",
    "exact_knife_edge_loss_db",
    "fresnel_integrals",
    "fresnel_parameter",
    "knife_edge_loss_db",
    "strip_loss_db",
]

LOSS_FREE_NU = -0.78  # [P.526] 4.1: at and below, the knife edge costs nothing
LARGEST_ARGUMENT = 1e6  # from here on the integrals are 1/2 to the accuracy of the series
HALF_WAY = 2.0  # the series of fresnel.csv runs over (x - 2) / (x + 2)


def fresnel_parameter(angle_deg: ArrayLike, distance_m: ArrayLike, wavelength_m: ArrayLike) -> Any:
    """Fresnel parameter of an edge for a plane wave [1].

    Parameters
    ----------
    angle_deg : array
        Angle from the line of sight to the edge [deg], positive when the edge blocks the line.
    distance_m : array
        From the antenna to the edge [m].
    wavelength_m : array
        Wavelength [m]. The three shapes broadcast.

    References
    ----------
    [P.526] ITU-R P.526, 4.1, with the far terminal at infinity: the excess path is d (1 - cos angle).

    Examples
    --------
    >>> round(float(fresnel_parameter(1.0, 20.0, 0.190294)), 4)
    0.253
    """
    half_angle_rad = np.deg2rad(angle_deg) / 2.0
    return 2.0 * np.sqrt(2.0 * np.asarray(distance_m) / np.asarray(wavelength_m)) * np.sin(half_angle_rad)


def knife_edge_loss_db(nu: ArrayLike) -> Any:
    """Loss [dB] over a knife edge by the approximation of P.526; 0 where the edge is clear of the line.

    It stays within 0.11 dB of the exact form from -0.78 to 3 and carries no ripple in the open sky.

    References
    ----------
    [P.526] ITU-R P.526, 4.1 (eq. 31).

    Examples
    --------
    >>> round(float(knife_edge_loss_db(0.0)), 4)
    6.0329
    """
    shifted = np.asarray(nu, dtype=float) - 0.1
    near = np.maximum(shifted, LOSS_FREE_NU - 0.1)
    loss_db = 6.9 + 20.0 * np.log10(np.sqrt(near**2 + 1.0) + near)  # [P.526] eq. 31
    return np.where(np.asarray(nu) <= LOSS_FREE_NU, 0.0, loss_db)


def exact_knife_edge_loss_db(nu: ArrayLike) -> Any:
    """Loss [dB] over a knife edge by Fresnel integrals, with its ripple; negative where the ripple is a gain.

    References
    ----------
    [P.526] ITU-R P.526, 4.1 (eq. 30).

    Examples
    --------
    >>> round(float(exact_knife_edge_loss_db(1.0)), 3)
    13.864
    """
    passing = 1.0 - _share_of_field(-np.inf, nu)
    return -20.0 * np.log10(np.abs(passing))


def strip_loss_db(
    nu_from: ArrayLike, nu_to: ArrayLike, nu_top: ArrayLike, nu_bottom: ArrayLike = -np.inf
) -> Any:
    """Loss [dB] behind a rectangular screen, which is narrow enough for the wave to pass round it.

    What the screen takes away is the part of the undisturbed field that crosses it: the product of a part
    across and a part upward, each the complex difference of its two edges.

    Parameters
    ----------
    nu_from, nu_to : array
        Fresnel parameters of the two side edges, from left to right, counted from the line of sight: the line
        meets the screen where the first is negative and the second positive.
    nu_top, nu_bottom : array
        Those of the upper and lower edge, counted upward from the line of sight. By default the screen
        reaches down without end.

    Returns
    -------
    array
        Loss, at least 0: a gain by ripple is not counted.

    References
    ----------
    [P.526] ITU-R P.526, 5.1: finite-width screens from the Fresnel integrals of their edges. The product form
    is the Kirchhoff integral over a rectangle, as in textbooks on optics (from memory).

    Examples
    --------
    >>> round(float(strip_loss_db(-0.4185, 0.4185, 13.0)), 1)
    3.5
    """
    taken = _share_of_field(nu_from, nu_to) * _share_of_field(nu_bottom, nu_top)
    return np.maximum(-20.0 * np.log10(np.abs(1.0 - taken)), 0.0)


def fresnel_integrals(x: ArrayLike) -> tuple[Any, Any]:
    """Fresnel integrals C and S of the argument pi t^2 / 2, to 2e-7.

    References
    ----------
    [A&S] Abramowitz and Stegun, Handbook of Mathematical Functions, 7.3.9 and 7.3.10.

    Examples
    --------
    >>> [round(float(integral), 4) for integral in fresnel_integrals(1.0)]
    [0.7799, 0.4383]
    """
    argument = np.asarray(x, dtype=float)
    size = np.minimum(np.abs(argument), LARGEST_ARGUMENT)
    f, g = chebval(1.0 - 2.0 * HALF_WAY / (size + HALF_WAY), _auxiliary_series())
    phase = np.pi / 2.0 * size**2
    sine, cosine = np.sin(phase), np.cos(phase)
    sign = np.sign(argument)
    return sign * (0.5 + f * sine - g * cosine), sign * (0.5 - f * cosine - g * sine)  # [A&S] 7.3.9, 7.3.10


def _share_of_field(nu_from: ArrayLike, nu_to: ArrayLike) -> Any:
    """Part of the undisturbed field between two Fresnel parameters, complex; 1 between the infinities."""
    cosine_from, sine_from = fresnel_integrals(nu_from)
    cosine_to, sine_to = fresnel_integrals(nu_to)
    return (1.0 + 1.0j) / 2.0 * ((cosine_to - cosine_from) - 1.0j * (sine_to - sine_from))


@cache
def _auxiliary_series() -> NDArray[np.float64]:
    """Chebyshev coefficients of the auxiliary functions f and g, shape (order, 2)."""
    table = packaged_columns("link_budget/obstacles/fresnel.csv")
    return np.stack([table["f"], table["g"]], axis=1)
