"""From magnetic north, grid north and landmarks to true north."""

import math
import subprocess
import sys
from collections.abc import Callable
from datetime import date
from pathlib import Path

import numpy as np
import pymap3d
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st
from pyproj import CRS, Proj

from siteassess import read_site
from siteassess.errors import InputError
from siteassess.horizon.read import read_skyline
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.survey.bearings import NorthTurn, decimal_year, declination, north_turn
from siteassess.horizon.survey.read import Survey
from siteassess.horizon.view import outline_elevation_deg
from siteassess.site_file.model import Position
from siteassess.site_file.reference_system import grid_convergence_deg, known_system

HUNDREDTH_DEG = 0.01
THOUSANDTH_DEG = 0.001
MILLIONTH_DEG = 1e-6
ROUNDING_DEG = 1e-9
# Transverse Mercator by series, and its datum moved to WGS 84 for ours alone.
SERIES_DEG = 0.003

HALL = (
    "azimuth_deg,elevation_deg,distance_m,obstacle\n0,4,,\n90,3,,\n180,6,,\n270,5,,\n"
    "340,12,20,hall\n20,15,25,hall\n"
)

WriteSite = Callable[..., Path]


def at(latitude_deg: float, longitude_deg: float, height_m: float = 0.0) -> Position:
    return Position(latitude_deg=latitude_deg, longitude_deg=longitude_deg, height_m=height_m)


@pytest.mark.parametrize(
    ("latitude_deg", "longitude_deg", "declination_deg"),
    [(80.0, 0.0, 1.28), (0.0, 120.0, -0.16), (-80.0, 240.0, 68.78)],
)
def test_declination_against_the_report_of_the_world_magnetic_model(
    latitude_deg: float, longitude_deg: float, declination_deg: float
) -> None:
    # Authority: test values of the WMM2025 report, 2025.0 at 0 km (its table from memory).
    found = declination(at(latitude_deg, longitude_deg), 2025.0)
    assert found.declination_deg == pytest.approx(declination_deg, abs=HUNDREDTH_DEG)


def test_declination_in_the_alps() -> None:
    # Authority: WMM2025 at 47 N, 8 E, 0.5 km, 2026.9: 3.520 degrees (computed from its coefficients).
    found = declination(at(47.0, 8.0, 500.0), 2026.9)
    assert found.declination_deg == pytest.approx(3.520, abs=THOUSANDTH_DEG)


def test_uncertainty_of_the_declination() -> None:
    # Authority: WMM2025 report, sqrt(0.26^2 + (5417 / H)^2): 0.29 degrees at 40 000 nT, 0.375 at 20 000.
    strong, weak = declination(at(0.0, 120.0), 2025.0), declination(at(-80.0, 240.0), 2025.0)
    assert strong.horizontal_nt == pytest.approx(40_000, abs=400)
    assert strong.uncertainty_deg == pytest.approx(0.29, abs=0.005)
    assert weak.uncertainty_deg == pytest.approx(math.hypot(0.26, 5417 / 16_898), abs=THOUSANDTH_DEG)


def test_poles_and_the_date_line_have_a_declination() -> None:
    for place in (at(90.0, 0.0), at(-90.0, 0.0), at(10.0, 180.0), at(10.0, -180.0)):
        assert math.isfinite(declination(place, 2027.5).declination_deg)
    east, west = (declination(at(10.0, degrees), 2027.5).declination_deg for degrees in (180.0, -180.0))
    assert east == pytest.approx(west, abs=MILLIONTH_DEG)


@pytest.mark.parametrize(
    ("day", "year"),
    [
        (date(2025, 1, 1), 2025.0),
        (date(2026, 7, 2), 2026 + 182 / 365),
        (date(2028, 12, 31), 2028 + 365 / 366),
    ],
)
def test_decimal_year(day: date, year: float) -> None:
    assert decimal_year(day) == pytest.approx(year, abs=1e-12)


