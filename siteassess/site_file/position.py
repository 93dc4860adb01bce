"""Where the survey mark is, from whichever way the site file says it."""

from typing import TYPE_CHECKING

from siteassess.errors import InputError, Mistake
from siteassess.site_file.model import Place, Position
from siteassess.site_file.reference_system import (
    area_words,
    horizontal_part,
    known_system,
    place_in,
    sea_level,
)
from siteassess.wording import listed, shown

if TYPE_CHECKING:
    from pyproj import CRS

__all__ = ["counted_longitude_deg", "survey_mark"]

GEOGRAPHIC = ("latitude_deg", "longitude_deg")
PROJECTED = ("easting_m", "northing_m")
EITHER = "it must hold latitude_deg and longitude_deg, or crs, easting_m and northing_m"


def survey_mark(place: Place, file: str) -> Position:
    """Position of the survey mark in WGS 84.

    Parameters
    ----------
    place : Place
        Table `[site]`.
    file : str
        Name of the site file, for messages.

    Returns
    -------
    Position
        Longitude from -180 to 180; the height is above the ellipsoid where the file, or the grids that are
        installed, give what it takes.

    Raises
    ------
    InputError
        If the position is missing, given twice, incomplete or outside the area of its reference system.
    """
    mistakes = _way_mistakes(place, file)
    system = None
    if place.crs is not None and not mistakes:
        system = known_system(place.crs, file)
        mistakes += _kind_mistakes(place, system, file)
    mistakes += _height_mistakes(place, system, file)
    if mistakes:
        raise InputError(*mistakes)
    latitude_deg, longitude_deg = _latitude_and_longitude(place, system, file)
    longitude_deg = counted_longitude_deg(longitude_deg)
    if not _is_above_sea_level(place, system):
        return Position(latitude_deg=latitude_deg, longitude_deg=longitude_deg, height_m=place.height_m)
    return _above_sea_level(place, system, latitude_deg, longitude_deg)


def counted_longitude_deg(longitude_deg: float) -> float:
    """A longitude from -180 to 360, counted from -180 to 180."""
    return longitude_deg - 360.0 if longitude_deg > 180.0 else longitude_deg


def _way_mistakes(place: Place, file: str) -> list[Mistake]:
    geographic = [key for key in GEOGRAPHIC if getattr(place, key) is not None]
    projected = [key for key in PROJECTED if getattr(place, key) is not None]
    if geographic and projected:
        problem = f"gives its position twice, by {listed(geographic)} and by {listed(projected)}"
        return [Mistake(file=file, where="site", problem=problem, allowed=EITHER)]
    system = ["crs"] if place.crs is not None else []
    given = system + geographic + projected
    if not given:
        return [Mistake(file=file, where="site", problem="has no position", allowed=EITHER)]
    way = GEOGRAPHIC if geographic else ("crs", *PROJECTED)
    return [
        Mistake(file=file, where=f"site.{key}", problem="is missing", allowed=f"it goes with {listed(given)}")
        for key in way
        if key not in given
    ]


def _kind_mistakes(place: Place, system: "CRS", file: str) -> list[Mistake]:
    """Whether the system counts what the keys give."""
    is_projected = horizontal_part(system).is_projected
    if is_projected == (place.easting_m is not None):
        return []
    kind, keys = ("projected", PROJECTED) if is_projected else ("geographic", GEOGRAPHIC)
    allowed = f"it is a {kind} system, which goes with {listed(keys)}"
    return [
        Mistake(
            file=file, where="site.crs", problem=f"is {shown(place.crs)}", allowed=allowed, value=place.crs
        )
    ]


def _height_mistakes(place: Place, system: "CRS | None", file: str) -> list[Mistake]:
    stated = _stated_height_system(system)
    if place.crs is not None and system is None:
        return []  # what the system says of heights is not known
    if place.height_system is None and system is not None and stated is None:
        allowed = 'with crs it must be "ellipsoidal" or "orthometric"'
        return [Mistake(file=file, where="site.height_system", problem="is missing", allowed=allowed)]
    if stated is not None and place.height_system not in (None, stated):
        allowed = f"the heights of {place.crs} are {stated}"
        return [_given(file, "height_system", place.height_system, allowed)]
    if place.geoid_height_m is not None and not _is_above_sea_level(place, system):
        allowed = 'it goes with height_system = "orthometric" only'
        return [_given(file, "geoid_height_m", place.geoid_height_m, allowed)]
    return []


def _stated_height_system(system: "CRS | None") -> str | None:
    """What a system itself says of its heights, if it has any."""
    if system is None or len(system.axis_info) < 3:
        return None
    return "orthometric" if system.is_compound else "ellipsoidal"


def _is_above_sea_level(place: Place, system: "CRS | None") -> bool:
    return "orthometric" in (place.height_system, _stated_height_system(system))


def _latitude_and_longitude(place: Place, system: "CRS | None", file: str) -> tuple[float, float]:
    if system is None:
        assert place.latitude_deg is not None and place.longitude_deg is not None
        return place.latitude_deg, place.longitude_deg
    keys = PROJECTED if horizontal_part(system).is_projected else GEOGRAPHIC[::-1]
    east, north = (float(getattr(place, key)) for key in keys)
    found_deg = place_in(system, east, north, file)
    if found_deg is not None:
        return found_deg
    swapped = -90.0 <= east <= 90.0 or keys == PROJECTED
    swapped = swapped and place_in(system, north, east, file) is not None
    shown_keys = keys if keys == PROJECTED else GEOGRAPHIC
    values = tuple(float(getattr(place, key)) for key in shown_keys)
    raise InputError(
        Mistake(
            file=file,
            where=f"site.{shown_keys[0]} and {shown_keys[1]}",
            problem=f"are {shown(values[0])} and {shown(values[1])}",
            allowed="they lie in the area of the crs when swapped"
            if swapped
            else area_words(system, str(place.crs)),
            value=values,
        )
    )


def _above_sea_level(
    place: Place, system: "CRS | None", latitude_deg: float, longitude_deg: float
) -> Position:
    """A height above sea level, turned into one above the ellipsoid where the geoid is known."""
    if place.geoid_height_m is not None:
        return Position(
            latitude_deg=latitude_deg,
            longitude_deg=longitude_deg,
            height_m=place.height_m + place.geoid_height_m,
        )
    own = system if _stated_height_system(system) == "orthometric" else None
    sea = sea_level(own, latitude_deg, longitude_deg, place.height_m)
    if sea.geoid_height_m is not None:
        remark = (
            f"Sea level ({sea.surface}) was taken {sea.geoid_height_m:.2f} m above the ellipsoid, "
            "from a grid that is installed."
        )
        return Position(
            latitude_deg=latitude_deg,
            longitude_deg=longitude_deg,
            height_m=place.height_m + sea.geoid_height_m,
            remarks=(remark,),
        )
    why = f"the grid {sea.missing_grid} is not installed" if sea.missing_grid else "no grid covers the place"
    remark = (
        f"The height above sea level ({sea.surface}) was used as if it were above the ellipsoid: {why}. "
        "The two lie less than 110 m apart."
    )
    return Position(
        latitude_deg=latitude_deg,
        longitude_deg=longitude_deg,
        height_m=place.height_m,
        above="sea level",
        remarks=(remark,),
    )


def _given(file: str, key: str, value: object, allowed: str) -> Mistake:
    return Mistake(file=file, where=f"site.{key}", problem=f"is {shown(value)}", allowed=allowed, value=value)
