"""Walls that others hide for certain, found in steps of azimuth, so that the exact work stays small."""

import numpy as np

from siteassess.horizon.buildings.walls import Walls
from siteassess.horizon.curves import BoolArray, FloatArray, IndexArray

__all__ = ["screen_tangent", "surely_hidden"]

STEPS = 1440
STEP_DEG = 360.0 / STEPS
MOST_SCREENS = 4000  # walls that may hide others: the widest and highest on the sky
WIDEST_HIDDEN = 16  # steps; wider walls are near and are kept
ROUNDING = 1e-9


def screen_tangent(walls: Walls, level_m: FloatArray) -> FloatArray:
    """Tangent of an elevation below which every azimuth of a step is hidden, shape (step,).

    Parameters
    ----------
    walls : Walls
        Of solid buildings that stand on the ground.
    level_m : array, shape (wall,)
        Their top edges above the antenna.
    """
    lower = np.full(STEPS, -np.inf)
    first = np.ceil(walls.start_deg / STEP_DEG).astype(np.int64)
    steps = np.floor(walls.end_deg / STEP_DEG).astype(np.int64) - first
    which = _largest(walls, level_m, steps > 0)
    # Places between steps: one more than the steps that a wall hides as a whole.
    places = steps[which] + 1
    wall = np.repeat(which, places)
    step = first[wall] + np.arange(len(wall)) - np.repeat(np.cumsum(places) - places, places)
    tangent = level_m[wall] / walls.distance_m(wall, step * STEP_DEG)
    one_wall = wall[1:] == wall[:-1]
    # A wall is nearer between two places than at the farther of them.
    lowest = np.minimum(tangent[1:], tangent[:-1])[one_wall]
    np.maximum.at(lower, step[:-1][one_wall] % STEPS, lowest)
    return lower


def surely_hidden(walls: Walls, level_m: FloatArray, screen: FloatArray) -> BoolArray:
    """Whether each wall lies below a screen wherever it stands; False where that is not certain."""
    first = np.floor(walls.start_deg / STEP_DEG).astype(np.int64)
    last = np.floor(walls.end_deg / STEP_DEG).astype(np.int64)
    farthest_m = np.maximum(walls.start_m, walls.end_m)
    # A wall is highest where it is nearest, or below the horizon where it is farthest.
    highest = level_m / np.where(level_m > 0.0, walls.nearest_m, farthest_m)
    hidden: BoolArray = last - first < WIDEST_HIDDEN
    for offset in range(WIDEST_HIDDEN):
        beyond = first + offset > last
        hidden &= beyond | (highest + ROUNDING < screen[(first + offset) % STEPS])
    return hidden


def _largest(walls: Walls, level_m: FloatArray, wide: BoolArray) -> IndexArray:
    which = np.flatnonzero(wide & (level_m > 0.0))
    if len(which) <= MOST_SCREENS:
        return which
    width_deg = walls.end_deg[which] - walls.start_deg[which]
    size = width_deg * level_m[which] / np.maximum(walls.start_m[which], walls.end_m[which])
    return which[np.argpartition(-size, MOST_SCREENS)[:MOST_SCREENS]]
