"""The skyplot: what hides the sky, and one day of satellites with the margin of their C/N0."""

from __future__ import annotations

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
    on_paper,
    outline_points,
    shortened,
)
from siteassess.report.figures.labels import spread
from siteassess.report.figures.track_lines import HIDDEN, MARGIN_CLASSES, draw_tracks
from siteassess.report.phrases import plain
from siteassess.report.sections.answers import ranked_obstacles

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.assessment import Assessment
    from siteassess.horizon.skyline import Skyline
    from siteassess.verdict.verdict import Verdict

__all__ = ["skyplot_svg"]

FloatArray = NDArray[np.float64]

SIZE_IN = (7.1, 5.3)
KEY_LEFT = SIZE_IN[1] / SIZE_IN[0] + 0.01
HALF_WIDTH = 1.24  # of the drawing, where the rim has radius 1
AZIMUTH_RADIUS, BADGE_RADIUS = 1.055, 1.15
BADGE_GAP_DEG = 6.5
MOST_BADGES = 18
KEY_LETTERS = 27
MASK_DASHES = (5.0, 2.0)


def skyplot_svg(assessment: Assessment) -> str:
    """The skyplot of an assessment as SVG.

    North is up, azimuth clockwise, zenith in the centre; the distance from it grows evenly toward the rim.
    """
    return drawn_svg(lambda: _figure(assessment), hash_salt="skyplot")


def _figure(assessment: Assessment) -> Figure:
    from matplotlib.figure import Figure

    mask_deg = assessment.site.require.elevation_mask_deg
    figure = Figure(figsize=SIZE_IN)
    sky = figure.add_axes((0.0, 0.0, SIZE_IN[1] / SIZE_IN[0], 1.0))
    sky.set(xlim=(-HALF_WIDTH, HALF_WIDTH), ylim=(-HALF_WIDTH, HALF_WIDTH), aspect="equal")
    sky.axis("off")
    _draw_skyline(sky, assessment.skyline)
    _draw_grid(sky, mask_deg)
    draw_tracks(sky, assessment)
    _draw_badges(sky, assessment.verdict)
    _draw_key(figure, mask_deg)
    _draw_names(figure, assessment.verdict)
    return figure


def _ribbon(azimuth_deg: FloatArray, upper_deg: FloatArray, lower_deg: FloatArray) -> Any:
    """Closed shape between two edges."""
    return on_paper(
        np.concatenate([azimuth_deg, azimuth_deg[::-1]]), np.concatenate([upper_deg, lower_deg[::-1]])
    )


def _draw_skyline(sky: Axes, skyline: Skyline) -> None:
    for start_deg, end_deg in skyline.unsurveyed_deg:
        around_deg = np.linspace(start_deg, end_deg, 2 + int(end_deg - start_deg))
        zenith = np.full_like(around_deg, 90.0)
        sky.fill(*_ribbon(around_deg, zenith, np.zeros_like(around_deg)), **UNSURVEYED_LOOK, zorder=1)
    for obstacle in skyline.obstacles:
        if obstacle.cover == "foliage":
            sky.fill(*_ribbon(*obstacle_edges(obstacle)), **LEAVES_LOOK, zorder=2)
        elif obstacle.hangs_free:
            sky.fill(*_ribbon(*obstacle_edges(obstacle)), **FREE_HANGING_LOOK, zorder=3)
    azimuth_deg, outline_deg = outline_points(skyline)
    shape = _ribbon(azimuth_deg, outline_deg, np.zeros_like(outline_deg))
    sky.fill(*shape, facecolor=SOLID, linewidth=0, zorder=3)
    sky.plot(*on_paper(azimuth_deg, outline_deg), color=INK, linewidth=0.8, zorder=3)


