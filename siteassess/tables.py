"""Reads CSV tables: the package's own, with their source headers, and the user's, with line numbers."""

import csv
import re
from collections.abc import Iterator
from importlib import resources

import numpy as np
from numpy.typing import NDArray

__all__ = ["packaged_columns", "packaged_header", "packaged_rows"]

HEADER_KEY = re.compile(r"#\s*([a-z][a-z _]*):\s*(.*)")


def packaged_header(path: str) -> dict[str, str]:
    """What the `#` lines at the top of a packaged table say of it, by key.

    Parameters
    ----------
    path : str
        Such as "link_budget/signals.csv", relative to the package.

    Returns
    -------
    dict
        "source", "edition", "status" and further keys; a `#` line without a key continues the one above.
    """
    header: dict[str, str] = {}
    key = ""
    for line in _lines(path):
        if not line.startswith("#"):
            break
        if found := HEADER_KEY.match(line):
            key = found[1].strip()
            header[key] = found[2].strip()
        elif key:
            header[key] = f"{header[key]} {line.lstrip('#').strip()}".strip()
    return header


def packaged_rows(path: str) -> tuple[dict[str, str], ...]:
    """Rows of a packaged table, each a dictionary from column to text; blank cells are empty texts."""
    lines = (line for line in _lines(path) if line.strip() and not line.startswith("#"))
    return tuple(csv.DictReader(lines, strict=True))


def packaged_columns(path: str) -> dict[str, NDArray[np.float64]]:
    """Columns of a packaged table that holds numbers only; blank cells are NaN. The arrays are read-only."""
    rows = packaged_rows(path)
    columns = {}
    for name in rows[0] if rows else ():
        column = np.array([float(row[name]) if row[name] else np.nan for row in rows])
        column.flags.writeable = False
        columns[name] = column
    return columns


def _lines(path: str) -> Iterator[str]:
    yield from resources.files("siteassess").joinpath(path).read_text("utf-8").splitlines()
