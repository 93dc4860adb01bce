"""Every satellite and signal as a table: satellites.csv, and a data frame for Python."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import plain

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
    from dataclasses import fields

    import pandas as pd

    from siteassess.verdict.verdict import SatelliteShare

    columns = [field.name for field in fields(SatelliteShare)]
    shares = assessment.verdict.satellites
    frame = pd.DataFrame(
        {name: [getattr(share, name) for share in shares] for name in columns}, columns=columns
    )
    for name in columns:
        decimals = DECIMALS.get(name.rsplit("_", 1)[-1])
        if decimals is not None:
            frame[name] = frame[name].astype(float).round(decimals)
    return frame


def csv_text(assessment: Assessment) -> str:
    """The table as CSV; text cells that a spreadsheet would take for a formula get a leading apostrophe."""
    frame = satellite_frame(assessment)
    for name in ("satellite", "system", "orbit_class", "signal"):
        frame[name] = [spreadsheet_safe(text) for text in frame[name]]
    return frame.to_csv(index=False, lineterminator="\n")


def spreadsheet_safe(text: str) -> str:
    """A text on one line that no spreadsheet takes for a formula.

    Examples
    --------
    >>> spreadsheet_safe("=1+1"), spreadsheet_safe("GPS A1")
    ("'=1+1", 'GPS A1')
    """
    text = plain(text)
    return f"'{text}" if text.startswith(FORMULA_SIGNS) else text
