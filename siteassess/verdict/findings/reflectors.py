"""Which solid obstacles stand near enough to reflect, and how high they rise."""

from dataclasses import dataclass

import numpy as np

from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.view import edge_distance_m, edge_elevation_deg

__all__ = ["NearReflectors", "along_edge_deg", "near_reflectors"]

STEP_DEG = 1.0


@dataclass(frozen=True, slots=True, kw_only=True)
class NearReflectors:
    """Solid obstacles nearer than a distance.

    Attributes
    ----------
    highest_deg : float
        Highest elevation that any of them reaches there; 0 where none rises above the horizon.
    name : str or None
        The one that does.
    unknown : tuple of str
        Obstacles above the limit without a distance: whether they are near is not known.
    """

    highest_deg: float
    name: str | None
    unknown: tuple[str, ...]


def near_reflectors(skyline: Skyline, *, nearer_than_m: float, above_deg: float) -> NearReflectors:
    """Solid obstacles nearer than a distance, measured along the ground.

    Parameters
    ----------
    skyline : Skyline
        What was surveyed.
    nearer_than_m : float
        Horizontal distance from which obstacles no longer count [m].
    above_deg : float
        Elevation above which an obstacle without a distance is worth naming [deg].

    Notes
    -----
    Along an edge, distance and elevation are looked up every degree of azimuth and at its points.
    """
    highest_deg, name = 0.0, None
    unknown: list[str] = []
    for obstacle in skyline.obstacles:
        if obstacle.cover != "solid":
            continue
        azimuth_deg = along_edge_deg(obstacle)
        elevation_deg = edge_elevation_deg(obstacle, azimuth_deg)
        distance_m = edge_distance_m(obstacle, azimuth_deg) * np.cos(np.deg2rad(elevation_deg))
        if np.any(np.isnan(distance_m) & (elevation_deg > above_deg)):
            unknown.append(obstacle.name)
        near = elevation_deg[distance_m < nearer_than_m]
        if near.max(initial=0.0) > highest_deg:
            highest_deg, name = float(near.max()), obstacle.name
    return NearReflectors(highest_deg=highest_deg, name=name, unknown=tuple(unknown))


def along_edge_deg(obstacle: Obstacle) -> np.ndarray[tuple[int], np.dtype[np.float64]]:
    """Azimuths at which an edge is looked up: its points, and every degree between."""
    first, last = obstacle.azimuth_deg[0], obstacle.azimuth_deg[-1]
    return np.concatenate([obstacle.azimuth_deg, np.arange(first, last, STEP_DEG)])
