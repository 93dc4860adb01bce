"""Decibels and ratios."""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike, NDArray

__all__ = ["mean_db", "to_db", "to_ratio"]


def to_ratio(level_db: ArrayLike) -> Any:
    """Power ratio of a level.

    Examples
    --------
    >>> float(to_ratio(20.0))
    100.0
    """
    return 10.0 ** (np.asarray(level_db, dtype=float) / 10.0)


def to_db(ratio: ArrayLike) -> Any:
    """Level of a power ratio; minus infinity for 0.

    Examples
    --------
    >>> float(to_db(100.0))
    20.0
    """
    with np.errstate(divide="ignore"):
        return 10.0 * np.log10(np.asarray(ratio, dtype=float))


def mean_db(levels_db: NDArray[np.floating], axis: int | None = None) -> Any:
    """Mean of levels, averaged as power ratios."""
    return to_db(np.mean(to_ratio(levels_db), axis=axis))
