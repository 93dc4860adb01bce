"""Files of building outlines: what is read of them, where it stands, and what is refused."""

import json
import sys
from collections.abc import Callable
from pathlib import Path
from typing import Any

import numpy as np
import pymap3d
import pyproj
import pytest

from siteassess.errors import InputError
from siteassess.horizon.buildings.plan import east_north_m
from siteassess.horizon.buildings.read import Outlines, read_outlines
from siteassess.horizon.read import read_skyline
from siteassess.horizon.view import edge_distance_m, edge_elevation_deg
from siteassess.site_file.model import HorizonSource, Mount, Position
from siteassess.site_file.read import read_site

MILLIMETRE_M = 1e-3
TENTH_OF_ARCSECOND_DEG = 3e-5

SITE = Position(latitude_deg=55.421, longitude_deg=4.313, height_m=52.3)
QUAY = Path(__file__).parent / "outline_files" / "quay.geojson"
Read = Callable[..., Outlines]

# About 25 m by 22 m, 63 m east of the site.
RING = [[4.3140, 55.4209], [4.3144, 55.4209], [4.3144, 55.4211], [4.3140, 55.4211], [4.3140, 55.4209]]


def feature(ring: Any = RING, kind: str = "Polygon", **properties: Any) -> dict[str, Any]:
    given = {key: value for key, value in ({"height_m": 10.0} | properties).items() if value != "absent"}
    return {
        "type": "Feature",
        "properties": given,
        "geometry": {"type": kind, "coordinates": [ring] if kind == "Polygon" else ring},
    }


def collection(*features: Any) -> dict[str, Any]:
    return {"type": "FeatureCollection", "features": list(features)}


@pytest.fixture
def read(tmp_path: Path) -> Read:
    """Reads a document, or a text; the antenna stands 1.5 m above the mark."""

    def read_one(document: Any, site: Position = SITE, **block: Any) -> Outlines:
        path = tmp_path / "yard.geojson"
        path.write_text(document if isinstance(document, str) else json.dumps(document), encoding="utf-8")
        source = HorizonSource(source="outlines", file=path.name, **block)
        return read_outlines(path, source, Mount(mast_height_m=1.5), site)

    return read_one


def test_the_plan_agrees_with_pymap3d() -> None:
    # pymap3d.geodetic2enu, points at the height of the site.
    latitude_deg, longitude_deg = SITE.latitude_deg, SITE.longitude_deg
    aside_deg = np.random.default_rng(1).uniform(-0.05, 0.05, (2, 50))
    points_deg = np.array([[latitude_deg], [longitude_deg]]) + aside_deg
    east_m, north_m, _ = pymap3d.geodetic2enu(*points_deg, SITE.height_m, latitude_deg, longitude_deg, 52.3)
    found = east_north_m(points_deg[1], points_deg[0], SITE)
    np.testing.assert_allclose(found, [east_m, north_m], atol=MILLIMETRE_M)


@pytest.mark.parametrize(("latitude_deg", "longitude_deg"), [(0.0, 180.0), (-89.9999, 10.0), (90.0, 0.0)])
def test_the_plan_holds_at_the_date_line_and_at_the_poles(latitude_deg: float, longitude_deg: float) -> None:
    site = Position(latitude_deg=latitude_deg, longitude_deg=longitude_deg, height_m=0.0)
    toward = np.array([30.0, 120.0, 200.0, 350.0])
    geod = pyproj.Geod(ellps="WGS84")
    longitudes, latitudes, _ = geod.fwd([longitude_deg] * 4, [latitude_deg] * 4, toward, [100.0] * 4)
    east_m, north_m = east_north_m(longitudes, latitudes, site)
    np.testing.assert_allclose(np.rad2deg(np.arctan2(east_m, north_m)) % 360.0, toward, atol=1e-6)
    np.testing.assert_allclose(np.hypot(east_m, north_m), 100.0, atol=MILLIMETRE_M)


def test_a_building_stands_where_the_geodesic_says(read: Read) -> None:
    # pyproj.Geod, inverse problem on WGS 84; tops by hand: (10 + 2 - 1.5) above the antenna.
    (hall,) = read(collection(feature(base_m=2.0, name="hall"))).obstacles
    geod = pyproj.Geod(ellps="WGS84")
    azimuth_deg, _, distance_m = geod.inv(4.313, 55.421, 4.3140, 55.4211)
    assert hall.azimuth_deg[0] == pytest.approx(azimuth_deg, abs=TENTH_OF_ARCSECOND_DEG)
    assert hall.elevation_deg[0] == pytest.approx(np.degrees(np.arctan2(10.5, distance_m)), abs=1e-3)
    assert edge_distance_m(hall, azimuth_deg) == pytest.approx(np.hypot(10.5, distance_m), abs=0.01)
    assert (hall.name, hall.source, hall.straight_in_space) == ("hall", "yard.geojson", True)