def test_convergence_of_a_transverse_mercator_grid() -> None:
    # Authority: arctan(tan(3 deg) sin(50 deg)) = 2.2990 degrees (textbooks), east of the central meridian.
    found_deg = grid_convergence_deg(known_system("EPSG:32631", "roof.toml"), 50.0, 6.0, "roof.toml")
    assert found_deg == pytest.approx(2.2990, abs=THOUSANDTH_DEG)


@pytest.mark.parametrize(
    ("code", "latitude_deg", "longitude_deg"),
    [
        ("EPSG:32631", 50.0, 0.5),  # west of the central meridian
        ("EPSG:32733", -30.0, 17.0),  # southern hemisphere
        ("EPSG:27700+5701", 57.0, -4.0),  # with heights
        ("EPSG:2229", 34.0, -119.0),  # in feet
        ("EPSG:2053", -26.0, 28.0),  # westing and southing
        ("EPSG:5513", 50.0, 15.0),  # southing and westing, oblique
        ("EPSG:3031", -80.0, 30.0),  # round the pole
        ("EPSG:32661", 80.0, 30.0),
    ],
)
def test_convergence_against_pyproj(code: str, latitude_deg: float, longitude_deg: float) -> None:
    # Authority: pyproj, Proj.get_factors.
    system = CRS.from_user_input(code)
    system = system.sub_crs_list[0] if system.is_compound else system
    expected_deg = Proj(system).get_factors(longitude_deg, latitude_deg).meridian_convergence
    found_deg = grid_convergence_deg(
        known_system(code, "roof.toml"), latitude_deg, longitude_deg, "roof.toml"
    )
    assert found_deg == pytest.approx(expected_deg, abs=SERIES_DEG)


def block(*lines: str) -> tuple[str, str]:
    return ("complete = true", "\n".join(["complete = true", *lines]))


def turn(path: Path) -> NorthTurn:
    return north_turn(read_site(path), 0)


def test_a_compass_survey_is_turned_by_the_declination(write_site: WriteSite) -> None:
    path = write_site(block('bearings = "magnetic-north"', "surveyed_on = 2026-11-25"), horizon=HALL)
    skyline = read_skyline(read_site(path))
    expected = declination(at(48.0, 11.0, 600.0), decimal_year(date(2026, 11, 25)))
    (facts,) = skyline.surveys
    assert facts.bearings == "magnetic-north"
    assert facts.correction_deg == expected.declination_deg
    assert facts.uncertainty_deg == expected.uncertainty_deg
    assert facts.remarks == (
        "Azimuths from magnetic north were turned by the declination, +4.24° ± 0.36° (one standard "
        "deviation), by the World Magnetic Model 2025 on 2026-11-25. Iron near the compass is not in that "
        "figure.",
    )
    assert skyline.obstacles[1].azimuth_deg[0] == pytest.approx(340.0 + expected.declination_deg)


GRID = (
    "latitude_deg = 48.0\nlongitude_deg = 11.0",
    'crs = "EPSG:32632"\neasting_m = 649000\nnorthing_m = 5318000',
)
ELLIPSOIDAL = ("height_m = 600.0", 'height_m = 600.0\nheight_system = "ellipsoidal"')


def test_a_grid_survey_is_turned_by_the_convergence(write_site: WriteSite) -> None:
    # Authority: arctan(tan(dlon) sin(lat)) of the transverse Mercator, 2 degrees off the central meridian.
    path = write_site(GRID, ELLIPSOIDAL, block('bearings = "grid-north"'), horizon=HALL)
    found = turn(path)
    expected_deg = math.degrees(math.atan(math.tan(math.radians(2.0)) * math.sin(math.radians(48.0))))
    assert found.correction_deg == pytest.approx(expected_deg, abs=HUNDREDTH_DEG)
    assert found.uncertainty_deg == 0.0
    assert found.remarks == (
        "Azimuths from grid north were turned by the convergence of EPSG:32632, +1.48°.",
    )


