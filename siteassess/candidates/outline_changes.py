"""Where what stands round one spot rose or fell between two surveys, beyond what their errors explain."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import edge_elevation_deg, outline_elevation_deg
from siteassess.verdict.uncertainty.survey_errors import SurveyErrors

__all__ = [
    "STEP_DEG",
    "OutlineChange",
    "Tolerance",
    "compared_edges_deg",
    "highest_edge_deg",
    "outline_changes",
    "tolerance",
]

FloatArray = NDArray[np.float64]
BoolArray = NDArray[np.bool_]

STEP_DEG = 0.5
DEVIATIONS = 2.0  # own default: what two standard deviations of the difference explain is no change
LEAST_DEG = 0.5  # own default, also where nobody stated any error


@dataclass(frozen=True, slots=True, kw_only=True)
class Tolerance:
    """How much two surveys may differ without anything having changed [deg]."""

    azimuth_deg: float
    elevation_deg: float


@dataclass(frozen=True, slots=True, kw_only=True)
class OutlineChange:
    """A stretch in which the highest edge, or that of what stands on the ground, rose or fell.

    Attributes
    ----------
    kind : str
        "rose" or "fell".
    azimuth_from_deg, azimuth_to_deg : float
        Clockwise; the second may pass 360.
    largest_deg : float
        The largest difference in it, without sign.
    at_azimuth_deg : float
        Where that is.
    before_deg, after_deg : float
        Elevation of the edge there; 0 where nothing rises above the horizon.
    name : str or None
        What forms the edge there: after a rise the new one, after a fall the old one; None where nothing
        does.
    """

    kind: Literal["rose", "fell"]
    azimuth_from_deg: float
    azimuth_to_deg: float
    largest_deg: float
    at_azimuth_deg: float
    before_deg: float
    after_deg: float
    name: str | None


def tolerance(errors: Sequence[SurveyErrors]) -> Tolerance:
    """The tolerance between surveys with these errors, those of both skylines together."""

    def explained_deg(values_deg: list[float]) -> float:
        return max(LEAST_DEG, DEVIATIONS * float(np.linalg.norm(values_deg)))

    return Tolerance(
        azimuth_deg=explained_deg([one.azimuth_deg for one in errors]),
        elevation_deg=explained_deg(
            [error for one in errors for error in (one.elevation_common_deg, one.elevation_point_deg)]
        ),
    )


def highest_edge_deg(skyline: Skyline, azimuth_deg: FloatArray) -> FloatArray:
    """Elevation of the highest edge of anything, leaves and hanging things too; 0 where nothing is higher."""
    return np.asarray(_edges_deg(skyline, azimuth_deg).max(axis=0))


def compared_edges_deg(
    before: Skyline, after: Skyline, azimuth_deg: FloatArray
) -> tuple[FloatArray, FloatArray]:
    """Elevations of an edge in both skylines: of the highest one, or of what stands on the ground.

    At each azimuth the one that differs more, so that closing the open sky below a bridge is a rise.
    """
    highest = [highest_edge_deg(one, azimuth_deg) for one in (before, after)]
    standing = [_edges_deg(one, azimuth_deg, hanging=False).max(axis=0) for one in (before, after)]
    by_ground = np.abs(standing[1] - standing[0]) > np.abs(highest[1] - highest[0])
    return (
        np.where(by_ground, standing[0], highest[0]),
        np.where(by_ground, standing[1], highest[1]),
    )


def outline_changes(before: Skyline, after: Skyline, allowed: Tolerance) -> tuple[OutlineChange, ...]:
    """Stretches in which an edge rose or fell, the largest difference first.

    Parameters
    ----------
    before, after : Skyline
        Of one spot.
    allowed : Tolerance
        What counts as no change: an edge that stands that far left or right, up or down.
    """
    azimuth_deg = np.arange(0.0, 360.0, STEP_DEG) + 0.5 * STEP_DEG
    old_deg, new_deg = compared_edges_deg(before, after, azimuth_deg)
    beside = round(allowed.azimuth_deg / STEP_DEG)
    rose = new_deg > _beside(old_deg, beside).max(axis=1) + allowed.elevation_deg
    fell = new_deg < _beside(old_deg, beside).min(axis=1) - allowed.elevation_deg
    # What is left of a stretch when its ends are explained belongs to it as far as the edges differ at all.
    differs = np.abs(new_deg - old_deg) > allowed.elevation_deg
    changes = [
        _change("rose", columns, azimuth_deg, old_deg, new_deg, after)
        for columns in _stretches(differs & (new_deg > old_deg))
        if rose[columns].any()
    ] + [
        _change("fell", columns, azimuth_deg, old_deg, new_deg, before)
        for columns in _stretches(differs & (new_deg < old_deg))
        if fell[columns].any()
    ]
    return tuple(sorted(changes, key=lambda change: (-change.largest_deg, change.azimuth_from_deg)))


def _edges_deg(skyline: Skyline, azimuth_deg: FloatArray, *, hanging: bool = True) -> FloatArray:
    """The horizon, the outline, then each obstacle that is not part of it; shape (edge, azimuth)."""
    return np.stack(
        [
            np.zeros_like(azimuth_deg),
            outline_elevation_deg(skyline, azimuth_deg),
            *(
                np.nan_to_num(edge_elevation_deg(skyline.obstacles[index], azimuth_deg))
                for index in _beside_outline(skyline, hanging=hanging)
            ),
        ]
    )


def _beside_outline(skyline: Skyline, *, hanging: bool) -> list[int]:
    return [
        index
        for index, obstacle in enumerate(skyline.obstacles)
        if (obstacle.hangs_free and hanging) or (obstacle.cover == "foliage" and not obstacle.hangs_free)
    ]


def _beside(values: FloatArray, columns: int) -> FloatArray:
    """Each value with its neighbours round the circle, shape (column, neighbour)."""
    padded = np.pad(values, columns, "wrap")
    return np.lib.stride_tricks.sliding_window_view(padded, 2 * columns + 1)


def _stretches(state: BoolArray) -> list[NDArray[np.int64]]:
    """Columns of each stretch round the circle in which a state holds."""
    if state.all():
        return [np.arange(len(state))]
    closed = int(np.flatnonzero(~state)[0])  # begin where it does not hold
    order = (np.arange(len(state)) + closed) % len(state)
    breaks = np.flatnonzero(np.diff(state[order].astype(np.int8))) + 1
    return [part for part in np.split(order, breaks) if state[part[0]]]


def _change(
    kind: Literal["rose", "fell"],
    columns: NDArray[np.int64],
    azimuth_deg: FloatArray,
    old_deg: FloatArray,
    new_deg: FloatArray,
    source: Skyline,
) -> OutlineChange:
    largest = columns[int(np.argmax(np.abs(new_deg - old_deg)[columns]))]
    from_deg = float(azimuth_deg[columns[0]] - 0.5 * STEP_DEG)
    at_deg = float(azimuth_deg[largest])
    return OutlineChange(
        kind=kind,
        azimuth_from_deg=from_deg,
        azimuth_to_deg=from_deg + len(columns) * STEP_DEG,
        largest_deg=float(abs(new_deg[largest] - old_deg[largest])),
        at_azimuth_deg=at_deg,
        before_deg=float(old_deg[largest]),
        after_deg=float(new_deg[largest]),
        name=_name_at(source, at_deg, float((new_deg if kind == "rose" else old_deg)[largest])),
    )


def _name_at(skyline: Skyline, azimuth_deg: float, elevation_deg: float) -> str | None:
    """What forms the edge at a direction."""
    edges_deg = _edges_deg(skyline, np.array([azimuth_deg]))[:, 0]
    edge = int(np.argmin(np.abs(edges_deg - elevation_deg)))
    if edge == 0:
        return None
    if edge > 1:
        return skyline.obstacles[_beside_outline(skyline, hanging=True)[edge - 2]].name
    outline = skyline.outline
    owner = int(outline.obstacle[np.searchsorted(outline.start_deg, azimuth_deg, side="right") - 1])
    return skyline.obstacles[owner].name if owner >= 0 else None
