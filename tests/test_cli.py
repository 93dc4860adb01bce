"""The command line: what goes where, and the exit status."""

import json
import os
import signal
import subprocess
import sys
from collections.abc import Callable
from pathlib import Path

import pytest
from click.testing import CliRunner, Result

from siteassess.cli import main
from siteassess.report.write import FILES

WriteSite = Callable[..., Path]

QUICK = "\n[sky]\ndays = 0.1\nstep_s = 900\n"
HOPELESS = ("min_cn0_dbhz = 33", "min_cn0_dbhz = 70")


def run(*arguments: str | Path) -> Result:
    return CliRunner().invoke(main, [str(argument) for argument in arguments])


def run_process(*arguments: str | Path, cwd: Path, **environment: str) -> subprocess.CompletedProcess[bytes]:
    command = [sys.executable, "-W", "error", "-m", "siteassess", *map(str, arguments)]
    return subprocess.run(command, env=os.environ | environment, cwd=cwd, capture_output=True, check=False)


def names(folder: Path) -> list[str]:
    return sorted(path.name for path in folder.iterdir())


def test_report_stands_beside_the_site_file(write_site: WriteSite) -> None:
    site = write_site(extra=QUICK)
    result = run("assess", site.parent)
    assert result.exit_code == 0
    assert result.stdout.startswith("Test roof: PASS\n")
    assert result.stderr == f"Report written to {site.parent / 'site-report'}\n"
    assert names(site.parent / "site-report") == sorted(FILES)


def test_site_file_of_another_name_has_a_report_of_its_own(write_site: WriteSite) -> None:
    site = write_site(extra=QUICK).rename(write_site().with_name("north parapet.toml"))
    assert run("assess", site, "--quiet").exit_code == 0
    assert names(site.parent / "north parapet-report") == sorted(FILES)


def test_out_names_the_folder(write_site: WriteSite, tmp_path: Path) -> None:
    site = write_site(extra=QUICK, folder="site")
    assert run("assess", site, "--out", tmp_path / "reports" / "roof").exit_code == 0
    assert names(tmp_path / "reports" / "roof") == sorted(FILES)
    assert names(site.parent) == ["horizon.csv", "site.toml"]


def test_quiet_prints_nothing(write_site: WriteSite) -> None:
    result = run("assess", write_site(extra=QUICK), "--quiet")
    assert (result.exit_code, result.output) == (0, "")


def test_json_alone_is_printed_and_nothing_is_written(write_site: WriteSite) -> None:
    site = write_site(extra=QUICK)
    result = run("assess", site, "--json")
    assert (result.exit_code, result.stderr) == (0, "")
    assert json.loads(result.stdout)["verdict"] == "pass"
    assert names(site.parent) == ["horizon.csv", "site.toml"]


def test_json_and_out_hold_the_same(write_site: WriteSite, tmp_path: Path) -> None:
    result = run("assess", write_site(extra=QUICK, folder="site"), "--json", "--out", tmp_path / "report")
    assert result.stdout_bytes == (tmp_path / "report" / "assessment.json").read_bytes()


@pytest.mark.parametrize(("changes", "status"), [((), 0), ((HOPELESS,), 3)])
def test_status_tells_the_verdict_only_when_asked(
    write_site: WriteSite, changes: tuple[tuple[str, str], ...], status: int
) -> None:
    site = write_site(*changes, extra=QUICK)
    assert run("assess", site, "--json").exit_code == 0
    assert run("assess", site, "--json", "--require-pass").exit_code == status
    assert run("assess", site, "--quiet", "--require-pass").exit_code == status
    assert names(site.parent / "site-report") == sorted(FILES)


def test_each_mistake_is_a_line_on_standard_error(write_site: WriteSite) -> None:
    site = write_site(
        ("elevation_mask_deg = 10", "elevation_mask_deg = 90"), horizon="azimuth_deg,elevation_deg\n0,95\n"
    )
    result = run("assess", site, "--require-pass")
    assert (result.exit_code, result.stdout) == (1, "")
    assert result.stderr == (
        "Error: site.toml: require.elevation_mask_deg is 90; it must be at least 0 and below 90\n"
        "Error: horizon.csv: line 2, elevation_deg is 95; it must lie from -5 to 90\n"
    )
    assert names(site.parent) == ["horizon.csv", "site.toml"]


def test_missing_site_file_is_no_wrong_command_line(tmp_path: Path) -> None:
    result = run("assess", tmp_path / "roof.toml")
    assert (result.exit_code, result.stdout) == (1, "")
    assert result.stderr == (
        f"Error: roof.toml: there is no such file; it was looked for as {tmp_path / 'roof.toml'}\n"
    )


@pytest.mark.skipif(os.name != "posix", reason="Windows has no such names")
def test_names_of_files_cannot_steer_the_terminal(tmp_path: Path) -> None:
    missing = run("assess", tmp_path / "roof\x1b[31m.toml").stderr
    assert missing.startswith("Error: roof [31m.toml: there is no such file; ")
    assert "\x1b" not in missing + run("new", tmp_path / "\x1b[31m\u202eroof").stderr


@pytest.mark.parametrize("arguments", [("assess",), ("assess", "roof.toml", "--bogus"), ("asses",), ("new",)])
def test_wrong_command_line(arguments: tuple[str, ...]) -> None:
    result = run(*arguments)
    assert (result.exit_code, result.stdout) == (2, "")


