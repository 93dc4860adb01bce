"""Shares and elevations when the survey and the levels are off: one row a draw."""

from collections.abc import Iterator, Sequence

import numpy as np
from numpy.typing import NDArray

from siteassess.verdict.uncertainty.draws import Draws, some
from siteassess.verdict.uncertainty.movers import (
    Mover,
    carrier_key,
    moved_deg,
    moved_m,
    turned_deg,
    turns_by_columns,
)
from siteassess.verdict.uncertainty.peaks import Peaks
from siteassess.verdict.uncertainty.readings import taken_places
from siteassess.verdict.uncertainty.signal_density import RING_DEG, SignalDensity, below_share, strong_share
from siteassess.verdict.uncertainty.taken_sky import COLUMN_DEG, COLUMNS, TakenSky

__all__ = ["hidden_shares", "peak_deg", "pieces", "tops_deg", "usable_shares"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]

DRAWS_AT_ONCE = 128  # so that a table of draws by columns stays in the processor's cache
OPEN_SHARE = 1e-9


def tops_deg(
    movers: Sequence[Mover], carrier_hz: float | None, floor_deg: float, draws: Draws
) -> list[tuple[FloatArray | None, FloatArray]]:
    """Elevation below which all is taken from a carrier, or hidden, as one or two weighted cases.

    Returns
    -------
    list of tuple
        Weight of shape (draw, 1), None for 1, and elevation of shape (draw, column).
    """
    up_deg = [moved_deg(mover, draws, mover.nodes) for mover in movers]
    cases = []
    for weight, turns in turns_by_columns(draws):
        highest_deg = np.full((len(draws), COLUMNS), floor_deg)
        for mover, up in zip(movers, up_deg, strict=True):
            own_deg = turned_deg(mover, _taken(mover, carrier_hz).top_deg, turns, floor_deg) + up
            np.maximum(highest_deg, own_deg, out=highest_deg)
        cases.append((weight, highest_deg))
    return cases


def _taken(mover: Mover, carrier_hz: float | None) -> TakenSky:
    return mover.solid if carrier_hz is None else mover.taken[carrier_key(carrier_hz)]


def usable_shares(
    movers: Sequence[Mover],
    densities: Sequence[SignalDensity],
    carrier_hz: float,
    gain_db: Sequence[FloatArray],
    floor_deg: float,
    draws: Draws,
) -> FloatArray:
    """Usable shares of the satellite-time of signals that the same edges take, shape (signal, draw).

    Parameters
    ----------
    movers : sequence of Mover
        The skyline, part by part.
    densities : sequence of SignalDensity
        Where each signal's satellites stand.
    carrier_hz : float
        A carrier with these edges [Hz].
    gain_db : sequence of array, shape (draw,)
        How much stronger each signal comes [dB].
    floor_deg : float
        Elevation below which an edge takes nothing in any draw [deg].
    draws : Draws
        What is off.
    """
    shares = np.stack([strong_share(one, gain) for one, gain in zip(densities, gain_db, strict=True)])
    tables = [below_share(one, gain) for one, gain in zip(densities, gain_db, strict=True)]
    first_deg, rings = densities[0].first_deg, tables[0][1].shape[2]
    for rows in _chunks(len(draws)):
        for weight, column, elevation_deg in _edges(movers, carrier_hz, floor_deg, some(draws, rows)):
            ring = np.clip((elevation_deg - first_deg) / RING_DEG, 0.0, rings - 1.001)
            whole = ring.astype(np.int64)
            place, part = column * rings + whole, ring - whole
            for signal, (level, below) in enumerate(tables):
                flat, at = below.ravel(), place + level[rows, None] * (COLUMNS * rings)
                low = flat[at]
                low += (flat[at + 1] - low) * part
                shares[signal, rows] -= (low if weight is None else weight * low).sum(axis=1)
    return shares


def _edges(
    movers: Sequence[Mover], carrier_hz: float, floor_deg: float, draws: Draws
) -> Iterator[tuple[FloatArray | None, IndexArray, FloatArray]]:
    """Weight (None: 1), column and elevation of edges; what lies below them adds up to what is taken."""
    for weight, top_deg in tops_deg(movers, carrier_hz, floor_deg, draws):
        yield weight, np.arange(COLUMNS), top_deg
    for mover in movers:
        for weight, column, low_deg, high_deg in pieces(mover, carrier_hz, draws):
            yield weight, column, high_deg
            yield -weight, column, low_deg


