"""How many satellites are in view and usable at once, epoch by epoch."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.link_budget.budget import LinkBudget
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.states import SampleStates
from siteassess.verdict.verdict import UsableCount

__all__ = [
    "ALL_SYSTEMS",
    "JointSamples",
    "at_least_share",
    "counts_at_once",
    "joint_samples",
    "number_reached",
    "usable_counts",
]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]
BoolArray = NDArray[np.bool_]

ALL_SYSTEMS = "all systems"
ROUNDING_SHARE = 1e-9  # far less than one epoch of the longest window


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class JointSamples:
    """Samples in the window of the joint counts, of satellites that send any of the site's signals.

    Attributes
    ----------
    epochs : int
        Epochs of the window.
    systems : tuple of str
        The site's systems.
    sample : integer array, shape (n,)
        Indices into `SkySamples`.
    epoch, system : integer array, shape (n,)
        When, and which of the systems.
    usable : boolean array, shape (n,)
        Whether at least one of the site's signals is usable.
    """

    epochs: int
    systems: tuple[str, ...]
    sample: IndexArray
    epoch: IndexArray
    system: IndexArray
    usable: BoolArray


def joint_samples(budget: LinkBudget, tracks: SkyTracks, by_signal: dict[str, SampleStates]) -> JointSamples:
    """What is counted at once: every satellite above the mask that sends one of the site's signals."""
    samples = budget.samples
    usable, sends = np.zeros((2, len(samples.satellite)), dtype=bool)
    for signal_budget in budget.signals:
        usable[signal_budget.sample] |= by_signal[signal_budget.signal.name].usable
        sends[signal_budget.sample] = True
    systems = tuple(dict.fromkeys(tracks.system))
    system_of = np.array([systems.index(system) for system in tracks.system], dtype=np.int64)
    sample = np.flatnonzero(sends & (samples.epoch < tracks.joint_epochs))
    return JointSamples(
        epochs=tracks.joint_epochs,
        systems=systems,
        sample=sample,
        epoch=samples.epoch[sample],
        system=system_of[samples.satellite[sample]],
        usable=usable[sample],
    )


def counts_at_once(joint: JointSamples) -> tuple[IndexArray, IndexArray]:
    """Satellites in view and usable ones, each of shape (system + 1, epoch); the last row is the sum."""
    shape = len(joint.systems), joint.epochs
    place = joint.system * joint.epochs + joint.epoch
    in_view = np.bincount(place, minlength=shape[0] * shape[1]).reshape(shape)
    usable = np.bincount(place[joint.usable], minlength=shape[0] * shape[1]).reshape(shape)
    return _with_sum(in_view), _with_sum(usable)


def _with_sum(by_system: IndexArray) -> IndexArray:
    return np.concatenate([by_system, by_system.sum(axis=0, keepdims=True)])


def at_least_share(count: IndexArray) -> FloatArray:
    """Share of time with at least 0, 1, 2, ... satellites, up to the largest number.

    Parameters
    ----------
    count : integer array, shape (epoch,)
        Satellites at once.

    Examples
    --------
    >>> at_least_share(np.array([2, 0, 1, 2])).tolist()
    [1.0, 0.75, 0.5]
    """
    share: FloatArray = np.cumsum(np.bincount(count)[::-1])[::-1] / len(count)
    return share


def number_reached(count: IndexArray, share: float) -> int:
    """The largest number of satellites that is there for a share of the time.

    Examples
    --------
    >>> [number_reached(np.array([2, 0, 1, 2]), share) for share in (0.5, 0.75, 1.0)]
    [2, 1, 0]
    """
    return int(np.flatnonzero(at_least_share(count) >= share - ROUNDING_SHARE)[-1])


def usable_counts(
    systems: tuple[str, ...], in_view: IndexArray, usable: IndexArray
) -> tuple[UsableCount, ...]:
    """Satellites at once, system by system and in all.

    Parameters
    ----------
    systems : tuple of str
        Names of the rows but the last.
    in_view, usable : integer array, shape (system + 1, epoch)
        From :func:`counts_at_once`.
    """
    return tuple(
        UsableCount(
            system=system,
            above_mask_mean=float(above.mean()),
            usable_mean=float(at_once.mean()),
            usable_min=int(at_once.min()),
            usable_p05=number_reached(at_once, 0.95),
        )
        for system, above, at_once in zip((*systems, ALL_SYSTEMS), in_view, usable, strict=True)
    )
