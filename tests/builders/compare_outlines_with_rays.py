"""Compares outlines of buildings with shapely: a ray every 0.02 degrees, in random neighbourhoods.

Run from the top of the source tree: python tests/builders/compare_outlines_with_rays.py [COUNT]
"""

import sys
from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
import shapely
from numpy.typing import NDArray

from siteassess.horizon.buildings.building import Building
from siteassess.horizon.buildings.obstacles import obstacles_of
from siteassess.horizon.buildings.walls import Parts, parts_of
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.shares import sky_shares
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import outline_elevation_deg

FloatArray = NDArray[np.float64]

STEP_DEG = 0.02
EARTH_M = 8.5e6  # 4/3 of the earth's radius, ITU-R P.526
REACH_M = 3000.0
ANTENNA_M = 3.0


@dataclass(frozen=True, kw_only=True)
class Difference:
    """Largest difference of a continuous outline, and difference of the blocked share, ours less rays."""

    outline_deg: float
    blocked_share: float


def random_neighbourhood(random: np.random.Generator) -> list[Building]:
    """Up to 40 buildings of odd shapes, some with courtyards, some of two parts, none round the antenna."""
    antenna = shapely.Point(0.0, 0.0)
    spread_m = random.choice([40.0, 150.0, 600.0])
    buildings: list[Building] = []
    for number in range(int(random.integers(3, 41))):
        middle_m = random.normal(0.0, spread_m, 2)
        polygons = [_odd_shape(random, middle_m + shift) for shift in random.normal(0.0, 15.0, (2, 2))]
        polygons = polygons[: 1 + int(random.random() < 0.2)]
        if any(polygon.distance(antenna) < 0.3 for polygon in polygons):
            continue
        parts = tuple(
            tuple(np.array(ring.coords) for ring in (polygon.exterior, *polygon.interiors))
            for polygon in polygons
        )
        height_m = float(random.uniform(1.0, 60.0))
        buildings.append(standing(f"building {number}", height_m, parts))
    return buildings


def standing(name: str, height_m: float, parts: tuple[tuple[FloatArray, ...], ...]) -> Building:
    """A solid building on level ground."""
    return Building(
        name=name,
        cover="solid",
        leaf="in-leaf",
        base_m=0.0,
        height_m=height_m,
        underside_m=None,
        depth_m=None,
        parts=parts,
    )


def plan_of(buildings: Sequence[Building]) -> Parts:
    """The outlines of buildings whose coordinates are metres already."""
    rings = [ring for building in buildings for part in building.parts for ring in part]
    return parts_of(
        np.concatenate(rings),
        [len(ring) for ring in rings],
        [len(part) for building in buildings for part in building.parts],
        [len(building.parts) for building in buildings],
    )


def skyline_of(buildings: Sequence[Building], antenna_m: float = ANTENNA_M) -> Skyline:
    """The skyline that our own geometry makes of buildings."""
    obstacles = obstacles_of(buildings, plan_of(buildings), antenna_m, "plan")
    return Skyline(obstacles=obstacles, outline=upper_envelope(obstacles), unsurveyed_deg=np.empty((0, 2)))


def elevation_by_rays(buildings: Sequence[Building], antenna_m: float) -> tuple[FloatArray, FloatArray]:
    """Azimuths, and the highest elevation that each ray meets, 0 where it meets nothing above the horizon."""
    azimuth_deg = np.arange(0.5 * STEP_DEG, 360.0, STEP_DEG)
    toward = np.stack([np.sin(np.deg2rad(azimuth_deg)), np.cos(np.deg2rad(azimuth_deg))], axis=1)
    rays = shapely.linestrings(np.stack([np.zeros_like(toward), REACH_M * toward], axis=1))
    polygons = [shapely.Polygon(part[0], part[1:]) for building in buildings for part in building.parts]
    height_m = np.array([building.height_m for building in buildings for _ in building.parts])
    ray, polygon = shapely.STRtree(polygons).query(rays, predicate="intersects")
    met = shapely.intersection(rays[ray], np.array(polygons)[polygon])
    distance_m = shapely.distance(shapely.Point(0.0, 0.0), met)
    rise_m = height_m[polygon] - antenna_m - distance_m**2 / (2.0 * EARTH_M)
    elevation_deg = np.zeros(len(azimuth_deg))
    np.maximum.at(elevation_deg, ray, np.rad2deg(np.arctan2(rise_m, distance_m)))
    return azimuth_deg, elevation_deg