def pieces(
    mover: Mover, carrier_hz: float | None, draws: Draws
) -> list[tuple[FloatArray, IndexArray, FloatArray, FloatArray]]:
    """Pieces of sky taken over open sky, each shared between two columns: weight, column, low, high.

    All have shape (draw, piece).
    """
    taken = _taken(mover, carrier_hz)
    if not len(taken.column):
        return []
    shape = len(draws), len(taken.column)
    if mover.survey is None:
        column = np.broadcast_to(taken.column, shape)
        low_deg, high_deg = np.broadcast_to(taken.low_deg, shape), np.broadcast_to(taken.high_deg, shape)
        return [(np.ones(shape), column, low_deg, high_deg)]
    up_deg = moved_deg(mover, draws, taken_places(mover.nodes, taken.column))
    turn = draws.azimuth_deg[:, mover.survey, None] / COLUMN_DEG
    whole = np.floor(turn)
    part = np.broadcast_to(turn - whole, shape)
    column = (taken.column + whole.astype(np.int64)) % COLUMNS
    low_deg, high_deg = taken.low_deg + up_deg, taken.high_deg + up_deg
    return [
        (1.0 - part, column, low_deg, high_deg),
        (part, (column + 1) % COLUMNS, low_deg, high_deg),
    ]


def hidden_shares(
    movers: Sequence[Mover], mask_deg: float, floor_deg: float, draws: Draws
) -> tuple[FloatArray, FloatArray]:
    """Hidden sky above the mask, and the largest stretch of it, as shares of the hemisphere, in each draw."""
    from_sine = np.sin(np.deg2rad(mask_deg))

    def above_mask(elevation_deg: FloatArray) -> FloatArray:
        return np.asarray(np.maximum(np.sin(np.deg2rad(elevation_deg)) - from_sine, 0.0) / COLUMNS)

    blocked, block = np.empty((2, len(draws)))
    for rows in _chunks(len(draws)):
        part = some(draws, rows)
        hidden = np.zeros((len(part), COLUMNS))
        for share, top_deg in tops_deg(movers, None, floor_deg, part):
            hidden += above_mask(top_deg) if share is None else share * above_mask(top_deg)
        for mover in movers:
            for weight, column, low_deg, high_deg in pieces(mover, None, part):
                piece = weight * (above_mask(high_deg) - above_mask(low_deg))
                place = column + COLUMNS * np.arange(len(part))[:, None]
                added = np.bincount(place.ravel(), weights=piece.ravel(), minlength=hidden.size)
                hidden = hidden + added.reshape(hidden.shape)
        blocked[rows] = hidden.sum(axis=1)
        block[rows] = _largest_run(hidden)
    return blocked, block


def _largest_run(hidden: FloatArray) -> FloatArray:
    """Largest sum of neighbouring columns that no open one interrupts, round the circle, shape (draw,)."""
    twice = np.concatenate([hidden, hidden], axis=1)
    summed = np.cumsum(twice, axis=1)
    before = np.maximum.accumulate(np.where(twice <= OPEN_SHARE, summed, 0.0), axis=1)
    return np.asarray(np.minimum((summed - before).max(axis=1), hidden.sum(axis=1)))


def peak_deg(points: Sequence[tuple[Mover, Peaks]], draws: Draws) -> FloatArray:
    """Highest of some points that count in each draw; 0 where none of them is above the horizon."""
    highest_deg = np.zeros(len(draws))
    for mover, peaks in points:
        if len(peaks.elevation_deg):
            own_deg = peaks.elevation_deg + moved_deg(mover, draws, peaks.nodes)
            counts = moved_m(mover, draws, peaks.nodes) < peaks.short_m
            np.maximum(highest_deg, np.where(counts, own_deg, 0.0).max(axis=1), out=highest_deg)
    return highest_deg


def _chunks(count: int) -> list[slice]:
    return [slice(start, start + DRAWS_AT_ONCE) for start in range(0, count, DRAWS_AT_ONCE)]
