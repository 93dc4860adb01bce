"""Noise at the antenna port: what the antenna picks up, and what the chain adds."""

from collections.abc import Sequence

from siteassess.antenna.energy import efficiency
from siteassess.antenna.mount import mounted_gain_dbic
from siteassess.antenna.pattern import GainPattern
from siteassess.constants import BOLTZMANN_J_PER_K
from siteassess.decibels import to_db
from siteassess.horizon.skyline import Skyline
from siteassess.link_budget.chain.receive_chain import ChainNoise, cascade, part_noises, receiver_loss_db
from siteassess.link_budget.noise.antenna_noise import antenna_noise
from siteassess.site_file.model import Mount, Part

__all__ = ["chain_noise"]


def chain_noise(
    chain: Sequence[Part], pattern: GainPattern, mount: Mount, skyline: Skyline, carrier_hz: float
) -> ChainNoise:
    """Noise of a site at one carrier, referred to the antenna port.

    Parameters
    ----------
    chain : sequence of Part
        From the antenna port on; the last part is the receiver.
    pattern, mount : GainPattern, Mount
        The antenna and how it stands.
    skyline : Skyline
        What hides the sky.
    carrier_hz : float
        Carrier [Hz].

    References
    ----------
    [Friis 1944] Noise figures of radio receivers.
    """
    parts = cascade(chain, carrier_hz)
    antenna = antenna_noise(pattern, mount, skyline, carrier_hz)
    system_k = antenna.temperature_k + parts.temperature_k
    zenith_dbic = float(mounted_gain_dbic(pattern, mount, 0.0, 90.0, carrier_hz))
    return ChainNoise(
        carrier_hz=carrier_hz,
        antenna_temperature_k=antenna.temperature_k,
        chain_temperature_k=parts.temperature_k,
        system_temperature_k=system_k,
        noise_figure_db=parts.noise_figure_db,
        net_gain_db=parts.net_gain_db,
        gain_over_temperature_db_per_k=zenith_dbic - float(to_db(system_k)),
        noise_density_dbw_per_hz=float(to_db(BOLTZMANN_J_PER_K * system_k)),
        implementation_loss_db=receiver_loss_db(chain[-1], carrier_hz),
        antenna_efficiency=efficiency(pattern, carrier_hz),
        parts=part_noises(chain, carrier_hz),
        antenna=antenna,
    )
