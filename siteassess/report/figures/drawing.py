"""What both figures share: look, points along the skyline, and a repeatable SVG."""

from __future__ import annotations

import io
import warnings
from collections.abc import Callable
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

if TYPE_CHECKING:
    from matplotlib.figure import Figure

    from siteassess.horizon.skyline import Obstacle, Skyline

__all__ = [
    "FREE_HANGING_LOOK",
    "INK",
    "LEAVES_LOOK",
    "QUIET",
    "SOLID",
    "UNSURVEYED_LOOK",
    "drawn_svg",
    "obstacle_edges",
    "on_paper",
    "outline_points",
    "shortened",
]

FloatArray = NDArray[np.float64]
Look = dict[str, Any]

INK = "#20262b"
QUIET = "#8b949b"
SOLID = "#c9c3ba"
UNSURVEYED_LOOK: Look = {"facecolor": "none", "edgecolor": "#b9bfc4", "hatch": "////", "linewidth": 0.0}
LEAVES_LOOK: Look = {"facecolor": "#dfe6cf", "edgecolor": "#7c8c5c", "hatch": "..", "linewidth": 0.6}
FREE_HANGING_LOOK: Look = {"facecolor": SOLID, "edgecolor": INK, "linewidth": 0.6}

STEP_DEG = 1.0
BESIDE_DEG = 1e-6
# Not settings of the look: naming them would make matplotlib choose a window system.
NOT_OURS = frozenset({"backend", "backend_fallback", "toolbar", "interactive"})


def drawn_svg(draw: Callable[[], Figure], *, hash_salt: str) -> str:
    """A figure as SVG: the same text for the same figure, whatever the user's settings of matplotlib.

    Letters become outlines, so that the figure looks alike everywhere and no name carries markup into a page.

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
        canvas: Any = FigureCanvasSVG(figure)
        canvas.print_svg(stream, metadata={"Date": None, "Creator": None, "Format": None, "Type": None})
    return stream.getvalue()


def shortened(text: str, letters: int) -> str:
    """A text cut to so many letters."""
    return text if len(text) <= letters else text[: letters - 1].rstrip() + "…"


def on_paper(azimuth_deg: ArrayLike, elevation_deg: ArrayLike) -> Any:
    """Place of a direction on the skyplot: x and y, the zenith at 0 and 0, the horizon at radius 1.

    Examples
    --------
    >>> x, y = on_paper(90.0, 45.0)
    >>> round(float(x), 6), round(float(y), 6)
    (0.5, 0.0)
    """
    azimuth_rad = np.deg2rad(azimuth_deg)
    radius = 1.0 - np.asarray(elevation_deg) / 90.0
    return radius * np.sin(azimuth_rad), radius * np.cos(azimuth_rad)


def outline_points(skyline: Skyline) -> tuple[FloatArray, FloatArray]:
    """Azimuth and elevation of points along the solid outline, from 0 to 360, close enough to look curved.

    The elevation is 0 where nothing rises above the horizon.
    """
    from siteassess.horizon.view import outline_elevation_deg

    azimuth_deg = _close_points(0.0, 360.0, skyline.outline.start_deg)
    return azimuth_deg, np.maximum(outline_elevation_deg(skyline, azimuth_deg), 0.0)


def obstacle_edges(obstacle: Obstacle) -> tuple[FloatArray, FloatArray, FloatArray]:
    """Azimuth, upper and lower elevation of points along an obstacle, none below 0.

    Azimuths are not wrapped: an obstacle that runs through north ends beyond 360.
    """
    from siteassess.horizon.view import edge_elevation_deg, underside_elevation_deg

    azimuth_deg = _close_points(obstacle.azimuth_deg[0], obstacle.azimuth_deg[-1], obstacle.azimuth_deg)
    upper_deg = np.maximum(edge_elevation_deg(obstacle, azimuth_deg), 0.0)
    return azimuth_deg, upper_deg, np.maximum(underside_elevation_deg(obstacle, azimuth_deg), 0.0)


def _close_points(start_deg: float, end_deg: float, breaks_deg: FloatArray) -> FloatArray:
    """Azimuths a degree apart, and both sides of every break, where an edge may be vertical."""
    azimuth_deg = np.concatenate(
        [np.arange(start_deg, end_deg, STEP_DEG), [end_deg], breaks_deg - BESIDE_DEG, breaks_deg + BESIDE_DEG]
    )
    return np.unique(np.clip(azimuth_deg, start_deg + BESIDE_DEG, end_deg - BESIDE_DEG))
