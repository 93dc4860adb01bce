"""Elevation rasters from file to obstacle: reference systems, tiles, missing heights, and every message."""

from collections.abc import Callable
from pathlib import Path

import matplotlib.cbook
import numpy as np
import pytest
import rasterio
from numpy.typing import NDArray
from pyproj import Geod, Transformer
from rasterio.transform import Affine
from scipy.ndimage import map_coordinates

from siteassess.errors import InputError
from siteassess.horizon.read import read_skyline
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import outline_elevation_deg
from siteassess.site_file.read import read_site

FloatArray = NDArray[np.float64]
Assess = Callable[..., Skyline]

LATITUDE_DEG, LONGITUDE_DEG = 60.2, 11.3
RADIUS_M = 8_500_000.0  # ITU-R P.526-8 section 1
SKYLINE_DEG = 0.05
AZIMUTHS_DEG = np.random.default_rng(3).uniform(0.0, 360.0, 100)


def hills_m(latitude_deg: FloatArray, longitude_deg: FloatArray) -> FloatArray:
    """Invented ground, smooth over some 500 m, as a function of the place."""
    x, y = (longitude_deg - LONGITUDE_DEG) * 55.5, (latitude_deg - LATITUDE_DEG) * 111.4  # about km
    return 200.0 + 60.0 * np.sin(1.3 * x + 0.4) * np.cos(1.7 * y) + 25.0 * np.sin(3.1 * x - 2.3 * y) + 6.0 * x


def expected_deg(eye_m: float, azimuth_deg: FloatArray, reach_m: float) -> FloatArray:
    """Along geodesics of pyproj in steps of 10 m, on the ground itself."""
    s = np.arange(100.0, reach_m + 1.0, 10.0)
    geod, found = Geod(ellps="WGS84"), []
    for azimuth in azimuth_deg.tolist():
        start = np.full(s.shape, LONGITUDE_DEG), np.full(s.shape, LATITUDE_DEG)
        longitude_deg, latitude_deg, _ = geod.fwd(*start, np.full(s.shape, azimuth), s)
        found.append(((hills_m(latitude_deg, longitude_deg) - eye_m) / s - s / (2.0 * RADIUS_M)).max())
    return np.rad2deg(np.arctan(found))


def write_raster(
    path: Path, crs: str | None, transform: Affine, shape: tuple[int, int], **more: object
) -> FloatArray:
    """Hills in the middles of the cells."""
    rows, columns = np.mgrid[: shape[0], : shape[1]] + 0.5
    x = transform.a * columns + transform.b * rows + transform.c
    y = transform.d * columns + transform.e * rows + transform.f
    longitude_deg, latitude_deg = Transformer.from_crs(crs, "EPSG:4326", always_xy=True).transform(x, y)
    height_m = hills_m(latitude_deg, longitude_deg)
    save(path, height_m.astype("float32"), crs, transform, **more)
    return height_m


def save(path: Path, height: NDArray, crs: str | None, transform: Affine, **more: object) -> None:
    bands = height if height.ndim == 3 else height[None]
    profile = {
        "driver": "GTiff",
        "crs": crs,
        "transform": transform,
        "dtype": bands.dtype,
        "count": len(bands),
    }
    with rasterio.open(path, "w", height=bands.shape[1], width=bands.shape[2], **profile | more) as dataset:
        dataset.write(bands)


def projected(crs: str) -> tuple[float, float]:
    return Transformer.from_crs("EPSG:4326", crs, always_xy=True).transform(LONGITUDE_DEG, LATITUDE_DEG)


def then(first: Affine, *others: Affine) -> Affine:
    """Transforms one after the other, the last one applied first."""
    matrix = np.reshape(first, (3, 3))
    for other in others:
        matrix = matrix @ np.reshape(other, (3, 3))
    return Affine(*matrix[:2].ravel())


def from_origin(west: float, north: float, width: float, height: float) -> Affine:
    return Affine(width, 0.0, west, 0.0, -height, north)


def around(crs: str, cell: float, half: int) -> tuple[str, Affine, tuple[int, int]]:
    """A square raster about the site, which lies off the middle of a cell."""
    x, y = projected(crs)
    return (
        crs,
        from_origin(x - (half + 0.3) * cell, y + (half + 0.6) * cell, cell, cell),
        (2 * half, 2 * half),
    )


