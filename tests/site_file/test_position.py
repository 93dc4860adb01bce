"""Where the survey mark is."""

import struct
import subprocess
import sys
from pathlib import Path

import pytest

from siteassess.errors import InputError
from siteassess.site_file.model import Place
from siteassess.site_file.position import survey_mark
from siteassess.site_file.read import read_site

TENTH_OF_A_METRE_DEG = 0.1 / 111_000.0
AREA_OF_BRITAIN = "the area of EPSG:27700 is latitude 49.75 to 61.01 and longitude -9.01 to 2.01"


def projected(crs: str, easting_m: float, northing_m: float, **keys: float | str) -> Place:
    heights = {"height_system": "ellipsoidal", **keys}
    return Place.model_validate(
        {"name": "Roof", "crs": crs, "easting_m": easting_m, "northing_m": northing_m, **heights}
    )


def geographic(crs: str, latitude_deg: float, longitude_deg: float, **keys: float | str) -> Place:
    heights = {"height_system": "ellipsoidal", **keys}
    return Place.model_validate(
        {"name": "Roof", "crs": crs, "latitude_deg": latitude_deg, "longitude_deg": longitude_deg, **heights}
    )


def refusal(place: Place) -> str:
    with pytest.raises(InputError) as caught:
        survey_mark(place, "roof.toml")
    return str(caught.value)


def test_projected_position_against_the_worked_example_of_iogp_guidance_note_7_2() -> None:
    # IOGP Publication 373-7-2, Lambert Azimuthal Equal Area, ETRS89-extended / LAEA Europe: latitude 50 N,
    # longitude 5 E stands at easting 3 962 799.45 m, northing 2 999 718.85 m (from memory).
    mark = survey_mark(projected("EPSG:3035", 3_962_799.45, 2_999_718.85), "roof.toml")
    assert mark.latitude_deg == pytest.approx(50.0, abs=TENTH_OF_A_METRE_DEG)
    assert mark.longitude_deg == pytest.approx(5.0, abs=TENTH_OF_A_METRE_DEG)


def test_position_on_the_central_meridian_of_utm() -> None:
    # Definition of UTM: false easting 500 km on the central meridian, northing 0 on the equator.
    mark = survey_mark(projected("EPSG:32632", 500_000.0, 0.0), "roof.toml")
    assert mark.latitude_deg == pytest.approx(0.0, abs=TENTH_OF_A_METRE_DEG)
    assert mark.longitude_deg == pytest.approx(9.0, abs=TENTH_OF_A_METRE_DEG)


def test_metres_are_meant_where_the_system_counts_in_feet() -> None:
    # The same zone of the same datum in metres (EPSG:26945) and in US survey feet (EPSG:2229).
    in_metres = survey_mark(projected("EPSG:26945", 1_980_000.0, 560_000.0), "roof.toml")
    in_feet = survey_mark(projected("EPSG:2229", 1_980_000.0, 560_000.0), "roof.toml")
    assert in_feet.latitude_deg == pytest.approx(in_metres.latitude_deg, abs=TENTH_OF_A_METRE_DEG)
    assert in_feet.longitude_deg == pytest.approx(in_metres.longitude_deg, abs=TENTH_OF_A_METRE_DEG)


def test_westings_and_southings_count_as_negative_eastings_and_northings() -> None:
    # The same grid once with southing and westing (EPSG:5513), once with easting and northing (EPSG:5514).
    south_west = survey_mark(projected("EPSG:5513", -700_000.0, -1_000_000.0), "roof.toml")
    east_north = survey_mark(projected("EPSG:5514", -700_000.0, -1_000_000.0), "roof.toml")
    assert south_west.latitude_deg == pytest.approx(east_north.latitude_deg, abs=TENTH_OF_A_METRE_DEG)
    assert south_west.longitude_deg == pytest.approx(east_north.longitude_deg, abs=TENTH_OF_A_METRE_DEG)
    # Definition of the Lo grids: westing and southing are 0 on the equator at the central meridian, 29 E.
    mark = survey_mark(projected("EPSG:2053", 0.0, -3_000_000.0), "roof.toml")
    assert mark.longitude_deg == pytest.approx(29.0, abs=TENTH_OF_A_METRE_DEG)
    assert mark.latitude_deg < -27.0


def test_grid_round_the_pole() -> None:
    # Antarctic Polar Stereographic: easting runs along 90 E, northing along 0 E (definition of EPSG:3031).
    east = survey_mark(projected("EPSG:3031", 1_000_000.0, 0.0), "roof.toml")
    north = survey_mark(projected("EPSG:3031", 0.0, 1_000_000.0), "roof.toml")
    assert (east.longitude_deg, north.longitude_deg) == pytest.approx((90.0, 0.0), abs=TENTH_OF_A_METRE_DEG)
    assert east.latitude_deg == pytest.approx(north.latitude_deg, abs=TENTH_OF_A_METRE_DEG)


