"""One day of satellites on the skyplot, with the margin of their C/N0 as shade, width and dash."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

import numpy as np
from numpy.typing import NDArray

from siteassess.report.figures.drawing import on_paper

if TYPE_CHECKING:
    from matplotlib.axes import Axes

    from siteassess.assessment import Assessment

__all__ = ["HIDDEN", "MARGIN_CLASSES", "LineLook", "draw_tracks", "first_signal_margin_db", "runs"]

FloatArray = NDArray[np.float64]
BoolArray = NDArray[np.bool_]
Dash = Literal["-"] | tuple[float, tuple[float, ...]]

DAY_S = 86_400.0
STEP_S = 240.0  # finer steps cannot be told apart on paper


@dataclass(frozen=True, slots=True, kw_only=True)
class LineLook:
    """How the tracks of one class of margin are drawn; `below_db` is the upper end of the class."""

    name: str
    below_db: float = np.inf
    color: str
    width: float
    dash: Dash = "-"


# Lightness falls as the margin grows, so that the order survives grey print and any kind of colour vision;
# width and dash say the same again.
MARGIN_CLASSES = (
    LineLook(name="below the minimum", below_db=0.0, color="#e2a04e", width=1.1, dash=(0.0, (3.0, 1.6))),
    LineLook(name="0 to 4 dB above", below_db=4.0, color="#b3a84a", width=0.7),
    LineLook(name="4 to 8 dB above", below_db=8.0, color="#62977f", width=0.9),
    LineLook(name="8 to 12 dB above", below_db=12.0, color="#3a7a99", width=1.1),
    LineLook(name="more than 12 dB above", color="#1d3f73", width=1.3),
)
HIDDEN = LineLook(name="hidden", color="#6a6660", width=0.5, dash=(0.0, (0.8, 1.8)))


def first_signal_margin_db(assessment: Assessment) -> FloatArray:
    """C/N0 above the minimum, shape (sample,), of the first of the site's signals that each satellite sends.

    NaN where a satellite sends none of them.
    """
    margin_db = np.full(len(assessment.budget.samples.satellite), np.nan)
    for budget in reversed(assessment.budget.signals):
        margin_db[budget.sample] = budget.cn0_dbhz - budget.min_cn0_dbhz
    return margin_db


def draw_tracks(sky: Axes, assessment: Assessment) -> None:
    """Draw the first day above the mask; a satellite that stands still is a dot."""
    samples, tracks = assessment.budget.samples, assessment.tracks
    margin_db = first_signal_margin_db(assessment)
    stride = max(1, round(STEP_S / assessment.site.sky.step_s))
    shown = (tracks.time_s[samples.epoch] < DAY_S) & (samples.epoch % stride == 0) & np.isfinite(margin_db)
    satellite, epoch = samples.satellite[shown], samples.epoch[shown]
    hidden, margin_db = samples.hidden[shown], margin_db[shown]
    x, y = on_paper(samples.azimuth_deg[shown], samples.apparent_elevation_deg[shown])

    follows = (np.diff(satellite, append=-1) == 0) & (np.diff(epoch, append=-1) == stride)
    still = np.array([name == "GEO" for name in tracks.orbit_class], dtype=bool)[satellite]
    first = np.diff(satellite, prepend=-1) != 0
    of_class = np.searchsorted([look.below_db for look in MARGIN_CLASSES], margin_db, side="right")
    chosen_by_look = [(HIDDEN, hidden)]
    chosen_by_look += [(look, ~hidden & (of_class == index)) for index, look in enumerate(MARGIN_CLASSES)]
    for look, chosen in chosen_by_look:
        lines = runs(x, y, chosen & ~still, follows)
        sky.plot(*lines, color=look.color, linewidth=look.width, linestyle=look.dash, zorder=5)
        dots = chosen & still & first
        sky.plot(x[dots], y[dots], "o", color=look.color, markersize=3.5, zorder=5)


def runs(
    x: FloatArray, y: FloatArray, chosen: BoolArray, follows: BoolArray
) -> tuple[FloatArray, FloatArray]:
    """One line through the chosen samples, broken by NaN; a step belongs to the sample where it starts.

    Parameters
    ----------
    x, y : array, shape (sample,)
        Places.
    chosen : boolean array, shape (sample,)
        Samples of this line.
    follows : boolean array, shape (sample,)
        Whether the next sample continues the same pass.

    Examples
    --------
    >>> x = np.arange(5.0)
    >>> runs(x, x, np.array([1, 1, 0, 1, 1], bool), np.array([1, 1, 1, 1, 0], bool))[0].tolist()
    [0.0, 1.0, 2.0, nan, 3.0, 4.0, nan]
    """
    step = chosen & follows
    touched = step.copy()
    touched[1:] |= step[:-1]
    after_ends = np.flatnonzero(~step[touched]) + 1
    return np.insert(x[touched], after_ends, np.nan), np.insert(y[touched], after_ends, np.nan)
