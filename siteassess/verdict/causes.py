"""What takes satellite-time away: obstacle by obstacle, and direction by direction."""

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.shares import SkyShares
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.link_budget.budget import LinkBudget, SkySamples
from siteassess.link_budget.obstacles.foliage import FOLIAGE_MODELS, leaves_loss_db
from siteassess.link_budget.obstacles.thin import grazes, is_thin, loss_behind_db
from siteassess.verdict.states import SampleStates
from siteassess.verdict.verdict import ObstacleCost, SectorShare

__all__ = ["SECTOR_NAMES", "cost_rank", "obstacle_costs", "sector_shares"]

FloatArray = NDArray[np.float64]

L1_HZ = 1575.42e6  # [IS-GPS-200]; what single figures of an obstacle are given for
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
            foliage_loss_db=_foliage_loss_db(obstacle),
            behind_loss_db=loss_behind_db(obstacle, L1_HZ) if is_thin(obstacle, L1_HZ) else None,
            grazing_hours_per_day=_grazing_hours_per_day(obstacle, samples, weight),
        )
        for index, obstacle in enumerate(skyline.obstacles)
    )


def cost_rank(obstacle: ObstacleCost) -> tuple[float, float, float]:
    """What obstacles are ordered by: what one returns by going, then what it takes, then the sky it hides."""
    return (
        max((obstacle.returned_satellite_time_share or {}).values(), default=0.0),
        max(obstacle.lost_satellite_time_share.values(), default=0.0),
        obstacle.blocked_share_above_mask,
    )


def _foliage_loss_db(obstacle: Obstacle) -> dict[str, float] | None:
    """Loss on L1 at the highest point, by every model."""
    if obstacle.depth_m is None:
        return None
    top = int(np.argmax(obstacle.elevation_deg))
    through_m, elevation_deg = obstacle.depth_m[top], obstacle.elevation_deg[top]
    return {
        model: float(leaves_loss_db(model, obstacle.leaf, through_m, L1_HZ, elevation_deg))
        for model in FOLIAGE_MODELS
    }


def _grazing_hours_per_day(obstacle: Obstacle, samples: SkySamples, weight: FloatArray) -> float | None:
    """Satellite-hours a day that pass a thin thing within the first Fresnel zone on L1."""
    if not is_thin(obstacle, L1_HZ):
        return None
    near = grazes(obstacle, samples.azimuth_deg, samples.apparent_elevation_deg, L1_HZ)
    return 24.0 * float(weight[near].sum())


def _sum_by_obstacle(obstacle: NDArray[np.int64], weight: FloatArray, count: int) -> FloatArray:
    summed: FloatArray = np.bincount(obstacle + 1, weights=weight, minlength=count + 1)[1:].astype(float)
    return summed


def sector_shares(
    sky: SkyShares, budget: LinkBudget, by_signal: dict[str, SampleStates]
) -> tuple[SectorShare, ...]:
    """Satellite-time and its losses in eight 45 degree sectors, all signals pooled."""
    time, lost = np.zeros(len(SECTOR_NAMES)), np.zeros(len(SECTOR_NAMES))
    sector_of = ((budget.samples.azimuth_deg + 22.5) / 45.0).astype(np.int64) % len(SECTOR_NAMES)
    for signal_budget in budget.signals:
        states = by_signal[signal_budget.signal.name]
        sector = sector_of[signal_budget.sample]
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
