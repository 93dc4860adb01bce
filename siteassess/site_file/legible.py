"""What can still be made out of a refused site file: the other files that it names."""

from collections.abc import Mapping
from pathlib import Path
from typing import Any, TypeVar

from pydantic import ValidationError

from siteassess.site_file.model import AntennaChoice, HorizonSource, Mount, Part, PartsChoice, Record, Site

__all__ = ["legible_site"]

AnyRecord = TypeVar("AnyRecord", bound=Record)

NO_FILE = AntennaChoice.model_construct(pattern="isotropic")


def legible_site(raw: Mapping[str, Any], path: Path) -> Site:
    """A site with `mount`, `antenna`, `chain`, `parts`, `horizon` and `path`, for reading its files only.

    Keys that are refused take their defaults; what leads to no file that can be read is left out.

    Parameters
    ----------
    raw : mapping
        The site file as TOML reads it, lists as tuples.
    path : Path
        The site file.
    """
    mount, antenna = _right_keys(Mount, raw.get("mount")), _right_keys(AntennaChoice, raw.get("antenna"))
    blocks = raw.get("horizon")
    sources = [_right_keys(HorizonSource, block) for block in (blocks if isinstance(blocks, tuple) else ())]
    surveys = {source.file: source for source in sources if source is not None and source.source == "survey"}
    if mount is None:
        # Where the antenna stands is not known; seen from the instrument, no reading is misplaced.
        mount = Mount(mast_height_m=0.0)
        surveys = {file: _at_the_antenna(source) for file, source in surveys.items()}
    # Where north is may be among what is refused; a reading counts as misplaced only where it is known.
    surveys = {
        file: _at_the_antenna(source) if _is_turned(source) else source for file, source in surveys.items()
    }
    tables: dict[str, Any] = {
        "mount": mount,
        "antenna": antenna if antenna is not None and antenna.is_file else NO_FILE,
        "chain": _whole_chain(raw.get("chain")),
        "parts": _right_keys(PartsChoice, raw.get("parts")),
        "horizon": tuple(surveys.values()),
    }
    site = Site.model_construct(**tables)
    site._path = path
    return site


def _is_turned(source: HorizonSource) -> bool:
    return source.bearings != "true-north" or source.landmark_reading_deg is not None


def _at_the_antenna(source: HorizonSource) -> HorizonSource:
    """A survey without what places and turns it."""
    return source.model_copy(
        update={
            "bearings": "true-north",
            "landmark_reading_deg": None,
            "instrument_east_m": 0.0,
            "instrument_north_m": 0.0,
            "instrument_up_m": None,
        }
    )


def _whole_chain(blocks: Any) -> tuple[Part, ...]:
    """The chain without the keys that are refused; empty where a block leaves too little to count on."""
    parts = [_right_keys(Part, block) for block in (blocks if isinstance(blocks, tuple) else ())]
    return () if None in parts else tuple(part for part in parts if part is not None)


def _right_keys(record: type[AnyRecord], raw: Any) -> AnyRecord | None:
    """A table without the keys that are refused; None where that leaves too little."""
    if not isinstance(raw, dict):
        return None
    try:
        return record.model_validate(raw)
    except ValidationError as error:
        wrong = {mistake["loc"][0] for mistake in error.errors()}
    try:
        return record.model_validate({key: value for key, value in raw.items() if key not in wrong})
    except ValidationError:
        return None
