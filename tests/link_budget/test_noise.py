"""Noise at the antenna port."""

import math

import numpy as np
import pytest

from siteassess.antenna.builtin import builtin_pattern
from siteassess.antenna.energy import efficiency
from siteassess.antenna.pattern import GainPattern
from siteassess.antenna.shapes import by_elevation, hemisphere, isotropic, uniform_cone
from siteassess.horizon.skyline import Obstacle, Outline, Skyline
from siteassess.link_budget.noise.antenna_noise import antenna_noise, ring_gain, seen_temperature_k
from siteassess.link_budget.noise.brightness import sky_brightness_k
from siteassess.link_budget.noise.chain_noise import chain_noise
from siteassess.link_budget.noise.seen_sky import RING_DEG, seen_sky
from siteassess.site_file.model import Mount, Part

L1_HZ = 1575.42e6
MILLIKELVIN = 1e-3
TENTH_K = 0.1
UPRIGHT = Mount(mast_height_m=1.5)


def skyline(*pieces: tuple[float, float, float]) -> Skyline:
    """Level pieces (start azimuth, end azimuth, elevation) that together cover the circle."""
    start_deg, end_deg, elevation_deg = (np.array(column) for column in zip(*pieces, strict=True))
    bare = elevation_deg <= -90.0
    obstacles = tuple(
        Obstacle(
            name=f"wall {index}",
            cover="solid",
            azimuth_deg=np.array([piece[0], piece[1]]),
            elevation_deg=np.full(2, piece[2]),
        )
        for index, piece in enumerate(pieces)
    )
    return Skyline(
        obstacles=obstacles,
        outline=Outline(
            start_deg=start_deg,
            end_deg=end_deg,
            obstacle=np.where(bare, -1, np.arange(len(pieces))),
            start_elevation_deg=elevation_deg,
            end_elevation_deg=elevation_deg,
            straight_in_space=np.zeros(len(pieces), dtype=bool),
        ),
        unsurveyed_deg=np.zeros((0, 2)),
    )


def level(elevation_deg: float) -> Skyline:
    return skyline((0.0, 360.0, elevation_deg))


def antenna_temperature_k(pattern: GainPattern, mount: Mount, around: Skyline, carrier_hz: float) -> float:
    return antenna_noise(pattern, mount, around, carrier_hz).temperature_k


def open_sky_share(pattern: GainPattern, around: Skyline) -> float:
    return float((ring_gain(pattern, UPRIGHT, L1_HZ) * seen_sky(around, L1_HZ).open_share).sum())


OPEN = level(-90.0)
PATTERNS = ["isotropic", "hemisphere", "patch", "ground-plane", "choke-ring"]


def lobed(*order: int) -> GainPattern:
    cuts = [[-20.0, 0.0, 3.0], [-20.0, 2.0, 3.0], [-20.0, -3.0, 3.0], [-20.0, -8.0, 3.0]]
    closed = [cuts[index] for index in (*order, order[0])]
    return GainPattern(
        name="lobed",
        carrier_hz=np.array([np.nan]),
        azimuth_deg=np.array([0.0, 90.0, 180.0, 270.0, 360.0]),
        elevation_deg=np.array([-90.0, 0.0, 90.0]),
        gain_dbic=np.array([closed]),
    )


@pytest.mark.parametrize("name", PATTERNS)
@pytest.mark.parametrize("temperature_k", [3.0, 290.0, 1000.0])
def test_even_brightness_is_what_the_antenna_delivers(name: str, temperature_k: float) -> None:
    # Law: thermal balance. Sky, ground and antenna at one temperature give that temperature.
    taken_in = ring_gain(builtin_pattern(name), UPRIGHT, L1_HZ)
    sky_k = np.full(RING_DEG.size, temperature_k)
    seen_k = seen_temperature_k(taken_in, seen_sky(level(12.0), L1_HZ), sky_k, temperature_k)
    assert seen_k == pytest.approx(temperature_k, abs=MILLIKELVIN)


@pytest.mark.parametrize("name", PATTERNS)
def test_walled_in_antenna_is_at_the_temperature_of_the_walls(name: str) -> None:
    assert antenna_temperature_k(builtin_pattern(name), UPRIGHT, level(90.0), L1_HZ) == pytest.approx(290.0)


