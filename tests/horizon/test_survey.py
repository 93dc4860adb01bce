from collections.abc import Callable

import numpy as np
import pytest

from siteassess.horizon.survey.bearings import NorthTurn
from siteassess.horizon.survey.read import Survey
from siteassess.horizon.view import edge_elevation_deg

ROUNDING = 1e-9
Read = Callable[..., Survey]


def test_the_general_skyline_is_linear_and_closed_through_north(survey: Read) -> None:
    (general,) = survey("azimuth_deg,elevation_deg\n10,10\n30,20\n200,4\n350,6\n", complete=True).obstacles
    assert general.name == "general skyline"
    assert general.azimuth_deg.tolist() == [10.0, 30.0, 200.0, 350.0, 370.0]
    assert edge_elevation_deg(general, [20, 0, 115]).tolist() == [15.0, 8.0, 12.0]


def test_one_row_alone_is_a_level_horizon(survey: Read) -> None:
    read = survey("azimuth_deg,elevation_deg\n123,7\n")
    assert read.surveyed_deg.tolist() == [[0.0, 360.0]]
    assert edge_elevation_deg(read.obstacles[0], [0, 123, 359]).tolist() == [7.0, 7.0, 7.0]


def test_a_level_horizon_with_a_distance_is_carried_in_height(survey: Read) -> None:
    # By hand: 3 m above the instrument at 10 m, the antenna 1.5 m higher.
    seen_deg = np.rad2deg(np.arctan(3 / 10))
    text = f"azimuth_deg,elevation_deg,distance_m\n0,{seen_deg:.12f},10\n"
    (level,) = survey(text, instrument_up_m=0.0, instrument_east_m=1.0).obstacles
    assert level.elevation_deg == pytest.approx(np.rad2deg(np.arctan(1.5 / 10)), abs=1e-6)


def test_wide_steps_are_gaps_unless_the_survey_is_complete(survey: Read) -> None:
    text = "azimuth_deg,elevation_deg\n0,5\n30,5\n60,5\n100,9\n130,9\n"
    read = survey(text)
    assert sorted(read.surveyed_deg.tolist()) == [[0.0, 30.0], [30.0, 60.0], [100.0, 130.0]]
    (general,) = read.obstacles
    seen = edge_elevation_deg(general, [0, 30, 60, 80, 100, 130, 200])
    np.testing.assert_array_equal(seen, [5, 5, 5, np.nan, 9, 9, np.nan])
    complete = survey(text, complete=True)
    assert complete.surveyed_deg.tolist()[0] == [0.0, 360.0]
    assert edge_elevation_deg(complete.obstacles[0], 80) == pytest.approx(7.0)


def test_rows_with_gaps_on_either_side_show_nothing(survey: Read) -> None:
    read = survey("azimuth_deg,elevation_deg\n0,5\n90,50\n180,5\n270,5\n")
    assert read.obstacles == ()
    assert read.surveyed_deg.shape == (0, 2)
    lonely = survey("azimuth_deg,elevation_deg\n0,5\n20,5\n90,50\n180,5\n200,5\n").obstacles[0]
    np.testing.assert_array_equal(edge_elevation_deg(lonely, [10, 90, 190]), [5, np.nan, 5])


def test_named_obstacles_alone_leave_the_circle_unsurveyed(survey: Read) -> None:
    text = "azimuth_deg,elevation_deg,obstacle\n350,5,hall\n12,5,hall\n"
    assert survey(text).surveyed_deg.shape == (0, 2)
    assert survey(text, complete=True).surveyed_deg.tolist() == [[0.0, 360.0]]


def test_a_named_obstacle_may_run_through_north(survey: Read) -> None:
    text = "azimuth_deg,elevation_deg,obstacle\n350,5,hall\n358,6,hall\n4,7,hall\n12,5,hall\n"
    (hall,) = survey(text).obstacles
    assert hall.azimuth_deg.tolist() == [350.0, 358.0, 364.0, 372.0]
    assert not hall.straight_in_space
    assert hall.source == "horizon.csv"