def crossed_by_rays(
    buildings: Sequence[Building], antenna_m: float, azimuth_deg: FloatArray, elevation_deg: FloatArray
) -> NDArray[np.bool_]:
    """Whether lines of sight run through buildings between their undersides and their tops."""
    toward = np.stack([np.sin(np.deg2rad(azimuth_deg)), np.cos(np.deg2rad(azimuth_deg))], axis=1)
    rays = shapely.linestrings(np.stack([np.zeros_like(toward), REACH_M * toward], axis=1))
    slope = np.tan(np.deg2rad(elevation_deg))
    crossed = np.zeros(len(rays), dtype=np.bool_)
    for building in buildings:
        foot_m = building.base_m - antenna_m
        for part in building.parts:
            polygon = shapely.Polygon(part[0], part[1:])
            near_m = polygon.distance(shapely.Point(0.0, 0.0))
            drop_m = near_m**2 / (2.0 * EARTH_M)
            for ray in np.flatnonzero(shapely.intersects(rays, polygon)):
                for piece in shapely.get_parts(shapely.intersection(rays[ray], polygon)):
                    ends_m = np.hypot(*np.array(piece.coords).T)
                    low_m, high_m = slope[ray] * ends_m.min(), slope[ray] * ends_m.max()
                    top_m = foot_m + building.height_m - drop_m
                    bottom_m = foot_m + (building.underside_m or 0.0) - drop_m
                    crossed[ray] |= low_m < top_m and high_m > bottom_m
    return crossed


def difference(buildings: Sequence[Building], antenna_m: float = ANTENNA_M) -> Difference:
    """Our outline against the rays."""
    skyline = skyline_of(buildings, antenna_m)
    azimuth_deg, by_rays_deg = elevation_by_rays(buildings, antenna_m)
    ours_deg = np.maximum(outline_elevation_deg(skyline, azimuth_deg), 0.0)
    outline = skyline.outline
    steps = np.abs(outline.start_elevation_deg - np.roll(outline.end_elevation_deg, 1)) > 1e-6
    beside_deg = np.abs(azimuth_deg[:, None] - np.append(outline.start_deg[steps], np.inf))
    continuous = beside_deg.min(axis=1) > STEP_DEG
    share = float(np.mean(np.sin(np.deg2rad(by_rays_deg))))
    return Difference(
        outline_deg=float(np.abs(ours_deg - by_rays_deg)[continuous].max(initial=0.0)),
        blocked_share=sky_shares(skyline, 0.0).blocked_share_of_hemisphere - share,
    )


def _odd_shape(random: np.random.Generator, middle_m: FloatArray) -> shapely.Polygon:
    corners = int(random.integers(3, 14))
    angle_rad = np.sort(random.uniform(0.0, 2.0 * np.pi, corners))
    size_m = random.uniform(2.0, 25.0, corners)
    shape = shapely.make_valid(
        shapely.Polygon(middle_m + size_m[:, None] * np.stack([np.cos(angle_rad), np.sin(angle_rad)], axis=1))
    )
    shape = max(shapely.get_parts(shape), key=lambda part: part.area)
    court = shapely.Point(middle_m).buffer(random.uniform(1.0, 4.0), quad_segs=2)
    if shape.contains(court) and random.random() < 0.5:
        shape = shape.difference(court)
    return shape if shape.geom_type == "Polygon" else shapely.Point(middle_m).buffer(3.0)


if __name__ == "__main__":
    count = int(sys.argv[1]) if len(sys.argv) > 1 else 200
    generator = np.random.default_rng(20_261_004)
    found = []
    while len(found) < count:
        if buildings := random_neighbourhood(generator):
            found.append(difference(buildings))
    outline = max(one.outline_deg for one in found)
    share = max(abs(one.blocked_share) for one in found)
    print(f"{count} neighbourhoods: outline within {outline:.1e} deg, blocked share within {share:.1e}")