@pytest.mark.parametrize(
    ("pattern", "sky_share"), [(isotropic(), 0.5), (hemisphere(), 1.0)], ids=["half", "all"]
)
def test_sky_and_ground_are_weighted_by_what_the_antenna_takes_from_them(
    pattern: GainPattern, sky_share: float
) -> None:
    # Closed form: half the sphere is sky for an isotropic antenna, all of what it takes in for a hemisphere.
    assert open_sky_share(pattern, OPEN) == pytest.approx(sky_share, abs=1e-6)
    taken_in, sky_k = ring_gain(pattern, UPRIGHT, L1_HZ), np.full(RING_DEG.size, 10.0)
    seen_k = seen_temperature_k(taken_in, seen_sky(OPEN, L1_HZ), sky_k, 290.0)
    assert seen_k == pytest.approx(10.0 * sky_share + 290.0 * (1.0 - sky_share), abs=MILLIKELVIN)


@pytest.mark.parametrize("horizon_deg", [0.0, 3.3, 10.0, 41.7, 90.0])
def test_level_horizon_hides_the_sine_of_its_elevation(horizon_deg: float) -> None:
    # Authority: solid angle of a cap, 1 - sin h of the hemisphere (10 degrees: 0.17365 hidden).
    share = open_sky_share(hemisphere(), level(horizon_deg))
    assert share == pytest.approx(1.0 - math.sin(math.radians(horizon_deg)), abs=1e-4)


def test_sky_ring_by_ring_agrees_with_integration() -> None:
    # Authority: scipy's adaptive integration of brightness times cosine over a hemisphere.
    from scipy.integrate import quad

    expected_k = quad(
        lambda e: float(sky_brightness_k(L1_HZ, e)) * math.cos(math.radians(e)) * math.pi / 180.0, 0.0, 90.0
    )[0]
    assert antenna_temperature_k(hemisphere(), UPRIGHT, OPEN, L1_HZ) == pytest.approx(expected_k, abs=TENTH_K)


def test_turning_antenna_and_walls_together_changes_nothing() -> None:
    walls = skyline((0.0, 90.0, 40.0), (90.0, 180.0, 5.0), (180.0, 360.0, -90.0))
    turned_walls = skyline(
        (0.0, 90.0, -90.0), (90.0, 180.0, 40.0), (180.0, 270.0, 5.0), (270.0, 360.0, -90.0)
    )
    tilted = Mount(mast_height_m=1.5, heading_deg=0.0, tilt_deg=20.0, tilt_azimuth_deg=30.0)
    turned = Mount(mast_height_m=1.5, heading_deg=90.0, tilt_deg=20.0, tilt_azimuth_deg=120.0)
    pattern = lobed(0, 1, 2, 3)
    before_k = antenna_temperature_k(pattern, tilted, walls, L1_HZ)
    assert antenna_temperature_k(pattern, turned, turned_walls, L1_HZ) == pytest.approx(
        before_k, abs=MILLIKELVIN
    )
    assert antenna_temperature_k(pattern, tilted, turned_walls, L1_HZ) != pytest.approx(before_k, abs=TENTH_K)


def test_heading_is_the_same_as_a_turned_table() -> None:
    walls = skyline((0.0, 90.0, 40.0), (90.0, 360.0, -90.0))
    heading = Mount(mast_height_m=1.5, heading_deg=90.0)
    by_mount_k = antenna_temperature_k(lobed(0, 1, 2, 3), heading, walls, L1_HZ)
    by_table_k = antenna_temperature_k(lobed(3, 0, 1, 2), UPRIGHT, walls, L1_HZ)
    assert by_mount_k == pytest.approx(by_table_k, abs=MILLIKELVIN)


@pytest.mark.parametrize("name", PATTERNS)
def test_hiding_sky_never_cools_the_antenna(name: str) -> None:
    temperatures_k = [
        antenna_temperature_k(builtin_pattern(name), UPRIGHT, level(horizon_deg), L1_HZ)
        for horizon_deg in (-90.0, -3.0, 0.0, 0.1, 1.0, 10.0, 45.0, 80.0, 90.0)
    ]
    assert temperatures_k == sorted(temperatures_k)


def test_sky_below_the_horizon_does_not_count() -> None:
    # Depression of the outline below 0 shows ground farther away, not sky.
    pattern = builtin_pattern("patch")
    expected_k = antenna_temperature_k(pattern, UPRIGHT, level(0.0), L1_HZ)
    assert antenna_temperature_k(pattern, UPRIGHT, level(-5.0), L1_HZ) == pytest.approx(expected_k, abs=1e-9)


