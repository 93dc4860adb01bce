"""From the Earth's frame to the sky of a site: WGS 84, east-north-up, azimuth and elevation."""

from typing import Any, Protocol

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.angles import wrap_azimuth_deg
from siteassess.constants import WGS84_FLATTENING, WGS84_SEMI_MAJOR_AXIS_M

__all__ = ["GeodeticPosition", "earth_fixed_of_geodetic_m", "east_north_up", "look_angles"]

FloatArray = NDArray[np.float64]


class GeodeticPosition(Protocol):
    """Anything with a geodetic position: WGS 84, height above the ellipsoid."""

    @property
    def latitude_deg(self) -> float: ...
    @property
    def longitude_deg(self) -> float: ...
    @property
    def height_m(self) -> float: ...


def earth_fixed_of_geodetic_m(
    latitude_deg: ArrayLike, longitude_deg: ArrayLike, height_m: ArrayLike
) -> FloatArray:
    """Earth-fixed coordinates of geodetic positions.

    Parameters
    ----------
    latitude_deg, longitude_deg : array_like
        Geodetic, WGS 84.
    height_m : array_like
        Above the ellipsoid.

    Returns
    -------
    array, shape (3, ...)
        x, y and z [m], with the broadcast shape of the arguments behind.

    References
    ----------
    [TR8350.2] section 4 (equations as in any textbook of geodesy).

    Examples
    --------
    >>> earth_fixed_of_geodetic_m(0.0, 90.0, 100.0).round(3).tolist()
    [0.0, 6378237.0, 0.0]
    """
    latitude_rad, longitude_rad = np.deg2rad(latitude_deg), np.deg2rad(longitude_deg)
    height_m = np.asarray(height_m, dtype=float)
    eccentricity_squared = WGS84_FLATTENING * (2.0 - WGS84_FLATTENING)
    normal_m = WGS84_SEMI_MAJOR_AXIS_M / np.sqrt(1.0 - eccentricity_squared * np.sin(latitude_rad) ** 2)
    from_axis_m = (normal_m + height_m) * np.cos(latitude_rad)
    return np.stack(
        np.broadcast_arrays(
            from_axis_m * np.cos(longitude_rad),
            from_axis_m * np.sin(longitude_rad),
            (normal_m * (1.0 - eccentricity_squared) + height_m) * np.sin(latitude_rad),
        )
    )


def east_north_up(latitude_deg: float, longitude_deg: float) -> FloatArray:
    """Rotation from Earth-fixed to local axes: rows point east, north and up, shape (3, 3).

    At a pole, north is the direction that the meridian `longitude_deg` takes there.
    """
    latitude_rad, longitude_rad = np.deg2rad(latitude_deg), np.deg2rad(longitude_deg)
    sin_latitude, cos_latitude = np.sin(latitude_rad), np.cos(latitude_rad)
    sin_longitude, cos_longitude = np.sin(longitude_rad), np.cos(longitude_rad)
    return np.array(
        [
            [-sin_longitude, cos_longitude, 0.0],
            [-sin_latitude * cos_longitude, -sin_latitude * sin_longitude, cos_latitude],
            [cos_latitude * cos_longitude, cos_latitude * sin_longitude, sin_latitude],
        ]
    )


def look_angles(earth_fixed_m: ArrayLike, position: GeodeticPosition) -> tuple[Any, Any, Any]:
    """Azimuth, elevation and range of points seen from a position.

    Parameters
    ----------
    earth_fixed_m : array_like, shape (3, ...)
        Earth-fixed coordinates of the points.
    position : GeodeticPosition
        Where the antenna is.

    Returns
    -------
    azimuth_deg : array, shape (...)
        Clockwise from true north, 0 <= azimuth < 360.
    elevation_deg : array, shape (...)
        Geometric elevation above the plane of the ellipsoidal horizon.
    range_m : array, shape (...)
        Distance.
    """
    points_m = np.asarray(earth_fixed_m, dtype=float)
    position_m = earth_fixed_of_geodetic_m(position.latitude_deg, position.longitude_deg, position.height_m)
    from_position_m = points_m - position_m.reshape(3, *[1] * (points_m.ndim - 1))
    rotation = east_north_up(position.latitude_deg, position.longitude_deg)
    east_m, north_m, up_m = np.tensordot(rotation, from_position_m, axes=1)
    horizontal_m = np.hypot(east_m, north_m)
    azimuth_deg = wrap_azimuth_deg(np.rad2deg(np.arctan2(east_m, north_m)))
    return azimuth_deg, np.rad2deg(np.arctan2(up_m, horizontal_m)), np.hypot(horizontal_m, up_m)
