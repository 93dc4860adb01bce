"""Buildings as obstacles: against shapely, against typed horizons, and by laws that geometry obeys."""

import math
import runpy
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
import pytest

from siteassess.errors import InputError
from siteassess.horizon.buildings import obstacles, silhouettes
from siteassess.horizon.buildings.building import Building
from siteassess.horizon.buildings.hidden_walls import screen_tangent
from siteassess.horizon.buildings.obstacles import obstacles_of
from siteassess.horizon.buildings.walls import Walls, walls_of
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.shares import sky_shares
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.view import (
    depth_m,
    edge_distance_m,
    edge_elevation_deg,
    hiding_obstacle,
    outline_elevation_deg,
    underside_elevation_deg,
)

RAYS = runpy.run_path(str(Path(__file__).parents[1] / "builders" / "compare_outlines_with_rays.py"))
difference, random_neighbourhood, plan_of, skyline_of, standing = (
    RAYS[name] for name in ("difference", "random_neighbourhood", "plan_of", "skyline_of", "standing")
)

OUTLINE_DEG = 0.05
SHARE = 2e-4
ROUNDING_DEG = 1e-7
ROUNDING_SHARE = 1e-9
EARTH_M = 8.5e6  # 4/3 of the earth's radius, ITU-R P.526

AZIMUTHS_DEG = np.arange(0.05, 360.0, 0.1)
Corners = list[tuple[float, float]]


def building(corners: Corners, height_m: float, *holes: Corners, **more: Any) -> Building:
    """A building with the antenna at 0, 0; corners are east and north in metres, not repeated."""
    rings = tuple(np.array([*ring, ring[0]], dtype=float) for ring in (corners, *holes))
    return replace(standing("hall", height_m, (rings,)), **more)


def square(middle: tuple[float, float], half_m: float) -> Corners:
    east, north = middle
    return [
        (east - half_m, north - half_m),
        (east + half_m, north - half_m),
        (east + half_m, north + half_m),
        (east - half_m, north + half_m),
    ]


def seen(*buildings: Building, antenna_m: float = 0.0) -> tuple[Obstacle, ...]:
    return obstacles_of(buildings, plan_of(buildings), antenna_m, "plan.geojson")


def blocked(skyline: Skyline) -> float:
    return sky_shares(skyline, 0.0).blocked_share_of_hemisphere


@pytest.mark.parametrize("seed", range(8))
def test_outline_and_share_agree_with_rays_of_shapely(seed: int) -> None:
    # shapely 2 on GEOS, a ray every 0.02 degrees; the builder does the same for 200 neighbourhoods.
    buildings = random_neighbourhood(np.random.default_rng(seed))
    found = difference(buildings)
    assert found.outline_deg < OUTLINE_DEG
    assert abs(found.blocked_share) < SHARE


def test_a_wall_is_an_arc_of_a_great_circle() -> None:
    # By hand: a wall 3 m above the antenna, 10 m north, ends at +- 60 degrees: 8.531, 16.699, 8.531 degrees.
    reach = 10.0 * math.sqrt(3.0)
    (wall,) = seen(building([(-reach, 10), (reach, 10), (reach, 12), (-reach, 12)], 3.0))
    assert wall.straight_in_space
    np.testing.assert_allclose(
        edge_elevation_deg(wall, [300.0, 0.0, 60.0]), [8.5308, 16.6992, 8.5308], atol=1e-3
    )
    np.testing.assert_allclose(edge_distance_m(wall, [0.0]), [math.hypot(10.0, 3.0)], atol=1e-4)
    np.testing.assert_allclose(wall.azimuth_deg % 360.0, [300.0, 60.0], atol=1e-9)


def test_the_earth_falls_away_behind_far_buildings() -> None:
    # 4/3 earth, ITU-R P.526: 5.88 m at 10 km.
    (tower,) = seen(building(square((0.0, 10_010.0), 10.0), 100.0))
    expected_deg = math.degrees(math.atan((100.0 - 10_000.0**2 / (2.0 * EARTH_M)) / 10_000.0))
    np.testing.assert_allclose(edge_elevation_deg(tower, [0.0]), expected_deg, atol=1e-5)


