from collections.abc import Callable
from dataclasses import replace

import numpy as np
import pytest

from siteassess.horizon.shares import covered_share, sky_shares
from siteassess.horizon.skyline import Obstacle, Skyline

CLOSED_FORM = 1e-9
DENSE_SUM = 1e-6  # what sums over midpoints leave
Build = Callable[..., Obstacle]
BuildSkyline = Callable[..., Skyline]
Array = np.ndarray


def edge_of(points: Obstacle, edge_deg: Array, azimuth_deg: Array) -> Array:
    """An edge at azimuths off its break points: planes through two directions, or straight lines."""
    result = np.full(azimuth_deg.shape, np.nan)
    for i in range(len(points.azimuth_deg) - 1):
        start, end = points.azimuth_deg[i : i + 2]
        for turn in (0.0, 360.0):
            inside = (azimuth_deg + turn > start) & (azimuth_deg + turn < end)
            if not inside.any():
                continue
            here = azimuth_deg[inside] + turn
            if points.straight_in_space:
                a, t = np.deg2rad([start, end]), np.tan(np.deg2rad(edge_deg[i : i + 2]))
                n = np.cross([np.sin(a[0]), np.cos(a[0]), t[0]], [np.sin(a[1]), np.cos(a[1]), t[1]])
                tangent = -(n[0] * np.sin(np.deg2rad(here)) + n[1] * np.cos(np.deg2rad(here))) / n[2]
                result[inside] = np.rad2deg(np.arctan(tangent))
            else:
                part = (here - start) / (end - start)
                result[inside] = edge_deg[i] + part * (edge_deg[i + 1] - edge_deg[i])
    return result


def judged(obstacles: list[Obstacle], mask_deg: float) -> tuple[Array, Array, Array]:
    """Hidden and leafy part of each azimuth above the mask, by sorting intervals at dense azimuths."""
    breaks = np.unique(np.concatenate([[0.0, 360.0], *(one.azimuth_deg % 360.0 for one in obstacles)]))
    part = (np.arange(4000) + 0.5) / 4000
    azimuth_deg = (breaks[:-1, None] + np.diff(breaks)[:, None] * part).ravel()
    weight = np.repeat(np.diff(breaks) / 4000 / 360.0, 4000)
    floor = np.sin(np.deg2rad(mask_deg))

    def union(which: list[Obstacle]) -> Array:
        lows, highs = [], []
        for one in which:
            top = np.sin(np.deg2rad(edge_of(one, one.elevation_deg, azimuth_deg)))
            low_deg = (
                np.full(one.azimuth_deg.shape, -89.0) if one.underside_deg is None else one.underside_deg
            )
            low = np.sin(np.deg2rad(edge_of(one, low_deg, azimuth_deg)))
            if one.underside_deg is None:
                low = np.where(np.isnan(top), np.nan, -1.0)
            lows.append(np.where(np.isnan(low), 1.0, np.maximum(low, floor)))
            highs.append(np.where(np.isnan(top), 1.0, np.maximum(top, floor)))
        order = np.argsort(lows, axis=0)
        low, high = (
            np.take_along_axis(np.array(lows), order, 0),
            np.take_along_axis(np.array(highs), order, 0),
        )
        reached, total = np.full(azimuth_deg.shape, floor), np.zeros(azimuth_deg.shape)
        for k in range(len(which)):
            total += np.maximum(high[k] - np.maximum(low[k], reached), 0.0)
            reached = np.maximum(reached, high[k])
        return total / (1.0 - floor)

    solid = union([one for one in obstacles if one.cover == "solid"] or obstacles[:0])
    return solid, union(obstacles) - solid, weight


def random_sky(seed: int, build: Build) -> list[Obstacle]:
    generator = np.random.default_rng(seed)
    obstacles = []
    for k in range(8):
        points = int(generator.integers(2, 6))
        azimuth_deg = generator.uniform(0, 360) + np.append(
            0, np.cumsum(generator.uniform(1, 60, points - 1))
        )
        elevation_deg = generator.uniform(-5, 75, points)
        more: dict[str, object] = {"straight_in_space": bool(generator.integers(2))}
        if k in (2, 5, 6):
            more |= {"cover": "foliage", "depth_m": [5.0] * points}
        if k in (3, 4, 6):
            more["underside_deg"] = elevation_deg - generator.uniform(0, 40, points)
        obstacles.append(build(azimuth_deg, elevation_deg, name=f"thing {k}", **more))
    return obstacles


