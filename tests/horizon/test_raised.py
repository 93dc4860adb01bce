"""A skyline from higher up, against plane trigonometry and against the survey carried to another height."""

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from siteassess import read_site
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.raised import keeps_its_angles, raised
from siteassess.horizon.read import read_skyline
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.view import outline_elevation_deg
from siteassess.verdict.cures.heights import at_height

ROUNDING_DEG = 1e-9
MILLIMETRE_M = 0.001

SURVEY = """\
azimuth_deg,elevation_deg,distance_m,obstacle,cover,underside_deg,depth_m,width_m
0,3,,,,,,
180,4,150,,,,,
140,38,24,silo,solid,,,
190,30,26,silo,solid,,,
205,30.5,70,jib,solid,28,,
229,36,58,jib,solid,33.5,,
60,25,15,limes,foliage,,4,
80,28,15,limes,foliage,,4,
300,20,6,pole,solid,,,0.1
"""


def skyline_of(*obstacles: Obstacle) -> Skyline:
    return Skyline(obstacles=obstacles, outline=upper_envelope(obstacles), unsurveyed_deg=np.empty((0, 2)))


def wall(elevation_deg: float, distance_m: float | None) -> Obstacle:
    known = None if distance_m is None else np.full(2, distance_m)
    return Obstacle(
        name="wall",
        cover="solid",
        azimuth_deg=np.array([80.0, 100.0]),
        elevation_deg=np.full(2, elevation_deg),
        distance_m=known,
        straight_in_space=distance_m is not None,
    )


def test_top_goes_down_as_a_right_triangle_says() -> None:
    # 10 m high and 20 m away in plan: arctan(1/2); 4 m higher up, arctan(6/20).
    before = wall(np.rad2deg(np.arctan(0.5)), float(np.hypot(10.0, 20.0)))
    after = raised(skyline_of(before), 4.0).obstacles[0]
    np.testing.assert_allclose(after.elevation_deg, np.rad2deg(np.arctan(0.3)), atol=ROUNDING_DEG)
    np.testing.assert_allclose(after.distance_m, np.hypot(6.0, 20.0), atol=MILLIMETRE_M)


@settings(deadline=None, max_examples=50)
@given(
    elevation_deg=st.floats(-60.0, 85.0),
    distance_m=st.floats(0.5, 5000.0),
    rise_m=st.floats(0.0, 30.0),
)
def test_a_taller_mast_never_raises_a_wall(elevation_deg: float, distance_m: float, rise_m: float) -> None:
    before = skyline_of(wall(elevation_deg, distance_m))
    after = raised(before, rise_m)
    azimuth_deg = np.linspace(80.0, 100.0, 11)
    lifted_deg = outline_elevation_deg(after, azimuth_deg) - outline_elevation_deg(before, azimuth_deg)
    assert (lifted_deg <= ROUNDING_DEG).all()


def test_nearer_walls_go_down_further() -> None:
    near, far = (raised(skyline_of(wall(30.0, away_m)), 2.0).obstacles[0] for away_m in (10.0, 100.0))
    assert near.elevation_deg[0] < far.elevation_deg[0] < 30.0


def test_without_a_distance_angles_stay() -> None:
    before = wall(30.0, None)
    assert raised(skyline_of(before), 3.0).obstacles[0].elevation_deg.tolist() == [30.0, 30.0]
    assert keeps_its_angles(before)
    assert not keeps_its_angles(wall(30.0, 50.0))


@pytest.mark.parametrize("rise_m", [-0.5, 0.0, 1.0, 4.0])
def test_same_as_the_survey_carried_to_that_height(write_site: Callable[..., Path], rise_m: float) -> None:
    site = read_site(write_site(horizon=SURVEY))
    quick = raised(read_skyline(site), rise_m)
    carried = read_skyline(at_height(site, site.mount.mast_height_m + rise_m))
    for one, other in zip(quick.obstacles, carried.obstacles, strict=True):
        np.testing.assert_allclose(one.azimuth_deg, other.azimuth_deg, atol=ROUNDING_DEG)
        np.testing.assert_allclose(one.elevation_deg, other.elevation_deg, atol=ROUNDING_DEG)
        if one.underside_deg is not None:
            np.testing.assert_allclose(one.underside_deg, other.underside_deg, atol=ROUNDING_DEG)
        if one.distance_m is not None:
            np.testing.assert_allclose(one.distance_m, other.distance_m, atol=MILLIMETRE_M)
