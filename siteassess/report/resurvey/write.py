"""Writes what two surveys say: four files, all or none."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING

from siteassess.report.put_in_place import NewFile, put_files

if TYPE_CHECKING:
    from siteassess.candidates.resurvey import Resurvey

__all__ = ["RESURVEY_FILES", "write_resurvey"]

RESURVEY_FILES = ("changes.html", "changes.pdf", "changes.json", "changes.svg")


def write_resurvey(
    changes: Resurvey, folder: str | Path, progress: Callable[[str], None] | None = None
) -> None:
    """Write the four files on two surveys into a folder; other files there are left alone.

    Parameters
    ----------
    changes : Resurvey
        Two surveys of one spot.
    folder : str or Path
        Where to; made when it does not exist.
    progress : function, optional
        Called with a few words before each step.

    Raises
    ------
    OutputError
        If the folder or a file cannot be made or replaced; what stood there before still stands.
    """
    put_files(_files(changes, progress or (lambda words: None)), folder, progress)


def _files(changes: Resurvey, tell: Callable[[str], None]) -> Iterator[NewFile]:
    from siteassess.report.document import document_pdf
    from siteassess.report.page import page_html
    from siteassess.report.resurvey.chart import resurvey_svg
    from siteassess.report.resurvey.content import resurvey_content
    from siteassess.report.resurvey.results import resurvey_json

    tell("drawing the horizons")
    figures = {"resurvey": resurvey_svg(changes)}
    content = resurvey_content(changes)
    yield NewFile("changes.html", lambda: page_html(content, figures).encode(), "writing the page")
    yield NewFile("changes.pdf", lambda: document_pdf(content, figures), "setting the document")
    yield NewFile("changes.json", lambda: resurvey_json(changes).encode(), "writing the results")
    yield NewFile("changes.svg", lambda: figures["resurvey"].encode())
