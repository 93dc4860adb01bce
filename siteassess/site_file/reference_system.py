"""Reference systems by their registered code: places, heights and grid north, in the sense of the keys.

Eastings and northings count metres toward east and north, whatever unit and sense a system's own axes have;
latitudes and longitudes count degrees.
"""

import math
import warnings
from dataclasses import dataclass
from typing import TYPE_CHECKING

from siteassess.errors import InputError, Mistake
from siteassess.wording import listed, shown

if TYPE_CHECKING:
    from pyproj import CRS, Transformer

__all__ = [
    "SeaLevel",
    "area_words",
    "grid_convergence_deg",
    "horizontal_part",
    "known_system",
    "place_in",
    "sea_level",
]

AXES = {"easting": (0, 1.0), "westing": (0, -1.0), "northing": (1, 1.0), "southing": (1, -1.0)}
DIRECTIONS = {"east": (0, 1.0), "west": (0, -1.0), "north": (1, 1.0), "south": (1, -1.0)}
# Bounds of reference systems are published to about 0.01 degrees.
BOUNDS_MARGIN_DEG = 0.02
FOLD_M = 10.0
GLOBAL_GEOID = "EPSG:9518"  # WGS 84 with heights above the geoid EGM2008
STEP_DEG = 0.0005  # to either side, along the meridian: 55 m


def known_system(code: str, file: str) -> "CRS":
    """A reference system of places on the ground, with or without heights.

    Parameters
    ----------
    code : str
        Authority and code, such as EPSG:27700; two joined by + for position and height.
    file : str
        Name of the site file, for messages.

    Raises
    ------
    InputError
        If it is not known, or holds no places that the keys of a site file can say.
    """
    from pyproj import CRS
    from pyproj.exceptions import CRSError

    try:
        system = CRS.from_user_input(code)
    except CRSError as error:
        raise _refusal(code, file, "it must be a known reference system, such as EPSG:27700") from error
    horizontal = horizontal_part(system)
    if not (horizontal.is_projected or horizontal.is_geographic):
        raise _refusal(
            code, file, "it must be a system of eastings and northings, or of latitude and longitude"
        )
    if _senses(horizontal) is None:
        raise _refusal(
            code, file, "its axes must be an easting and a northing, or give latitude and longitude"
        )
    return system


def horizontal_part(system: "CRS") -> "CRS":
    """The part of a system that says where, without heights."""
    return system.sub_crs_list[0] if system.is_compound else system


def place_in(system: "CRS", east: float, north: float, file: str) -> tuple[float, float] | None:
    """Latitude and longitude [deg] in WGS 84 of a place in a system, or None where the system does not reach.

    Parameters
    ----------
    system : CRS
        From :func:`known_system`.
    east, north : float
        Easting and northing [m], or longitude and latitude [deg], as the system has them.
    file : str
        Name of the site file, for messages.

    Raises
    ------
    InputError
        If no way from the system to WGS 84 is known.
    """
    horizontal = horizontal_part(system)
    to_wgs84 = _to_wgs84(horizontal, file)
    own = _own_coordinates(horizontal, east, north)
    latitude_deg, longitude_deg = to_wgs84.transform(own[0], own[1])
    # Far outside its area a projection folds over: the way back then ends elsewhere.
    back = to_wgs84.transform(latitude_deg, longitude_deg, direction="INVERSE")
    fold = FOLD_M / horizontal.axis_info[0].unit_conversion_factor if horizontal.is_projected else math.inf
    if not math.dist(back, own) <= fold:
        return None
    area = horizontal.area_of_use
    if area is None:
        return latitude_deg, longitude_deg
    width_deg = (area.east - area.west) % 360.0 or 360.0
    east_of_edge_deg = (longitude_deg - area.west + BOUNDS_MARGIN_DEG) % 360.0
    inside = (
        area.south - BOUNDS_MARGIN_DEG <= latitude_deg <= area.north + BOUNDS_MARGIN_DEG
        and east_of_edge_deg <= width_deg + 2.0 * BOUNDS_MARGIN_DEG
    )
    return (latitude_deg, longitude_deg) if inside else None


def area_words(system: "CRS", code: str) -> str:
    """Where a system reaches, for messages."""
    area = horizontal_part(system).area_of_use
    if area is None:
        return f"{code} does not reach there"
    latitudes = f"latitude {area.south:g} to {area.north:g}"
    return f"the area of {code} is {latitudes} and longitude {area.west:g} to {area.east:g}"


