"""Time the skyline of 500 buildings against rays through a tree of their outlines, one every half degree.

Run with ``python tests/benchmarks/time_outlines.py [--quick] [--million]``. Nothing here fails on a time.
"""

import argparse
import resource
import time

import numpy as np
import shapely

from siteassess.horizon.buildings.building import Building
from siteassess.horizon.buildings.obstacles import obstacles_of
from siteassess.horizon.buildings.walls import Parts, parts_of
from siteassess.horizon.outline import upper_envelope

ANTENNA_M = 1.6
REACH_M = 2000.0


def town(buildings: int, corners: int, spread_m: float) -> tuple[list[Building], Parts]:
    """Buildings scattered round an antenna, each with an outline of the given number of corners."""
    random = np.random.default_rng(1)
    radius_m = 20.0 + spread_m * np.sqrt(random.uniform(0.0, 1.0, buildings))
    angle_rad = random.uniform(0.0, 2.0 * np.pi, buildings)
    middle_m = radius_m[:, None] * np.stack([np.sin(angle_rad), np.cos(angle_rad)], axis=1)
    turn_rad = np.arange(corners + 1) % corners / corners * 2.0 * np.pi
    turn_rad = turn_rad + random.uniform(0.0, 2.0 * np.pi, (buildings, 1))
    size_m = random.uniform(4.0, 12.0, (buildings, corners))
    size_m = np.concatenate([size_m, size_m[:, :1]], axis=1)
    outline_m = middle_m[:, None, :] + size_m[..., None] * np.stack(
        [np.cos(turn_rad), np.sin(turn_rad)], axis=-1
    )
    stands = [
        Building(
            name=f"building {index}",
            cover="solid",
            leaf="in-leaf",
            base_m=0.0,
            height_m=height_m,
            underside_m=None,
            depth_m=None,
            parts=((ring,),),
        )
        for index, (ring, height_m) in enumerate(
            zip(outline_m, random.uniform(4.0, 30.0, buildings).tolist(), strict=True)
        )
    ]
    ones = np.ones(buildings, dtype=int)
    return stands, parts_of(outline_m.reshape(-1, 2), ones * (corners + 1), ones, ones)


def by_rays(polygons: list[shapely.Polygon], height_m: list[float], step_deg: float) -> list[float]:
    """Highest elevation along each ray, from the outlines that it crosses."""
    tree = shapely.STRtree([polygon.exterior for polygon in polygons])
    origin = shapely.Point(0.0, 0.0)
    highest = []
    for azimuth_rad in np.deg2rad(np.arange(0.0, 360.0, step_deg)):
        ray = shapely.LineString([(0.0, 0.0), (REACH_M * np.sin(azimuth_rad), REACH_M * np.cos(azimuth_rad))])
        elevation_deg = -90.0
        for index in tree.query(ray):
            crossing = ray.intersection(tree.geometries[index])
            if not crossing.is_empty:
                rise_m = height_m[index] - ANTENNA_M
                elevation_deg = max(elevation_deg, np.degrees(np.arctan2(rise_m, origin.distance(crossing))))
        highest.append(elevation_deg)
    return highest


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="one small run")
    parser.add_argument("--million", action="store_true", help="a million corners too")
    chosen = parser.parse_args()
    step_deg, repeats = (5.0, 1) if chosen.quick else (0.5, 5)
    buildings, parts = town(500, 5, 600.0)
    polygons = [shapely.Polygon(building.parts[0][0]) for building in buildings]
    rays_s, taken_s = [], []
    for _ in range(repeats):
        begun = time.perf_counter()
        by_rays(polygons, [building.height_m for building in buildings], step_deg)
        rays_s.append((time.perf_counter() - begun) * step_deg / 0.5)
        for _ in range(repeats):
            begun = time.perf_counter()
            obstacles = obstacles_of(buildings, parts, ANTENNA_M, "town")
            upper_envelope(obstacles)
            taken_s.append(time.perf_counter() - begun)
    print(
        f"500 buildings, 2500 walls: {min(taken_s) * 1e3:.1f} ms, {len(obstacles)} seen; "
        f"720 rays {min(rays_s) * 1e3:.0f} ms, {min(rays_s) / min(taken_s):.0f} times as long"
    )
    if chosen.million:
        for count, corners in ((200_000, 5), (1, 1_000_000)):
            buildings, parts = town(count, corners, 20_000.0)
            begun = time.perf_counter()
            obstacles = obstacles_of(buildings, parts, ANTENNA_M, "town")
            upper_envelope(obstacles)
            taken = time.perf_counter() - begun
            memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1e6
            size = f"{count} of {corners} corners"
            print(f"{size}: {taken:.1f} s, {len(obstacles)} seen, {memory:.1f} GB")


if __name__ == "__main__":
    main()