def test_antenna_on_its_head_sees_ground() -> None:
    on_its_head = Mount(mast_height_m=1.5, tilt_deg=180.0)
    assert antenna_temperature_k(hemisphere(), on_its_head, OPEN, L1_HZ) == pytest.approx(
        290.0, abs=MILLIKELVIN
    )


def test_lossy_antenna_lies_between_sky_and_its_own_temperature() -> None:
    # Law: an antenna of efficiency n delivers n times what it sees plus (1 - n) times its own temperature.
    half = by_elevation("half", np.array([-90.0, 0.0, 0.0, 90.0]), np.array([-200.0, -200.0, 0.0, 0.0]))
    lossless_k = antenna_temperature_k(hemisphere(), UPRIGHT, OPEN, L1_HZ)
    expected_k = 0.5 * lossless_k + 0.5 * 290.0
    assert antenna_temperature_k(half, UPRIGHT, OPEN, L1_HZ) == pytest.approx(expected_k, abs=MILLIKELVIN)


def test_cross_polar_power_counts_as_much_as_co_polar() -> None:
    edges_deg = np.array([-90.0, 0.0, 0.0, 90.0])
    levels_dbic = np.array([-200.0, -200.0, 0.0, 0.0])
    split = by_elevation("split", edges_deg, levels_dbic, levels_dbic)
    lossless_k = antenna_temperature_k(hemisphere(), UPRIGHT, OPEN, L1_HZ)
    assert antenna_temperature_k(split, UPRIGHT, OPEN, L1_HZ) == pytest.approx(lossless_k, abs=MILLIKELVIN)


def test_pattern_that_adds_up_to_more_than_one_is_taken_as_lossless() -> None:
    edges_deg = np.array([-90.0, 0.0, 0.0, 90.0])
    excess = by_elevation("excess", edges_deg, np.array([-200.0, -200.0, 3.4, 3.4]))
    assert efficiency(excess, L1_HZ) > 1.05
    lossless_k = antenna_temperature_k(hemisphere(), UPRIGHT, OPEN, L1_HZ)
    assert antenna_temperature_k(excess, UPRIGHT, OPEN, L1_HZ) == pytest.approx(lossless_k, abs=MILLIKELVIN)


CHAIN = (
    Part(part="preamplifier", gain_db=30.0, noise_figure_db=2.0),
    Part(part="cable", loss_db=4.5),
    Part(part="receiver", noise_figure_db=8.0, implementation_loss_db={"1176.45": 2.0, "1575.42": 1.0}),
)


def test_noise_of_a_site_adds_up() -> None:
    noise = chain_noise(CHAIN, builtin_pattern("choke-ring"), UPRIGHT, level(5.0), L1_HZ)
    assert noise.carrier_hz == L1_HZ
    assert noise.system_temperature_k == noise.antenna_temperature_k + noise.chain_temperature_k
    assert noise.net_gain_db == pytest.approx(25.5)
    assert noise.implementation_loss_db == 1.0
    assert noise.antenna_efficiency == efficiency(builtin_pattern("choke-ring"), L1_HZ)


def test_noise_density_at_290_k() -> None:
    # Authority: k x 290 K = -203.975 dBW/Hz. Walled in, with a chain that adds nothing.
    silent = (Part(part="receiver", noise_figure_db=0.0),)
    noise = chain_noise(silent, isotropic(), UPRIGHT, level(90.0), L1_HZ)
    assert noise.noise_density_dbw_per_hz == pytest.approx(-203.975, abs=0.001)
    assert noise.implementation_loss_db == 0.0


@pytest.mark.parametrize("name", ["patch", "ground-plane", "choke-ring"])
def test_antenna_temperature_under_an_open_sky_is_of_the_usual_size(name: str) -> None:
    # Authority: a geodetic receiver's manual, typically 130 K under an open sky; here from half of it to a
    # quarter more.
    assert 65.0 < antenna_temperature_k(builtin_pattern(name), UPRIGHT, level(5.0), L1_HZ) < 160.0


def test_narrow_cone_sees_little_of_a_low_wall() -> None:
    walls = level(25.0)
    narrow = uniform_cone(60.0)  # down to elevation 30
    assert antenna_temperature_k(narrow, UPRIGHT, walls, L1_HZ) == pytest.approx(
        antenna_temperature_k(narrow, UPRIGHT, OPEN, L1_HZ), abs=1e-9
    )
