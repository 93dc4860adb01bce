"""Where labels find room: numbers round the rim of a circle, names in rows above a strip."""

import numpy as np
from numpy.typing import NDArray

__all__ = ["label_rows", "spread"]

FloatArray = NDArray[np.float64]


def spread(azimuth_deg: FloatArray, gap_deg: float) -> FloatArray:
    """Azimuths moved apart as little as needed (least squares) so that neighbours keep a gap.

    Parameters
    ----------
    azimuth_deg : array, shape (label,)
        Where the labels would best stand, in any order.
    gap_deg : float
        Smallest gap; less where the circle has no room for it.

    Returns
    -------
    array, shape (label,)
        Azimuths in the order given; they may lie outside 0..360.

    Examples
    --------
    >>> spread(np.array([10.0, 11.0, 90.0]), 5.0).tolist()
    [8.0, 13.0, 90.0]
    """
    count = len(azimuth_deg)
    if count < 2:
        return azimuth_deg
    gap_deg = min(gap_deg, 360.0 / count)
    order = np.argsort(azimuth_deg, kind="stable")
    ascending = azimuth_deg[order]
    widest = int(np.argmax(np.diff(np.append(ascending, ascending[0] + 360.0))))
    # Counted from the widest opening on, so that no label is pushed past it.
    order = np.roll(order, -(widest + 1))
    unwrapped = np.roll(ascending, -(widest + 1))
    unwrapped[count - widest - 1 :] += 360.0
    steps_deg = gap_deg * np.arange(count)
    placed = np.empty(count)
    placed[order] = _ascending_fit(unwrapped - steps_deg) + steps_deg
    return placed if placed.min() < 360.0 else placed - 360.0


def _ascending_fit(values: FloatArray) -> FloatArray:
    """Nearest values that never fall, in the sense of least squares: neighbours that fall are pooled."""
    sums: list[float] = []
    counts: list[int] = []
    for value in values.tolist():
        sums.append(value)
        counts.append(1)
        while len(sums) > 1 and sums[-2] / counts[-2] > sums[-1] / counts[-1]:
            sums[-2:] = [sums[-2] + sums[-1]]
            counts[-2:] = [counts[-2] + counts[-1]]
    return np.repeat(np.array(sums) / np.array(counts), counts)


def label_rows(centre: list[float], width: list[float], rows: int) -> list[int | None]:
    """The lowest row in which each label finds room beside those placed before; None where no row has any.

    Parameters
    ----------
    centre, width : list of float, one element a label
        Middle and width, in one unit.
    rows : int
        Number of rows.

    Examples
    --------
    >>> label_rows([10.0, 20.0, 100.0], [30.0, 30.0, 30.0], rows=1)
    [0, None, 0]
    """
    taken: list[list[tuple[float, float]]] = [[] for _ in range(rows)]
    found: list[int | None] = []
    for middle, across in zip(centre, width, strict=True):
        left, right = middle - across / 2, middle + across / 2
        free = (row for row in range(rows) if all(right <= start or left >= end for start, end in taken[row]))
        row = next(free, None)
        if row is not None:
            taken[row].append((left, right))
        found.append(row)
    return found