@pytest.fixture
def skyline(write_site: Callable[..., Path]) -> Assess:
    """Reads the horizon of a site at the invented hills; the antenna stands 1.5 m above the mark."""

    def read(files: object = "dem.tif", *lines: str, site_height: str = "height_m = 600.0") -> Skyline:
        listed = str(files).replace("'", '"')
        listed = listed if isinstance(files, list) else f'"{listed}"'
        block = "\n".join(['source = "terrain"', f"file = {listed}", *(lines or ("reach_m = 8000",))])
        path = write_site(
            ("latitude_deg = 48.0", f"latitude_deg = {LATITUDE_DEG}"),
            ("longitude_deg = 11.0", f"longitude_deg = {LONGITUDE_DEG}"),
            ("height_m = 600.0", site_height),
            ('source = "survey"\nfile = "horizon.csv"\ncomplete = true', block),
        )
        return read_skyline(read_site(path))

    return read


EYE_M = float(hills_m(np.array(LATITUDE_DEG), np.array(LONGITUDE_DEG))) + 1.5


def assert_hills(skyline: Skyline, reach_m: float = 8000.0) -> None:
    np.testing.assert_allclose(
        outline_elevation_deg(skyline, AZIMUTHS_DEG),
        expected_deg(EYE_M, AZIMUTHS_DEG, reach_m),
        atol=SKYLINE_DEG,
    )


@pytest.mark.parametrize(
    ("crs", "cell"),
    [
        ("EPSG:32632", 30.0),  # UTM, 2 degrees from its meridian
        ("EPSG:3857", 60.0),  # half the size on the ground
        ("EPSG:3035", 30.0),  # equal area
        ("EPSG:4326", 0.0003),  # cells of 33 by 17 m
        ("EPSG:3413", 30.0),  # polar, turned by 56 degrees
    ],
)
def test_every_reference_system_gives_the_same_skyline(
    crs: str, cell: float, tmp_path: Path, skyline: Assess
) -> None:
    half = 540 if crs == "EPSG:4326" else 300
    write_raster(tmp_path / "dem.tif", *around(crs, cell, half))
    found = skyline()
    assert_hills(found)
    (terrain,) = found.obstacles
    assert (terrain.name, terrain.cover, terrain.source) == ("terrain", "solid", "dem.tif")
    assert terrain.azimuth_deg[[0, -1]].tolist() == [0.0, 360.0]
    assert terrain.distance_m is not None
    assert terrain.distance_m.min() >= 100.0
    assert terrain.distance_m.max() < 8100.0


def test_south_up_and_turned_rasters_are_read_as_they_lie(tmp_path: Path, skyline: Assess) -> None:
    crs, north_up, shape = around("EPSG:32632", 30.0, 300)
    write_raster(tmp_path / "dem.tif", crs, then(north_up, Affine(1, 0, 0, 0, -1, 600)), shape)
    assert_hills(skyline())
    x, y = projected(crs)
    cells = Affine(30.0, 0.0, -310 * 30.0, 0.0, -30.0, 305 * 30.0)
    turned = then(Affine.translation(x, y), Affine.rotation(30.0), cells)
    write_raster(tmp_path / "dem.tif", crs, turned, (610, 620))
    assert_hills(skyline())