@pytest.mark.parametrize("code", ["EPSG:4258", "EPSG:4937", "EPSG:4326", "EPSG:4979"])
def test_geographic_systems_count_latitude_and_longitude(code: str) -> None:
    # ETRS89 and WGS 84 agree to a metre (EPSG transformation 1149).
    mark = survey_mark(geographic(code, 57.14, -2.09), "roof.toml")
    assert (mark.latitude_deg, mark.longitude_deg) == pytest.approx((57.14, -2.09), abs=1e-5)


def test_longitudes_count_from_the_systems_own_meridian() -> None:
    # Paris lies 2.33722917 degrees east of Greenwich (EPSG prime meridian 8903); its grads are given in
    # degrees. NTF differs from WGS 84 by some 100 m.
    mark = survey_mark(geographic("EPSG:4807", 48.8, 1.0), "roof.toml")
    assert mark.longitude_deg == pytest.approx(3.33722917, abs=0.002)
    assert mark.latitude_deg == pytest.approx(48.8, abs=0.002)


@pytest.mark.parametrize("easting_m", [1_800_000.0, 2_200_000.0])
def test_area_that_crosses_the_date_line(easting_m: float) -> None:
    # Fiji Map Grid, central meridian 178.75 E, false easting 2000 km, false northing 4000 km at 17 S.
    mark = survey_mark(projected("EPSG:3460", easting_m, 4_000_000.0), "roof.toml")
    assert mark.latitude_deg == pytest.approx(-17.0, abs=0.1)
    assert (mark.longitude_deg < 0.0) == (easting_m > 2_000_000.0)


def test_place_beside_an_area_that_crosses_the_date_line() -> None:
    assert refusal(projected("EPSG:3460", 1_000_000.0, 4_000_000.0)) == (
        "roof.toml: site.easting_m and northing_m are 1000000.0 and 4000000.0;"
        " the area of EPSG:3460 is latitude -20.81 to -12.42 and longitude 176.81 to -178.15"
    )


@pytest.mark.parametrize(
    ("given_deg", "longitude_deg"),
    [(0.0, 0.0), (180.0, 180.0), (-180.0, -180.0), (181.0, -179.0), (360.0, 0.0)],
)
def test_longitude_from_minus_180_to_180(given_deg: float, longitude_deg: float) -> None:
    mark = survey_mark(Place(name="Roof", latitude_deg=90.0, longitude_deg=given_deg), "roof.toml")
    assert mark.longitude_deg == longitude_deg


@pytest.mark.parametrize(
    ("heights", "height_m"),
    [
        ({"height_m": 61.2}, 61.2),
        ({"height_m": 61.2, "height_system": "orthometric"}, 61.2),
        ({"height_m": 61.2, "height_system": "orthometric", "geoid_height_m": 50.0}, 111.2),
    ],
)
def test_height_above_the_ellipsoid(heights: dict[str, float | str], height_m: float) -> None:
    # h = H + N: ellipsoidal height is orthometric height plus geoid height (definition).
    assert survey_mark(projected("EPSG:32632", 5e5, 5e6, **heights), "roof.toml").height_m == height_m