def test_a_landmark_of_known_bearing_turns_the_survey(write_site: WriteSite) -> None:
    lines = ('landmark = "spire"', "landmark_reading_deg = 350.0", "landmark_bearing_deg = 12.5")
    found = turn(write_site(block(*lines), horizon=HALL))
    assert found.correction_deg == pytest.approx(22.5, abs=ROUNDING_DEG)
    assert found.remarks == (
        "Azimuths were turned by +22.50°: the landmark “spire” read 350.00° and stands at 12.50°.",
    )


def test_a_landmark_goes_before_the_compass_and_tells_the_difference(write_site: WriteSite) -> None:
    lines = ("landmark_reading_deg = 100.0", "landmark_bearing_deg = 110.0")
    compass = ('bearings = "magnetic-north"', "surveyed_on = 2026-11-25")
    found = turn(write_site(block(*lines, *compass), horizon=HALL))
    assert found.correction_deg == pytest.approx(10.0, abs=ROUNDING_DEG)
    assert found.remarks[1] == (
        "That differs by +5.76° from what magnetic north alone would give: iron nearby, or a circle that was "
        "not set."
    )


@pytest.mark.parametrize("instrument_m", [(0.0, 0.0), (30.0, -40.0)])
def test_a_landmark_by_coordinates_is_seen_from_the_instrument(
    write_site: WriteSite, instrument_m: tuple[float, float]
) -> None:
    # Authority: pymap3d, the landmark in the local frame of the mark; over 2 km a geodesic and a vertical
    # plane agree to a millionth of a degree.
    east_m, north_m, _ = pymap3d.geodetic2enu(48.01, 11.02, 600.0, 48.0, 11.0, 600.0)
    expected_deg = math.degrees(math.atan2(east_m - instrument_m[0], north_m - instrument_m[1]))
    lines = (
        "landmark_reading_deg = 0.0",
        "landmark_latitude_deg = 48.01",
        "landmark_longitude_deg = 11.02",
        f"instrument_east_m = {instrument_m[0]}",
        f"instrument_north_m = {instrument_m[1]}",
    )
    assert turn(write_site(block(*lines), horizon=HALL)).correction_deg == pytest.approx(
        expected_deg, abs=THOUSANDTH_DEG
    )


def test_a_landmark_by_grid_coordinates_holds_the_convergence(write_site: WriteSite) -> None:
    # Authority: plane geometry. Straight up the grid stands grid north, whose azimuth is the convergence.
    lines = (
        "landmark_reading_deg = 0.0",
        "landmark_easting_m = 649000",
        "landmark_northing_m = 5318500",
    )
    by_landmark = turn(write_site(GRID, ELLIPSOIDAL, block(*lines), horizon=HALL, folder="landmark"))
    by_grid = turn(write_site(GRID, ELLIPSOIDAL, block('bearings = "grid-north"'), horizon=HALL))
    assert by_landmark.correction_deg == pytest.approx(by_grid.correction_deg, abs=THOUSANDTH_DEG)


def test_a_compass_does_not_hold_at_the_magnetic_pole(write_site: WriteSite) -> None:
    pole = ("latitude_deg = 48.0\nlongitude_deg = 11.0", "latitude_deg = 85.8\nlongitude_deg = 139.0")
    path = write_site(pole, block('bearings = "magnetic-north"', "surveyed_on = 2026-11-25"), horizon=HALL)
    with pytest.raises(InputError) as caught:
        read_skyline(read_site(path))
    assert str(caught.value).startswith(
        'site.toml: horizon[1].bearings is "magnetic-north"; so near a magnetic pole a compass does not '
        "hold ("
    )
    assert str(caught.value).endswith(" nT, less than 2000); sight a landmark instead")


def test_a_compass_is_doubtful_further_from_the_pole(write_site: WriteSite) -> None:
    arctic = ("latitude_deg = 48.0\nlongitude_deg = 11.0", "latitude_deg = 75.0\nlongitude_deg = -95.0")
    path = write_site(arctic, block('bearings = "magnetic-north"', "surveyed_on = 2026-11-25"), horizon=HALL)
    found = turn(path)
    nanotesla = declination(at(75.0, -95.0, 600.0), decimal_year(date(2026, 11, 25))).horizontal_nt
    assert 2000 < nanotesla < 6000
    assert found.remarks[1] == (
        f"The horizontal field is only {nanotesla:.0f} nT here: a compass is doubtful; sight a landmark "
        "instead."
    )


