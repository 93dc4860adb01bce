"""Putting a report in place: all of it or nothing, and the same bytes each time."""

import errno
import hashlib
import os
import subprocess
import sys
from pathlib import Path

import pytest

from siteassess.errors import OutputError
from siteassess.report import document, satellite_table
from siteassess.report.write import FILES, write_report

OLD = b"what stood there before"


def fingerprints(folder):
    return {path.name: hashlib.sha256(path.read_bytes()).hexdigest() for path in sorted(folder.iterdir())}


@pytest.fixture
def old_report(tmp_path):
    folder = tmp_path / "report"
    folder.mkdir()
    for name in (*FILES, "photo.jpg"):
        (folder / name).write_bytes(OLD)
    return folder


def assert_untouched(folder):
    assert sorted(path.name for path in folder.iterdir()) == sorted((*FILES, "photo.jpg"))
    assert all(path.read_bytes() == OLD for path in folder.iterdir())
    assert sorted(path.name for path in folder.parent.iterdir()) == [folder.name]


def test_report_is_five_files(markup_assessment, tmp_path):
    steps = []
    write_report(markup_assessment, tmp_path / "new" / "report", steps.append)
    assert sorted(path.name for path in (tmp_path / "new" / "report").iterdir()) == sorted(FILES)
    assert [path.name for path in (tmp_path / "new").iterdir()] == ["report"]
    assert len(steps) >= 5
    for name in ("report.html", "assessment.json", "satellites.csv", "skyplot.svg"):
        data = (tmp_path / "new" / "report" / name).read_bytes()
        data.decode("utf-8")
        assert b"\r" not in data
        assert str(tmp_path).encode() not in data


def test_other_files_of_the_folder_stay(markup_assessment, old_report):
    write_report(markup_assessment, old_report)
    assert (old_report / "photo.jpg").read_bytes() == OLD
    assert all((old_report / name).read_bytes() != OLD for name in FILES)
    assert sorted(path.name for path in old_report.iterdir()) == sorted((*FILES, "photo.jpg"))


def test_full_disk_leaves_the_old_report(markup_assessment, old_report, monkeypatch):
    def no_space(*_):
        raise OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))

    monkeypatch.setattr(satellite_table, "csv_text", no_space)
    with pytest.raises(OutputError) as caught:
        write_report(markup_assessment, old_report)
    assert str(caught.value) == (
        "report: the report cannot be written: No space left on device; what stood there before is unchanged"
    )
    assert_untouched(old_report)


@pytest.mark.parametrize("failing", range(len(FILES)))
def test_failing_rename_puts_the_old_files_back(markup_assessment, old_report, monkeypatch, failing):
    replace, calls = Path.replace, []

    def sometimes(self, target):
        calls.append(target)
        if len(calls) == failing + 1:
            raise PermissionError(errno.EACCES, "Permission denied")
        return replace(self, target)

    monkeypatch.setattr(Path, "replace", sometimes)
    with pytest.raises(OutputError):
        write_report(markup_assessment, old_report)
    assert_untouched(old_report)


def test_failing_rename_removes_what_was_not_there(markup_assessment, tmp_path, monkeypatch):
    (tmp_path / "report").mkdir()
    replace = Path.replace

    def not_the_last(self, target):
        if Path(target).name == FILES[-1]:
            raise PermissionError(errno.EACCES, "Permission denied")
        return replace(self, target)

    monkeypatch.setattr(Path, "replace", not_the_last)
    with pytest.raises(OutputError):
        write_report(markup_assessment, tmp_path / "report")
    assert list((tmp_path / "report").iterdir()) == []


def test_error_that_is_no_io_error_leaves_the_old_report_too(markup_assessment, old_report, monkeypatch):
    def broken(*_):
        raise RuntimeError("layout")

    monkeypatch.setattr(document, "document_pdf", broken)
    with pytest.raises(RuntimeError):
        write_report(markup_assessment, old_report)
    assert_untouched(old_report)


def test_file_in_place_of_the_folder_is_refused(markup_assessment, tmp_path):
    (tmp_path / "report").write_bytes(OLD)
    with pytest.raises(OutputError) as caught:
        write_report(markup_assessment, tmp_path / "report")
    assert str(caught.value) == (
        "report: the report cannot be written: report is a file, not a folder; "
        "what stood there before is unchanged"
    )
    assert (tmp_path / "report").read_bytes() == OLD
    assert [path.name for path in tmp_path.iterdir()] == ["report"]


def test_folder_below_a_file_is_refused(markup_assessment, tmp_path):
    (tmp_path / "roof").write_bytes(OLD)
    with pytest.raises(
        OutputError, match="report: the report cannot be written: roof is a file, not a folder; "
    ):
        write_report(markup_assessment, tmp_path / "roof" / "report")


RUN = """
import sys
from pathlib import Path
from siteassess import assess, read_site
from siteassess.report.write import write_report
write_report(assess(read_site(Path(sys.argv[1]))), Path(sys.argv[2]))
"""


def test_same_site_gives_the_same_bytes_wherever_and_whenever(markup_assessment, markup_site, tmp_path):
    """Another process with another time zone, language, hash seed, working folder and matplotlib settings."""
    write_report(markup_assessment, tmp_path / "here")
    (tmp_path / "matplotlibrc").write_text("axes.facecolor: red\nfont.size: 20\nsavefig.facecolor: black\n")
    elsewhere = os.environ | {
        "TZ": "Pacific/Chatham",
        "LANG": "C",
        "LC_ALL": "C",
        "PYTHONHASHSEED": "4711",
        "SOURCE_DATE_EPOCH": "1",
        "MATPLOTLIBRC": str(tmp_path / "matplotlibrc"),
    }
    arguments = [sys.executable, "-W", "error", "-c", RUN, str(markup_site), str(tmp_path / "there")]
    subprocess.run(arguments, env=elsewhere, cwd=tmp_path, check=True)
    assert fingerprints(tmp_path / "here") == fingerprints(tmp_path / "there")
