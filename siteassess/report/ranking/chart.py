"""The ranking as a chart: one row a site, every required criterion as its distance from the limit."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.candidates.candidate import room
from siteassess.report.figures.drawing import INK, QUIET, drawn_svg, shortened
from siteassess.report.phrases import number
from siteassess.report.ranking.words import margin_text, rank_list, site_names

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.candidates.ranking import RankedSite, Ranking

__all__ = ["MOST_ROWS", "chart_svg"]

FloatArray = NDArray[np.float64]
Look = dict[str, Any]

MOST_ROWS = 60
WIDTH_IN, ABOVE_IN, BELOW_IN = 7.1, 0.42, 0.62
ROOMY_ROW_IN, TIGHT_ROW_IN = 0.27, 0.135
LEFT, RIGHT = 0.335, 0.675  # of the width: where the margins are drawn
COLUMNS = ((0.77, "margin"), (0.835, "missed"), (0.907, "satellites"), (0.992, "beaten by"))
NAME_LETTERS = 38
MOST_RANKS = 2

# Around the limit the scale is linear, further out logarithmic: a spot that misses by half a percent and one
# that misses by half are both seen.
LINEAR_ROOM = 0.02
TICKS = (-1.0, -0.5, -0.2, -0.1, -0.05, -0.02, 0.0, 0.02, 0.05, 0.1, 0.2, 0.5, 1.0)
FURTHEST = 1.0
LEAST = 0.06
TICK_GAP = 0.125  # of the axis: what a label takes

MISSED_GROUND = "#efece5"
# Shape and filling say the same as the colour.
MARKS = {
    "pass": ("o", "#1f6b55", "#1f6b55", "passes"),
    "unproven": ("s", "#7a5b00", "white", "unproven"),
    "fail": ("X", "#9c2f1c", "#9c2f1c", "fails"),
}


def chart_svg(ranking: Ranking) -> str:
    """The first sites of a ranking as SVG."""
    return drawn_svg(lambda: _figure(ranking), hash_salt="ranking")


def _figure(ranking: Ranking) -> Figure:
    from matplotlib.figure import Figure

    sites = ranking.sites[:MOST_ROWS]
    rows_in = _row_in(len(sites)) * len(sites)
    height_in = ABOVE_IN + rows_in + BELOW_IN
    figure = Figure(figsize=(WIDTH_IN, height_in))
    axes = figure.add_axes((LEFT, BELOW_IN / height_in, RIGHT - LEFT, rows_in / height_in))
    _draw_frame(axes, sites)
    for row, site in enumerate(sites):
        _draw_rooms(axes, row, site)
    _draw_texts(axes, ranking, sites)
    _draw_key(figure, {site.candidate.outcome for site in sites}, height_in)
    return figure


def _row_in(rows: int) -> float:
    """Height of a row: roomy for a few sites, tight for many."""
    share = min(max((rows - 10) / (MOST_ROWS - 10), 0.0), 1.0)
    return ROOMY_ROW_IN + share * (TIGHT_ROW_IN - ROOMY_ROW_IN)


def _across(rooms: ArrayLike) -> FloatArray:
    """Place of a room on the axis."""
    clipped = np.clip(np.asarray(rooms, dtype=float), -FURTHEST, FURTHEST)
    place: FloatArray = np.arcsinh(clipped / LINEAR_ROOM)
    return place


def _draw_frame(axes: Axes, sites: tuple[RankedSite, ...]) -> None:
    rooms = [room(finding) for site in sites for finding in site.candidate.required]
    low, high = min([-LEAST, *rooms]), max([LEAST, *rooms])
    start, end = (_across([low, high]) + np.array([-0.25, 0.25])).tolist()
    axes.set(xlim=(start, end), ylim=(len(sites) - 0.5, -0.5))
    ticks = _ticks(start, end)
    axes.set_xticks(_across(ticks).tolist(), [margin_tick(tick) for tick in ticks])
    axes.set_yticks([])
    axes.tick_params(axis="x", length=2.5, labelsize=6)
    axes.axvspan(start, 0.0, facecolor=MISSED_GROUND, linewidth=0, zorder=0)
    axes.axvline(0.0, color=INK, linewidth=1.2, zorder=2)
    for edge in ("top", "right", "left"):
        axes.spines[edge].set_visible(False)
    for place in _across(ticks).tolist():
        axes.axvline(place, color=QUIET, linewidth=0.25, zorder=1)
    top: Look = {"va": "bottom", "fontsize": 6.5, "color": INK}
    offset = axes.get_xaxis_transform()
    axes.text(-0.08, 1.005, "misses its limit", ha="right", transform=offset, **top)
    axes.text(0.08, 1.005, "room to spare", ha="left", transform=offset, **top)


def _ticks(start: float, end: float) -> list[float]:
    """Ticks from the limit outward that leave room for each other's labels."""
    gap = TICK_GAP * (end - start)
    kept = [0.0]
    for side in (-1.0, 1.0):
        last = 0.0
        for tick in sorted((tick for tick in TICKS if tick * side > 0), key=abs):
            place = float(_across(tick))
            if start <= place <= end and abs(place - last) >= gap:
                kept.append(tick)
                last = place
    return sorted(kept)


