"""Where places on edges lie between the readings of a survey, and how a wrong distance moves a reading."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.skyline import Obstacle

__all__ = ["Between", "between_readings", "rise_deg_per_m", "taken_places"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Between:
    """Places on edges as parts of the way from one reading to the next; arrays have one shape."""

    left: IndexArray
    right: IndexArray
    part: FloatArray


def taken_places(places: Between, which: IndexArray) -> Between:
    """Some of the places."""
    return Between(left=places.left[which], right=places.right[which], part=places.part[which])


def between_readings(obstacles: Sequence[Obstacle], owner: IndexArray, azimuth_deg: FloatArray) -> Between:
    """Where azimuths lie between the readings of the obstacles that they are on; readings counted through."""
    first = np.cumsum([0, *(len(obstacle.azimuth_deg) for obstacle in obstacles)])
    left, right = np.zeros((2, len(owner)), dtype=np.int64)
    part = np.zeros(len(owner))
    for index in np.unique(owner[owner >= 0]).tolist():
        on = owner == index
        points_deg = obstacles[index].azimuth_deg
        last = len(points_deg) - 1
        unwrapped_deg = points_deg[0] + np.mod(azimuth_deg[on] - points_deg[0] + 1e-9, 360.0) - 1e-9
        behind = np.clip(np.searchsorted(points_deg, unwrapped_deg, side="right") - 1, 0, max(last - 1, 0))
        ahead = np.minimum(behind + 1, last)
        width_deg = np.maximum(points_deg[ahead] - points_deg[behind], 1e-9)
        left[on], right[on] = first[index] + behind, first[index] + ahead
        part[on] = np.clip((unwrapped_deg - points_deg[behind]) / width_deg, 0.0, 1.0)
    return Between(left=left, right=right, part=part)


def rise_deg_per_m(obstacles: Sequence[Obstacle], offset_m: tuple[float, float, float]) -> FloatArray:
    """How much higher each reading stands for the antenna when it is farther from the instrument."""
    found = [np.zeros(len(obstacle.azimuth_deg)) for obstacle in obstacles]
    if any(offset_m):
        for index, obstacle in enumerate(obstacles):
            if obstacle.distance_m is not None:
                found[index] = _rise_deg_per_m(obstacle, offset_m)
    return np.concatenate([np.zeros(1) if not found else np.empty(0), *found])


def _rise_deg_per_m(obstacle: Obstacle, offset_m: tuple[float, float, float]) -> FloatArray:
    assert obstacle.distance_m is not None
    azimuth_rad, elevation_rad = np.deg2rad(obstacle.azimuth_deg), np.deg2rad(obstacle.elevation_deg)
    east, north = np.sin(azimuth_rad), np.cos(azimuth_rad)
    toward = np.stack([east * np.cos(elevation_rad), north * np.cos(elevation_rad), np.sin(elevation_rad)])
    upward = np.stack([-east * np.sin(elevation_rad), -north * np.sin(elevation_rad), np.cos(elevation_rad)])
    sight_m = obstacle.distance_m * toward - np.array(offset_m)[:, None]  # from the instrument
    along = sight_m / np.linalg.norm(sight_m, axis=0)
    rise_rad_per_m = (along * upward).sum(axis=0) / obstacle.distance_m
    return np.asarray(np.nan_to_num(np.rad2deg(rise_rad_per_m), nan=0.0))
