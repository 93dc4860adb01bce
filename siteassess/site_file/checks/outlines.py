"""What the keys of building outlines need, and which keys go with another source of the horizon."""

from collections.abc import Iterator

from siteassess.errors import Mistake
from siteassess.site_file.model import HorizonSource
from siteassess.site_file.refusals import key_path
from siteassess.wording import shown

__all__ = ["outline_mistakes"]

OF_OUTLINES = ("crs", "ground_up_m")
OF_SURVEYS = (
    "azimuth_error_deg",
    "elevation_error_deg",
    "distance_error_m",
    "instrument",
    "instrument_east_m",
    "instrument_north_m",
    "instrument_up_m",
)


def outline_mistakes(source: HorizonSource, index: int, file: str) -> Iterator[Mistake]:
    """Mistakes of one block `[[horizon]]` that concern building outlines."""
    if source.source == "outlines":
        yield from _needless(source, index, OF_SURVEYS, "survey", file)
        if source.crs is not None and not _is_known(source.crs):
            allowed = "it must be a known reference system, such as EPSG:27700"
            yield _given(source, index, "crs", allowed, file)
    elif source.source == "survey":
        yield from _needless(source, index, OF_OUTLINES, "outlines", file)


def _needless(
    source: HorizonSource, index: int, keys: tuple[str, ...], owner: str, file: str
) -> Iterator[Mistake]:
    for key in keys:
        if key in source.model_fields_set:
            yield _given(source, index, key, f'it goes with source = "{owner}" only', file)


def _is_known(crs: str) -> bool:
    from pyproj import CRS
    from pyproj.exceptions import CRSError

    try:
        CRS.from_user_input(crs)
    except CRSError:
        return False
    return True


def _given(source: HorizonSource, index: int, key: str, allowed: str, file: str) -> Mistake:
    value = getattr(source, key)
    where = key_path("horizon", index, key)
    return Mistake(file=file, where=where, problem=f"is {shown(value)}", allowed=allowed, value=value)
