"""siteassess rank: what goes where, the exit status, and bytes that do not depend on how sites are named."""

import json
import os
import random
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import pytest
from click.testing import CliRunner, Result

from siteassess.cli import main
from siteassess.report.ranking.write import RANKING_FILES

WriteSite = Callable[..., Path]

QUICK = "\n[sky]\ndays = 0.1\nstep_s = 900\n"
HOPELESS = ("min_cn0_dbhz = 33", "min_cn0_dbhz = 70")
GAP = "azimuth_deg,elevation_deg\n0,0\n90,0\n"


def run(*arguments: str | Path) -> Result:
    return CliRunner().invoke(main, ["rank", *(str(argument) for argument in arguments)])


@pytest.fixture
def roofs(write_site: WriteSite) -> Path:
    """An open roof, one that nobody looked round on, and one that asks for too much."""
    write_site(("Test roof", "Open roof"), extra=QUICK, folder="open")
    unknown = (("Test roof", "Dark roof"), ("complete = true", "complete = false"))
    write_site(*unknown, extra=QUICK, folder="dark", horizon=GAP)
    return write_site(("Test roof", "Proud roof"), HOPELESS, extra=QUICK, folder="proud").parent.parent


def sites_of(roofs: Path) -> list[Path]:
    return [roofs / name for name in ("proud", "open", "dark")]


def files(folder: Path) -> dict[str, bytes]:
    return {path.name: path.read_bytes() for path in sorted(folder.iterdir())}


