"""Satellites at once: how many for which share of the time, and hour by hour."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from siteassess.report.figures.drawing import INK, QUIET, drawn_svg
from siteassess.verdict.time.counts import ALL_SYSTEMS, at_least_share

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.assessment import Assessment
    from siteassess.verdict.time.timeline import Timeline

__all__ = ["time_chart_svg"]

FloatArray = NDArray[np.float64]

WIDTH_IN, HEIGHT_IN = 7.1, 3.9
USABLE, IN_VIEW, SHORT = "#1f5673", "#a9bfca", "#b3402a"
SYSTEMS = ("#8a5a2b", "#5b7d3a", "#7a4a86", "#2f8a8f")
LETTER_SHARE = 0.0145  # width of a letter, as a share of the panel's
STRETCHES = 480  # of the strip: about as many as can be told apart on paper
MOST_PDOP = 10.0


def time_chart_svg(assessment: Assessment) -> str:
    """Satellites at once over the window of the joint counts, as SVG."""
    return drawn_svg(lambda: _figure(assessment.verdict.timeline), hash_salt="over-time")


def _figure(timeline: Timeline) -> Figure:
    from matplotlib.figure import Figure

    figure = Figure(figsize=(WIDTH_IN, HEIGHT_IN))
    _draw_numbers(figure.add_axes((0.065, 0.585, 0.53, 0.355)), timeline)
    _draw_pdop(figure.add_axes((0.675, 0.585, 0.31, 0.355)), timeline)
    _draw_strip(figure.add_axes((0.065, 0.105, 0.92, 0.345)), timeline)
    return figure


def _frame(axes: Axes) -> None:
    axes.grid(color=QUIET, linewidth=0.3)
    axes.spines[["top", "right"]].set_visible(False)
    axes.set_axisbelow(True)


def _draw_numbers(axes: Axes, timeline: Timeline) -> None:
    """Share of the time with at least n satellites, system by system and in all."""
    from matplotlib.ticker import MaxNLocator

    _frame(axes)
    most = int(timeline.in_view.max())
    _draw_at_least(axes, timeline.in_view[-1], IN_VIEW, 1.4)
    x = 0.0
    for row, (system, usable) in enumerate(zip(timeline.systems, timeline.usable, strict=True)):
        together = system == ALL_SYSTEMS
        colour = USABLE if together else SYSTEMS[row % len(SYSTEMS)]
        _draw_at_least(axes, usable, colour, 1.4 if together else 0.9)
        # Names stand above the curves, which may be anywhere.
        axes.text(x, 1.07, system, color=colour, transform=axes.transAxes, fontsize=6.5)
        x += LETTER_SHARE * (len(system) + 3)
    needed = timeline.shortfall("satellites", ALL_SYSTEMS).limit
    axes.axvline(needed - 0.5, color=SHORT, linewidth=0.8, dashes=(4, 2))
    axes.set(
        xlim=(0.0, most + 1.5),
        ylim=(0.0, 1.04),
        xlabel=f"satellites at least (line: {needed:g} asked)",
        ylabel="share of the time",
    )
    axes.yaxis.set_major_formatter(lambda share, _: f"{100 * share:.0f} %")
    axes.xaxis.set_major_locator(MaxNLocator(integer=True))


def _draw_at_least(axes: Axes, count: NDArray[np.int64], colour: str, width: float) -> None:
    share = at_least_share(count)
    edges = np.arange(len(share) + 1) - 0.5
    across, up = _steps(edges, share)
    axes.plot([*across, edges[-1]], [*up, 0.0], color=colour, linewidth=width)


def _steps(edges: NDArray[Any], level: NDArray[Any]) -> tuple[NDArray[Any], NDArray[Any]]:
    """Corners of a staircase; as a line it draws several times faster than as a patch of its own."""
    return np.repeat(edges, 2)[1:-1], np.repeat(level, 2)


def _draw_pdop(axes: Axes, timeline: Timeline) -> None:
    """Share of the time with a PDOP of at most so much."""
    _frame(axes)
    for dilution, colour in ((timeline.dilution_in_view, IN_VIEW), (timeline.dilution, USABLE)):
        known = np.sort(dilution.position[~np.isnan(dilution.position)])
        share = np.arange(1, len(known) + 1) / len(dilution.position)
        every = max(1, len(known) // 200)
        axes.plot(known[::every], share[::every], color=colour, linewidth=1.2, drawstyle="steps-post")
    limit = timeline.shortfall("PDOP", ALL_SYSTEMS).limit
    if limit <= MOST_PDOP:
        axes.axvline(limit, color=SHORT, linewidth=0.8, dashes=(4, 2))
    axes.set(
        xlim=(0.0, min(1.25 * limit, MOST_PDOP)),
        ylim=(0.0, 1.04),
        xlabel=f"PDOP at most (line: {limit:g} asked)",
    )
    axes.yaxis.set_major_formatter(lambda share, _: f"{100 * share:.0f} %")


def _draw_strip(axes: Axes, timeline: Timeline) -> None:
    """Satellites of all systems against elapsed hours; what falls short is marked below."""
    from matplotlib.ticker import MaxNLocator

    _frame(axes)
    hours, in_view = _fewest(timeline.in_view[-1], timeline.window_s)
    _, usable = _fewest(timeline.usable[-1], timeline.window_s)
    axes.fill_between(*_steps(hours, in_view), color=IN_VIEW, linewidth=0.0)
    axes.fill_between(*_steps(hours, usable), color=USABLE, linewidth=0.0)
    short = timeline.shortfall("satellites", ALL_SYSTEMS)
    axes.axhline(short.limit, color=SHORT, linewidth=0.8, dashes=(4, 2))
    top = 1.08 * max(float(in_view.max()), short.limit)
    _, too_few = _fewest(-(timeline.usable[-1] < short.limit).astype(np.int64), timeline.window_s)
    _, too_wide = _fewest(
        -(~(timeline.dilution.position <= timeline.shortfall("PDOP", ALL_SYSTEMS).limit)).astype(np.int64),
        timeline.window_s,
    )
    short_of = np.where((too_few < 0) | (too_wide < 0), -0.09 * top, 0.0)
    axes.fill_between(*_steps(hours, short_of), color=SHORT, linewidth=0.0)
    axes.axhline(0.0, color=INK, linewidth=0.6)
    axes.set(
        xlim=(0.0, hours[-1]),
        ylim=(-0.1 * top, top),
        xlabel="hours since the beginning of the window",
        ylabel="satellites",
    )
    axes.yaxis.set_major_locator(MaxNLocator(integer=True))


def _fewest(count: NDArray[np.int64], window_s: float) -> tuple[FloatArray, NDArray[np.int64]]:
    """Smallest number in each stretch of the strip, and the hours between the stretches."""
    stretches = min(STRETCHES, len(count))
    first = np.linspace(0, len(count), stretches, endpoint=False).astype(np.int64)
    hours = np.append(first, len(count)) * (window_s / len(count) / 3600.0)
    return hours, np.minimum.reduceat(count, first)
