"""Where the survey mark is."""

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
            'site.crs is "EPSG:4326"; it must be a projected system;'
            " or give latitude_deg and longitude_deg instead of it",
        ),
        (
            projected("EPSG:2053", 5e5, 5e6),  # westing and southing
            'site.crs is "EPSG:2053"; its axes must point east and north;'
            " or give latitude_deg and longitude_deg instead of it",
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


def test_crs_is_an_authority_and_a_code(tmp_path: Path) -> None:
    path = tmp_path / "roof.toml"
    path.write_text('[site]\nname = "Roof"\ncrs = "27700"\n', encoding="utf-8")
    with pytest.raises(InputError) as caught:
        read_site(path)
    message = 'roof.toml: site.crs is "27700"; it must be an authority and a code, such as EPSG:27700'
    assert message in str(caught.value).splitlines()