def test_new_site_assesses_at_once(tmp_path: Path) -> None:
    folder = tmp_path / "Dächer & Süd"
    result = run("new", folder)
    assert (result.exit_code, result.stdout) == (0, "")
    assert result.stderr.endswith(f"\n  siteassess assess '{folder}'\n")
    assert run("assess", folder, "--json", "--require-pass").exit_code == 0


def test_folder_that_looks_like_an_option(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    assert run("new", "--", "-roof").stderr.endswith("\n  siteassess assess -- -roof\n")
    assert names(tmp_path / "-roof") == ["horizon.csv", "site.toml"]


def test_new_site_needs_an_empty_folder(tmp_path: Path) -> None:
    (tmp_path / "photo.jpg").write_bytes(b"")
    result = run("new", tmp_path)
    assert (result.exit_code, result.stdout) == (1, "")
    assert result.stderr == (
        f"Error: {tmp_path.name}: the folder is not empty; a new site needs a new or an empty folder\n"
    )


@pytest.mark.parametrize("arguments", [("--help",), ("assess", "--help"), ("new", "--help")])
def test_every_help_has_an_example(arguments: tuple[str, ...]) -> None:
    result = run(*arguments)
    assert result.exit_code == 0
    assert "Example:\n  siteassess " in "\n".join(line[2:] for line in result.stdout.splitlines())


def test_names_in_any_writing_reach_any_output(write_site: WriteSite) -> None:
    site = write_site(('"Test roof"', '"D\u00e4cher \u5317\u5854"'), extra=QUICK)
    western = {"PYTHONIOENCODING": "cp1252"}
    printed = run_process("assess", site, "--json", cwd=site.parent, **western)
    assert (printed.returncode, printed.stderr) == (0, b"")
    assert json.loads(printed.stdout.decode("utf-8"))["site"]["name"] == "D\u00e4cher \u5317\u5854"
    summary = run_process("assess", site, cwd=site.parent, **western)
    assert summary.returncode == 0
    assert summary.stdout.decode("cp1252").startswith("D\u00e4cher ??: PASS")


def test_no_word_of_a_home_that_cannot_be_written(write_site: WriteSite, tmp_path: Path) -> None:
    site = write_site(extra=QUICK)
    (tmp_path / "file").write_bytes(b"")
    nowhere = str(tmp_path / "file" / "home")
    result = run_process("assess", site, cwd=tmp_path, HOME=nowhere, MPLCONFIGDIR=nowhere)
    assert result.returncode == 0
    assert result.stderr.decode().splitlines() == [f"Report written to {site.parent / 'site-report'}"]


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="no device that is always full")
def test_output_that_cannot_be_written_ends_without_a_traceback(write_site: WriteSite) -> None:
    command = [sys.executable, "-m", "siteassess", "assess", str(write_site(extra=QUICK)), "--json"]
    with Path("/dev/full").open("wb") as full:
        result = subprocess.run(command, stdout=full, stderr=subprocess.PIPE, check=False)
    assert result.returncode == 1
    assert result.stderr == b"Error: the output cannot be written; no space left on device\n"


def raises_interrupt(*_: object) -> None:
    signal.raise_signal(signal.SIGINT)


def turns_interrupt_into_an_import_error(*_: object) -> None:
    """What compiled libraries do when they are interrupted while they load."""
    try:
        signal.raise_signal(signal.SIGINT)
    except KeyboardInterrupt:
        raise ImportError("no module") from None


@pytest.mark.parametrize("interrupted", [raises_interrupt, turns_interrupt_into_an_import_error])
def test_interrupted_run_leaves_nothing_behind(
    write_site: WriteSite, monkeypatch: pytest.MonkeyPatch, interrupted: Callable[..., None]
) -> None:
    site = write_site(extra=QUICK)
    monkeypatch.setattr("siteassess.report.document.document_pdf", interrupted)
    before = signal.signal(signal.SIGINT, signal.default_int_handler)
    try:
        result = run("assess", site)
    finally:
        signal.signal(signal.SIGINT, before)
    assert (result.exit_code, result.stdout, result.stderr.strip()) == (1, "", "Aborted!")
    assert names(site.parent) == ["horizon.csv", "site.toml"]


def test_progress_stays_off_where_nobody_watches(write_site: WriteSite) -> None:
    site = write_site(extra=QUICK)
    assert b"\x1b" not in run_process("assess", site, cwd=site.parent).stderr


@pytest.mark.skipif(os.name != "posix", reason="terminals of POSIX")
@pytest.mark.parametrize(("options", "shown"), [((), True), (("--quiet",), False)])
def test_progress_shows_on_a_terminal(write_site: WriteSite, options: tuple[str, ...], shown: bool) -> None:
    import pty

    ours, theirs = pty.openpty()
    command = [sys.executable, "-m", "siteassess", "assess", str(write_site(extra=QUICK)), *options]
    try:
        subprocess.run(command, stdout=subprocess.DEVNULL, stderr=theirs, check=True)
        os.write(theirs, b"end")
        seen = os.read(ours, 10_000)
    finally:
        os.close(ours)
        os.close(theirs)
    assert (b"drawing the sky ..." in seen) == shown
    assert shown or seen == b"end"
