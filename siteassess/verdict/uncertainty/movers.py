"""The parts of a skyline that move together when one survey is off, and how far each point moves."""

from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, replace
from math import log

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import Skyline
from siteassess.verdict.uncertainty.draws import Draws
from siteassess.verdict.uncertainty.peaks import Peaks, highest_points, near_points
from siteassess.verdict.uncertainty.readings import Between, between_readings, rise_deg_per_m
from siteassess.verdict.uncertainty.survey_errors import SurveyErrors
from siteassess.verdict.uncertainty.taken_sky import (
    COLUMN_DEG,
    COLUMNS,
    TakenSky,
    column_azimuth_deg,
    owners,
    taken_sky,
)

__all__ = ["Mover", "carrier_key", "moved_deg", "moved_m", "movers", "turned_deg", "turns_by_columns"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]

SAME_EDGES = 0.05  # carriers within this part of each other bend round an edge alike, to 3 % of the angle


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Mover:
    """What one survey has put into the skyline, or all that does not move.

    Attributes
    ----------
    survey : int or None
        Which survey; None for what does not move.
    skyline : Skyline
        Its obstacles alone.
    solid : TakenSky
        Sky that they hide.
    taken : mapping of int to TakenSky
        Sky that they take from a signal, by :func:`carrier_key`.
    nodes : Between
        What the edges at the columns hang on.
    rise_deg_per_m : array, shape (node,)
        How much higher a reading stands, as the antenna sees it, when its distance is longer.
    highest, near : Peaks
        Points of all solid edges, and of those near enough to reflect.
    """

    survey: int | None
    skyline: Skyline
    solid: TakenSky
    taken: Mapping[int, TakenSky]
    nodes: Between
    rise_deg_per_m: FloatArray
    highest: Peaks
    near: Peaks


def carrier_key(carrier_hz: float) -> int:
    """A number that carriers of nearly one wavelength share."""
    return round(log(carrier_hz) / SAME_EDGES)


def movers(
    skyline: Skyline,
    errors: Sequence[SurveyErrors],
    from_deg: float,
    carriers_hz: Mapping[int, float],
    bearable_db: Mapping[int, Callable[[FloatArray], FloatArray]],
    *,
    near_m: float,
) -> tuple[Mover, ...]:
    """The parts of a skyline that move by themselves.

    Parameters
    ----------
    skyline : Skyline
        All of it.
    errors : sequence of SurveyErrors
        Survey by survey.
    from_deg : float
        Elevation from which it matters [deg].
    carriers_hz, bearable_db : mapping
        By :func:`carrier_key`, one carrier, and the loss at an elevation from which a direction is lost.
    near_m : float
        Horizontal distance within which obstacles reflect [m].
    """
    survey_of = {one.file: index for index, one in enumerate(errors) if one.moves}
    owner = [survey_of.get(obstacle.source) for obstacle in skyline.obstacles]
    groups = list(dict.fromkeys(owner))
    parts = []
    for group in groups:
        members = tuple(o for o, mine in zip(skyline.obstacles, owner, strict=True) if mine == group)
        part = skyline
        if len(groups) > 1:
            part = replace(skyline, obstacles=members, outline=upper_envelope(members))
        taken = {key: taken_sky(part, from_deg, carriers_hz[key], bearable_db[key]) for key in carriers_hz}
        parts.append(_mover(part, group, errors, taken, taken_sky(part, from_deg), near_m))
    return tuple(parts)


def _mover(
    part: Skyline,
    survey: int | None,
    errors: Sequence[SurveyErrors],
    taken: dict[int, TakenSky],
    solid: TakenSky,
    near_m: float,
) -> Mover:
    one = None if survey is None else errors[survey]
    spread_deg = 0.0 if one is None else one.elevation_common_deg + one.elevation_point_deg
    highest = highest_points(part, spread_deg)
    near = near_points(part, near_m, 0.0 if one is None else one.distance_m)
    at_columns = between_readings(part.obstacles, owners(part), column_azimuth_deg())
    used, index = np.unique(
        np.concatenate([n for b in (at_columns, highest.nodes, near.nodes) for n in (b.left, b.right)]),
        return_inverse=True,
    )
    sizes = [len(b.left) for b in (at_columns, at_columns, highest.nodes, highest.nodes, near.nodes)]
    split = np.split(index, np.cumsum(sizes))
    deg_per_m = rise_deg_per_m(part.obstacles, (0.0, 0.0, 0.0) if one is None else one.offset_m)
    return Mover(
        survey=survey,
        skyline=part,
        solid=solid,
        taken=taken,
        nodes=replace(at_columns, left=split[0], right=split[1]),
        rise_deg_per_m=deg_per_m[used],
        highest=replace(highest, nodes=replace(highest.nodes, left=split[2], right=split[3])),
        near=replace(near, nodes=replace(near.nodes, left=split[4], right=split[5])),
    )


def moved_deg(mover: Mover, draws: Draws, places: Between) -> FloatArray:
    """How much higher places stand in each draw, shape (draw, place)."""
    if mover.survey is None:
        return np.zeros((len(draws), len(places.left)))
    node_deg = draws.reading_deg[mover.survey] + draws.distance_m[mover.survey] * mover.rise_deg_per_m
    return _at(node_deg, places) + draws.common_deg[:, mover.survey, None]


def moved_m(mover: Mover, draws: Draws, places: Between) -> FloatArray:
    """How much farther away places stand in each draw, shape (draw, place)."""
    if mover.survey is None:
        return np.zeros((len(draws), len(places.left)))
    return _at(draws.distance_m[mover.survey], places)


def _at(nodes: FloatArray, places: Between) -> FloatArray:
    left = nodes[:, places.left]
    return np.asarray(left + (nodes[:, places.right] - left) * places.part)


def turned_deg(mover: Mover, top_deg: FloatArray, turns: IndexArray, floor_deg: float) -> FloatArray:
    """An edge at the columns, turned with its survey by so many columns, shape (draw, column)."""
    top_deg = np.maximum(top_deg, floor_deg)
    if mover.survey is None:
        return np.broadcast_to(top_deg, (len(turns), COLUMNS))
    return np.asarray(top_deg[(np.arange(COLUMNS) - turns[:, mover.survey, None]) % COLUMNS])


def turns_by_columns(draws: Draws) -> list[tuple[FloatArray | None, IndexArray]]:
    """How many columns each survey turns in each draw: weight (None: 1), and turns of shape (draw, survey).

    What one survey turns by a part of a column is shared between two turns. Where several turn, they do so by
    whole columns, because their edges meet.
    """
    turn = draws.azimuth_deg / COLUMN_DEG
    if np.count_nonzero(turn.any(axis=0)) > 1:
        return [(None, np.rint(turn).astype(np.int64))]
    whole = np.floor(turn).astype(np.int64)
    part = (turn - whole).sum(axis=1, keepdims=True)
    if not part.any():
        return [(None, whole)]
    return [(1.0 - part, whole), (part, whole + 1)]
