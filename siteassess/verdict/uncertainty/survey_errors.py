"""How far off the readings of a survey may be: as its block says, or else by the class of instrument."""

from dataclasses import dataclass
from functools import cache
from math import hypot, sqrt

from siteassess.horizon.skyline import Skyline
from siteassess.site_file.model import HorizonSource, Site
from siteassess.tables import packaged_rows

__all__ = ["SurveyErrors", "instrument_classes", "stated_errors", "survey_errors"]

ERRORS = ("azimuth_error_deg", "elevation_error_deg", "distance_error_m")
# Own default: half the variance of an elevation is common to a survey, half is the single reading's own.
COMMON_PART = sqrt(0.5)


@dataclass(frozen=True, slots=True, kw_only=True)
class SurveyErrors:
    """Errors of one survey, each one standard deviation.

    Attributes
    ----------
    file : str
        Name of the survey file, as in `Obstacle.source`.
    azimuth_deg : float
        Turn of the whole survey: of the readings, and of the north that they are counted from.
    elevation_common_deg, elevation_point_deg : float
        Of all elevations together, and of each reading by itself.
    distance_m : float
        Of each distance by itself: whether something is near enough to reflect, and, where the instrument
        stood elsewhere, how high the antenna sees it.
    offset_m : tuple of float
        Where the instrument stood from the antenna's phase centre: east, north, up.
    stated : bool
        Whether anything is known of the survey's errors; else it counts as exact.
    """

    file: str
    azimuth_deg: float
    elevation_common_deg: float
    elevation_point_deg: float
    distance_m: float
    offset_m: tuple[float, float, float] = (0.0, 0.0, 0.0)
    stated: bool = True

    @property
    def moves(self) -> bool:
        """Whether anything of it can be elsewhere than surveyed."""
        return any((self.azimuth_deg, self.elevation_common_deg, self.elevation_point_deg, self.distance_m))


@cache
def instrument_classes() -> dict[str, dict[str, float]]:
    """Errors by class of instrument, under the keys of the site file."""
    return {
        row["instrument"]: {key: float(row[key]) for key in ERRORS}
        for row in packaged_rows("verdict/uncertainty/instrument_classes.csv")
    }


def stated_errors(source: HorizonSource) -> dict[str, float | None]:
    """Errors of a block `[[horizon]]` under their keys: its own, or else those of its instrument's class."""
    of_class = instrument_classes().get(source.instrument or "", {})
    own = {key: getattr(source, key) for key in ERRORS}
    return {key: of_class.get(key) if value is None else value for key, value in own.items()}


def survey_errors(site: Site, skyline: Skyline) -> tuple[SurveyErrors, ...]:
    """Errors of every survey of a site, in the order of `Skyline.surveys`.

    Building outlines and terrain state no errors.
    """
    surveys = [source for source in site.horizon if source.source == "survey"]
    return tuple(
        _errors(source, facts.file, facts.uncertainty_deg, site.mount.phase_centre_height_m)
        for source, facts in zip(surveys, skyline.surveys, strict=True)
    )


def _errors(
    source: HorizonSource, file: str, north_error_deg: float | None, phase_centre_height_m: float
) -> SurveyErrors:
    stated = stated_errors(source)
    azimuth_deg, elevation_deg, distance_m = (stated[key] or 0.0 for key in ERRORS)
    up_m = 0.0 if source.instrument_up_m is None else source.instrument_up_m - phase_centre_height_m
    return SurveyErrors(
        file=file,
        azimuth_deg=hypot(azimuth_deg, north_error_deg or 0.0),
        elevation_common_deg=COMMON_PART * elevation_deg,
        elevation_point_deg=COMMON_PART * elevation_deg,
        distance_m=distance_m,
        offset_m=(source.instrument_east_m, source.instrument_north_m, up_m),
        stated=any(value is not None for value in stated.values()),
    )
