"""How much of a signal's satellite-time stands where on the sky, and how strong it is without obstacles."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.link_budget.budget import SignalBudget, SkySamples
from siteassess.verdict.uncertainty.taken_sky import COLUMN_DEG, COLUMNS

__all__ = ["SignalDensity", "below_share", "signal_density", "strong_share"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]

RING_DEG = 1.0
LEVEL_STEP_DB = 0.5


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SignalDensity:
    """Satellite-time of one signal above the mask, as shares of all of it.

    Attributes
    ----------
    margin_db : array, shape (n,)
        C/N0 under an open sky above the minimum, ascending.
    at_least_share : array, shape (n + 1,)
        Share of the time with each margin or more, and 0.
    column, ring, weight : array, shape (n,)
        Where that is on the sky, and for how long, in the same order.
    first_deg : float
        Apparent elevation from which rings are counted.
    """

    margin_db: FloatArray
    at_least_share: FloatArray
    column: IndexArray
    ring: FloatArray
    weight: FloatArray
    first_deg: float


def signal_density(
    budget: SignalBudget, samples: SkySamples, weight: FloatArray, first_deg: float
) -> SignalDensity:
    """The density of one signal.

    Parameters
    ----------
    budget, samples : SignalBudget, SkySamples
        Levels and directions.
    weight : array, shape (sample,)
        Satellite-time of every sample.
    first_deg : float
        Apparent elevation at or below which none of them stands.
    """
    own = weight[budget.sample]
    counts = np.flatnonzero(own > 0.0)
    counts = counts[np.argsort(budget.cn0_open_sky_dbhz[counts], kind="stable")]
    at = budget.sample[counts]
    share = own[counts] / max(own.sum(), np.finfo(float).tiny)
    return SignalDensity(
        margin_db=budget.cn0_open_sky_dbhz[counts] - budget.min_cn0_dbhz,
        at_least_share=np.append(np.cumsum(share[::-1])[::-1], 0.0),
        column=np.minimum((samples.azimuth_deg[at] / COLUMN_DEG).astype(np.int64), COLUMNS - 1),
        ring=np.maximum((samples.apparent_elevation_deg[at] - first_deg) / RING_DEG, 0.0),
        weight=share,
        first_deg=first_deg,
    )


def strong_share(density: SignalDensity, gain_db: FloatArray) -> FloatArray:
    """Share of the time that is strong enough under an open sky when all comes so much stronger."""
    return density.at_least_share[np.searchsorted(density.margin_db, -gain_db)]


def below_share(density: SignalDensity, gain_db: FloatArray) -> tuple[IndexArray, FloatArray]:
    """What of that lies below elevations, column by column.

    Parameters
    ----------
    density : SignalDensity
        The signal.
    gain_db : array, shape (draw,)
        How much stronger all comes.

    Returns
    -------
    level : integer array, shape (draw,)
        Row of the table that comes nearest to each gain, half a step at most from it.
    below : array, shape (level, column, ring + 1)
        Share of the time that is strong enough and lies below each ring.
    """
    step = np.rint(gain_db / LEVEL_STEP_DB).astype(np.int64)
    steps, level = np.unique(step, return_inverse=True)
    rings = int((90.0 - density.first_deg) / RING_DEG) + 2
    first = np.searchsorted(density.margin_db, -LEVEL_STEP_DB * steps)
    # Each level adds the samples between its own margin and that of the level before it.
    bounds = np.append(len(density.margin_db), first)
    below = np.zeros((len(steps), COLUMNS, rings + 1))
    whole = density.ring.astype(np.int64)
    for row in range(len(steps)):
        new = slice(bounds[row + 1], bounds[row])
        place = density.column[new] * rings + whole[new]
        added = np.bincount(place, weights=density.weight[new], minlength=COLUMNS * rings)
        np.cumsum(added.reshape(COLUMNS, rings), axis=1, out=below[row, :, 1:])
        if row:
            below[row] += below[row - 1]
    return level, below
