"""The horizon unrolled: azimuth across, elevation up, every obstacle with its name."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from siteassess.report.answers import ranked_obstacles
from siteassess.report.drawing import (
    INK,
    LEAVES,
    QUIET,
    SOLID,
    drawn_svg,
    obstacle_edges,
    outline_points,
    shortened,
)
from siteassess.report.phrases import plain

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.assessment import Assessment
    from siteassess.verdict.verdict import ObstacleCost

__all__ = ["label_rows", "panorama_svg"]

SIZE_IN = (7.1, 3.0)
LOWEST_TOP_DEG = 30.0
MOST_LABELS = 16
LABEL_LETTERS = 24
LETTER_DEG = 3.0  # width of a letter of a label, in degrees of azimuth on paper
LABEL_ROWS = 5
ROW_STEP = 0.085  # of the height of the axes


def panorama_svg(assessment: Assessment) -> str:
    """The horizon of an assessment, all round, as SVG."""
    return drawn_svg(lambda: _figure(assessment), hash_salt="panorama")


def _figure(assessment: Assessment) -> Figure:
    from matplotlib.figure import Figure

    figure = Figure(figsize=SIZE_IN)
    axes = figure.add_axes((0.065, 0.13, 0.92, 0.55))
    mask_deg = assessment.site.require.elevation_mask_deg
    peaks_deg = [obstacle.peak_elevation_deg for obstacle in assessment.verdict.obstacles]
    top_deg = min(90.0, max(LOWEST_TOP_DEG, 1.15 * max(peaks_deg, default=0.0), 1.5 * mask_deg))
    axes.set(xlim=(0.0, 360.0), ylim=(0.0, top_deg), xlabel="azimuth", ylabel="elevation")
    ticks_deg = np.arange(0, 361, 30)
    names = {0: "N", 90: "E", 180: "S", 270: "W", 360: "N"}
    axes.set_xticks(ticks_deg, [f"{tick}°\n{names.get(tick, '')}".rstrip() for tick in ticks_deg.tolist()])
    axes.yaxis.set_major_formatter("{x:.0f}°")
    axes.grid(color=QUIET, linewidth=0.3)
    axes.spines[["top", "right"]].set_visible(False)
    _draw_skyline(axes, assessment, top_deg)
    axes.axhline(mask_deg, color=INK, linewidth=0.9, dashes=(5, 2), zorder=5)
    axes.text(359.0, mask_deg + 0.01 * top_deg, f"mask {mask_deg:g}°", ha="right", va="bottom", fontsize=6, zorder=7)
    _draw_labels(axes, ranked_obstacles(assessment.verdict)[:MOST_LABELS], top_deg)
    return figure


def _draw_skyline(axes: Axes, assessment: Assessment, top_deg: float) -> None:
    skyline = assessment.skyline
    for start, end in skyline.unsurveyed_deg:
        axes.fill_between(
            [start, end], 0.0, top_deg, facecolor="none", edgecolor="#b9bfc4", hatch="////", linewidth=0.0, zorder=1
        )
    for obstacle in skyline.obstacles:
        azimuth_deg, upper_deg, lower_deg = obstacle_edges(obstacle)
        # An obstacle that runs through north is drawn once at each end; what lies outside is cut off.
        for turn_deg in (0.0, -360.0) if azimuth_deg[-1] > 360.0 else (0.0,):
            if obstacle.cover == "foliage":
                look = {"facecolor": LEAVES, "edgecolor": "#7c8c5c", "hatch": "....", "linewidth": 0.6, "zorder": 2}
            elif obstacle.hangs_free:
                look = {"facecolor": SOLID, "edgecolor": INK, "linewidth": 0.6, "zorder": 3}
            else:
                continue
            axes.fill_between(azimuth_deg + turn_deg, np.maximum(lower_deg, 0.0), upper_deg, **look)
    azimuth_deg, outline_deg = outline_points(skyline.outline)
    axes.fill_between(azimuth_deg, 0.0, np.maximum(outline_deg, 0.0), facecolor=SOLID, linewidth=0, zorder=3)
    axes.plot(azimuth_deg, np.maximum(outline_deg, 0.0), color=INK, linewidth=0.8, zorder=4)


def label_rows(centre_deg: list[float], width_deg: list[float], rows: int) -> list[int | None]:
    """The lowest row in which each label finds room beside those placed before; None where no row has any.

    Examples
    --------
    >>> label_rows([10.0, 20.0, 100.0], [30.0, 30.0, 30.0], rows=1)
    [0, None, 0]
    """
    taken: list[list[tuple[float, float]]] = [[] for _ in range(rows)]
    found: list[int | None] = []
    for centre, width in zip(centre_deg, width_deg, strict=True):
        left, right = centre - width / 2, centre + width / 2
        free = (
            row for row in range(rows) if all(right <= start or left >= end for start, end in taken[row])
        )
        row = next(free, None)
        if row is not None:
            taken[row].append((left, right))
        found.append(row)
    return found


def _draw_labels(axes: Axes, ranked: list[tuple[int, ObstacleCost]], top_deg: float) -> None:
    """Names above the figure, with a line down to the highest point; the dearest obstacles are served first."""
    texts = [
        f"{rank} {shortened(plain(obstacle.name), LABEL_LETTERS)}"
        for rank, (_, obstacle) in enumerate(ranked, start=1)
    ]
    widths_deg = [LETTER_DEG * len(text) + 4.0 for text in texts]
    centres_deg = [
        min(max(obstacle.peak_azimuth_deg, width / 2), 360.0 - width / 2)
        for (_, obstacle), width in zip(ranked, widths_deg, strict=True)
    ]
    rows = label_rows(centres_deg, widths_deg, LABEL_ROWS)
    box = {"boxstyle": "square,pad=0.15", "facecolor": "white", "edgecolor": "none"}
    for text, centre_deg, row, (_, obstacle) in zip(texts, centres_deg, rows, ranked, strict=True):
        if row is None:
            continue
        height_deg = top_deg * (1.06 + ROW_STEP * row)
        peak = obstacle.peak_azimuth_deg, max(obstacle.peak_elevation_deg, 0.0)
        axes.plot([peak[0], peak[0]], [peak[1], height_deg], color=INK, linewidth=0.4, zorder=6, clip_on=False)
        axes.text(
            centre_deg, height_deg, text, ha="center", va="center", fontsize=6.5, bbox=box, zorder=8, parse_math=False
        )
