"""One survey file: the obstacles as the antenna sees them, and the azimuths that somebody looked at."""

from dataclasses import dataclass, replace
from pathlib import Path

import numpy as np

from siteassess.errors import InputError, Mistake
from siteassess.horizon.curves import FloatArray, IndexArray
from siteassess.horizon.growth import grown
from siteassess.horizon.looked_at import without
from siteassess.horizon.ring import closed_ring, opened_ring
from siteassess.horizon.skyline import GENERAL_SKYLINE, Obstacle, SurveyFacts
from siteassess.horizon.survey.bearings import NorthTurn
from siteassess.horizon.survey.carry import Points, carried, turned_short_way
from siteassess.horizon.survey.checks import (
    cover_of,
    general_mistakes,
    leaf_of,
    line_of,
    listed_mistakes,
    obstacle_mistakes,
)
from siteassess.horizon.survey.parallax import NEAREST_OBSTACLE_M, parallax_bound_deg
from siteassess.horizon.survey.rows import Rows, cell_mistake, read_rows
from siteassess.horizon.survey.silhouette import is_ascending, silhouette
from siteassess.site_file.model import HorizonSource, Mount
from siteassess.wording import shown

__all__ = ["NORTH_AS_READ", "Survey", "read_survey"]

WIDEST_STEP_DEG = 30.0  # rows of the general skyline further apart leave the sky between them unsurveyed
NEAREST_M = 0.001  # a point nearer to the antenna's vertical axis has no azimuth
HALF_TURN_TOLERANCE_DEG = 1e-6
NORTH_AS_READ = NorthTurn()


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Survey:
    """What one survey file says.

    Attributes
    ----------
    obstacles : tuple of Obstacle
        As seen from the antenna, in the order of the file.
    surveyed_deg : array, shape (stretch, 2)
        Azimuths from and to of what was looked at: from <= to; any turn of the circle, any order, overlaps.
    facts : SurveyFacts
        How it was used.
    """

    obstacles: tuple[Obstacle, ...]
    surveyed_deg: FloatArray
    facts: SurveyFacts


@dataclass(frozen=True, slots=True, kw_only=True)
class _Instrument:
    """Where the instrument stood from the antenna's phase centre, and what its azimuths lack."""

    offset_m: tuple[float, float, float]
    turn_deg: float


def read_survey(
    path: Path,
    source: HorizonSource,
    mount: Mount,
    *,
    turn: NorthTurn = NORTH_AS_READ,
    years: float = 0.0,
    growth_m_per_year: float = 0.0,
) -> Survey:
    """A survey file, carried from the instrument to the antenna's phase centre.

    Parameters
    ----------
    path : Path
        The file.
    source : HorizonSource
        Where the instrument stood, and whether the crew looked at every azimuth.
    mount : Mount
        Where the antenna stands.
    turn : NorthTurn
        What brings its azimuths to true north.
    years, growth_m_per_year : float
        Age of the survey for which it is read, and the growth of trees that do not say it themselves.

    Raises
    ------
    InputError
        With all the mistakes of the file.
    """
    rows, mistakes = read_rows(path)
    labels = dict.fromkeys(rows.texts["obstacle"])
    members = rows.by_label()
    spoiled = {line_of(mistake) for mistake in mistakes}
    for label in labels:
        check = general_mistakes if label is None else obstacle_mistakes
        # What a row is to its neighbours cannot be said while one of its own cells is wrong.
        mistakes += [found for found in check(rows, members[label]) if line_of(found) not in spoiled]
    if mistakes:
        raise InputError(*listed_mistakes(mistakes, rows.file))
    up_m = mount.phase_centre_height_m if source.instrument_up_m is None else source.instrument_up_m
    offset_m = (source.instrument_east_m, source.instrument_north_m, up_m - mount.phase_centre_height_m)
    instrument = _Instrument(offset_m=offset_m, turn_deg=turn.correction_deg)
    facts = _facts(rows, source, offset_m, turn)
    if years > 0.0:
        rows = grown(rows, years, growth_m_per_year)
    obstacles: list[Obstacle] = []
    surveyed_deg = np.array([[0.0, 360.0]]) if source.complete else np.empty((0, 2))
    unsurveyed_deg = np.empty((0, 2))
    for label in labels:
        try:
            if label is None:
                general, looked_at_deg = _general(rows, members[None], instrument, complete=source.complete)
                surveyed_deg = np.concatenate([surveyed_deg, looked_at_deg])
                obstacles += general
            elif cover_of(rows, members[label]) == "unsurveyed":
                stretch_deg = _azimuths(rows, members[label], instrument)[[0, -1]]
                unsurveyed_deg = np.concatenate([unsurveyed_deg, stretch_deg[None, :]])
            else:
                obstacles.append(_named(rows, members[label], instrument))
        except InputError as error:
            mistakes += error.mistakes
    if mistakes:
        raise InputError(*listed_mistakes(mistakes, rows.file))
    looked_at_deg = without(surveyed_deg, unsurveyed_deg)
    return Survey(obstacles=tuple(obstacles), surveyed_deg=looked_at_deg, facts=facts)


