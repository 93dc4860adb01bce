"""Which part costs what: from the satellite's EIRP down to C/N0, step by step, as a figure."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.constants import BOLTZMANN_J_PER_K, REFERENCE_TEMPERATURE_K
from siteassess.decibels import mean_db, to_db
from siteassess.report.figures.drawing import INK, QUIET, drawn_svg, shortened
from siteassess.report.phrases import number, plain

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.assessment import Assessment
    from siteassess.link_budget.budget import SignalBudget

__all__ = ["HALF_BAND_DEG", "Step", "Waterfall", "waterfall", "waterfall_svg"]

FloatArray = NDArray[np.float64]

WANTED_ELEVATION_DEG = 30.0
HALF_BAND_DEG = 2.5  # of elevation, within which obstacles are averaged
WIDTH_IN, ROW_IN = 7.1, 0.21
BARS_IN, VALUES_IN = (2.75, 6.3), 6.95  # from the left
GAIN, LOSS, TOTAL, FAINT = "#5f8f7c", "#b4745c", "#4b5a66", "#d5dadd"
LABEL_LETTERS = 44
MOST_PARTS = 9


@dataclass(frozen=True, slots=True, kw_only=True)
class Step:
    """One step of the budget: what it is, and what it adds [dB]."""

    label: str
    change_db: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Waterfall:
    """The budget of one signal at one elevation, as steps that add up.

    Attributes
    ----------
    signal, orbit_class : str
        Whose budget it is.
    elevation_deg : float
        Elevation.
    path : tuple of Step
        EIRP, path, and noise at 290 K: together C/N0 of a 0 dBic antenna with nothing in the way.
    site : tuple of Step
        What air, obstacles, antenna, noise and receiver add to it.
    cn0_dbhz : float
        All steps together.
    hidden_share : float or None
        Part of the signal's positions near this elevation that obstacles hide; None where there are none.
    """

    signal: str
    orbit_class: str
    elevation_deg: float
    path: tuple[Step, ...]
    site: tuple[Step, ...]
    cn0_dbhz: float
    hidden_share: float | None


def waterfall(assessment: Assessment) -> Waterfall:
    """Steps of the first signal's budget at 30 degrees, or at the next printed elevation above the mask."""
    budget = assessment.budget.signals[0]
    lines, noise = budget.lines[0], budget.noise
    above = lines.elevation_deg >= max(assessment.site.require.elevation_mask_deg, WANTED_ELEVATION_DEG)
    at = int(np.flatnonzero(above)[0])
    elevation_deg = float(lines.elevation_deg[at])
    reference_dbw = float(to_db(BOLTZMANN_J_PER_K * REFERENCE_TEMPERATURE_K))
    obstacle_db, hidden_share = _obstacles(assessment, budget, elevation_deg)
    path = (
        Step(label="Satellite, EIRP toward the site", change_db=float(lines.eirp_dbw[at])),
        Step(label="Path, free-space loss", change_db=-float(lines.spreading_loss_db[at])),
        Step(label="Against the noise density at 290 K", change_db=-reference_dbw),
    )
    quieter_db = float(to_db(REFERENCE_TEMPERATURE_K / noise.antenna_temperature_k))
    site = (
        Step(label="Atmosphere", change_db=-float(lines.atmosphere_loss_db[at])),
        Step(label="Obstacles and leaves, where not hidden", change_db=-obstacle_db),
        Step(label="Antenna gain", change_db=float(lines.antenna_gain_dbic[at])),
        Step(label="Antenna noise against 290 K", change_db=quieter_db),
        *_chain_steps(budget),
        Step(label="Loss inside the receiver", change_db=-noise.implementation_loss_db),
        Step(label="Share of the tracked component", change_db=budget.signal.tracked_share_db),
    )
    return Waterfall(
        signal=budget.signal.name,
        orbit_class=lines.orbit_class,
        elevation_deg=elevation_deg,
        path=path,
        site=site,
        cn0_dbhz=sum(step.change_db for step in (*path, *site)),
        hidden_share=hidden_share,
    )


def waterfall_svg(assessment: Assessment) -> str:
    """The steps as bars, gains to the right and losses to the left, as SVG."""
    return drawn_svg(lambda: _figure(waterfall(assessment)), hash_salt="waterfall")


def _obstacles(
    assessment: Assessment, budget: SignalBudget, elevation_deg: float
) -> tuple[float, float | None]:
    """Mean loss near an elevation where the sky is not hidden, averaged as ratios, and the hidden share."""
    samples = assessment.budget.samples
    near = np.abs(samples.elevation_deg[budget.sample] - elevation_deg) <= HALF_BAND_DEG
    hidden = samples.hiding_obstacle[budget.sample[near]] >= 0
    if not hidden.size:
        return 0.0, None
    if hidden.all():
        return 0.0, 1.0
    return -float(mean_db(-budget.obstacle_loss_db[near][~hidden])), float(hidden.mean())


