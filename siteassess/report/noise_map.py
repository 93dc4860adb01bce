"""What the antenna hears: brightness of the sky as seen, and where its noise comes from."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from siteassess.link_budget.seen_sky import RING_EDGES_DEG, SECTOR_DEG, seen_brightness_k, seen_sky
from siteassess.report.drawing import INK, QUIET, drawn_svg
from siteassess.report.phrases import number

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.assessment import Assessment
    from siteassess.link_budget.receive_chain import ChainNoise

__all__ = ["noise_map_svg"]

FloatArray = NDArray[np.float64]

SIZE_IN = (7.1, 3.0)
MAP_IN = 2.75
PIXELS = 240
SHADES = ("#f1f6f8", "#cddfe4", "#d8c8a0", "#b88a53", "#643620")  # from cold to warm, ever darker
COLDEST_K, WARMEST_K = 4.0, 300.0
TICKS_K = (5.0, 10.0, 20.0, 50.0, 100.0, 290.0)
SOURCES = (
    ("sky_k", "open sky", "#a9c7d3"),
    ("leaves_k", "leaves", "#8fa06a"),
    ("obstacles_k", "obstacles", "#6d6a66"),
    ("ground_k", "ground", "#c9a878"),
    ("loss_k", "antenna's own loss", "#e4ddd0"),
)


def noise_map_svg(assessment: Assessment) -> str:
    """Brightness of the sky at the first signal's carrier, and the antenna's noise by source, as SVG."""
    return drawn_svg(lambda: _figure(assessment), hash_salt="noise-map")


def _figure(assessment: Assessment) -> Figure:
    from matplotlib.figure import Figure

    noises = list({budget.noise.carrier_hz: budget.noise for budget in assessment.budget.signals}.values())
    carrier_hz = noises[0].carrier_hz
    figure = Figure(figsize=SIZE_IN)
    wide, high = MAP_IN / SIZE_IN[0], MAP_IN / SIZE_IN[1]
    sky = figure.add_axes((0.0, 0.5 * (1.0 - high), wide, high))
    _draw_map(sky, seen_brightness_k(seen_sky(assessment.skyline, carrier_hz), carrier_hz))
    _draw_scale(figure.add_axes((wide + 0.015, 0.16, 0.015, 0.68)))
    _draw_sources(figure.add_axes((wide + 0.17, 0.30, 0.97 - wide - 0.17, 0.60)), noises)
    return figure


def _shades() -> Any:
    from matplotlib.colors import LinearSegmentedColormap

    return LinearSegmentedColormap.from_list("noise", SHADES)


def _step(brightness_k: Any) -> Any:
    """Place of a temperature on the scale, 0 to 1, by its logarithm."""
    return np.log(np.asarray(brightness_k) / COLDEST_K) / np.log(WARMEST_K / COLDEST_K)


def _draw_map(axes: Axes, brightness_k: FloatArray) -> None:
    across = (np.arange(PIXELS) + 0.5) / PIXELS * 2.0 - 1.0
    east, north = across[np.newaxis, :], across[::-1, np.newaxis]
    radius = np.hypot(east, north)
    ring = np.searchsorted(RING_EDGES_DEG, 90.0 * (1.0 - np.minimum(radius, 1.0)), side="right") - 1
    ring = np.clip(ring, 0, RING_EDGES_DEG.size - 2)
    sector_deg = 360.0 / SECTOR_DEG.size
    sector = (np.rad2deg(np.arctan2(east, north)) % 360.0 / sector_deg).astype(int) % SECTOR_DEG.size
    picture = _shades()(_step(brightness_k[ring, sector]))
    picture[radius > 1.0] = 0.0
    limit = 1.16
    axes.set(xlim=(-limit, limit), ylim=(-limit, limit), aspect="equal")
    axes.axis("off")
    axes.imshow(picture, extent=(-1.0, 1.0, -1.0, 1.0), interpolation="none", aspect="auto")
    around = np.linspace(0.0, 2.0 * np.pi, 181)
    for level, width in ((1.0, 0.9), (2.0 / 3.0, 0.3), (1.0 / 3.0, 0.3)):
        axes.plot(level * np.sin(around), level * np.cos(around), color=INK, linewidth=width)
    for x, y, point in ((0.0, 1.08, "N"), (1.08, 0.0, "E"), (0.0, -1.08, "S"), (-1.08, 0.0, "W")):
        axes.text(x, y, point, ha="center", va="center", fontsize=8, fontweight="bold")


def _draw_scale(axes: Axes) -> None:
    axes.imshow(
        np.linspace(0.0, 1.0, 64)[:, np.newaxis], cmap=_shades(), origin="lower", aspect="auto",
        extent=(0.0, 1.0, 0.0, 1.0),
    )  # fmt: skip
    axes.set_xticks([])
    axes.yaxis.tick_right()
    axes.set_yticks([float(_step(tick_k)) for tick_k in TICKS_K], [f"{tick_k:g} K" for tick_k in TICKS_K])
    axes.tick_params(axis="y", length=2, labelsize=6.5, color=QUIET)
    axes.spines[:].set_linewidth(0.4)


def _draw_sources(axes: Axes, noises: list[ChainNoise]) -> None:
    rows = np.arange(len(noises))
    left = np.zeros(len(noises))
    for field, name, colour in SOURCES:
        part_k = np.array([getattr(noise.antenna, field) for noise in noises])
        axes.barh(rows, part_k, left=left, height=0.55, color=colour, label=name, linewidth=0)
        left = left + part_k
    open_k = [noise.antenna.open_site_k for noise in noises]
    axes.vlines(open_k, rows - 0.4, rows + 0.4, color=INK, linewidth=1.2, label="with nothing in sight")
    axes.set_yticks(rows, [f"{noise.carrier_hz / 1e6:.2f} MHz" for noise in noises])
    axes.set(xlim=(0.0, 1.18 * max(left.max(), max(open_k))), ylim=(len(noises) - 0.4, -0.6))
    for row, noise in zip(rows.tolist(), noises, strict=True):
        axes.text(left[row], row, f"  {number(noise.antenna_temperature_k, 0)} K", va="center", fontsize=6.5)
    axes.tick_params(axis="y", length=0)
    axes.tick_params(axis="x", labelsize=6.5, color=QUIET)
    axes.set_xlabel("Noise of the antenna, K", fontsize=6.5, labelpad=2)
    axes.spines[["top", "right"]].set_visible(False)
    axes.spines[["left", "bottom"]].set_color(QUIET)
    axes.legend(
        loc="upper center",
        bbox_to_anchor=(0.45, -0.22),
        ncols=3,
        frameon=False,
        fontsize=6.5,
        handlelength=1.2,
        columnspacing=1.2,
    )
