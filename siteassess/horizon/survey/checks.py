"""Checks of a survey across its rows: order, and one answer for each obstacle."""

import math
import re
from collections.abc import Iterator

import numpy as np

from siteassess.errors import Mistake
from siteassess.horizon.curves import IndexArray
from siteassess.horizon.survey.rows import COVERS, LEAVES, Cover, Leaf, Rows, cell_mistake
from siteassess.tables import MOST_MISTAKES
from siteassess.wording import shown

__all__ = ["cover_of", "general_mistakes", "leaf_of", "line_of", "listed_mistakes", "obstacle_mistakes"]


def general_mistakes(rows: Rows, which: IndexArray) -> Iterator[Mistake]:
    """What is wrong with the order of the general skyline."""
    azimuth_deg = rows.numbers["azimuth_deg"]
    which = which[~np.isnan(azimuth_deg[which])]
    given = azimuth_deg[which]
    for place in np.flatnonzero(given[1:] < given[:-1]).tolist():
        allowed = (
            f"azimuths of rows without an obstacle must ascend, and the one before is {given[place]:.10g}"
        )
        yield cell_mistake(rows, int(which[place + 1]), "azimuth_deg", allowed)
    # 0 and 360 are one azimuth, at both ends of the list.
    turned = np.append(given, given[:2] + 360.0)
    for place in np.flatnonzero((turned[2:] == turned[1:-1]) & (turned[1:-1] == turned[:-2])).tolist():
        if len(given) > 2:
            row = int(which[min(place + 2, len(which) - 1)])
            yield cell_mistake(rows, row, "azimuth_deg", "at most two rows may stand at one azimuth")


def obstacle_mistakes(rows: Rows, which: IndexArray) -> Iterator[Mistake]:
    """What is wrong with one named obstacle."""
    yield from _one_word_mistakes(rows, which, "cover", COVERS)
    yield from _foliage_mistakes(rows, which)
    if cover_of(rows, which) == "unsurveyed":
        yield from _unsurveyed_mistakes(rows, which)
        return
    yield from _completeness_mistakes(rows, which)
    if len(which) == 1:
        yield from _single_row_mistakes(rows, int(which[0]))
    else:
        for row in which[~np.isnan(rows.numbers["width_m"][which])].tolist():
            yield cell_mistake(rows, row, "width_m", "it may stand only on an obstacle of one row")
        yield from _order_mistakes(rows, which)


def cover_of(rows: Rows, which: IndexArray) -> Cover:
    """The cover of an obstacle: what any of its rows says, or solid."""
    words = (rows.texts["cover"][row] for row in which.tolist())
    return next((cover for word in words for cover in COVERS if cover == word), "solid")


def leaf_of(rows: Rows, which: IndexArray) -> Leaf:
    """The leaf of an obstacle: what any of its rows says, or in leaf."""
    words = (rows.texts["leaf"][row] for row in which.tolist())
    return next((leaf for word in words for leaf in LEAVES if leaf == word), "in-leaf")


def _name(rows: Rows, which: IndexArray) -> str:
    return f"obstacle {shown(rows.texts['obstacle'][int(which[0])])}"


def _one_word_mistakes(
    rows: Rows, which: IndexArray, column: str, words: tuple[str, ...]
) -> Iterator[Mistake]:
    given = [row for row in which.tolist() if rows.texts[column][row] in words]
    for row in given:
        if rows.texts[column][row] != rows.texts[column][given[0]]:
            first = f"line {rows.line[given[0]]} says {shown(rows.texts[column][given[0]])}"
            yield cell_mistake(rows, row, column, f"{_name(rows, which)} must have one {column}, and {first}")


def _foliage_mistakes(rows: Rows, which: IndexArray) -> Iterator[Mistake]:
    if cover_of(rows, which) == "foliage":
        yield from _one_word_mistakes(rows, which, "leaf", LEAVES)
        for row in which[np.isnan(rows.numbers["depth_m"][which])].tolist():
            yield cell_mistake(
                rows, row, "depth_m", "foliage needs the length of the path through its leaves"
            )
        given = ~np.isnan(rows.numbers["growth_m_per_year"][which])
        for row in which[given & np.isnan(rows.slant_m[which])].tolist():
            yield cell_mistake(rows, row, "growth_m_per_year", "it needs a distance in the same row")
        return
    for row in which.tolist():
        for column in ("leaf", "depth_m", "growth_m_per_year"):
            value = rows.texts["leaf"][row] if column == "leaf" else rows.numbers[column][row]
            if value is not None and value == value:
                yield cell_mistake(rows, row, column, "it may stand only where cover is foliage")


