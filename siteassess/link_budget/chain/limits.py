"""What a chain is held against: its order, its cables, its net gain, its levels."""

from collections.abc import Sequence
from dataclasses import dataclass

from siteassess.constants import BOLTZMANN_J_PER_K
from siteassess.decibels import to_db, to_ratio
from siteassess.link_budget.chain.parts import CABLE_CHECK_HZ
from siteassess.link_budget.chain.receive_chain import ChainNoise, cascade, part_noises, value_at_carrier
from siteassess.link_budget.chain.supply import preamplifier_index
from siteassess.site_file.model import Part

__all__ = [
    "SaturationMargin",
    "cable_losses_db_per_m",
    "cn0_lost_before_preamplifier_db",
    "saturation_margins",
]

# Navigation bands 1164 to 1300 and 1559 to 1610 MHz, Radio Regulations (value from memory), together.
NOISE_BANDWIDTH_HZ = 187e6
DBM_PER_DBW = 30.0


@dataclass(frozen=True, slots=True, kw_only=True)
class SaturationMargin:
    """How far the level at one part's input lies below its saturation.

    Attributes
    ----------
    part : str
        Its name.
    level_dbm : float
        Noise of the navigation bands and unwanted transmitters together, at its input.
    margin_db : float
        Its saturation less that level.
    """

    part: str
    level_dbm: float
    margin_db: float


def cn0_lost_before_preamplifier_db(chain: Sequence[Part], noise: ChainNoise) -> float | None:
    """C/N0 that would be gained if the first part with gain stood at the antenna port [dB].

    Parameters
    ----------
    chain : sequence of Part
        From the antenna port on.
    noise : ChainNoise
        The chain's noise at one carrier.

    Returns
    -------
    float or None
        None where no part has gain.

    Examples
    --------
    Between an antenna at 290 K and a preamplifier without noise, loss at 290 K costs its own decibels.

    >>> from types import SimpleNamespace
    >>> late = (Part(part="cable", loss_db=10.0),
    ...         Part(part="preamplifier", gain_db=60.0, noise_figure_db=0.0),
    ...         Part(part="receiver", noise_figure_db=0.0))
    >>> noise = SimpleNamespace(
    ...     carrier_hz=1575.42e6, antenna_temperature_k=290.0, system_temperature_k=2900.0)
    >>> round(cn0_lost_before_preamplifier_db(late, noise), 3)
    10.0
    """
    first = preamplifier_index(chain)
    if first is None:
        return None
    moved = (chain[first], *chain[:first], *chain[first + 1 :])
    best_k = noise.antenna_temperature_k + cascade(moved, noise.carrier_hz).temperature_k
    return float(to_db(noise.system_temperature_k / best_k))


def cable_losses_db_per_m(chain: Sequence[Part]) -> tuple[tuple[str, float], ...]:
    """Name and loss at 1575.42 MHz [dB/m] of each part that has a length."""
    return tuple(
        (part.part, value_at_carrier(part.loss_db, CABLE_CHECK_HZ) / part.length_m)
        for part in chain
        if part.length_m and part.loss_db is not None
    )


def saturation_margins(
    chain: Sequence[Part], noise: ChainNoise, unwanted_level_dbm: float | None
) -> tuple[SaturationMargin, ...]:
    """Level at each part whose `max_input_dbm` is known, and its margin.

    Parameters
    ----------
    chain : sequence of Part
        From the antenna port on.
    noise : ChainNoise
        The chain's noise at one carrier.
    unwanted_level_dbm : float or None
        Level of transmitters outside the navigation bands at the antenna port; None for none.
    """
    margins = []
    unwanted_w = 0.0 if unwanted_level_dbm is None else float(to_ratio(unwanted_level_dbm - DBM_PER_DBW))
    for part, ahead in zip(chain, part_noises(chain, noise.carrier_hz), strict=True):
        unwanted_w /= float(to_ratio(part.out_of_band_rejection_db or 0.0))
        if part.max_input_dbm is not None:
            temperature_k = noise.antenna_temperature_k + ahead.input_temperature_k
            noise_w = BOLTZMANN_J_PER_K * temperature_k * NOISE_BANDWIDTH_HZ
            level_dbm = float(to_db(noise_w + unwanted_w)) + ahead.input_gain_db + DBM_PER_DBW
            margins.append(
                SaturationMargin(
                    part=part.part, level_dbm=level_dbm, margin_db=part.max_input_dbm - level_dbm
                )
            )
    return tuple(margins)
