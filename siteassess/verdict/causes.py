"""What takes satellite-time away: obstacle by obstacle, and direction by direction."""

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.shares import SkyShares
from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.budget import LinkBudget, SkySamples
from siteassess.verdict.states import SampleStates
from siteassess.verdict.verdict import ObstacleCost, SectorShare

__all__ = ["SECTOR_NAMES", "obstacle_costs", "sector_shares"]

FloatArray = NDArray[np.float64]

SECTOR_NAMES = ("N", "NE", "E", "SE", "S", "SW", "W", "NW")


def obstacle_costs(
    skyline: Skyline,
    sky: SkyShares,
    samples: SkySamples,
    weight: FloatArray,
    by_signal: dict[str, SampleStates],
) -> tuple[ObstacleCost, ...]:
    """What each obstacle costs, in the order of the skyline."""
    count = len(skyline.obstacles)
    total = weight.sum()
    blocked = (
        _sum_by_obstacle(samples.hiding_obstacle, weight, count) / total if total > 0 else np.zeros(count)
    )
    lost = {
        signal: _sum_by_obstacle(states.blamed_obstacle, states.weight * states.lost, count)
        / max(states.weight.sum(), np.finfo(float).tiny)
        for signal, states in by_signal.items()
    }
    return tuple(
        ObstacleCost(
            name=obstacle.name,
            cover=obstacle.cover,
            azimuth_from_deg=float(obstacle.azimuth_deg[0]),
            azimuth_to_deg=float(obstacle.azimuth_deg[-1]),
            peak_azimuth_deg=float(obstacle.azimuth_deg[np.argmax(obstacle.elevation_deg)] % 360.0),
            peak_elevation_deg=float(np.max(obstacle.elevation_deg)),
            blocked_share_above_mask=sky.obstacle_blocked_share_above_mask[index],
            blocked_satellite_time_share=float(blocked[index]),
            lost_satellite_time_share={signal: float(share[index]) for signal, share in lost.items()},
        )
        for index, obstacle in enumerate(skyline.obstacles)
    )


def _sum_by_obstacle(obstacle: NDArray[np.int64], weight: FloatArray, count: int) -> FloatArray:
    summed: FloatArray = np.bincount(obstacle + 1, weights=weight, minlength=count + 1)[1:].astype(float)
    return summed


def sector_shares(
    sky: SkyShares, budget: LinkBudget, by_signal: dict[str, SampleStates]
) -> tuple[SectorShare, ...]:
    """Satellite-time and its losses in eight 45 degree sectors, all signals pooled."""
    time, lost = np.zeros(len(SECTOR_NAMES)), np.zeros(len(SECTOR_NAMES))
    for signal_budget in budget.signals:
        states = by_signal[signal_budget.signal.name]
        azimuth_deg = budget.samples.azimuth_deg[signal_budget.sample]
        sector = (((azimuth_deg + 22.5) % 360.0) // 45.0).astype(np.int64)
        time += np.bincount(sector, weights=states.weight, minlength=len(SECTOR_NAMES))
        lost += np.bincount(sector, weights=states.weight * states.lost, minlength=len(SECTOR_NAMES))
    total = max(time.sum(), np.finfo(float).tiny)
    return tuple(
        SectorShare(
            name=name,
            azimuth_from_deg=(45.0 * index - 22.5) % 360.0,
            azimuth_to_deg=45.0 * index + 22.5,
            satellite_time_share=float(time[index] / total),
            lost_satellite_time_share=float(lost[index] / total),
            blocked_share=sky.sector_blocked_share[index],
        )
        for index, name in enumerate(SECTOR_NAMES)
    )
