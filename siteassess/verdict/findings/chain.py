"""Findings about the chain: its gain, its order, its cables, its supply and its levels."""

from collections.abc import Sequence
from typing import Literal

from siteassess.link_budget.chain.limits import (
    cable_losses_db_per_m,
    cn0_lost_before_preamplifier_db,
    saturation_margins,
)
from siteassess.link_budget.chain.receive_chain import ChainNoise
from siteassess.link_budget.chain.supply import preamplifier_index, preamplifier_voltage_v
from siteassess.site_file.model import Part, Requirements
from siteassess.verdict.criteria import read_criteria
from siteassess.verdict.verdict import Finding
from siteassess.wording import listed

__all__ = ["chain_findings"]

BY_SITE_FILE = "site file"
NetGainKey = Literal["min_net_gain_db", "max_net_gain_db"]


def chain_findings(
    require: Requirements,
    chain: Sequence[Part],
    noises: Sequence[ChainNoise],
    unwanted_level_dbm: float | None,
) -> tuple[Finding, ...]:
    """Findings about a chain, in the order of the criteria table; none where a value is not known.

    Parameters
    ----------
    require : Requirements
        Limits of the site file; those that are None turn into advice.
    chain : sequence of Part
        From the antenna port to the receiver, with all its values.
    noises : sequence of ChainNoise
        Its noise, one element a carrier.
    unwanted_level_dbm : float or None
        Level of transmitters outside the navigation bands at the antenna port; None for none.
    """
    found = (
        _net_gain("min_net_gain_db", require, chain[-1], noises),
        _net_gain("max_net_gain_db", require, chain[-1], noises),
        _order(require, chain, noises),
        _cable(require, chain),
        *_supply(require, chain),
        _saturation(require, chain, noises, unwanted_level_dbm),
    )
    return tuple(finding for finding in found if finding is not None)


def _net_gain(
    key: NetGainKey, require: Requirements, receiver: Part, noises: Sequence[ChainNoise]
) -> Finding | None:
    worst = min if key == "min_net_gain_db" else max
    noise = worst(noises, key=lambda noise: noise.net_gain_db)
    own = receiver.min_net_gain_db if key == "min_net_gain_db" else receiver.max_net_gain_db
    reason = f"Gain ahead of the receiver {_at(noise)}, the carrier where it is "
    reason += "lowest." if key == "min_net_gain_db" else "highest."
    return _finding(key, require, noise.net_gain_db, reason, own, "the receiver's own window")


def _order(require: Requirements, chain: Sequence[Part], noises: Sequence[ChainNoise]) -> Finding | None:
    first = preamplifier_index(chain)
    if first is None:
        return None
    lost = [(cn0_lost_before_preamplifier_db(chain, noise) or 0.0, noise) for noise in noises]
    value_db, noise = max(lost, key=lambda entry: entry[0])
    ahead = listed(part.part for part in chain[:first]) if first else ""
    reason = (
        f"{chain[first].part} stands behind {ahead}; at the antenna port it would give {value_db:.1f} dB more"
        f" C/N0 {_at(noise)}."
        if first
        else f"{chain[first].part} is the first part behind the antenna port."
    )
    return _finding("max_cn0_lost_before_preamplifier_db", require, value_db, reason)


def _cable(require: Requirements, chain: Sequence[Part]) -> Finding | None:
    cables = cable_losses_db_per_m(chain)
    if not cables:
        return None
    name, loss_db_per_m = max(cables, key=lambda cable: cable[1])
    reason = f"Loss of {name} at 1575.42 MHz."
    return _finding("max_cable_loss_db_per_m", require, loss_db_per_m, reason)


def _supply(require: Requirements, chain: Sequence[Part]) -> tuple[Finding | None, ...]:
    first = preamplifier_index(chain)
    voltage_v = preamplifier_voltage_v(chain)
    if first is None or voltage_v is None:
        return ()
    part = chain[first]
    blocking = [other.part for other in chain[first + 1 :] if other.passes_supply is False]
    reason = f"Voltage at {part.part}, behind what the current loses on the way."
    if voltage_v == 0.0 and blocking:
        reason = f"No voltage reaches {part.part}: {blocking[0]} blocks direct current."
    own = "the part's own range"
    return (
        _finding("min_supply_voltage_v", require, voltage_v, reason, part.min_supply_voltage_v, own),
        _finding("max_supply_voltage_v", require, voltage_v, reason, part.max_supply_voltage_v, own),
    )


def _saturation(
    require: Requirements,
    chain: Sequence[Part],
    noises: Sequence[ChainNoise],
    unwanted_level_dbm: float | None,
) -> Finding | None:
    margins = [margin for noise in noises for margin in saturation_margins(chain, noise, unwanted_level_dbm)]
    if not margins:
        return None
    worst = min(margins, key=lambda margin: margin.margin_db)
    unwanted = (
        " alone"
        if unwanted_level_dbm is None
        else f", and other transmitters, {unwanted_level_dbm:g} dBm at the antenna port"
    )
    reason = f"{worst.level_dbm:.1f} dBm reach {worst.part}: noise of the navigation bands{unwanted}."
    return _finding("min_saturation_margin_db", require, worst.margin_db, reason)


def _at(noise: ChainNoise) -> str:
    return f"at {noise.carrier_hz / 1e6:.10g} MHz"


def _finding(
    key: str,
    require: Requirements,
    value: float,
    reason: str,
    own_limit: float | None = None,
    own_source: str = "",
) -> Finding | None:
    """A finding against the limit of the site file, of the part or of the table; None where none is."""
    criterion = read_criteria()[key]
    asked = getattr(require, key)
    limit, source = asked, BY_SITE_FILE
    if limit is None:
        limit, source = own_limit, own_source
    if limit is None:
        limit, source = criterion.advice_limit, criterion.source
    if limit is None:
        return None
    return Finding(
        criterion=key,
        signal=None,
        value=value,
        limit=limit,
        unit=criterion.unit,
        required=asked is not None,
        outcome="missed" if criterion.shortfall(value, limit) > 0 else "met",
        source=source,
        reason=reason,
    )
