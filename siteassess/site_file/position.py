"""Where the survey mark is, from whichever way the site file says it."""

import math
from typing import TYPE_CHECKING

from siteassess.errors import InputError, Mistake
from siteassess.site_file.model import Place, Position
from siteassess.wording import listed, shown

if TYPE_CHECKING:
    from pyproj import CRS, Transformer

__all__ = ["survey_mark"]

GEOGRAPHIC = ("latitude_deg", "longitude_deg")
PROJECTED = ("crs", "easting_m", "northing_m")
EITHER = "it must hold latitude_deg and longitude_deg, or crs, easting_m and northing_m"
# Bounds of reference systems are published to about 0.01 degrees.
BOUNDS_MARGIN_DEG = 0.02
FOLD_M = 10.0


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
        Longitude from -180 to 180; ellipsoidal height where the file gives what it takes (an orthometric
        height without its geoid height stands as it is).

    Raises
    ------
    InputError
        If the position is missing, given twice, incomplete or outside the area of its reference system.
    """
    mistakes = [*_way_mistakes(place, file), *_height_mistakes(place, file)]
    if mistakes:
        raise InputError(*mistakes)
    latitude_deg, longitude_deg = place.latitude_deg, place.longitude_deg
    if latitude_deg is None or longitude_deg is None:
        latitude_deg, longitude_deg = _unprojected(place, file)
    return Position(
        latitude_deg=latitude_deg,
        longitude_deg=longitude_deg - 360.0 if longitude_deg > 180.0 else longitude_deg,
        height_m=place.height_m + (place.geoid_height_m or 0.0),
    )


def _way_mistakes(place: Place, file: str) -> list[Mistake]:
    geographic = [key for key in GEOGRAPHIC if getattr(place, key) is not None]
    projected = [key for key in PROJECTED if getattr(place, key) is not None]
    if geographic and projected:
        problem = f"gives its position twice, by {listed(geographic)} and by {listed(projected)}"
        return [Mistake(file=file, where="site", problem=problem, allowed=EITHER)]
    if not geographic and not projected:
        return [Mistake(file=file, where="site", problem="has no position", allowed=EITHER)]
    given, way = (geographic, GEOGRAPHIC) if geographic else (projected, PROJECTED)
    return [
        Mistake(file=file, where=f"site.{key}", problem="is missing", allowed=f"it goes with {listed(given)}")
        for key in way
        if key not in given
    ]


def _height_mistakes(place: Place, file: str) -> list[Mistake]:
    if place.height_system is None and place.crs is not None:
        allowed = 'with crs it must be "ellipsoidal" or "orthometric"'
        return [Mistake(file=file, where="site.height_system", problem="is missing", allowed=allowed)]
    if place.geoid_height_m is not None and place.height_system != "orthometric":
        return [
            Mistake(
                file=file,
                where="site.geoid_height_m",
                problem=f"is {shown(place.geoid_height_m)}",
                allowed='it goes with height_system = "orthometric" only',
                value=place.geoid_height_m,
            )
        ]
    return []


def _unprojected(place: Place, file: str) -> tuple[float, float]:
    """Latitude and longitude [deg] of a projected position."""
    assert place.easting_m is not None and place.northing_m is not None
    system, to_wgs84 = _projected_system(place, file)
    found_deg = _place_in_area(system, to_wgs84, place.easting_m, place.northing_m)
    if found_deg is not None:
        return found_deg
    swapped = _place_in_area(system, to_wgs84, place.northing_m, place.easting_m) is not None
    raise InputError(
        Mistake(
            file=file,
            where="site.easting_m and northing_m",
            problem=f"are {shown(place.easting_m)} and {shown(place.northing_m)}",
            allowed="they lie in the area of the crs when swapped"
            if swapped
            else _area_words(system, place.crs),
            value=(place.easting_m, place.northing_m),
        )
    )


def _projected_system(place: Place, file: str) -> tuple["CRS", "Transformer"]:
    from pyproj import CRS, Transformer
    from pyproj.exceptions import CRSError, ProjError

    def refusal(allowed: str) -> InputError:
        problem = f"is {shown(place.crs)}"
        return InputError(
            Mistake(file=file, where="site.crs", problem=problem, allowed=allowed, value=place.crs)
        )

    try:
        system = CRS.from_user_input(place.crs)
    except CRSError as error:
        raise refusal("it must be a known reference system, such as EPSG:27700") from error
    if not system.is_projected:
        raise refusal("it must be a projected system; or give latitude_deg and longitude_deg instead of it")
    if {axis.direction for axis in system.axis_info[:2]} != {"east", "north"}:
        raise refusal(
            "its axes must point east and north; or give latitude_deg and longitude_deg instead of it"
        )
    try:
        # always_xy: easting before northing, longitude before latitude, whatever the system's own order.
        return system, Transformer.from_crs(system, "EPSG:4326", always_xy=True)
    except ProjError as error:
        raise refusal(
            "no way to WGS 84 is known; give latitude_deg and longitude_deg instead of it"
        ) from error


def _place_in_area(
    system: "CRS", to_wgs84: "Transformer", easting_m: float, northing_m: float
) -> tuple[float, float] | None:
    """Latitude and longitude [deg], or None where the system does not reach."""
    metre = 1.0 / system.axis_info[0].unit_conversion_factor  # some systems count in feet
    easting, northing = easting_m * metre, northing_m * metre
    longitude_deg, latitude_deg = to_wgs84.transform(easting, northing)
    # Far outside its area a projection folds over: the way back then ends elsewhere.
    back = to_wgs84.transform(longitude_deg, latitude_deg, direction="INVERSE")
    if not math.dist(back, (easting, northing)) <= FOLD_M * metre:
        return None
    area = system.area_of_use
    assert area is not None  # every projected system of the registry has one
    width_deg = (area.east - area.west) % 360.0 or 360.0
    east_of_edge_deg = (longitude_deg - area.west + BOUNDS_MARGIN_DEG) % 360.0
    inside = (
        area.south - BOUNDS_MARGIN_DEG <= latitude_deg <= area.north + BOUNDS_MARGIN_DEG
        and east_of_edge_deg <= width_deg + 2.0 * BOUNDS_MARGIN_DEG
    )
    return (latitude_deg, longitude_deg) if inside else None


def _area_words(system: "CRS", crs: str | None) -> str:
    area = system.area_of_use
    assert area is not None
    latitudes = f"latitude {area.south:g} to {area.north:g}"
    return f"the area of {crs} is {latitudes} and longitude {area.west:g} to {area.east:g}"
