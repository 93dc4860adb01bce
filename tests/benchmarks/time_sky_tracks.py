"""Time the sky tracks against one pass of sine, cosine, arctangent and square root over as many numbers.

Run with ``python tests/benchmarks/time_sky_tracks.py [--quick]``. Nothing here fails on a time.
"""

import argparse
import time
from collections.abc import Callable
from dataclasses import dataclass
from datetime import datetime

import numpy as np

from siteassess.orbits.constellations import SYSTEMS, nominal_orbits
from siteassess.orbits.elements import CircularOrbits
from siteassess.sky_tracks.density import sky_density
from siteassess.sky_tracks.refraction import apparent_elevation_deg
from siteassess.sky_tracks.tracks import sky_tracks


@dataclass(frozen=True)
class Point:
    latitude_deg: float
    longitude_deg: float
    height_m: float


SITE = Point(48.0, 11.0, 600.0)


def best_seconds(work: Callable[[], object], repeats: int) -> float:
    def once() -> float:
        begun = time.perf_counter()
        work()
        return time.perf_counter() - begun

    return min(once() for _ in range(repeats))


def walker_orbits(satellites: int) -> CircularOrbits:
    """Circular orbits like those of GPS, evenly spread, with a cycle of four days."""
    spread_deg = 360.0 * np.arange(satellites) / satellites
    each = np.ones(satellites)
    return CircularOrbits(
        satellite=tuple(f"test {number}" for number in range(satellites)),
        system=("test",) * satellites,
        orbit_class=("MEO",) * satellites,
        radius_m=26_559_700.0 * each,
        inclination_deg=55.0 * each,
        node_longitude_deg=spread_deg * 6 % 360.0,
        node_longitude_rate_deg_per_s=-360.0 / 86_154.6 * each,
        argument_of_latitude_deg=spread_deg,
        argument_of_latitude_rate_deg_per_s=360.0 / 43_077.3 * each,
        cycle_s=86_154.6 * each,
    )


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="one repeat each")
    repeats = 1 if parser.parse_args().quick else 15
    many, nominal = walker_orbits(120), nominal_orbits(SYSTEMS, datetime(2026, 1, 1))
    tracks = sky_tracks(nominal, SITE, days=10.0, step_s=120.0)
    gps = np.array(tracks.system) == "GPS"
    rows: list[tuple[str, Callable[[], object], int, float]] = [
        ("tracks, 120 x 2 880", lambda: sky_tracks(many, SITE, days=4.0, step_s=120.0), 120 * 2880, 2.0),
        ("tracks, default run", lambda: sky_tracks(nominal, SITE, days=10.0, step_s=120.0), 105 * 7200, 2.0),
        ("nominal orbits", lambda: nominal_orbits(SYSTEMS, datetime(2026, 1, 1)), 105 * 7200, 0.2),
        ("refraction, default", lambda: apparent_elevation_deg(tracks.elevation_deg, 600.0), 105 * 7200, 2.0),
        ("density, GPS", lambda: sky_density(tracks, gps), 27 * 7200, 2.0),
    ]
    print(f"{'work':<22}{'numbers':>9}{'ms':>8}{'yardstick':>11}{'ratio':>8}{'aim':>6}")
    for name, work, count, aim in rows:
        numbers = np.linspace(0.1, 3.0, count)

        def yardstick(x: np.ndarray = numbers) -> None:
            np.sin(x), np.cos(x), np.arctan2(x, x[::-1]), np.sqrt(x)

        own, other = best_seconds(work, repeats), best_seconds(yardstick, repeats)
        print(f"{name:<22}{count:>9}{own * 1e3:>8.2f}{other * 1e3:>11.2f}{own / other:>8.2f}{aim:>6.1f}")


if __name__ == "__main__":
    main()
