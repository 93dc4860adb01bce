"""The rows of a survey file, each checked by itself."""

from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Literal

import numpy as np

from siteassess.errors import Mistake
from siteassess.horizon.curves import BoolArray, FloatArray, IndexArray
from siteassess.horizon.skyline import GENERAL_SKYLINE
from siteassess.tables import UserTable, read_user_table
from siteassess.wording import did_you_mean, listed, shown

__all__ = ["COVERS", "LEAVES", "Cover", "Leaf", "Rows", "cell_mistake", "read_rows"]

Cover = Literal["solid", "foliage", "unsurveyed"]
Leaf = Literal["in-leaf", "leafless", "evergreen"]
COVERS: tuple[Cover, ...] = ("solid", "foliage", "unsurveyed")
LEAVES: tuple[Leaf, ...] = ("in-leaf", "leafless", "evergreen")
NUMBERS = (
    "azimuth_deg",
    "elevation_deg",
    "distance_m",
    "slant_distance_m",
    "depth_m",
    "underside_deg",
    "width_m",
    "growth_m_per_year",
)
TEXTS = ("obstacle", "cover", "leaf")
RANGES = {
    "azimuth_deg": (0.0, 360.0),
    "elevation_deg": (-5.0, 90.0),
    "underside_deg": (-90.0, 90.0),
    "growth_m_per_year": (0.0, 5.0),
}
POSITIVE = ("distance_m", "slant_distance_m", "depth_m", "width_m")


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Rows:
    """Rows of a survey; arrays have shape (row,), NaN or None where a cell is blank or was refused.

    Attributes
    ----------
    file : str
        Name of the file.
    line : integer array
        Line of the file.
    numbers : dict of str to array
        All number columns of a survey, whether the file has them or not.
    texts : dict of str to tuple of str or None
        All text columns.
    """

    file: str
    line: IndexArray
    numbers: dict[str, FloatArray]
    texts: dict[str, tuple[str | None, ...]]

    @property
    def labelled(self) -> BoolArray:
        """Whether a row belongs to a named obstacle."""
        return np.array([label is not None for label in self.texts["obstacle"]], dtype=np.bool_)

    @property
    def slant_m(self) -> FloatArray:
        """Slant distance from the instrument; NaN where none is given."""
        slant_m = self.numbers["distance_m"] / np.cos(np.deg2rad(self.numbers["elevation_deg"]))
        return np.where(np.isnan(slant_m), self.numbers["slant_distance_m"], slant_m)

    def by_label(self) -> dict[str | None, IndexArray]:
        """Indices of the rows of each obstacle, and under None those of the general skyline."""
        members: dict[str | None, list[int]] = {}
        for row, label in enumerate(self.texts["obstacle"]):
            members.setdefault(label, []).append(row)
        return {label: np.array(rows, dtype=np.int64) for label, rows in members.items()}


def read_rows(path: Path) -> tuple[Rows, list[Mistake]]:
    """Rows of a survey file, and what is wrong with single cells and rows.

    Raises
    ------
    InputError
        If there is no such table.
    """
    table = read_user_table(path, numbers=NUMBERS, texts=TEXTS, required=("azimuth_deg", "elevation_deg"))
    count = len(table.line)
    rows = Rows(
        file=table.file,
        line=table.line,
        numbers={name: np.array(table.numbers.get(name, np.full(count, np.nan))) for name in NUMBERS},
        texts={name: table.texts.get(name, (None,) * count) for name in TEXTS},
    )
    mistakes = [*table.mistakes, *_range_mistakes(rows), *_word_mistakes(table), *_row_mistakes(rows)]
    return rows, mistakes


def cell_mistake(rows: Rows, row: int, column: str, allowed: str) -> Mistake:
    """A mistake that quotes one cell."""
    value: str | float | None
    if column in rows.texts:
        value = rows.texts[column][row]
        text = shown(value)
    else:
        number = float(rows.numbers[column][row])
        value, text = (None if np.isnan(number) else number), format(number, ".10g")
    return Mistake(
        file=rows.file,
        where=f"line {rows.line[row]}, {column}",
        problem="is blank" if value is None else f"is {text}",
        allowed=allowed,
        value=value,
    )


def _range_mistakes(rows: Rows) -> Iterator[Mistake]:
    """Numbers out of their range; they are blanked, so that nothing else is said of them."""
    for column, values in rows.numbers.items():
        if column in POSITIVE:
            wrong, allowed = values <= 0.0, "it must be above 0"
        else:
            low, high = RANGES[column]
            wrong = (values < low) | (values > high)
            allowed = f"it must lie from {low:g} to {high:g}"
        for row in np.flatnonzero(wrong).tolist():
            yield cell_mistake(rows, row, column, allowed)
        values[wrong] = np.nan


def _word_mistakes(table: UserTable) -> Iterator[Mistake]:
    for column, words in (("cover", COVERS), ("leaf", LEAVES)):
        for row, word in enumerate(table.texts.get(column, ())):
            if word is not None and word not in words:
                yield Mistake(
                    file=table.file,
                    where=f"line {table.line[row]}, {column}",
                    problem=f"is {shown(word)}",
                    allowed=did_you_mean(word, words, f"it must be {listed(words, 'or')}"),
                    value=word,
                )


def _row_mistakes(rows: Rows) -> Iterator[Mistake]:
    number = rows.numbers
    both = ~np.isnan(number["distance_m"]) & ~np.isnan(number["slant_distance_m"])
    for row in np.flatnonzero(both).tolist():
        yield Mistake(
            file=rows.file,
            where=f"line {rows.line[row]}",
            problem="gives distance_m and slant_distance_m",
            allowed="it must give one of them",
        )
    overhead = (number["elevation_deg"] == 90.0) & ~np.isnan(number["distance_m"])
    for row in np.flatnonzero(overhead).tolist():
        yield cell_mistake(rows, row, "elevation_deg", "with a horizontal distance it must be below 90")
    for row in np.flatnonzero(number["underside_deg"] > number["elevation_deg"]).tolist():
        top_deg = number["elevation_deg"][row]
        yield cell_mistake(
            rows, row, "underside_deg", f"it must not be above elevation_deg, which is {top_deg:.10g}"
        )
    for row, label in enumerate(rows.texts["obstacle"]):
        if label == GENERAL_SKYLINE:
            yield cell_mistake(rows, row, "obstacle", "rows of the general skyline carry no label")
    yield from _needless_cells(rows)


def _needless_cells(rows: Rows) -> Iterator[Mistake]:
    """Cells that say something that only a labelled row can say."""
    for column in ("underside_deg", "width_m", "depth_m", "growth_m_per_year"):
        given = ~np.isnan(rows.numbers[column]) & ~rows.labelled
        for row in np.flatnonzero(given).tolist():
            yield cell_mistake(rows, row, column, "a row that gives it must name its obstacle")
    for row in np.flatnonzero(~rows.labelled).tolist():
        if rows.texts["cover"][row] in ("foliage", "unsurveyed"):
            yield cell_mistake(rows, row, "cover", "a row that gives it must name its obstacle")
        elif rows.texts["leaf"][row] in LEAVES:
            yield cell_mistake(rows, row, "leaf", "a row that gives it must name its obstacle")