def shifted(azimuth_deg: float) -> str:
    """The hall and its skyline, as an instrument reads them whose circle is set wrong."""
    rows = [line.split(",") for line in HALL.splitlines()[1:]]
    turned = [[repr((float(row[0]) + azimuth_deg) % 360.0), *row[1:]] for row in rows]
    general = sorted((row for row in turned if not row[3]), key=lambda row: float(row[0]))
    named = [row for row in turned if row[3]]
    return "\n".join([HALL.splitlines()[0], *(",".join(row) for row in general + named)]) + "\n"


@settings(max_examples=40, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(circle_deg=st.floats(0.0, 360.0), azimuth_deg=st.floats(0.0, 360.0))
def test_a_wrong_circle_and_its_landmark_change_nothing(
    survey: Callable[..., Survey], circle_deg: float, azimuth_deg: float
) -> None:
    """A landmark read with the same circle takes out whatever the circle was set to."""
    offset = {"instrument_east_m": 3.0, "instrument_north_m": -2.0, "instrument_up_m": 0.2}
    true = survey(HALL, complete=True, **offset)
    turned = survey(shifted(circle_deg), turn=NorthTurn(correction_deg=-circle_deg), complete=True, **offset)
    for one, other in zip(true.obstacles, turned.obstacles, strict=True):
        assert one.name == other.name
    np.testing.assert_allclose(
        outline_of(turned)(azimuth_deg), outline_of(true)(azimuth_deg), atol=MILLIONTH_DEG
    )


@settings(max_examples=40, deadline=None, suppress_health_check=[HealthCheck.function_scoped_fixture])
@given(turn_deg=st.floats(-180.0, 180.0), azimuth_deg=st.floats(0.0, 360.0))
def test_site_and_survey_turned_together_change_nothing(
    survey: Callable[..., Survey], turn_deg: float, azimuth_deg: float
) -> None:
    """Law: the whole scene turned about the antenna is the same scene, at azimuths turned as far."""
    east_m, north_m = 3.0, -2.0
    angle_rad = math.radians(turn_deg)
    before = survey(HALL, complete=True, instrument_east_m=east_m, instrument_north_m=north_m)
    after = survey(
        HALL,
        turn=NorthTurn(correction_deg=turn_deg),
        complete=True,
        instrument_east_m=east_m * math.cos(angle_rad) + north_m * math.sin(angle_rad),
        instrument_north_m=north_m * math.cos(angle_rad) - east_m * math.sin(angle_rad),
    )
    np.testing.assert_allclose(
        outline_of(after)(azimuth_deg + turn_deg), outline_of(before)(azimuth_deg), atol=MILLIONTH_DEG
    )


def outline_of(read: Survey) -> Callable[[float], float]:
    from siteassess.horizon.outline import upper_envelope

    skyline = Skyline(
        obstacles=read.obstacles, outline=upper_envelope(read.obstacles), unsurveyed_deg=np.empty((0, 2))
    )
    # A break of the outline is one azimuth wide; beside it both sides may be met.
    return lambda azimuth_deg: float(
        np.min(
            outline_elevation_deg(
                skyline, [azimuth_deg - ROUNDING_DEG, azimuth_deg, azimuth_deg + ROUNDING_DEG]
            )
        )
    )


def test_a_default_site_loads_neither_pyproj_nor_pygeomag(write_site: WriteSite) -> None:
    words = (
        "import sys; from siteassess import assess, read_site; "
        f"assess(read_site({str(write_site(horizon=HALL))!r})); "
        "print([name for name in ('pyproj', 'pygeomag') if name in sys.modules])"
    )
    ran = subprocess.run([sys.executable, "-c", words], capture_output=True, text=True, check=True)
    assert ran.stdout.strip() == "[]"