def _unsurveyed_mistakes(rows: Rows, which: IndexArray) -> Iterator[Mistake]:
    """A stretch that nobody looked at has azimuths only."""
    for column in ("distance_m", "slant_distance_m", "underside_deg", "width_m"):
        for row in which[~np.isnan(rows.numbers[column][which])].tolist():
            yield cell_mistake(rows, row, column, "it may not stand where cover is unsurveyed")
    if len(which) == 1:
        yield Mistake(
            file=rows.file,
            where=f"line {rows.line[which[0]]}",
            problem=f"is the only row of {_name(rows, which)}",
            allowed="a stretch that nobody looked at needs a second azimuth",
        )
    else:
        yield from _order_mistakes(rows, which)


def _completeness_mistakes(rows: Rows, which: IndexArray) -> Iterator[Mistake]:
    for column, values, what in (
        ("distance_m", rows.slant_m[which], "a distance"),
        ("underside_deg", rows.numbers["underside_deg"][which], "an underside"),
    ):
        blank = np.isnan(values)
        if not blank.all():
            allowed = f"all rows of {_name(rows, which)} must carry {what}, or none"
            for row in which[blank].tolist():
                yield cell_mistake(rows, row, column, allowed)


def _single_row_mistakes(rows: Rows, row: int) -> Iterator[Mistake]:
    width_m, distance_m = rows.numbers["width_m"][row], rows.slant_m[row]
    if np.isnan(width_m):
        yield Mistake(
            file=rows.file,
            where=f"line {rows.line[row]}",
            problem=f"is the only row of {_name(rows, np.array([row]))}",
            allowed="it needs width_m and a distance, or a second azimuth",
        )
    elif np.isnan(distance_m):
        yield cell_mistake(rows, row, "width_m", "it needs a distance in the same row")


def _order_mistakes(rows: Rows, which: IndexArray) -> Iterator[Mistake]:
    which = which[~np.isnan(rows.numbers["azimuth_deg"][which])]
    given = rows.numbers["azimuth_deg"][which]
    falls = np.flatnonzero(given[1:] < given[:-1])
    for place in falls[1:].tolist():
        allowed = f"the azimuths of {_name(rows, which)} must ascend and may pass north once"
        yield cell_mistake(rows, int(which[place + 1]), "azimuth_deg", allowed)
    if len(falls) > 1 or not len(given):
        return
    azimuth_deg = given + 360.0 * (np.arange(len(given)) > (falls[0] if len(falls) else len(given)))
    beyond = np.flatnonzero(azimuth_deg > azimuth_deg[0] + 360.0)
    if beyond.size:
        allowed = f"{_name(rows, which)} must ascend, pass north at most once and span at most 360 degrees"
        yield cell_mistake(rows, int(which[beyond[0]]), "azimuth_deg", allowed)
    elif azimuth_deg[-1] == azimuth_deg[0]:
        yield Mistake(
            file=rows.file,
            where=_name(rows, which),
            problem="has all its rows at one azimuth",
            allowed="it needs two azimuths, or one row with width_m and a distance",
        )
        return
    step_deg = np.diff(azimuth_deg)
    for place in np.flatnonzero((step_deg[1:] == 0.0) & (step_deg[:-1] == 0.0)).tolist():
        allowed = "at most two rows may stand at one azimuth"
        yield cell_mistake(rows, int(which[place + 2]), "azimuth_deg", allowed)
    if not np.isnan(rows.slant_m[which]).any():
        for place in np.flatnonzero(step_deg >= 180.0).tolist():
            allowed = "neighbouring rows with distances must be less than 180 degrees apart"
            yield cell_mistake(rows, int(which[place + 1]), "azimuth_deg", allowed)


def listed_mistakes(mistakes: list[Mistake], file: str) -> list[Mistake]:
    """One mistake for each place of the file, in its order, and not too many."""
    at_place: dict[str, Mistake] = {}
    for mistake in mistakes:
        at_place.setdefault(mistake.where or mistake.problem, mistake)
    kept = sorted(at_place.values(), key=line_of)
    further = len(kept) - MOST_MISTAKES
    if further <= 0:
        return kept
    closing = Mistake(
        file=file,
        where="",
        problem=f"has {further} more mistakes",
        allowed="the first are listed",
        value=further,
    )
    return [*kept[:MOST_MISTAKES], closing]


def line_of(mistake: Mistake) -> float:
    """Line of the file that a mistake names; those without one stand last."""
    found = re.match(r"line (\d+)", mistake.where)
    return float(found[1]) if found else math.inf
