"""The skyplot: what hides the sky, and one day of satellites with the margin of their C/N0."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

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

__all__ = ["first_signal_margin_db", "skyplot_svg", "spread"]

FloatArray = NDArray[np.float64]
BoolArray = NDArray[np.bool_]

DAY_S = 86_400.0
SIZE_IN = (7.1, 5.3)
# Upper end of each class of margin [dB], its colour, line width and dash. Lightness falls as the margin grows, so
# that the order survives grey print; width and dash say the same again.
CLASSES = (
    (0.0, "#dd8a1f", 0.9, (0, (3.0, 1.6))),
    (3.0, "#c2b04a", 0.7, "-"),
    (6.0, "#6fa08c", 0.9, "-"),
    (9.0, "#3a7a99", 1.1, "-"),
    (np.inf, "#1d3f73", 1.3, "-"),
)
CLASS_NAMES = ("below the minimum", "0 to 3 dB above", "3 to 6 dB above", "6 to 9 dB above", "more than 9 dB above")
HIDDEN_DASH = (0, (0.8, 1.8))
BADGE_RADIUS = 1.15
BADGE_GAP_DEG = 6.5
MOST_BADGES = 20
KEY_LETTERS = 27


def skyplot_svg(assessment: Assessment) -> str:
    """The skyplot of an assessment as SVG.

    North is up, azimuth clockwise, zenith in the centre; the distance from it grows evenly as elevation falls.
    """
    return drawn_svg(lambda: _figure(assessment), hash_salt="skyplot")


def _figure(assessment: Assessment) -> Figure:
    from matplotlib.figure import Figure

    figure = Figure(figsize=SIZE_IN)
    sky = figure.add_axes((0.0, 0.0, SIZE_IN[1] / SIZE_IN[0], 1.0))
    sky.set(xlim=(-1.24, 1.24), ylim=(-1.24, 1.24), aspect="equal")
    sky.axis("off")
    _draw_skyline(sky, assessment)
    _draw_grid(sky, assessment.site.require.elevation_mask_deg)
    _draw_tracks(sky, assessment)
    _draw_badges(sky, assessment)
    _draw_key(figure, assessment)
    return figure


def _flat(azimuth_deg: FloatArray, elevation_deg: FloatArray) -> tuple[FloatArray, FloatArray]:
    """Place on the paper: the rim has radius 1."""
    azimuth_rad = np.deg2rad(azimuth_deg)
    radius = (90.0 - np.asarray(elevation_deg)) / 90.0
    return radius * np.sin(azimuth_rad), radius * np.cos(azimuth_rad)


def _ribbon(
    azimuth_deg: FloatArray, upper_deg: FloatArray, lower_deg: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Closed shape between two edges, cut at the horizon."""
    return _flat(
        np.concatenate([azimuth_deg, azimuth_deg[::-1]]),
        np.maximum(np.concatenate([upper_deg, lower_deg[::-1]]), 0.0),
    )


def _draw_skyline(sky: Axes, assessment: Assessment) -> None:
    skyline = assessment.skyline
    for start, end in skyline.unsurveyed_deg:
        around = np.linspace(start, end, max(2, int(end - start) + 1))
        shape = _ribbon(around, np.full_like(around, 90.0), np.zeros_like(around))
        sky.fill(*shape, facecolor="none", edgecolor="#b9bfc4", hatch="////", linewidth=0.0, zorder=1)
    for obstacle in skyline.obstacles:
        shape = _ribbon(*obstacle_edges(obstacle))
        if obstacle.cover == "foliage":
            sky.fill(*shape, facecolor=LEAVES, edgecolor="#7c8c5c", hatch="....", linewidth=0.6, zorder=2)
        elif obstacle.hangs_free:
            sky.fill(*shape, facecolor=SOLID, edgecolor=INK, linewidth=0.6, zorder=3)
    azimuth_deg, outline_deg = outline_points(skyline.outline)
    sky.fill(*_ribbon(azimuth_deg, outline_deg, np.zeros_like(outline_deg)), facecolor=SOLID, linewidth=0, zorder=3)
    sky.plot(*_flat(azimuth_deg, np.maximum(outline_deg, 0.0)), color=INK, linewidth=0.8, zorder=3)


