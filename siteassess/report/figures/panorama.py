"""The horizon unrolled: azimuth across, elevation up, every obstacle with its name."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from siteassess.report.figures.drawing import (
    FREE_HANGING_LOOK,
    INK,
    LEAVES_LOOK,
    QUIET,
    SOLID,
    UNSURVEYED_LOOK,
    drawn_svg,
    obstacle_edges,
    outline_points,
    shortened,
)
from siteassess.report.figures.labels import label_rows
from siteassess.report.phrases import plain
from siteassess.report.sections.answers import ranked_obstacles

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.assessment import Assessment
    from siteassess.horizon.skyline import Skyline
    from siteassess.verdict.verdict import Verdict

__all__ = [
    "HEIGHTS_IN",
    "WIDTH_IN",
    "Label",
    "draw_frame",
    "draw_labels",
    "draw_mask",
    "panorama_svg",
    "placed_labels",
]

FloatArray = NDArray[np.float64]

WIDTH_IN = 7.1
HEIGHTS_IN = SKY_IN, BELOW_IN, ROW_IN = (
    1.75,
    0.36,
    0.145,
)  # of the sky, of what is below it, of a row of labels
LOWEST_TOP_DEG = 30.0
MOST_LABELS = 16
LABEL_LETTERS = 24
LETTER_DEG = 3.0  # width of a letter of a label, in degrees of azimuth on paper
LABEL_ROWS = 5


@dataclass(frozen=True, slots=True, kw_only=True)
class Label:
    """Name of an obstacle, its place above the sky, and the highest point of the obstacle."""

    text: str
    centre_deg: float
    row: int
    azimuth_deg: float
    peak_deg: float


def panorama_svg(assessment: Assessment) -> str:
    """The horizon of an assessment, all round, as SVG."""
    return drawn_svg(lambda: _figure(assessment), hash_salt="panorama")


def _figure(assessment: Assessment) -> Figure:
    from matplotlib.figure import Figure

    labels = _labels(assessment.verdict)
    rows = 1 + max((label.row for label in labels), default=0)
    height_in = BELOW_IN + SKY_IN + ROW_IN * (rows + 0.6)
    figure = Figure(figsize=(WIDTH_IN, height_in))
    axes = figure.add_axes((0.065, BELOW_IN / height_in, 0.92, SKY_IN / height_in))
    peaks_deg = [obstacle.peak_elevation_deg for obstacle in assessment.verdict.obstacles]
    mask_deg = assessment.site.require.elevation_mask_deg
    top_deg = min(90.0, max(LOWEST_TOP_DEG, 1.15 * max(peaks_deg, default=0.0), 1.5 * mask_deg))
    draw_frame(axes, top_deg)
    _draw_skyline(axes, assessment.skyline, top_deg)
    draw_mask(axes, mask_deg)
    draw_labels(axes, labels, top_deg)
    return figure


def draw_frame(axes: Axes, top_deg: float) -> None:
    """Scales of azimuth and elevation."""
    axes.set(xlim=(0.0, 360.0), ylim=(0.0, top_deg), ylabel="elevation")
    ticks_deg = np.arange(0, 361, 30)
    names = {0: "N", 90: "E", 180: "S", 270: "W", 360: "N"}
    axes.set_xticks(ticks_deg, [f"{tick}°\n{names.get(tick, '')}".rstrip() for tick in ticks_deg.tolist()])
    axes.yaxis.set_major_formatter("{x:.0f}°")
    axes.grid(color=QUIET, linewidth=0.3)
    axes.spines[["top", "right"]].set_visible(False)


def draw_mask(axes: Axes, mask_deg: float) -> None:
    """The elevation mask as a dashed line."""
    box = {"boxstyle": "square,pad=0.1", "facecolor": "white", "edgecolor": "none", "alpha": 0.85}
    axes.axhline(mask_deg, color=INK, linewidth=0.9, dashes=(5, 2), zorder=5)
    axes.text(358.5, mask_deg, f"mask {mask_deg:g}°", ha="right", va="center", fontsize=6, bbox=box, zorder=7)


def _draw_skyline(axes: Axes, skyline: Skyline, top_deg: float) -> None:
    for start_deg, end_deg in skyline.unsurveyed_deg:
        axes.fill_between([start_deg, end_deg], 0.0, top_deg, **UNSURVEYED_LOOK, zorder=1)
    for obstacle in skyline.obstacles:
        if obstacle.cover == "foliage":
            _draw_strip(axes, *obstacle_edges(obstacle), LEAVES_LOOK | {"zorder": 2})
        elif obstacle.hangs_free:
            _draw_strip(axes, *obstacle_edges(obstacle), FREE_HANGING_LOOK | {"zorder": 3})
    azimuth_deg, outline_deg = outline_points(skyline)
    axes.fill_between(azimuth_deg, 0.0, outline_deg, facecolor=SOLID, linewidth=0, zorder=3)
    axes.plot(azimuth_deg, outline_deg, color=INK, linewidth=0.8, zorder=4)


def _draw_strip(
    axes: Axes, azimuth_deg: FloatArray, upper_deg: FloatArray, lower_deg: FloatArray, look: dict[str, Any]
) -> None:
    """One obstacle; what runs through north is drawn at both ends, and cut off there."""
    for turn_deg in (0.0, -360.0) if azimuth_deg[-1] > 360.0 else (0.0,):
        axes.fill_between(azimuth_deg + turn_deg, lower_deg, upper_deg, **look)


def _labels(verdict: Verdict) -> list[Label]:
    """Names of the dearest obstacles; who costs more is served first, who finds no room stays without."""
    ranked = ranked_obstacles(verdict)[:MOST_LABELS]
    return placed_labels(
        [
            (
                f"{rank} {shortened(plain(obstacle.name), LABEL_LETTERS)}",
                obstacle.peak_azimuth_deg,
                obstacle.peak_elevation_deg,
            )
            for rank, (_, obstacle) in enumerate(ranked, start=1)
        ]
    )


def placed_labels(named: list[tuple[str, float, float]]) -> list[Label]:
    """Labels for texts with azimuth and elevation of what they name; who finds no room stays without."""
    texts = [text for text, _, _ in named]
    widths_deg = [LETTER_DEG * len(text) + 4.0 for text in texts]
    centres_deg = [
        min(max(azimuth_deg, width / 2), 360.0 - width / 2)
        for (_, azimuth_deg, _), width in zip(named, widths_deg, strict=True)
    ]
    rows = label_rows(centres_deg, widths_deg, LABEL_ROWS)
    return [
        Label(text=text, centre_deg=centre_deg, row=row, azimuth_deg=azimuth_deg, peak_deg=peak_deg)
        for (text, azimuth_deg, peak_deg), centre_deg, row in zip(named, centres_deg, rows, strict=True)
        if row is not None
    ]


def draw_labels(axes: Axes, labels: list[Label], top_deg: float) -> None:
    """Names above the sky, each with a line down to its highest point."""
    box = {"boxstyle": "square,pad=0.15", "facecolor": "white", "edgecolor": "none"}
    for label in labels:
        height_deg = top_deg * (1.0 + ROW_IN / SKY_IN * (label.row + 0.8))
        axes.plot(
            [label.azimuth_deg, label.azimuth_deg],
            [max(label.peak_deg, 0.0), height_deg],
            color=INK,
            linewidth=0.4,
            zorder=6,
            clip_on=False,
        )
        axes.text(
            label.centre_deg,
            height_deg,
            label.text,
            ha="center",
            va="center",
            fontsize=6.5,
            bbox=box,
            zorder=8,
            parse_math=False,
        )