def grid_convergence_deg(system: "CRS", latitude_deg: float, longitude_deg: float, file: str) -> float:
    """Azimuth of grid north [deg], clockwise from true north: what turns grid bearings into true ones.

    Parameters
    ----------
    system : CRS
        A projected system, from :func:`known_system`. Grid north is where northings grow.
    latitude_deg, longitude_deg : float
        Place in WGS 84 [deg].
    file : str
        Name of the site file, for messages.
    """
    horizontal = horizontal_part(system)
    to_wgs84, senses = _to_wgs84(horizontal, file), _senses(horizontal)
    assert senses is not None
    ends = []
    for along_deg in (-STEP_DEG, STEP_DEG):
        on_meridian_deg = min(max(latitude_deg + along_deg, -90.0), 90.0)
        own = to_wgs84.transform(on_meridian_deg, longitude_deg, direction="INVERSE")
        counted = {which: sense * value for (which, sense), value in zip(senses, own, strict=False)}
        ends.append((counted[0], counted[1]))
    (from_east, from_north), (to_east, to_north) = ends
    return -math.degrees(math.atan2(to_east - from_east, to_north - from_north))


@dataclass(frozen=True, slots=True, kw_only=True)
class SeaLevel:
    """Sea level at a place: `geoid_height_m` above the WGS 84 ellipsoid, None where a grid is missing.

    `surface` names the system of heights, `missing_grid` the file that PROJ has not installed.
    """

    geoid_height_m: float | None
    surface: str
    missing_grid: str = ""


def sea_level(system: "CRS | None", latitude_deg: float, longitude_deg: float, height_m: float) -> SeaLevel:
    """Sea level at a place, from the grids that are installed.

    Parameters
    ----------
    system : CRS or None
        System with heights above sea level; None for the geoid EGM2008.
    latitude_deg, longitude_deg : float
        Place in WGS 84 [deg].
    height_m : float
        Height above sea level [m].
    """
    from pyproj import CRS
    from pyproj.aoi import AreaOfInterest
    from pyproj.transformer import TransformerGroup

    vertical = CRS(GLOBAL_GEOID).sub_crs_list[1] if system is None else system.sub_crs_list[1]
    whole = CRS(GLOBAL_GEOID) if system is None else system
    area = AreaOfInterest(longitude_deg, latitude_deg, longitude_deg, latitude_deg)
    with warnings.catch_warnings():
        warnings.simplefilter("ignore", UserWarning)  # that a grid is missing is told below
        ways = TransformerGroup(
            whole,
            "EPSG:4979",
            area_of_interest=area,  # type: ignore[arg-type]  # two records of one name in the stubs
            allow_ballpark=False,
        )
    if not ways.transformers:
        best = ways.unavailable_operations[:1]
        missing = [grid.short_name for way in best for grid in way.grids if not grid.available]
        return SeaLevel(
            geoid_height_m=None, surface=vertical.name, missing_grid=listed(missing) if missing else ""
        )
    to_ellipsoid = ways.transformers[0]
    first, second, _ = to_ellipsoid.transform(latitude_deg, longitude_deg, height_m, direction="INVERSE")
    own_height = height_m / vertical.axis_info[0].unit_conversion_factor
    ellipsoidal_m = float(to_ellipsoid.transform(first, second, own_height)[2])
    found = math.isfinite(ellipsoidal_m)
    return SeaLevel(geoid_height_m=ellipsoidal_m - height_m if found else None, surface=vertical.name)


def _senses(horizontal: "CRS") -> list[tuple[int, float]] | None:
    """For the first two axes: 0 for east or 1 for north, and 1.0 or -1.0 for its sense."""
    axes = horizontal.axis_info[:2]
    # At a pole both axes point north; their names tell them apart.
    found = [AXES.get(axis.name.casefold()) or DIRECTIONS.get(axis.direction) for axis in axes]
    senses = [sense for sense in found if sense is not None]
    return senses if sorted(which for which, _ in senses) == [0, 1] else None


def _own_coordinates(horizontal: "CRS", east: float, north: float) -> list[float]:
    senses = _senses(horizontal)
    assert senses is not None
    given = (east, north) if horizontal.is_projected else (math.radians(east), math.radians(north))
    return [
        sense * given[which] / axis.unit_conversion_factor
        for (which, sense), axis in zip(senses, horizontal.axis_info, strict=False)
    ]


def _to_wgs84(horizontal: "CRS", file: str) -> "Transformer":
    from pyproj import Transformer
    from pyproj.exceptions import ProjError

    try:
        return Transformer.from_crs(horizontal, "EPSG:4326")
    except ProjError as error:
        code = ":".join(horizontal.to_authority() or ("", horizontal.name)).lstrip(":")
        allowed = "no way to WGS 84 is known; give latitude_deg and longitude_deg instead of it"
        raise _refusal(code, file, allowed) from error


def _refusal(code: str, file: str, allowed: str) -> InputError:
    return InputError(
        Mistake(file=file, where="site.crs", problem=f"is {shown(code)}", allowed=allowed, value=code)
    )