def test_a_ring_wall_is_the_level_horizon_typed_in() -> None:
    # A regular ring of 3600 sides at 100 m, 20 m above the antenna: atan(0.2) = 11.3099 degrees.
    angle_rad = np.deg2rad(np.arange(0.0, 360.0, 0.1))
    inner = [(100.0 * math.sin(a), 100.0 * math.cos(a)) for a in angle_rad]
    outer = [(1.01 * east, 1.01 * north) for east, north in inner]
    (ring,) = seen(building(outer, 20.0, inner))
    assert ring.azimuth_deg[-1] - ring.azimuth_deg[0] == 360.0
    skyline = Skyline(obstacles=(ring,), outline=upper_envelope([ring]), unsurveyed_deg=np.empty((0, 2)))
    np.testing.assert_allclose(outline_elevation_deg(skyline, AZIMUTHS_DEG), 11.3099, atol=1e-3)
    level = math.sin(math.atan(0.2 - 100.0 / (2.0 * EARTH_M)))
    assert blocked(skyline) == pytest.approx(level, abs=1e-6)


def test_the_walls_of_a_courtyard_surround_the_antenna() -> None:
    # By hand: from the middle of a square court of 20 m, walls 10 m above the antenna stand at 45 degrees
    # half way and at atan(10 / 14.142) = 35.264 in the corners.
    (court,) = seen(building(square((0.0, 0.0), 30.0), 10.0, square((0.0, 0.0), 10.0)))
    seen_deg = edge_elevation_deg(court, [0.0, 45.0, 90.0, 180.0, 225.0, 270.0])
    np.testing.assert_allclose(seen_deg, [45.0, 35.2644, 45.0, 45.0, 35.2644, 45.0], atol=1e-3)
    assert len(court.azimuth_deg) == 5


def test_building_below_the_antenna_hides_nothing() -> None:
    roof, house = building(square((0.0, 0.0), 20.0), 12.0), building(square((0.0, 60.0), 10.0), 20.0)
    assert [one.name for one in seen(roof, replace(house, name="house"), antenna_m=13.5)] == ["house"]
    assert seen(roof, antenna_m=12.0) == ()


def test_a_parapet_is_a_feature_of_its_own() -> None:
    # By hand: 0.9 m on a roof at 12 m, seen from 12.4 m at 5 m: atan(0.5 / 5) = 5.711 degrees.
    outer, inner = square((0.0, 0.0), 5.3), square((0.0, 0.0), 5.0)
    (parapet,) = seen(building(outer, 0.9, inner, base_m=12.0), antenna_m=12.4)
    np.testing.assert_allclose(edge_elevation_deg(parapet, [0.0]), 5.7106, atol=1e-3)


def test_a_concave_building_shows_its_nearest_walls() -> None:
    # A U that opens south, seen from south: two wings at 10 m, the inner wall at 30 m.
    corners: Corners = [(-10, 10), (-6, 10), (-6, 30), (6, 30), (6, 10), (10, 10), (10, 40), (-10, 40)]
    (hall,) = seen(building(corners, 10.0))
    inner, wing = edge_elevation_deg(hall, [0.0]), edge_elevation_deg(hall, [40.0])
    np.testing.assert_allclose(inner, math.degrees(math.atan(10 / 30)), atol=1e-3)
    np.testing.assert_allclose(wing, math.degrees(math.atan(10 / 10 * math.cos(math.radians(40)))), atol=1e-3)


def test_parts_in_different_directions_are_obstacles_of_their_own() -> None:
    west, east = building(square((-40.0, 0.0), 5.0), 9.0), building(square((40.0, 0.0), 5.0), 9.0)
    both = replace(west, parts=west.parts + east.parts)
    found = seen(both)
    assert [one.name for one in found] == ["hall", "hall"]
    assert [bool(one.azimuth_deg[0] < 180.0) for one in found] == [True, False]


