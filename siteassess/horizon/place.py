"""Where azimuths fall between the points of one obstacle, and what lies between two points."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from siteassess.horizon.curves import BoolArray, FloatArray, IndexArray, between_on_great_circle
from siteassess.horizon.skyline import Obstacle

__all__ = ["is_within", "locate"]

ONE_AZIMUTH_DEG = 1e-9  # azimuths that differ less are one: wrapping leaves about 1e-13 degrees


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Place:
    """Where azimuths fall between the points of one obstacle."""

    inside: BoolArray  # in the shape of the azimuths; the arrays below hold those inside
    unwrapped_deg: FloatArray
    azimuth_deg: FloatArray
    left: IndexArray

    def linear(self, values: FloatArray) -> FloatArray:
        """Values between the points, linear in azimuth."""
        start, end = self.azimuth_deg[self.left], self.azimuth_deg[self.left + 1]
        part = np.divide(self.unwrapped_deg - start, end - start, out=np.zeros_like(start), where=end > start)
        # Weighted so that a point without a value leaves its neighbour's own azimuth alone.
        first, last = values[self.left], values[self.left + 1]
        return np.where(part == 0.0, first, np.where(part == 1.0, last, first + part * (last - first)))

    def great_circle(self, values: FloatArray) -> FloatArray:
        """Values that follow c cos(az) + s sin(az) between the points."""
        start, end = self.azimuth_deg[self.left], self.azimuth_deg[self.left + 1]
        wide = end > start
        end = np.where(wide, end, start + 1.0)  # any width: only its own azimuth is asked for
        first, last = values[self.left], np.where(wide, values[self.left + 1], values[self.left])
        return between_on_great_circle(np.where(wide, self.unwrapped_deg, start), start, end, first, last)

    def filled(self, values: FloatArray) -> FloatArray:
        """Values in the shape of the azimuths, NaN outside the obstacle."""
        result = np.full(self.inside.shape, np.nan)
        result[self.inside] = values
        return result


def is_within(obstacle: Obstacle, azimuth_deg: ArrayLike) -> BoolArray:
    """Whether azimuths lie between the first and the last point of an obstacle."""
    first, last = obstacle.azimuth_deg[0], obstacle.azimuth_deg[-1]
    beyond_deg = np.mod(np.asarray(azimuth_deg, dtype=float) - first + ONE_AZIMUTH_DEG, 360.0)
    return np.asarray(beyond_deg <= last - first + 2.0 * ONE_AZIMUTH_DEG)


def locate(obstacle: Obstacle, azimuth_deg: ArrayLike) -> _Place:
    """Where azimuths fall between the points of an obstacle; at a vertical edge on its higher side."""
    points_deg, height = obstacle.azimuth_deg, obstacle.elevation_deg
    inside = is_within(obstacle, azimuth_deg)
    first, last = points_deg[0], points_deg[-1]
    beyond_deg = np.mod(np.asarray(azimuth_deg, dtype=float)[inside] - first + ONE_AZIMUTH_DEG, 360.0)
    unwrapped_deg = np.clip(first + beyond_deg - ONE_AZIMUTH_DEG, first, last)
    if len(points_deg) > 2 or first == last:
        nearest = points_deg[np.clip(np.searchsorted(points_deg, unwrapped_deg - ONE_AZIMUTH_DEG), 0, None)]
        # A break is met exactly, whatever wrapping did to the last digits.
        unwrapped_deg = np.where(np.abs(nearest - unwrapped_deg) <= ONE_AZIMUTH_DEG, nearest, unwrapped_deg)
    right = np.searchsorted(points_deg, unwrapped_deg, side="right")
    left = np.searchsorted(points_deg, unwrapped_deg, side="left")
    before, behind = np.maximum(left, 0), np.minimum(right - 1, len(points_deg) - 1)
    take_before = (
        (right - left > 0) & (left > 0) & ((height[before] > height[behind]) | (right == len(points_deg)))
    )
    segment = np.where(take_before, left - 1, right - 1)
    return _Place(
        inside=inside,
        unwrapped_deg=unwrapped_deg,
        azimuth_deg=points_deg,
        left=np.clip(segment, 0, len(points_deg) - 2),
    )
