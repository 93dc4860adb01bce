"""Kinds of parts from the user's own CSV file."""

import os
from collections.abc import Iterator

import numpy as np

from siteassess.errors import InputError, Mistake
from siteassess.link_budget.chain.parts import BY_CARRIER, CABLE_COLUMNS, PART_COLUMNS, PartKind, kind_of
from siteassess.tables import UserTable, read_user_table
from siteassess.wording import shown

__all__ = ["read_parts_file"]

LIMITS = {  # lowest and highest
    "carrier_mhz": (100.0, 10_000.0),
    "k1_db_per_100m": (0.0, 100.0),
    "k2_db_per_100m": (0.0, 1.0),
    "ohm_per_100m": (0.0, 1000.0),
    "loss_db": (0.0, 100.0),
    "gain_db": (0.0, 100.0),
    "noise_figure_db": (0.0, 100.0),
    "supply_voltage_v": (0.0, 60.0),
    "supply_current_ma": (0.0, 1000.0),
    "min_supply_voltage_v": (0.0, 60.0),
    "max_supply_voltage_v": (0.0, 60.0),
}
TEXTS = ("kind", "description", "passes_supply", "source", "status")
LONGEST_KIND = 200


def read_parts_file(path: str | os.PathLike[str]) -> dict[str, PartKind]:
    """Kinds of a CSV file, checked.

    Parameters
    ----------
    path : str or path
        Columns as in the packaged table, of which only `kind` is required, and `carrier_mhz`: several rows of
        one kind, each at another carrier, give its loss, gain and noise figure by carrier.

    Raises
    ------
    InputError
        With all the mistakes of its cells, or else of its kinds.
    """
    table = read_user_table(path, numbers=tuple(LIMITS), texts=TEXTS, required=("kind",))
    _refuse(*table.mistakes, *_cell_mistakes(table))
    rows_of: dict[str, list[int]] = {}
    for row, kind in enumerate(table.texts["kind"]):
        rows_of.setdefault(str(kind), []).append(row)
    _refuse(*(mistake for rows in rows_of.values() for mistake in _kind_mistakes(table, rows)))
    return {name: _kind(table, name, rows) for name, rows in rows_of.items()}


def _refuse(*mistakes: Mistake) -> None:
    if mistakes:
        raise InputError(*mistakes)


def _cell_mistakes(table: UserTable) -> Iterator[Mistake]:
    unreadable = {mistake.where for mistake in table.mistakes}
    for column, values in table.numbers.items():
        lowest, highest = LIMITS[column]
        for wrong in np.flatnonzero((values < lowest) | (values > highest)):
            problem = f"is {float(values[wrong]):.12g}"
            allowed = f"it must lie from {lowest:.12g} to {highest:.12g}"
            yield _mistake(table, int(wrong), column, problem, allowed)
    for row, answer in enumerate(table.texts.get("passes_supply", ())):
        where = f"line {table.line[row]}, passes_supply"
        if answer not in (None, "yes", "no") and where not in unreadable:
            yield _mistake(table, row, "passes_supply", f"is {shown(answer)}", "it must be yes or no")
    for row, kind in enumerate(table.texts["kind"]):
        if kind is not None and len(kind) > LONGEST_KIND:
            problem = f"is {shown(kind)}"
            yield _mistake(table, row, "kind", problem, f"it must have at most {LONGEST_KIND} characters")


def _kind_mistakes(table: UserTable, rows: list[int]) -> Iterator[Mistake]:
    """What is wrong with the rows of one kind."""
    for row in rows:
        yield from _row_mistakes(table, row)
    first, carriers = rows[0], [_numbers(table, row).get("carrier_mhz") for row in rows]
    for place, row in enumerate(rows[1:], start=1):
        if None in (carriers[place], carriers[0]):
            allowed = "one kind has one row, or several that each name a carrier_mhz"
            yield _mistake(table, row, "kind", "stands there twice", allowed)
        elif carriers[place] in carriers[:place]:
            yield _mistake(table, row, "carrier_mhz", "stands there twice for this kind", "keep one")
        for column in BY_CARRIER:
            if (column in _numbers(table, row)) != (column in _numbers(table, first)):
                allowed = "every carrier of a kind has the same columns filled"
                yield _mistake(table, row, column, "is not filled as at the other carriers", allowed)


def _row_mistakes(table: UserTable, row: int) -> Iterator[Mistake]:
    given = _numbers(table, row)
    cable = "k1_db_per_100m" in given
    losses = [name for name in ("k1_db_per_100m", "loss_db", "gain_db") if name in given]
    if len(losses) > 1:
        yield _mistake(table, row, "", f"has {' and '.join(losses)}", "keep one of them")
    elif not losses and "noise_figure_db" not in given:
        problem = "has no k1_db_per_100m, loss_db, gain_db or noise_figure_db"
        yield _mistake(table, row, "", problem, "a cable, a lossy part, an amplifier or a receiver has one")
    elif "gain_db" in given and "noise_figure_db" not in given:
        yield _mistake(table, row, "noise_figure_db", "is blank", "a part with gain needs it")
    elif "gain_db" not in given and losses and "noise_figure_db" in given:
        allowed = "the noise of a lossy part follows from its loss"
        problem = f"is {given['noise_figure_db']:.12g}"
        yield _mistake(table, row, "noise_figure_db", problem, allowed)
    if "k2_db_per_100m" in given and not cable:
        allowed = "only a cable, with k1_db_per_100m, has it"
        problem = f"is {given['k2_db_per_100m']:.12g}"
        yield _mistake(table, row, "k2_db_per_100m", problem, allowed)
    if cable and "carrier_mhz" in given:
        allowed = "the loss of a cable follows from k1_db_per_100m at every carrier"
        yield _mistake(table, row, "carrier_mhz", f"is {given['carrier_mhz']:.12g}", allowed)
    low, high = given.get("min_supply_voltage_v"), given.get("max_supply_voltage_v")
    if low is not None and high is not None and high < low:
        allowed = f"it must be at least min_supply_voltage_v, {low:.12g}"
        yield _mistake(table, row, "max_supply_voltage_v", f"is {high:.12g}", allowed)


def _numbers(table: UserTable, row: int) -> dict[str, float]:
    """The filled number cells of a row."""
    cells = {column: float(values[row]) for column, values in table.numbers.items()}
    return {column: value for column, value in cells.items() if not np.isnan(value)}


def _kind(table: UserTable, name: str, rows: list[int]) -> PartKind:
    numbers: dict[str | None, dict[str, float]] = {}
    for row in rows:
        given = _numbers(table, row)
        carrier_mhz = given.get("carrier_mhz")
        numbers[None if carrier_mhz is None else f"{carrier_mhz:.10g}"] = {
            key: given[key] for key in (*PART_COLUMNS, *CABLE_COLUMNS) if key in given
        }
    passes = table.texts.get("passes_supply")
    told = [cell for cell in (_text(table, "source", rows[0]), _text(table, "status", rows[0])) if cell]
    return kind_of(
        name,
        numbers,
        passes_supply=passes is None or passes[rows[0]] != "no",
        rests_on=f"{table.file}: {'; '.join(told)}" if told else f"the file {table.file}",
    )


def _text(table: UserTable, column: str, row: int) -> str | None:
    return table.texts[column][row] if column in table.texts else None


def _mistake(table: UserTable, row: int, column: str, problem: str, allowed: str) -> Mistake:
    where = f"line {table.line[row]}" + (f", {column}" if column else "")
    value = table.texts["kind"][row] if not column else None
    return Mistake(file=table.file, where=where, problem=problem, allowed=allowed, value=value)
