"""Noise of a chain of parts."""

import math

import numpy as np
import pytest

from siteassess.constants import BOLTZMANN_J_PER_K
from siteassess.link_budget.chain.receive_chain import cascade, value_at_carrier
from siteassess.site_file.model import Part

L1_HZ, L5_HZ = 1575.42e6, 1176.45e6
FIVE_MILLI_DB = 0.005
FIFTIETH_DB = 0.02
HUNDREDTH_DB = 0.01


def amplifier(gain_db: float, noise_figure_db: float) -> Part:
    return Part(part="amplifier", gain_db=gain_db, noise_figure_db=noise_figure_db)


def cable(loss_db: float, physical_temperature_k: float = 290.0) -> Part:
    return Part(part="cable", loss_db=loss_db, physical_temperature_k=physical_temperature_k)


def receiver(noise_figure_db: float) -> Part:
    return Part(part="receiver", noise_figure_db=noise_figure_db)


# Authority: worked example of a geodetic receiver's manual. Preamplifier 2.5 dB and 30 dB, cable 15 dB,
# receiver 10 dB give 3.14 dB (3.1447). The manual counts the cable as loss without noise: a cable at 0 K.
MANUAL = (amplifier(30.0, 2.5), cable(15.0, physical_temperature_k=0.0), receiver(10.0))


def test_noise_figure_of_a_receiver_manual() -> None:
    assert cascade(MANUAL, L1_HZ).noise_figure_db == pytest.approx(3.1447, abs=FIVE_MILLI_DB)
    assert cascade(MANUAL, L1_HZ).net_gain_db == pytest.approx(15.0)


def test_carrier_to_noise_density_of_a_receiver_manual() -> None:
    # Authority: the same manual's formula with -155 dBW and 130 K of antenna noise: 438.24 K, 47.18 dB-Hz.
    system_k = 130.0 + cascade(MANUAL, L1_HZ).temperature_k
    assert system_k == pytest.approx(438.24, abs=0.05)
    cn0_dbhz = -155.0 - 10.0 * math.log10(BOLTZMANN_J_PER_K * system_k)
    assert cn0_dbhz == pytest.approx(47.18, abs=FIFTIETH_DB)


def test_warm_cable_adds_its_own_noise() -> None:
    # Authority: a cable at 290 K and a receiver behind it are one part of 15 + 10 dB noise figure:
    # F = 10^0.25 + (10^2.5 - 1) / 10^3.
    noise_factor = 10.0**0.25 + (10.0**2.5 - 1.0) / 1e3
    warm = (amplifier(30.0, 2.5), cable(15.0), receiver(10.0))
    assert cascade(warm, L1_HZ).noise_figure_db == pytest.approx(10.0 * math.log10(noise_factor), abs=1e-9)


def test_textbook_receiver_front_end() -> None:
    # Authority: Pozar, Microwave Engineering, problem of a satellite-navigation receiver: -160 dBW at 0 dBi,
    # antenna 5 dB and 300 K, preamplifier 10 dB, line 25 dB at 290 K, C/N0 32 dB-Hz; solved for the noise
    # figure of the preamplifier: 12.62 dB. Inputs as published; the answer follows from them.
    system_k = 10.0 ** ((-160.0 + 5.0 - 32.0) / 10.0) / BOLTZMANN_J_PER_K
    chain = (amplifier(10.0, 12.62), cable(25.0), receiver(0.0))
    difference_db = 10.0 * math.log10((300.0 + cascade(chain, L1_HZ).temperature_k) / system_k)
    assert difference_db == pytest.approx(0.0, abs=FIFTIETH_DB)


@pytest.mark.parametrize("loss_db", [0.0, 0.5, 3.0, 15.0])
def test_line_at_290_k_has_its_loss_as_noise_figure(loss_db: float) -> None:
    # Authority: definition of the noise figure for a matched passive part at the reference temperature.
    assert cascade((cable(loss_db), receiver(0.0)), L1_HZ).noise_figure_db == pytest.approx(loss_db, abs=1e-9)


def test_half_power_at_a_hundred_kelvin() -> None:
    # Authority: thermal balance: half the power lost at 100 K adds 50 K behind it, 100 K at its input.
    half = cable(10.0 * math.log10(2.0), physical_temperature_k=100.0)
    assert cascade((half, receiver(0.0)), L1_HZ).temperature_k == pytest.approx(100.0)


def test_cascade_agrees_with_scikit_rf() -> None:
    # Authority: scikit-rf, noisy two-ports in cascade. Its passive networks carry no noise until it is set,
    # so the cable is given the noise figure of its loss.
    import skrf

    frequency = skrf.Frequency(1.5, 1.6, 3, unit="GHz")

    def two_port(gain_db: float, noise_figure_db: float) -> object:
        s = np.zeros((3, 2, 2), dtype=complex)
        s[:, 1, 0] = 10.0 ** (gain_db / 20.0)
        network = skrf.Network(frequency=frequency, s=s, z0=50.0)
        network.set_noise_a(
            frequency, nfmin_db=np.full(3, noise_figure_db), gamma_opt=np.zeros(3), rn=np.full(3, 1e-9)
        )
        return network

    parts = [(28.0, 1.8), (-6.0, 6.0), (12.0, 4.0), (-3.0, 3.0), (0.0, 9.0)]
    chained = two_port(*parts[0])
    for part in parts[1:]:
        chained = chained ** two_port(*part)  # type: ignore[operator]
    expected_db = 10.0 * np.log10(chained.nf(50.0)[1])  # type: ignore[attr-defined]
    chain = (amplifier(28.0, 1.8), cable(6.0), amplifier(12.0, 4.0), cable(3.0), receiver(9.0))
    assert cascade(chain, L1_HZ).noise_figure_db == pytest.approx(expected_db, abs=FIVE_MILLI_DB)
    assert cascade(chain, L1_HZ).net_gain_db == pytest.approx(31.0)


def test_receiver_alone_is_a_chain() -> None:
    alone = cascade((receiver(3.0),), L1_HZ)
    assert alone.noise_figure_db == pytest.approx(3.0)
    assert alone.net_gain_db == 0.0


def test_gain_ahead_makes_the_receiver_count_less() -> None:
    # Law: more gain ahead never raises the noise referred to the input.
    figures = [
        cascade((amplifier(gain_db, 2.0), cable(5.0), receiver(10.0)), L1_HZ).noise_figure_db
        for gain_db in (0.0, 10.0, 20.0, 30.0, 40.0)
    ]
    assert figures == sorted(figures, reverse=True)
    assert figures[-1] == pytest.approx(2.0, abs=HUNDREDTH_DB)


def test_values_by_carrier() -> None:
    table = {"1575.42": 5.0, "1176.45": 4.0}
    assert value_at_carrier(2.5, L1_HZ) == 2.5
    assert value_at_carrier(table, L1_HZ) == 5.0
    assert value_at_carrier(table, (L1_HZ + L5_HZ) / 2.0) == pytest.approx(4.5)
    assert value_at_carrier(table, 1.0e9) == 4.0
    assert value_at_carrier(table, 2.0e9) == 5.0
    assert value_at_carrier({"1575.42": 5.0}, L5_HZ) == 5.0


def test_chain_by_carrier() -> None:
    part = Part(part="cable", loss_db={"1176.45": 4.0, "1575.42": 5.0})
    assert cascade((part, receiver(0.0)), L5_HZ).net_gain_db == pytest.approx(-4.0)
    assert cascade((part, receiver(0.0)), L1_HZ).noise_figure_db == pytest.approx(5.0)
