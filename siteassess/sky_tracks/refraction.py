"""How the air bends radio waves: from geometric to apparent elevation."""

import numpy as np
from numpy.typing import ArrayLike, NDArray

__all__ = ["apparent_elevation_deg"]

LOWEST_DEG, HIGHEST_DEG = -1.0, 10.0  # range of validity of the formula in elevation [P.834]
HIGHEST_M = 3_000.0  # and in height above sea level


def apparent_elevation_deg(elevation_deg: ArrayLike, height_m: ArrayLike) -> NDArray[np.float64]:
    """Elevation at which a satellite is received, after refraction in the standard atmosphere.

    Parameters
    ----------
    elevation_deg : array_like
        Geometric (true, free-space) elevation.
    height_m : array_like
        Height of the antenna, broadcast against `elevation_deg`; below 0 it counts as 0, above 3 000 m as
        3 000 m.

    Returns
    -------
    array
        Apparent elevation [deg]. Below -1 degree the formula does not hold: those satellites are taken as
        below the horizon, and their elevation is returned as it is.

    Notes
    -----
    The formula holds from -1 to 10 degrees. Above, the bend falls off as the cotangent of the elevation, as
    in a flat layered atmosphere [Meeus 1998], and joins the formula at 10 degrees; it is 0 at the zenith.

    References
    ----------
    [P.834], as [P.619] Attachment B; [Meeus 1998] chapter 16.

    Examples
    --------
    >>> apparent_elevation_deg([0.0, 5.0, 90.0], 0.0).round(3).tolist()
    [0.579, 5.186, 90.0]
    """
    elevation_deg = np.asarray(elevation_deg, dtype=float)
    height_km = np.clip(height_m, 0.0, HIGHEST_M) / 1_000.0
    within_deg = np.clip(elevation_deg, LOWEST_DEG, HIGHEST_DEG)
    bend_deg = _bend_deg(within_deg, height_km)
    with np.errstate(divide="ignore"):
        falloff = np.tan(np.deg2rad(HIGHEST_DEG)) / np.tan(np.deg2rad(elevation_deg))
    bend_deg = np.where(elevation_deg > HIGHEST_DEG, bend_deg * falloff, bend_deg)
    return np.where(elevation_deg < LOWEST_DEG, elevation_deg, np.minimum(elevation_deg + bend_deg, 90.0))


def _bend_deg(elevation_deg: NDArray[np.float64], height_km: NDArray[np.float64]) -> NDArray[np.float64]:
    """Bend at a geometric elevation [P.619] Attachment B."""
    t, h = elevation_deg, height_km
    return 1.0 / (
        1.728
        + 0.5411 * t
        + 0.03723 * t**2
        + h * (0.1815 + 0.06272 * t + 0.01380 * t**2)
        + h**2 * (0.01727 + 0.008288 * t)
    )
