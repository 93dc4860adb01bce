"""The figures of a gain pattern, for a terminal and for programs."""

from __future__ import annotations

import json
import math
from typing import TYPE_CHECKING, Any

from siteassess.antenna.energy import effective_area_m2
from siteassess.antenna.figures import AntennaFigures, GainAt, antenna_figures
from siteassess.report.phrases import number, percent, plain
from siteassess.report.summary import PLAIN_SIGNS

if TYPE_CHECKING:
    from siteassess.antenna.pattern import GainPattern

__all__ = ["FORMAT", "antenna_json", "antenna_lines"]

FORMAT = "siteassess-antenna/1"
# For patterns that hold at every carrier: L1, L2 and L5.
AREA_CARRIERS_HZ = (1575.42e6, 1227.60e6, 1176.45e6)
LABEL_WIDTH, COLUMN_WIDTH = 34, 16
WIDTH = 100


def antenna_lines(pattern: GainPattern) -> list[str]:
    """A table of the pattern's figures, one column a carrier, and its remarks."""
    from textwrap import wrap

    carriers = [antenna_figures(pattern, carrier_hz) for carrier_hz in pattern.carrier_hz.tolist()]
    rows = [("", [_carrier(figures.carrier_hz) for figures in carriers]), *_rows(carriers)]
    lines = [plain(pattern.name)]
    lines += [
        f"  {label:<{LABEL_WIDTH}}{''.join(f'{cell:>{COLUMN_WIDTH}}' for cell in cells)}"
        for label, cells in rows
    ]
    for text in (f"Rests on: {plain(pattern.rests_on)}.", *map(plain, pattern.remarks)):
        lines += wrap(text, WIDTH, initial_indent="  ", subsequent_indent="    ", break_on_hyphens=False)
    return [line.translate(PLAIN_SIGNS).rstrip() for line in lines]


def _rows(carriers: list[AntennaFigures]) -> list[tuple[str, list[str]]]:
    rows = [
        ("Highest gain, dBic", [number(figures.peak_gain_dbic) for figures in carriers]),
        (
            "  toward azimuth / elevation, deg",
            [f"{figures.peak_azimuth_deg:g} / {figures.peak_elevation_deg:g}" for figures in carriers],
        ),
        ("Directivity, dBic", [number(figures.directivity_dbic) for figures in carriers]),
        ("Efficiency", [percent(figures.efficiency.total) for figures in carriers]),
        ("  of it cross-polar", [percent(_cross_share(figures)) for figures in carriers]),
        ("Half-power width, deg", [number(figures.half_power_width_deg) for figures in carriers]),
        *_width_rows(carriers),
        ("Front-to-back ratio, dB", [number(figures.front_to_back_db) for figures in carriers]),
        *_area_rows(carriers),
    ]
    for index, gain in enumerate(carriers[0].gains):
        at = f"at {gain.elevation_deg:g} deg"
        gains = [figures.gains[index] for figures in carriers]
        rows.append((f"Gain {at}, dBic", [number(one.mean_dbic) for one in gains]))
        if any(one.highest_dbic - one.lowest_dbic > 0.05 for one in gains):
            spans = [_span(one.lowest_dbic, one.highest_dbic) for one in gains]
            rows.append(("  lowest to highest", spans))
        if gain.axial_ratio_db is not None:
            rows.append(("  axial ratio, dB", [number(one.axial_ratio_db) for one in gains]))
            rows.append(("  polarisation loss, dB", [number(one.polarisation_loss_db, 2) for one in gains]))
    return rows


def _width_rows(carriers: list[AntennaFigures]) -> list[tuple[str, list[str]]]:
    if not any((figures.widest_deg or 0.0) - (figures.narrowest_deg or 0.0) > 0.05 for figures in carriers):
        return []
    spans = [_span(figures.narrowest_deg, figures.widest_deg) for figures in carriers]
    return [("  narrowest to widest", spans)]


