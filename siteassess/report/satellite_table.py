"""Every satellite and signal as a table: satellites.csv, and a data frame for Python."""

from __future__ import annotations

import csv
from dataclasses import fields
from io import StringIO
from typing import TYPE_CHECKING

from siteassess.report.phrases import plain
from siteassess.verdict.verdict import SatelliteShare

if TYPE_CHECKING:
    import pandas as pd

    from siteassess.assessment import Assessment

__all__ = ["csv_text", "satellite_frame", "spreadsheet_safe"]

DECIMALS = {"share": 6, "dbw": 3, "dbhz": 3, "day": 3}
FORMULA_SIGNS = ("=", "+", "-", "@")


def satellite_frame(assessment: Assessment) -> pd.DataFrame:
    """One row a satellite and signal; columns are the fields of `SatelliteShare`.

    Values are rounded as in the JSON; NaN where a satellite is never seen.
    """
    import pandas as pd

    header, rows = _table(assessment)
    texts = ("satellite", "system", "orbit_class", "signal")
    numbers = dict.fromkeys((name for name in header if name not in texts), float)
    return pd.DataFrame(rows, columns=header).astype(numbers)


def csv_text(assessment: Assessment) -> str:
    """The table as CSV; text cells that a spreadsheet would take for a formula get a leading apostrophe."""
    # The csv module, because a report need not wait a third of a second for pandas to load.
    text = StringIO()
    header, rows = _table(assessment)
    write = csv.writer(text, lineterminator="\n")
    write.writerow(header)
    write.writerows(
        [spreadsheet_safe(cell) if isinstance(cell, str) else cell for cell in row] for row in rows
    )
    return text.getvalue()


def _table(assessment: Assessment) -> tuple[list[str], list[list[str | float | None]]]:
    """Header and rounded cells."""
    header = [field.name for field in fields(SatelliteShare)]
    return header, [
        [_rounded(name, getattr(share, name)) for name in header] for share in assessment.verdict.satellites
    ]


def _rounded(name: str, value: str | float | None) -> str | float | None:
    decimals = DECIMALS.get(name.rsplit("_", 1)[-1])
    return round(value, decimals) if decimals is not None and isinstance(value, float) else value


def spreadsheet_safe(text: str) -> str:
    """A text on one line that no spreadsheet takes for a formula.

    Examples
    --------
    >>> spreadsheet_safe("=1+1"), spreadsheet_safe("GPS A1")
    ("'=1+1", 'GPS A1')
    """
    text = plain(text)
    return f"'{text}" if text.startswith(FORMULA_SIGNS) else text