def test_a_level_horizon_of_10_degrees_hides_its_zone(obstacle: Build, skyline: BuildSkyline) -> None:
    # Authority: Archimedes' zone of the sphere, sin 10 degrees = 0.17365 of the hemisphere.
    sky = skyline(obstacle([0, 360], [10, 10]))
    shares = sky_shares(sky, 0.0)
    assert shares.blocked_share_of_hemisphere == pytest.approx(0.17365, abs=0.0002)
    assert shares.blocked_share_of_hemisphere == pytest.approx(np.sin(np.deg2rad(10)), abs=CLOSED_FORM)
    assert shares.largest_block_deg == (0.0, 360.0)
    assert sky_shares(sky, 10.0).blocked_share_above_mask == 0.0
    assert sky_shares(sky, 10.0).largest_block_deg is None


def test_a_sector_of_90_degrees_to_30_degrees_hides_an_eighth(obstacle: Build, skyline: BuildSkyline) -> None:
    # Authority: zone of the sphere, sin 30 degrees / 4 = 0.1250.
    shares = sky_shares(skyline(obstacle([315, 405], [30, 30])), 0.0)
    assert shares.blocked_share_of_hemisphere == pytest.approx(0.1250, abs=CLOSED_FORM)
    assert shares.largest_block_share == pytest.approx(0.1250, abs=CLOSED_FORM)
    assert shares.largest_block_deg == pytest.approx((315, 405), abs=CLOSED_FORM)
    assert shares.sector_blocked_share == pytest.approx((0.5, 0.25, 0, 0, 0, 0, 0, 0.25), abs=CLOSED_FORM)
    assert (shares.peak_elevation_deg, shares.peak_azimuth_deg) == (30.0, 0.0)


def test_a_plane_through_the_eye_hides_a_lune(obstacle: Build, skyline: BuildSkyline) -> None:
    # Authority: a lune between the horizon and a great circle of 40 degrees is 40 / 180 of the hemisphere.
    # The wall that is seen over 179 degrees of azimuth lacks its two tips: half of 0.5 degrees x sin(0.42
    # degrees) each.
    top = np.tan(np.deg2rad(40.0))
    end_deg = np.rad2deg(np.arctan(top * np.cos(np.deg2rad(89.5))))
    tips = 2 * 0.5 * (0.5 / 360) * np.sin(np.deg2rad(end_deg))
    shares = sky_shares(
        skyline(obstacle([0.5, 90, 179.5], [end_deg, 40, end_deg], straight_in_space=True)), 0.0
    )
    assert shares.blocked_share_of_hemisphere == pytest.approx(40 / 180 - tips, abs=1e-7)
    assert shares.peak_elevation_deg == pytest.approx(40.0, abs=CLOSED_FORM)


def test_an_open_sky_has_nothing_hidden(skyline: BuildSkyline) -> None:
    shares = sky_shares(skyline(), 5.0)
    assert shares.blocked_share_of_hemisphere == shares.blocked_share_above_mask == 0.0
    assert shares.foliage_share_above_mask == shares.unsurveyed_share == shares.largest_block_share == 0.0
    assert shares.obstacle_blocked_share_above_mask == ()
    assert shares.largest_block_deg is None
    assert (shares.peak_elevation_deg, shares.peak_azimuth_deg) == (0.0, 0.0)
    assert (covered_share(skyline(), [0, 180, 360], [0, 45, 90]) == 0.0).all()


@pytest.mark.parametrize("mask_deg", [0.0, 12.0])
@pytest.mark.parametrize("seed", range(8))
def test_shares_equal_a_dense_sum_over_intervals(
    seed: int, mask_deg: float, obstacle: Build, skyline: BuildSkyline
) -> None:
    # Authority: the judge above, which shares no code with the package: planes, sorted intervals, midpoint
    # sums.
    obstacles = random_sky(seed, obstacle)
    shares = sky_shares(skyline(*obstacles), mask_deg)
    solid, leaves, weight = judged(obstacles, mask_deg)
    assert shares.blocked_share_above_mask == pytest.approx((solid * weight).sum(), abs=DENSE_SUM)
    assert shares.foliage_share_above_mask == pytest.approx((leaves * weight).sum(), abs=DENSE_SUM)
    own = np.array(shares.obstacle_blocked_share_above_mask)
    is_solid = np.array([one.cover == "solid" for one in obstacles])
    assert own[is_solid].sum() == pytest.approx(shares.blocked_share_above_mask, abs=CLOSED_FORM)
    assert own[~is_solid].sum() == pytest.approx(shares.foliage_share_above_mask, abs=CLOSED_FORM)


@pytest.mark.parametrize("seed", range(6))
def test_adding_an_obstacle_never_opens_sky(seed: int, obstacle: Build, skyline: BuildSkyline) -> None:
    obstacles = random_sky(seed, obstacle)
    before = 0.0
    for count in range(len(obstacles) + 1):
        blocked = sky_shares(skyline(*obstacles[:count]), 5.0).blocked_share_above_mask
        assert blocked >= before - CLOSED_FORM
        before = blocked


