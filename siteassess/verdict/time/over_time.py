"""From states of samples to the window of the joint counts."""

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from siteassess.angles import direction
from siteassess.link_budget.budget import SkySamples
from siteassess.site_file.model import Requirements
from siteassess.sky_tracks.dilution import dilution_of_precision
from siteassess.verdict.causes import SECTOR_NAMES
from siteassess.verdict.criteria import limit_or_advice
from siteassess.verdict.time.counts import ALL_SYSTEMS, JointSamples, counts_at_once
from siteassess.verdict.time.timeline import SectorCount, Shortfall, Timeline

__all__ = ["over_time", "runs"]

IndexArray = NDArray[np.int64]
BoolArray = NDArray[np.bool_]


def over_time(joint: JointSamples, samples: SkySamples, require: Requirements, step_s: float) -> Timeline:
    """Counts, dilution of precision and shortfalls over the window of the joint counts.

    Parameters
    ----------
    joint : JointSamples
        Who stands above the mask when, and whether it is usable.
    samples : SkySamples
        Directions.
    require : Requirements
        Limits that say what falls short; the published advice where there are none.
    step_s : float
        Seconds from epoch to epoch.
    """
    in_view, usable = counts_at_once(joint)
    azimuth_deg = samples.azimuth_deg[joint.sample]
    # Single precision moves a PDOP by less than a millionth, and takes half the time.
    toward = direction(azimuth_deg.astype(np.float32), samples.elevation_deg[joint.sample].astype(np.float32))
    here, gone = np.flatnonzero(joint.usable), np.flatnonzero(~joint.usable)
    dilution = dilution_of_precision(
        toward.take(here, axis=1), joint.epoch[here], joint.system[here], epochs=joint.epochs
    )
    sector = ((azimuth_deg + 22.5) / 45.0).astype(np.int64) % len(SECTOR_NAMES)
    missing = _Missing(
        systems=joint.systems,
        epoch=joint.epoch[gone],
        system=joint.system[gone],
        sector=sector[gone],
        step_s=step_s,
    )
    max_pdop = limit_or_advice(require, "max_pdop")
    within = dilution.position <= max_pdop  # an undetermined position is not
    return Timeline(
        step_s=step_s,
        systems=(*joint.systems, ALL_SYSTEMS),
        in_view=in_view,
        usable=usable,
        dilution_in_view=dilution_of_precision(toward, joint.epoch, joint.system, epochs=joint.epochs),
        dilution=dilution,
        sectors=_sectors(sector, here, joint.epochs),
        shortfalls=(
            *(
                missing.shortfall("satellites", system, number, usable[row] < number)
                for row, system, number in _asked_numbers(joint.systems, require)
            ),
            missing.shortfall("PDOP", ALL_SYSTEMS, max_pdop, ~within),
        ),
    )


def _asked_numbers(systems: tuple[str, ...], require: Requirements) -> Iterator[tuple[int, str, int]]:
    """Row of the counts, name, and how many satellites are needed: of all, then of single systems."""
    yield len(systems), ALL_SYSTEMS, int(limit_or_advice(require, "min_satellites"))
    for system, number in (require.min_satellites_by_system or {}).items():
        yield systems.index(system), system, number


def _sectors(sector: IndexArray, usable: IndexArray, epochs: int) -> tuple[SectorCount, ...]:
    in_view = np.bincount(sector, minlength=len(SECTOR_NAMES)) / epochs
    at_once = np.bincount(sector[usable], minlength=len(SECTOR_NAMES)) / epochs
    return tuple(
        SectorCount(name=name, in_view_mean=float(seen), usable_mean=float(used))
        for name, seen, used in zip(SECTOR_NAMES, in_view, at_once, strict=True)
    )


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Missing:
    """Satellites above the mask that are not usable; arrays of shape (n,)."""

    systems: tuple[str, ...]
    epoch: IndexArray
    system: IndexArray
    sector: IndexArray
    step_s: float

    def shortfall(
        self, what: Literal["satellites", "PDOP"], system: str, limit: float, short: BoolArray
    ) -> Shortfall:
        """How often and how long, and who is missing then."""
        then = short[self.epoch]
        if system != ALL_SYSTEMS:
            then &= self.system == self.systems.index(system)
        epochs = max(int(short.sum()), 1)
        lengths = runs(short)
        return Shortfall(
            what=what,
            system=system,
            limit=limit,
            share=float(short.mean()),
            times=len(lengths),
            longest_s=self.step_s * int(lengths.max(initial=0)),
            missing_by_system=_mean_by(self.systems, self.system[then], epochs),
            missing_by_sector=_mean_by(SECTOR_NAMES, self.sector[then], epochs),
        )


def _mean_by(names: tuple[str, ...], index: IndexArray, epochs: int) -> dict[str, float]:
    return dict(zip(names, (np.bincount(index, minlength=len(names)) / epochs).tolist(), strict=True))


def runs(state: BoolArray) -> IndexArray:
    """Lengths of the stretches in which a state holds, in their order.

    Examples
    --------
    >>> runs(np.array([True, True, False, True])).tolist()
    [2, 1]
    """
    edges = np.flatnonzero(np.diff(np.concatenate([[False], state, [False]]).astype(np.int8)))
    return edges[1::2] - edges[::2]
