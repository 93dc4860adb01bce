"""Holds the angular form against the whole link budget on random sites.

Prints the largest and the root mean square difference of usable shares. Run from the project folder:

    python tests/builders/compare_angular_form.py [SITES]
"""

import sys
from pathlib import Path

import numpy as np

from siteassess import assess, read_site
from siteassess.antenna.builtin import builtin_pattern
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import GENERAL_SKYLINE, Obstacle, Skyline
from siteassess.link_budget.assemble import link_budget
from siteassess.verdict.cures.angular import angular_form
from siteassess.verdict.cures.angular_shares import noise_gain_db, usable_shares
from siteassess.verdict.states import sample_states, sample_weights, share

SITE = Path(__file__).parents[2] / "example_sites" / "harbour" / "silo_yard"


def random_skyline(random: np.random.Generator) -> Skyline:
    """A general skyline, and one to five walls, trees, poles or things that hang free."""
    azimuth_deg = np.concatenate([[0.0], np.sort(random.uniform(0.0, 360.0, 10)), [360.0]])
    elevation_deg = random.uniform(0.0, 12.0, 12)
    elevation_deg[-1] = elevation_deg[0]
    distance_m = random.uniform(40.0, 200.0, 12) if random.random() < 0.3 else None
    general = Obstacle(
        name=GENERAL_SKYLINE,
        cover="solid",
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        distance_m=distance_m,
    )
    others = (random_obstacle(random) for _ in range(random.integers(1, 6)))
    obstacles = (general, *others)
    return Skyline(obstacles=obstacles, outline=upper_envelope(obstacles), unsurveyed_deg=np.empty((0, 2)))


def random_obstacle(random: np.random.Generator) -> Obstacle:
    points, from_deg, width_deg = random.integers(2, 5), random.uniform(0.0, 360.0), random.uniform(4.0, 70.0)
    azimuth_deg = np.sort(from_deg + width_deg * np.append([0.0, 1.0], random.random(points - 2)))
    elevation_deg = random.uniform(12.0, 50.0) + random.uniform(-4.0, 4.0, points)
    distance_m = np.full(points, random.uniform(8.0, 120.0))
    common = {"name": "obstacle", "azimuth_deg": azimuth_deg, "elevation_deg": elevation_deg}
    kind = random.random()
    if kind < 0.5:
        known = random.random() < 0.7
        return Obstacle(
            cover="solid",
            distance_m=distance_m if known else None,
            straight_in_space=bool(random.random() < 0.6),
            **common,
        )
    if kind < 0.75:
        depth_m = random.uniform(0.5, 9.0, points)
        return Obstacle(cover="foliage", distance_m=distance_m, depth_m=depth_m, **common)
    if kind < 0.9:
        underside_deg = elevation_deg - random.uniform(1.0, 6.0)
        return Obstacle(cover="solid", distance_m=distance_m, underside_deg=underside_deg, **common)
    half_deg = random.uniform(0.05, 0.6)
    return Obstacle(
        name="pole",
        cover="solid",
        azimuth_deg=np.array([from_deg, from_deg + 2.0 * half_deg]),
        elevation_deg=elevation_deg[[0, 0]],
        distance_m=distance_m[:2],
    )


def differences(sites: int, seed: int) -> np.ndarray:
    """Angular form less whole budget, usable shares by site and signal, shape (site, signal)."""
    assessment, random = assess(read_site(SITE)), np.random.default_rng(seed)
    tracks, found = assessment.tracks, []
    for _ in range(sites):
        require = assessment.site.require.model_copy(
            update={
                "elevation_mask_deg": float(random.choice([5.0, 10.0, 12.3])),
                "min_cn0_dbhz": float(random.uniform(30.0, 42.0)),
                "count_weakened": bool(random.random() < 0.4),
            }
        )
        tilt = {"tilt_deg": float(random.choice([0.0, 0.0, 8.0])), "tilt_azimuth_deg": 120.0}
        mount = assessment.site.mount.model_copy(update=tilt)
        site = assessment.site.model_copy(update={"require": require, "mount": mount})
        pattern = builtin_pattern(str(random.choice(["choke-ring", "patch", "ground-plane"])))
        before, after = random_skyline(random), random_skyline(random)
        form = angular_form(site, pattern, tracks, link_budget(site, before, pattern, tracks))
        quick = usable_shares(form, after, noise_gain_db(form, after))
        budget = link_budget(site, after, pattern, tracks)
        weight = sample_weights(budget.samples, tracks)
        row = []
        for one in budget.signals:
            states = sample_states(one, budget.samples, weight, count_weakened=require.count_weakened)
            row.append(quick[one.signal.name] - share(states.usable, states.weight))
        found.append(row)
    return np.array(found)


if __name__ == "__main__":
    found = differences(int(sys.argv[1]) if len(sys.argv) > 1 else 50, seed=7)
    print(
        f"{found.shape[0]} sites, {found.shape[1]} signals each: usable share, angular form less whole budget"
    )
    print(f"largest {np.abs(found).max():.2%}, root mean square {np.sqrt(np.mean(found**2)):.3%}")