def _draw_grid(sky: Axes, mask_deg: float) -> None:
    around_deg = np.linspace(0.0, 360.0, 181)

    def ring(elevation_deg: float) -> Any:
        return on_paper(around_deg, np.full_like(around_deg, elevation_deg))

    box = {"boxstyle": "square,pad=0.1", "facecolor": "white", "edgecolor": "none", "alpha": 0.85}
    for elevation_deg in (30.0, 60.0):
        sky.plot(*ring(elevation_deg), color=QUIET, linewidth=0.4, zorder=4)
        x, y = on_paper(15.0, elevation_deg)
        sky.text(x, y, f"{elevation_deg:.0f}°", ha="center", va="center", fontsize=6, bbox=box, zorder=8)
    sky.plot(*ring(mask_deg), color=INK, linewidth=0.9, dashes=MASK_DASHES, zorder=6)
    sky.plot(*ring(0.0), color=INK, linewidth=1.2, zorder=6)

    spokes_deg = np.arange(0.0, 360.0, 30.0)
    spokes = np.array([on_paper(spokes_deg, elevation_deg) for elevation_deg in (0.0, 84.0, np.nan)])
    sky.plot(*spokes.transpose(1, 2, 0).reshape(2, -1), color=QUIET, linewidth=0.3, zorder=4)
    for azimuth_deg in spokes_deg.tolist():
        x, y = on_paper(azimuth_deg, _elevation_at(AZIMUTH_RADIUS))
        cardinal = {0.0: "N", 90.0: "E", 180.0: "S", 270.0: "W"}.get(azimuth_deg)
        if cardinal:
            sky.text(x, y, cardinal, ha="center", va="center", fontsize=11, fontweight="bold")
        else:
            sky.text(x, y, f"{azimuth_deg:.0f}°", ha="center", va="center", fontsize=6, color="#59626a")


def _elevation_at(radius: float) -> float:
    return 90.0 * (1.0 - radius)


def _draw_badges(sky: Axes, verdict: Verdict) -> None:
    """Numbers outside the rim, each with a line to the azimuth of the obstacle's highest point."""
    peaks_deg = np.array(
        [obstacle.peak_azimuth_deg for _, obstacle in ranked_obstacles(verdict)[:MOST_BADGES]]
    )
    box = {"boxstyle": "circle,pad=0.25", "facecolor": "white", "edgecolor": INK, "linewidth": 0.6}
    places_deg = spread(peaks_deg, BADGE_GAP_DEG)
    for rank, (place_deg, peak_deg) in enumerate(zip(places_deg, peaks_deg, strict=True), start=1):
        x, y = on_paper(place_deg, _elevation_at(BADGE_RADIUS))
        ends = on_paper(np.array([peak_deg, place_deg]), np.array([0.0, _elevation_at(BADGE_RADIUS - 0.035)]))
        sky.plot(*ends, color=INK, linewidth=0.4, zorder=2)
        sky.text(x, y, str(rank), ha="center", va="center", fontsize=6, bbox=box, zorder=9)


def _draw_key(figure: Figure, mask_deg: float) -> None:
    """Meaning of lines and fills, right of the sky."""
    from matplotlib.lines import Line2D
    from matplotlib.patches import Patch

    entries: list[tuple[Line2D | Patch, str]] = []
    for look in (*reversed(MARGIN_CLASSES), HIDDEN):
        line = Line2D([], [], color=look.color, linewidth=look.width)
        line.set_linestyle(look.dash)
        entries.append((line, look.name))
    entries += [
        (Patch(facecolor=SOLID, edgecolor=INK, linewidth=0.8), "solid"),
        (Patch(**LEAVES_LOOK), "leaves"),
        (Patch(**UNSURVEYED_LOOK), "not surveyed"),
        (Line2D([], [], color=INK, linewidth=0.9, dashes=MASK_DASHES), f"mask, {mask_deg:g}°"),
    ]
    figure.legend(
        *zip(*entries, strict=True),
        loc="upper left",
        bbox_to_anchor=(KEY_LEFT, 0.97),
        title="Margin of C/N0",
        alignment="left",
        title_fontproperties={"weight": "bold", "size": 7.5},
        frameon=False,
        fontsize=7,
        handlelength=3.0,
        handleheight=1.0,
    )


def _draw_names(figure: Figure, verdict: Verdict) -> None:
    """The names behind the numbers, below the key."""
    ranked = ranked_obstacles(verdict)
    names = [
        f"{rank}  {shortened(plain(obstacle.name), KEY_LETTERS)}"
        for rank, (_, obstacle) in enumerate(ranked[:MOST_BADGES], start=1)
    ]
    if len(ranked) > MOST_BADGES:
        names.append(f"and {len(ranked) - MOST_BADGES} more in the table")
    if names:
        left = KEY_LEFT + 0.01
        figure.text(left, 0.54, "Obstacles", fontsize=7.5, fontweight="bold", va="top")
        figure.text(left, 0.51, "\n".join(names), fontsize=6.5, va="top", linespacing=1.45, parse_math=False)
