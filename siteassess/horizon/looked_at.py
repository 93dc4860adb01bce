"""Azimuths that somebody looked at, and those that nobody did."""

import numpy as np

from siteassess.horizon.curves import FloatArray

__all__ = ["gaps_between", "without"]

NARROWEST_DEG = 1e-9  # narrower ones are rounding


def gaps_between(stretches_deg: FloatArray) -> FloatArray:
    """Azimuth ranges that no stretch covers.

    Parameters
    ----------
    stretches_deg : array, shape (stretch, 2)
        Azimuths from and to, from <= to; any turn of the circle, any order, overlaps.

    Returns
    -------
    array, shape (gap, 2)
        0 <= from < to <= 360, ascending and disjoint.

    Examples
    --------
    >>> gaps_between(np.array([[340.0, 380.0], [10.0, 60.0]])).tolist()
    [[60.0, 340.0]]
    """
    stretches_deg = stretches_deg[stretches_deg[:, 1] - stretches_deg[:, 0] > NARROWEST_DEG]
    from_deg = stretches_deg[:, 0] - 360.0 * np.floor(stretches_deg[:, 0] / 360.0)
    to_deg = from_deg + (stretches_deg[:, 1] - stretches_deg[:, 0])
    from_deg, to_deg = np.append(from_deg, from_deg - 360.0), np.append(to_deg, to_deg - 360.0)
    order = np.argsort(from_deg, kind="stable")
    reached_deg = np.maximum.accumulate(np.append(0.0, to_deg[order]))
    start_deg = np.clip(reached_deg, 0.0, 360.0)
    end_deg = np.clip(np.append(from_deg[order], 360.0), 0.0, 360.0)
    is_gap = end_deg > start_deg + NARROWEST_DEG
    return np.stack([start_deg[is_gap], end_deg[is_gap]], axis=1)


def without(stretches_deg: FloatArray, unsurveyed_deg: FloatArray) -> FloatArray:
    """Stretches less those that nobody looked at, both as for `gaps_between`.

    Examples
    --------
    >>> without(np.array([[0.0, 360.0]]), np.array([[350.0, 370.0]])).tolist()
    [[10.0, 350.0]]
    """
    if not len(unsurveyed_deg):
        return stretches_deg
    return gaps_between(np.concatenate([gaps_between(stretches_deg), unsurveyed_deg]))
