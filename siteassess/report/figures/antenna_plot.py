"""The polar cut of a gain pattern: zenith up, the plane of the antenna level."""

from __future__ import annotations

import secrets
from pathlib import Path
from typing import TYPE_CHECKING, Literal

import numpy as np
from numpy.typing import NDArray

from siteassess.antenna.gain import cross_gain_dbic, depends_on_azimuth, gain_dbic
from siteassess.errors import Mistake, OutputError
from siteassess.report.figures.drawing import INK, QUIET, drawn_svg, shortened
from siteassess.report.phrases import plain

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure
    from matplotlib.lines import Line2D

    from siteassess.antenna.pattern import GainPattern

__all__ = ["antenna_svg", "write_svg"]

FloatArray = NDArray[np.float64]
Dash = Literal["-", "--"]

SIZE_IN = (6.8, 5.3)
SIDE_IN = 5.0
HALF_WIDTH = 1.16  # of the drawing, where the rim has radius 1
RING_STEP_DB = 5.0
SHOWN_DB = 35.0  # from the rim to the centre
ROUND_DEG = np.linspace(-180.0, 180.0, 721)  # from the zenith, positive to the right
COLOURS = ("#1f4e79", "#9c4f1a", "#4f7a2a", "#6d3d85")
CO_DASH: Dash = "-"
CROSS_DASH: Dash = "--"
WIDTHS = (1.6, 0.7)  # by plane


def antenna_svg(pattern: GainPattern) -> str:
    """The cut through azimuths 0 and 180, and 90 and 270 where it differs, as SVG.

    Co-polar gain is drawn full, cross-polar gain dashed; each carrier has its colour, four at most.
    """
    return drawn_svg(lambda: _figure(pattern), hash_salt="antenna")


def write_svg(path: Path, svg: str) -> None:
    """Put a drawing in place, whole or not at all.

    Raises
    ------
    OutputError
        If it cannot be written; what stood there before still does.
    """
    fresh = path.with_name(f".{secrets.token_hex(4)}.svg")
    try:
        fresh.write_text(svg, encoding="utf-8", newline="\n")
        fresh.replace(path)
    except OSError as error:
        fresh.unlink(missing_ok=True)
        raise OutputError(
            Mistake(
                file=path.name or str(path),
                where="",
                problem=f"the drawing cannot be written: {(error.strerror or str(error)).lower()}",
                allowed="what stood there before is unchanged",
                value=str(path),
            )
        ) from error


def _figure(pattern: GainPattern) -> Figure:
    from matplotlib.figure import Figure

    top_db = RING_STEP_DB * np.ceil((float(pattern.gain_dbic.max()) + 0.5) / RING_STEP_DB)
    figure = Figure(figsize=SIZE_IN)
    axes = figure.add_axes((0.0, 0.0, SIDE_IN / SIZE_IN[0], SIDE_IN / SIZE_IN[1]))
    axes.set(xlim=(-HALF_WIDTH, HALF_WIDTH), ylim=(-HALF_WIDTH, HALF_WIDTH), aspect="equal")
    axes.axis("off")
    _draw_grid(axes, top_db)
    _draw_cuts(axes, pattern, top_db)
    figure.text(0.02, 0.985, shortened(plain(pattern.name), 60), fontsize=10, fontweight="bold", va="top")
    figure.text(0.02, 0.945, "Gain in dBic against elevation", fontsize=7.5, va="top")
    figure.legend(
        *zip(*_key(pattern), strict=True),
        loc="upper left",
        bbox_to_anchor=(SIDE_IN / SIZE_IN[0], 0.95),
        frameon=False,
        fontsize=7,
        handlelength=2.6,
    )
    return figure