def test_hidden_buildings_are_left_out() -> None:
    near, far = building(square((0.0, 20.0), 10.0), 30.0), building(square((0.0, 80.0), 5.0), 30.0)
    tall = replace(far, height_m=300.0, name="tower")
    assert len(seen(near, far)) == 1
    assert [one.name for one in seen(near, tall)] == ["hall", "tower"]


def test_what_lies_far_below_the_horizontal_costs_nothing() -> None:
    low = building(square((0.0, 100.0), 20.0), 5.0)
    assert seen(low, antenna_m=50.0) == ()
    (slightly,) = seen(low, antenna_m=8.0)
    # Looking down on a roof, its far edge is the highest: 3 m below at 120 m.
    np.testing.assert_allclose(
        edge_elevation_deg(slightly, [0.0]), -math.degrees(math.atan(3.0 / 120.0)), atol=1e-3
    )


@pytest.mark.parametrize("seed", range(6))
def test_one_more_building_never_opens_sky(seed: int) -> None:
    *some, last = random_neighbourhood(np.random.default_rng(100 + seed))
    before, after = skyline_of(some), skyline_of([*some, last])
    gained = outline_elevation_deg(after, AZIMUTHS_DEG) - outline_elevation_deg(before, AZIMUTHS_DEG)
    assert (gained > -ROUNDING_DEG).all()
    assert blocked(after) >= blocked(before) - ROUNDING_SHARE


@pytest.mark.parametrize("seed", range(6))
def test_a_higher_mast_never_raises_the_outline(seed: int) -> None:
    buildings = random_neighbourhood(np.random.default_rng(200 + seed))
    low, high = (
        np.maximum(outline_elevation_deg(skyline_of(buildings, up_m), AZIMUTHS_DEG), 0.0)
        for up_m in (3.0, 6.0)
    )
    assert (high <= low + ROUNDING_DEG).all()


@pytest.mark.parametrize("seed", range(6))
def test_corners_within_walls_and_the_order_of_features_change_nothing(seed: int) -> None:
    random = np.random.default_rng(300 + seed)
    buildings = random_neighbourhood(random)

    def split(ring: np.ndarray) -> np.ndarray:
        halves = ring[:-1] + random.uniform(0.2, 0.8, (len(ring) - 1, 1)) * np.diff(ring, axis=0)
        return np.concatenate([np.stack([ring[:-1], halves], axis=1).reshape(-1, 2), ring[-1:]])

    finer = [
        replace(one, parts=tuple(tuple(split(ring) for ring in part) for part in one.parts))
        for one in buildings
    ]
    backwards = [
        replace(one, parts=tuple(tuple(ring[::-1] for ring in part) for part in one.parts))
        for one in buildings
    ]
    before = skyline_of(buildings)
    for after in (skyline_of(finer), skyline_of(buildings[::-1]), skyline_of(backwards)):
        np.testing.assert_allclose(
            outline_elevation_deg(after, AZIMUTHS_DEG),
            outline_elevation_deg(before, AZIMUTHS_DEG),
            atol=ROUNDING_DEG,
        )
        assert blocked(after) == pytest.approx(blocked(before), abs=ROUNDING_SHARE)


@pytest.mark.parametrize("turn_deg", [1.0, 33.3, 180.0, 271.0])
def test_turning_everything_turns_the_outline(turn_deg: float) -> None:
    buildings = random_neighbourhood(np.random.default_rng(7))
    cosine, sine = math.cos(math.radians(turn_deg)), math.sin(math.radians(turn_deg))
    clockwise = np.array([[cosine, -sine], [sine, cosine]])
    turned = [
        replace(one, parts=tuple(tuple(ring @ clockwise for ring in part) for part in one.parts))
        for one in buildings
    ]
    before, after = skyline_of(buildings), skyline_of(turned)
    np.testing.assert_allclose(
        outline_elevation_deg(after, AZIMUTHS_DEG + turn_deg),
        outline_elevation_deg(before, AZIMUTHS_DEG),
        atol=1e-6,
    )
    assert blocked(after) == pytest.approx(blocked(before), abs=1e-8)


