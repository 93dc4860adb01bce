"""What obstacles take of the sky at each azimuth: from the ground up, and what hangs free."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import edge_elevation_deg, hiding_obstacle, outline_elevation_deg
from siteassess.link_budget.obstacles.way_in import skyline_loss_db

__all__ = ["COLUMNS", "COLUMN_DEG", "NOTHING_TAKEN", "TakenSky", "column_azimuth_deg", "owners", "taken_sky"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]
BoolArray = NDArray[np.bool_]

COLUMNS = 360
COLUMN_DEG = 360.0 / COLUMNS
SCAN_STEP_DEG = 1.0
LOOKS, PARTS = 2, 8  # how often a step of the scan is cut, and into how many: 0.02 degrees
# Farther from an edge than this it costs less than 1 dB, even an edge 2 m away.
REACH_DEG = 8.0


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class TakenSky:
    """Sky that obstacles take, azimuth by azimuth.

    Attributes
    ----------
    top_deg : array, shape (column,)
        Apparent elevation below which all is taken.
    column : integer array, shape (piece,)
        Where a further piece of sky is taken, with open sky below it.
    low_deg, high_deg : array, shape (piece,)
        Its apparent elevations.
    """

    top_deg: FloatArray
    column: IndexArray
    low_deg: FloatArray
    high_deg: FloatArray


NOTHING_TAKEN = TakenSky(
    top_deg=np.full(COLUMNS, -90.0),
    column=np.empty(0, dtype=np.int64),
    low_deg=np.empty(0),
    high_deg=np.empty(0),
)


def column_azimuth_deg() -> FloatArray:
    """Azimuth in the middle of each column."""
    return np.asarray((np.arange(COLUMNS) + 0.5) * COLUMN_DEG)


def taken_sky(
    skyline: Skyline,
    from_deg: float,
    carrier_hz: float | None = None,
    bearable_db: Callable[[FloatArray], FloatArray] | None = None,
) -> TakenSky:
    """What a skyline takes of the sky.

    Parameters
    ----------
    skyline : Skyline
        What stands round the antenna.
    from_deg : float
        Elevation from which it matters [deg].
    carrier_hz, bearable_db : float and function, or None
        With both, a direction is taken also where diffraction or leaves cost that carrier what cannot be
        borne at an elevation; without, only where it is hidden.
    """
    if not skyline.obstacles:
        return NOTHING_TAKEN

    def is_taken(azimuth_deg: FloatArray, elevation_deg: FloatArray) -> BoolArray:
        taken = hiding_obstacle(skyline, azimuth_deg, elevation_deg) >= 0
        if carrier_hz is not None and bearable_db is not None:
            seen = np.flatnonzero(~taken)
            loss_db, _ = skyline_loss_db(
                skyline, azimuth_deg[seen], np.maximum(elevation_deg[seen], 0.0), carrier_hz
            )
            taken[seen] = loss_db >= bearable_db(elevation_deg[seen])
        return taken

    azimuth_deg = column_azimuth_deg()
    outline_deg = outline_elevation_deg(skyline, azimuth_deg)
    level_deg = np.arange(min(from_deg, 90.0), 90.0 + SCAN_STEP_DEG, SCAN_STEP_DEG)
    worth = level_deg[:, None] <= _reach_deg(skyline, azimuth_deg, outline_deg)
    level, column = np.nonzero(worth)
    taken = np.zeros(worth.shape, dtype=np.bool_)
    taken[level, column] = is_taken(azimuth_deg[column], level_deg[level])
    level, column = np.nonzero(taken[1:] != taken[:-1])
    order = np.lexsort((level, column))
    level, column = level[order], column[order]
    opens = taken[level, column]  # taken below, open above
    edge_deg = _narrowed(is_taken, azimuth_deg[column], level_deg[level], opens)
    # Nothing is taken at 90 degrees, so after the ground's own edge they come in pairs.
    of_ground = opens & taken[0, column]
    of_ground[1:] &= column[1:] != column[:-1]
    top_deg = outline_deg.copy()
    top_deg[column[of_ground]] = edge_deg[of_ground]
    low, high = np.flatnonzero(~opens), np.flatnonzero(opens & ~of_ground)
    return TakenSky(top_deg=top_deg, column=column[low], low_deg=edge_deg[low], high_deg=edge_deg[high])


def owners(skyline: Skyline) -> IndexArray:
    """Index of the obstacle with the highest edge at each column; -1 where there is none."""
    azimuth_deg = column_azimuth_deg()
    piece = np.searchsorted(skyline.outline.start_deg, azimuth_deg, side="right") - 1
    owner = skyline.outline.obstacle[piece].copy()
    highest_deg = np.where(owner >= 0, outline_elevation_deg(skyline, azimuth_deg), -90.0)
    for index, edge_deg in _edges_beside_the_outline(skyline, azimuth_deg):
        higher = edge_deg > highest_deg
        owner[higher], highest_deg[higher] = index, edge_deg[higher]
    return owner


def _edges_beside_the_outline(skyline: Skyline, azimuth_deg: FloatArray) -> list[tuple[int, FloatArray]]:
    """Upper edges of leaves and of what hangs free; -90 outside their azimuths."""
    return [
        (index, np.nan_to_num(edge_elevation_deg(obstacle, azimuth_deg), nan=-90.0))
        for index, obstacle in enumerate(skyline.obstacles)
        if obstacle.cover == "foliage" or obstacle.hangs_free
    ]


def _reach_deg(skyline: Skyline, azimuth_deg: FloatArray, outline_deg: FloatArray) -> FloatArray:
    """Elevation at each column above which nothing near it takes anything."""
    edges = [outline_deg, *(edge for _, edge in _edges_beside_the_outline(skyline, azimuth_deg))]
    highest_deg = np.max(edges, axis=0)
    width = round(REACH_DEG / COLUMN_DEG)
    beside = np.lib.stride_tricks.sliding_window_view(np.pad(highest_deg, width, "wrap"), 2 * width + 1)
    return np.asarray(np.minimum(beside.max(axis=1) + REACH_DEG, 90.0 - SCAN_STEP_DEG))


def _narrowed(
    is_taken: Callable[[FloatArray, FloatArray], BoolArray],
    azimuth_deg: FloatArray,
    low_deg: FloatArray,
    opens: BoolArray,
) -> FloatArray:
    """Elevations at which the sky opens, or closes, within a step of the scan.

    Few looks at many directions: each look costs a pass over all obstacles.
    """
    low_deg, step_deg = low_deg.copy(), SCAN_STEP_DEG
    for _ in range(LOOKS):
        step_deg /= PARTS
        level_deg = low_deg + step_deg * np.arange(1, PARTS)[:, None]
        taken = is_taken(np.tile(azimuth_deg, PARTS - 1), level_deg.ravel()).reshape(level_deg.shape)
        low_deg += step_deg * np.cumprod(taken == opens, axis=0).sum(axis=0)
    return np.asarray(low_deg + step_deg / 2.0)