def _facts(
    rows: Rows, source: HorizonSource, offset_m: tuple[float, float, float], turn: NorthTurn
) -> SurveyFacts:
    is_edge = np.ones(len(rows.line), dtype=np.bool_)
    for which in rows.by_label().values():
        is_edge[which] = cover_of(rows, which) != "unsurveyed"
    without_distance = int((np.isnan(rows.slant_m) & is_edge).sum())
    away_m, bound_deg = float(np.linalg.norm(offset_m)), parallax_bound_deg(offset_m)
    remarks = list(turn.remarks)
    if away_m > 0.0 and without_distance:
        largest = f"by at most {bound_deg:.2f}°" if bound_deg is not None else "by any angle"
        remarks.append(
            f"The instrument stood {away_m:.2f} m from the antenna's phase centre. {without_distance} of "
            f"{int(is_edge.sum())} rows carry no distance and keep their angles: for obstacles at least "
            f"{NEAREST_OBSTACLE_M:g} m away they are off {largest}."
        )
    return SurveyFacts(
        file=rows.file,
        bearings="landmark" if source.landmark_reading_deg is not None else source.bearings,
        correction_deg=turn.correction_deg,
        uncertainty_deg=turn.uncertainty_deg,
        offset_m=away_m,
        rows=int(is_edge.sum()),
        rows_without_distance=without_distance,
        parallax_bound_deg=bound_deg if without_distance else 0.0,
        parallax_distance_m=NEAREST_OBSTACLE_M,
        remarks=tuple(remarks),
    )


def _azimuths(rows: Rows, which: IndexArray, instrument: _Instrument) -> FloatArray:
    """Azimuths of rows from true north, unwrapped."""
    given_deg = rows.numbers["azimuth_deg"][which]
    turns = np.append(0, np.cumsum(given_deg[1:] < given_deg[:-1]))
    return np.asarray(given_deg + 360.0 * turns + instrument.turn_deg)


def _points(rows: Rows, which: IndexArray, instrument: _Instrument) -> Points:
    """The rows as points, seen from the antenna."""
    points = carried(
        Points(
            azimuth_deg=_azimuths(rows, which, instrument),
            elevation_deg=rows.numbers["elevation_deg"][which],
            underside_deg=rows.numbers["underside_deg"][which],
            distance_m=rows.slant_m[which],
            depth_m=rows.numbers["depth_m"][which],
        ),
        instrument.offset_m,
    )
    near = points.horizontal_m < NEAREST_M
    if near.any():
        places = [f"line {line}" for line in rows.line[which[near]].tolist()]
        raise InputError(*(_misplaced(rows, place, "lies on the axis of the antenna") for place in places))
    return points


def _misplaced(rows: Rows, where: str, problem: str, remedy: str = "") -> Mistake:
    allowed = f"{remedy}check its distance and where the instrument stood"
    return Mistake(file=rows.file, where=where, problem=problem, allowed=allowed)


