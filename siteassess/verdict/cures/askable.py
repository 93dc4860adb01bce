"""What could be asked of a spot as it is: the highest minimum of C/N0, the lowest mask."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.budget import SignalBudget
from siteassess.verdict.cures.angular import AngularForm
from siteassess.verdict.cures.angular_shares import shares_above
from siteassess.verdict.states import WEAKENED_FROM_DB, SampleStates

__all__ = ["ALL_SIGNALS", "Askable", "askable", "lowest_masks_deg"]

FloatArray = NDArray[np.float64]

ALL_SIGNALS = "all signals"
HIGHEST_MASK_DEG = 60
# The angular form keeps within this of the whole assessment; a mask below the present one must pass by it.
ANGULAR_TOLERANCE = 0.002


@dataclass(frozen=True, slots=True, kw_only=True)
class Askable:
    """What could be asked of one signal at this spot, with the usable share asked for as it is.

    Attributes
    ----------
    signal : str
        Its name.
    min_cn0_dbhz : float
        What is asked now.
    highest_min_cn0_dbhz : float or None
        Highest minimum of C/N0 that passes at the present mask; None where none does.
    lowest_mask_deg : float or None
        Lowest mask, in whole degrees, that passes at the present minimum of C/N0; None where none up to 60
        degrees does.
    """

    signal: str
    min_cn0_dbhz: float
    highest_min_cn0_dbhz: float | None
    lowest_mask_deg: float | None


def askable(
    masks_deg: dict[str, float | None],
    budgets: tuple[SignalBudget, ...],
    states: dict[str, SampleStates],
    min_usable_share: float,
    *,
    count_weakened: bool,
) -> tuple[Askable, ...]:
    """What could be asked of each signal.

    Parameters
    ----------
    masks_deg : dict of str to float or None
        From :func:`lowest_masks_deg`.
    budgets, states : tuple of SignalBudget, dict of str to SampleStates
        The signals as they were judged.
    min_usable_share : float
        What is asked of the usable share.
    count_weakened : bool
        As in the site file.
    """
    return tuple(
        Askable(
            signal=budget.signal.name,
            min_cn0_dbhz=budget.min_cn0_dbhz,
            highest_min_cn0_dbhz=_highest_min_cn0_dbhz(
                budget, states[budget.signal.name], min_usable_share, count_weakened=count_weakened
            ),
            lowest_mask_deg=masks_deg[budget.signal.name],
        )
        for budget in budgets
    )


def lowest_masks_deg(form: AngularForm, skyline: Skyline, min_usable_share: float) -> dict[str, float | None]:
    """Lowest mask, in whole degrees, at which each signal passes, and under `ALL_SIGNALS` all of them."""
    masks_deg = np.arange(0.0, HIGHEST_MASK_DEG + 1.0)
    above = shares_above(form, skyline, masks_deg)
    above[ALL_SIGNALS] = np.min(list(above.values()), axis=0)
    return {name: _lowest_mask_deg(masks_deg, usable, min_usable_share) for name, usable in above.items()}


def _highest_min_cn0_dbhz(
    budget: SignalBudget, states: SampleStates, min_usable_share: float, *, count_weakened: bool
) -> float | None:
    total = states.weight.sum()
    counts = ~states.hidden & (states.weight > 0.0)
    if not count_weakened:
        counts &= budget.obstacle_loss_db < WEAKENED_FROM_DB
    if total <= 0.0 or states.weight[counts].sum() < min_usable_share * total:
        return None
    cn0_dbhz, weight = budget.cn0_dbhz[counts], states.weight[counts]
    order = np.argsort(cn0_dbhz)[::-1]
    reached = np.cumsum(weight[order]) >= min_usable_share * total * (1.0 - 1e-12)
    return float(cn0_dbhz[order][np.argmax(reached)])


def _lowest_mask_deg(masks_deg: FloatArray, usable: FloatArray, min_usable_share: float) -> float | None:
    passes = np.flatnonzero(usable >= min(1.0, min_usable_share + ANGULAR_TOLERANCE))
    return float(masks_deg[passes[0]]) if len(passes) else None
