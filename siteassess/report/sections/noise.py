"""Section on noise: how much, where it comes from, and what the surroundings cost."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import decibels, number, percent
from siteassess.report.pieces import Section, Table

if TYPE_CHECKING:
    from siteassess.assessment import Assessment
    from siteassess.link_budget.chain.receive_chain import ChainNoise

__all__ = ["noise_section"]


def noise_section(assessment: Assessment) -> Section:
    """Noise by carrier, with the sky as bright as the antenna sees it."""
    noises = tuple({budget.noise.carrier_hz: budget.noise for budget in assessment.budget.signals}.values())
    first_mhz = number(noises[0].carrier_hz / 1e6, 2)
    return Section(
        key="noise",
        heading="Noise",
        sentences=(_cost(noises),),
        figure="noise-map",
        figure_caption=(
            f"Left: the sky as bright as it looks from the antenna at {first_mhz} MHz, north up, the zenith "
            "in the centre. Obstacles and leaves glow at their own temperature where the sky would be cold. "
            "Right: the noise that the antenna picks up, by source; the upright line is the same antenna "
            "with nothing in sight."
        ),
        tables=(_sources_table(noises), _noise_table(noises)),
    )


def _cost(noises: tuple[ChainNoise, ...]) -> str:
    dearest = max(noises, key=lambda noise: noise.surroundings_cost_db)
    warmer_k = dearest.antenna_temperature_k - dearest.antenna.open_site_k
    return (
        f"What stands round the antenna makes it {number(warmer_k)} K warmer than an open site would. Its "
        f"noise costs {number(dearest.surroundings_cost_db, 2)} dB of C/N0 at "
        f"{number(dearest.carrier_hz / 1e6, 2)} MHz, whatever the direction of the satellite."
    )


def _sources_table(noises: tuple[ChainNoise, ...]) -> Table:
    return Table(
        caption="Noise of the antenna by source, in kelvins, and what it costs against an open site.",
        header=(
            "Carrier, MHz",
            "Open sky",
            "Leaves",
            "Obstacles",
            "Ground",
            "Own loss",
            "Antenna",
            "Open site",
            "C/N0 cost, dB",
        ),
        rows=tuple(
            (
                number(noise.carrier_hz / 1e6, 3),
                *(number(part_k) for part_k in _sources_k(noise)),
                number(noise.antenna_temperature_k),
                number(noise.antenna.open_site_k),
                number(noise.surroundings_cost_db, 2),
            )
            for noise in noises
        ),
        align="rrrrrrrrr",
    )


def _sources_k(noise: ChainNoise) -> tuple[float, ...]:
    own = noise.antenna
    return own.sky_k, own.leaves_k, own.obstacles_k, own.ground_k, own.loss_k


def _noise_table(noises: tuple[ChainNoise, ...]) -> Table:
    return Table(
        caption=(
            "Noise referred to the antenna port. "
            "Efficiency: mean of co- plus cross-polar gain over the sphere."
        ),
        header=(
            "Carrier, MHz",
            "Antenna, K",
            "Chain, K",
            "System, K",
            "Noise figure, dB",
            "N0, dBW/Hz",
            "Net gain, dB",
            "Efficiency",
        ),
        rows=tuple(
            (
                number(noise.carrier_hz / 1e6, 3),
                number(noise.antenna_temperature_k),
                number(noise.chain_temperature_k),
                number(noise.system_temperature_k),
                number(noise.noise_figure_db, 2),
                number(noise.noise_density_dbw_per_hz, 2),
                decibels(noise.net_gain_db),
                percent(noise.antenna_efficiency),
            )
            for noise in noises
        ),
        align="rrrrrrrr",
    )
