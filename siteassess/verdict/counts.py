"""How many satellites are usable at once."""

import numpy as np

from siteassess.link_budget.budget import LinkBudget
from siteassess.sky_tracks.tracks import SkyTracks
from siteassess.verdict.states import SampleStates
from siteassess.verdict.verdict import UsableCount

__all__ = ["ALL_SYSTEMS", "usable_counts"]

ALL_SYSTEMS = "all systems"


def usable_counts(
    budget: LinkBudget, tracks: SkyTracks, by_signal: dict[str, SampleStates]
) -> tuple[UsableCount, ...]:
    """Satellites usable at once, system by system and in all."""
    samples, epochs = budget.samples, tracks.joint_epochs
    usable = np.zeros(len(samples.satellite), dtype=bool)
    for signal_budget in budget.signals:
        usable[signal_budget.sample] |= by_signal[signal_budget.signal.name].usable
    counted = samples.epoch < epochs
    system_of = np.array(tracks.system)[samples.satellite]
    counts = []
    for system in (*dict.fromkeys(tracks.system), ALL_SYSTEMS):
        of_system = counted if system == ALL_SYSTEMS else counted & (system_of == system)
        above = np.bincount(samples.epoch[of_system], minlength=epochs)
        at_once = np.bincount(samples.epoch[of_system & usable], minlength=epochs)
        counts.append(
            UsableCount(
                system=system,
                above_mask_mean=float(above.mean()),
                usable_mean=float(at_once.mean()),
                usable_min=int(at_once.min()),
                usable_p05=int(np.percentile(at_once, 5, method="lower")),
            )
        )
    return tuple(counts)
