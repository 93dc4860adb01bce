"""How far readings without a distance may be off, and surveys that serve several antennas."""

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest

from siteassess import read_site
from siteassess.horizon.read import read_skyline
from siteassess.horizon.survey.carry import Points, carried
from siteassess.horizon.survey.parallax import parallax_bound_deg
from siteassess.horizon.survey.read import Survey

HUNDREDTH_DEG = 0.01
THOUSANDTH_DEG = 0.001


def test_bound_against_points_in_space() -> None:
    """Authority: the angle between the lines of sight from both places to points all round, 50 m away."""
    offset_m = (2.0, -1.0, -1.5)
    azimuth_deg, elevation_deg = (
        grid.ravel() for grid in np.meshgrid(np.arange(0, 360, 2.0), np.arange(-4, 90, 2.0))
    )
    blank = np.full(azimuth_deg.shape, np.nan)
    points = Points(
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        underside_deg=blank,
        distance_m=np.full(azimuth_deg.shape, 50.0),
        depth_m=blank,
    )
    seen = carried(points, offset_m)
    sight, other = (
        np.stack(
            [
                np.cos(np.deg2rad(each.elevation_deg)) * np.sin(np.deg2rad(each.azimuth_deg)),
                np.cos(np.deg2rad(each.elevation_deg)) * np.cos(np.deg2rad(each.azimuth_deg)),
                np.sin(np.deg2rad(each.elevation_deg)),
            ]
        )
        for each in (points, seen)
    )
    largest_deg = np.rad2deg(np.arccos(np.clip((sight * other).sum(axis=0), -1.0, 1.0))).max()
    bound_deg = parallax_bound_deg(offset_m)
    assert bound_deg is not None
    assert largest_deg <= bound_deg
    assert largest_deg == pytest.approx(bound_deg, abs=HUNDREDTH_DEG)


@pytest.mark.parametrize(
    ("offset_m", "bound_deg"), [((0.0, 0.0, 0.0), 0.0), ((30.0, 40.0, 0.0), None), ((300.0, 0.0, 0.0), None)]
)
def test_ends_of_the_bound(offset_m: tuple[float, float, float], bound_deg: float | None) -> None:
    assert parallax_bound_deg(offset_m) == bound_deg


def test_rows_without_a_distance_are_remarked_on(survey: Callable[..., Survey]) -> None:
    facts = survey(
        "azimuth_deg,elevation_deg,distance_m\n0,5,\n90,5,30\n180,5,\n270,5,30\n",
        instrument_east_m=2.0,
        instrument_up_m=0.0,
    ).facts
    assert (facts.rows, facts.rows_without_distance) == (4, 2)
    assert facts.offset_m == 2.5
    assert facts.remarks == (
        "The instrument stood 2.50 m from the antenna's phase centre. 2 of 4 rows carry no distance and keep "
        "their angles: for obstacles at least 50 m away they are off by at most 2.87°.",
    )


def test_an_instrument_too_far_away_has_no_bound(survey: Callable[..., Survey]) -> None:
    facts = survey("azimuth_deg,elevation_deg\n0,5\n", instrument_east_m=60.0).facts
    assert facts.parallax_bound_deg is None
    assert facts.remarks[0].endswith("for obstacles at least 50 m away they are off by any angle.")


@pytest.mark.parametrize(
    ("text", "block"),
    [
        ("azimuth_deg,elevation_deg\n0,5\n", {}),
        ("azimuth_deg,elevation_deg,distance_m\n0,5,20\n120,5,20\n240,5,20\n", {"instrument_east_m": 2.0}),
    ],
)
def test_nothing_is_remarked_where_nothing_is_off(
    survey: Callable[..., Survey], text: str, block: dict[str, float]
) -> None:
    facts = survey(text, **block).facts
    assert facts.remarks == ()
    assert facts.parallax_bound_deg == 0.0


def test_one_survey_serves_two_spots_and_two_masts(write_site: Callable[..., Path], tmp_path: Path) -> None:
    """Authority: the same corner in space, sighted from both antennas. Both site files name one survey."""
    corner_m = np.array([20.0, 30.0, 12.0])  # east, north, up of the instrument's foot
    eye_m = 1.6
    flat_m = float(np.hypot(corner_m[0], corner_m[1]))
    azimuth_deg = float(np.rad2deg(np.arctan2(corner_m[0], corner_m[1])))
    elevation_deg = float(np.rad2deg(np.arctan2(corner_m[2] - eye_m, flat_m)))
    (tmp_path / "common.csv").write_text(
        "azimuth_deg,elevation_deg,distance_m,obstacle\n"
        f"{azimuth_deg:.9f},{elevation_deg:.9f},{flat_m:.9f},hall\n100,10,30,hall\n",
        encoding="utf-8",
    )
    for folder, mast_m, mark_m in (("low", 1.5, (0.0, 0.0)), ("high", 4.0, (6.0, -3.0))):
        block = (
            f"complete = true\ninstrument_east_m = {-mark_m[0]}\ninstrument_north_m = {-mark_m[1]}\n"
            f"instrument_up_m = {eye_m}"
        )
        path = write_site(
            ("mast_height_m = 1.5", f"mast_height_m = {mast_m}"),
            ("complete = true", block),
            ('file = "horizon.csv"', 'file = "../common.csv"'),
            folder=folder,
        )
        hall = read_skyline(read_site(path)).obstacles[0]
        east_m, north_m, up_m = corner_m - np.array([*mark_m, mast_m])
        assert hall.azimuth_deg[0] == pytest.approx(
            np.rad2deg(np.arctan2(east_m, north_m)), abs=THOUSANDTH_DEG
        )
        assert hall.elevation_deg[0] == pytest.approx(
            np.rad2deg(np.arctan2(up_m, np.hypot(east_m, north_m))), abs=THOUSANDTH_DEG
        )
