"""The parts between the antenna port and the receiver, and the noise they add."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from siteassess.constants import REFERENCE_TEMPERATURE_K
from siteassess.decibels import to_db, to_ratio
from siteassess.link_budget.noise.antenna_noise import AntennaNoise
from siteassess.site_file.model import Part

__all__ = [
    "QUANTISATION_LOSS_DB",
    "Cascade",
    "ChainNoise",
    "PartNoise",
    "cascade",
    "part_noises",
    "receiver_loss_db",
    "value_at_carrier",
]

# Of weak signals in white noise, independent samples, best threshold: 1 bit pi / 2 exactly, 2 bits with the
# weights 1 and 3 (textbook values from memory; they follow from a Gaussian integral).
QUANTISATION_LOSS_DB = {"1-bit": 1.96, "2-bit": 0.55}


@dataclass(frozen=True, slots=True, kw_only=True)
class PartNoise:
    """What one part does at one carrier.

    Attributes
    ----------
    part : str
        Its name.
    gain_db : float
        Gain; negative for a loss, 0 for the receiver.
    input_gain_db : float
        Gain from the antenna port to its input.
    input_temperature_k : float
        Noise of the parts ahead of it, referred to the antenna port.
    added_temperature_k : float
        Noise of its own, referred to the antenna port.
    """

    part: str
    gain_db: float
    input_gain_db: float
    input_temperature_k: float
    added_temperature_k: float


@dataclass(frozen=True, slots=True, kw_only=True)
class ChainNoise:
    """Noise at one carrier, referred to the antenna port.

    Attributes
    ----------
    carrier_hz : float
        Carrier.
    antenna_temperature_k : float
        Noise that the antenna delivers.
    chain_temperature_k : float
        Equivalent noise temperature of the chain.
    system_temperature_k : float
        Sum of the two.
    noise_figure_db : float
        Noise figure of the chain.
    net_gain_db : float
        Gain from the antenna port to the receiver's input.
    gain_over_temperature_db_per_k : float
        Gain of the antenna as mounted toward the zenith, over the system temperature.
    noise_density_dbw_per_hz : float
        k times the system temperature.
    implementation_loss_db : float
        Loss inside the receiver, by quantisation and filtering.
    antenna_efficiency : float
        Mean of co- plus cross-polar gain over the sphere.
    parts : tuple of PartNoise
        Part by part, in the order of the chain.
    antenna : AntennaNoise
        Where the antenna's own noise comes from.
    """

    carrier_hz: float
    antenna_temperature_k: float
    chain_temperature_k: float
    system_temperature_k: float
    noise_figure_db: float
    net_gain_db: float
    gain_over_temperature_db_per_k: float
    noise_density_dbw_per_hz: float
    implementation_loss_db: float
    antenna_efficiency: float
    parts: tuple[PartNoise, ...]
    antenna: AntennaNoise

    @property
    def surroundings_cost_db(self) -> float:
        """C/N0 [dB] that the noise of obstacles and leaves costs, against level and open ground."""
        return float(to_db(self.system_temperature_k / (self.antenna.open_site_k + self.chain_temperature_k)))


@dataclass(frozen=True, slots=True, kw_only=True)
class Cascade:
    """A chain of parts taken together, seen from its input.

    Attributes
    ----------
    temperature_k : float
        Equivalent noise temperature at the input.
    noise_figure_db : float
        The same as a noise figure at 290 K.
    net_gain_db : float
        Gain of everything ahead of the receiver.
    """

    temperature_k: float
    noise_figure_db: float
    net_gain_db: float


def value_at_carrier(value: float | dict[str, float], carrier_hz: float) -> float:
    """A value of the site file at one carrier.

    Parameters
    ----------
    value : float or dict
        One number, or a table from the carrier in MHz, as text, to the number there.
    carrier_hz : float
        Carrier [Hz].

    Returns
    -------
    float
        Linear between the carriers of the table; beyond its ends theirs holds.

    Examples
    --------
    >>> value_at_carrier({"1176.45": 4.0, "1575.42": 5.0}, 1375.935e6)
    4.5
    """
    if not isinstance(value, dict):
        return value
    points = sorted((float(carrier_mhz) * 1e6, number) for carrier_mhz, number in value.items())
    return float(np.interp(carrier_hz, [hz for hz, _ in points], [number for _, number in points]))


def cascade(chain: Sequence[Part], carrier_hz: float) -> Cascade:
    """Noise and gain of a chain by Friis' formula.

    Parameters
    ----------
    chain : sequence of Part
        From the antenna port on; the last part is the receiver.
    carrier_hz : float
        Carrier [Hz].

    Returns
    -------
    Cascade
        Each part's noise divided by the gain ahead of it, summed.

    References
    ----------
    [Friis 1944] Noise figures of radio receivers.

    Examples
    --------
    >>> parts = (Part(part="preamplifier", gain_db=30.0, noise_figure_db=2.5),
    ...          Part(part="cable", loss_db=15.0), Part(part="receiver", noise_figure_db=10.0))
    >>> round(cascade(parts, 1575.42e6).noise_figure_db, 2)
    3.21
    """
    parts = part_noises(chain, carrier_hz)
    temperature_k = parts[-1].input_temperature_k + parts[-1].added_temperature_k
    return Cascade(
        temperature_k=temperature_k,
        noise_figure_db=float(to_db(1.0 + temperature_k / REFERENCE_TEMPERATURE_K)),
        net_gain_db=parts[-1].input_gain_db,
    )


def part_noises(chain: Sequence[Part], carrier_hz: float) -> tuple[PartNoise, ...]:
    """Gain and noise of a chain, part by part.

    Parameters
    ----------
    chain : sequence of Part
        From the antenna port on; the last part is the receiver.
    carrier_hz : float
        Carrier [Hz].

    References
    ----------
    [Friis 1944] Noise figures of radio receivers.

    Examples
    --------
    >>> chain = (Part(part="cable", loss_db=10.0), Part(part="receiver", noise_figure_db=3.0))
    >>> [round(part.added_temperature_k) for part in part_noises(chain, 1575.42e6)]
    [2610, 2886]
    """
    parts = []
    gain_ahead, temperature_k = 1.0, 0.0
    for part in chain:
        input_gain, input_k = gain_ahead, temperature_k
        for gain, noise_k in _stages(part, carrier_hz):
            temperature_k += noise_k / gain_ahead  # [Friis 1944] equation 15
            gain_ahead *= gain
        parts.append(
            PartNoise(
                part=part.part,
                gain_db=float(to_db(gain_ahead / input_gain)),
                input_gain_db=float(to_db(input_gain)),
                input_temperature_k=input_k,
                added_temperature_k=temperature_k - input_k,
            )
        )
    return tuple(parts)


def receiver_loss_db(receiver: Part, carrier_hz: float) -> float:
    """Loss [dB] inside the receiver: by quantisation, and whatever else is given.

    Examples
    --------
    >>> receiver_loss_db(Part(part="receiver", quantisation="1-bit", implementation_loss_db=0.5), 1575.42e6)
    2.46
    """
    quantised_db = QUANTISATION_LOSS_DB[receiver.quantisation] if receiver.quantisation else 0.0
    return quantised_db + value_at_carrier(receiver.implementation_loss_db or 0.0, carrier_hz)


def _stages(part: Part, carrier_hz: float) -> list[tuple[float, float]]:
    """(gain, equivalent noise temperature [K]) of a part: of what it loses, then of what it amplifies."""
    stages = []
    if part.loss_db is not None:
        loss = float(to_ratio(value_at_carrier(part.loss_db, carrier_hz)))
        # A lossy part in thermal balance gives out what it takes in: (L - 1) times its own temperature.
        stages.append((1.0 / loss, (loss - 1.0) * part.physical_temperature_k))
    if part.gain_db is not None or part.noise_figure_db is not None:
        gain = float(to_ratio(value_at_carrier(part.gain_db or 0.0, carrier_hz)))
        noise_factor = float(to_ratio(value_at_carrier(part.noise_figure_db or 0.0, carrier_hz)))
        stages.append((gain, (noise_factor - 1.0) * REFERENCE_TEMPERATURE_K))
    return stages
