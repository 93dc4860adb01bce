from collections.abc import Callable

import numpy as np
import pytest

from siteassess.horizon.survey.carry import Points, carried
from siteassess.horizon.survey.read import Survey
from siteassess.horizon.view import edge_elevation_deg

ROUNDING_DEG = 1e-9
HUNDREDTH_DEG = 0.01  # what the carried profile may differ from one measured at the antenna
TABLE_DEG = 0.005  # the table has two decimals


def points_of(azimuth_deg: list[float], elevation_deg: list[float], distance_m: list[float]) -> Points:
    blank = np.full(len(azimuth_deg), np.nan)
    return Points(
        azimuth_deg=np.array(azimuth_deg),
        elevation_deg=np.array(elevation_deg),
        underside_deg=blank,
        distance_m=np.array(distance_m),
        depth_m=blank,
    )


@pytest.mark.parametrize(("top_m", "excess_deg"), [(3.5, 4.22), (10.0, 3.54), (20.0, 2.23)])
def test_a_low_instrument_sees_tops_too_high(top_m: float, excess_deg: float) -> None:
    # Authority: plane geometry. Instrument 1.5 m below the antenna, object 20 m away: arctan(h / 20) less
    # arctan((h - 1.5) / 20) = 4.22, 3.54 and 2.23 degrees for tops 3.5, 10 and 20 m above the instrument.
    seen_deg = float(np.rad2deg(np.arctan(top_m / 20)))
    antenna = carried(points_of([30.0], [seen_deg], [np.hypot(20, top_m)]), (0.0, 0.0, -1.5))
    assert seen_deg - antenna.elevation_deg[0] == pytest.approx(excess_deg, abs=TABLE_DEG)
    assert antenna.azimuth_deg.tolist() == [30.0]


def test_a_sideways_instrument_sees_azimuths_turned() -> None:
    # Authority: plane geometry, arctan(2 / 20) = 5.71 degrees for 2 m sideways at 20 m.
    antenna = carried(points_of([0.0], [0.0], [20.0]), (2.0, 0.0, 0.0))
    assert antenna.azimuth_deg[0] == pytest.approx(5.71, abs=TABLE_DEG)
    assert antenna.distance_m[0] == pytest.approx(np.hypot(20, 2), abs=ROUNDING_DEG)


def test_points_without_a_distance_keep_their_angles() -> None:
    antenna = carried(points_of([10.0, 20.0], [5.0, 6.0], [np.nan, 15.0]), (2.0, -1.0, -0.5))
    assert (antenna.azimuth_deg[0], antenna.elevation_deg[0]) == (10.0, 5.0)
    assert np.isnan(antenna.distance_m[0])
    assert antenna.azimuth_deg[1] != 20.0


def sighted_from(place_m: tuple[float, float, float], corners_m: np.ndarray) -> np.ndarray:
    """Azimuth, elevation and horizontal distance of corners, shape (corner, 3), in azimuth order."""
    east, north, up = (corners_m - np.array(place_m)).T
    distance = np.hypot(east, north)
    rows = np.stack(
        [np.rad2deg(np.arctan2(east, north)) % 360, np.rad2deg(np.arctan2(up, distance)), distance], 1
    )
    return rows[np.argsort(rows[:, 0])]


def test_a_carried_profile_equals_one_measured_at_the_antenna(survey: Callable[..., Survey]) -> None:
    # Authority: the same corners in space, sighted from both places with vectors. The antenna stands 1.5 m
    # above the mark; the instrument stood 1.5 m lower and 2 m aside.
    corners_m = np.array([[12, 9, 8], [20, -3, 12], [15, -18, 6], [-4, -22, 9]]) * 1.0
    at_antenna = sighted_from((0.0, 0.0, 1.5), corners_m)
    aside = sighted_from((1.2, -1.6, 0.0), corners_m)
    read = survey(
        "azimuth_deg,elevation_deg,distance_m,obstacle\n"
        + "".join(f"{a:.9f},{e:.9f},{d:.9f},block\n" for a, e, d in aside.tolist()),
        instrument_east_m=1.2,
        instrument_north_m=-1.6,
        instrument_up_m=0.0,
    )
    (block,) = read.obstacles
    np.testing.assert_allclose(block.azimuth_deg, at_antenna[:, 0], atol=HUNDREDTH_DEG)
    np.testing.assert_allclose(block.elevation_deg, at_antenna[:, 1], atol=HUNDREDTH_DEG)
    # Along the edges as well: points of the same straight edge in space.
    for part in (0.2, 0.5, 0.9):
        between_m = corners_m[:-1] + part * np.diff(corners_m, axis=0)
        azimuth_deg, elevation_deg, _ = sighted_from((0.0, 0.0, 1.5), between_m).T
        np.testing.assert_allclose(edge_elevation_deg(block, azimuth_deg), elevation_deg, atol=HUNDREDTH_DEG)


def test_an_underside_is_carried_at_the_distance_of_its_edge(survey: Callable[..., Survey]) -> None:
    # By hand: a bridge 10 m above the instrument with its underside at 8 m, 20 m away; the antenna is 1.5 m
    # higher.
    tops, lower = np.rad2deg(np.arctan([10 / 20, 8 / 20]))
    rows = "".join(f"{azimuth},{tops:.9f},20,bridge,{lower:.9f}\n" for azimuth in (0, 40))
    header = "azimuth_deg,elevation_deg,distance_m,obstacle,underside_deg\n"
    (bridge,) = survey(header + rows, instrument_up_m=0.0).obstacles
    assert bridge.underside_deg is not None
    assert bridge.underside_deg[0] == pytest.approx(np.rad2deg(np.arctan(6.5 / 20)), abs=1e-6)
    assert bridge.elevation_deg[0] == pytest.approx(np.rad2deg(np.arctan(8.5 / 20)), abs=1e-6)


def test_a_wall_seen_from_behind_is_turned_round(survey: Callable[..., Survey]) -> None:
    # By hand: a wall along north = 10 m from east -10 to 10 m, 5 m high above antenna and instrument; the
    # antenna stands 20 m north of the instrument, so that it sees the wall in the south.
    end_deg = np.rad2deg(np.arctan(5 / np.hypot(10, 10)))
    rows = f"315,{end_deg:.9f},{np.hypot(10, 10):.9f},wall\n45,{end_deg:.9f},{np.hypot(10, 10):.9f},wall\n"
    (wall,) = survey(
        "azimuth_deg,elevation_deg,distance_m,obstacle\n" + rows, instrument_north_m=-20.0
    ).obstacles
    np.testing.assert_allclose(wall.azimuth_deg, [135, 225], atol=1e-6)
    assert edge_elevation_deg(wall, 180) == pytest.approx(np.rad2deg(np.arctan(5 / 10)), abs=1e-6)
