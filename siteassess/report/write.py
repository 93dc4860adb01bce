"""Puts a report in place: all files, or none."""

from __future__ import annotations

import errno
import secrets
import shutil
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

from siteassess.errors import Mistake, OutputError

if TYPE_CHECKING:
    from siteassess.assessment import Assessment

__all__ = ["FILES", "write_report"]

FILES = ("report.html", "report.pdf", "assessment.json", "satellites.csv", "skyplot.svg")


def write_report(
    assessment: Assessment, folder: str | Path, progress: Callable[[str], None] | None = None
) -> None:
    """Write the five files of a report into a folder; other files there are left alone.

    All are made in a temporary folder first. After any error what stood there before still stands.

    Parameters
    ----------
    assessment : Assessment
        What `assess` returned.
    folder : str or Path
        Where to; made when it does not exist.
    progress : function, optional
        Called with a few words before each step.

    Raises
    ------
    OutputError
        If the folder or a file cannot be made or replaced.
    """
    folder = Path(folder)
    tell = progress or (lambda words: None)
    try:
        _write(assessment, folder, tell)
    except OSError as error:
        raise OutputError(
            Mistake(
                file=folder.name or str(folder),
                where="",
                problem=f"the report cannot be written: {error.strerror or error}",
                allowed="what stood there before is unchanged",
                value=str(folder),
            )
        ) from error


def _write(assessment: Assessment, folder: Path, tell: Callable[[str], None]) -> None:
    # Inside a folder that exists: beside it may lie on another disk, where nothing can be renamed to.
    home = folder if folder.is_dir() else folder.parent
    for place in (folder, *folder.parents):
        if place.exists() and not place.is_dir():
            raise NotADirectoryError(errno.ENOTDIR, f"{place.name} is a file, not a folder")
    home.mkdir(parents=True, exist_ok=True)
    fresh = home / f".siteassess-{secrets.token_hex(4)}"
    fresh.mkdir()
    try:
        for name, make in _makers(assessment, tell):
            (fresh / name).write_bytes(make())
        tell("putting the report in place")
        _put_in_place(fresh, folder)
    finally:
        shutil.rmtree(fresh, ignore_errors=True)


def _makers(assessment: Assessment, tell: Callable[[str], None]) -> list[tuple[str, Callable[[], bytes]]]:
    """Names of the files and what makes them, the figures being drawn once."""
    from siteassess.report.content import report_content
    from siteassess.report.document import document_pdf
    from siteassess.report.page import page_html
    from siteassess.report.panorama import panorama_svg
    from siteassess.report.results import json_text
    from siteassess.report.satellite_table import csv_text
    from siteassess.report.skyplot import skyplot_svg

    tell("drawing the sky")
    figures = {"skyplot": skyplot_svg(assessment), "panorama": panorama_svg(assessment)}
    content = report_content(assessment)

    def told(words: str, make: Callable[[], bytes]) -> Callable[[], bytes]:
        def step() -> bytes:
            tell(words)
            return make()

        return step

    return [
        ("report.html", told("writing the page", lambda: page_html(content, figures).encode())),
        ("report.pdf", told("setting the document", lambda: document_pdf(content, figures))),
        ("assessment.json", told("writing the results", lambda: json_text(assessment).encode())),
        ("satellites.csv", told("writing the satellites", lambda: csv_text(assessment).encode())),
        ("skyplot.svg", lambda: figures["skyplot"].encode()),
    ]


def _put_in_place(fresh: Path, folder: Path) -> None:
    """Rename the whole folder where there was none; else swap file by file, and back again on any error."""
    if not folder.exists():
        try:
            fresh.rename(folder)
            return
        except OSError:
            if not folder.is_dir():  # else another run has made it meanwhile
                raise
    before = fresh / "before"
    before.mkdir()
    stood = [name for name in FILES if (folder / name).exists()]
    for name in stood:
        shutil.copy2(folder / name, before / name)
    swapped: list[str] = []
    try:
        for name in FILES:
            (fresh / name).replace(folder / name)
            swapped.append(name)
    except BaseException:
        for name in swapped:
            if name in stood:
                (before / name).replace(folder / name)
            else:
                (folder / name).unlink()
        raise
