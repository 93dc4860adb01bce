"""Walls of buildings as seen from the antenna, in flat tables of corners and walls."""

from dataclasses import dataclass, fields
from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from siteassess.angles import wrap_azimuth_deg
from siteassess.horizon.curves import BoolArray, FloatArray, IndexArray, between_on_great_circle

__all__ = ["Parts", "Walls", "parts_of", "walls_of"]

# Azimuths are kept to multiples of 2^-40 degrees (a billionth of a millimetre at 100 km), so that whole turns
# can be added and taken away without rounding, and walls that share a corner share its azimuth.
AZIMUTH_STEPS_PER_DEG = 2.0**40


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Parts:
    """Polygons of many buildings in plan: corners in rings, rings in parts, parts in buildings.

    Attributes
    ----------
    east_m, north_m : array, shape (corner,)
        From the antenna's axis; every ring repeats its first corner at its end.
    ring : integer array, shape (corner,)
        Ring of each corner.
    part : integer array, shape (ring,)
        Part of each ring; the first ring of a part is its outer one.
    building : integer array, shape (part,)
        Building of each part.
    """

    east_m: FloatArray
    north_m: FloatArray
    ring: IndexArray
    part: IndexArray
    building: IndexArray


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Walls:
    """Walls turned clockwise as seen from the antenna; all arrays have shape (wall,).

    Attributes
    ----------
    start_deg, end_deg : array
        Azimuths, 0 <= start < 360, start <= end < start + 180; equal where only an edge of the wall is seen.
    start_m, end_m : array
        Horizontal distances of its ends.
    faces_antenna : boolean array
        Whether the antenna sees its outer side.
    backwards : boolean array
        Whether the ring runs anticlockwise there.
    crosses_north : boolean array
        Whether it crosses the line that runs north from the antenna.
    nearest_m : array
        Horizontal distance of its nearest point.
    ring, part, building : integer array
        What it belongs to.
    """

    start_deg: FloatArray
    end_deg: FloatArray
    start_m: FloatArray
    end_m: FloatArray
    faces_antenna: BoolArray
    backwards: BoolArray
    crosses_north: BoolArray
    nearest_m: FloatArray
    ring: IndexArray
    part: IndexArray
    building: IndexArray

    def __len__(self) -> int:
        return len(self.start_deg)

    def taken(self, which: BoolArray | IndexArray) -> "Walls":
        """Some of the walls, in the given order."""
        columns: dict[str, Any] = {field.name: getattr(self, field.name)[which] for field in fields(self)}
        return Walls(**columns)

    def distance_m(self, which: IndexArray, azimuth_deg: FloatArray) -> FloatArray:
        """Horizontal distances of walls along azimuths that they span."""
        nearness = between_on_great_circle(
            azimuth_deg,
            self.start_deg[which],
            self.end_deg[which],
            1.0 / self.start_m[which],
            1.0 / self.end_m[which],
        )
        return 1.0 / nearness


def parts_of(
    corners_m: FloatArray, ring_sizes: ArrayLike, rings_of_parts: ArrayLike, parts_of_buildings: ArrayLike
) -> Parts:
    """Polygons from all their corners, shape (corner, 2), and how many of each make one of the next."""
    ring_sizes, rings_of_parts, parts_of_buildings = (
        np.asarray(count, dtype=np.int64) for count in (ring_sizes, rings_of_parts, parts_of_buildings)
    )
    return Parts(
        east_m=np.ascontiguousarray(corners_m[:, 0]),
        north_m=np.ascontiguousarray(corners_m[:, 1]),
        ring=np.repeat(np.arange(len(ring_sizes)), ring_sizes),
        part=np.repeat(np.arange(len(rings_of_parts)), rings_of_parts),
        building=np.repeat(np.arange(len(parts_of_buildings)), parts_of_buildings),
    )


def walls_of(parts: Parts) -> Walls:
    """The walls of all rings, those without length left out."""
    east_m, north_m, ring = parts.east_m, parts.north_m, parts.ring
    first = np.flatnonzero((ring[1:] == ring[:-1]) & ((np.diff(east_m) != 0.0) | (np.diff(north_m) != 0.0)))
    last, wall_ring = first + 1, ring[first]
    azimuth_deg = np.asarray(wrap_azimuth_deg(np.rad2deg(np.arctan2(east_m, north_m))))
    azimuth_deg = np.rint(azimuth_deg * AZIMUTH_STEPS_PER_DEG) / AZIMUTH_STEPS_PER_DEG
    azimuth_deg[azimuth_deg == 360.0] = 0.0
    turn_deg = azimuth_deg[last] - azimuth_deg[first]
    turn_deg -= 360.0 * np.round(turn_deg / 360.0)
    backwards = turn_deg < 0.0
    start, end = np.where(backwards, last, first), np.where(backwards, first, last)
    distance_m = np.hypot(east_m, north_m)

    step_east_m, step_north_m = east_m[last] - east_m[first], north_m[last] - north_m[first]
    moment_m2 = east_m[first] * step_north_m - north_m[first] * step_east_m  # positive: antenna to the left
    doubled_m2 = np.bincount(wall_ring, weights=_area_terms_m2(parts, first, last), minlength=len(parts.part))
    is_hole = np.append(False, parts.part[1:] == parts.part[:-1])
    inside_left = (doubled_m2 > 0.0) != is_hole
    length2_m2 = step_east_m**2 + step_north_m**2
    along = -(east_m[first] * step_east_m + north_m[first] * step_north_m) / length2_m2
    along = np.clip(along, 0.0, 1.0)
    return Walls(
        start_deg=azimuth_deg[start],
        end_deg=azimuth_deg[start] + np.abs(turn_deg),
        start_m=distance_m[start],
        end_m=distance_m[end],
        faces_antenna=np.where(inside_left[wall_ring], moment_m2 < 0.0, moment_m2 > 0.0),
        backwards=backwards,
        crosses_north=((east_m[first] > 0.0) != (east_m[last] > 0.0))
        & ((moment_m2 < 0.0) == (step_east_m > 0.0)),
        nearest_m=np.hypot(east_m[first] + along * step_east_m, north_m[first] + along * step_north_m),
        ring=wall_ring,
        part=parts.part[wall_ring],
        building=parts.building[parts.part[wall_ring]],
    )


def _area_terms_m2(parts: Parts, first: IndexArray, last: IndexArray) -> FloatArray:
    """Twice the area that each wall spans from the first corner of its ring, where far ones keep digits."""
    corner = np.searchsorted(parts.ring, parts.ring[first])
    east_m, north_m = parts.east_m, parts.north_m
    east_from_m, north_from_m = east_m[first] - east_m[corner], north_m[first] - north_m[corner]
    east_to_m, north_to_m = east_m[last] - east_m[corner], north_m[last] - north_m[corner]
    return np.asarray(east_from_m * north_to_m - north_from_m * east_to_m)