def _draw_grid(sky: Axes, mask_deg: float) -> None:
    around = np.linspace(0.0, 360.0, 181)
    for elevation_deg in (30.0, 60.0):
        sky.plot(*_flat(around, np.full_like(around, elevation_deg)), color=QUIET, linewidth=0.4, zorder=4)
    spokes = np.arange(0.0, 360.0, 30.0)
    ends = [_flat(spokes, np.full_like(spokes, elevation_deg)) for elevation_deg in (0.0, 84.0)]
    gap = np.full_like(spokes, np.nan)
    sky.plot(
        np.stack([ends[0][0], ends[1][0], gap], axis=1).ravel(),
        np.stack([ends[0][1], ends[1][1], gap], axis=1).ravel(),
        color=QUIET,
        linewidth=0.3,
        zorder=4,
    )
    sky.plot(*_flat(around, np.full_like(around, mask_deg)), color=INK, linewidth=0.9, dashes=(5, 2), zorder=6)
    sky.plot(*_flat(around, np.zeros_like(around)), color=INK, linewidth=1.2, zorder=6)
    for azimuth_deg in spokes:
        x, y = _flat(azimuth_deg, -5.0)
        name = {0.0: "N", 90.0: "E", 180.0: "S", 270.0: "W"}.get(azimuth_deg)
        look = {"fontsize": 11, "fontweight": "bold"} if name else {"fontsize": 6, "color": "#59626a"}
        sky.text(x, y, name or f"{azimuth_deg:.0f}°", ha="center", va="center", **look)
    box = {"boxstyle": "square,pad=0.1", "facecolor": "white", "edgecolor": "none", "alpha": 0.85}
    for elevation_deg in (30.0, 60.0):
        x, y = _flat(15.0, elevation_deg)
        sky.text(x, y, f"{elevation_deg:.0f}°", ha="center", va="center", fontsize=6, bbox=box, zorder=8)


def first_signal_margin_db(assessment: Assessment) -> FloatArray:
    """C/N0 above the minimum, shape (sample,), of the first of the site's signals that each satellite sends.

    NaN where a satellite sends none of them.
    """
    margin_db = np.full(len(assessment.budget.samples.satellite), np.nan)
    for budget in reversed(assessment.budget.signals):
        margin_db[budget.sample] = budget.cn0_dbhz - budget.min_cn0_dbhz
    return margin_db


def _draw_tracks(sky: Axes, assessment: Assessment) -> None:
    samples, tracks = assessment.budget.samples, assessment.tracks
    margin_db = first_signal_margin_db(assessment)
    shown = (tracks.time_s[samples.epoch] < DAY_S) & np.isfinite(margin_db)
    x, y = _flat(samples.azimuth_deg[shown], samples.apparent_elevation_deg[shown])
    satellite, epoch = samples.satellite[shown], samples.epoch[shown]
    hidden, margin_db = samples.hidden[shown], margin_db[shown]
    joined = np.zeros(len(x), dtype=bool)
    joined[:-1] = (np.diff(satellite) == 0) & (np.diff(epoch) == 1)
    standing = np.array([name == "GEO" for name in tracks.orbit_class], dtype=bool)[satellite]
    first = np.ones(len(x), dtype=bool)
    first[1:] = np.diff(satellite) != 0

    def draw(chosen: BoolArray, color: str, width: float, dash: object) -> None:
        sky.plot(*_runs(x, y, chosen & ~standing, joined), color=color, linewidth=width, linestyle=dash, zorder=5)
        dots = chosen & standing & first
        if dots.any():
            sky.plot(x[dots], y[dots], "o", color=color, markersize=3.5, zorder=5)

    draw(hidden, "#6a6660", 0.5, HIDDEN_DASH)
    level = np.searchsorted([upper for upper, *_ in CLASSES], margin_db, side="right")
    for index, (_, color, width, dash) in enumerate(CLASSES):
        draw(~hidden & (level == index), color, width, dash)


def _runs(x: FloatArray, y: FloatArray, chosen: BoolArray, joined: BoolArray) -> tuple[FloatArray, FloatArray]:
    """One broken line through the chosen samples: a step belongs to the sample where it starts."""
    step = chosen & joined
    touched = step.copy()
    touched[1:] |= step[:-1]
    ends = np.flatnonzero(~step[touched]) + 1
    return np.insert(x[touched], ends, np.nan), np.insert(y[touched], ends, np.nan)