@pytest.mark.parametrize("seed", range(6))
def test_order_of_obstacles_changes_no_share(seed: int, obstacle: Build, skyline: BuildSkyline) -> None:
    obstacles = random_sky(seed, obstacle)
    forth = sky_shares(skyline(*obstacles), 5.0)
    back = sky_shares(skyline(*obstacles[::-1]), 5.0)
    assert back.blocked_share_above_mask == pytest.approx(forth.blocked_share_above_mask, abs=CLOSED_FORM)
    assert back.obstacle_blocked_share_above_mask[::-1] == pytest.approx(
        forth.obstacle_blocked_share_above_mask, abs=CLOSED_FORM
    )
    assert back.largest_block_share == pytest.approx(forth.largest_block_share, abs=CLOSED_FORM)


@pytest.mark.parametrize("turn_deg", [17.3, 123.4, 270.0])
def test_turning_everything_changes_no_share(turn_deg: float, obstacle: Build, skyline: BuildSkyline) -> None:
    obstacles = random_sky(3, obstacle)
    turned = []
    for one in obstacles:
        azimuth_deg = one.azimuth_deg + turn_deg
        turned.append(replace(one, azimuth_deg=azimuth_deg - 360.0 * np.floor(azimuth_deg[0] / 360.0)))
    was, now = sky_shares(skyline(*obstacles), 8.0), sky_shares(skyline(*turned), 8.0)
    assert now.blocked_share_above_mask == pytest.approx(was.blocked_share_above_mask, abs=CLOSED_FORM)
    assert now.foliage_share_above_mask == pytest.approx(was.foliage_share_above_mask, abs=CLOSED_FORM)
    assert now.largest_block_share == pytest.approx(was.largest_block_share, abs=CLOSED_FORM)
    assert now.largest_block_deg is not None and was.largest_block_deg is not None
    shift_deg = np.subtract(now.largest_block_deg, was.largest_block_deg) - turn_deg
    assert (shift_deg + 180.0) % 360.0 - 180.0 == pytest.approx(0.0, abs=1e-6)


def test_a_wall_split_in_two_changes_no_share(obstacle: Build, skyline: BuildSkyline) -> None:
    middle_deg = np.rad2deg(np.arctan(0.3))
    end_deg = np.rad2deg(np.arctan(0.15))
    whole = skyline(obstacle([300, 420], [end_deg, end_deg], straight_in_space=True))
    halves = skyline(
        obstacle([300, 360], [end_deg, middle_deg], straight_in_space=True),
        obstacle([0, 60], [middle_deg, end_deg], straight_in_space=True),
    )
    one, two = sky_shares(whole, 5.0), sky_shares(halves, 5.0)
    assert two.blocked_share_above_mask == pytest.approx(one.blocked_share_above_mask, abs=CLOSED_FORM)
    assert two.largest_block_share == pytest.approx(one.largest_block_share, abs=CLOSED_FORM)
    assert two.largest_block_deg == pytest.approx(one.largest_block_deg, abs=1e-6)


def test_a_hanging_band_hides_between_its_edges(obstacle: Build, skyline: BuildSkyline) -> None:
    # By hand: zones of the sphere, (sin 40 - sin 30) / 4 for the band, sin 35 / 4 for the wall behind half of
    # it.
    band = obstacle([0, 90], [40, 40], underside_deg=[30, 30])
    sin = np.sin(np.deg2rad([30, 35, 40]))
    alone = sky_shares(skyline(band), 0.0)
    assert alone.blocked_share_of_hemisphere == pytest.approx((sin[2] - sin[0]) / 4, abs=CLOSED_FORM)
    wall = obstacle([0, 45], [35, 35])
    both = sky_shares(skyline(wall, band), 0.0)
    assert both.blocked_share_of_hemisphere == pytest.approx(
        sin[2] / 8 + (sin[2] - sin[0]) / 8, abs=CLOSED_FORM
    )
    # The band is the higher one: the wall keeps what lies below the band's underside.
    expected = (sin[0] / 8, (sin[2] - sin[0]) / 4)
    assert both.obstacle_blocked_share_above_mask == pytest.approx(expected, abs=CLOSED_FORM)
    assert (both.peak_elevation_deg, both.peak_azimuth_deg) == (40.0, 0.0)


def test_leaves_before_a_wall_are_no_leaves(obstacle: Build, skyline: BuildSkyline) -> None:
    # By hand: a tree to 30 degrees over a quarter of the circle, a wall to 20 degrees behind half of it.
    tree = obstacle([0, 90], [30, 30], cover="foliage", depth_m=[5, 5])
    sin = np.sin(np.deg2rad([20, 30]))
    shares = sky_shares(skyline(tree, obstacle([45, 90], [20, 20]), tree), 0.0)
    expected = sin[1] / 8 + (sin[1] - sin[0]) / 8
    assert shares.foliage_share_above_mask == pytest.approx(expected, abs=CLOSED_FORM)
    assert shares.obstacle_blocked_share_above_mask == pytest.approx(
        (expected, sin[0] / 8, 0.0), abs=CLOSED_FORM
    )
    assert shares.blocked_share_of_hemisphere == pytest.approx(sin[0] / 8, abs=CLOSED_FORM)


