"""Stretches of edges, strung together into edges without a gap."""

import numpy as np

from siteassess.horizon.curves import FloatArray, IndexArray

__all__ = ["unbroken"]

GAP_DEG = 1e-9  # azimuths that differ less are one
SAME_POINT = 1e-9  # points of which nothing differs more are one


def unbroken(owner: IndexArray, ends: FloatArray) -> list[tuple[int, FloatArray]]:
    """Edges without a gap, round through north where they go on there.

    Parameters
    ----------
    owner : array, shape (stretch,)
        Whose edge each stretch is part of, ascending.
    ends : array, shape (quantity, stretch, 2)
        Both ends of stretches. Those of one owner do not overlap and ascend by start. The first quantity is
        the azimuth, start within 0..360; the last one does not tell points apart.

    Returns
    -------
    list of (int, array of shape (quantity, point))
        Owner and edge, ascending by owner. Azimuths ascend; equal ones are a vertical edge.
    """
    if not len(owner):
        return []
    start_deg, end_deg = ends[0, :, 0], ends[0, :, 1]
    first = np.append(True, owner[1:] != owner[:-1])
    last = np.append(first[1:], True)
    begins = np.append(True, start_deg[1:] - end_deg[:-1] > GAP_DEG)
    begins[first] = start_deg[first] + 360.0 - end_deg[last] > GAP_DEG
    which = np.cumsum(first) - 1
    breaks = np.cumsum(begins)
    before = np.append(0, breaks[last])[which]
    # What comes before the first gap of its owner goes on behind north.
    moved = (breaks == before) & (breaks[last] > np.append(0, breaks[last][:-1]))[which]
    unwrap_deg = np.where(moved, 360.0, 0.0)
    order = np.lexsort((start_deg + unwrap_deg, owner))
    owner, begins = owner[order], (begins | first)[order] & ~moved[order]
    points = ends[:, order]
    points[0] += unwrap_deg[order, None]
    points = points.reshape(len(ends), -1)
    new = np.zeros(points.shape[1], dtype=np.bool_)
    new[::2] = begins
    new_point = new.copy()
    new_point[1:] |= (np.abs(np.diff(points[:-1], axis=1)) >= SAME_POINT).any(axis=0)
    points, new = points[:, new_point], new[new_point]
    edges = np.split(points, np.flatnonzero(new)[1:], axis=1)
    return list(zip(owner[begins].tolist(), edges, strict=True))
