"""What the keys of terrain need, and which keys go with another source of the horizon."""

from collections.abc import Iterator

from siteassess.errors import Mistake
from siteassess.site_file.model import HorizonSource, Place
from siteassess.site_file.refusals import key_path
from siteassess.wording import shown

__all__ = ["terrain_mistakes"]

OF_TERRAIN = ("nearest_m", "reach_m", "heights", "mark_above_ground_m")
OF_OTHERS = {
    "azimuth_error_deg": "survey",
    "elevation_error_deg": "survey",
    "distance_error_m": "survey",
    "instrument": "survey",
    "instrument_east_m": "survey",
    "instrument_north_m": "survey",
    "instrument_up_m": "survey",
    "crs": "outlines",
    "ground_up_m": "outlines",
}


def terrain_mistakes(source: HorizonSource, index: int, place: Place | None, file: str) -> Iterator[Mistake]:
    """Mistakes of one block `[[horizon]]` that concern terrain.

    Parameters
    ----------
    source : HorizonSource
        The block.
    index : int
        Its place among the blocks, from 0.
    place : Place or None
        Table `[site]`; None where it is refused.
    file : str
        Name of the site file.
    """
    given = source.model_fields_set
    if source.source != "terrain":
        for key in OF_TERRAIN:
            if key in given:
                yield _given(source, index, key, 'it goes with source = "terrain" only', file)
        if not isinstance(source.file, str):
            problem, allowed = "is a list", 'only source = "terrain" takes one; give each file its own block'
            yield Mistake(
                file=file, where=key_path("horizon", index, "file"), problem=problem, allowed=allowed
            )
        return
    if not source.files:
        where, allowed = key_path("horizon", index, "file"), "it must name at least one"
        yield Mistake(file=file, where=where, problem="is an empty list", allowed=allowed)
    for key, owner in OF_OTHERS.items():
        if key in given:
            yield _given(source, index, key, f'it goes with source = "{owner}" only', file)
    if source.nearest_m >= source.reach_m:
        allowed = f"it must be below reach_m, which is {source.reach_m:g}"
        yield _given(source, index, "nearest_m", allowed, file)
    if source.heights == "site":
        if "mark_above_ground_m" in given:
            yield _given(
                source, index, "mark_above_ground_m", 'it goes with heights = "from-raster" only', file
            )
        if place is not None and "height_m" not in place.model_fields_set:
            yield _given(source, index, "heights", "it needs site.height_m", file)


def _given(source: HorizonSource, index: int, key: str, allowed: str, file: str) -> Mistake:
    value = getattr(source, key)
    where = key_path("horizon", index, key)
    return Mistake(file=file, where=where, problem=f"is {shown(value)}", allowed=allowed, value=value)
