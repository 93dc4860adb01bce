"""From what an instrument counted azimuths from to true north: one turn for a whole survey."""

from dataclasses import dataclass
from datetime import date
from math import hypot

from siteassess.errors import InputError, Mistake
from siteassess.site_file.checks.landmark import landmark_bearing_deg
from siteassess.site_file.model import HorizonSource, Position, Site
from siteassess.site_file.reference_system import grid_convergence_deg, known_system
from siteassess.site_file.refusals import key_path

__all__ = ["Declination", "NorthTurn", "decimal_year", "declination", "north_turn"]

# [WMM2025]: one standard deviation of the declination. Below the first horizontal intensity a compass is of
# no use, below the second it is doubtful.
CONSTANT_ERROR_DEG = 0.26
ERROR_TIMES_INTENSITY_DEG_NT = 5417.0
BLACKOUT_NT = 2000.0
CAUTION_NT = 6000.0
NAMES = {"true-north": "true north", "magnetic-north": "magnetic north", "grid-north": "grid north"}
WORTH_NAMING_DEG = 0.5  # by how much a landmark and the instrument's own north may differ in silence


@dataclass(frozen=True, slots=True, kw_only=True)
class Declination:
    """Direction of the magnetic field: its azimuth, the standard deviation of that, and its strength."""

    declination_deg: float
    uncertainty_deg: float
    horizontal_nt: float


@dataclass(frozen=True, slots=True, kw_only=True)
class NorthTurn:
    """What is added to the azimuths of a survey.

    Attributes
    ----------
    correction_deg : float
        Clockwise positive.
    uncertainty_deg : float or None
        One standard deviation of it; None where nothing is known of it.
    remarks : tuple of str
        How it came about, one sentence each.
    """

    correction_deg: float = 0.0
    uncertainty_deg: float | None = None
    remarks: tuple[str, ...] = ()


def north_turn(site: Site, index: int) -> NorthTurn:
    """The turn of one survey, by its landmark or else by its own north.

    Parameters
    ----------
    site : Site
        From `read_site`, which has checked what the turn needs.
    index : int
        Number of the block `[[horizon]]`, from 0.

    Raises
    ------
    InputError
        If a compass is of no use at this place.
    """
    source = site.horizon[index]
    if source.landmark_reading_deg is not None:
        return _by_landmark(site, source, index)
    if source.bearings == "magnetic-north":
        return _by_compass(site, source, index)
    if source.bearings == "grid-north":
        turn_deg = _convergence_deg(site)
        remark = (
            f"Azimuths from grid north were turned by the convergence of {site.place.crs}, {turn_deg:+.2f}°."
        )
        return NorthTurn(correction_deg=turn_deg, uncertainty_deg=0.0, remarks=(remark,))
    return NorthTurn()


def declination(position: Position, year: float) -> Declination:
    """Magnetic declination by the World Magnetic Model 2025.

    Parameters
    ----------
    position : Position
        Place in WGS 84.
    year : float
        Date as a decimal year, 2025.0 to 2030.0.

    References
    ----------
    [WMM2025] The model, and the standard deviation of the declination from the horizontal intensity.

    Examples
    --------
    >>> alps = Position(latitude_deg=47.0, longitude_deg=8.0, height_m=500.0)
    >>> round(declination(alps, 2026.9).declination_deg, 3)
    3.52
    """
    from pygeomag import GeoMag
    from pygeomag.wmm.wmm_2025 import WMM_2025

    field = GeoMag(coefficients_data=WMM_2025).calculate(
        glat=position.latitude_deg,
        glon=position.longitude_deg,
        alt=position.height_m / 1000.0,
        time=year,
        allow_date_outside_lifespan=False,
    )
    return Declination(
        declination_deg=float(field.d),
        uncertainty_deg=hypot(CONSTANT_ERROR_DEG, ERROR_TIMES_INTENSITY_DEG_NT / field.h),
        horizontal_nt=float(field.h),
    )


def decimal_year(day: date) -> float:
    """A day as a decimal year, at its beginning.

    Examples
    --------
    >>> decimal_year(date(2025, 1, 1)), round(decimal_year(date(2028, 12, 31)), 4)
    (2025.0, 2028.9973)
    """
    first = date(day.year, 1, 1)
    return day.year + (day - first).days / (date(day.year + 1, 1, 1) - first).days


def _by_landmark(site: Site, source: HorizonSource, index: int) -> NorthTurn:
    assert source.landmark_reading_deg is not None
    bearing_deg = landmark_bearing_deg(source, site.place, site.position, site.path.name, index)
    turn_deg = (bearing_deg - source.landmark_reading_deg + 180.0) % 360.0 - 180.0
    name = f"the landmark “{source.landmark}”" if source.landmark else "the landmark"
    remarks = [
        f"Azimuths were turned by {turn_deg:+.2f}°: {name} read {source.landmark_reading_deg:.2f}° and "
        f"stands at {bearing_deg:.2f}°."
    ]
    own_deg = _own_turn_deg(site, source)
    if own_deg is not None:
        apart_deg = (turn_deg - own_deg + 180.0) % 360.0 - 180.0
        if abs(apart_deg) >= WORTH_NAMING_DEG:
            remarks.append(
                f"That differs by {apart_deg:+.2f}° from what {NAMES[source.bearings]} alone would give: "
                "iron nearby, or a circle that was not set."
            )
    return NorthTurn(correction_deg=turn_deg, remarks=tuple(remarks))


def _own_turn_deg(site: Site, source: HorizonSource) -> float | None:
    """What the instrument's own north would have given; None where the file does not say, or too little."""
    if "bearings" not in source.model_fields_set:
        return None
    if source.bearings == "true-north":
        return 0.0
    if source.bearings == "grid-north":
        return _convergence_deg(site) if site.place.easting_m is not None else None
    if source.surveyed_on is None or not 2025.0 <= decimal_year(source.surveyed_on) <= 2030.0:
        return None
    return declination(site.position, decimal_year(source.surveyed_on)).declination_deg


def _by_compass(site: Site, source: HorizonSource, index: int) -> NorthTurn:
    assert source.surveyed_on is not None
    found = declination(site.position, decimal_year(source.surveyed_on))
    if found.horizontal_nt < BLACKOUT_NT:
        raise InputError(
            Mistake(
                file=site.path.name,
                where=key_path("horizon", index, "bearings"),
                problem='is "magnetic-north"',
                allowed="so near a magnetic pole a compass does not hold "
                f"({found.horizontal_nt:.0f} nT, less than {BLACKOUT_NT:.0f}); sight a landmark instead",
                value=source.bearings,
            )
        )
    remarks = [
        f"Azimuths from magnetic north were turned by the declination, {found.declination_deg:+.2f}° ± "
        f"{found.uncertainty_deg:.2f}° (one standard deviation), by the World Magnetic Model 2025 on "
        f"{source.surveyed_on}. Iron near the compass is not in that figure."
    ]
    if found.horizontal_nt < CAUTION_NT:
        remarks.append(
            f"The horizontal field is only {found.horizontal_nt:.0f} nT here: a compass is doubtful; sight a "
            "landmark instead."
        )
    return NorthTurn(
        correction_deg=found.declination_deg, uncertainty_deg=found.uncertainty_deg, remarks=tuple(remarks)
    )


def _convergence_deg(site: Site) -> float:
    assert site.place.crs is not None
    file, mark = site.path.name, site.position
    return grid_convergence_deg(
        known_system(site.place.crs, file), mark.latitude_deg, mark.longitude_deg, file
    )