def test_scale_offset_and_feet_are_applied(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, shape = around("EPSG:32632", 30.0, 300)
    height_m = write_raster(tmp_path / "dem.tif", crs, transform, shape)
    with rasterio.open(
        tmp_path / "dem.tif",
        "w",
        driver="GTiff",
        crs=crs,
        transform=transform,
        dtype="int16",
        count=1,
        height=600,
        width=600,
        nodata=-32768,
    ) as dataset:
        dataset.write(np.round((height_m / 0.3048 - 500.0) / 0.1).astype("int16"), 1)
        dataset.scales, dataset.offsets, dataset.units = (0.1,), (500.0,), ("ft",)
    assert_hills(skyline())


def test_tiles_of_one_grid_are_one_ground(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, shape = around("EPSG:32632", 30.0, 300)
    write_raster(tmp_path / "dem.tif", crs, transform, shape)
    whole = outline_elevation_deg(skyline(), AZIMUTHS_DEG)
    for name, column, row, part in (
        ("a.tif", 0, 0, (280, 310)),
        ("b.tif", 310, 0, (280, 290)),
        ("c.tif", 0, 270, (330, 600)),  # overlaps the two others
    ):
        write_raster(tmp_path / name, crs, then(transform, Affine.translation(column, row)), part)
    found = skyline(["b.tif", "a.tif", "c.tif"])
    np.testing.assert_allclose(outline_elevation_deg(found, AZIMUTHS_DEG), whole, atol=1e-9)
    assert found.obstacles[0].source == "b.tif, a.tif and c.tif"


def test_tiles_of_different_grids_stand_together(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, _ = around("EPSG:32632", 30.0, 300)
    write_raster(tmp_path / "west.tif", crs, transform, (600, 320))
    write_raster(tmp_path / "all.tif", *around("EPSG:4326", 0.0004, 420))
    assert_hills(skyline(["west.tif", "all.tif"]))


def test_a_raster_that_counts_longitudes_from_0_holds_a_site_west_of_it(
    tmp_path: Path, write_site: Callable[..., Path]
) -> None:
    # A block of hills 0.04 degrees, or 4 448 m, east of a site beside the date line, 200 m above the antenna.
    height_m = np.zeros((200, 400), dtype="float32")
    height_m[:, 280] = 200.0
    save(tmp_path / "dem.tif", height_m, "EPSG:4326", from_origin(179.7595, 0.1005, 0.001, 0.001))
    path = write_site(
        ("latitude_deg = 48.0", "latitude_deg = 0.0"),
        ("longitude_deg = 11.0", "longitude_deg = -180.0"),
        ('file = "horizon.csv"', 'file = "dem.tif"\nreach_m = 9000'),
        ('source = "survey"', 'source = "terrain"'),
    )
    away_m = 0.04 * np.pi / 180.0 * 6_378_137.0
    top_deg = np.rad2deg(np.arctan(198.5 / away_m - away_m / (2.0 * RADIUS_M)))
    assert outline_elevation_deg(read_skyline(read_site(path)), 90.0) == pytest.approx(top_deg, abs=0.01)


def test_the_part_within_reach_is_read_and_no_more(tmp_path: Path, skyline: Assess) -> None:
    write_raster(tmp_path / "dem.tif", *around("EPSG:32632", 30.0, 300))
    assert_hills(skyline("dem.tif", "reach_m = 3000"), 3000.0)


def test_the_ground_near_the_antenna_is_left_out(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, shape = around("EPSG:32632", 5.0, 200)
    height_m = np.full(shape, 100.0, dtype="float32")
    height_m[190:213, 250:252] = 150.0  # 50 m high, 250 m to the east
    save(tmp_path / "dem.tif", height_m, crs, transform)
    assert outline_elevation_deg(skyline("dem.tif", "reach_m = 900"), 90.0) > 10.0
    assert outline_elevation_deg(skyline("dem.tif", "nearest_m = 300", "reach_m = 900"), 90.0) < 0.0


def test_heights_come_from_the_raster_or_from_the_site(tmp_path: Path, skyline: Assess) -> None:
    save(
        tmp_path / "dem.tif",
        np.full((600, 600), 100.0, dtype="float32"),
        *around("EPSG:32632", 30.0, 300)[:2],
    )
    on_ground = skyline("dem.tif", "reach_m = 8000")
    assert on_ground.remarks[:2] == (
        "Terrain is taken from 100 m to 8 km; what stands nearer is left to the survey.",
        "The antenna is set 101.5 m high in the heights of the terrain: the survey mark lies at 100.0 m by "
        "the raster, where dem.tif has the ground at 100.0 m.",
    )
    # Level ground, seen from above: -sqrt(2 h / R).
    for lines, height_m in (
        ((), 1.5),
        (("mark_above_ground_m = 2.0",), 3.5),
        (('heights = "site"',), 2.5),
    ):
        found = skyline("dem.tif", "reach_m = 8000", *lines, site_height="height_m = 101.0")
        dip_deg = -np.rad2deg(np.sqrt(2.0 * height_m / RADIUS_M))
        assert outline_elevation_deg(found, 30.0) == pytest.approx(dip_deg, abs=0.001)


def test_a_mark_far_off_the_ground_is_remarked(tmp_path: Path, skyline: Assess) -> None:
    save(
        tmp_path / "dem.tif",
        np.full((600, 600), 100.0, dtype="float32"),
        *around("EPSG:32632", 30.0, 300)[:2],
    )
    found = skyline("dem.tif", "reach_m = 8000", 'heights = "site"', site_height="height_m = 147.0")
    assert found.remarks[2] == (
        "Mark and ground differ by 47 m: check that site.height_m counts from where the raster counts."
    )


def test_terrain_surveys_azimuths_only_where_the_user_says_so(tmp_path: Path, skyline: Assess) -> None:
    write_raster(tmp_path / "dem.tif", *around("EPSG:32632", 30.0, 300))
    found = skyline("dem.tif", "reach_m = 8000")
    assert found.unsurveyed_deg.tolist() == [[0.0, 360.0]]
    assert found.remarks[-1] == ("Terrain alone counts no azimuth as looked at: nearer things are not in it.")
    assert not len(skyline("dem.tif", "reach_m = 8000", "complete = true").unsurveyed_deg)


def test_azimuths_without_heights_stay_unsurveyed(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, shape = around("EPSG:32632", 30.0, 300)
    height_m = np.full(shape, 100.0, dtype="float32")
    height_m[:, 302:] = -9999.0  # declared as missing: everything from 50 m east of the site on
    save(tmp_path / "dem.tif", height_m, crs, transform, nodata=-9999.0)
    found = skyline("dem.tif", "reach_m = 8000", "complete = true")
    ((start_deg, end_deg),) = found.unsurveyed_deg.tolist()
    # The grid is turned by the convergence of the meridians, 2 degrees; 52 m aside at 100 m is 31 degrees.
    assert 20.0 < start_deg < 40.0 and 145.0 < end_deg < 165.0
    assert outline_elevation_deg(found, [90.0, 270.0]).tolist() == pytest.approx([-90.0, -0.034], abs=0.001)
    assert "toward azimuth" in found.remarks[-1] and "at any distance" in found.remarks[-1]


def test_a_hole_in_the_heights_is_told_with_its_azimuths_and_distance(
    tmp_path: Path, skyline: Assess
) -> None:
    crs, transform, shape = around("EPSG:32632", 30.0, 300)
    height_m = np.full(shape, 100.0, dtype="float32")
    height_m[250:350, 400:] = np.nan  # from 3 km east on, 1.5 km to either side
    save(tmp_path / "dem.tif", height_m, crs, transform)
    found = skyline("dem.tif", "reach_m = 8000", "complete = true")
    # 90 -+ arctan(1.5 / 3) degrees, and 2.0 for the convergence of the meridians, in steps of half a degree.
    assert found.remarks[-1] == (
        "dem.tif lacks heights within reach, toward azimuth 65° to 118° from 3.0 km: ground that is missing "
        "there hides nothing here."
    )
    assert not len(found.unsurveyed_deg)


def test_a_raster_that_ends_within_reach_is_told(tmp_path: Path, skyline: Assess) -> None:
    save(
        tmp_path / "dem.tif",
        np.full((600, 600), 100.0, dtype="float32"),
        *around("EPSG:32632", 30.0, 300)[:2],
    )
    assert skyline("dem.tif", "complete = true").remarks[-1] == (
        "dem.tif lacks heights within reach, all round from 9.0 km: ground that is missing there hides "
        "nothing here."
    )


def test_heights_that_no_land_has_count_as_missing(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, shape = around("EPSG:32632", 30.0, 300)
    height_m = np.full(shape, -32768, dtype="int16")
    height_m[:, :400] = 100
    save(tmp_path / "dem.tif", height_m, crs, transform)  # nothing declared
    assert "from 3.0 km" in skyline("dem.tif", "reach_m = 8000").remarks[-1]


def refused(skyline: Assess, *arguments: object, **more: str) -> str:
    with pytest.raises(InputError) as refusal:
        skyline(*arguments, **more)
    return str(refusal.value)


def test_files_that_hold_no_heights_are_refused(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, shape = around("EPSG:32632", 30.0, 20)
    height_m = np.full(shape, 100.0, dtype="float32")
    (tmp_path / "notes.tif").write_text("no raster")
    save(tmp_path / "bare.tif", height_m, None, transform)
    save(tmp_path / "picture.tif", np.zeros((3, 40, 40), dtype="uint8"), crs, transform)
    save(tmp_path / "complex.tif", height_m.astype("complex64"), crs, transform)
    save(tmp_path / "depths.tif", height_m, crs, transform)
    with rasterio.open(tmp_path / "depths.tif", "r+") as dataset:
        dataset.units = ("fathom",)
    files = ["gone.tif", "notes.tif", "bare.tif", "picture.tif", "complex.tif", "depths.tif"]
    assert refused(skyline, files).splitlines() == [
        f"gone.tif: there is no such file; it was looked for as {tmp_path / 'gone.tif'}",
        "notes.tif: is no raster that can be read; it must be one such as GeoTIFF",
        "bare.tif: has no reference system; it must say where its cells lie, as a GeoTIFF does",
        "picture.tif: has 3 bands; it must have one, of heights",
        "complex.tif: holds numbers of type complex64; they must be heights",
        'depths.tif: has heights in "fathom"; they must be in metres or feet',
    ]


def test_a_raster_that_was_cut_off_is_refused(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, shape = around("EPSG:32632", 30.0, 100)
    height_m = np.random.default_rng(1).uniform(0.0, 100.0, shape).astype("float32")
    save(tmp_path / "dem.tif", height_m, crs, transform)
    content = (tmp_path / "dem.tif").read_bytes()
    (tmp_path / "dem.tif").write_bytes(content[: len(content) // 2])
    message = refused(skyline)
    assert message == "dem.tif: its heights cannot be read; the file may be cut off"


def test_a_site_outside_is_refused(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, shape = around("EPSG:32632", 30.0, 100)
    save(tmp_path / "dem.tif", np.zeros(shape, "float32"), crs, then(transform, Affine.translation(500, 0)))
    assert refused(skyline) == (
        "dem.tif: does not hold the site; check its position, or give the raster that does"
    )


def test_missing_heights_all_over_or_at_the_mark_are_refused(tmp_path: Path, skyline: Assess) -> None:
    crs, transform, shape = around("EPSG:32632", 30.0, 300)
    height_m = np.full(shape, -9999.0, dtype="float32")
    save(tmp_path / "dem.tif", height_m, crs, transform, nodata=-9999.0)
    assert refused(skyline, "dem.tif", 'heights = "site"') == (
        "dem.tif: has no heights within reach_m; check its marks for missing heights"
    )
    height_m[:200] = 50.0
    save(tmp_path / "dem.tif", height_m, crs, transform, nodata=-9999.0)
    assert refused(skyline) == (
        'dem.tif: has no height at the survey mark; give heights = "site" and site.height_m'
    )


def test_more_cells_than_can_be_held_are_refused(tmp_path: Path, skyline: Assess) -> None:
    x, y = projected("EPSG:32632")
    transform = from_origin(x - 6000.0, y + 6000.0, 1.0, 1.0)
    profile = {"driver": "GTiff", "crs": "EPSG:32632", "transform": transform, "dtype": "uint8", "count": 1}
    with rasterio.open(
        tmp_path / "dem.tif", "w", height=12_000, width=12_000, sparse_ok=True, tiled=True, **profile
    ):
        pass
    assert refused(skyline) == (
        "dem.tif: has 144 million cells within reach_m; at most 64 million can be read; lower reach_m, or "
        "give it coarser"
    )
    assert skyline("dem.tif", "reach_m = 500").obstacles


def test_a_grid_of_degrees_at_the_pole_is_refused(tmp_path: Path, write_site: Callable[..., Path]) -> None:
    save(tmp_path / "dem.tif", np.zeros((100, 3600), "float32"), "EPSG:4326", from_origin(-180, 90, 0.1, 0.1))
    path = write_site(
        ("latitude_deg = 48.0", "latitude_deg = 89.9"),
        ('source = "survey"\nfile = "horizon.csv"', 'source = "terrain"\nfile = "dem.tif"'),
    )
    with pytest.raises(InputError) as refusal:
        read_skyline(read_site(path))
    assert str(refusal.value) == (
        "dem.tif: is bent too much about the site; give it in a projected reference system, or lower reach_m"
    )


def test_without_the_extra_the_message_says_how_to_install_it(
    tmp_path: Path, skyline: Assess, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setitem(__import__("sys").modules, "rasterio", None)
    assert refused(skyline) == 'dem.tif: needs an extra library; pip install "siteassess[terrain]"'


@pytest.mark.parametrize(
    ("lines", "expected"),
    [
        (
            ["nearest_m = 500", "reach_m = 500"],
            "horizon[1].nearest_m is 500.0; it must be below reach_m, which is 500",
        ),
        (["nearest_m = 5"], "horizon[1].nearest_m is 5; it must lie from 10 to 100000"),
        (["reach_m = 1e6"], "horizon[1].reach_m is 1000000.0; it must lie from 100 to 200000"),
        (
            ['heights = "sea"'],
            'horizon[1].heights is "sea"; it must be "from-raster" or "site"',
        ),
        (
            ['heights = "site"', "mark_above_ground_m = 3"],
            'horizon[1].mark_above_ground_m is 3.0; it goes with heights = "from-raster" only',
        ),
        (
            ["instrument_up_m = 1.6"],
            'horizon[1].instrument_up_m is 1.6; it goes with source = "survey" only',
        ),
        (["ground_up_m = 1"], 'horizon[1].ground_up_m is 1.0; it goes with source = "outlines" only'),
    ],
)
def test_keys_that_do_not_fit_are_refused(lines: list[str], expected: str, skyline: Assess) -> None:
    assert refused(skyline, "dem.tif", *lines) == f"site.toml: {expected}"


def test_the_site_file_needs_its_height_where_it_is_asked_for(skyline: Assess) -> None:
    assert refused(skyline, "dem.tif", 'heights = "site"', site_height="") == (
        'site.toml: horizon[1].heights is "site"; it needs site.height_m'
    )


def test_keys_and_lists_of_terrain_go_with_terrain_only(write_site: Callable[..., Path]) -> None:
    path = write_site(('file = "horizon.csv"', 'file = ["horizon.csv"]\nreach_m = 900'))
    with pytest.raises(InputError) as refusal:
        read_site(path)
    assert str(refusal.value).splitlines() == [
        'site.toml: horizon[1].reach_m is 900.0; it goes with source = "terrain" only',
        'site.toml: horizon[1].file is a list; only source = "terrain" takes one; '
        "give each file its own block",
    ]


@pytest.mark.parametrize(
    ("file", "expected"),
    [
        ("3", "horizon[1].file is 3; it must be a text in quotation marks, or a list of such texts"),
        ("[]", "horizon[1].file is an empty list; it must name at least one"),
        ("[3]", "horizon[1].file[1] is 3; it must be a text in quotation marks"),
        ('["a.tif", ""]', 'horizon[1].file[2] is ""; it must not be blank'),
        ('["a.tif", "a.tif"]', 'horizon[1].file is "a.tif"; it stands there twice; keep one'),
    ],
)
def test_lists_of_files_are_checked(file: str, expected: str, write_site: Callable[..., Path]) -> None:
    path = write_site(('source = "survey"\nfile = "horizon.csv"', f'source = "terrain"\nfile = {file}'))
    with pytest.raises(InputError) as refusal:
        read_site(path)
    assert str(refusal.value) == f"site.toml: {expected}"


def test_published_heights_agree_with_marching_along_geodesics(
    tmp_path: Path, write_site: Callable[..., Path]
) -> None:
    # The elevation model that matplotlib ships, in degrees; its ymin and ymax are swapped.
    data = matplotlib.cbook.get_sample_data("jacksboro_fault_dem.npz")
    step_deg, west_deg, north_deg = float(data["dx"]), float(data["xmin"]), float(data["ymin"])
    save(
        tmp_path / "dem.tif",
        data["elevation"],
        "EPSG:4326",
        from_origin(west_deg, north_deg, step_deg, step_deg),
    )
    height_m = data["elevation"].astype(float)
    latitude_deg, longitude_deg = 36.5893, -84.2461
    path = write_site(
        ("latitude_deg = 48.0", f"latitude_deg = {latitude_deg}"),
        ("longitude_deg = 11.0", f"longitude_deg = {longitude_deg}"),
        ('file = "horizon.csv"', 'file = "dem.tif"\nnearest_m = 500\nreach_m = 12000'),
        ('source = "survey"', 'source = "terrain"'),
    )

    def surface_m(longitude: FloatArray, latitude: FloatArray) -> FloatArray:
        place = [(north_deg - latitude) / step_deg - 0.5, (longitude - west_deg) / step_deg - 0.5]
        return map_coordinates(height_m, place, order=1, mode="nearest")

    eye_m = surface_m(np.array([longitude_deg]), np.array([latitude_deg]))[0] + 1.5
    s = np.arange(500.0, 12_000.0, 1.0)
    expected = []
    for azimuth in AZIMUTHS_DEG.tolist():
        start = np.full(s.shape, longitude_deg), np.full(s.shape, latitude_deg)
        longitude, latitude, _ = Geod(ellps="WGS84").fwd(*start, np.full(s.shape, azimuth), s)
        expected.append(((surface_m(longitude, latitude) - eye_m) / s - s / (2.0 * RADIUS_M)).max())
    found_deg = outline_elevation_deg(read_skyline(read_site(path)), AZIMUTHS_DEG)
    np.testing.assert_allclose(found_deg, np.rad2deg(np.arctan(expected)), atol=SKYLINE_DEG)
