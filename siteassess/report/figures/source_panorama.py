"""The assembled horizon unrolled, each source with a look of its own."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from siteassess.report.figures.drawing import (
    INK,
    QUIET,
    UNSURVEYED_LOOK,
    drawn_svg,
    obstacle_edges,
    outline_points,
    shortened,
)
from siteassess.report.figures.panorama import (
    HEIGHTS_IN,
    WIDTH_IN,
    draw_frame,
    draw_labels,
    draw_mask,
    placed_labels,
)
from siteassess.report.phrases import plain

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.horizon.shares import SkyShares
    from siteassess.horizon.skyline import Obstacle, Skyline

__all__ = ["source_panorama_svg", "sources_of"]

FloatArray = NDArray[np.float64]

# Told apart three times: by colour, by lightness (87, 67, 44, 76 and 56 of 100) and by hatch.
FILLS: tuple[dict[str, Any], ...] = (
    {"facecolor": "#e6d9bd", "hatch": ""},
    {"facecolor": "#86a9c7", "hatch": "\\\\\\\\"},
    {"facecolor": "#7a6247", "hatch": ""},
    {"facecolor": "#d4b3c4", "hatch": "xxx"},
    {"facecolor": "#5f8f86", "hatch": "---"},
)
LINES: tuple[Any, ...] = ("-", (0, (4, 1.5)), (0, (1, 1.2)), (0, (6, 1.5, 1, 1.5)), (0, (2, 2)))
LEAVES_HATCH = "..."
MOST_LABELS = 14
LABEL_LETTERS = 24
LEGEND_IN = 0.17  # height of a row of the legend
LEGEND_COLUMNS = 3
LOWEST_TOP_DEG = 15.0


def sources_of(skyline: Skyline) -> tuple[str, ...]:
    """Names of the files that show something, in the order of the site file."""
    return tuple(dict.fromkeys(obstacle.source for obstacle in skyline.obstacles))


def source_panorama_svg(skyline: Skyline, shares: SkyShares, mask_deg: float) -> str:
    """The horizon all round as SVG, the outline in the look of the source that makes it.

    Lines show what each source has by itself, also where another one stands higher. A bar above the sky marks
    where a survey and a model disagree.

    Parameters
    ----------
    skyline : Skyline
        What hides the sky.
    shares : SkyShares
        Its shares above the mask; obstacles that take most of the sky are named.
    mask_deg : float
        Elevation mask.
    """
    return drawn_svg(lambda: _figure(skyline, shares, mask_deg), hash_salt="source-panorama")


def _figure(skyline: Skyline, shares: SkyShares, mask_deg: float) -> Figure:
    from matplotlib.figure import Figure

    sky_in, below_in, row_in = HEIGHTS_IN
    peaks = [_peak(obstacle) for obstacle in skyline.obstacles]
    labels = placed_labels(_named(skyline, shares, peaks))
    handles = _legend(skyline)
    legend_in = LEGEND_IN * (-(-len(handles) // LEGEND_COLUMNS) + 0.4)
    rows = 1 + max((label.row for label in labels), default=0)
    height_in = legend_in + below_in + sky_in + row_in * (rows + 0.6)
    figure = Figure(figsize=(WIDTH_IN, height_in))
    axes = figure.add_axes((0.065, (legend_in + below_in) / height_in, 0.92, sky_in / height_in))
    highest_deg = max((peak for _, peak in peaks), default=0.0)
    top_deg = min(90.0, max(LOWEST_TOP_DEG, 1.15 * highest_deg, 1.5 * mask_deg))
    draw_frame(axes, top_deg)
    _draw_sources(axes, skyline, top_deg)
    _draw_disagreements(axes, skyline, top_deg)
    draw_mask(axes, mask_deg)
    draw_labels(axes, labels, top_deg)
    figure.legend(
        handles=handles, loc="lower center", ncols=LEGEND_COLUMNS, frameon=False, fontsize=6.5, borderpad=0.2
    )
    return figure


def _draw_sources(axes: Axes, skyline: Skyline, top_deg: float) -> None:
    for start_deg, end_deg in skyline.unsurveyed_deg:
        axes.fill_between([start_deg, end_deg], 0.0, top_deg, **UNSURVEYED_LOOK, zorder=1)
    azimuth_deg, outline_deg = outline_points(skyline)
    maker = _makers(skyline, azimuth_deg)
    for number, source in enumerate(sources_of(skyline)):
        look = FILLS[number % len(FILLS)]
        for obstacle in (one for one in skyline.obstacles if one.source == source):
            if obstacle.cover == "foliage":
                _draw_strip(axes, obstacle, look | {"hatch": LEAVES_HATCH, "alpha": 0.75}, zorder=2)
            elif obstacle.hangs_free:
                _draw_strip(axes, obstacle, look, zorder=4)
        own = maker == number
        axes.fill_between(
            azimuth_deg, 0.0, outline_deg, where=own, edgecolor=INK, linewidth=0, zorder=3, **look
        )
        axes.plot(*_own_outline(skyline, source), linestyle=LINES[number % len(LINES)], **_line_look())
    axes.plot(azimuth_deg, outline_deg, color=INK, linewidth=0.9, zorder=5)


def _line_look() -> dict[str, Any]:
    return {"color": INK, "linewidth": 0.6, "zorder": 5}


def _draw_strip(axes: Axes, obstacle: Obstacle, look: dict[str, Any], zorder: int) -> None:
    azimuth_deg, upper_deg, lower_deg = obstacle_edges(obstacle)
    for turn_deg in (0.0, -360.0) if azimuth_deg[-1] > 360.0 else (0.0,):
        axes.fill_between(
            azimuth_deg + turn_deg, lower_deg, upper_deg, edgecolor=INK, linewidth=0.5, zorder=zorder, **look
        )


def _draw_disagreements(axes: Axes, skyline: Skyline, top_deg: float) -> None:
    for found in skyline.disagreements:
        for turn_deg in (0.0, -360.0):
            ends_deg = np.clip([found.start_deg + turn_deg, found.end_deg + turn_deg], 0.0, 360.0)
            if ends_deg[1] > ends_deg[0]:
                axes.plot(
                    ends_deg, [0.97 * top_deg] * 2, color=INK, linewidth=2.5, solid_capstyle="butt", zorder=9
                )


def _makers(skyline: Skyline, azimuth_deg: FloatArray) -> NDArray[np.int64]:
    """Number of the source that makes the outline at azimuths; -1 where nothing does."""
    sources = sources_of(skyline)
    of_obstacle = np.array([*(sources.index(one.source) for one in skyline.obstacles), -1], dtype=np.int64)
    outline = skyline.outline
    piece = np.searchsorted(outline.start_deg, azimuth_deg, side="right") - 1
    return np.asarray(of_obstacle[outline.obstacle[piece]])


def _own_outline(skyline: Skyline, source: str) -> tuple[FloatArray, FloatArray]:
    """The outline that one source has by itself; NaN where it has none above the horizon."""
    from dataclasses import replace

    from siteassess.horizon.outline import upper_envelope

    own = tuple(one for one in skyline.obstacles if one.source == source)
    azimuth_deg, outline_deg = outline_points(replace(skyline, obstacles=own, outline=upper_envelope(own)))
    return azimuth_deg, np.where(outline_deg > 0.0, outline_deg, np.nan)


def _peak(obstacle: Obstacle) -> tuple[float, float]:
    azimuth_deg, upper_deg, _ = obstacle_edges(obstacle)
    highest = int(np.argmax(upper_deg))
    return float(azimuth_deg[highest]) % 360.0, float(upper_deg[highest])


def _named(
    skyline: Skyline, shares: SkyShares, peaks: list[tuple[float, float]]
) -> list[tuple[str, float, float]]:
    taken = np.array(shares.obstacle_blocked_share_above_mask)
    dearest: dict[str, int] = {}
    for index in np.argsort(-taken, kind="stable").tolist():
        if taken[index] > 0.0:
            # Two sources may show one obstacle; its name stands there once.
            dearest.setdefault(shortened(plain(skyline.obstacles[index].name), LABEL_LETTERS), index)
    return [(name, *peaks[index]) for name, index in list(dearest.items())[:MOST_LABELS]]


def _legend(skyline: Skyline) -> list[Any]:
    from matplotlib.lines import Line2D
    from matplotlib.patches import Patch

    handles: list[Any] = []
    for number, source in enumerate(sources_of(skyline)):
        look = FILLS[number % len(FILLS)]
        handles.append(
            Patch(
                edgecolor=INK,
                linewidth=0.9,
                linestyle=LINES[number % len(LINES)],
                label=shortened(plain(source), 40),
                **look,
            )
        )
    if any(obstacle.cover == "foliage" for obstacle in skyline.obstacles):
        handles.append(
            Patch(facecolor="white", edgecolor=INK, hatch=LEAVES_HATCH, linewidth=0.5, label="leaves")
        )
    if len(skyline.unsurveyed_deg):
        handles.append(Patch(**(UNSURVEYED_LOOK | {"edgecolor": QUIET}), label="not surveyed"))
    if skyline.disagreements:
        handles.append(Line2D([], [], color=INK, linewidth=2.5, label="survey and model disagree"))
    return handles
