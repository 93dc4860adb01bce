"""Writes the report of a site: five files, all or none."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING

from siteassess.report.put_in_place import NewFile, put_files

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
    put_files(_files(assessment, progress or (lambda words: None)), folder, progress)


def _files(assessment: Assessment, tell: Callable[[str], None]) -> Iterator[NewFile]:
    """The files of the report, the figures being drawn once."""
    from siteassess.report.content import report_content
    from siteassess.report.document import document_pdf
    from siteassess.report.figures.all_figures import report_figures
    from siteassess.report.page import page_html
    from siteassess.report.results import json_text
    from siteassess.report.satellite_table import csv_text

    tell("drawing the sky")
    figures = report_figures(assessment)
    content = report_content(assessment)
    yield NewFile("report.html", lambda: page_html(content, figures).encode(), "writing the page")
    yield NewFile("report.pdf", lambda: document_pdf(content, figures), "setting the document")
    yield NewFile("assessment.json", lambda: json_text(assessment).encode(), "writing the results")
    yield NewFile("satellites.csv", lambda: csv_text(assessment).encode(), "writing the satellites")
    yield NewFile("skyplot.svg", lambda: figures["skyplot"].encode())
