"""The parts table: cables by construction, splitters, amplifiers, and what a part has from its kind."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cache
from types import MappingProxyType

from siteassess.site_file.model import ByCarrier, Part
from siteassess.tables import packaged_rows

__all__ = [
    "CABLE_CHECK_HZ",
    "PART_COLUMNS",
    "PartKind",
    "cable_loss_db",
    "kind_of",
    "part_kinds",
    "whole_part",
]

CABLE_CHECK_HZ = 1575.42e6  # where published limits for cables are stated
# Columns of the table that are keys of a `[[chain]]` block too; the first three may differ by carrier.
PART_COLUMNS = (
    *("loss_db", "gain_db", "noise_figure_db", "supply_voltage_v", "supply_current_ma"),
    *("min_supply_voltage_v", "max_supply_voltage_v"),
)
BY_CARRIER = PART_COLUMNS[:3]
CABLE_COLUMNS = ("k1_db_per_100m", "k2_db_per_100m", "ohm_per_100m")


@dataclass(frozen=True, slots=True, kw_only=True)
class PartKind:
    """One kind of the parts table.

    Attributes
    ----------
    kind : str
        Its name, as site files use it.
    k1_db_per_100m, k2_db_per_100m : float or None
        Loss of a cable at 1 MHz that grows with the square root of the carrier, and with the carrier itself.
    ohm_per_100m : float or None
        Loop resistance of a cable; of any other part, the resistance of one. None where it is not known.
    values : mapping of str to float or dict
        What it gives of the keys of a `[[chain]]` block; a dict holds values by carrier in MHz.
    passes_supply : bool
        Whether direct current gets through.
    rests_on : str
        Source and status.
    """

    kind: str
    k1_db_per_100m: float | None
    k2_db_per_100m: float | None
    ohm_per_100m: float | None
    values: Mapping[str, ByCarrier]
    passes_supply: bool
    rests_on: str


@cache
def part_kinds() -> Mapping[str, PartKind]:
    """Kinds of the packaged parts table, by name.

    Examples
    --------
    >>> part_kinds()["foam, 10 mm"].ohm_per_100m
    1.0
    """
    kinds = {}
    for row in packaged_rows("link_budget/chain/parts.csv"):
        numbers = {key: float(row[key]) for key in (*PART_COLUMNS, *CABLE_COLUMNS) if row[key]}
        kinds[row["kind"]] = kind_of(
            row["kind"],
            {None: numbers},
            passes_supply=row["passes_supply"] != "no",
            rests_on=f"{row['source']} ({row['status']})",
        )
    return MappingProxyType(kinds)


def kind_of(
    name: str,
    rows: Mapping[str | None, Mapping[str, float]],
    *,
    passes_supply: bool,
    rests_on: str,
) -> PartKind:
    """A kind from the rows that a table has of it.

    Parameters
    ----------
    name : str
        Its name.
    rows : mapping
        Carrier in MHz, as text, to the numbers by column; None as the carrier of a kind's only row.
    passes_supply : bool
        Whether direct current gets through.
    rests_on : str
        Source and status.
    """
    first = next(iter(rows.values()))
    by_carrier = {carrier: row for carrier, row in rows.items() if carrier is not None}
    values: dict[str, ByCarrier] = {key: first[key] for key in PART_COLUMNS if key in first}
    for key in BY_CARRIER:
        if key in first and by_carrier:
            values[key] = {carrier: row[key] for carrier, row in by_carrier.items()}
    return PartKind(
        kind=name,
        k1_db_per_100m=first.get("k1_db_per_100m"),
        k2_db_per_100m=first.get("k2_db_per_100m"),
        ohm_per_100m=first.get("ohm_per_100m"),
        values=MappingProxyType(values),
        passes_supply=passes_supply,
        rests_on=rests_on,
    )


def cable_loss_db(k1_db_per_100m: float, k2_db_per_100m: float, length_m: float, carrier_hz: float) -> float:
    """Loss [dB] of a coaxial cable: in the skin of its conductors, and in its dielectric.

    Examples
    --------
    >>> round(cable_loss_db(0.401214, 0.000853, 100.0, 1575.42e6), 2)
    17.27
    """
    carrier_mhz = carrier_hz / 1e6
    loss_db_per_100m = k1_db_per_100m * float(carrier_mhz**0.5) + k2_db_per_100m * carrier_mhz
    return loss_db_per_100m * length_m / 100.0


def whole_part(part: Part, kind: PartKind, carriers_hz: Sequence[float]) -> Part:
    """A part with the values of its kind where its block has none; a cable has its loss at each carrier.

    Examples
    --------
    >>> block = Part(part="cable", kind="foam, 10 mm", length_m=30.0)
    >>> cable = whole_part(block, part_kinds()["foam, 10 mm"], [1575.42e6])
    >>> round(cable.loss_db["1575.42"], 2), cable.loop_resistance_ohm
    (5.18, 0.3)
    """
    values: dict[str, object] = {**kind.values, "passes_supply": kind.passes_supply}
    if kind.k1_db_per_100m is not None:
        k1, k2 = kind.k1_db_per_100m, kind.k2_db_per_100m or 0.0
        many = (part.length_m or 0.0) / 100.0
        values["loss_db"] = {
            f"{carrier_hz / 1e6:.10g}": cable_loss_db(k1, k2, part.length_m or 0.0, carrier_hz)
            for carrier_hz in carriers_hz
        }
    else:
        many = float(part.count)
        if "loss_db" in kind.values:
            values["loss_db"] = _times(kind.values["loss_db"], part.count)
    if kind.ohm_per_100m is not None:
        values["loop_resistance_ohm"] = kind.ohm_per_100m * many
    absent = {key: value for key, value in values.items() if getattr(part, key) is None}
    whole = part.model_copy(update=absent)
    whole._rests_on = kind.rests_on
    return whole


def _times(value: ByCarrier, count: int) -> ByCarrier:
    if isinstance(value, dict):
        return {carrier: number * count for carrier, number in value.items()}
    return value * count
