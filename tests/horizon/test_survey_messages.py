"""Every message about a survey file, word for word."""

from collections.abc import Callable

import pytest

from siteassess.errors import InputError
from siteassess.horizon.survey.read import Survey

Read = Callable[..., Survey]

HEADER = (
    "azimuth_deg,elevation_deg,distance_m,slant_distance_m,"
    "obstacle,cover,leaf,depth_m,underside_deg,width_m\n"
)
CHECK = "check its distance and where the instrument stood"

CASES = {
    "azimuth above 360": (
        ["400,5"],
        ["line 2, azimuth_deg is 400; it must lie from 0 to 360"],
    ),
    "elevation": (
        ["0,95", "10,-5.5"],
        [
            "line 2, elevation_deg is 95; it must lie from -5 to 90",
            "line 3, elevation_deg is -5.5; it must lie from -5 to 90",
        ],
    ),
    "a wrong elevation takes no distance away": (
        ["10,95,20,,hall", "20,6,20,,hall", "30,6,20,,hall"],
        ["line 2, elevation_deg is 95; it must lie from -5 to 90"],
    ),
    "underside out of range": (
        ["0,5,,,a,,,,-91", "10,5,,,a,,,,0"],
        ["line 2, underside_deg is -91; it must lie from -90 to 90"],
    ),
    "not a number": (["0,steep"], ['line 2, elevation_deg is "steep"; it must be a number']),
    "nan": (["nan,5"], ['line 2, azimuth_deg is "nan"; it must be a number']),
    "blank": ([",5"], ["line 2, azimuth_deg is blank; it must be a number"]),
    "not ascending": (
        ["0,5", "20,5", "10,5"],
        [
            "line 4, azimuth_deg is 10; azimuths of rows without an obstacle must ascend, "
            "and the one before is 20",
        ],
    ),
    "three rows at one azimuth": (
        ["10,5", "10,6", "10,7"],
        ["line 4, azimuth_deg is 10; at most two rows may stand at one azimuth"],
    ),
    "three rows at north": (
        ["0,5", "180,5", "360,6", "360,7"],
        ["line 5, azimuth_deg is 360; at most two rows may stand at one azimuth"],
    ),
    "three rows of an obstacle at one azimuth": (
        ["10,5,,,hall", "20,6,,,hall", "20,7,,,hall", "20,8,,,hall"],
        ["line 5, azimuth_deg is 20; at most two rows may stand at one azimuth"],
    ),
    "an obstacle passes north twice": (
        ["350,5,,,hall", "10,5,,,hall", "5,5,,,hall"],
        ['line 4, azimuth_deg is 5; the azimuths of obstacle "hall" must ascend and may pass north once'],
    ),
    "an obstacle wider than the circle": (
        ["20,5,,,hall", "10,5,,,hall", "30,5,,,hall"],
        [
            'line 4, azimuth_deg is 30; obstacle "hall" must ascend, pass north at most once '
            "and span at most 360 degrees"
        ],
    ),
    "an obstacle without width": (
        ["20,5,,,hall", "20,9,,,hall"],
        [
            'obstacle "hall" has all its rows at one azimuth; it needs two azimuths, '
            "or one row with width_m and a distance"
        ],
    ),
    "straight edges of half a circle": (
        ["0,5,9,,hall", "180,5,9,,hall"],
        ["line 3, azimuth_deg is 180; neighbouring rows with distances must be less than 180 degrees apart"],
    ),
    "unknown words": (
        ["0,5,,,a,wood,bare,3", "10,5,,,a,solit"],
        [
            'line 2, cover is "wood"; it must be solid, foliage or unsurveyed',
            'line 2, leaf is "bare"; it must be in-leaf, leafless or evergreen',
            'line 3, cover is "solit"; did you mean solid?',
        ],
    ),
    "foliage without depth": (
        ["0,5,,,a,foliage,,3", "10,5,,,a,foliage"],
        ["line 3, depth_m is blank; foliage needs the length of the path through its leaves"],
    ),
    "leaves on what is solid": (
        ["0,5,,,a,solid,in-leaf,3", "10,5,,,a"],
        [
            'line 2, leaf is "in-leaf"; it may stand only where cover is foliage',
            "line 2, depth_m is 3; it may stand only where cover is foliage",
        ],
    ),
    "an edge where nobody looked": (
        ["0,0,,,yard,unsurveyed,in-leaf", "10,0,,,yard,,,3", "20,0,,,yard,,,,,2"],
        [
            'line 2, leaf is "in-leaf"; it may stand only where cover is foliage',
            "line 3, depth_m is 3; it may stand only where cover is foliage",
            "line 4, width_m is 2; it may not stand where cover is unsurveyed",
        ],
    ),
    "a distance where nobody looked": (
        ["0,0,9,,yard,unsurveyed", "10,0,,9,yard"],
        [
            "line 2, distance_m is 9; it may not stand where cover is unsurveyed",
            "line 3, slant_distance_m is 9; it may not stand where cover is unsurveyed",
        ],
    ),
    "an underside where nobody looked": (
        ["0,0,,,yard,unsurveyed,,,-5", "10,0,,,yard"],
        ["line 2, underside_deg is -5; it may not stand where cover is unsurveyed"],
    ),
    "one row where nobody looked": (
        ["0,0,,,yard,unsurveyed"],
        ['line 2 is the only row of obstacle "yard"; a stretch that nobody looked at needs a second azimuth'],
    ),
    "unlabelled rows where nobody looked": (
        ["0,0,,,,unsurveyed", "10,0"],
        ['line 2, cover is "unsurveyed"; a row that gives it must name its obstacle'],
    ),
    "two covers": (
        ["0,5,,,a,foliage,,3", "10,5,,,a,solid,,3"],
        ['line 3, cover is "solid"; obstacle "a" must have one cover, and line 2 says "foliage"'],
    ),
    "two leaves": (
        ["0,5,,,a,foliage,in-leaf,3", "10,5,,,a,,leafless,3"],
        ['line 3, leaf is "leafless"; obstacle "a" must have one leaf, and line 2 says "in-leaf"'],
    ),
    "underside above the top": (
        ["0,5,,,a,,,,6", "10,5,,,a,,,,5"],
        ["line 2, underside_deg is 6; it must not be above elevation_deg, which is 5"],
    ),
    "underside on some rows": (
        ["0,5,,,a,,,,2", "10,5,,,a"],
        ['line 3, underside_deg is blank; all rows of obstacle "a" must carry an underside, or none'],
    ),
    "distance on some rows": (
        ["0,5,9,,a", "10,5,,,a"],
        ['line 3, distance_m is blank; all rows of obstacle "a" must carry a distance, or none'],
    ),
    "two distances": (
        ["0,5,9,9,a", "10,5,9,,a"],
        ["line 2 gives distance_m and slant_distance_m; it must give one of them"],
    ),
    "no distance, width or depth at all": (
        ["0,5,0,,a,foliage,,0", "10,5,,-1,a,,,1", "10,5,3,,b,,,,,-2"],
        [
            "line 2, distance_m is 0; it must be above 0",
            "line 2, depth_m is 0; it must be above 0",
            "line 3, slant_distance_m is -1; it must be above 0",
            "line 4, width_m is -2; it must be above 0",
        ],
    ),
    "a horizontal distance overhead": (
        ["0,90,9,,a", "10,5,9,,a"],
        ["line 2, elevation_deg is 90; with a horizontal distance it must be below 90"],
    ),
    "width without distance": (
        ["0,5,,,a,,,,,1"],
        ["line 2, width_m is 1; it needs a distance in the same row"],
    ),
    "width on an obstacle of two rows": (
        ["0,5,9,,a,,,,,1", "10,5,9,,a"],
        ["line 2, width_m is 1; it may stand only on an obstacle of one row"],
    ),
    "one row without width": (
        ["0,5,9,,a"],
        ['line 2 is the only row of obstacle "a"; it needs width_m and a distance, or a second azimuth'],
    ),
    "cells that need a label": (
        ["0,5,,,,foliage,,,,", "10,5,,,,,evergreen", "20,5,,,,,,3,2,1"],
        [
            'line 2, cover is "foliage"; a row that gives it must name its obstacle',
            'line 3, leaf is "evergreen"; a row that gives it must name its obstacle',
            "line 4, underside_deg is 2; a row that gives it must name its obstacle",
            "line 4, width_m is 1; a row that gives it must name its obstacle",
            "line 4, depth_m is 3; a row that gives it must name its obstacle",
        ],
    ),
    "the name of the general skyline": (
        ["0,5,,,general skyline", "10,5,,,general skyline"],
        [
            'line 2, obstacle is "general skyline"; rows of the general skyline carry no label',
            'line 3, obstacle is "general skyline"; rows of the general skyline carry no label',
        ],
    ),
    "an antenna in a pole": (
        ["0,5,3,,tank,,,,,6"],
        ["line 2, width_m is 6; the antenna would stand in the obstacle"],
    ),
    "overhead": (
        ["0,90,,4,a", "10,80,,4,a"],
        [f"line 2 lies on the axis of the antenna; {CHECK}"],
    ),
}

