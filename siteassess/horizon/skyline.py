"""The skyline as seen from the antenna: what hides the sky, obstacle by obstacle."""

from dataclasses import dataclass, fields
from typing import Literal

import numpy as np
from numpy.typing import NDArray

__all__ = ["GENERAL_SKYLINE", "Disagreement", "Obstacle", "Outline", "Skyline", "SurveyFacts"]

FloatArray = NDArray[np.float64]

GENERAL_SKYLINE = "general skyline"  # name of the unlabelled rows of a survey


class _ReadOnlyArrays:
    """A record whose arrays cannot be changed in place."""

    __slots__ = ()

    def __post_init__(self) -> None:
        # What inherits this is a dataclass, which the checker cannot see from here.
        for field in fields(self):  # type: ignore[arg-type]
            value = getattr(self, field.name)
            if isinstance(value, np.ndarray):
                value.flags.writeable = False


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Obstacle(_ReadOnlyArrays):
    """One obstacle, as break points seen from the antenna's phase centre.

    Attributes
    ----------
    name : str
        Label of the survey, or `GENERAL_SKYLINE`.
    cover : str
        "solid" or "foliage".
    leaf : str
        "in-leaf", "leafless" or "evergreen"; used for foliage.
    azimuth_deg : array, shape (point,)
        Ascending and unwrapped: the first lies in 0 <= azimuth < 360, the last may pass 360 (at most
        first + 360). Equal neighbours are a vertical edge.
    elevation_deg : array, shape (point,)
        Apparent elevation of the upper edge; -90 along the gaps of a general skyline, where it has none.
    underside_deg : array, shape (point,), or None
        Lower edge of an obstacle that hangs free; None when it stands on the ground.
    distance_m : array, shape (point,), or None
        Slant distance from the antenna's phase centre to the upper edge; None when it is not known.
        NaN where single points of the general skyline carry none.
    depth_m : array, shape (point,), or None
        Path through leaves; for foliage only.
    foliage_model : str
        Name of the model of their loss; for foliage only.
    straight_in_space : bool
        True: neighbouring points are joined by arcs of great circles; False: linearly in azimuth and
        elevation.
    width_m : float or None
        Width of a pole or rod given as one row (its two sides are already in `azimuth_deg`).
    source : str
        Name of the survey file.
    """

    name: str
    cover: Literal["solid", "foliage"]
    leaf: Literal["in-leaf", "leafless", "evergreen"] = "in-leaf"
    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    underside_deg: FloatArray | None = None
    distance_m: FloatArray | None = None
    depth_m: FloatArray | None = None
    foliage_model: Literal["P.833 slant path", "P.833 woodland", "Weissberger"] = "P.833 slant path"
    straight_in_space: bool = False
    width_m: float | None = None
    source: str = ""

    @property
    def hangs_free(self) -> bool:
        """Whether open sky lies below it."""
        return self.underside_deg is not None


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Outline(_ReadOnlyArrays):
    """The upper envelope of everything solid that stands on the ground, as pieces in ascending azimuth.

    Attributes
    ----------
    start_deg, end_deg : array, shape (piece,)
        Azimuths of the piece, 0 <= start < end <= 360. The pieces cover the circle without gap or overlap.
    obstacle : integer array, shape (piece,)
        Index in `Skyline.obstacles` of what forms the outline there; -1 where nothing does.
    start_elevation_deg, end_elevation_deg : array, shape (piece,)
        Elevation of the outline at both ends, -90 where nothing forms it.
    straight_in_space : boolean array, shape (piece,)
        Arc of a great circle (True) or linear in azimuth and elevation (False).
    """

    start_deg: FloatArray
    end_deg: FloatArray
    obstacle: NDArray[np.int64]
    start_elevation_deg: FloatArray
    end_elevation_deg: FloatArray
    straight_in_space: NDArray[np.bool_]


@dataclass(frozen=True, slots=True, kw_only=True)
class SurveyFacts:
    """How one survey became part of the skyline.

    Attributes
    ----------
    file : str
        Name of the survey file.
    bearings : str
        What its azimuths are counted from: a key of the site file, or "landmark".
    correction_deg : float
        What was added to its azimuths.
    uncertainty_deg : float or None
        One standard deviation of that; None where nothing is known of it.
    offset_m : float
        From the antenna's phase centre to the instrument.
    rows, rows_without_distance : int
        All its rows, and those that keep their angles wherever the instrument stood.
    parallax_bound_deg : float or None
        How far those may be off at most if nothing stands nearer than `parallax_distance_m`; None where there
        is no bound.
    parallax_distance_m : float
        See above.
    remarks : tuple of str
        The same for the reader, one sentence each.
    """

    file: str
    bearings: Literal["true-north", "magnetic-north", "grid-north", "landmark"]
    correction_deg: float
    uncertainty_deg: float | None
    offset_m: float
    rows: int
    rows_without_distance: int
    parallax_bound_deg: float | None
    parallax_distance_m: float
    remarks: tuple[str, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Disagreement:
    """A stretch in which a survey and a model differ by more than their errors explain.

    Attributes
    ----------
    survey, model : str
        Names of their files.
    start_deg, end_deg : float
        Azimuths from and to, clockwise; the second may pass 360.
    azimuth_deg : float
        Where they differ most.
    survey_elevation_deg, model_elevation_deg : float
        Their highest edges there; 0 where nothing rises above the horizon.
    tolerance_deg : float
        What the errors of elevation explain there.
    survey_obstacle, model_obstacle : str
        What they show there; empty where nothing rises above the horizon.
    """

    survey: str
    model: str
    start_deg: float
    end_deg: float
    azimuth_deg: float
    survey_elevation_deg: float
    model_elevation_deg: float
    tolerance_deg: float
    survey_obstacle: str
    model_obstacle: str

    @property
    def difference_deg(self) -> float:
        """Survey less model, where they differ most."""
        return self.survey_elevation_deg - self.model_elevation_deg


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Skyline(_ReadOnlyArrays):
    """Everything that stands between the antenna's phase centre and the sky.

    Attributes
    ----------
    obstacles : tuple of Obstacle
        In the order of the survey; the general skylines among them.
    outline : Outline
        The one solid outline of what stands on the ground.
    unsurveyed_deg : array, shape (gap, 2)
        Azimuth ranges that nobody looked at, 0 <= start < end <= 360, ascending and disjoint.
    surveys : tuple of SurveyFacts
        How each survey was used, in the order of the site file.
    remarks : tuple of str
        What was changed in building outlines, one sentence each.
    disagreements : tuple of Disagreement
        Where a survey and a model of the same obstacle do not fit together.
    """

    obstacles: tuple[Obstacle, ...]
    outline: Outline
    unsurveyed_deg: FloatArray
    surveys: tuple[SurveyFacts, ...] = ()
    remarks: tuple[str, ...] = ()
    disagreements: tuple[Disagreement, ...] = ()