def test_heights_count_from_the_ground_of_the_block(read: Read) -> None:
    # The mark on a roof 9 m above the ground: the top is 10 - 9 - 1.5 = -0.5 m, just below the antenna.
    (low,) = read(collection(feature()), ground_up_m=-9.0).obstacles
    (high,) = read(collection(feature()), ground_up_m=4.0).obstacles
    middle_deg = [90.0]
    assert edge_elevation_deg(low, middle_deg)[0] < 0.0
    assert edge_elevation_deg(high, middle_deg)[0] == pytest.approx(
        np.degrees(np.arctan(12.5 / 63.3)), abs=0.02
    )


def test_projected_coordinates_are_the_same_buildings(read: Read) -> None:
    to_utm = pyproj.Transformer.from_crs("EPSG:4326", "EPSG:32631", always_xy=True)
    projected = [list(to_utm.transform(*corner)) for corner in RING]
    (plain,) = read(collection(feature())).obstacles
    (by_key,) = read(collection(feature(projected)), crs="EPSG:32631").obstacles
    named = collection(feature(projected)) | {
        "crs": {"type": "name", "properties": {"name": "urn:ogc:def:crs:EPSG::32631"}}
    }
    (by_file,) = read(named).obstacles
    for other in (by_key, by_file):
        np.testing.assert_allclose(other.azimuth_deg, plain.azimuth_deg, atol=TENTH_OF_ARCSECOND_DEG)
        np.testing.assert_allclose(other.elevation_deg, plain.elevation_deg, atol=TENTH_OF_ARCSECOND_DEG)


def test_outlines_show_only_themselves_unless_they_are_complete(read: Read) -> None:
    assert read(collection(feature())).surveyed_deg.shape == (0, 2)
    assert read(collection(feature()), complete=True).surveyed_deg.tolist() == [[0.0, 360.0]]


def test_names_are_those_of_the_file_or_the_place_in_it(read: Read) -> None:
    far = [[east + 0.003, north] for east, north in RING]
    trees = feature([[east - 0.003, north] for east, north in RING], cover="foliage", leaf="leafless")
    found = read(
        collection(feature(name=" Old\nmill "), feature(far, height_m=200), trees, feature())
    ).obstacles
    assert [one.name for one in found] == ["Old mill", "building 2", "trees 3"]
    assert [one.leaf for one in found] == ["in-leaf", "in-leaf", "leafless"]


def test_heights_in_coordinates_holes_and_single_features_are_fine(read: Read) -> None:
    ring = [[*corner, 7.0] for corner in RING]
    mixed = [RING[0], *ring[1:4], RING[4]]
    plain = read(collection(feature())).obstacles[0]
    for document in (feature(ring), collection(feature(mixed)), feature([[RING]], "MultiPolygon")):
        (one,) = read(document).obstacles
        assert np.array_equal(one.azimuth_deg, plain.azimuth_deg)


def test_an_open_ring_is_closed_and_remarked_on(read: Read) -> None:
    found = read(collection(feature(RING[:-1], name="hall")))
    assert np.array_equal(found.obstacles[0].azimuth_deg, read(feature()).obstacles[0].azimuth_deg)
    assert found.remarks == ('yard.geojson: the outline of "hall" was not closed and was closed.',)


def test_an_outline_that_crosses_itself_is_repaired_and_remarked_on(read: Read) -> None:
    # A bow tie is two triangles; its ends stand where those of the rectangle do.
    a, b, c, d, _ = RING
    found = read(collection(*(feature([a, c, b, d, a], name=f"knot {index}") for index in range(7))))
    (knot,) = found.obstacles
    (plain,) = read(feature()).obstacles
    np.testing.assert_allclose(knot.azimuth_deg[[0, -1]], plain.azimuth_deg[[0, -1]], atol=1e-9)
    names = ", ".join(f'"knot {index}"' for index in range(5))
    assert found.remarks == (
        f"yard.geojson: the outline of {names} and 2 more crosses or touches itself and was repaired.",
    )