GROWTH_CASES = {
    "growth out of range": (
        "10,5,20,a,foliage,3,6\n20,5,20,a,foliage,3,-1",
        [
            "line 2, growth_m_per_year is 6; it must lie from 0 to 5",
            "line 3, growth_m_per_year is -1; it must lie from 0 to 5",
        ],
    ),
    "growth without a distance": (
        "10,5,,a,foliage,3,0.3\n20,5,,a,foliage,3,",
        ["line 2, growth_m_per_year is 0.3; it needs a distance in the same row"],
    ),
    "growth of what is solid": (
        "10,5,20,a,solid,,0.3\n20,5,20,a,,,",
        ["line 2, growth_m_per_year is 0.3; it may stand only where cover is foliage"],
    ),
    "growth of the general skyline": (
        "10,5,20,,,,0.3\n20,5,20,,,,",
        ["line 2, growth_m_per_year is 0.3; a row that gives it must name its obstacle"],
    ),
    "growth is no number": (
        "10,5,20,a,foliage,3,fast\n20,5,20,a,foliage,3,",
        ['line 2, growth_m_per_year is "fast"; it must be a number'],
    ),
}


@pytest.mark.parametrize(("rows", "expected"), GROWTH_CASES.values(), ids=GROWTH_CASES.keys())
def test_message_about_growth(rows: str, expected: list[str], survey: Read) -> None:
    header = "azimuth_deg,elevation_deg,distance_m,obstacle,cover,depth_m,growth_m_per_year\n"
    with pytest.raises(InputError) as refusal:
        survey(header + rows + "\n")
    assert str(refusal.value).splitlines() == [f"horizon.csv: {message}" for message in expected]


