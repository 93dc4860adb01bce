from collections.abc import Callable
from itertools import pairwise

import numpy as np
import pytest

from siteassess.horizon.survey.read import Survey
from siteassess.horizon.view import edge_distance_m, edge_elevation_deg

ROUNDING_DEG = 1e-6
Read = Callable[..., Survey]


def row_of(east_m: float, north_m: float, up_m: float, label: str) -> str:
    """A sighting from the mark, at the height of the antenna."""
    distance_m = np.hypot(east_m, north_m)
    elevation_deg = np.rad2deg(np.arctan2(up_m, distance_m))
    azimuth_deg = np.rad2deg(np.arctan2(east_m, north_m)) % 360
    return f"{azimuth_deg:.10f},{elevation_deg:.10f},{distance_m:.10f},{label}\n"


def ray_hits(
    azimuth_deg: float, corners_m: list[tuple[float, float, float]], antenna_m: tuple[float, float]
) -> list[tuple[float, float]]:
    """Elevation and slant distance where a vertical plane meets the edges, by 2 x 2 equations."""
    a = np.deg2rad(azimuth_deg)
    hits = []
    for one, two in pairwise(corners_m):
        start, side = np.array(one) - (*antenna_m, 0.0), np.array(two) - np.array(one)
        matrix = np.array([[np.sin(a), -side[0]], [np.cos(a), -side[1]]])
        if abs(np.linalg.det(matrix)) < 1e-12:
            continue
        reach, part = np.linalg.solve(matrix, start[:2])
        if reach > 0 and 0 <= part <= 1:
            up = start[2] + part * side[2]
            hits.append((float(np.rad2deg(np.arctan2(up, reach))), float(np.hypot(up, reach))))
    return hits


def turned(east_m: float, north_m: float, by_deg: float) -> tuple[float, float]:
    """A place turned clockwise about the mark."""
    sine, cosine = np.sin(np.deg2rad(by_deg)), np.cos(np.deg2rad(by_deg))
    return float(east_m * cosine + north_m * sine), float(north_m * cosine - east_m * sine)


@pytest.mark.parametrize("by_deg", [0.0, 35.0, 60.0, 200.0])
def test_an_edge_that_folds_back_shows_its_highest_part(by_deg: float, survey: Read) -> None:
    # Authority: rays against the edges in plan, solved by numpy. From the mark the four corners ascend in
    # azimuth; from the antenna, 14 m aside of the instrument, the near part covers the far one. Turned by 35
    # and 60 degrees, it runs through north.
    corners_m = [(-6.0, 20.0, 9.0), (-2.0, 30.0, 14.0), (3.0, 12.0, 4.0), (9.0, 13.0, 5.0)]
    corners_m = [(*turned(east, north, by_deg), up) for east, north, up in corners_m]
    antenna_m = turned(14.0, 0.0, by_deg)
    rows = "".join(row_of(*at, "yard") for at in corners_m)
    (yard,) = survey(
        "azimuth_deg,elevation_deg,distance_m,obstacle\n" + rows,
        instrument_east_m=-antenna_m[0],
        instrument_north_m=-antenna_m[1],
    ).obstacles
    assert (np.diff(yard.azimuth_deg) >= 0).all()
    assert yard.azimuth_deg[-1] - yard.azimuth_deg[0] < 90.0
    assert yard.straight_in_space
    covered = 0
    for azimuth_deg in np.arange(0.3, 360, 1.7):
        hits = ray_hits(azimuth_deg, corners_m, antenna_m)
        if hits:
            highest = max(hits)
            assert edge_elevation_deg(yard, azimuth_deg) == pytest.approx(highest[0], abs=ROUNDING_DEG)
            assert edge_distance_m(yard, azimuth_deg) == pytest.approx(highest[1], abs=ROUNDING_DEG)
            covered += len(hits) > 1
        else:
            assert np.isnan(edge_elevation_deg(yard, azimuth_deg))
    assert covered > 3  # the case is there


def test_a_general_skyline_that_folds_back_stays_closed(survey: Read) -> None:
    # Each row is carried by itself; where a near row passes a far one, the higher line counts.
    text = (
        "azimuth_deg,elevation_deg,distance_m\n0,20,4\n10,5,400\n20,5,400\n"
        "100,5,400\n190,5,400\n280,5,400\n350,5,400\n"
    )
    (general,) = survey(text, instrument_east_m=2.0, complete=True).obstacles
    assert (np.diff(general.azimuth_deg) >= 0).all()
    assert general.azimuth_deg[-1] - general.azimuth_deg[0] == pytest.approx(360.0)
    top_deg = np.rad2deg(np.arctan2(4 * np.tan(np.deg2rad(20)), np.hypot(4, 2)))
    assert edge_elevation_deg(general, np.rad2deg(np.arctan2(2, 4))) == pytest.approx(
        top_deg, abs=ROUNDING_DEG
    )
    assert edge_elevation_deg(general, 150) == pytest.approx(5.0, abs=0.05)


@pytest.mark.parametrize("seed", range(25))
def test_wild_offsets_leave_ascending_edges(seed: int, survey: Read) -> None:
    generator = np.random.default_rng(seed)
    azimuth_deg = np.sort(generator.uniform(0, 360, 8))
    rows = "".join(
        f"{azimuth:.6f},{elevation:.3f},{distance:.3f}\n"
        for azimuth, elevation, distance in zip(
            azimuth_deg, generator.uniform(0, 60, 8), generator.uniform(6.0, 40, 8), strict=True
        )
    )
    east_m, north_m = generator.uniform(-4, 4, 2).tolist()
    read = survey(
        "azimuth_deg,elevation_deg,distance_m\n" + rows,
        instrument_east_m=east_m,
        instrument_north_m=north_m,
        complete=bool(seed % 2),
    )
    for edge in read.obstacles:
        assert (np.diff(edge.azimuth_deg) >= 0).all()
        assert edge.azimuth_deg[-1] - edge.azimuth_deg[0] <= 360.0 + 1e-9
        assert np.isfinite(edge.elevation_deg).all()
