"""The plan round a site: longitude and latitude as metres east and north of it."""

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.constants import WGS84_FLATTENING, WGS84_SEMI_MAJOR_AXIS_M
from siteassess.site_file.model import Position

__all__ = ["EFFECTIVE_EARTH_RADIUS_M", "drop_m", "east_north_m", "far_m"]

FloatArray = NDArray[np.float64]

EFFECTIVE_EARTH_RADIUS_M = 8.5e6  # 4/3 of the mean radius, for rays bent by the air [P.526]


def east_north_m(
    longitude_deg: ArrayLike, latitude_deg: ArrayLike, site: Position
) -> tuple[FloatArray, FloatArray]:
    """East and north of a site of points at its own ellipsoidal height.

    Parameters
    ----------
    longitude_deg, latitude_deg : array_like, shape (n,)
        WGS 84; longitudes may have any turn in them.
    site : Position
        The origin.

    Returns
    -------
    east_m, north_m : array, shape (n,)
        In the plane that touches the ellipsoid below the site, shifted up to it; this gives true azimuths.

    References
    ----------
    [TR8350.2] Ellipsoid of WGS 84.

    Examples
    --------
    >>> site = Position(latitude_deg=0.0, longitude_deg=179.9995, height_m=0.0)
    >>> [round(float(x), 2) for x in east_north_m(-179.9995, 0.0, site)]
    [111.32, 0.0]
    """
    eccentricity2 = WGS84_FLATTENING * (2.0 - WGS84_FLATTENING)

    def normal_m(latitude_rad: ArrayLike) -> FloatArray:
        return np.asarray(WGS84_SEMI_MAJOR_AXIS_M / np.sqrt(1.0 - eccentricity2 * np.sin(latitude_rad) ** 2))

    latitude_rad, site_rad = np.deg2rad(latitude_deg), np.deg2rad(site.latitude_deg)
    around_rad = np.deg2rad(np.asarray(longitude_deg, dtype=float) - site.longitude_deg)
    axis_m = (normal_m(latitude_rad) + site.height_m) * np.cos(latitude_rad)
    site_axis_m = (normal_m(site_rad) + site.height_m) * np.cos(site_rad)
    polar_m = (normal_m(latitude_rad) * (1.0 - eccentricity2) + site.height_m) * np.sin(latitude_rad)
    site_polar_m = (normal_m(site_rad) * (1.0 - eccentricity2) + site.height_m) * np.sin(site_rad)
    # Differences before products, so that near points keep all their digits.
    inward_m = (site_axis_m - axis_m) + 2.0 * axis_m * np.sin(0.5 * around_rad) ** 2
    north_m = np.cos(site_rad) * (polar_m - site_polar_m) + np.sin(site_rad) * inward_m
    return axis_m * np.sin(around_rad), north_m


def far_m(longitude_deg: ArrayLike, latitude_deg: ArrayLike, site: Position) -> FloatArray:
    """Distances of points from a site on a sphere [m], good to half a per cent however far.

    Examples
    --------
    >>> site = Position(latitude_deg=0.0, longitude_deg=0.0, height_m=0.0)
    >>> round(float(far_m(90.0, 0.0, site)) / 1e3)
    10019
    """
    latitude_rad, site_rad = np.deg2rad(latitude_deg), np.deg2rad(site.latitude_deg)
    around_rad = np.deg2rad(np.asarray(longitude_deg, dtype=float) - site.longitude_deg)
    # Haversines.
    chord2 = np.sin(0.5 * (latitude_rad - site_rad)) ** 2
    chord2 = chord2 + np.cos(latitude_rad) * np.cos(site_rad) * np.sin(0.5 * around_rad) ** 2
    return np.asarray(2.0 * WGS84_SEMI_MAJOR_AXIS_M * np.arcsin(np.sqrt(np.minimum(chord2, 1.0))))


def drop_m(distance_m: ArrayLike) -> FloatArray:
    """How far the earth falls away below the horizontal [m], for rays bent by the air.

    Examples
    --------
    >>> round(float(drop_m(10_000.0)), 2)
    5.88
    """
    return np.asarray(np.square(distance_m) / (2.0 * EFFECTIVE_EARTH_RADIUS_M))