def test_unsurveyed_sky_is_less_what_known_obstacles_hide(obstacle: Build, skyline: BuildSkyline) -> None:
    # By hand, above a mask of 0: half the circle less a quarter of it up to 30 degrees.
    wall = obstacle([300, 420], [30, 30])
    shares = sky_shares(skyline(wall, gaps_deg=[(0, 90), (270, 360)]), 0.0)
    assert shares.unsurveyed_share == pytest.approx(0.5 - 0.5 * 120 / 360, abs=CLOSED_FORM)
    assert sky_shares(skyline(gaps_deg=[(0, 360)]), 12.0).unsurveyed_share == pytest.approx(
        1.0, abs=CLOSED_FORM
    )


def test_blocks_merge_where_they_touch_above_the_mask(obstacle: Build, skyline: BuildSkyline) -> None:
    # By hand: 350..370 and 10..20 touch, 30 degrees in all against the 29 of the next; the valley between 100
    # and 140 dips below the mask of 10 degrees at 110 and 130.
    north = obstacle([350, 370], [20, 20])
    shares = sky_shares(skyline(north, obstacle([10, 20], [20, 20]), obstacle([25, 54], [20, 20])), 10.0)
    sin = np.sin(np.deg2rad([10, 20]))
    assert shares.largest_block_deg == pytest.approx((350, 380), abs=1e-6)
    assert shares.largest_block_share == pytest.approx((sin[1] - sin[0]) * 30 / 360, abs=CLOSED_FORM)
    valley = sky_shares(skyline(obstacle([80, 100, 120, 140, 170], [20, 20, 0, 20, 20])), 10.0)
    assert valley.largest_block_deg == pytest.approx((130, 170), abs=1e-6)
    ring = sky_shares(skyline(obstacle([0, 180, 360], [20, 0, 20])), 10.0)
    assert ring.largest_block_deg == pytest.approx((270, 450), abs=1e-6)
    assert ring.largest_block_share == pytest.approx(
        ring.blocked_share_above_mask * (1 - sin[0]), abs=CLOSED_FORM
    )


@pytest.mark.parametrize("seed", range(4))
@pytest.mark.parametrize("step_deg", [1, 5])
def test_covered_cells_add_up_to_the_blocked_share(
    seed: int, step_deg: int, obstacle: Build, skyline: BuildSkyline
) -> None:
    sky = skyline(*random_sky(seed, obstacle))
    elevation_deg = np.arange(10, 91, step_deg)
    cells = covered_share(sky, np.arange(0, 361, step_deg), elevation_deg)
    assert cells.shape == (360 // step_deg, 80 // step_deg)
    assert ((cells >= 0.0) & (cells <= 1.0)).all()
    height = np.diff(np.sin(np.deg2rad(elevation_deg)))
    blocked = (cells * height).sum() / (360 // step_deg) / height.sum()
    assert blocked == pytest.approx(sky_shares(sky, 10.0).blocked_share_above_mask, abs=CLOSED_FORM)


def test_a_cell_is_covered_in_part(obstacle: Build, skyline: BuildSkyline) -> None:
    # By hand: 2.5 of 5 degrees of azimuth, up to 12 of 10..15 degrees of elevation.
    cells = covered_share(skyline(obstacle([2.5, 10], [12, 12])), [0, 5, 10, 15], [0, 10, 15, 90])
    sin = np.sin(np.deg2rad([10, 12, 15]))
    partial = (sin[1] - sin[0]) / (sin[2] - sin[0])
    expected = [[0.5, 0.5 * partial, 0], [1, partial, 0], [0, 0, 0]]
    np.testing.assert_allclose(cells, expected, atol=CLOSED_FORM)


def test_a_block_holds_what_of_its_edge_is_above_the_mask(
    obstacle: Callable[..., Obstacle], skyline: Callable[..., Skyline]
) -> None:
    """A long edge that passes the mask near its end belongs to the block there, not to one at its middle."""
    slope = obstacle([100, 200], [-20, 20], name="slope")
    post = obstacle([110, 111], [12, 12], name="post")
    both, alone = sky_shares(skyline(slope, post), 10.0), sky_shares(skyline(slope), 10.0)
    assert alone.largest_block_deg == pytest.approx((175.0, 200.0))
    assert both.largest_block_deg == pytest.approx((175.0, 200.0))
    assert both.largest_block_share == pytest.approx(alone.largest_block_share, abs=1e-12)
