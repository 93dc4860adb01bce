"""From the chain of a site file, and the parts tables it draws on, to parts with all their values."""

from collections.abc import Iterator, Mapping, Sequence
from pathlib import Path

from siteassess.errors import InputError, Mistake
from siteassess.link_budget.chain.parts import CABLE_CHECK_HZ, PartKind, part_kinds, whole_part
from siteassess.link_budget.chain.parts_file import read_parts_file
from siteassess.link_budget.chain.supply import preamplifier_index, preamplifier_voltage_v
from siteassess.link_budget.power.signals import read_signals
from siteassess.site_file.checks.chain import not_spanned
from siteassess.site_file.checks.kinds import kind_mistakes
from siteassess.site_file.model import Part, Requirements, Site
from siteassess.wording import listed, shown

__all__ = ["read_chain", "read_kinds"]


def read_kinds(site: Site) -> dict[str, PartKind]:
    """Kinds that the chain of a site may name: those of the site's own parts table, then the packaged ones.

    Raises
    ------
    InputError
        If the site's own table is wrong, or a kind does not fit the block that names it.
    """
    kinds = dict(part_kinds())
    if site.parts is not None:
        kinds |= read_parts_file(site.path.parent / site.parts.file)
        columns = {name: _columns(kind) for name, kind in kinds.items()}
        blocks = tuple(None if part.rests_on else part for part in site.chain)
        _refuse(*kind_mistakes(blocks, columns, site.path.name))
    return kinds


def read_chain(site: Site) -> tuple[Part, ...]:
    """The chain of a site with every value that its kinds give.

    Parameters
    ----------
    site : Site
        What the user wrote; where it names a parts table, that is read too.

    Returns
    -------
    tuple of Part
        In the order of the site file. A key of a block goes before what its kind gives.

    Raises
    ------
    InputError
        If the parts table is wrong, a kind does not fit its block, or the chain lacks what a limit of
        `[require]` is held against.
    """
    kinds = read_kinds(site)
    carriers_hz = {name: read_signals()[name].carrier_hz for name in site.sky.signals}
    if site.parts is not None:
        named = {part.kind: kinds[part.kind] for part in site.chain if part.kind is not None}
        _refuse(*_carrier_mistakes(named, carriers_hz, Path(site.parts.file).name))
    wanted_hz = sorted({*carriers_hz.values(), CABLE_CHECK_HZ})
    chain = tuple(
        part if part.kind is None or part.rests_on else whole_part(part, kinds[part.kind], wanted_hz)
        for part in site.chain
    )
    _refuse(*_unjudged(site.require, chain, site.path.name))
    return chain


def _refuse(*mistakes: Mistake) -> None:
    if mistakes:
        raise InputError(*mistakes)


def _columns(kind: PartKind) -> frozenset[str]:
    """Columns that a kind fills, as far as the checks of a chain ask for them."""
    cable = {"k1_db_per_100m"} if kind.k1_db_per_100m is not None else set()
    return frozenset(kind.values) | cable


def _carrier_mistakes(
    kinds: Mapping[str, PartKind], carriers_hz: Mapping[str, float], file: str
) -> Iterator[Mistake]:
    """Kinds of the user's own table, by carrier, that end before the site's signals do."""
    for name, kind in kinds.items():
        tables = [value for value in kind.values.values() if isinstance(value, dict)]
        outside = not_spanned([float(key) for key in tables[0]], carriers_hz) if tables else []
        if outside:
            yield Mistake(
                file=file,
                where=f"kind {shown(name)}",
                problem=f"has no value at {listed(outside)}",
                allowed="its rows must span the carriers of the site's signals",
                value=name,
            )


def _unjudged(require: Requirements, chain: Sequence[Part], file: str) -> Iterator[Mistake]:
    """Limits that are asked and cannot be held against anything: silence would look like a pass."""
    voltage_v = preamplifier_voltage_v(chain)
    no_voltage = (
        "the voltage follows from supply_voltage_v behind the preamplifier, supply_current_ma of all parts"
        " with gain and loop_resistance_ohm of all parts between"
    )
    lacking = {
        "max_cn0_lost_before_preamplifier_db": (
            preamplifier_index(chain) is None,
            "no part of the chain has gain",
        ),
        "max_cable_loss_db_per_m": (
            not any(part.length_m for part in chain),
            "no part of the chain has length_m",
        ),
        "min_supply_voltage_v": (voltage_v is None, no_voltage),
        "max_supply_voltage_v": (voltage_v is None, no_voltage),
        "min_saturation_margin_db": (
            all(part.max_input_dbm is None for part in chain),
            "no part of the chain has max_input_dbm",
        ),
    }
    for key, (lacks, reason) in lacking.items():
        if lacks and getattr(require, key) is not None:
            yield Mistake(
                file=file,
                where=f"require.{key}",
                problem="cannot be held against anything",
                allowed=reason,
                value=getattr(require, key),
            )
