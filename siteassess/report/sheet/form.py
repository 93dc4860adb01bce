"""The field form as a PDF: everything that a survey of the horizon must bring home."""

from __future__ import annotations

import json
from dataclasses import asdict
from importlib import resources
from pathlib import Path
from typing import Any, Literal

from siteassess.report.put_in_place import NewFile, put_files
from siteassess.report.sections.setting import CAUTIONS
from siteassess.report.sheet.fields import CLASSES, COLUMNS, GROUPS, PHOTOGRAPHS, RULES

__all__ = ["Paper", "sheet_content", "sheet_pdf", "write_sheet"]

Paper = Literal["a4", "letter"]

# Rows of 9 mm that fit below the heading of a page.
ROWS_PER_PAGE: dict[Paper, int] = {"a4": 26, "letter": 24}
PAPER_NAMES: dict[Paper, str] = {"a4": "a4", "letter": "us-letter"}
POINTS_PAGES = 2


def sheet_content(paper: Paper) -> dict[str, Any]:
    """All that the form says."""
    from siteassess import __version__

    return {
        "title": "Survey of the horizon: field form",
        "maker": f"siteassess {__version__}",
        "spot": "Spot and sheet",
        "groups": [asdict(group) for group in GROUPS],
        "points_heading": "Break points, as seen from the instrument",
        "columns": [asdict(column) for column in COLUMNS],
        "columns_note": "Columns of horizon.csv, in this order:",
        "rows_per_page": ROWS_PER_PAGE[paper],
        "points_pages": POINTS_PAGES,
        "rules_heading": "Rules for the rows",
        "rules": list(RULES),
        "classes_heading": "Classes of instruments",
        "classes_note": "Errors that hold where none are written down, one standard deviation.",
        "classes_header": ["Class", "azimuth, deg", "elevation, deg", "distance, m"],
        "classes": [[name, *errors] for name, errors in CLASSES.items()],
        "photographs_heading": "Photographs",
        "photographs_note": "Number of the picture toward each direction, with the horizon in its middle.",
        "photographs": list(PHOTOGRAPHS),
        "cautions_heading": "Cautions",
        "cautions": list(CAUTIONS),
        "sketch_heading": "Sketch of the spot",
        "sketch_note": "Mark, antenna, instrument, edges of the roof, and what stands near.",
        "signatures": ["Surveyed by, date", "Checked by, date"],
    }


def sheet_pdf(paper: Paper) -> bytes:
    """The form on one of two papers; the same bytes every time."""
    import typst

    layout = resources.files("siteassess.report.sheet").joinpath("sheet.typ").read_bytes()
    return typst.compile(
        layout,
        format="pdf",
        ignore_system_fonts=True,
        sys_inputs={"content": json.dumps(sheet_content(paper)), "paper": PAPER_NAMES[paper]},
    )


def write_sheet(path: str | Path, paper: Paper) -> None:
    """Write the form into a file; after any error what stood there before still stands.

    Raises
    ------
    OutputError
        If it cannot be written.
    """
    path = Path(path)
    put_files([NewFile(path.name, lambda: sheet_pdf(paper))], path.parent)
