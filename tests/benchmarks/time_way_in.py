"""Time the losses of a skyline against one pass of sine and cosine over as many directions.

Run with ``python tests/benchmarks/time_way_in.py [--quick]``. Nothing here fails on a time.
"""

import argparse
import time
from collections.abc import Callable

import numpy as np

from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import GENERAL_SKYLINE, Obstacle, Skyline
from siteassess.link_budget.obstacles.way_in import skyline_loss_db

L1_HZ = 1575.42e6


def skyline() -> Skyline:
    """A rolling survey of 73 points at 50 m, a wall at 20 m, a mast and a tree."""
    azimuth_deg = np.arange(0.0, 361.0, 5.0)
    rolling = Obstacle(
        name=GENERAL_SKYLINE,
        cover="solid",
        azimuth_deg=azimuth_deg,
        elevation_deg=8.0 + 6.0 * np.sin(np.deg2rad(3.0 * azimuth_deg)),
        distance_m=np.full(azimuth_deg.shape, 50.0),
    )
    wall = Obstacle(
        name="wall",
        cover="solid",
        azimuth_deg=np.array([60.0, 120.0]),
        elevation_deg=np.array([30.0, 30.0]),
        distance_m=np.array([20.0, 20.0]),
        straight_in_space=True,
    )
    mast = Obstacle(
        name="mast",
        cover="solid",
        azimuth_deg=np.array([299.0, 301.0]),
        elevation_deg=np.array([40.0, 40.0]),
        distance_m=np.array([60.0, 60.0]),
    )
    tree = Obstacle(
        name="tree",
        cover="foliage",
        azimuth_deg=np.array([200.0, 230.0]),
        elevation_deg=np.array([25.0, 30.0]),
        depth_m=np.array([5.0, 8.0]),
    )
    obstacles = (rolling, wall, mast, tree)
    return Skyline(obstacles=obstacles, outline=upper_envelope(obstacles), unsurveyed_deg=np.empty((0, 2)))


def best_seconds(work: Callable[[], object], repeats: int) -> float:
    def once() -> float:
        begun = time.perf_counter()
        work()
        return time.perf_counter() - begun

    return min(once() for _ in range(repeats))


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="one small run")
    quick = parser.parse_args().quick
    count, repeats = (10_000, 1) if quick else (300_000, 5)
    random = np.random.default_rng(1)
    azimuth_deg = random.uniform(0.0, 360.0, count)
    elevation_deg = np.rad2deg(np.arcsin(random.uniform(np.sin(np.deg2rad(10.0)), 1.0, count)))
    around = skyline()

    def yardstick() -> None:
        for angle_deg in (azimuth_deg, elevation_deg):
            np.sin(np.deg2rad(angle_deg))
            np.cos(np.deg2rad(angle_deg))

    loss_s = best_seconds(lambda: skyline_loss_db(around, azimuth_deg, elevation_deg, L1_HZ), repeats)
    yard_s = best_seconds(yardstick, repeats)
    print(f"way in, {count} directions, 4 obstacles: {loss_s * 1e3:.1f} ms, {loss_s / yard_s:.1f} yardsticks")


if __name__ == "__main__":
    main()