def _draw_grid(axes: Axes, top_db: float) -> None:
    around_rad = np.deg2rad(ROUND_DEG)
    box = {"boxstyle": "square,pad=0.1", "facecolor": "white", "edgecolor": "none", "alpha": 0.85}
    for level_db in np.arange(top_db - SHOWN_DB + RING_STEP_DB, top_db + 0.1, RING_STEP_DB).tolist():
        radius = 1.0 - (top_db - level_db) / SHOWN_DB
        rim = level_db == top_db
        axes.plot(
            radius * np.sin(around_rad),
            radius * np.cos(around_rad),
            color=INK if rim else QUIET,
            linewidth=1.0 if rim or level_db == 0.0 else 0.4,
        )
        where = np.deg2rad(14.0)
        axes.text(
            radius * np.sin(where),
            radius * np.cos(where),
            f"{level_db:+.0f}".replace("-", "−").replace("+0", "0"),
            ha="center",
            va="center",
            fontsize=6,
            bbox=box,
            zorder=5,
        )
    spokes_rad = np.deg2rad(np.arange(0.0, 360.0, 30.0))
    spokes = np.array([[0.0 * spokes_rad, np.sin(spokes_rad), np.nan * spokes_rad],
                       [0.0 * spokes_rad, np.cos(spokes_rad), np.nan * spokes_rad]])  # fmt: skip
    axes.plot(*spokes.transpose(0, 2, 1).reshape(2, -1), color=QUIET, linewidth=0.3)
    for from_zenith_deg in range(0, 360, 30):
        elevation_deg = 90 - min(from_zenith_deg, 360 - from_zenith_deg)
        angle_rad = np.deg2rad(from_zenith_deg)
        axes.text(
            1.07 * np.sin(angle_rad),
            1.07 * np.cos(angle_rad),
            f"{elevation_deg}°".replace("-", "−"),
            ha="center",
            va="center",
            fontsize=7,
        )


def _planes_deg(pattern: GainPattern) -> tuple[float, ...]:
    return (0.0, 90.0) if depends_on_azimuth(pattern) else (0.0,)


def _draw_cuts(axes: Axes, pattern: GainPattern, top_db: float) -> None:
    angle_rad, elevation_deg = np.deg2rad(ROUND_DEG), 90.0 - np.abs(ROUND_DEG)
    gains = [(gain_dbic, CO_DASH)]
    if pattern.cross_gain_dbic is not None:
        gains.append((cross_gain_dbic, CROSS_DASH))
    for colour, carrier_hz in zip(COLOURS, pattern.carrier_hz.tolist(), strict=False):
        for plane_deg, width in zip(_planes_deg(pattern), WIDTHS, strict=False):
            azimuth_deg = np.where(ROUND_DEG >= 0.0, plane_deg, plane_deg + 180.0)
            for gain, dash in gains:
                level_db = gain(pattern, azimuth_deg, elevation_deg, carrier_hz)
                radius = np.maximum(1.0 - (top_db - level_db) / SHOWN_DB, 0.0)
                axes.plot(
                    radius * np.sin(angle_rad),
                    radius * np.cos(angle_rad),
                    color=colour,
                    linewidth=width,
                    linestyle=dash,
                    zorder=4,
                )


def _key(pattern: GainPattern) -> list[tuple[Line2D, str]]:
    """What dash, width and colour of a line mean."""
    from matplotlib.lines import Line2D

    def line(colour: str = INK, width: float = WIDTHS[0], dash: Dash = CO_DASH) -> Line2D:
        drawn = Line2D([], [], color=colour, linewidth=width)
        drawn.set_linestyle(dash)
        return drawn

    carriers_hz = pattern.carrier_hz.tolist()
    entries = []
    if len(carriers_hz) > 1:
        entries += [
            (line(colour=colour), f"{carrier_hz / 1e6:.10g} MHz")
            for colour, carrier_hz in zip(COLOURS, carriers_hz, strict=False)
        ]
    entries.append((line(), "co-polar"))
    if pattern.cross_gain_dbic is not None:
        entries.append((line(dash=CROSS_DASH), "cross-polar"))
    if depends_on_azimuth(pattern):
        entries += [
            (line(width=width), f"right {plane_deg:g}°, left {plane_deg + 180.0:g}°")
            for plane_deg, width in zip(_planes_deg(pattern), WIDTHS, strict=True)
        ]
    return entries
