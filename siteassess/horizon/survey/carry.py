"""Sighted points carried from the instrument to the antenna: same points in space, seen from elsewhere."""

from dataclasses import dataclass

import numpy as np

from siteassess.angles import wrap_difference_deg
from siteassess.horizon.curves import BoolArray, FloatArray, IndexArray

__all__ = ["Points", "carried", "turned_short_way"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Points:
    """Points of an edge in the order of the survey; all arrays have shape (point,).

    Attributes
    ----------
    azimuth_deg : array
        Unwrapped: neighbours differ by the angle between them.
    elevation_deg, underside_deg : array
        Upper and lower edge; the lower one is NaN where it stands on the ground.
    distance_m : array
        Slant distance to the upper edge; NaN where it is not known.
    depth_m : array
        Path through leaves; NaN where there are none.
    """

    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    underside_deg: FloatArray
    distance_m: FloatArray
    depth_m: FloatArray

    @property
    def horizontal_m(self) -> FloatArray:
        """Horizontal distance to the upper edge."""
        return self.distance_m * np.cos(np.deg2rad(self.elevation_deg))

    def taken(self, which: BoolArray | IndexArray) -> "Points":
        """Some of the points, in the given order."""
        return Points(
            azimuth_deg=self.azimuth_deg[which],
            elevation_deg=self.elevation_deg[which],
            underside_deg=self.underside_deg[which],
            distance_m=self.distance_m[which],
            depth_m=self.depth_m[which],
        )


def carried(points: Points, offset_m: tuple[float, float, float]) -> Points:
    """The same points seen from the antenna.

    Parameters
    ----------
    points : Points
        As seen from the instrument. Those without a distance keep their angles.
    offset_m : tuple of float
        Where the instrument stands from the antenna's phase centre: east, north, up [m].

    Returns
    -------
    Points
        No azimuth turns by more than half a circle.
    """
    east_m, north_m, up_m = offset_m
    horizontal_m = points.horizontal_m
    azimuth_rad = np.deg2rad(points.azimuth_deg)
    point_east_m = east_m + horizontal_m * np.sin(azimuth_rad)
    point_north_m = north_m + horizontal_m * np.cos(azimuth_rad)
    point_up_m = up_m + points.distance_m * np.sin(np.deg2rad(points.elevation_deg))
    lower_up_m = up_m + horizontal_m * np.tan(np.deg2rad(points.underside_deg))
    azimuth_deg, elevation_deg, underside_deg = points.azimuth_deg, points.elevation_deg, points.underside_deg
    away_m = horizontal_m
    known = ~np.isnan(points.distance_m)
    if east_m or north_m:
        seen_deg = np.rad2deg(np.arctan2(point_east_m, point_north_m))
        azimuth_deg = np.where(known, azimuth_deg + wrap_difference_deg(seen_deg - azimuth_deg), azimuth_deg)
        away_m = np.hypot(point_east_m, point_north_m)
    if east_m or north_m or up_m:
        elevation_deg = np.where(known, np.rad2deg(np.arctan2(point_up_m, away_m)), elevation_deg)
        underside_deg = np.where(known, np.rad2deg(np.arctan2(lower_up_m, away_m)), underside_deg)
    return Points(
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        underside_deg=underside_deg,
        distance_m=np.hypot(away_m, point_up_m),
        depth_m=points.depth_m,
    )


def turned_short_way(azimuth_deg: FloatArray) -> FloatArray:
    """Azimuths unwrapped so that neighbours differ by less than half a circle, as straight edges do."""
    turns = np.round(np.diff(azimuth_deg) / 360.0)
    return np.asarray(azimuth_deg - 360.0 * np.append(0.0, np.cumsum(turns)))
