"""The command that prints the figures of an antenna."""

import json
import math
from pathlib import Path
from xml.etree import ElementTree

import pytest
from click.testing import CliRunner, Result

from siteassess.cli import main

ROW = "  {:<34}{:>16}"


def run(*arguments: str) -> Result:
    return CliRunner().invoke(main, ["antenna", *arguments])


def test_table_of_a_built_in_pattern() -> None:
    # Closed form: a hemisphere has twice the isotropic gain, 3.01 dB, a beam within 90 degrees of the zenith,
    # and at L1 twice 0.190294^2 / (4 pi) m2 or 57.6 cm2 of area.
    result = run("hemisphere")
    assert (result.exit_code, result.stderr) == (0, "")
    assert result.stdout.splitlines()[:8] == [
        "hemisphere",
        ROW.format("", "every carrier"),
        ROW.format("Highest gain, dBic", "3.0"),
        ROW.format("  toward azimuth / elevation, deg", "0 / 90"),
        ROW.format("Directivity, dBic", "3.0"),
        ROW.format("Efficiency", "100.0 %"),
        ROW.format("  of it cross-polar", "-"),
        ROW.format("Half-power width, deg", "180.0"),
    ]
    assert ROW.format("Effective area, cm2, 1575.42 MHz", "57.6") in result.stdout
    assert result.stdout.isascii()


def test_table_has_a_column_for_each_carrier(tmp_path: Path) -> None:
    path = tmp_path / "two.csv"
    rows = [
        f"{carrier},{azimuth},{elevation},{elevation / 18 - 6 + shift + 0.01 * azimuth * (elevation < 90)}"
        for carrier, shift in (("1575.42e6", 0), ("1176.45e6", -1))
        for azimuth in (0, 90, 180, 270)
        for elevation in range(0, 91, 15)
    ]
    path.write_text("\n".join(["carrier_hz,azimuth_deg,elevation_deg,gain_dbic", *rows]), encoding="utf-8")
    lines = run(str(path)).stdout.splitlines()
    assert lines[1] == f"  {'':<34}{'1176.45 MHz':>16}{'1575.42 MHz':>16}"
    assert any(line.startswith("    lowest to highest") for line in lines)
    assert any(line.startswith("  The pattern ends at elevation 0;") for line in lines)


def test_json_is_all_that_is_printed() -> None:
    result = run("choke-ring", "--json")
    record = json.loads(result.stdout)
    assert record["format"] == "siteassess-antenna/1"
    assert record["pattern"] == "choke-ring"
    (figures,) = record["carriers"]
    assert figures["carrier_hz"] is None
    assert [gain["elevation_deg"] for gain in figures["gain"]] == [5.0, 10.0, 30.0, 90.0]
    assert figures["directivity_dbic"] == pytest.approx(
        figures["peak_gain_dbic"] - 10 * math.log10(figures["efficiency_share"]), abs=0.002
    )


def test_drawing_is_the_same_every_time(tmp_path: Path) -> None:
    path = tmp_path / "cut.svg"
    assert run("patch", "--out", str(path)).exit_code == 0
    first = path.read_bytes()
    assert ElementTree.fromstring(first).tag == "{http://www.w3.org/2000/svg}svg"
    run("patch", "--out", str(path))
    assert path.read_bytes() == first
    assert sorted(tmp_path.iterdir()) == [path]


REFUSED = {
    "unknown": (
        ["chokering"],
        1,
        "Error: chokering: there is no such antenna pattern; did you mean choke-ring?",
    ),
    "like nothing known": (
        ["x"],
        1,
        "Error: x: there is no such antenna pattern; built in are isotropic, hemisphere, patch, ground-plane"
        " and choke-ring; a file ends in .csv",
    ),
    "no such file": (
        ["nowhere.csv"],
        1,
        "Error: nowhere.csv: there is no such file; it was looked for as nowhere.csv",
    ),
    "no folder to draw into": (
        ["patch", "--out", "nowhere/cut.svg"],
        1,
        "Error: cut.svg: the drawing cannot be written: no such file or directory; what stood there before is"
        " unchanged",
    ),
    "no SVG": (
        ["patch", "--out", "cut.png"],
        2,
        "Error: Invalid value for --out: the drawing is an SVG: its name must end in .svg",
    ),
    "nothing": ([], 2, "Error: Missing argument 'PATTERN'."),
}


@pytest.mark.parametrize(("arguments", "status", "message"), REFUSED.values(), ids=REFUSED.keys())
def test_one_clear_message_for_each_mistake(
    arguments: list[str], status: int, message: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(tmp_path)
    result = run(*arguments)
    assert (result.exit_code, result.stdout) == (status, "")
    assert result.stderr.splitlines()[-1] == message
