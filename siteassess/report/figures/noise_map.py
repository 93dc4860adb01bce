"""What the antenna hears: brightness of the sky as seen, and where its noise comes from."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from siteassess.link_budget.noise.seen_sky import RING_EDGES_DEG, SECTOR_DEG, seen_brightness_k, seen_sky
from siteassess.report.figures.drawing import INK, QUIET, drawn_svg
from siteassess.report.phrases import number

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.assessment import Assessment
    from siteassess.link_budget.chain.receive_chain import ChainNoise

__all__ = ["noise_map_svg"]

FloatArray = NDArray[np.float64]

SIZE_IN = (7.1, 2.7)
CENTRE_IN, RIM_IN = (1.35, 1.35), 1.16
SCALE_IN = (2.8, 2.92, 0.45, 2.25)  # left, right, bottom, top
BARS_IN = (4.15, 6.6, 0.75, 2.4)
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
    axes = figure.add_axes((0.0, 0.0, 1.0, 1.0))
    axes.axis("off")
    _draw_map(axes, seen_brightness_k(seen_sky(assessment.skyline, carrier_hz), carrier_hz))
    _draw_scale(axes)
    _draw_sources(axes, noises)
    axes.set(xlim=(0.0, SIZE_IN[0]), ylim=(0.0, SIZE_IN[1]), aspect="auto")  # inches
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
    (east_in, north_in), rim_in = CENTRE_IN, RIM_IN
    ends_in = (east_in - rim_in, east_in + rim_in, north_in - rim_in, north_in + rim_in)
    axes.imshow(picture, extent=ends_in, interpolation="none", aspect="auto")
    around = np.linspace(0.0, 2.0 * np.pi, 181)
    for level, width in ((1.0, 0.9), (2.0 / 3.0, 0.3), (1.0 / 3.0, 0.3)):
        axes.plot(
            east_in + rim_in * level * np.sin(around),
            north_in + rim_in * level * np.cos(around),
            color=INK,
            linewidth=width,
        )
    for x, y, point in ((0.0, 1.1, "N"), (1.1, 0.0, "E"), (0.0, -1.1, "S"), (-1.1, 0.0, "W")):
        axes.text(
            east_in + rim_in * x,
            north_in + rim_in * y,
            point,
            ha="center",
            va="center",
            fontsize=8,
            fontweight="bold",
        )


def _draw_scale(axes: Axes) -> None:
    left_in, right_in, bottom_in, top_in = SCALE_IN
    strip = _shades()(np.linspace(1.0, 0.0, 64))[:, np.newaxis]
    axes.imshow(strip, aspect="auto", extent=SCALE_IN)
    for tick_k in TICKS_K:
        at_in = bottom_in + float(_step(tick_k)) * (top_in - bottom_in)
        axes.text(right_in + 0.05, at_in, f"{tick_k:g} K", va="center", fontsize=6.5)
    frame = (
        [left_in, right_in, right_in, left_in, left_in],
        [bottom_in, bottom_in, top_in, top_in, bottom_in],
    )
    axes.plot(*frame, color=QUIET, linewidth=0.5)


def _draw_sources(axes: Axes, noises: list[ChainNoise]) -> None:
    """One bar a carrier; the upright line is an open site."""
    left_in, right_in, bottom_in, top_in = BARS_IN
    warmest_k = max(max(noise.antenna_temperature_k, noise.antenna.open_site_k) for noise in noises)
    per_k = (right_in - left_in) / warmest_k
    pitch_in = min(0.42, (top_in - bottom_in) / len(noises))
    middle_in = top_in - pitch_in * (np.arange(len(noises)) + 0.5)
    reached_in = np.full(len(noises), left_in)
    for field, name, colour in SOURCES:
        wide_in = per_k * np.array([getattr(noise.antenna, field) for noise in noises])
        axes.barh(
            middle_in, wide_in, left=reached_in, height=0.6 * pitch_in, color=colour, label=name, linewidth=0
        )
        reached_in = reached_in + wide_in
    open_in = left_in + per_k * np.array([noise.antenna.open_site_k for noise in noises])
    axes.vlines(
        open_in, middle_in - 0.42 * pitch_in, middle_in + 0.42 * pitch_in, color=INK, linewidth=1.2,
        label="with nothing in sight",
    )  # fmt: skip
    for at_in, end_in, noise in zip(middle_in.tolist(), reached_in.tolist(), noises, strict=True):
        axes.text(left_in - 0.06, at_in, f"{noise.carrier_hz / 1e6:.2f} MHz", ha="right", va="center")
        axes.text(end_in + 0.08, at_in, f"{number(noise.antenna_temperature_k, 0)} K", va="center")
    axes.legend(
        loc="upper left",
        bbox_to_anchor=(left_in - 0.85, float(middle_in[-1]) - 0.6 * pitch_in),
        bbox_transform=axes.transData,
        ncols=3,
        frameon=False,
        fontsize=6.5,
        handlelength=1.2,
        columnspacing=1.2,
    )
