"""Sections on signal strength: the budget line by line, the antenna."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from siteassess.report.figures.waterfall import HALF_BAND_DEG, Waterfall, waterfall
from siteassess.report.phrases import number, percent, plain
from siteassess.report.pieces import Section, Table
from siteassess.report.sections.chain import part_name

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.link_budget.budget import BudgetLines, SignalBudget
    from siteassess.site_file.model import ByCarrier, Part

__all__ = ["antenna_section", "budget_section"]

PRINTED_ELEVATIONS_DEG = (5.0, 10.0, 30.0, 60.0, 90.0)


def budget_section(assessment: Assessment) -> Section:
    """From the satellite to C/N0, line by line, at a handful of elevations."""
    return Section(
        key="budget",
        heading="From the satellite to C/N0, line by line",
        sentences=(
            "The tables hold under an open sky, at this place, with this antenna and chain. Losses are "
            "subtracted. The gain is averaged over azimuth.",
        ),
        figure="waterfall",
        figure_caption=_waterfall_caption(waterfall(assessment)),
        tables=tuple(
            _budget_table(budget, lines) for budget in assessment.budget.signals for lines in budget.lines
        ),
    )


def _waterfall_caption(fall: Waterfall) -> str:
    hidden = (
        ""
        if not fall.hidden_share
        else f" Obstacles hide {percent(fall.hidden_share)} of the positions there."
    )
    return (
        f"Which part costs what: {fall.signal}, {fall.orbit_class} satellites at {fall.elevation_deg:g}° "
        "elevation, decibel by decibel. The upper bars run from the satellite to C/N0 of a 0 dBic antenna "
        "with noise of 290 K; the lower ones go on from there on a wider scale. Obstacles and leaves count "
        f"by their mean within {HALF_BAND_DEG:g}° of elevation, where they do not hide.{hidden}"
    )


def _budget_table(budget: SignalBudget, lines: BudgetLines) -> Table:
    at = [
        int(np.flatnonzero(np.isclose(lines.elevation_deg, wanted))[0]) for wanted in PRINTED_ELEVATIONS_DEG
    ]
    signal, noise = budget.signal, budget.noise

    def row(label: str, values: np.ndarray | float) -> tuple[str, ...]:
        return (
            label,
            *(number(value, 2) for value in np.broadcast_to(values, lines.elevation_deg.shape)[at]),
        )

    return Table(
        caption=f"{signal.name}, {lines.orbit_class} satellites, {number(signal.carrier_hz / 1e6, 3)} MHz",
        header=("Elevation", *(f"{elevation_deg:g}°" for elevation_deg in PRINTED_ELEVATIONS_DEG)),
        rows=(
            row("Power radiated toward the site (EIRP), dBW", lines.eirp_dbw),
            row("less free-space loss, dB", -lines.spreading_loss_db),
            row("less loss in the atmosphere, dB", -lines.atmosphere_loss_db),
            row("Whole signal at a 0 dBic antenna, dBW", lines.received_power_dbw),
            row(f"Share of the tracked component, {signal.tracked_component}, dB", signal.tracked_share_db),
            row("Gain of the antenna as mounted, dBic", lines.antenna_gain_dbic),
            row("less noise density N0, dBW/Hz", -noise.noise_density_dbw_per_hz),
            row("less loss inside the receiver, dB", -noise.implementation_loss_db),
            row("C/N0, dB-Hz", lines.cn0_open_sky_dbhz),
            row(
                f"Margin above {budget.min_cn0_dbhz:g} dB-Hz, dB",
                lines.cn0_open_sky_dbhz - budget.min_cn0_dbhz,
            ),
        ),
        align="lrrrrr",
        tones=("", "", "", "total", "", "", "", "", "total", ""),
    )


def antenna_section(assessment: Assessment) -> Section:
    """Antenna, mount and the chain behind it, as the site file has them."""
    mount, pattern = assessment.site.mount, assessment.pattern
    sentences = [
        f"Gain pattern: {plain(pattern.name)}.",
        f"Mast {number(mount.mast_height_m, 2)} m above the mark; phase centre "
        f"{number(mount.phase_centre_above_arp_m, 3)} m above the antenna reference point; north mark toward "
        f"{number(mount.heading_deg)}°; "
        + (
            f"tilted by {number(mount.tilt_deg)}° toward {number(mount.tilt_azimuth_deg)}°."
            if mount.tilt_deg
            else "not tilted."
        ),
    ]
    rows = tuple(_part_row(part) for part in assessment.site.chain)
    columns = list(zip(*rows, strict=True))[1:]
    table = Table(
        caption="The chain, from the antenna port to the receiver.",
        header=("Part", "Gain, dB", "Loss, dB", "Noise figure, dB", "At, K", "Loss inside the receiver, dB"),
        rows=rows,
        align="l" + "".join("l" if any(";" in cell for cell in column) else "r" for column in columns),
    )
    return Section(
        key="antenna", heading="Antenna, mount and chain", sentences=tuple(sentences), tables=(table,)
    )


def _part_row(part: Part) -> tuple[str, ...]:
    return (
        part_name(part),
        _by_carrier(part.gain_db),
        _by_carrier(part.loss_db),
        _by_carrier(part.noise_figure_db),
        number(part.physical_temperature_k, 0),
        _by_carrier(part.implementation_loss_db),
    )


def _by_carrier(value: ByCarrier | None) -> str:
    if isinstance(value, dict):
        return "; ".join(
            f"{number(level_db, 2)} at {plain(carrier)} MHz" for carrier, level_db in value.items()
        )
    return number(value, 2)