def margin_tick(tick: float) -> str:
    """A tick in percent of the limit.

    Examples
    --------
    >>> margin_tick(-0.05), margin_tick(0.0), margin_tick(0.5)
    ('−5 %', 'limit', '+50 %')
    """
    if tick == 0.0:
        return "limit"
    return f"{'+' if tick > 0 else ''}{number(100.0 * tick, 0)} %"


def _draw_rooms(axes: Axes, row: int, site: RankedSite) -> None:
    """All required criteria as strokes on a line, the margin as a mark."""
    places = _across([room(finding) for finding in site.candidate.required])
    shape, edge, face, _ = MARKS[site.candidate.outcome]
    axes.plot([places.min(), places.max()], [row, row], color=QUIET, linewidth=0.7, zorder=3)
    axes.plot(
        places, np.full(len(places), row), "|", color=INK, markersize=4.5, markeredgewidth=0.7, zorder=4
    )
    if site.candidate.margin < -FURTHEST:
        shape = "<"
    axes.plot(
        [places.min()], [row], shape, markersize=5.0, markeredgecolor=edge, markerfacecolor=face,
        markeredgewidth=1.0, zorder=5, clip_on=False,
    )  # fmt: skip


def _draw_texts(axes: Axes, ranking: Ranking, sites: tuple[RankedSite, ...]) -> None:
    """Rank and name to the left, figures to the right."""
    from matplotlib.patches import Rectangle

    figure = axes.get_figure()
    assert figure is not None
    size = 7.0 if len(sites) <= 30 else 6.0
    beside = _beside(axes)
    for column, heading in COLUMNS:
        axes.text(
            column, -0.62, heading, ha="right", va="bottom", fontsize=6, transform=beside, weight="bold"
        )
    left = Rectangle((0.0, 0.0), LEFT - 0.01, 1.0, transform=figure.transFigure)
    names = site_names(ranking)
    for row, (site, name) in enumerate(zip(sites, names[: len(sites)], strict=True)):
        candidate = site.candidate
        missed = f"{candidate.missed} of {len(candidate.required)}"
        figures = (
            margin_text(candidate.margin),
            missed,
            number(candidate.usable_satellites),
            rank_list(site.beaten_by, MOST_RANKS),
        )
        axes.text(
            0.028,
            row,
            str(site.rank),
            ha="right",
            va="center",
            fontsize=size,
            weight="bold",
            transform=beside,
        )
        label = axes.text(
            0.04, row, shortened(name, NAME_LETTERS), ha="left", va="center", fontsize=size,
            transform=beside, parse_math=False,
        )  # fmt: skip
        label.set_clip_path(left)  # wide letters end before the margins begin
        for (column, _), text in zip(COLUMNS, figures, strict=True):
            axes.text(column, row, text, ha="right", va="center", fontsize=size, transform=beside)
        if row and row % 5 == 0:
            axes.plot(
                [0.0, 1.0], [row - 0.5] * 2, color=QUIET, linewidth=0.3, transform=beside, clip_on=False
            )


def _beside(axes: Axes) -> object:
    """Shares of the figure's width across, rows down."""
    from matplotlib.transforms import blended_transform_factory

    figure = axes.get_figure()
    assert figure is not None
    return blended_transform_factory(figure.transFigure, axes.transData)


def _draw_key(figure: Figure, outcomes: set[str], height_in: float) -> None:
    from matplotlib.lines import Line2D

    def mark(shape: str, edge: str, face: str, size: float) -> Line2D:
        return Line2D(
            [],
            [],
            linestyle="none",
            marker=shape,
            markersize=size,
            markeredgecolor=edge,
            markerfacecolor=face,
        )

    entries = [(mark(*MARKS[name][:3], 5.0), MARKS[name][3]) for name in MARKS if name in outcomes]
    entries.append((mark("|", INK, INK, 5.0), "a required criterion; the mark is the worst one"))
    figure.legend(
        *zip(*entries, strict=True),
        loc="lower center",
        bbox_to_anchor=(0.5, 0.02 / height_in),
        ncols=len(entries),
        frameon=False,
        fontsize=6.5,
        handletextpad=0.4,
        columnspacing=1.6,
    )
    words = "distance from the limit, relative to it"
    figure.text((LEFT + RIGHT) / 2, 0.24 / height_in, words, ha="center", va="bottom", fontsize=6.5)