def test_best_stands_first_on_the_terminal_and_five_files_in_the_folder(
    roofs: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(roofs)
    result = run("proud", "open", "dark")
    assert result.exit_code == 0
    first, *lines = result.stdout.splitlines()
    assert first.split() == ["no.", "spot", "verdict", "missed", "margin", "satellites", "beaten", "by"]
    assert [line.split()[:4] for line in lines[:3]] == [
        ["1", "Open", "roof", "passes"],
        ["2", "Dark", "roof", "unproven"],
        ["3", "Proud", "roof", "fails"],
    ]
    assert lines[3:] == ["The site files differ in require.min_cn0_dbhz."]
    assert result.stderr == "Ranking written to ranking-report\n"
    assert sorted(path.name for path in (roofs / "ranking-report").iterdir()) == sorted(RANKING_FILES)


def test_json_alone_writes_nothing(roofs: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (roofs / "empty").mkdir()
    monkeypatch.chdir(roofs / "empty")
    result = run(*sites_of(roofs), "--json")
    assert (result.exit_code, result.stderr) == (0, "")
    record = json.loads(result.stdout)
    assert record["format"] == "siteassess-ranking/1"
    assert [site["site"] for site in record["ranking"]] == ["open", "dark", "proud"]
    assert list((roofs / "empty").iterdir()) == []


def test_json_beside_a_report_is_the_same(roofs: Path, tmp_path: Path) -> None:
    result = run(*sites_of(roofs), "--json", "--quiet", "--out", tmp_path / "out")
    assert result.stdout.encode() == (tmp_path / "out" / "ranking.json").read_bytes()


def test_quiet_says_nothing(roofs: Path, tmp_path: Path) -> None:
    result = run(*sites_of(roofs), roofs / "open", "--quiet", "--out", tmp_path / "out")
    assert (result.exit_code, result.output) == (0, "")


def test_site_named_twice_counts_once(roofs: Path, tmp_path: Path) -> None:
    result = run(roofs / "open", roofs / "open" / "site.toml", "--out", tmp_path / "out")
    assert result.exit_code == 0
    assert len(result.stdout.splitlines()) == 2
    assert result.stderr.splitlines()[0] == f"{roofs / 'open'} is named more than once; it counts once"


def test_bad_site_is_named_and_the_others_are_ranked(roofs: Path, tmp_path: Path) -> None:
    result = run(roofs / "gone", roofs / "open", roofs, "--out", tmp_path / "out")
    assert result.exit_code == 1
    assert result.stdout.splitlines()[1].split()[:3] == ["1", "Open", "roof"]
    assert result.stderr.splitlines() == [
        f"Ranking written to {tmp_path / 'out'}",
        f"Error: {roofs}: site.toml: there is no such file; it was looked for as {roofs / 'site.toml'}",
        f"Error: {roofs / 'gone'}: there is no such file; it was looked for as {roofs / 'gone'}",
    ]
    refused = json.loads((tmp_path / "out" / "ranking.json").read_text())["refused"]
    assert [site["site"] for site in refused] == [roofs.name, f"{roofs.name}/gone"]


def test_only_bad_sites_write_and_print_nothing(roofs: Path, tmp_path: Path) -> None:
    result = run(roofs / "gone", "--json", "--out", tmp_path / "out")
    assert (result.exit_code, result.stdout) == (1, "")
    assert result.stderr.startswith("Error: ")
    assert not (tmp_path / "out").exists()


def test_bad_site_outweighs_a_missing_pass(roofs: Path) -> None:
    assert run(roofs / "gone", roofs / "proud", "--json", "--require-pass").exit_code == 1


def test_require_pass(roofs: Path) -> None:
    assert run(*sites_of(roofs), "--json", "--require-pass").exit_code == 0
    assert run(roofs / "dark", roofs / "proud", "--json", "--require-pass").exit_code == 3
    assert run(roofs / "dark", roofs / "proud", "--json").exit_code == 0


@pytest.mark.parametrize("arguments", [[], ["--jobs", "0", "x"], ["--jobs", "two", "x"], ["--nonsense", "x"]])
def test_wrong_command_line(arguments: list[str]) -> None:
    result = run(*arguments)
    assert (result.exit_code, result.stdout) == (2, "")


def test_file_in_place_of_the_folder_is_refused(roofs: Path, tmp_path: Path) -> None:
    (tmp_path / "out").write_text("what stood there before")
    result = run(roofs / "open", "--out", tmp_path / "out")
    assert result.exit_code == 1
    assert result.stderr == (
        "Error: out: the report cannot be written: out is a file, not a folder; "
        "what stood there before is unchanged\n"
    )


def test_same_sites_give_the_same_bytes_in_any_order_and_number_of_processes(
    roofs: Path, tmp_path: Path
) -> None:
    """Another process in another folder with another time zone, language and hash seed."""
    sites = [*sites_of(roofs), roofs / "gone"]
    run(*sites, "--quiet", "--out", tmp_path / "here")
    shuffled = [os.path.relpath(site, roofs / "open") for site in random.Random(1).sample(sites, len(sites))]
    command = [sys.executable, "-W", "error", "-m", "siteassess", "rank", *shuffled, "--jobs", "2", "--quiet"]
    elsewhere = os.environ | {"TZ": "Pacific/Chatham", "LC_ALL": "C", "PYTHONHASHSEED": "4711"}
    done = subprocess.run(
        [*command, "--out", str(tmp_path / "there")],
        env=elsewhere, cwd=roofs / "open", capture_output=True, check=False,
    )  # fmt: skip
    assert done.returncode == 1
    assert sorted(files(tmp_path / "here")) == sorted(RANKING_FILES)
    assert files(tmp_path / "here") == files(tmp_path / "there")
    assert not any(str(tmp_path).encode() in data for data in files(tmp_path / "here").values())


def test_command_page_shows_a_mistake_as_it_is_printed(
    write_site: WriteSite, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    page = Path("docs/cli.md").read_text(encoding="utf-8")
    (tmp_path / "harbour").mkdir()
    write_site(("mast_height_m = 1.5", "mast_height_m = -3.0"), folder="harbour/silo_yard")
    monkeypatch.chdir(tmp_path)
    result = run("harbour/silo_yard")
    assert (result.exit_code, result.stdout) == (1, "")
    assert f"```text\n{result.stderr}```" in page