def test_touching_and_overlapping_buildings_hide_as_one() -> None:
    left, right = square((-5.0, 20.0), 5.0), square((5.0, 20.0), 5.0)
    whole: Corners = [(-10, 15), (10, 15), (10, 25), (-10, 25)]
    one = skyline_of([building(whole, 9.0)], 0.0)
    for parts in ((left, right), (left, whole), (whole, square((0.0, 20.0), 3.0))):
        several = skyline_of([building(part, 9.0) for part in parts], 0.0)
        assert blocked(several) == pytest.approx(blocked(one), abs=ROUNDING_SHARE)


def test_a_bridge_leaves_the_sky_below_it_open() -> None:
    # By hand: deck from 8 to 10 m above the antenna, 20 to 24 m north: top atan(10 / 20), underside
    # seen from below at its far edge, atan(8 / 24).
    (deck,) = seen(building([(-50, 20), (50, 20), (50, 24), (-50, 24)], 10.0, underside_m=8.0))
    np.testing.assert_allclose(edge_elevation_deg(deck, [0.0]), 26.5651, atol=1e-3)
    np.testing.assert_allclose(underside_elevation_deg(deck, [0.0]), 18.4349, atol=1e-3)
    skyline = Skyline(obstacles=(deck,), outline=upper_envelope([deck]), unsurveyed_deg=np.empty((0, 2)))
    assert hiding_obstacle(skyline, [0.0, 0.0, 0.0], [10.0, 20.0, 30.0]).tolist() == [-1, 0, -1]


def test_the_sky_between_two_layers_of_a_canopy_stays_open() -> None:
    # A ring of roof, 9 to 10 m above the antenna, with a hole from 30 to 60 m: atan(10/20) .. atan(9/30),
    # then atan(10/60) = 9.462 .. atan(9/70) = 7.327 degrees.
    outer: Corners = [(-40, 20), (40, 20), (40, 70), (-40, 70)]
    inner: Corners = [(-30, 30), (30, 30), (30, 60), (-30, 60)]
    near, far = seen(building(outer, 10.0, inner, underside_m=9.0))
    ends = [
        float(edge(one, [0.0])[0])
        for one in (near, far)
        for edge in (edge_elevation_deg, underside_elevation_deg)
    ]
    np.testing.assert_allclose(ends, [26.5651, 16.6992, 9.4623, 7.3264], atol=1e-3)


def test_a_canopy_over_the_antenna_reaches_the_zenith() -> None:
    # By hand: a roof of 20 m square, underside 10 m above the antenna, hides all above 45 degrees half way.
    (roof,) = seen(building(square((0.0, 0.0), 10.0), 12.0, underside_m=10.0))
    skyline = Skyline(obstacles=(roof,), outline=upper_envelope([roof]), unsurveyed_deg=np.empty((0, 2)))
    around_deg = np.arange(0.0, 360.0, 7.0)
    assert (hiding_obstacle(skyline, around_deg, 89.0) == 0).all()
    assert hiding_obstacle(skyline, [0.0, 0.0], [44.9, 45.1]).tolist() == [-1, 0]
    # Solid angle of a square of half side a seen from the height a over its middle: 2 pi / 3 (a cube's face).
    assert blocked(skyline) == pytest.approx((2.0 * math.pi / 3.0) / (2.0 * math.pi), abs=1e-5)


def trees(corners: Corners, height_m: float, *holes: Corners, **more: Any) -> Building:
    return building(corners, height_m, *holes, name="trees", cover="foliage", **more)


