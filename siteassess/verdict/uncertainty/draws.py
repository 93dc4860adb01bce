"""Random draws of what may be wrong: readings, north, gain of the antenna, power of the signals."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from siteassess.verdict.uncertainty.survey_errors import SurveyErrors

__all__ = ["Draws", "Kind", "drawn", "only", "some"]

FloatArray = NDArray[np.float64]
Kind = Literal["azimuth", "elevation", "distance", "gain", "power"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Draws:
    """Errors, one row a draw.

    Attributes
    ----------
    azimuth_deg, common_deg : array, shape (draw, survey)
        Turn of each survey, and what all its elevations are off.
    reading_deg, distance_m : tuple of array, shape (draw, node)
        For each survey, what single elevations and distances are off.
    gain_db : array, shape (draw,)
        How much more the antenna gains.
    power_db : array, shape (draw, signal)
        How much stronger each signal is sent.
    """

    azimuth_deg: FloatArray
    common_deg: FloatArray
    reading_deg: tuple[FloatArray, ...]
    distance_m: tuple[FloatArray, ...]
    gain_db: FloatArray
    power_db: FloatArray

    def __len__(self) -> int:
        return len(self.gain_db)


def drawn(
    errors: Sequence[SurveyErrors],
    nodes: Sequence[int],
    *,
    gain_error_db: float,
    power_error_db: float,
    signals: int,
    draws: int,
    seed: int,
) -> Draws:
    """Independent normal errors.

    Parameters
    ----------
    errors : sequence of SurveyErrors
        Standard deviations, survey by survey.
    nodes : sequence of int
        Readings of each survey.
    gain_error_db, power_error_db : float
        Standard deviations of levels.
    signals, draws : int
        Numbers.
    seed : int
        The same seed gives the same draws.
    """
    # A stream each, so that one standard deviation leaves the draws of all other errors alone.
    streams = [np.random.default_rng(one) for one in np.random.SeedSequence(seed).spawn(2 + 4 * len(errors))]

    def normal(stream: int, columns: int, deviation: float) -> FloatArray:
        if deviation == 0.0:
            return np.zeros((draws, columns))
        return np.asarray(streams[stream].standard_normal((draws, columns)) * deviation)

    surveys = list(enumerate(zip(errors, nodes, strict=True)))
    empty = np.empty((draws, 0))
    return Draws(
        gain_db=normal(0, 1, gain_error_db)[:, 0],
        power_db=normal(1, signals, power_error_db),
        azimuth_deg=np.hstack([empty, *(normal(2 + 4 * i, 1, one.azimuth_deg) for i, (one, _) in surveys)]),
        common_deg=np.hstack(
            [empty, *(normal(3 + 4 * i, 1, one.elevation_common_deg) for i, (one, _) in surveys)]
        ),
        reading_deg=tuple(normal(4 + 4 * i, count, one.elevation_point_deg) for i, (one, count) in surveys),
        distance_m=tuple(normal(5 + 4 * i, count, one.distance_m) for i, (one, count) in surveys),
    )


def some(draws: Draws, rows: slice) -> Draws:
    """Some of the draws."""
    return Draws(
        azimuth_deg=draws.azimuth_deg[rows],
        common_deg=draws.common_deg[rows],
        reading_deg=tuple(one[rows] for one in draws.reading_deg),
        distance_m=tuple(one[rows] for one in draws.distance_m),
        gain_db=draws.gain_db[rows],
        power_db=draws.power_db[rows],
    )


def only(draws: Draws, kind: Kind | None, survey: int = -1) -> Draws:
    """The same draws with one kind of error alone, of one survey if it is about one; None: with none."""

    def kept(values: FloatArray, *kinds: str, of_survey: bool = True) -> FloatArray:
        return values if kind in kinds and of_survey else np.zeros_like(values)

    def columns(values: FloatArray, *kinds: str) -> FloatArray:
        return np.asarray(kept(values, *kinds) * (np.arange(values.shape[1]) == survey))

    return Draws(
        azimuth_deg=columns(draws.azimuth_deg, "azimuth"),
        common_deg=columns(draws.common_deg, "elevation"),
        reading_deg=tuple(
            kept(one, "elevation", of_survey=index == survey) for index, one in enumerate(draws.reading_deg)
        ),
        distance_m=tuple(
            kept(one, "distance", of_survey=index == survey) for index, one in enumerate(draws.distance_m)
        ),
        gain_db=kept(draws.gain_db, "gain"),
        power_db=kept(draws.power_db, "power"),
    )
