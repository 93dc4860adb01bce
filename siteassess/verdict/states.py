"""The state of every sample of a signal: hidden, weakened, usable, lost.

The denominator of every share is geometric satellite-time above the mask under an open sky. Every sample
weighs the inverse of the epochs of its satellite's own ground-track cycles, so that satellites with longer
cycles do not count for more.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.link_budget.budget import SignalBudget, SkySamples
from siteassess.sky_tracks.tracks import SkyTracks

__all__ = ["SampleStates", "sample_states", "sample_weights", "share"]

FloatArray = NDArray[np.float64]
BoolArray = NDArray[np.bool_]

WEAKENED_FROM_DB = 1.0  # own definition: an obstacle or leaves that cost this much weaken a signal


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SampleStates:
    """State of every sample of one signal; arrays of shape (n,), in step with `SignalBudget.sample`.

    Attributes
    ----------
    weight : array
        Share of its satellite's cycle that the sample stands for; 0 outside the cycle.
    hidden, weakened, usable, usable_open_sky : boolean array
        States; `usable_open_sky` is what antenna and chain alone would give.
    blamed_obstacle : integer array
        Index of the obstacle that takes a lost sample away; -1 where nothing does.
    """

    weight: FloatArray
    hidden: BoolArray
    weakened: BoolArray
    usable: BoolArray
    usable_open_sky: BoolArray
    blamed_obstacle: NDArray[np.int64]

    @property
    def lost(self) -> BoolArray:
        """Usable under an open sky, and not usable here."""
        return self.usable_open_sky & ~self.usable


def sample_weights(samples: SkySamples, tracks: SkyTracks) -> FloatArray:
    """Share of its satellite's own cycles that each sample stands for, shape (sample,)."""
    return samples.counts_for_shares / tracks.own_epochs[samples.satellite]


def sample_states(
    budget: SignalBudget, samples: SkySamples, weight: FloatArray, *, count_weakened: bool
) -> SampleStates:
    """States of one signal's samples.

    Parameters
    ----------
    budget : SignalBudget
        Levels and losses.
    samples : SkySamples
        Directions and what hides them.
    weight : array, shape (sample,)
        From :func:`sample_weights`.
    count_weakened : bool
        Whether signals through leaves or close to an edge count as usable when they are strong enough.
    """
    hiding = samples.hiding_obstacle[budget.sample]
    hidden = hiding >= 0
    weakened = ~hidden & (budget.obstacle_loss_db >= WEAKENED_FROM_DB)
    strong = budget.cn0_dbhz >= budget.min_cn0_dbhz
    return SampleStates(
        weight=weight[budget.sample],
        hidden=hidden,
        weakened=weakened,
        usable=~hidden & strong & (~weakened | count_weakened),
        usable_open_sky=budget.cn0_open_sky_dbhz >= budget.min_cn0_dbhz,
        blamed_obstacle=np.where(hidden, hiding, budget.costly_obstacle),
    )


def share(state: BoolArray, weight: FloatArray) -> float:
    """Weighted share of samples in a state; 0 when no satellite is ever above the mask."""
    total = weight.sum()
    return float(weight[state].sum() / total) if total > 0 else 0.0