def test_leaves_have_the_path_of_the_outline() -> None:
    # By hand: 4 m thick, 10 m above the antenna at 100 m: half way up, at 2.855 degrees, 4 / cos = 4.005 m.
    (wood,) = seen(trees([(-80, 100), (80, 100), (80, 104), (-80, 104)], 10.0))
    assert (wood.cover, wood.hangs_free) == ("foliage", False)
    np.testing.assert_allclose(depth_m(wood, [0.0]), [4.005], atol=1e-3)
    # 30 degrees aside the path is longer by 1 / cos 30.
    np.testing.assert_allclose(depth_m(wood, [30.0]), [4.0 / math.cos(math.radians(30.0))], atol=0.01)


def test_a_deep_wood_is_left_through_its_top() -> None:
    # By hand: 10 m above the antenna from 10 m on: at half of 45 degrees a ray leaves at 24.14 m.
    (wood,) = seen(trees([(-600, 10), (600, 10), (600, 900), (-600, 900)], 10.0))
    expected_m = (10.0 / math.tan(math.radians(22.5)) - 10.0) / math.cos(math.radians(22.5))
    np.testing.assert_allclose(depth_m(wood, [0.0]), [expected_m], atol=1e-3)


def test_paths_through_trees_behind_each_other_add() -> None:
    # A clearing from 104 to 106 m takes 2 of 10 m away.
    outer: Corners = [(-80, 100), (80, 100), (80, 110), (-80, 110)]
    clearing: Corners = [(-70, 104), (70, 104), (70, 106), (-70, 106)]
    (wood,) = seen(trees(outer, 30.0, clearing))
    slope = math.cos(0.5 * math.atan(0.3))
    np.testing.assert_allclose(depth_m(wood, [0.0]), [8.0 / slope], atol=1e-3)


def test_a_given_path_goes_before_that_of_the_outline() -> None:
    (wood,) = seen(trees(square((0.0, 50.0), 10.0), 20.0, depth_m=3.5))
    assert (depth_m(wood, [0.0, 5.0]) == 3.5).all()


def test_a_crown_hangs_free_and_an_antenna_may_stand_in_a_wood() -> None:
    (crown,) = seen(trees(square((0.0, 50.0), 10.0), 20.0, underside_m=4.0))
    assert crown.hangs_free
    (wood,) = seen(trees(square((0.0, 0.0), 30.0), 20.0))
    assert edge_elevation_deg(wood, [10.0]) == pytest.approx(90.0)
    # Half way to the zenith the ray leaves through the top, 20 / sin 45.
    np.testing.assert_allclose(depth_m(wood, [0.0]), [20.0 / math.sin(math.radians(45.0))], atol=1e-3)


def test_leaves_below_the_antenna_cost_nothing() -> None:
    assert seen(trees(square((0.0, 50.0), 10.0), 5.0), antenna_m=6.0) == ()


@pytest.mark.parametrize(
    ("make", "message"),
    [
        (
            lambda: building(square((0.0, 0.0), 10.0), 12.0),
            '"hall" stands round the antenna and is 12.0 m taller',
        ),
        (
            lambda: building(square((0.0, 0.0), 10.0), 12.0, underside_m=0.0),
            '"hall" stands round the antenna and is 12.0 m taller',
        ),
        (lambda: building(square((10.0, 0.0), 10.0), 12.0), '"hall" has a wall on the axis of the antenna'),
    ],
)
def test_an_antenna_inside_a_building_is_a_mistake(make: Callable[[], Building], message: str) -> None:
    remedy = "check the outline, its heights, ground_up_m and the site's position"
    with pytest.raises(InputError) as refusal:
        seen(make())
    assert str(refusal.value) == f"plan.geojson: {message}; {remedy}"


def test_an_intricate_wood_is_refused_before_it_fills_the_memory() -> None:
    # A comb of 1000 teeth that all stand behind each other.
    teeth = np.arange(1000) * 0.5 + 10.0
    comb = [
        point
        for north in teeth.tolist()
        for point in ((-50.0, north), (50.0, north + 0.1), (50.0, north + 0.2))
    ]
    with pytest.raises(InputError) as refusal:
        seen(trees([*comb, (60.0, 600.0), (60.0, 5.0), (-60.0, 5.0)], 700.0))
    assert str(refusal.value) == (
        'plan.geojson: the outline of "trees" is too intricate for leaves or for what hangs free; '
        "leave out corners"
    )


