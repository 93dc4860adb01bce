"""The direction of the landmark by which a survey was oriented."""

import math

from siteassess.errors import InputError, Mistake
from siteassess.site_file.model import HorizonSource, Place, Position
from siteassess.site_file.reference_system import area_words, known_system, place_in
from siteassess.site_file.refusals import key_path
from siteassess.wording import shown

__all__ = ["landmark_bearing_deg"]

DISTANCES_M = (10.0, 200_000.0)  # nearer its coordinates give no direction, further away nobody sees it


def landmark_bearing_deg(
    source: HorizonSource, place: Place, mark: Position, file: str, index: int = 0
) -> float:
    """Azimuth [deg] of the landmark as seen from the instrument, from true north.

    Parameters
    ----------
    source : HorizonSource
        A block with a complete landmark, and where the instrument stood.
    place, mark : Place, Position
        Table `[site]`, for its reference system, and the survey mark.
    file, index : str, int
        Name of the site file and number of the block, for messages.

    Raises
    ------
    InputError
        If its coordinates lie outside their system, or where no landmark can be.

    References
    ----------
    Azimuth at the instrument of the geodesic to the landmark, on the WGS 84 ellipsoid.
    """
    if source.landmark_bearing_deg is not None:
        return source.landmark_bearing_deg
    from pyproj import Geod

    latitude_deg, longitude_deg = _landmark_place(source, place, file, index)
    ellipsoid = Geod(ellps="WGS84")
    aside_m = math.hypot(source.instrument_east_m, source.instrument_north_m)
    toward_deg = math.degrees(math.atan2(source.instrument_east_m, source.instrument_north_m))
    instrument = ellipsoid.fwd(mark.longitude_deg, mark.latitude_deg, toward_deg, aside_m)
    azimuth_deg, _, distance_m = ellipsoid.inv(instrument[0], instrument[1], longitude_deg, latitude_deg)
    nearest_m, furthest_m = DISTANCES_M
    if not nearest_m <= distance_m <= furthest_m:
        raise InputError(
            Mistake(
                file=file,
                where=f"{key_path('horizon', index)}.landmark",
                problem=f"lies {distance_m:.0f} m from the instrument",
                allowed=f"it must lie from {nearest_m:g} to {furthest_m:.0f} m away; check both positions",
                value=distance_m,
            )
        )
    return float(azimuth_deg) % 360.0


def _landmark_place(source: HorizonSource, place: Place, file: str, index: int) -> tuple[float, float]:
    """Latitude and longitude [deg]."""
    if source.landmark_latitude_deg is not None and source.landmark_longitude_deg is not None:
        return source.landmark_latitude_deg, source.landmark_longitude_deg
    assert place.crs is not None
    assert source.landmark_easting_m is not None and source.landmark_northing_m is not None
    system = known_system(place.crs, file)
    found_deg = place_in(system, source.landmark_easting_m, source.landmark_northing_m, file)
    if found_deg is None:
        east, north = shown(source.landmark_easting_m), shown(source.landmark_northing_m)
        raise InputError(
            Mistake(
                file=file,
                where=f"{key_path('horizon', index)}.landmark_easting_m and landmark_northing_m",
                problem=f"are {east} and {north}",
                allowed=area_words(system, place.crs),
                value=(source.landmark_easting_m, source.landmark_northing_m),
            )
        )
    return found_deg