def _chain_steps(budget: SignalBudget) -> list[Step]:
    """What each part's noise costs on top of the antenna and the parts ahead of it."""
    steps = []
    ahead_k = budget.noise.antenna_temperature_k
    for part in budget.noise.parts:
        behind_k = ahead_k + part.added_temperature_k
        steps.append(Step(label=f"Noise: {part.part}", change_db=-float(to_db(behind_k / ahead_k))))
        ahead_k = behind_k
    if len(steps) <= MOST_PARTS:
        return steps
    rest_db = sum(step.change_db for step in steps[MOST_PARTS - 1 :])
    return [*steps[: MOST_PARTS - 1], Step(label="Noise: all parts behind", change_db=rest_db)]


def _figure(fall: Waterfall) -> Figure:
    from matplotlib.figure import Figure

    rows = len(fall.path) + len(fall.site) + 2
    height_in = ROW_IN * (rows + 3.2)
    figure = Figure(figsize=(WIDTH_IN, height_in))
    axes = figure.add_axes((0.0, 0.0, 1.0, 1.0))
    axes.set(xlim=(0.0, WIDTH_IN), ylim=(height_in, 0.0))  # inches from the upper left corner
    axes.axis("off")
    reached_db = sum(step.change_db for step in fall.path)
    _draw(axes, fall.path, 0.0, "C/N0 with nothing in the way, dB-Hz", 0.1)
    below_in = 0.1 + ROW_IN * (len(fall.path) + 2.4)
    _draw(axes, fall.site, reached_db, "C/N0 of the tracked component, dB-Hz", below_in)
    return figure


def _draw(axes: Axes, steps: tuple[Step, ...], start_db: float, total: str, top_in: float) -> None:
    """One waterfall: a row a step, and its total; below it a scale."""
    changes = np.array([step.change_db for step in steps])
    ends = start_db + np.cumsum(changes)
    starts = np.append(start_db, ends[:-1])
    ticks, low, high = _scale(starts, ends)
    base = max(low, 0.0)

    def along(level_db: ArrayLike) -> FloatArray:
        return np.asarray(
            BARS_IN[0] + (np.asarray(level_db) - low) / (high - low) * (BARS_IN[1] - BARS_IN[0])
        )

    middle_in = top_in + ROW_IN * (np.arange(len(steps) + 1) + 0.5)
    foot_in = float(middle_in[-1]) + 0.7 * ROW_IN
    lines = np.array([[[at, at, np.nan], [top_in, foot_in, np.nan]] for at in along(ticks)])
    axes.plot(*lines.transpose(1, 0, 2).reshape(2, -1), color=FAINT, linewidth=0.5, zorder=1)
    axes.barh(
        middle_in,
        along([*ends, ends[-1]]) - along([*starts, base]),
        left=along([*starts, base]),
        height=0.62 * ROW_IN,
        color=[*(GAIN if change >= 0.0 else LOSS for change in changes), TOTAL],
        linewidth=0,
        zorder=2,
    )
    joints = np.repeat(along(ends), 3)
    joints[2::3] = np.nan
    levels = np.column_stack([middle_in[:-1], middle_in[1:], middle_in[1:]]).ravel()
    axes.plot(joints, levels, color=QUIET, linewidth=0.6, zorder=1.5)
    labels = [*(shortened(plain(step.label), LABEL_LETTERS) for step in steps), total]
    values = [*(_signed(step.change_db) for step in steps), number(float(ends[-1]))]
    for at_in, label, value in zip(middle_in.tolist(), labels, values, strict=True):
        weight = "bold" if label == total else "normal"
        axes.text(
            BARS_IN[0] - 0.12, at_in, label, ha="right", va="center", fontweight=weight, parse_math=False
        )
        axes.text(VALUES_IN, at_in, value, ha="right", va="center", fontweight=weight, color=INK)
    for tick, at_in in zip(ticks.tolist(), along(ticks).tolist(), strict=True):
        axes.text(at_in, foot_in + 0.02, number(tick, 0), ha="center", va="top", fontsize=6)


def _scale(starts: FloatArray, ends: FloatArray) -> tuple[FloatArray, float, float]:
    """Levels to mark, and the ends of the scale: all bars, and room to see where the total comes from."""
    low, high = float(min(starts.min(), ends.min())), float(max(starts.max(), ends.max()))
    step_db = next(step for step in (1.0, 2.0, 5.0, 10.0, 20.0, 50.0, 100.0) if (high - low) / step <= 6.0)
    low, high = step_db * np.floor(low / step_db - 0.25), step_db * np.ceil(high / step_db)
    return np.arange(low, high + step_db / 2.0, step_db), low, high


def _signed(change_db: float) -> str:
    text = number(change_db, 2)
    return f"+{text}" if round(change_db, 2) > 0.0 else text