@pytest.mark.parametrize(
    ("place", "message"),
    [
        (
            projected("EPSG:99999", 5e5, 5e6),
            'site.crs is "EPSG:99999"; it must be a known reference system, such as EPSG:27700',
        ),
        (
            projected("EPSG:4326", 5e5, 5e6),
            'site.crs is "EPSG:4326"; it is a geographic system, which goes with latitude_deg and '
            "longitude_deg",
        ),
        (
            geographic("EPSG:27700", 57.0, -2.0),
            'site.crs is "EPSG:27700"; it is a projected system, which goes with easting_m and northing_m',
        ),
        (
            projected("EPSG:4978", 5e5, 5e6),  # from the centre of the earth
            'site.crs is "EPSG:4978"; it must be a system of eastings and northings, or of latitude and '
            "longitude",
        ),
        (
            projected("EPSG:5701", 5e5, 5e6),  # heights alone
            'site.crs is "EPSG:5701"; it must be a system of eastings and northings, or of latitude and '
            "longitude",
        ),
        (
            projected("EPSG:27700+4326", 5e5, 5e6),
            'site.crs is "EPSG:27700+4326"; it must be a known reference system, such as EPSG:27700',
        ),
        (
            geographic("EPSG:4258", 10.0, 60.0),
            "site.latitude_deg and longitude_deg are 10.0 and 60.0;"
            " they lie in the area of the crs when swapped",
        ),
        (
            geographic("EPSG:4258", -10.0, 10.0),
            "site.latitude_deg and longitude_deg are -10.0 and 10.0;"
            " the area of EPSG:4258 is latitude 33.26 to 84.73 and longitude -16.1 to 38.01",
        ),
        (
            Place(name="Roof", crs="EPSG:4258", latitude_deg=57.0, height_system="ellipsoidal"),
            "site.longitude_deg is missing; it goes with crs and latitude_deg",
        ),
        (
            Place(name="Roof", crs="EPSG:4258", latitude_deg=57.0, longitude_deg=10.0),
            'site.height_system is missing; with crs it must be "ellipsoidal" or "orthometric"',
        ),
        (
            projected("EPSG:27700+5701", 394_000.0, 806_000.0, height_system="ellipsoidal"),
            'site.height_system is "ellipsoidal"; the heights of EPSG:27700+5701 are orthometric',
        ),
        (
            geographic("EPSG:4979", 57.0, -2.0, height_system="orthometric"),
            'site.height_system is "orthometric"; the heights of EPSG:4979 are ellipsoidal',
        ),
        (
            geographic("EPSG:4979", 57.0, -2.0, geoid_height_m=49.0),
            'site.geoid_height_m is 49.0; it goes with height_system = "orthometric" only',
        ),
        (
            projected("EPSG:22700", 3e5, 3e5),
            'site.crs is "EPSG:22700"; no way to WGS 84 is known;'
            " give latitude_deg and longitude_deg instead of it",
        ),
        (
            projected("EPSG:27700", 1.0, 1e9),  # the projection folds over and would land in the area
            f"site.easting_m and northing_m are 1.0 and 1000000000.0; {AREA_OF_BRITAIN}",
        ),
        (
            projected("EPSG:27700", 900_000.0, 900_000.0),
            f"site.easting_m and northing_m are 900000.0 and 900000.0; {AREA_OF_BRITAIN}",
        ),
        (
            projected("EPSG:27700", 1e300, 1e300),
            f"site.easting_m and northing_m are 1e+300 and 1e+300; {AREA_OF_BRITAIN}",
        ),
        (
            projected("EPSG:27700", 806_000.0, 394_000.0),
            "site.easting_m and northing_m are 806000.0 and 394000.0;"
            " they lie in the area of the crs when swapped",
        ),
        (
            Place(name="Roof", crs="EPSG:27700", easting_m=394_000.0, height_system="ellipsoidal"),
            "site.northing_m is missing; it goes with crs and easting_m",
        ),
        (
            Place(name="Roof", crs="EPSG:27700", easting_m=394_000.0, northing_m=806_000.0),
            'site.height_system is missing; with crs it must be "ellipsoidal" or "orthometric"',
        ),
    ],
)
def test_position_that_is_refused(place: Place, message: str) -> None:
    assert refusal(place) == f"roof.toml: {message}"


def test_height_above_sea_level_without_a_grid_is_used_as_it_is() -> None:
    mark = survey_mark(
        Place(
            name="Roof", latitude_deg=48.0, longitude_deg=11.0, height_m=520.0, height_system="orthometric"
        ),
        "roof.toml",
    )
    assert (mark.height_m, mark.above) == (520.0, "sea level")
    assert mark.remarks == (
        "The height above sea level (EGM2008 height) was used as if it were above the ellipsoid: the grid "
        "us_nga_egm08_25.tif is not installed. The two lie less than 110 m apart.",
    )


def test_heights_of_a_compound_system_name_its_own_grid() -> None:
    place = Place(
        name="Roof", crs="EPSG:27700+5701", easting_m=394_000.0, northing_m=806_000.0, height_m=61.2
    )
    mark = survey_mark(place, "roof.toml")
    assert (mark.height_m, mark.above) == (61.2, "sea level")
    assert "(ODN height)" in mark.remarks[0]
    assert "uk_os_OSGM15_GB.tif" in mark.remarks[0]


def test_height_above_sea_level_by_a_grid_that_is_installed(tmp_path: Path) -> None:
    # Authority: the definition h = H + N, and a grid of N = 48.5 m all over, in the GTX format of NOAA: lower
    # left corner, steps, rows and columns, then big-endian floats.
    grid = struct.pack(">4d2i", -90.0, -180.0, 1.0, 1.0, 181, 361) + struct.pack(">f", 48.5) * (181 * 361)
    (tmp_path / "egm08_25.gtx").write_bytes(grid)
    words = (
        f"import pyproj; pyproj.datadir.append_data_dir({str(tmp_path)!r})\n"
        "from siteassess.site_file.model import Place\n"
        "from siteassess.site_file.position import survey_mark\n"
        "place = Place(name='Roof', latitude_deg=48.0, longitude_deg=11.0, height_m=520.0, "
        "height_system='orthometric')\n"
        "mark = survey_mark(place, 'roof.toml')\n"
        "print(round(mark.height_m, 3), mark.above, *mark.remarks)"
    )
    # In a process of its own, because pyproj keeps the folders of its grids.
    ran = subprocess.run([sys.executable, "-c", words], capture_output=True, text=True, check=True)
    assert ran.stdout.strip() == (
        "568.5 ellipsoid Sea level (EGM2008 height) was taken 48.50 m above the ellipsoid, from a grid that "
        "is installed."
    )


def test_crs_is_an_authority_and_a_code(tmp_path: Path) -> None:
    path = tmp_path / "roof.toml"
    path.write_text('[site]\nname = "Roof"\ncrs = "27700"\n', encoding="utf-8")
    with pytest.raises(InputError) as caught:
        read_site(path)
    message = 'roof.toml: site.crs is "27700"; it must be an authority and a code, such as EPSG:27700'
    assert message in str(caught.value).splitlines()