def _area_rows(carriers: list[AntennaFigures]) -> list[tuple[str, list[str]]]:
    if not math.isnan(carriers[0].carrier_hz):
        areas = [number(_square_cm(figures, figures.carrier_hz)) for figures in carriers]
        return [("Effective area, cm2", areas)]
    return [
        (
            f"Effective area, cm2, {carrier_hz / 1e6:.2f} MHz",
            [number(_square_cm(carriers[0], carrier_hz))],
        )
        for carrier_hz in AREA_CARRIERS_HZ
    ]


def _square_cm(figures: AntennaFigures, carrier_hz: float) -> float:
    return 1e4 * float(effective_area_m2(figures.peak_gain_dbic, carrier_hz))


def _carrier(carrier_hz: float) -> str:
    return "every carrier" if math.isnan(carrier_hz) else f"{carrier_hz / 1e6:.10g} MHz"


def _cross_share(figures: AntennaFigures) -> float | None:
    known = figures.gains[0].axial_ratio_db is not None
    return figures.efficiency.cross / figures.efficiency.total if known else None


def _span(low: float | None, high: float | None) -> str:
    return number(None) if low is None else f"{number(low)} to {number(high)}"


def antenna_json(pattern: GainPattern) -> str:
    """The figures as JSON, ending in a newline.

    Decibels have 3 decimals, degrees 4, shares and square metres 6 and 8; what is not known is null.
    """
    record = {
        "format": FORMAT,
        "pattern": pattern.name,
        "rests_on": pattern.rests_on,
        "remarks": list(pattern.remarks),
        "carriers": [
            _record(antenna_figures(pattern, carrier_hz)) for carrier_hz in pattern.carrier_hz.tolist()
        ],
    }
    return json.dumps(record, ensure_ascii=False, allow_nan=False, indent=2) + "\n"


def _record(figures: AntennaFigures) -> dict[str, Any]:
    any_carrier = math.isnan(figures.carrier_hz)
    return {
        "carrier_hz": None if any_carrier else round(figures.carrier_hz),
        "peak_gain_dbic": _rounded(figures.peak_gain_dbic, 3),
        "peak_azimuth_deg": _rounded(figures.peak_azimuth_deg, 4),
        "peak_elevation_deg": _rounded(figures.peak_elevation_deg, 4),
        "directivity_dbic": _rounded(figures.directivity_dbic, 3),
        "efficiency_share": _rounded(figures.efficiency.total, 6),
        "cross_polar_share": _rounded(_cross_share(figures), 6),
        "half_power_width_deg": _rounded(figures.half_power_width_deg, 4),
        "narrowest_half_power_width_deg": _rounded(figures.narrowest_deg, 4),
        "widest_half_power_width_deg": _rounded(figures.widest_deg, 4),
        "front_to_back_db": _rounded(figures.front_to_back_db, 3),
        "effective_area": [
            {
                "carrier_hz": round(carrier_hz),
                "effective_area_m2": _rounded(_square_cm(figures, carrier_hz) / 1e4, 8),
            }
            for carrier_hz in (AREA_CARRIERS_HZ if any_carrier else (figures.carrier_hz,))
        ],
        "gain": [_gain_record(gain) for gain in figures.gains],
    }


def _gain_record(gain: GainAt) -> dict[str, float | None]:
    return {
        "elevation_deg": gain.elevation_deg,
        "mean_dbic": _rounded(gain.mean_dbic, 3),
        "lowest_dbic": _rounded(gain.lowest_dbic, 3),
        "highest_dbic": _rounded(gain.highest_dbic, 3),
        "axial_ratio_db": _rounded(gain.axial_ratio_db, 3),
        "polarisation_loss_db": _rounded(gain.polarisation_loss_db, 3),
    }


def _rounded(value: float | None, decimals: int) -> float | None:
    return None if value is None or not math.isfinite(value) else round(value, decimals) + 0.0