def test_spirals_and_stars_of_many_corners_agree_with_rays() -> None:
    # A wall that winds round the antenna 2.5 times: shapely again.
    angle_rad = np.linspace(0.0, 5.0 * np.pi, 200)
    inner_m, outer_m = 10.0 + 3.0 * angle_rad, 11.0 + 3.0 * angle_rad
    spiral = np.concatenate(
        [
            np.stack([inner_m * np.sin(angle_rad), inner_m * np.cos(angle_rad)], axis=1),
            np.stack([outer_m * np.sin(angle_rad), outer_m * np.cos(angle_rad)], axis=1)[::-1],
        ]
    )
    ring = np.concatenate([spiral, spiral[:1]])
    found = difference([standing("spiral", 9.0, ((ring,),))])
    assert found.outline_deg < OUTLINE_DEG
    assert abs(found.blocked_share) < SHARE


@pytest.mark.parametrize("seed", range(12))
def test_what_hangs_free_hides_what_lines_of_sight_cross(seed: int) -> None:
    # shapely 2: where rays of random directions run within the outline, in plan, and the heights there.
    random = np.random.default_rng(400 + seed)
    hanging = [
        replace(one, base_m=30.0, height_m=6.0 + one.height_m / 4.0, underside_m=5.0)
        for one in random_neighbourhood(random)
    ]
    if seed % 2:
        hanging.append(building(square((0.0, 0.0), 20.0), 40.0, square((3.0, 2.0), 8.0), underside_m=20.0))
    if seed % 3 == 0:
        hanging.append(building(square((2.0, 5.0), 20.0), 70.0, underside_m=60.0))
    skyline = skyline_of(hanging, 3.0)
    azimuth_deg = random.uniform(0.0, 360.0, 1500)
    elevation_deg = np.rad2deg(np.arcsin(random.uniform(0.0, 1.0, 1500)))
    ours = hiding_obstacle(skyline, azimuth_deg, elevation_deg) >= 0
    crossed = RAYS["crossed_by_rays"](hanging, 3.0, azimuth_deg, elevation_deg)
    assert (ours == crossed).mean() > 0.999  # rays that graze an edge may differ by rounding


def test_leaving_out_hidden_walls_early_changes_nothing(monkeypatch: pytest.MonkeyPatch) -> None:
    random = np.random.default_rng(5)
    buildings: list[Building] = []
    while len(buildings) < 400:
        buildings += random_neighbourhood(random)
    quick = skyline_of(buildings)

    def nothing(walls: Walls, *_: object) -> np.ndarray:
        return np.zeros(len(walls), dtype=np.bool_)

    for module in (silhouettes, obstacles):
        monkeypatch.setattr(module, "surely_hidden", nothing)
    slow = skyline_of(buildings)
    assert [one.name for one in quick.obstacles] == [one.name for one in slow.obstacles]
    for name in ("start_deg", "start_elevation_deg", "end_elevation_deg"):
        assert np.array_equal(getattr(quick.outline, name), getattr(slow.outline, name))


@pytest.mark.parametrize("seed", range(4))
def test_no_screen_stands_above_the_walls_that_make_it(seed: int) -> None:
    buildings = random_neighbourhood(np.random.default_rng(500 + seed))
    walls = walls_of(plan_of(buildings))
    level_m = np.array([one.height_m for one in buildings])[walls.building] - 3.0
    screen = screen_tangent(walls, level_m)
    within_deg = (np.arange(len(screen))[:, None] + np.array([0.001, 0.3, 0.6, 0.999])) * 360.0 / len(screen)
    outline_deg = outline_elevation_deg(skyline_of(buildings), within_deg)
    drop_deg = 0.02  # which the levels here leave out
    assert (np.rad2deg(np.arctan(screen))[:, None] <= outline_deg + drop_deg).all()
    assert np.isfinite(screen).any()
