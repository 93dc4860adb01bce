"""What the keys of a site file must be to each other and to the packaged tables."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any, TypeVar

from pydantic import ValidationError

from siteassess.errors import Mistake
from siteassess.site_file.checks.chain import chain_mistakes
from siteassess.site_file.checks.kinds import kind_mistakes, packaged_kinds
from siteassess.site_file.checks.limits import limit_mistakes
from siteassess.site_file.checks.outlines import outline_mistakes
from siteassess.site_file.checks.terrain import terrain_mistakes
from siteassess.site_file.model import (
    AntennaChoice,
    HorizonSource,
    Mount,
    Part,
    Place,
    Record,
    Requirements,
    Site,
    SkyModel,
    purposes_dbhz,
)
from siteassess.site_file.refusals import key_path
from siteassess.tables import packaged_rows
from siteassess.wording import did_you_mean, listed, shown

__all__ = ["Sections", "cross_mistakes", "signals_of", "systems_of"]

YEARS = (1980, 2099)  # GPS time starts in 1980; nominal constellations say nothing of later centuries

AnyRecord = TypeVar("AnyRecord", bound=Record)


@dataclass(frozen=True, slots=True, kw_only=True)
class Sections:
    """The tables of a site file, each by itself; None where a table is refused.

    So one wrong key does not keep the mistakes between other keys from being found.
    """

    place: Place | None
    mount: Mount | None
    antenna: AntennaChoice | None
    chain: tuple[Part | None, ...]
    has_own_parts: bool
    horizon: tuple[HorizonSource | None, ...]
    sky: SkyModel | None
    require: Requirements | None

    @classmethod
    def of(cls, raw: Mapping[str, Any]) -> "Sections":
        """Sections of a site file as TOML reads it, lists as tuples."""
        return cls(
            place=_valid(Place, raw.get("site")),
            mount=_valid(Mount, raw.get("mount")),
            antenna=_valid(AntennaChoice, raw.get("antenna")),
            chain=_valid_blocks(Part, raw.get("chain")),
            has_own_parts="parts" in raw,
            horizon=_valid_blocks(HorizonSource, raw.get("horizon")),
            sky=_valid(SkyModel, raw.get("sky", {})),
            require=_valid(Requirements, raw.get("require")),
        )

    @classmethod
    def of_site(cls, site: Site) -> "Sections":
        """Sections of a site whose single keys are right."""
        return cls(
            place=site.place,
            mount=site.mount,
            antenna=site.antenna,
            chain=site.chain,
            has_own_parts=site.parts is not None,
            horizon=site.horizon,
            sky=site.sky,
            require=site.require,
        )


def cross_mistakes(sections: Sections, file: str) -> list[Mistake]:
    """Mistakes that take more than one key, or a packaged table, to see."""
    mistakes: list[Mistake] = []
    carriers_hz: dict[str, float] | None = None
    if sections.sky is not None:
        mistakes += _sky_mistakes(sections.sky, file)
        if not mistakes:
            carriers_hz = {name: _signal_table()[name][1] for name in signals_of(sections.sky)}
    if sections.mount is not None:
        mistakes += _mount_mistakes(sections.mount, file)
    if sections.antenna is not None:
        mistakes += _antenna_mistakes(sections.antenna, file)
    mistakes += chain_mistakes(sections.chain, carriers_hz or {}, file)
    if not sections.has_own_parts:  # else whoever reads that table looks
        mistakes += kind_mistakes(sections.chain, packaged_kinds(), file)
    mistakes += _horizon_mistakes(sections.horizon, sections.place, file)
    if sections.require is not None:
        known = sections.sky if carriers_hz is not None else None
        mistakes += limit_mistakes(sections.require, None if known is None else systems_of(known), file)
    if sections.require is not None and carriers_hz is not None:
        mistakes += _require_mistakes(sections.require, tuple(carriers_hz), file)
    return mistakes


def systems_of(sky: SkyModel) -> tuple[str, ...]:
    """Systems that the site file names; else those of the signals that it names; else the default."""
    if "systems" in sky.model_fields_set or "signals" not in sky.model_fields_set:
        return sky.systems
    return tuple(dict.fromkeys(_signal_table()[name][0] for name in sky.signals if name in _signal_table()))


def signals_of(sky: SkyModel) -> tuple[str, ...]:
    """Signals that the site file names, or the default ones of its systems."""
    if "signals" in sky.model_fields_set:
        return sky.signals
    return tuple(name for name in sky.signals if _signal_table()[name][0] in sky.systems)


@cache
def _signal_table() -> dict[str, tuple[str, float]]:
    """System and carrier [Hz] of every signal."""
    rows = packaged_rows("link_budget/power/signals.csv")
    return {row["signal"]: (row["system"], float(row["carrier_hz"])) for row in rows}


def _valid(record: type[AnyRecord], raw: object) -> AnyRecord | None:
    try:
        return record.model_validate(raw)
    except ValidationError:
        return None


def _valid_blocks(record: type[AnyRecord], raw: object) -> tuple[AnyRecord | None, ...]:
    return tuple(_valid(record, block) for block in raw) if isinstance(raw, tuple) else ()


def _sky_mistakes(sky: SkyModel, file: str) -> Iterator[Mistake]:
    table = _signal_table()
    systems = tuple(dict.fromkeys(system for system, _ in table.values()))
    name_mistakes = [
        *_name_mistakes(file, "systems", sky.systems, systems),
        *_name_mistakes(file, "signals", sky.signals, tuple(table)),
    ]
    yield from name_mistakes
    if not name_mistakes and {"systems", "signals"} <= sky.model_fields_set:
        system_of = [table[name][0] for name in sky.signals]
        for index, (name, system) in enumerate(zip(sky.signals, system_of, strict=True)):
            if system not in sky.systems:
                yield _given(file, ("sky", "signals", index), name, f"sky.systems must name {system} too")
    first, last = YEARS
    if not first <= sky.start.year <= last:
        yield Mistake(
            file=file,
            where="sky.start",
            problem=f"is {sky.start.isoformat()}",
            allowed=f"it must lie in the years {first} to {last}",
            value=sky.start,
        )


def _name_mistakes(file: str, key: str, names: tuple[str, ...], known: tuple[str, ...]) -> Iterator[Mistake]:
    if not names:
        yield Mistake(
            file=file, where=f"sky.{key}", problem="is an empty list", allowed="it must name at least one"
        )
    for index, name in enumerate(names):
        place = ("sky", key, index)
        if name not in known:
            yield _given(file, place, name, did_you_mean(name, known, f"the {key} are {listed(known)}"))
        elif name in names[:index]:
            yield _given(file, place, name, "it stands there twice; keep one")


def _mount_mistakes(mount: Mount, file: str) -> Iterator[Mistake]:
    tallest_m, present_m = mount.max_mast_height_m, mount.mast_height_m
    if tallest_m is not None and tallest_m < present_m:
        allowed = f"it must be at least mast_height_m, which is {present_m:g}"
        yield _given(file, ("mount", "max_mast_height_m"), tallest_m, allowed)


def _antenna_mistakes(antenna: AntennaChoice, file: str) -> Iterator[Mistake]:
    names = [row["pattern"] for row in packaged_rows("antenna/builtin.csv")]
    if not antenna.is_file and antenna.pattern not in names:
        otherwise = f"it must be a file that ends in .csv, or {listed(names, 'or')}"
        allowed = did_you_mean(antenna.pattern, names, otherwise)
        yield _given(file, ("antenna", "pattern"), antenna.pattern, allowed)


def _horizon_mistakes(
    horizon: tuple[HorizonSource | None, ...], place: Place | None, file: str
) -> Iterator[Mistake]:
    files: list[str] = []
    for index, source in enumerate(horizon):
        if source is None:
            continue
        for name in source.files:
            if name in files:
                yield _given(file, ("horizon", index, "file"), name, "it stands there twice; keep one")
            files.append(name)
        yield from _instrument_mistakes(source, index, file)
        yield from outline_mistakes(source, index, file)
        yield from terrain_mistakes(source, index, place, file)


def _instrument_mistakes(source: HorizonSource, index: int, file: str) -> Iterator[Mistake]:
    known = [row["instrument"] for row in packaged_rows("verdict/uncertainty/instrument_classes.csv")]
    if source.source == "survey" and source.instrument is not None and source.instrument not in known:
        allowed = did_you_mean(source.instrument, known, f"it must be {listed(known, 'or')}")
        yield _given(file, ("horizon", index, "instrument"), source.instrument, allowed)


def _require_mistakes(require: Requirements, signals: tuple[str, ...], file: str) -> Iterator[Mistake]:
    table = require.min_cn0_dbhz
    if isinstance(table, str) and table not in purposes_dbhz():
        purposes = purposes_dbhz()
        otherwise = f"it must be a number, a table by signal, or a purpose: {listed(purposes, 'or')}"
        yield _given(file, ("require", "min_cn0_dbhz"), table, did_you_mean(table, purposes, otherwise))
    if not isinstance(table, dict):
        return
    suggestions = {
        name: did_you_mean(name, signals, f"its signals are {listed(signals)}")
        for name in table
        if name not in signals
    }
    for name, suggestion in suggestions.items():
        yield Mistake(
            file=file,
            where=key_path("require", "min_cn0_dbhz", name),
            problem="is no signal of this site",
            allowed=suggestion,
            value=name,
        )
    # A signal that is only misspelt has its message already.
    absent = [
        name for name in signals if name not in table and f"did you mean {name}?" not in suggestions.values()
    ]
    if absent:
        yield Mistake(
            file=file,
            where="require.min_cn0_dbhz",
            problem=f"has no value for {listed(absent)}",
            allowed="a table must hold one for every signal of the site",
        )


def _given(file: str, steps: tuple[str | int, ...], value: object, allowed: str) -> Mistake:
    return Mistake(
        file=file, where=key_path(*steps), problem=f"is {shown(value)}", allowed=allowed, value=value
    )
