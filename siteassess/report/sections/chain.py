"""The section on the chain: what each part does to signal, noise and supply, carrier by carrier."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.link_budget.chain.supply import supply_voltages_v
from siteassess.report.phrases import number, percent, plain
from siteassess.report.pieces import Section, Table

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.link_budget.chain.receive_chain import ChainNoise
    from siteassess.site_file.model import Part

__all__ = ["chain_section", "part_name"]


def chain_section(assessment: Assessment) -> Section:
    """Parts from the antenna port to the receiver, each with its gain, its noise and its voltage."""
    chain = assessment.site.chain
    by_carrier = {budget.noise.carrier_hz: budget.noise for budget in assessment.budget.signals}
    return Section(
        key="chain",
        heading="The chain, part by part",
        sentences=(
            "Noise is referred to the antenna port: what a part adds, divided by the gain ahead of it. "
            "Voltage: what the supply through the cable leaves for a part with gain, where source, currents "
            "and resistances are known.",
            *_table_values(chain),
        ),
        tables=tuple(_chain_table(chain, noise) for noise in by_carrier.values()),
    )


def part_name(part: Part) -> str:
    """A part's name with kind, length and number, where it has them."""
    details = [part.kind] if part.kind and part.kind != part.part else []
    if part.length_m:
        details.append(f"{part.length_m:g} m")
    if part.count > 1:
        details.append(f"{part.count} in a row")
    return plain(f"{part.part} ({'; '.join(details)})" if details else part.part)


def _table_values(chain: tuple[Part, ...]) -> tuple[str, ...]:
    sources = {part.kind: part.rests_on for part in chain if part.kind and part.rests_on}
    if not sources:
        return ()
    told = "; ".join(f"“{plain(kind)}”: {plain(source)}" for kind, source in sources.items())
    return (f"Values that the site file does not give are those of the parts table. {told}.",)


def _chain_table(chain: tuple[Part, ...], noise: ChainNoise) -> Table:
    system_k = noise.system_temperature_k
    voltages_v = supply_voltages_v(chain)
    antenna = ("Antenna", number(None), number(0.0, 2), number(noise.antenna_temperature_k))
    rows = [(*antenna, percent(noise.antenna_temperature_k / system_k), number(None))]
    for part, own, voltage_v in zip(chain, noise.parts, voltages_v, strict=True):
        last = part is chain[-1]
        rows.append(
            (
                part_name(part),
                number(None if last else own.gain_db, 2),
                number(None if last else own.input_gain_db + own.gain_db, 2),
                number(own.added_temperature_k),
                percent(own.added_temperature_k / system_k),
                number(voltage_v, 2),
            )
        )
    total = ("System", number(None), number(noise.net_gain_db, 2), number(system_k), percent(1.0))
    return Table(
        caption=(
            f"{number(noise.carrier_hz / 1e6, 3)} MHz; G/T toward the zenith "
            f"{number(noise.gain_over_temperature_db_per_k)} dB/K."
        ),
        header=("Part", "Gain, dB", "Gain up to here, dB", "Noise added, K", "Of all noise", "Voltage, V"),
        rows=(*rows, (*total, number(None))),
        align="lrrrrr",
        tones=("",) * len(rows) + ("total",),
    )
