"""Which part costs what: from the satellite's EIRP down to C/N0, step by step, as a figure."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from siteassess.constants import BOLTZMANN_J_PER_K, REFERENCE_TEMPERATURE_K
from siteassess.decibels import mean_db, to_db
from siteassess.report.drawing import INK, QUIET, drawn_svg, shortened
from siteassess.report.phrases import number, plain

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

    from siteassess.assessment import Assessment
    from siteassess.link_budget.budget import SignalBudget

__all__ = ["HALF_BAND_DEG", "Step", "Waterfall", "waterfall", "waterfall_svg"]

WANTED_ELEVATION_DEG = 30.0
HALF_BAND_DEG = 2.5  # of elevation, within which obstacles are averaged
SIZE_IN = (7.1, 4.1)
GAIN, LOSS, TOTAL = "#5f8f7c", "#b4745c", "#4b5a66"
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

    figure = Figure(figsize=SIZE_IN)
    rows = len(fall.path) + len(fall.site) + 2
    left, width, bottom, height = 0.36, 0.55, 0.09, 0.88
    share = (len(fall.path) + 1) / (rows + 1.6)
    upper = figure.add_axes((left, bottom + height * (1.0 - share), width, height * share))
    lower = figure.add_axes((left, bottom, width, height * (1.0 - share) - 0.09))
    reached = sum(step.change_db for step in fall.path)
    _draw(upper, fall.path, 0.0, "C/N0 with nothing in the way, dB-Hz")
    _draw(lower, fall.site, reached, "C/N0 of the tracked component, dB-Hz")
    return figure


def _draw(axes: Axes, steps: tuple[Step, ...], start_db: float, total: str) -> None:
    changes = np.array([step.change_db for step in steps])
    ends = start_db + np.cumsum(changes)
    starts = np.concatenate([[start_db], ends[:-1]])
    low, high = min(start_db, float(ends.min())), max(start_db, float(ends.max()))
    if start_db != 0.0:
        margin = 0.12 * max(high - low, 1.0)
        low, high = low - 3.0 * margin, high + margin
    else:
        low, high = low - 20.0, high + 20.0
    base = max(low, 0.0) if start_db != 0.0 else 0.0
    rows = np.arange(len(steps) + 1)
    colours = [*(GAIN if change >= 0.0 else LOSS for change in changes), TOTAL]
    axes.barh(
        rows,
        [*changes, float(ends[-1]) - base],
        left=[*starts, base],
        height=0.62,
        color=colours,
        linewidth=0,
    )
    # From each bar's end down to the next bar's start.
    joints = np.array([[end, end, np.nan] for end in ends]).ravel()
    levels = np.array([[row + 0.31, row + 0.69, np.nan] for row in rows[:-1]]).ravel()
    axes.plot(joints, levels, color=QUIET, linewidth=0.6)
    axes.set(xlim=(low, high), ylim=(len(steps) + 0.6, -0.6))
    axes.set_yticks(rows, [*(shortened(plain(step.label), LABEL_LETTERS) for step in steps), total])
    axes.tick_params(axis="y", length=0)
    axes.tick_params(axis="x", labelsize=6, color=QUIET, pad=1.5)
    for text in axes.get_yticklabels():
        text.set_parse_math(False)
    axes.spines[["top", "right", "left"]].set_visible(False)
    axes.spines["bottom"].set_color(QUIET)
    for row, value in zip(rows.tolist(), [*changes, float(ends[-1])], strict=True):
        is_total = row == len(steps)
        axes.text(
            1.01,
            row,
            number(value, 1) if is_total else _signed(value),
            transform=axes.get_yaxis_transform(),
            va="center",
            color=INK,
            fontweight="bold" if is_total else "normal",
        )


def _signed(change_db: float) -> str:
    text = number(change_db, 2)
    return f"+{text}" if round(change_db, 2) > 0.0 else text