def test_far_buildings_are_left_out_and_remarked_on(read: Read) -> None:
    far = [[east + 1.0, north] for east, north in RING]
    found = read(collection(feature(), feature(far), feature(far)))
    assert len(found.obstacles) == 1
    assert found.remarks == ("yard.geojson: 2 buildings more than 50 km away left out.",)


def test_trees_grow_and_buildings_do_not(tmp_path: Path) -> None:
    # By hand: from 10 m, 8.5 m above the antenna, in 5 years by 0.2 m or 0.4 m a year.
    path = tmp_path / "yard.geojson"
    shifted = [[east + 0.002, north] for east, north in RING], [[east - 0.003, north] for east, north in RING]
    own = feature(shifted[0], cover="foliage", growth_m_per_year=0.4)
    path.write_text(json.dumps(collection(feature(height_m=3.0), own, feature(shifted[1], cover="foliage"))))
    source = HorizonSource(source="outlines", file=path.name)
    now, later = (
        read_outlines(path, source, Mount(mast_height_m=1.5), SITE, years=years, growth_m_per_year=0.2)
        for years in (0.0, 5.0)
    )
    rises = [
        np.tan(np.deg2rad(old.elevation_deg)) / np.tan(np.deg2rad(new.elevation_deg))
        for old, new in zip(now.obstacles, later.obstacles, strict=True)
    ]
    np.testing.assert_allclose(rises[0], 1.0)
    np.testing.assert_allclose(rises[1], 8.5 / 10.5, atol=1e-4)
    np.testing.assert_allclose(rises[2], 8.5 / 9.5, atol=1e-4)


def test_the_quay_has_a_warehouse_a_bridge_and_trees() -> None:
    source = HorizonSource(source="outlines", file=QUAY.name)
    found = read_outlines(QUAY, source, Mount(mast_height_m=1.5), SITE)
    assert [one.name for one in found.obstacles] == ["Warehouse", "Conveyor bridge", "trees 3", "trees 3"]
    assert [one.hangs_free for one in found.obstacles] == [False, True, False, False]
    assert found.obstacles[2].depth_m is not None
    assert found.remarks == ()


def test_a_site_mixes_a_survey_with_outlines(write_site: Callable[..., Path]) -> None:
    block = '\n[[horizon]]\nsource = "outlines"\nfile = "yard.geojson"\n'
    path = write_site(extra=block)
    site = read_site(path)
    position = site.position
    ring = np.array(RING) - [4.313, 55.421] + [position.longitude_deg, position.latitude_deg]
    (path.parent / "yard.geojson").write_text(json.dumps(feature(ring[:-1].tolist(), height_m=50.0)))
    skyline = read_skyline(site)
    assert [one.source for one in skyline.obstacles] == ["horizon.csv", "yard.geojson"]
    assert skyline.remarks == ('yard.geojson: the outline of "building 1" was not closed and was closed.',)
    assert 1 in skyline.outline.obstacle


SHAPES = "it must be a Polygon or a MultiPolygon"
COLLECTION = 'it must be a "FeatureCollection" or a "Feature": buildings need properties'
DEGREES = "they must be longitude and latitude in degrees; if they are projected, give crs"
CLOSED = "a ring needs at least 4, the last one like the first"
A, B, _, D, E = RING


