"""The direct current that feeds the parts with gain through the cable, and the voltage left for them."""

from collections.abc import Sequence

from siteassess.site_file.model import Part

__all__ = ["preamplifier_index", "preamplifier_voltage_v", "supply_voltages_v"]


def preamplifier_index(chain: Sequence[Part]) -> int | None:
    """Place of the first part with gain, counted from 0; None where no part has any."""
    return next((index for index, part in enumerate(chain) if part.gain_db is not None), None)


def preamplifier_voltage_v(chain: Sequence[Part]) -> float | None:
    """Voltage [V] at the first part with gain; None where it is not known or no part has gain."""
    first = preamplifier_index(chain)
    return None if first is None else supply_voltages_v(chain)[first]


def supply_voltages_v(chain: Sequence[Part]) -> tuple[float | None, ...]:
    """Voltage [V] at each part with gain, fed by the next part behind it that has `supply_voltage_v`.

    Parameters
    ----------
    chain : sequence of Part
        From the antenna port on; the last part is the receiver.

    Returns
    -------
    tuple of float or None
        One element a part: source less current times loop resistance on the way; 0 where a part blocks direct
        current; None for parts without gain, and where no source, a current or a resistance is not known.

    Examples
    --------
    >>> chain = (Part(part="preamplifier", gain_db=30.0, noise_figure_db=2.0, supply_current_ma=60.0),
    ...          Part(part="cable", loss_db=16.6, loop_resistance_ohm=2.3),
    ...          Part(part="receiver", noise_figure_db=8.0, supply_voltage_v=5.0))
    >>> round(supply_voltages_v(chain)[0], 3)
    4.862
    """
    return tuple(
        _voltage_v(chain, index) if part.gain_db is not None else None for index, part in enumerate(chain)
    )


def _voltage_v(chain: Sequence[Part], index: int) -> float | None:
    source = _source_index(chain, index)
    if source is None:
        return None
    way = range(index + 1, source)
    if any(chain[step].passes_supply is False for step in way):
        return 0.0
    drops_v = [_drop_v(chain, step, source) for step in way]
    voltage_v = chain[source].supply_voltage_v
    if voltage_v is None or None in drops_v:
        return None
    return max(0.0, voltage_v - sum(drop_v for drop_v in drops_v if drop_v is not None))


def _source_index(chain: Sequence[Part], index: int) -> int | None:
    behind = range(index + 1, len(chain))
    return next((place for place in behind if chain[place].supply_voltage_v is not None), None)


def _drop_v(chain: Sequence[Part], step: int, source: int) -> float | None:
    """Voltage lost in one part: Ohm's law with the currents of all that it feeds; None where not known."""
    fed = [
        chain[place].supply_current_ma
        for place in range(step)
        if chain[place].gain_db is not None and _source_index(chain, place) == source
    ]
    resistance_ohm = chain[step].loop_resistance_ohm
    if resistance_ohm == 0.0:
        return 0.0
    if resistance_ohm is None or None in fed:
        return None
    return resistance_ohm * sum(current_ma for current_ma in fed if current_ma is not None) / 1e3