@pytest.mark.parametrize(("rows", "expected"), CASES.values(), ids=CASES.keys())
def test_message(rows: list[str], expected: list[str], survey: Read) -> None:
    with pytest.raises(InputError) as refusal:
        survey(HEADER + "\n".join(rows) + "\n")
    assert str(refusal.value).splitlines() == [f"horizon.csv: {message}" for message in expected]


def test_an_empty_horizon_is_refused(survey: Read) -> None:
    with pytest.raises(InputError) as refusal:
        survey("azimuth_deg,elevation_deg\n")
    assert str(refusal.value) == "horizon.csv: has no rows; at least one must follow the names of the columns"


@pytest.mark.parametrize(
    ("rows", "place", "expected"),
    [
        (
            ["90,5,3,,a", "120,5,3,,a"],
            {"instrument_east_m": -3.0},
            f"horizon.csv: line 2 lies on the axis of the antenna; {CHECK}",
        ),
        (
            ["80,5,3,,a", "100,5,3,,a"],
            {
                "instrument_east_m": -2.954423259036624
            },  # 3 sin 80 degrees: the antenna stands in the wall's line
            f'horizon.csv: obstacle "a" runs through the axis of the antenna; {CHECK}',
        ),
        (
            # A hut seen from the south: its two far corners and the near one; the antenna stands within.
            ["350,5,10.2,,hut", "0,5,8,,hut", "10,5,10.2,,hut"],
            {"instrument_north_m": -9.8},
            f'horizon.csv: obstacle "hut" closes round the antenna; {CHECK}',
        ),
        (
            ["0,5,2", "120,5,30", "240,5,30"],
            {"instrument_north_m": -3.0},
            "horizon.csv: line 2 lies between the instrument and the antenna; "
            f"give it an obstacle label, or {CHECK}",
        ),
    ],
)
def test_an_antenna_where_an_obstacle_stands_is_refused(
    rows: list[str], place: dict[str, float], expected: str, survey: Read
) -> None:
    with pytest.raises(InputError) as refusal:
        survey(HEADER + "\n".join(rows) + "\n", complete=True, **place)
    assert str(refusal.value) == expected


def test_a_hopeless_file_is_not_listed_in_full(survey: Read) -> None:
    with pytest.raises(InputError) as refusal:
        survey("azimuth_deg,elevation_deg\n" + "0,99\n" * 70)
    lines = str(refusal.value).splitlines()
    assert len(lines) == 51
    assert lines[-1].startswith("horizon.csv: has ")
    assert lines[-1].endswith(" more mistakes; the first are listed")
