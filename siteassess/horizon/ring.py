"""The general skyline as a ring of points, closed or open along the gaps that nobody looked at."""

from dataclasses import replace

import numpy as np

from siteassess.horizon.curves import NOTHING_DEG, BoolArray
from siteassess.horizon.survey.carry import Points

__all__ = ["closed_ring", "opened_ring"]


def closed_ring(points: Points) -> Points:
    """A ring that ends where it begins, one turn further."""
    closed = points.taken(np.append(np.arange(len(points.azimuth_deg)), 0))
    return replace(closed, azimuth_deg=np.append(points.azimuth_deg, points.azimuth_deg[0] + 360.0))


def opened_ring(points: Points, gap: BoolArray) -> Points:
    """A ring with gaps behind some of its points: it starts behind one, and lies at -90 along the others."""
    joined = ~(gap & np.roll(gap, 1))
    points, gap = points.taken(joined), gap[joined]
    begin = (int(np.flatnonzero(gap)[-1]) + 1) % len(gap)
    order = np.roll(np.arange(len(gap)), -begin)
    points = replace(points, azimuth_deg=points.azimuth_deg + 360.0 * (np.arange(len(gap)) < begin))
    points, gap = points.taken(order), gap[order]
    # The point on either side of a gap stands there twice: its copy on the side of the gap drops.
    behind = np.flatnonzero(gap[:-1])
    twice = np.sort(np.concatenate([np.arange(len(gap)), behind, behind + 1]))
    dropped = np.zeros(len(twice), dtype=np.bool_)
    dropped[np.searchsorted(twice, behind, side="right") - 1] = True
    dropped[np.searchsorted(twice, behind + 1, side="left")] = True
    points = points.taken(twice)
    return replace(
        points,
        elevation_deg=np.where(dropped, NOTHING_DEG, points.elevation_deg),
        distance_m=np.where(dropped, np.nan, points.distance_m),
    )