@pytest.mark.parametrize(
    ("document", "message"),
    [
        ("", "line 1, column 1 is not JSON; expecting value"),
        ('{"type": "Feature",\n "x" 1}', "line 2, column 6 is not JSON; expecting ':' delimiter"),
        ('{"height": NaN}', "holds NaN; JSON has no such number"),
        ('{"height": -Infinity}', "holds -Infinity; JSON has no such number"),
        ("[" * 100_000, "is nested too deeply; a GeoJSON file has about ten levels"),
        ('{"type": ' + "1" * 5000 + "}", "holds a number of too many digits"),
        ([1, 2], f"is not GeoJSON; {COLLECTION}"),
        ({"kind": "Feature"}, f"is not GeoJSON; {COLLECTION}"),
        ({"type": "Polygon", "coordinates": [RING]}, f'type is "Polygon"; {COLLECTION}'),
        ({"type": "FeatureCollection"}, "features is no list; a FeatureCollection holds its features there"),
        (collection(), "has no features; at least one building must be there"),
        (collection(7), 'feature 1 is no Feature; its type must be "Feature"'),
        (
            collection(feature() | {"properties": [1]}),
            "feature 1, properties is [1]; it must be an object with height_m",
        ),
        (collection(feature() | {"geometry": None}), f"feature 1 has no geometry; {SHAPES}"),
        (collection(feature() | {"geometry": 3}), f"feature 1, geometry is none; {SHAPES}"),
        (
            collection(
                feature(), feature(name="Mast") | {"geometry": {"type": "Point", "coordinates": [4, 55]}}
            ),
            f'feature 2 ("Mast"), geometry is a Point; {SHAPES}',
        ),
        (collection(feature(height_m="absent")), "feature 1, height_m is missing; every feature needs it"),
        (
            collection(feature(height_m="absent", heigth_m=4)),
            "feature 1, height_m is missing; is heigth_m meant?",
        ),
        (collection(feature(height_m="12")), 'feature 1, height_m is "12"; it must be a number'),
        (collection(feature(height_m=True)), "feature 1, height_m is true; it must be a number"),
        (collection(feature(height_m=-4)), "feature 1, height_m is -4; it must be above 0 and at most 2000"),
        (
            '{"type":"Feature","properties":{"height_m":1e999},"geometry":null}',
            "feature 1, height_m is inf; it must be above 0 and at most 2000\n"
            f"yard.geojson: feature 1 has no geometry; {SHAPES}",
        ),
        (collection(feature(base_m=9999)), "feature 1, base_m is 9999; it must lie from -1000 to 9000"),
        (
            collection(feature(underside_m=10)),
            "feature 1, underside_m is 10; it must be below height_m, which is 10.0",
        ),
        (
            collection(feature(cover="leaves")),
            'feature 1, cover is "leaves"; it must be "solid" or "foliage"',
        ),
        (
            collection(feature(cover="foliage", leaf="bare")),
            'feature 1, leaf is "bare"; it must be "in-leaf", "leafless" or "evergreen"',
        ),
        (
            collection(feature(depth_m=4)),
            'feature 1, depth_m is 4; it goes with cover "foliage" only',
        ),
        (
            collection(feature([A, B, A])),
            f"feature 1, coordinates hold a ring of 3 positions; {CLOSED}",
        ),
        (
            collection(feature([])),
            f"feature 1, coordinates hold a ring of 0 positions; {CLOSED}",
        ),
        (
            collection(feature([A, B, [4.3], D, E])),
            f"feature 1, coordinates hold a position that is no pair of numbers; {SHAPES}",
        ),
        (
            collection(feature([1, 2, 3, 4])),
            f"feature 1, coordinates hold a position that is no pair of numbers; {SHAPES}",
        ),
        (
            collection(feature([A, B, ["4.3", "55"], D, E])),
            f"feature 1, coordinates hold something that is no number; {SHAPES}",
        ),
        (
            collection(feature([A, B, [None, 55], D, E])),
            f"feature 1, coordinates hold something that is no number; {SHAPES}",
        ),
        (collection(feature("ring")), f"feature 1, coordinates hold a ring that is no list; {SHAPES}"),
        (
            collection(feature(5, "MultiPolygon")),
            f"feature 1, coordinates are no list of positions; {SHAPES}",
        ),
        (
            collection(feature([[]], "MultiPolygon")),
            f"feature 1, coordinates hold a polygon without rings; {SHAPES}",
        ),
        (
            '{"type":"Feature","properties":{"height_m":1},"geometry":{"type":"Polygon",'
            '"coordinates":[[[1e999,1],[1,1],[1,2],[1e999,1]]]}}',
            f"feature 1, coordinates hold a number that is too large; {SHAPES}",
        ),
        (
            collection(
                feature([[412_345.5, 654_321], [412_400, 654_321], [412_400, 654_400], [412_345.5, 654_321]])
            ),
            f"coordinates hold 412345.5, 654321; {DEGREES}",
        ),
        (
            collection(feature([position[::-1] for position in RING])),
            "the nearest building is 7273 km away; "
            "longitude must stand before latitude; swapped, they lie at the site",
        ),
        (
            collection(feature([[east + 20.0, north] for east, north in RING])),
            "the nearest building is 1259 km away; "
            "check the site's position and the reference system of the file",
        ),
        (
            collection(feature([A, B, A, B, A], name="fence")),
            'the outline of "fence" encloses no area; a thin wall needs its two sides',
        ),
        (
            collection(feature([[east - 0.0012, north] for east, north in RING], name="hall")),
            '"hall" stands round the antenna and is 8.5 m taller; '
            "check the outline, its heights, ground_up_m and the site's position",
        ),
    ],
)
def test_wrong_files_have_one_message_a_mistake(read: Read, document: Any, message: str) -> None:
    with pytest.raises(InputError) as refusal:
        read(document)
    assert str(refusal.value) == f"yard.geojson: {message}"


