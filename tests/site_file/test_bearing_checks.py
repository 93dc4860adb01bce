"""Every message about the bearings of a survey, word for word."""

from collections.abc import Callable
from pathlib import Path

import pytest

from siteassess.errors import InputError
from siteassess.site_file.read import read_site

WriteSite = Callable[..., Path]

GRID = (
    "latitude_deg = 48.0\nlongitude_deg = 11.0",
    'crs = "EPSG:32632"\neasting_m = 649000\nnorthing_m = 5318000',
)
GEOGRAPHIC = ("latitude_deg = 48.0", 'crs = "EPSG:4258"\nlatitude_deg = 48.0')
ELLIPSOIDAL = ("height_m = 600.0", 'height_m = 600.0\nheight_system = "ellipsoidal"')
ONE_WAY = (
    "it must be given by landmark_bearing_deg, by landmark_latitude_deg and landmark_longitude_deg, "
    "or by landmark_easting_m and landmark_northing_m"
)
YEARS = (
    'with bearings = "magnetic-north" it must lie from 2025-01-01 to 2030-01-01, the years of the World '
    "Magnetic Model 2025"
)

CASES = {
    "compass without a day": (
        ['bearings = "magnetic-north"'],
        [],
        'horizon[1].surveyed_on is missing; bearings = "magnetic-north" needs the day of the survey',
    ),
    "compass before the model": (
        ['bearings = "magnetic-north"', "surveyed_on = 2024-12-31"],
        [],
        f"horizon[1].surveyed_on is 2024-12-31; {YEARS}",
    ),
    "compass after the model": (
        ['bearings = "magnetic-north"', "surveyed_on = 2030-01-02"],
        [],
        f"horizon[1].surveyed_on is 2030-01-02; {YEARS}",
    ),
    "grid without a system": (
        ['bearings = "grid-north"'],
        [],
        'horizon[1].bearings is "grid-north"; it needs site.crs, the system whose grid it is',
    ),
    "grid of a graticule": (
        ['bearings = "grid-north"'],
        [GEOGRAPHIC, ELLIPSOIDAL],
        'horizon[1].bearings is "grid-north"; EPSG:4258 counts latitude and longitude and has no grid',
    ),
    "unknown north": (
        ['bearings = "compass"'],
        [],
        'horizon[1].bearings is "compass"; it must be "true-north", "magnetic-north" or "grid-north"',
    ),
    "landmark without a reading": (
        ["landmark_bearing_deg = 10.0"],
        [],
        "horizon[1].landmark_reading_deg is missing; it goes with landmark_bearing_deg",
    ),
    "name of a landmark alone": (
        ['landmark = "spire"'],
        [],
        "horizon[1].landmark_reading_deg is missing; it goes with landmark",
    ),
    "reading of a landmark alone": (
        ["landmark_reading_deg = 10.0"],
        [],
        f"horizon[1].landmark has no direction; {ONE_WAY}",
    ),
    "landmark given twice": (
        [
            "landmark_reading_deg = 10.0",
            "landmark_bearing_deg = 10.0",
            "landmark_latitude_deg = 48.1",
            "landmark_longitude_deg = 11.0",
        ],
        [],
        "horizon[1].landmark is given by landmark_bearing_deg, landmark_latitude_deg and "
        f"landmark_longitude_deg; {ONE_WAY}",
    ),
    "half a landmark": (
        ["landmark_reading_deg = 10.0", "landmark_latitude_deg = 48.1"],
        [],
        "horizon[1].landmark_longitude_deg is missing; it goes with landmark_latitude_deg",
    ),
    "landmark on a grid that the site does not use": (
        ["landmark_reading_deg = 10.0", "landmark_easting_m = 649000", "landmark_northing_m = 5319000"],
        [],
        "horizon[1].landmark_easting_m is 649000.0; it needs the site's own position by crs, easting_m and "
        "northing_m",
    ),
    "landmark outside the grid": (
        ["landmark_reading_deg = 10.0", "landmark_easting_m = 649000", "landmark_northing_m = -10000"],
        [GRID, ELLIPSOIDAL],
        "horizon[1].landmark_easting_m and landmark_northing_m are 649000.0 and -10000.0; the area of "
        "EPSG:32632 is latitude 0 to 84 and longitude 6 to 12",
    ),
    "landmark at the instrument": (
        ["landmark_reading_deg = 10.0", "landmark_latitude_deg = 48.0", "landmark_longitude_deg = 11.0"],
        [],
        "horizon[1].landmark lies 0 m from the instrument; it must lie from 10 to 200000 m away; check both "
        "positions",
    ),
    "landmark with latitude and longitude swapped": (
        ["landmark_reading_deg = 10.0", "landmark_latitude_deg = 11.0", "landmark_longitude_deg = 48.0"],
        [],
        "horizon[1].landmark lies 5355836 m from the instrument; it must lie from 10 to 200000 m away; check "
        "both positions",
    ),
    "reading out of range": (
        ["landmark_reading_deg = 361.0", "landmark_bearing_deg = 10.0"],
        [],
        "horizon[1].landmark_reading_deg is 361.0; it must lie from 0 to 360",
    ),
    "bearing out of range": (
        ["landmark_reading_deg = 1.0", "landmark_bearing_deg = -10.0"],
        [],
        "horizon[1].landmark_bearing_deg is -10.0; it must lie from 0 to 360",
    ),
    "latitude out of range": (
        ["landmark_reading_deg = 1.0", "landmark_latitude_deg = 91.0", "landmark_longitude_deg = 11.0"],
        [],
        "horizon[1].landmark_latitude_deg is 91.0; it must lie from -90 to 90",
    ),
    "instrument far away": (
        ["instrument_east_m = 1001.0"],
        [],
        "horizon[1].instrument_east_m is 1001.0; it must lie from -1000 to 1000",
    ),
}


@pytest.mark.parametrize("case", CASES)
def test_one_mistake_has_one_message(case: str, write_site: WriteSite) -> None:
    lines, replacements, message = CASES[case]
    path = write_site(("complete = true", "\n".join(["complete = true", *lines])), *replacements)
    with pytest.raises(InputError) as caught:
        read_site(path)
    assert str(caught.value) == f"site.toml: {message}"


@pytest.mark.parametrize("day", ["2025-01-01", "2029-12-31", "2030-01-01"])
def test_the_years_of_the_model_hold_at_their_ends(day: str, write_site: WriteSite) -> None:
    read_site(
        write_site(("complete = true", f'complete = true\nbearings = "magnetic-north"\nsurveyed_on = {day}'))
    )


def test_a_landmark_makes_the_day_needless(write_site: WriteSite) -> None:
    lines = 'bearings = "magnetic-north"\nlandmark_reading_deg = 1.0\nlandmark_bearing_deg = 4.0'
    read_site(write_site(("complete = true", f"complete = true\n{lines}")))


def test_a_wrong_landmark_does_not_hide_the_mistakes_of_its_survey(write_site: WriteSite) -> None:
    from siteassess.assessment import assess_file

    lines = "landmark_reading_deg = 1.0\ninstrument_east_m = 15.0"
    horizon = "azimuth_deg,elevation_deg,distance_m\n0,5,10\n90,95,10\n180,5,10\n270,5,10\n"
    path = write_site(("complete = true", f"complete = true\n{lines}"), horizon=horizon)
    with pytest.raises(InputError) as caught:
        assess_file(path)
    assert str(caught.value).splitlines() == [
        f"site.toml: horizon[1].landmark has no direction; {ONE_WAY}",
        "horizon.csv: line 3, elevation_deg is 95; it must lie from -5 to 90",
    ]
