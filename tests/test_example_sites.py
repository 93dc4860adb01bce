"""The invented sites: a spot that passes, one that fails, one close to the limit, one with three sources."""

import json
import runpy
from pathlib import Path

import numpy as np
import pytest

from siteassess import assess, read_site

ROOT = Path(__file__).parent.parent
EXPECTED = json.loads((ROOT / "tests" / "example_sites_expected.json").read_text(encoding="utf-8"))

TENTH_OF_A_PERCENT = 0.001
TWENTIETH_DB = 0.05


@pytest.mark.parametrize("site", EXPECTED)
def test_example_site_gives_what_is_stored(site: str) -> None:
    expected = EXPECTED[site]
    verdict = assess(read_site(ROOT / "example_sites" / site)).verdict
    assert verdict.outcome == expected["verdict"]
    assert [verdict.findings[0].criterion, verdict.findings[0].signal] == expected["worst_finding"]
    for key in ("blocked_share_above_mask", "blocked_satellite_time_share"):
        share = getattr(verdict.sky, key, getattr(verdict, key, None))
        assert share == pytest.approx(expected[key], abs=TENTH_OF_A_PERCENT), key
    assert {signal.signal: signal.usable_share for signal in verdict.signals} == pytest.approx(
        expected["usable_share"], abs=TENTH_OF_A_PERCENT
    )
    assert {signal.signal: signal.cn0_median_dbhz for signal in verdict.signals} == pytest.approx(
        expected["median_cn0_dbhz"], abs=TWENTIETH_DB
    )
    assert {
        obstacle.name: obstacle.blocked_share_above_mask for obstacle in verdict.obstacles
    } == pytest.approx(expected["obstacle_blocked_share"], abs=TENTH_OF_A_PERCENT)


def test_the_three_spots_tell_three_stories() -> None:
    verdicts = {site.rpartition("/")[2]: expected["verdict"] for site, expected in EXPECTED.items()}
    assert verdicts["quay_office"] == "pass"
    assert verdicts["silo_yard"] == "fail"
    near = EXPECTED["harbour/tree_line"]["usable_share"].values()
    assert min(near) < 0.95 < max(near)  # some signals on either side of the limit
    assert all(abs(share - 0.95) < 0.015 for share in near)


def test_sky_stays_open_below_the_crane_jib() -> None:
    """A direction through the gap between roof and jib is open; one through the jib is not."""
    from siteassess.horizon.read import read_skyline
    from siteassess.horizon.view import hiding_obstacle

    skyline = read_skyline(read_site(ROOT / "example_sites/harbour/silo_yard"))
    below, inside, above = hiding_obstacle(skyline, [250.0, 250.0, 250.0], [15.0, 32.0, 45.0]).tolist()
    assert skyline.obstacles[inside].name == "crane jib"
    assert (below, above) == (-1, -1)


def test_the_ground_below_the_ridge_is_what_its_builder_says() -> None:
    """The raster holds the invented landscape to half a decimetre, and stays small."""
    import rasterio

    builder = runpy.run_path(str(ROOT / "tests" / "builders" / "build_ridge_terrain.py"))
    path = ROOT / builder["RASTER"]
    assert path.stat().st_size < 60_000
    with rasterio.open(path) as raster:
        rows, columns = np.mgrid[: raster.height, : raster.width]
        cells = raster.transform
        easting_m, northing_m = cells.c + cells.a * (columns + 0.5), cells.f + cells.e * (rows + 0.5)
        height_m = raster.read(1) * raster.scales[0] + raster.offsets[0]
    ground_m = builder["ground_m"](easting_m - builder["EASTING_M"], northing_m - builder["NORTHING_M"])
    np.testing.assert_allclose(height_m, ground_m, atol=0.5 * builder["STEP_M"] + 1e-6)
