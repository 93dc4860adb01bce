"""The parts between the antenna port and the receiver, and the noise they add."""

from dataclasses import dataclass

__all__ = ["ChainNoise"]


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
    noise_density_dbw_per_hz : float
        k times the system temperature.
    implementation_loss_db : float
        Loss inside the receiver, by quantisation and filtering.
    antenna_efficiency : float
        Mean of co- plus cross-polar gain over the sphere.
    """

    carrier_hz: float
    antenna_temperature_k: float
    chain_temperature_k: float
    system_temperature_k: float
    noise_figure_db: float
    net_gain_db: float
    noise_density_dbw_per_hz: float
    implementation_loss_db: float
    antenna_efficiency: float