def test_rows_of_one_label_are_one_obstacle_wherever_they_stand(survey: Read) -> None:
    text = "azimuth_deg,elevation_deg,obstacle\n10,5,hall\n200,9,shed\n0,3,\n20,5,hall\n210,9,shed\n180,3,\n"
    read = survey(text, complete=True)
    assert [one.name for one in read.obstacles] == ["hall", "shed", "general skyline"]
    assert read.obstacles[0].azimuth_deg.tolist() == [10.0, 20.0]


def test_distances_may_be_horizontal_or_slant(survey: Read) -> None:
    # By hand: 10 m in plan at 60 degrees is 20 m along the line of sight.
    text = "azimuth_deg,elevation_deg,distance_m,slant_distance_m,obstacle\n10,60,10,,hall\n20,60,,20,hall\n"
    (hall,) = survey(text).obstacles
    assert hall.distance_m == pytest.approx([20.0, 20.0], abs=ROUNDING)
    assert hall.straight_in_space


def test_a_pole_has_two_sides(survey: Read) -> None:
    # By hand: 0.5 m at 2 m is 2 arctan(0.25 / 2) = 14.25 degrees.
    (pole,) = survey("azimuth_deg,elevation_deg,distance_m,obstacle,width_m\n0,40,2,mast,0.5\n").obstacles
    half_deg = np.rad2deg(np.arctan(0.125))
    assert pole.azimuth_deg == pytest.approx([360 - half_deg, 360 + half_deg], abs=ROUNDING)
    assert pole.elevation_deg.tolist() == pytest.approx([40.0, 40.0])
    assert pole.width_m == 0.5


def test_cover_and_leaf_of_one_row_hold_for_its_obstacle(survey: Read) -> None:
    header = "azimuth_deg,elevation_deg,obstacle,cover,leaf,depth_m\n"
    text = header + "10,20,tree,,,4\n20,25,tree,foliage,evergreen,6\n"
    (tree,) = survey(text).obstacles
    assert (tree.cover, tree.leaf) == ("foliage", "evergreen")
    assert tree.depth_m is not None
    assert tree.depth_m.tolist() == [4.0, 6.0]


def test_without_instrument_up_it_stands_at_the_phase_centre(survey: Read) -> None:
    text = "azimuth_deg,elevation_deg,distance_m,obstacle\n10,20,5,hall\n20,20,5,hall\n"
    (same,) = survey(text).obstacles
    assert same.azimuth_deg.tolist() == [10.0, 20.0]
    assert same.elevation_deg.tolist() == [20.0, 20.0]
    (lower,) = survey(text, instrument_up_m=0.0).obstacles
    assert lower.elevation_deg[0] < 10.0


def test_semicolons_and_decimal_commas_are_read(survey: Read) -> None:
    (general,) = survey("azimuth_deg;elevation_deg\n0,5;10,25\n180;10,25\n", complete=True).obstacles
    assert general.azimuth_deg.tolist() == [0.5, 180.0, 360.5]
    assert general.elevation_deg.tolist() == [10.25, 10.25, 10.25]


def test_a_stretch_that_nobody_looked_at_is_no_obstacle(survey: Read) -> None:
    # By hand: all of the circle but 350..20; the second stretch lies in a gap of the first kind already.
    text = (
        "azimuth_deg,elevation_deg,obstacle,cover\n0,5,,\n350,0,locked yard,unsurveyed\n20,0,locked yard,\n"
    )
    read = survey(text, complete=True)
    assert [one.name for one in read.obstacles] == ["general skyline"]
    np.testing.assert_allclose(read.surveyed_deg, [[20.0, 350.0]])
    assert (read.facts.rows, read.facts.rows_without_distance) == (1, 1)


def test_a_stretch_that_nobody_looked_at_turns_with_the_survey(survey: Read) -> None:
    text = "azimuth_deg,elevation_deg,obstacle,cover\n0,5,,\n100,0,yard,unsurveyed\n120,0,yard,\n"
    read = survey(text, complete=True, turn=NorthTurn(correction_deg=-10.0))
    np.testing.assert_allclose(read.surveyed_deg, [[0.0, 90.0], [110.0, 360.0]])
