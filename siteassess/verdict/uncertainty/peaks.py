"""Points of solid edges of which the highest one counts, of all and of those near enough to reflect."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.curves import edge_elevation
from siteassess.horizon.regions import solid_region
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import edge_distance_m, edge_elevation_deg
from siteassess.verdict.findings.reflectors import along_edge_deg
from siteassess.verdict.uncertainty.readings import Between, between_readings

__all__ = ["Peaks", "highest_points", "near_points"]

FloatArray = NDArray[np.float64]

FARTHEST = 8.0  # standard deviations below the highest point from which another may rise above it


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Peaks:
    """Points of edges; arrays of shape (point,).

    Attributes
    ----------
    elevation_deg : array
        As surveyed.
    short_m : array
        How much nearer they stand than it takes to count.
    nodes : Between
        What they hang on.
    """

    elevation_deg: FloatArray
    short_m: FloatArray
    nodes: Between


def highest_points(part: Skyline, spread_deg: float) -> Peaks:
    """Points of all solid edges that may be the highest when each is off a little."""
    region = solid_region(part)
    azimuth_deg = np.concatenate([region.start_deg, region.end_deg])
    curve = np.concatenate([region.curve, region.curve])
    owner = np.concatenate([region.obstacle, region.obstacle])
    elevation_deg = edge_elevation(region.curves, curve, azimuth_deg)
    counts = elevation_deg >= elevation_deg.max(initial=0.0) - FARTHEST * spread_deg
    return Peaks(
        elevation_deg=elevation_deg[counts],
        short_m=np.full(counts.sum(), np.inf),
        nodes=between_readings(part.obstacles, owner[counts], azimuth_deg[counts]),
    )


def near_points(part: Skyline, nearer_than_m: float, error_m: float) -> Peaks:
    """Points of solid edges that may be nearer than a horizontal distance when distances are off a little."""
    empty = np.empty(0)
    solid = [
        (index, obstacle, along_edge_deg(obstacle))
        for index, obstacle in enumerate(part.obstacles)
        if obstacle.cover == "solid" and obstacle.distance_m is not None
    ]
    azimuth_deg = np.concatenate([empty, *(along_deg for *_, along_deg in solid)])
    elevation_deg = np.concatenate(
        [empty, *(edge_elevation_deg(obstacle, along_deg) for _, obstacle, along_deg in solid)]
    )
    slant_m = np.concatenate(
        [empty, *(edge_distance_m(obstacle, along_deg) for _, obstacle, along_deg in solid)]
    )
    short_m = nearer_than_m - slant_m * np.cos(np.deg2rad(elevation_deg))
    owner = np.concatenate([empty, *(np.full(len(along_deg), index) for index, _, along_deg in solid)])
    counts = short_m > -FARTHEST * error_m
    return Peaks(
        elevation_deg=elevation_deg[counts],
        short_m=short_m[counts],
        nodes=between_readings(part.obstacles, owner[counts].astype(np.int64), azimuth_deg[counts]),
    )