def spread(azimuth_deg: FloatArray, gap_deg: float) -> FloatArray:
    """Azimuths moved apart as little as needed (least squares) so that neighbours keep a gap.

    Examples
    --------
    >>> spread(np.array([10.0, 11.0, 90.0]), 5.0).tolist()
    [8.0, 13.0, 90.0]
    """
    if len(azimuth_deg) < 2:
        return azimuth_deg
    gap_deg = min(gap_deg, 360.0 / len(azimuth_deg))
    order = np.argsort(azimuth_deg, kind="stable")
    ascending = azimuth_deg[order]
    widest = int(np.argmax(np.diff(np.append(ascending, ascending[0] + 360.0))))
    turned = np.roll(order, -(widest + 1))  # counted from the widest opening on, none need pass it
    unwrapped = azimuth_deg[turned] + 360.0 * (azimuth_deg[turned] <= ascending[widest]) * (widest + 1 < len(order))
    offset = gap_deg * np.arange(len(order))
    pools: list[list[float]] = []  # sum and count of stretches that share one shift: pool adjacent violators
    for value in unwrapped - offset:
        pools.append([value, 1.0])
        while len(pools) > 1 and pools[-2][0] / pools[-2][1] > pools[-1][0] / pools[-1][1]:
            total, count = pools.pop()
            pools[-1][0] += total
            pools[-1][1] += count
    placed = np.empty(len(order))
    placed[turned] = np.repeat([p[0] / p[1] for p in pools], [int(p[1]) for p in pools]) + offset
    return placed


def _draw_badges(sky: Axes, assessment: Assessment) -> None:
    ranked = ranked_obstacles(assessment.verdict)[:MOST_BADGES]
    peaks_deg = np.array([obstacle.peak_azimuth_deg for _, obstacle in ranked])
    for rank, (at_deg, peak_deg) in enumerate(zip(spread(peaks_deg, BADGE_GAP_DEG), peaks_deg, strict=True), start=1):
        x, y = _flat(at_deg, 90.0 * (1.0 - BADGE_RADIUS))
        rim = _flat(peak_deg, 0.0)
        foot = _flat(at_deg, 90.0 * (1.0 - BADGE_RADIUS + 0.035))
        sky.plot([rim[0], foot[0]], [rim[1], foot[1]], color=INK, linewidth=0.4, zorder=2)
        box = {"boxstyle": "circle,pad=0.25", "facecolor": "white", "edgecolor": INK, "linewidth": 0.6}
        sky.text(x, y, str(rank), ha="center", va="center", fontsize=6, bbox=box, zorder=9)


def _draw_key(figure: Figure, assessment: Assessment) -> None:
    """Meaning of lines and fills, and the names behind the numbers, right of the sky."""
    from matplotlib.lines import Line2D
    from matplotlib.patches import Patch

    left = SIZE_IN[1] / SIZE_IN[0] + 0.01
    lines = [
        Line2D([], [], color=color, linewidth=width, linestyle=dash)
        for _, color, width, dash in reversed(CLASSES)
    ]
    lines.append(Line2D([], [], color="#6a6660", linewidth=0.5, linestyle=HIDDEN_DASH))
    mask = f"mask, {assessment.site.require.elevation_mask_deg:g}°"
    fills = [
        Patch(facecolor=SOLID, edgecolor=INK, linewidth=0.8),
        Patch(facecolor=LEAVES, edgecolor="#7c8c5c", hatch="....", linewidth=0.6),
        Patch(facecolor="none", edgecolor="#b9bfc4", hatch="////", linewidth=0.5),
        Line2D([], [], color=INK, linewidth=0.9, dashes=(5, 2)),
    ]
    figure.legend(
        [*lines, *fills],
        [*reversed(CLASS_NAMES), "hidden", "solid", "leaves", "not surveyed", mask],
        loc="upper left",
        bbox_to_anchor=(left, 0.97),
        title="Margin of C/N0",
        alignment="left",
        title_fontproperties={"weight": "bold", "size": 7.5},
        frameon=False,
        fontsize=7,
        handlelength=3.0,
    )
    ranked = ranked_obstacles(assessment.verdict)
    names = [
        f"{rank}  {shortened(plain(obstacle.name), KEY_LETTERS)}"
        for rank, (_, obstacle) in enumerate(ranked[:MOST_BADGES], start=1)
    ]
    if len(ranked) > MOST_BADGES:
        names.append(f"and {len(ranked) - MOST_BADGES} more in the table")
    if names:
        figure.text(left + 0.01, 0.54, "Obstacles", fontsize=7.5, fontweight="bold", va="top")
        figure.text(left + 0.01, 0.51, "\n".join(names), fontsize=6.5, va="top", linespacing=1.45, parse_math=False)
