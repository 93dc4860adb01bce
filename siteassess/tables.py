"""Reads CSV tables: the package's own, with their source headers, and the user's, with line numbers."""

import csv
import io
import math
import os
import re
from array import array
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from importlib import resources
from itertools import chain, zip_longest
from pathlib import Path
from typing import TypeVar

import numpy as np
from numpy.typing import NDArray

from siteassess.errors import InputError, Mistake
from siteassess.wording import did_you_mean, listed, shown

__all__ = [
    "UserTable",
    "packaged_columns",
    "packaged_header",
    "packaged_rows",
    "read_user_table",
    "read_user_text",
]

Number = TypeVar("Number", np.float64, np.int64)

HEADER_KEY = re.compile(r"#\s*([a-z][a-z _]*):\s*(.*)")
MOST_MISTAKES = 50  # of one table; a wrong column of a long file says nothing new after that


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class UserTable:
    """A CSV file of the user's, before its values are judged.

    Attributes
    ----------
    file : str
        Its name without folders.
    line : integer array, shape (row,)
        Line of the file where each row starts, counted from 1.
    numbers : mapping of str to array, shape (row,)
        The number columns that are there; blank and unreadable cells are NaN. The arrays are read-only.
    texts : mapping of str to tuple of str or None
        The text columns that are there; blank cells are None.
    mistakes : tuple of Mistake
        What is wrong with single cells, in the order of the file. Whoever asked for the table adds its own
        and raises them together.
    """

    file: str
    line: NDArray[np.int64]
    numbers: Mapping[str, NDArray[np.float64]]
    texts: Mapping[str, tuple[str | None, ...]]
    mistakes: tuple[Mistake, ...] = ()


def packaged_header(path: str) -> dict[str, str]:
    """What the `#` lines at the top of a packaged table say of it, by key.

    Parameters
    ----------
    path : str
        Such as "link_budget/power/signals.csv", relative to the package.

    Returns
    -------
    dict
        "source", "edition", "status" and further keys; a `#` line without a key continues the one above.
    """
    header: dict[str, str] = {}
    key = ""
    for line in _packaged_lines(path):
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
    lines = (line for line in _packaged_lines(path) if line.strip() and not line.startswith("#"))
    return tuple(csv.DictReader(lines, strict=True))


def packaged_columns(path: str) -> dict[str, NDArray[np.float64]]:
    """Columns of a packaged table that holds numbers only; blank cells are NaN. The arrays are read-only."""
    rows = packaged_rows(path)
    names = tuple(rows[0]) if rows else ()
    return {name: _read_only(np.array([float(row[name] or "nan") for row in rows])) for name in names}


def read_user_text(path: str | os.PathLike[str]) -> str:
    """Text of a user's file, in UTF-8 with or without byte-order mark.

    Raises
    ------
    InputError
        If the file is not there, cannot be read or is not UTF-8.
    """
    file = Path(path).name or str(path)
    try:
        content = Path(path).read_bytes()
    except FileNotFoundError as error:
        where = f"it was looked for as {os.fspath(path)}"
        raise _unreadable(file, problem="there is no such file", allowed=where) from error
    except (OSError, ValueError) as error:  # ValueError: a NUL character in the path
        reason = getattr(error, "strerror", None) or str(error)
        raise _unreadable(file, problem="the file cannot be read", allowed=reason.lower()) from error
    try:
        return content.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = content.count(b"\n", 0, error.start) + 1
        raise _unreadable(
            file, where=f"line {line}", problem="is not UTF-8", allowed="save the file in the encoding UTF-8"
        ) from error


def read_user_table(
    path: str | os.PathLike[str],
    *,
    numbers: tuple[str, ...],
    texts: tuple[str, ...] = (),
    required: tuple[str, ...] = (),
) -> UserTable:
    """A user's CSV file: comma, or semicolon with decimal comma.

    Lines that start with `#` above the header are skipped, and so are blank lines and rows of blank cells.

    Parameters
    ----------
    path : str or path
        The file.
    numbers, texts : tuple of str
        Columns that may be there, by what they hold.
    required : tuple of str
        Columns that must be there, without blank cells.

    Returns
    -------
    UserTable
        With the mistakes of single cells in it.

    Raises
    ------
    InputError
        If the file cannot be read, its header is wrong or it has no rows.
    """
    file = Path(path).name
    decimal_comma, records = _records(read_user_text(path), file)
    header_line, header = next(records, (1, []))
    _check_header(file, header_line, header, known=numbers + texts, required=required)
    number_cells = {name: array("d") for name in header if name in numbers}
    text_cells: dict[str, list[str | None]] = {name: [] for name in header if name in texts}
    lines = array("q")
    mistakes: list[Mistake] = []
    for line, cells in records:
        lines.append(line)
        if any(cells[len(header) :]):
            mistakes.append(_too_many_cells(file, line, cells, header, decimal_comma))
        for name, cell in zip_longest(header, cells[: len(header)], fillvalue=""):
            if name in number_cells:
                value = _number(cell, decimal_comma)
                number_cells[name].append(value)
                wrong = math.isnan(value) and (cell or name in required)
            else:
                text_cells[name].append(cell or None)
                wrong = not cell and name in required
            if wrong:
                mistakes.append(_wrong_cell(file, line, name, cell, is_number=name in number_cells))
    if not lines:
        raise _unreadable(
            file, problem="has no rows", allowed="at least one must follow the names of the columns"
        )
    return UserTable(
        file=file,
        line=_read_only(np.array(lines, dtype=np.int64)),
        numbers={name: _read_only(np.array(column)) for name, column in number_cells.items()},
        texts={name: tuple(column) for name, column in text_cells.items()},
        mistakes=_first(mistakes, file),
    )


