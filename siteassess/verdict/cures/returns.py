"""What comes back when obstacles go: one alone, several together, or trees that are cut."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import covers
from siteassess.link_budget.budget import SignalBudget, SkySamples
from siteassess.link_budget.obstacles.way_in import is_standing_wall, obstacle_loss_db
from siteassess.verdict.states import WEAKENED_FROM_DB, SampleStates

__all__ = ["LostSky", "lost_sky", "returned_alone", "returned_in_order", "returned_share", "returned_without"]

FloatArray = NDArray[np.float64]
BoolArray = NDArray[np.bool_]
IndexArray = NDArray[np.int64]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Hold:
    """What one obstacle does to the lost samples: which it hides, and which it costs how much."""

    hides: IndexArray
    near: IndexArray
    loss_db: FloatArray
    is_wall: bool


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class LostSky:
    """The lost samples of one signal, and what every obstacle does to each; arrays of shape (lost,).

    Attributes
    ----------
    apparent_elevation_deg : array
        Elevation as seen through the air.
    weight : array
        Satellite-time, as a share of all the signal's above the mask.
    spare_db : array
        Loss that C/N0 can bear: what an open sky leaves above the minimum.
    holds : tuple
        One entry an obstacle, in the order of the skyline.
    """

    apparent_elevation_deg: FloatArray
    weight: FloatArray
    spare_db: FloatArray
    holds: tuple[_Hold, ...]
    count_weakened: bool


@dataclass(slots=True, kw_only=True, eq=False)
class _Standing:
    """Sums over obstacles that stand: how many hide a sample, and the losses there."""

    hiders: IndexArray
    added_db: FloatArray
    wall_db: FloatArray


def lost_sky(
    skyline: Skyline,
    samples: SkySamples,
    budget: SignalBudget,
    states: SampleStates,
    *,
    count_weakened: bool,
) -> LostSky:
    """The samples of one signal that obstacles take, each obstacle's own part in it.

    Parameters
    ----------
    skyline : Skyline
        What stands round the antenna.
    samples, budget, states : SkySamples, SignalBudget, SampleStates
        The signal as it was judged.
    count_weakened : bool
        As in :func:`siteassess.verdict.states.sample_states`.
    """
    lost = np.flatnonzero(states.lost & (states.weight > 0.0))
    at = budget.sample[lost]
    azimuth_deg, elevation_deg = samples.azimuth_deg[at], samples.apparent_elevation_deg[at]
    nothing = np.empty(0, dtype=np.int64)
    holds = []
    for obstacle in skyline.obstacles:
        near, loss_db = obstacle_loss_db(obstacle, azimuth_deg, elevation_deg, budget.signal.carrier_hz)
        is_solid = obstacle.cover == "solid"
        hides = np.flatnonzero(covers(obstacle, azimuth_deg, elevation_deg)) if is_solid else nothing
        is_wall = is_standing_wall(obstacle, budget.signal.carrier_hz)
        holds.append(_Hold(hides=hides, near=near, loss_db=loss_db, is_wall=is_wall))
    return LostSky(
        apparent_elevation_deg=elevation_deg,
        weight=states.weight[lost] / max(states.weight.sum(), np.finfo(float).tiny),
        spare_db=budget.cn0_open_sky_dbhz[lost] - budget.min_cn0_dbhz,
        holds=tuple(holds),
        count_weakened=count_weakened,
    )


def returned_share(lost: LostSky, returned: BoolArray) -> float:
    """Share of the signal's satellite-time above the mask that some of the lost samples stand for."""
    return float(lost.weight[returned].sum())


def returned_alone(lost: LostSky) -> BoolArray:
    """Which samples come back when one obstacle alone goes, shape (obstacle, lost).

    A column without any True is held by several obstacles, each of which is enough. One with two or more is
    lost to losses that add up, of which any one may go.
    """
    standing = _nothing(lost)
    second_db, highest = np.zeros_like(lost.weight), np.full(lost.weight.shape, -1)
    for index, hold in enumerate(lost.holds):
        if hold.is_wall:
            before_db = standing.wall_db[hold.near]
            second_db[hold.near] = np.maximum(second_db[hold.near], np.minimum(before_db, hold.loss_db))
            highest[hold.near[hold.loss_db > before_db]] = index
        _stand(standing, hold)
    returned = np.zeros((len(lost.holds), len(lost.weight)), dtype=np.bool_)
    for index, hold in enumerate(lost.holds):
        hiders, added_db, wall_db = standing.hiders.copy(), standing.added_db.copy(), standing.wall_db
        hiders[hold.hides] -= 1
        if hold.is_wall:
            wall_db = np.where(highest == index, second_db, wall_db)
        else:
            added_db[hold.near] -= hold.loss_db
        touched = np.union1d(hold.hides, hold.near)
        without = _Standing(hiders=hiders[touched], added_db=added_db[touched], wall_db=wall_db[touched])
        returned[index, touched] = _is_usable(lost, without, touched)
    return returned


def returned_without(lost: LostSky, gone: Sequence[int]) -> BoolArray:
    """Which samples come back when some obstacles go together, shape (lost,)."""
    standing = _nothing(lost)
    left_out = set(gone)
    for index, hold in enumerate(lost.holds):
        if index not in left_out:
            _stand(standing, hold)
    return _is_usable(lost, standing, slice(None))


def returned_in_order(lost: LostSky, order: Sequence[int]) -> list[float]:
    """Shares that come back as obstacles go one after the other; the last is all that is lost.

    Parameters
    ----------
    lost : LostSky
        From :func:`lost_sky`.
    order : sequence of int
        Every obstacle once, in the order in which they go.
    """
    standing, shares = _nothing(lost), []
    for index in reversed(order):  # from the open sky back, each one set up again
        shares.append(returned_share(lost, _is_usable(lost, standing, slice(None))))
        _stand(standing, lost.holds[index])
    return shares[::-1]


def _nothing(lost: LostSky) -> _Standing:
    zeros = np.zeros_like(lost.weight)
    return _Standing(hiders=zeros.astype(np.int64), added_db=zeros.copy(), wall_db=zeros.copy())


def _stand(standing: _Standing, hold: _Hold) -> None:
    """Set one more obstacle up."""
    standing.hiders[hold.hides] += 1
    if hold.is_wall:
        standing.wall_db[hold.near] = np.maximum(standing.wall_db[hold.near], hold.loss_db)
    else:
        standing.added_db[hold.near] += hold.loss_db


def _is_usable(lost: LostSky, standing: _Standing, which: IndexArray | slice) -> BoolArray:
    loss_db = standing.added_db + standing.wall_db
    usable: BoolArray = (standing.hiders == 0) & (loss_db <= lost.spare_db[which])
    if not lost.count_weakened:
        usable &= loss_db < WEAKENED_FROM_DB
    return usable
