"""Where a survey and a model of the surroundings do not show the same edge, within their errors."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from typing import Literal

import numpy as np

from siteassess.horizon.curves import BoolArray, FloatArray, IndexArray
from siteassess.horizon.looked_at import gaps_between
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import GENERAL_SKYLINE, Disagreement, Obstacle, Skyline
from siteassess.horizon.view import edge_distance_m, outline_elevation_deg

__all__ = ["SURVEY_ERRORS_DEG", "Source", "disagreements"]

STANDARD_DEVIATIONS = 2.0  # own choice: what more than one in twenty would differ by is not told
SURVEY_ERRORS_DEG = (1.0, 0.5)  # own default of azimuth and elevation, where a survey states none
# Own defaults of place and height [m].
MODEL_ERRORS_M = {"outlines": (1.0, 1.0), "terrain": (20.0, 5.0)}
MODEL_FLOOR_DEG = {"outlines": 0.0, "terrain": 0.05}  # how close the skyline of a raster is to its ground
SAME_DISTANCE = 1.25  # own choice: edges whose distances differ less are those of one obstacle
STEP_DEG = 0.1
AZIMUTHS_DEG = (np.arange(3600) + 0.5) * STEP_DEG
JOINED_STEPS = 10  # what interrupts a disagreement for less than a degree does not end it


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Source:
    """One source of the horizon, as far as it can be held against another.

    Attributes
    ----------
    kind : str
        "survey", "outlines" or "terrain".
    file : str
        Its name.
    obstacles : tuple of Obstacle
        As seen from the antenna.
    surveyed_deg : array, shape (stretch, 2)
        Azimuths from and to of what was looked at.
    complete : bool
        Whether it says that nothing else hides the sky.
    azimuth_error_deg, elevation_error_deg : float or None
        Of a survey: one standard deviation; None where it is not stated.
    """

    kind: Literal["survey", "outlines", "terrain"]
    file: str
    obstacles: tuple[Obstacle, ...]
    surveyed_deg: FloatArray
    complete: bool = False
    azimuth_error_deg: float | None = None
    elevation_error_deg: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Seen:
    """The highest edge of one source at `AZIMUTHS_DEG`, and one standard deviation of its angles.

    Elevations are 0 where no edge rises above the horizon.
    """

    source: Source
    obstacle: IndexArray
    elevation_deg: FloatArray
    distance_m: FloatArray
    azimuth_error_deg: FloatArray
    elevation_error_deg: FloatArray

    @property
    def has_edge(self) -> BoolArray:
        return self.obstacle >= 0

    def name_at(self, place: int) -> str:
        """Name of what is seen; empty where nothing rises above the horizon."""
        is_seen = self.has_edge[place] and self.elevation_deg[place] > 0.0
        return self.source.obstacles[self.obstacle[place]].name if is_seen else ""


def disagreements(sources: Sequence[Source]) -> tuple[Disagreement, ...]:
    """Where surveys and models of the same surroundings differ by more than their errors explain.

    One edge stands above the other where it is higher than the other one is anywhere within the errors of
    azimuth, by more than the errors of elevation; all errors together, two standard deviations. A model that
    stands above a survey contradicts it wherever the survey looked. A survey that stands above a model may
    show what the model lacks: it contradicts the model where both show the same obstacle, or where outlines
    are said to be complete.

    Parameters
    ----------
    sources : sequence of Source
        In the order of the site file. What hangs free is left out.

    Returns
    -------
    tuple of Disagreement
        By survey, model and azimuth.
    """
    surveys = [one for one in sources if one.kind == "survey"]
    models = [one for one in sources if one.kind != "survey"]
    if not surveys or not models:
        return ()
    seen_models = [_seen(model) for model in models]
    return tuple(
        found
        for survey in map(_seen, surveys)
        for model in seen_models
        for found in sorted(_between(survey, model), key=lambda one: one.start_deg)
    )


def _seen(source: Source) -> _Seen:
    # Leaves are compared like walls: what differs is where they stand.
    standing = tuple(replace(one, cover="solid") for one in source.obstacles if not one.hangs_free)
    kept = [index for index, one in enumerate(source.obstacles) if not one.hangs_free]
    outline = upper_envelope(standing)
    skyline = Skyline(obstacles=standing, outline=outline, unsurveyed_deg=np.empty((0, 2)))
    piece = np.searchsorted(outline.start_deg, AZIMUTHS_DEG, side="right") - 1
    own = outline.obstacle[piece]
    distance_m = np.full(len(AZIMUTHS_DEG), np.nan)
    for index in np.unique(own[own >= 0]).tolist():
        distance_m[own == index] = edge_distance_m(standing[index], AZIMUTHS_DEG[own == index])
    elevation_deg = np.maximum(outline_elevation_deg(skyline, AZIMUTHS_DEG), 0.0)
    azimuth_error_deg, elevation_error_deg = _errors_deg(source, elevation_deg, distance_m)
    return _Seen(
        source=source,
        obstacle=np.append(np.array(kept, dtype=np.int64), -1)[own],
        elevation_deg=elevation_deg,
        distance_m=distance_m,
        azimuth_error_deg=azimuth_error_deg,
        elevation_error_deg=elevation_error_deg,
    )


def _errors_deg(
    source: Source, elevation_deg: FloatArray, distance_m: FloatArray
) -> tuple[FloatArray, FloatArray]:
    if source.kind == "survey":
        stated_deg = (source.azimuth_error_deg, source.elevation_error_deg)
        own_deg = [
            default if stated is None else stated
            for stated, default in zip(stated_deg, SURVEY_ERRORS_DEG, strict=True)
        ]
        return np.full_like(elevation_deg, own_deg[0]), np.full_like(elevation_deg, own_deg[1])
    place_m, height_m = MODEL_ERRORS_M[source.kind]
    cosine, sine = np.cos(np.deg2rad(elevation_deg)), np.sin(np.deg2rad(elevation_deg))
    across_deg = np.rad2deg(np.arctan(place_m / (distance_m * cosine)))
    # Higher by dh and farther by dr at the slant distance d: cos(el) dh / d and -sin(el) dr / d.
    up_deg = np.rad2deg(np.hypot(height_m * cosine, place_m * sine) / distance_m)
    floor_deg = MODEL_FLOOR_DEG[source.kind]
    return np.nan_to_num(across_deg), np.hypot(np.nan_to_num(up_deg), floor_deg)


def _between(survey: _Seen, model: _Seen) -> Iterator[Disagreement]:
    azimuth_deg = STANDARD_DEVIATIONS * np.hypot(survey.azimuth_error_deg, model.azimuth_error_deg)
    tolerance_deg = STANDARD_DEVIATIONS * np.hypot(survey.elevation_error_deg, model.elevation_error_deg)
    looked_at = survey.has_edge | ~_within(gaps_between(survey.source.surveyed_deg))
    model_above = looked_at & _stands_above(model, survey, azimuth_deg, tolerance_deg)
    survey_above = _stands_above(survey, model, azimuth_deg, tolerance_deg)
    # Terrain lacks what is near, however complete it is.
    holds_all = model.source.complete and model.source.kind == "outlines"
    survey_above &= _is_same(survey, model) | holds_all
    for above in (model_above, survey_above):
        for run in _runs(above):
            apart_deg = np.where(above[run], np.abs(survey.elevation_deg - model.elevation_deg)[run], 0.0)
            place = int(run[np.argmax(apart_deg)])
            start_deg = float(run[0] * STEP_DEG)
            yield Disagreement(
                survey=survey.source.file,
                model=model.source.file,
                start_deg=round(start_deg, 6),
                end_deg=round(start_deg + len(run) * STEP_DEG, 6),
                azimuth_deg=float(AZIMUTHS_DEG[place]),
                survey_elevation_deg=float(survey.elevation_deg[place]),
                model_elevation_deg=float(model.elevation_deg[place]),
                tolerance_deg=float(tolerance_deg[place]),
                survey_obstacle=survey.name_at(place),
                model_obstacle=model.name_at(place),
            )


def _within(ranges_deg: FloatArray) -> BoolArray:
    """Whether azimuths lie within ascending, disjoint ranges."""
    return np.asarray(np.searchsorted(ranges_deg.ravel(), AZIMUTHS_DEG, side="right") % 2 == 1)


def _stands_above(one: _Seen, other: _Seen, azimuth_deg: FloatArray, tolerance_deg: FloatArray) -> BoolArray:
    """Whether one edge is higher than all of the other within some azimuth, by more than a tolerance."""
    reach = np.ceil(azimuth_deg / STEP_DEG).astype(np.int64)
    highest_deg = other.elevation_deg.copy()
    for steps in range(1, int(min(reach.max(), len(reach) // 2)) + 1):
        beside_deg = np.maximum(np.roll(other.elevation_deg, steps), np.roll(other.elevation_deg, -steps))
        highest_deg = np.where(reach >= steps, np.maximum(highest_deg, beside_deg), highest_deg)
    return np.asarray(one.elevation_deg > highest_deg + tolerance_deg)


def _is_same(survey: _Seen, model: _Seen) -> BoolArray:
    """Whether both show one obstacle: by their distances, or else by what kind of thing each shows."""
    is_general = np.array([one.name == GENERAL_SKYLINE for one in survey.source.obstacles] + [False])
    # A survey gives names to what is near, and buildings have names; hills are the rest.
    alike = is_general[survey.obstacle] == (model.source.kind == "terrain")
    ratio = survey.distance_m / model.distance_m
    near = (ratio < SAME_DISTANCE) & (ratio > 1.0 / SAME_DISTANCE)
    return np.asarray(survey.has_edge & model.has_edge & np.where(np.isnan(ratio), alike, near))


def _runs(above: BoolArray) -> list[IndexArray]:
    """Stretches of azimuths round the circle, joined over short interruptions; they may pass the last one."""
    places = np.flatnonzero(above)
    if not len(places):
        return []
    ends = np.flatnonzero(np.diff(np.append(places, places[0] + len(above))) > JOINED_STEPS)
    if not len(ends):
        return [np.arange(len(above))]
    starts = np.roll(ends, 1) + 1
    count = len(above)
    runs = []
    for first, last in zip(starts.tolist(), ends.tolist(), strict=True):
        begin, end = int(places[first % len(places)]), int(places[last])
        runs.append(np.arange(begin, end + 1 if end >= begin else end + count + 1) % count)
    return runs
