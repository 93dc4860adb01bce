"""siteassess horizon: what it prints, what it writes, and what it leaves alone."""

import json
import shutil
from collections.abc import Callable
from pathlib import Path
from xml.etree import ElementTree

import pytest
from click.testing import CliRunner, Result

from siteassess.cli import main
from siteassess.horizon.read import read_site_skyline
from siteassess.horizon.shares import sky_shares
from siteassess.horizon.skyline import Skyline
from siteassess.report.figures.source_panorama import FILLS, LINES, sources_of

ROOT = Path(__file__).parents[2]
SHARE = 1e-6  # the last decimal of a share in JSON

WriteSite = Callable[..., Path]


def run(*arguments: object) -> Result:
    return CliRunner().invoke(main, ["horizon", *map(str, arguments)])


@pytest.fixture
def ridge(tmp_path: Path) -> Path:
    """A copy of the example with three sources."""
    return Path(shutil.copytree(ROOT / "example_sites" / "ridge_mast", tmp_path / "ridge"))


def test_the_table_names_sectors_obstacles_sources_and_disagreements(ridge: Path) -> None:
    result = run(ridge)
    assert result.exit_code == 0, result.output
    lines = result.stdout.splitlines()
    assert lines[0] == "Askvold ridge, relay mast"
    assert next(line for line in lines if line.split()[:2] == ["N", "NE"]).split() == [
        "N", "NE", "E", "SE", "S", "SW", "W", "NW",
    ]  # fmt: skip
    sources = {line.split("  ")[1]: line.split()[-1] for line in lines if line.endswith((".csv", ".tif"))}
    assert sources["machine room"] == "horizon.csv"
    assert sources["terrain"] == "ground.tif"
    assert "disagree" in result.stdout
    assert all(len(line) <= 125 and line.isascii() for line in lines)
    assert result.stderr == f"Horizon written to {ridge / 'site-horizon'}\n"


def test_what_it_writes_is_the_same_horizon_for_assess(ridge: Path) -> None:
    assert run(ridge).exit_code == 0
    _, before = read_site_skyline(ridge)
    written = ridge / "site-horizon"
    assert sorted(path.name for path in written.iterdir()) == ["horizon.csv", "panorama.svg"]
    text = (ridge / "site.toml").read_text(encoding="utf-8")
    head, tail = text.partition("[[horizon]]")[0], text.partition("[require]")[2]
    block = '[[horizon]]\nsource = "survey"\nfile = "site-horizon/horizon.csv"\ncomplete = true\n'
    (ridge / "again.toml").write_text(f"{head}{block}[require]{tail}", encoding="utf-8")
    _, after = read_site_skyline(ridge / "again.toml")
    one, other = sky_shares(before, 5.0), sky_shares(after, 5.0)
    assert other.blocked_share_above_mask == pytest.approx(one.blocked_share_above_mask, abs=SHARE)
    assert other.unsurveyed_share == pytest.approx(one.unsurveyed_share, abs=SHARE)


def test_same_site_same_bytes(ridge: Path) -> None:
    first, second = ridge / "first", ridge / "second"
    for folder in (first, second):
        assert run(ridge, "--out", folder, "--quiet").stdout == ""
    for name in ("horizon.csv", "panorama.svg"):
        assert (first / name).read_bytes() == (second / name).read_bytes()


def test_json_is_printed_alone_and_writes_nothing(ridge: Path) -> None:
    result = run(ridge, "--json")
    record = json.loads(result.stdout)
    assert record["format"] == "siteassess-horizon/1"
    assert not (ridge / "site-horizon").exists()
    assert [sector["sector"] for sector in record["sectors"]] == ["N", "NE", "E", "SE", "S", "SW", "W", "NW"]
    taken = sum(one["blocked_share_above_mask"] for one in record["obstacles"] if one["cover"] == "solid")
    assert taken == pytest.approx(record["sky"]["blocked_share_above_mask"], abs=1e-5)
    assert record["outline"][0]["from_deg"] == 0.0
    assert record["outline"][-1]["to_deg"] == 360.0
    for piece in record["outline"]:
        obstacle = piece["obstacle"]
        source = None if obstacle is None else record["obstacles"][obstacle]["source"]
        assert piece["source"] == source
    assert [one["model"] for one in record["disagreements"]] == ["buildings.geojson", "ground.tif"]


def test_the_sites_own_survey_is_never_overwritten(write_site: WriteSite) -> None:
    path = write_site()
    before = (path.parent / "horizon.csv").read_bytes()
    result = run(path, "--out", path.parent)
    assert result.exit_code == 1
    assert result.stderr == (
        "Error: horizon.csv: is a file of the site itself and is left alone; name another folder with --out\n"
    )
    assert (path.parent / "horizon.csv").read_bytes() == before
    assert not (path.parent / "panorama.svg").exists()


def test_mistakes_are_named_without_a_traceback(write_site: WriteSite) -> None:
    result = run(write_site(horizon="azimuth_deg,elevation_deg\n0,99\n"))
    assert result.exit_code == 1
    assert result.stderr == "Error: horizon.csv: line 2, elevation_deg is 99; it must lie from -5 to 90\n"


def test_what_nobody_looked_at_is_said(write_site: WriteSite) -> None:
    site = write_site(
        ("complete = true", "complete = false"), horizon="azimuth_deg,elevation_deg\n0,0\n20,0\n340,0\n"
    )
    result = run(site)
    assert "Nobody looked at 20.0 deg to 340.0 deg: 88.9 % above the mask." in result.stdout.replace(
        "\xa0", " "
    )
    skyline = read_site_skyline(site)[1]
    assert skyline.unsurveyed_deg.tolist() == [[20.0, 340.0]]


def test_no_obstacle_at_all(write_site: WriteSite) -> None:
    block = '[[horizon]]\nsource = "survey"\nfile = "horizon.csv"\ncomplete = true\n'
    result = run(write_site((block, "")))
    assert result.exit_code == 0
    assert "No obstacle is known." in result.stdout


def test_the_drawing_tells_the_sources_apart_without_colour(ridge: Path) -> None:
    """Lightness of neighbours differs by a fifth of its range [CIE 1976 L*], or the hatch does."""

    def lightness(colour: str) -> float:
        red, green, blue = (int(colour[k : k + 2], 16) / 255.0 for k in (1, 3, 5))
        linear = [c / 12.92 if c <= 0.04045 else ((c + 0.055) / 1.055) ** 2.4 for c in (red, green, blue)]
        return 116.0 * (0.2126 * linear[0] + 0.7152 * linear[1] + 0.0722 * linear[2]) ** (1 / 3) - 16.0

    for one in range(len(FILLS)):
        for other in range(one):
            first, second = FILLS[one], FILLS[other]
            apart = abs(lightness(first["facecolor"]) - lightness(second["facecolor"]))
            assert apart >= 20.0 or first["hatch"] != second["hatch"], (one, other)
    assert len(set(map(str, LINES))) == len(LINES)
    run(ridge)
    drawing = ElementTree.parse(ridge / "site-horizon" / "panorama.svg").getroot()
    assert drawing.tag.endswith("svg")
    text = (ridge / "site-horizon" / "panorama.svg").read_text(encoding="utf-8")
    skyline: Skyline = read_site_skyline(ridge)[1]
    for number in range(len(sources_of(skyline))):
        assert FILLS[number]["facecolor"] in text
