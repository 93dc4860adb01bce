"""The horizons of two surveys over each other, what rose and what fell told apart."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from siteassess.candidates.outline_changes import compared_edges_deg, highest_edge_deg
from siteassess.report.figures.drawing import INK, SOLID, UNSURVEYED_LOOK, drawn_svg
from siteassess.report.figures.panorama import HEIGHTS_IN, WIDTH_IN, draw_frame, draw_mask

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.candidates.outline_changes import OutlineChange
    from siteassess.candidates.resurvey import Resurvey

__all__ = ["resurvey_svg"]

FloatArray = NDArray[np.float64]

# Told apart by colour, by lightness and by hatch.
LOOKS: dict[str, dict[str, Any]] = {
    "rose": {"facecolor": "#a8503c", "edgecolor": INK, "hatch": "////", "linewidth": 0.4},
    "fell": {"facecolor": "#e4eef2", "edgecolor": "#4d7f93", "hatch": "....", "linewidth": 0.4},
}
EARLIER: dict[str, Any] = {"color": INK, "linewidth": 0.8, "linestyle": (0, (3, 1.5))}
LATER: dict[str, Any] = {"color": INK, "linewidth": 1.1}
LEGEND_IN = 0.32
STEP_DEG = 0.1
LOWEST_TOP_DEG = 20.0


def resurvey_svg(changes: Resurvey) -> str:
    """Both horizons all round as SVG; the upper edges count, of leaves and hanging things too."""
    return drawn_svg(lambda: _figure(changes), hash_salt="resurvey")


def _figure(changes: Resurvey) -> Figure:
    from matplotlib.figure import Figure

    sky_in, below_in, row_in = HEIGHTS_IN
    azimuth_deg = np.arange(0.0, 360.0 + STEP_DEG / 2, STEP_DEG)
    old_deg = highest_edge_deg(changes.before.skyline, azimuth_deg)
    new_deg = highest_edge_deg(changes.after.skyline, azimuth_deg)
    mask_deg = changes.after.site.require.elevation_mask_deg
    highest_deg = float(max(old_deg.max(), new_deg.max()))
    top_deg = min(90.0, max(LOWEST_TOP_DEG, 1.15 * highest_deg, 1.5 * mask_deg))
    height_in = LEGEND_IN + below_in + sky_in + row_in
    figure = Figure(figsize=(WIDTH_IN, height_in))
    axes = figure.add_axes((0.065, (LEGEND_IN + below_in) / height_in, 0.92, sky_in / height_in))
    draw_frame(axes, top_deg)
    for start_deg, end_deg in changes.after.skyline.unsurveyed_deg:
        axes.fill_between([start_deg, end_deg], 0.0, top_deg, **UNSURVEYED_LOOK, zorder=1)
    axes.fill_between(azimuth_deg, 0.0, np.minimum(old_deg, new_deg), facecolor=SOLID, linewidth=0, zorder=2)
    compared = compared_edges_deg(changes.before.skyline, changes.after.skyline, azimuth_deg)
    for change in changes.outline:
        _draw_change(axes, change, azimuth_deg, *compared)
    axes.plot(azimuth_deg, old_deg, **EARLIER, zorder=5)
    axes.plot(azimuth_deg, new_deg, **LATER, zorder=6)
    draw_mask(axes, mask_deg)
    figure.legend(handles=_legend(), loc="lower center", ncols=4, frameon=False, fontsize=6.5, borderpad=0.2)
    return figure


def _draw_change(
    axes: Axes, change: OutlineChange, azimuth_deg: FloatArray, old_deg: FloatArray, new_deg: FloatArray
) -> None:
    along_deg = np.mod(azimuth_deg - change.azimuth_from_deg, 360.0)
    inside = along_deg <= change.azimuth_to_deg - change.azimuth_from_deg
    axes.fill_between(azimuth_deg, old_deg, new_deg, where=inside, zorder=3, **LOOKS[change.kind])


def _legend() -> list[Any]:
    from matplotlib.lines import Line2D
    from matplotlib.patches import Patch

    return [
        Line2D([], [], label="earlier survey", **EARLIER),
        Line2D([], [], label="later survey", **LATER),
        Patch(label="rose", **LOOKS["rose"]),
        Patch(label="fell", **LOOKS["fell"]),
    ]