def _general(
    rows: Rows, which: IndexArray, instrument: _Instrument, *, complete: bool
) -> tuple[list[Obstacle], FloatArray]:
    """The general skyline, if it forms an edge anywhere, and the azimuths that it covers."""
    if len(which) == 1:  # level all round: only the height of the instrument matters
        above = replace(instrument, offset_m=(0.0, 0.0, instrument.offset_m[2]))
        points = _points(rows, np.repeat(which, 2), above)
        points = replace(points, azimuth_deg=np.array([0.0, 360.0]))
        return [_obstacle(rows, which, points)], points.azimuth_deg[None, :]
    given_deg = rows.numbers["azimuth_deg"][which]
    step_deg = np.diff(np.append(given_deg, given_deg[0] + 360.0))
    gap = (step_deg > WIDEST_STEP_DEG) & (not complete)
    if gap.all():
        return [], np.empty((0, 2))
    points = _points(rows, which, instrument)
    behind = np.abs(points.azimuth_deg - given_deg - instrument.turn_deg) >= 90.0
    if behind.any():
        problem, remedy = "lies between the instrument and the antenna", "give it an obstacle label, or "
        places = [f"line {line}" for line in rows.line[which[behind]].tolist()]
        raise InputError(*(_misplaced(rows, place, problem, remedy) for place in places))
    ends_deg = np.stack(
        [points.azimuth_deg, np.append(points.azimuth_deg[1:], points.azimuth_deg[0] + 360.0)]
    )
    points = opened_ring(points, gap) if gap.any() else closed_ring(points)
    if not is_ascending(points):
        points = silhouette(points, straight_in_space=False, closed=True)
    return [_obstacle(rows, which, points)], np.sort(ends_deg[:, ~gap].T, axis=1)


def _named(rows: Rows, which: IndexArray, instrument: _Instrument) -> Obstacle:
    """One named obstacle."""
    points = _points(rows, which, instrument)
    if len(which) == 1:
        return _pole(rows, which, points)
    straight_in_space = not np.isnan(points.distance_m).any()
    if straight_in_space:
        points = replace(points, azimuth_deg=turned_short_way(points.azimuth_deg))
        step_deg = np.diff(points.azimuth_deg)
        name = f"obstacle {shown(rows.texts['obstacle'][which[0]])}"
        if (np.abs(step_deg) > 180.0 - HALF_TURN_TOLERANCE_DEG).any():
            raise InputError(_misplaced(rows, name, "runs through the axis of the antenna"))
        # Sighted clockwise but seen anticlockwise through half the circle: from within.
        if step_deg.sum() <= -180.0:
            raise InputError(_misplaced(rows, name, "closes round the antenna"))
        if (step_deg <= 0.0).all():
            points = points.taken(np.arange(len(which))[::-1])
    if not is_ascending(points):
        points = silhouette(points, straight_in_space=straight_in_space, closed=False)
    return _obstacle(rows, which, points, straight_in_space=straight_in_space)


def _pole(rows: Rows, which: IndexArray, points: Points) -> Obstacle:
    """A pole or rod: two sides about its middle."""
    width_m, horizontal_m = float(rows.numbers["width_m"][which[0]]), float(points.horizontal_m[0])
    if horizontal_m <= 0.5 * width_m:
        raise InputError(
            cell_mistake(rows, int(which[0]), "width_m", "the antenna would stand in the obstacle")
        )
    half_deg = float(np.rad2deg(np.arctan2(0.5 * width_m, horizontal_m)))
    points = points.taken(np.array([0, 0]))
    points = replace(points, azimuth_deg=points.azimuth_deg + np.array([-half_deg, half_deg]))
    return replace(_obstacle(rows, which, points), width_m=width_m)


def _obstacle(rows: Rows, which: IndexArray, points: Points, *, straight_in_space: bool = False) -> Obstacle:
    label = rows.texts["obstacle"][which[0]]
    is_foliage = label is not None and cover_of(rows, which) == "foliage"

    def known(values: FloatArray) -> FloatArray | None:
        return None if np.isnan(values).all() else values

    return Obstacle(
        name=GENERAL_SKYLINE if label is None else label,
        cover="foliage" if is_foliage else "solid",
        leaf=leaf_of(rows, which),
        azimuth_deg=points.azimuth_deg - 360.0 * np.floor(points.azimuth_deg[0] / 360.0),
        elevation_deg=points.elevation_deg,
        underside_deg=known(points.underside_deg),
        distance_m=known(points.distance_m),
        depth_m=points.depth_m if is_foliage else None,
        straight_in_space=straight_in_space,
        source=rows.file,
    )