def _records(text: str, file: str) -> tuple[bool, Iterator[tuple[int, list[str]]]]:
    """Whether numbers have decimal commas, and (line, trimmed cells) from the header on."""
    source = io.StringIO(text, newline=None)
    skipped, header = 0, ""
    for header in source:
        if header.strip() and not header.startswith("#"):
            break
        skipped, header = skipped + 1, ""
    semicolons = ";" in header

    def records() -> Iterator[tuple[int, list[str]]]:
        reader = csv.reader(
            chain([header], source), delimiter=";" if semicolons else ",", skipinitialspace=True, strict=True
        )
        line = skipped + 1
        try:
            for row in reader:
                cells = [cell.strip() for cell in row]
                if any(cells):
                    yield line, cells
                line = skipped + reader.line_num + 1
        except csv.Error as error:
            raise _unreadable(
                file,
                where=f"line {line}",
                problem="cannot be split into cells",
                allowed="check its quotation marks",
            ) from error

    return semicolons, records()


def _check_header(
    file: str, line: int, header: list[str], *, known: tuple[str, ...], required: tuple[str, ...]
) -> None:
    while header and not header[-1]:  # spreadsheets write empty columns
        header.pop()
    where = f"line {line}"
    columns = f"its columns are {listed(known)}"
    if not header:
        raise _unreadable(file, problem="is empty", allowed=columns)
    if any("\t" in name for name in header):
        allowed = "separate the cells by commas, or by semicolons"
        raise _unreadable(file, where=where, problem="holds tabs", allowed=allowed)
    if not any(math.isnan(_number(name, True)) for name in header):
        allowed = f"it must name the columns: {listed(known)}"
        raise _unreadable(file, where=where, problem="holds numbers", allowed=allowed)
    if not any(name in known or did_you_mean(name, known) for name in header):
        raise _unreadable(file, where=where, problem="names no column of this table", allowed=columns)
    mistakes = [
        Mistake(
            file=file,
            where=f"{where}, {name}" if name else where,
            problem="is no column of this table" if name else "has a column without a name",
            allowed=did_you_mean(name, known, otherwise=columns),
            value=name,
        )
        for name in header
        if name not in known
    ]
    mistakes += [
        Mistake(
            file=file, where=f"{where}, {name}", problem="stands there twice", allowed="keep one", value=name
        )
        for name in dict.fromkeys(header)
        if name in known and header.count(name) > 1
    ]
    # A column that is only misspelt has its message already.
    suggested = {mistake.allowed for mistake in mistakes}
    mistakes += [
        Mistake(file=file, where=where, problem=f"names no column {name}", allowed="the table needs it")
        for name in required
        if name not in header and f"did you mean {name}?" not in suggested
    ]
    if mistakes:
        raise InputError(*mistakes)


def _number(cell: str, decimal_comma: bool) -> float:
    """The number in a cell; NaN where there is none."""
    try:
        value = float(cell.replace(",", ".") if decimal_comma else cell)
    except ValueError:
        return math.nan
    # Python also reads 1_000, which nobody means in a table.
    return value if math.isfinite(value) and "_" not in cell else math.nan


def _wrong_cell(file: str, line: int, name: str, cell: str, *, is_number: bool) -> Mistake:
    return Mistake(
        file=file,
        where=f"line {line}, {name}",
        problem=f"is {shown(cell)}" if cell else "is blank",
        allowed="it must be a number" if is_number else "it must be given",
        value=cell or None,
    )


def _too_many_cells(
    file: str, line: int, cells: list[str], header: list[str], decimal_comma: bool
) -> Mistake:
    hint = "" if decimal_comma else " (if the numbers have decimal commas, separate the cells by semicolons)"
    return Mistake(
        file=file,
        where=f"line {line}",
        problem=f"has {len(cells)} cells",
        allowed=f"the header names {len(header)}{hint}",
        value=len(cells),
    )


def _first(mistakes: list[Mistake], file: str) -> tuple[Mistake, ...]:
    if len(mistakes) <= MOST_MISTAKES:
        return tuple(mistakes)
    further = len(mistakes) - MOST_MISTAKES
    closing = Mistake(
        file=file,
        where="",
        problem=f"has {further} more mistake{'s' if further > 1 else ''}",
        allowed="the first are listed",
        value=further,
    )
    return (*mistakes[:MOST_MISTAKES], closing)


def _unreadable(file: str, *, where: str = "", problem: str, allowed: str) -> InputError:
    return InputError(Mistake(file=file, where=where, problem=problem, allowed=allowed))


def _read_only(column: NDArray[Number]) -> NDArray[Number]:
    column.flags.writeable = False
    return column


def _packaged_lines(path: str) -> list[str]:
    return resources.files("siteassess").joinpath(path).read_text("utf-8").splitlines()
