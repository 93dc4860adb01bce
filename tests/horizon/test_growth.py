"""Trees after years of growth."""

from collections.abc import Callable

import numpy as np
import pytest

from siteassess.horizon.survey.read import Survey

Read = Callable[..., Survey]

HEADER = "azimuth_deg,elevation_deg,distance_m,slant_distance_m,obstacle,cover,depth_m,growth_m_per_year\n"
ROUNDING_DEG = 1e-9


def tops_deg(read: Survey) -> list[float]:
    return read.obstacles[0].elevation_deg.tolist()


@pytest.mark.parametrize("distance", ["20,", f",{20 / np.cos(np.deg2rad(10)):.12f}"])
def test_a_top_rises_by_its_growth(survey: Read, distance: str) -> None:
    # Authority: plane geometry. A top 20 m away at 10 degrees stands 20 tan(10) high; 15 years at 0.4 m later
    # it is 6 m higher and stands at arctan(tan(10) + 6 / 20) = 25.47 degrees.
    rows = f"10,10,{distance},oak,foliage,6,0.4\n30,10,{distance},oak,foliage,6,0\n"
    later = survey(HEADER + rows, years=15.0)
    assert tops_deg(later)[0] == pytest.approx(25.47, abs=0.005)
    assert tops_deg(later)[1] == pytest.approx(10.0, abs=1e-6)
    assert tops_deg(survey(HEADER + rows)) == pytest.approx([10.0, 10.0], abs=1e-6)


def test_its_distance_and_depth_stay(survey: Read) -> None:
    rows = "10,10,20,,oak,foliage,6,0.4\n30,12,25,,oak,foliage,7,0.4\n"
    now, later = (survey(HEADER + rows, years=years).obstacles[0] for years in (0.0, 15.0))
    for one in (now, later):
        assert one.distance_m is not None and one.depth_m is not None
    horizontal_m = [one.distance_m * np.cos(np.deg2rad(one.elevation_deg)) for one in (now, later)]
    np.testing.assert_allclose(horizontal_m[0], horizontal_m[1], atol=1e-9)
    np.testing.assert_allclose(now.azimuth_deg, later.azimuth_deg, atol=ROUNDING_DEG)
    assert later.depth_m.tolist() == [6.0, 7.0]


def test_nothing_else_grows(survey: Read) -> None:
    rows = (
        "0,5,,,,,,\n180,5,,,,,,\n10,10,20,,hall,solid,,\n30,10,20,,hall,solid,,\n60,9,,,far wood,foliage,6,\n"
    )
    rows += "70,9,,,far wood,foliage,6,\n"
    now, later = survey(HEADER + rows), survey(HEADER + rows, years=15.0)
    for one, other in zip(now.obstacles, later.obstacles, strict=True):
        np.testing.assert_array_equal(one.elevation_deg, other.elevation_deg)


def test_a_tree_seen_from_elsewhere_grows_at_its_own_place(survey: Read) -> None:
    """Authority: the grown top in space, sighted from 1.5 m above the instrument and 2 m aside."""
    rows = "0,10,20,,oak,foliage,6,0.4\n30,10,20,,oak,foliage,6,0.4\n"
    place = {"instrument_east_m": 2.0, "instrument_up_m": 0.0}
    later = survey(HEADER + rows, years=15.0, **place)
    up_m = 20 * np.tan(np.deg2rad(10)) + 6.0 - 1.5
    assert tops_deg(later)[0] == pytest.approx(np.rad2deg(np.arctan2(up_m, np.hypot(2.0, 20.0))), abs=1e-9)


def test_growth_of_the_site_file_is_for_rows_that_say_none(survey: Read, tmp_path) -> None:
    from siteassess.horizon.survey.read import read_survey
    from siteassess.site_file.model import HorizonSource, Mount

    (tmp_path / "trees.csv").write_text(
        HEADER + "10,10,20,,oak,foliage,6,\n30,10,20,,oak,foliage,6,0.4\n", encoding="utf-8"
    )
    source = HorizonSource(source="survey", file="trees.csv")
    later = read_survey(
        tmp_path / "trees.csv", source, Mount(mast_height_m=1.5), years=10.0, growth_m_per_year=0.2
    )
    rises_m = 20 * (np.tan(np.deg2rad(tops_deg(later))) - np.tan(np.deg2rad(10)))
    assert rises_m.tolist() == pytest.approx([2.0, 4.0])
