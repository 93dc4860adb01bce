"""What both figures share: look, points along the skyline, and a repeatable SVG."""

from __future__ import annotations

import io
import warnings
from collections.abc import Callable
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from siteassess.horizon.skyline import Obstacle, Outline

__all__ = ["INK", "LEAVES", "QUIET", "SOLID", "drawn_svg", "obstacle_edges", "outline_points", "shortened"]

FloatArray = NDArray[np.float64]

INK = "#20262b"
QUIET = "#8b949b"
SOLID = "#c9c3ba"
LEAVES = "#dfe6cf"
STEP_DEG = 1.0
# Not settings of the look: naming them would make matplotlib choose a window system.
NOT_OURS = frozenset({"backend", "backend_fallback", "toolbar", "interactive"})


def drawn_svg(draw: Callable[[], Figure], *, hash_salt: str) -> str:
    """A figure as SVG: the same text for the same figure, whatever the user's settings of matplotlib.

    Letters become outlines, so that the figure looks alike everywhere and no name can carry markup into a page.

    Parameters
    ----------
    draw : function
        Makes the figure.
    hash_salt : str
        What the names of the figure's parts are derived from.
    """
    import matplotlib
    from matplotlib.backends.backend_svg import FigureCanvasSVG

    look = {key: value for key, value in matplotlib.rcParamsDefault.items() if key not in NOT_OURS}
    look |= {"svg.hashsalt": hash_salt, "svg.fonttype": "path", "font.size": 7.0, "hatch.linewidth": 0.5}
    stream = io.StringIO()
    with matplotlib.rc_context(look), warnings.catch_warnings():
        # A name may hold letters that the packaged font lacks; a box stands for them.
        warnings.filterwarnings("ignore", message="Glyph .* missing from", category=UserWarning)
        figure = draw()
        FigureCanvasSVG(figure).print_svg(
            stream, metadata={"Date": None, "Creator": None, "Format": None, "Type": None}
        )
    return stream.getvalue()


def shortened(text: str, letters: int) -> str:
    """A text cut to so many letters."""
    return text if len(text) <= letters else text[: letters - 1].rstrip() + "…"


def outline_points(outline: Outline) -> tuple[FloatArray, FloatArray]:
    """Azimuth and elevation of points along the solid outline, from 0 to 360, close enough to look curved."""
    pieces = [
        edge_points(start, end, low, high, straight)
        for start, end, low, high, straight in zip(
            outline.start_deg,
            outline.end_deg,
            outline.start_elevation_deg,
            outline.end_elevation_deg,
            outline.straight_in_space,
            strict=True,
        )
    ]
    if not pieces:
        return np.array([0.0, 360.0]), np.array([-90.0, -90.0])
    return np.concatenate([piece[0] for piece in pieces]), np.concatenate([piece[1] for piece in pieces])


def obstacle_edges(obstacle: Obstacle) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Azimuth, upper and lower elevation of points along an obstacle; azimuths are not wrapped.

    The lower edge is the horizon where the obstacle stands on the ground.
    """
    azimuth_deg, upper_deg = _chained(obstacle.azimuth_deg, obstacle.elevation_deg, obstacle.straight_in_space)
    if obstacle.underside_deg is None:
        return azimuth_deg, upper_deg, np.zeros_like(upper_deg)
    _, lower_deg = _chained(obstacle.azimuth_deg, obstacle.underside_deg, obstacle.straight_in_space)
    return azimuth_deg, upper_deg, lower_deg


def _chained(azimuth_deg: FloatArray, elevation_deg: FloatArray, straight: bool) -> tuple[FloatArray, FloatArray]:
    pieces = [
        edge_points(*ends, straight)
        for ends in zip(azimuth_deg[:-1], azimuth_deg[1:], elevation_deg[:-1], elevation_deg[1:], strict=True)
    ]
    if not pieces:
        return azimuth_deg, elevation_deg
    return np.concatenate([piece[0] for piece in pieces]), np.concatenate([piece[1] for piece in pieces])


def edge_points(
    start_deg: float, end_deg: float, low_deg: float, high_deg: float, straight: bool
) -> tuple[FloatArray, FloatArray]:
    """Points between two break points: an arc of a great circle, or linear in azimuth and elevation."""
    count = max(2, int(np.ceil((end_deg - start_deg) / STEP_DEG)) + 1)
    azimuth_deg = np.linspace(start_deg, end_deg, count)
    span_deg = end_deg - start_deg
    if straight and 0.0 < span_deg < 179.0 and min(low_deg, high_deg) > -89.0:
        # The tangent of elevation along a great circle is a sinusoid of azimuth.
        to_start, to_end = np.deg2rad(azimuth_deg - start_deg), np.deg2rad(end_deg - azimuth_deg)
        tangent = (
            np.tan(np.deg2rad(low_deg)) * np.sin(to_end) + np.tan(np.deg2rad(high_deg)) * np.sin(to_start)
        ) / np.sin(np.deg2rad(span_deg))
        return azimuth_deg, np.rad2deg(np.arctan(tangent))
    return azimuth_deg, np.linspace(low_deg, high_deg, count)
