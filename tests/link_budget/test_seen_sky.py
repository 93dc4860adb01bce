"""What the antenna sees: leaves that let through, obstacles that hang free, and the noise of both."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from siteassess.antenna.builtin import builtin_pattern
from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.shapes import hemisphere
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.link_budget.noise.antenna_noise import antenna_noise, ring_gain, seen_temperature_k
from siteassess.link_budget.noise.brightness import sky_brightness_k
from siteassess.link_budget.noise.chain_noise import chain_noise
from siteassess.link_budget.noise.seen_sky import RING_DEG, seen_brightness_k, seen_sky
from siteassess.link_budget.obstacles.foliage import slant_path_loss_db
from siteassess.site_file.model import Mount, Part

L1_HZ, L5_HZ = 1575.42e6, 1176.45e6
MILLIKELVIN, TENTH_K = 1e-3, 0.1
UPRIGHT = Mount(mast_height_m=1.5)
CHAIN = (
    Part(part="preamplifier", gain_db=30.0, noise_figure_db=2.0),
    Part(part="receiver", noise_figure_db=8.0),
)


def around(*obstacles: Obstacle) -> Skyline:
    return Skyline(obstacles=obstacles, outline=upper_envelope(obstacles), unsurveyed_deg=np.empty((0, 2)))


def wall(start_deg: float, end_deg: float, top_deg: float) -> Obstacle:
    return Obstacle(
        name=f"wall at {start_deg}",
        cover="solid",
        azimuth_deg=np.array([start_deg, end_deg], dtype=float),
        elevation_deg=np.array([top_deg, top_deg], dtype=float),
    )


def canopy(start_deg: float, end_deg: float, top_deg: float, *, depth_m: float) -> Obstacle:
    return Obstacle(
        name="trees",
        cover="foliage",
        azimuth_deg=np.array([start_deg, end_deg], dtype=float),
        elevation_deg=np.array([top_deg, top_deg], dtype=float),
        depth_m=np.array([depth_m, depth_m], dtype=float),
    )


def bridge(start_deg: float, end_deg: float, low_deg: float, top_deg: float) -> Obstacle:
    return Obstacle(
        name="bridge",
        cover="solid",
        azimuth_deg=np.array([start_deg, end_deg], dtype=float),
        elevation_deg=np.array([top_deg, top_deg], dtype=float),
        underside_deg=np.array([low_deg, low_deg], dtype=float),
    )


def cap(low_deg: float, high_deg: float) -> float:
    """Share of the hemisphere between two elevations; authority: solid angle of a zone."""
    return float(np.sin(np.deg2rad(high_deg)) - np.sin(np.deg2rad(low_deg)))


def test_shares_add_up_to_all_that_is_seen() -> None:
    seen = seen_sky(around(wall(0, 90, 30), canopy(60, 200, 50, depth_m=8), bridge(80, 300, 20, 40)), L1_HZ)
    shares = (seen.open_share, seen.leaves_share, seen.solid_share)
    assert sum(shares) == pytest.approx(np.ones((RING_DEG.size, 180)))
    assert min(float(share.min()) for share in shares) >= 0.0


def test_obstacle_that_hangs_free_hides_its_zone() -> None:
    # Closed form: a ring of sky between two elevations, seen by a hemisphere; the sky below it stays open.
    noise = antenna_noise(hemisphere(), UPRIGHT, around(bridge(0, 360, 20, 40)), L1_HZ)
    assert noise.obstacles_k == pytest.approx(290.0 * cap(20, 40), abs=TENTH_K)
    quarter = antenna_noise(hemisphere(), UPRIGHT, around(bridge(90, 180, 20, 40)), L1_HZ)
    assert quarter.obstacles_k == pytest.approx(290.0 * cap(20, 40) / 4.0, abs=TENTH_K)


def test_obstacle_behind_another_adds_nothing() -> None:
    alone = antenna_noise(hemisphere(), UPRIGHT, around(wall(0, 360, 50)), L1_HZ)
    both = antenna_noise(hemisphere(), UPRIGHT, around(wall(0, 360, 50), bridge(0, 360, 20, 40)), L1_HZ)
    assert both.temperature_k == pytest.approx(alone.temperature_k, abs=MILLIKELVIN)


def test_leaves_add_what_they_hold_back() -> None:
    # Law: a body of transmissivity t at 290 K shows t of what is behind it and 1 - t of 290 K. Authority for
    # the sum over the sphere: scipy's adaptive integration.
    from scipy.integrate import quad

    top_deg, depth_m = 40.0, 6.0

    def seen_k(elevation_deg: float) -> float:
        loss_db = slant_path_loss_db(depth_m, L1_HZ, elevation_deg) if elevation_deg < top_deg else 0.0
        let_through = 10.0 ** (-loss_db / 10.0)
        sky_k = float(sky_brightness_k(L1_HZ, elevation_deg))
        return float(let_through * sky_k + (1.0 - let_through) * 290.0) * np.cos(np.deg2rad(elevation_deg))

    expected_k = sum(np.deg2rad(quad(seen_k, *ends)[0]) for ends in ((0.0, top_deg), (top_deg, 90.0)))
    noise = antenna_noise(hemisphere(), UPRIGHT, around(canopy(0, 360, top_deg, depth_m=depth_m)), L1_HZ)
    assert noise.temperature_k == pytest.approx(expected_k, abs=2 * TENTH_K)
    assert noise.obstacles_k == pytest.approx(0.0, abs=MILLIKELVIN)


def test_leaves_are_warmer_at_a_higher_carrier_and_in_summer() -> None:
    trees = canopy(0, 360, 40, depth_m=6)
    winter = Obstacle(
        name="bare trees",
        cover="foliage",
        leaf="leafless",
        azimuth_deg=trees.azimuth_deg,
        elevation_deg=trees.elevation_deg,
        depth_m=trees.depth_m,
    )
    low, high, bare = (
        antenna_noise(hemisphere(), UPRIGHT, around(obstacle), carrier_hz).leaves_k
        for obstacle, carrier_hz in ((trees, L5_HZ), (trees, L1_HZ), (winter, L1_HZ))
    )
    assert low < high
    assert bare < high


@pytest.mark.parametrize("name", ["hemisphere", "patch", "choke-ring"])
def test_parts_of_the_noise_add_up(name: str) -> None:
    scene = around(wall(0, 90, 30), canopy(60, 200, 50, depth_m=8), bridge(80, 300, 20, 40))
    noise = antenna_noise(builtin_pattern(name), UPRIGHT, scene, L1_HZ)
    parts_k = noise.sky_k + noise.leaves_k + noise.obstacles_k + noise.ground_k + noise.loss_k
    assert parts_k == pytest.approx(noise.temperature_k, abs=TENTH_K)


def test_open_site_costs_nothing_and_walls_cost_their_noise() -> None:
    bare = chain_noise(CHAIN, hemisphere(), UPRIGHT, around(), L1_HZ)
    assert bare.surroundings_cost_db == pytest.approx(0.0, abs=1e-9)
    walled = chain_noise(CHAIN, hemisphere(), UPRIGHT, around(wall(0, 360, 30)), L1_HZ)
    rise = walled.system_temperature_k / bare.system_temperature_k
    assert walled.surroundings_cost_db == pytest.approx(10.0 * np.log10(rise))
    # Half of the hemisphere lies below 30 degrees: about 145 K on top of some 190 K.
    assert 2.0 < walled.surroundings_cost_db < 3.0


def test_brightness_runs_from_sky_to_wall() -> None:
    brightness_k = seen_brightness_k(seen_sky(around(wall(0, 180, 30)), L1_HZ), L1_HZ)
    assert brightness_k[RING_DEG < 30.0][:, 10] == pytest.approx(np.full((RING_DEG < 30.0).sum(), 290.0))
    assert brightness_k[:, 170] == pytest.approx(sky_brightness_k(L1_HZ, RING_DEG))


def lobed() -> GainPattern:
    azimuth_deg, elevation_deg = np.arange(0.0, 361.0, 10.0), np.arange(-90.0, 91.0, 10.0)
    lobes = 4.0 * np.cos(np.deg2rad(azimuth_deg))[:, np.newaxis] * np.cos(np.deg2rad(elevation_deg))
    return GainPattern(
        name="lobed",
        carrier_hz=np.array([np.nan]),
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        gain_dbic=(lobes + 8.0 * np.sin(np.deg2rad(elevation_deg)) - 4.0)[np.newaxis],
    )


WALLS = st.lists(
    st.tuples(st.floats(0.0, 359.0), st.floats(5.0, 170.0), st.floats(1.0, 80.0)), min_size=1, max_size=4
)


@settings(max_examples=25, deadline=None)
@given(walls=WALLS, turn_deg=st.floats(0.0, 359.0), tilt_deg=st.floats(0.0, 60.0))
def test_turning_antenna_and_surroundings_together_changes_nothing(
    walls: list[tuple[float, float, float]], turn_deg: float, tilt_deg: float
) -> None:
    def scene(turned_deg: float) -> Skyline:
        starts = [(start + turned_deg) % 360.0 for start, _, _ in walls]
        return around(
            *(wall(start, start + wide, top) for start, (_, wide, top) in zip(starts, walls, strict=True))
        )

    def noise_k(turned_deg: float) -> float:
        toward_deg = (33.0 + turned_deg) % 360.0
        mount = Mount(
            mast_height_m=1.5, heading_deg=turned_deg, tilt_deg=tilt_deg, tilt_azimuth_deg=toward_deg
        )
        return antenna_noise(lobed(), mount, scene(turned_deg), L1_HZ).temperature_k

    # Edges fall elsewhere within the sectors, half a degree of which one wall's side may shift.
    assert noise_k(turn_deg) == pytest.approx(noise_k(0.0), abs=1.0)


@settings(max_examples=25, deadline=None)
@given(
    walls=WALLS,
    more=st.tuples(st.floats(0.0, 359.0), st.floats(5.0, 170.0), st.floats(1.0, 80.0)),
    kind=st.sampled_from(["wall", "leaves", "bridge"]),
)
def test_hiding_more_never_cools_the_antenna(
    walls: list[tuple[float, float, float]], more: tuple[float, float, float], kind: str
) -> None:
    start_deg, wide_deg, top_deg = more
    end_deg = start_deg + wide_deg
    added = {
        "wall": wall(start_deg, end_deg, top_deg),
        "leaves": canopy(start_deg, end_deg, top_deg, depth_m=5.0),
        "bridge": bridge(start_deg, end_deg, top_deg / 2.0, top_deg),
    }[kind]
    before = [wall(start, start + wide, top) for start, wide, top in walls]
    before_k = antenna_noise(lobed(), UPRIGHT, around(*before), L1_HZ).temperature_k
    after_k = antenna_noise(lobed(), UPRIGHT, around(*before, added), L1_HZ).temperature_k
    assert after_k >= before_k - 1e-9


def test_even_brightness_comes_through_leaves_unchanged() -> None:
    # Law: thermal balance, with leaves and walls in the way.
    seen = seen_sky(around(wall(0, 90, 30), canopy(60, 200, 50, depth_m=8)), L1_HZ)
    taken_in = ring_gain(builtin_pattern("patch"), UPRIGHT, L1_HZ)
    even_k = seen_temperature_k(taken_in, seen, np.full(RING_DEG.size, 77.0), 77.0)
    assert even_k == pytest.approx(77.0, abs=MILLIKELVIN)
