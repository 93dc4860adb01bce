"""Time gain and antenna temperature against one pass of sine, cosine, arctangent and square root.

Run with ``python tests/benchmarks/time_antenna.py [--quick]``. Nothing here fails on a time.
"""

import argparse
import time
from collections.abc import Callable

import numpy as np

from siteassess.antenna.builtin import builtin_pattern
from siteassess.antenna.gain import gain_dbic
from siteassess.antenna.mount import mounted_gain_dbic
from siteassess.antenna.pattern import GainPattern
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.link_budget.noise.antenna_noise import antenna_noise
from siteassess.site_file.model import Mount

L1_HZ = 1575.42e6
DIRECTIONS = 345_600
TILTED = Mount(mast_height_m=1.5, tilt_deg=3.0, tilt_azimuth_deg=120.0)
UPRIGHT = Mount(mast_height_m=1.5)


def best_seconds(work: Callable[[], object], repeats: int) -> float:
    def once() -> float:
        begun = time.perf_counter()
        work()
        return time.perf_counter() - begun

    return min(once() for _ in range(repeats))


def one_degree_pattern() -> GainPattern:
    """A full grid of one degree, with two lobes in azimuth and cross-polar gain."""
    azimuth_deg, elevation_deg = np.arange(0.0, 361.0), np.arange(-90.0, 91.0)
    lobes = 1.5 * np.cos(2.0 * np.deg2rad(azimuth_deg))[:, np.newaxis] * np.cos(np.deg2rad(elevation_deg))
    gain_dbic = lobes + 12.0 * np.sin(np.deg2rad(elevation_deg)) - 6.0
    return GainPattern(
        name="one degree",
        carrier_hz=np.array([np.nan]),
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        gain_dbic=gain_dbic[np.newaxis],
        cross_gain_dbic=gain_dbic[np.newaxis] - 15.0,
    )


def skyline() -> Skyline:
    """A wall and a tree."""
    wall = Obstacle(
        name="wall",
        cover="solid",
        azimuth_deg=np.array([60.0, 120.0]),
        elevation_deg=np.array([30.0, 30.0]),
    )
    tree = Obstacle(
        name="tree",
        cover="foliage",
        azimuth_deg=np.array([200.0, 230.0]),
        elevation_deg=np.array([25.0, 30.0]),
        depth_m=np.array([5.0, 8.0]),
    )
    return Skyline(
        obstacles=(wall, tree), outline=upper_envelope((wall, tree)), unsurveyed_deg=np.empty((0, 2))
    )


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="one repeat each")
    repeats = 1 if parser.parse_args().quick else 15
    full, cut, around = one_degree_pattern(), builtin_pattern("choke-ring"), skyline()
    random = np.random.default_rng(1)
    azimuth_deg = random.uniform(0.0, 360.0, DIRECTIONS)
    elevation_deg = np.rad2deg(np.arcsin(random.uniform(-1.0, 1.0, DIRECTIONS)))
    numbers = np.linspace(0.1, 3.0, DIRECTIONS)

    def yardstick() -> None:
        np.sin(numbers), np.cos(numbers), np.arctan2(numbers, numbers[::-1]), np.sqrt(numbers)

    rows: list[tuple[str, Callable[[], object], float]] = [
        ("gain, one degree", lambda: gain_dbic(full, azimuth_deg, elevation_deg, L1_HZ), 0.5),
        ("gain, elevation alone", lambda: gain_dbic(cut, azimuth_deg, elevation_deg, L1_HZ), 0.5),
        (
            "gain, one degree, tilted",
            lambda: mounted_gain_dbic(full, TILTED, azimuth_deg, elevation_deg, L1_HZ),
            5.0,
        ),
        ("antenna temperature", lambda: antenna_noise(full, UPRIGHT, around, L1_HZ), 1.0),
        ("antenna temperature, tilted", lambda: antenna_noise(full, TILTED, around, L1_HZ), 1.0),
    ]
    print(f"{'work':<30}{'ms':>8}{'yardstick':>11}{'ratio':>8}{'aim':>6}")
    for name, work, aim in rows:
        own, other = best_seconds(work, repeats), best_seconds(yardstick, repeats)
        print(f"{name:<30}{own * 1e3:>8.2f}{other * 1e3:>11.2f}{own / other:>8.2f}{aim:>6.1f}")


if __name__ == "__main__":
    main()