def test_coordinates_outside_the_area_of_a_projection_are_refused(read: Read) -> None:
    with pytest.raises(InputError) as refusal:
        read(collection(feature([[1e12, 0], [1e12, 1], [2e12, 1], [1e12, 0]])), crs="EPSG:32631")
    assert str(refusal.value) == (
        "yard.geojson: coordinates hold 1e+12, 0; they do not lie in the area of EPSG:32631"
    )


def test_a_reference_system_that_the_file_names_must_be_known(read: Read) -> None:
    named = collection(feature()) | {"crs": {"type": "name", "properties": {"name": "EPSG:1"}}}
    with pytest.raises(InputError) as refusal:
        read(named)
    assert str(refusal.value) == 'yard.geojson: crs is "EPSG:1"; no way from it to WGS 84 is known'


def test_a_tangle_of_many_corners_is_refused(read: Read) -> None:
    random = np.random.default_rng(1)
    ring = (np.array(A) + random.uniform(0.0, 1e-3, (3000, 2))).tolist()
    with pytest.raises(InputError) as refusal:
        read(collection(feature([*ring, ring[0]], name="net")))
    assert str(refusal.value) == (
        'yard.geojson: the outline of "net" crosses or touches itself and has 3001 corners; '
        "it is repaired up to 2000 corners only"
    )


def test_many_mistakes_are_cut_short(read: Read) -> None:
    with pytest.raises(InputError) as refusal:
        read(collection(*(feature(height_m=-1) for _ in range(1000))))
    *first, last = str(refusal.value).splitlines()
    assert len(first) == 50
    assert last == "yard.geojson: has more mistakes; the first are listed"


def test_a_missing_file_is_said(tmp_path: Path) -> None:
    source = HorizonSource(source="outlines", file="yard.geojson")
    with pytest.raises(InputError) as refusal:
        read_outlines(tmp_path / "yard.geojson", source, Mount(mast_height_m=1.5), SITE)
    assert str(refusal.value) == (
        f"yard.geojson: there is no such file; it was looked for as {tmp_path / 'yard.geojson'}"
    )


# Other vector files


def test_another_vector_file_is_the_same_buildings(tmp_path: Path, read: Read) -> None:
    import pyogrio
    import shapely

    to_utm = pyproj.Transformer.from_crs("EPSG:4326", "EPSG:32631", always_xy=True)
    path = tmp_path / "yard.gpkg"
    pyogrio.raw.write(
        path,
        np.array([shapely.to_wkb(shapely.Polygon([to_utm.transform(*corner) for corner in RING]))]),
        [np.array(["hall"], dtype=object), np.array([10.0]), np.array([np.nan])],
        ["name", "height_m", "base_m"],
        crs="EPSG:32631",
        geometry_type="Polygon",
    )
    source = HorizonSource(source="outlines", file=path.name)
    (hall,) = read_outlines(path, source, Mount(mast_height_m=1.5), SITE).obstacles
    (plain,) = read(collection(feature())).obstacles
    assert (hall.name, hall.source) == ("hall", "yard.gpkg")
    np.testing.assert_allclose(hall.azimuth_deg, plain.azimuth_deg, atol=TENTH_OF_ARCSECOND_DEG)
    np.testing.assert_allclose(hall.elevation_deg, plain.elevation_deg, atol=TENTH_OF_ARCSECOND_DEG)


def test_another_vector_file_that_is_none_is_refused(tmp_path: Path) -> None:
    path, source = tmp_path / "yard.gpkg", HorizonSource(source="outlines", file="yard.gpkg")
    for content, problem in (
        (None, f"there is no such file; it was looked for as {path}"),
        (b"buildings", "cannot be read; it must be a vector file, such as GeoPackage"),
    ):
        if content is not None:
            path.write_bytes(content)
        with pytest.raises(InputError) as refusal:
            read_outlines(path, source, Mount(mast_height_m=1.5), SITE)
        assert str(refusal.value) == f"yard.gpkg: {problem}"


def test_other_vector_files_need_the_extra(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setitem(sys.modules, "pyogrio", None)
    source = HorizonSource(source="outlines", file="yard.gpkg")
    with pytest.raises(InputError) as refusal:
        read_outlines(tmp_path / "yard.gpkg", source, Mount(mast_height_m=1.5), SITE)
    assert str(refusal.value) == (
        "yard.gpkg: is no GeoJSON file; other formats need an extra library: "
        'pip install "siteassess[vector]", or save it as .geojson'
    )
