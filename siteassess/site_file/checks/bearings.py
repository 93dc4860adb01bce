"""What the bearings of a survey need: a date, a grid, or a landmark that is said in one way."""

from collections.abc import Iterator
from datetime import date

from siteassess.errors import InputError, Mistake
from siteassess.site_file.checks.landmark import landmark_bearing_deg
from siteassess.site_file.model import HorizonSource, Place, Position
from siteassess.site_file.reference_system import horizontal_part, known_system
from siteassess.site_file.refusals import key_path
from siteassess.wording import listed, shown

__all__ = ["bearing_mistakes"]

# World Magnetic Model 2025: 2025.0 to 2030.0 [WMM2025].
MODEL_YEARS = (date(2025, 1, 1), date(2030, 1, 1))
LANDMARK_PLACES = (
    ("landmark_bearing_deg",),
    ("landmark_latitude_deg", "landmark_longitude_deg"),
    ("landmark_easting_m", "landmark_northing_m"),
)
ONE_WAY = (
    "it must be given by landmark_bearing_deg, by landmark_latitude_deg and landmark_longitude_deg, "
    "or by landmark_easting_m and landmark_northing_m"
)


def bearing_mistakes(
    horizon: tuple[HorizonSource | None, ...], place: Place | None, mark: Position | None, file: str
) -> Iterator[Mistake]:
    """Mistakes of the bearings of all surveys.

    Parameters
    ----------
    horizon : tuple
        Blocks `[[horizon]]`; None where one is refused.
    place, mark : Place, Position or None
        Table `[site]` and the position that it gives; None where it is refused.
    file : str
        Name of the site file.
    """
    for index, source in enumerate(horizon):
        if source is None:
            continue
        given = [key for way in LANDMARK_PLACES for key in way if getattr(source, key) is not None]
        if source.source != "survey":
            yield from _needless_mistakes(source, index, file)
            continue
        if source.landmark_reading_deg is not None:
            mistakes = list(_landmark_mistakes(source, index, given, place, file))
            yield from mistakes
            if not mistakes and place is not None and mark is not None:
                yield from _place_mistakes(source, index, place, mark, file)
        elif given or source.landmark is not None:
            what = listed(given or ["landmark"])
            yield _missing(file, index, "landmark_reading_deg", f"it goes with {what}")
        elif source.bearings == "magnetic-north":
            yield from _date_mistakes(source, index, file)
        elif source.bearings == "grid-north" and place is not None:
            yield from _grid_mistakes(index, place, file)


def _landmark_mistakes(
    source: HorizonSource, index: int, given: list[str], place: Place | None, file: str
) -> Iterator[Mistake]:
    ways = [way for way in LANDMARK_PLACES if any(key in given for key in way)]
    if len(ways) != 1:
        problem = f"is given by {listed(given)}" if given else "has no direction"
        yield Mistake(
            file=file, where=f"{key_path('horizon', index)}.landmark", problem=problem, allowed=ONE_WAY
        )
        return
    for key in ways[0]:
        if key not in given:
            yield _missing(file, index, key, f"it goes with {listed(given)}")
    if ways[0] == LANDMARK_PLACES[2] and place is not None and place.easting_m is None:
        allowed = "it needs the site's own position by crs, easting_m and northing_m"
        yield _given(file, index, given[0], getattr(source, given[0]), allowed)


def _needless_mistakes(source: HorizonSource, index: int, file: str) -> Iterator[Mistake]:
    keys = ("landmark", "landmark_reading_deg", *(key for way in LANDMARK_PLACES for key in way), "bearings")
    for key in keys:
        if key in source.model_fields_set and getattr(source, key) not in (None, "true-north"):
            yield _given(file, index, key, getattr(source, key), 'it goes with source = "survey" only')


def _place_mistakes(
    source: HorizonSource, index: int, place: Place, mark: Position, file: str
) -> tuple[Mistake, ...]:
    try:
        landmark_bearing_deg(source, place, mark, file, index)
    except InputError as error:
        return error.mistakes
    return ()


def _date_mistakes(source: HorizonSource, index: int, file: str) -> Iterator[Mistake]:
    first, last = MODEL_YEARS
    if source.surveyed_on is None:
        yield _missing(file, index, "surveyed_on", 'bearings = "magnetic-north" needs the day of the survey')
    elif not first <= source.surveyed_on <= last:
        years = f"from {first} to {last}, the years of the World Magnetic Model 2025"
        yield Mistake(
            file=file,
            where=key_path("horizon", index, "surveyed_on"),
            problem=f"is {source.surveyed_on}",
            allowed=f'with bearings = "magnetic-north" it must lie {years}',
            value=source.surveyed_on,
        )


def _grid_mistakes(index: int, place: Place, file: str) -> Iterator[Mistake]:
    if place.crs is None:
        allowed = "it needs site.crs, the system whose grid it is"
        yield _given(file, index, "bearings", "grid-north", allowed)
        return
    try:
        is_projected = horizontal_part(known_system(place.crs, file)).is_projected
    except InputError:
        return  # the position has its message already
    if not is_projected:
        allowed = f"{place.crs} counts latitude and longitude and has no grid"
        yield _given(file, index, "bearings", "grid-north", allowed)


def _missing(file: str, index: int, key: str, allowed: str) -> Mistake:
    return Mistake(file=file, where=key_path("horizon", index, key), problem="is missing", allowed=allowed)


def _given(file: str, index: int, key: str, value: object, allowed: str) -> Mistake:
    where = key_path("horizon", index, key)
    return Mistake(file=file, where=where, problem=f"is {shown(value)}", allowed=allowed, value=value)
