"""What a chain is held against, and laws that every chain keeps."""

import math
from types import SimpleNamespace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from siteassess.constants import BOLTZMANN_J_PER_K
from siteassess.link_budget.chain.limits import (
    cable_losses_db_per_m,
    cn0_lost_before_preamplifier_db,
    saturation_margins,
)
from siteassess.link_budget.chain.receive_chain import cascade, part_noises
from siteassess.site_file.model import Part

L1_HZ = 1575.42e6
HUNDREDTH_DB = 0.01

losses_db = st.floats(0.0, 40.0)
figures_db = st.floats(0.0, 20.0)
gains_db = st.floats(0.0, 60.0)
temperatures_k = st.floats(0.0, 400.0)


def amplifier(gain_db: float, noise_figure_db: float, **more: object) -> Part:
    return Part(part="amplifier", gain_db=gain_db, noise_figure_db=noise_figure_db, **more)


def line(loss_db: float, physical_temperature_k: float = 290.0, **more: object) -> Part:
    return Part(part="cable", loss_db=loss_db, physical_temperature_k=physical_temperature_k, **more)


def receiver(noise_figure_db: float, **more: object) -> Part:
    return Part(part="receiver", noise_figure_db=noise_figure_db, **more)


def noise_of(chain: tuple[Part, ...], antenna_k: float) -> SimpleNamespace:
    system_k = antenna_k + cascade(chain, L1_HZ).temperature_k
    return SimpleNamespace(carrier_hz=L1_HZ, antenna_temperature_k=antenna_k, system_temperature_k=system_k)


@given(losses_db, losses_db, temperatures_k, gains_db, figures_db, figures_db)
@settings(deadline=None)
def test_more_loss_ahead_of_the_preamplifier_never_helps(
    loss_db: float, more_db: float, line_k: float, gain_db: float, first_db: float, last_db: float
) -> None:
    # Law: thermodynamics. Nothing passive ahead raises the ratio of signal to noise.
    def temperature_k(ahead_db: float) -> float:
        chain = (line(ahead_db, line_k), amplifier(gain_db, first_db), receiver(last_db))
        return cascade(chain, L1_HZ).temperature_k

    more_k, less_k = temperature_k(min(loss_db + more_db, 100.0)), temperature_k(loss_db)
    assert more_k >= less_k - 1e-9 * less_k


@given(st.permutations(["amplifier", "cable", "silent", "silent", "silent"]))
@settings(deadline=None)
def test_swapping_parts_without_noise_and_loss_changes_nothing(order: list[str]) -> None:
    parts = {"amplifier": amplifier(25.0, 1.5), "cable": line(6.0), "silent": line(0.0, 0.0)}
    chain = (*(parts[name] for name in order), receiver(8.0))
    bare = (*(parts[name] for name in order if name != "silent"), receiver(8.0))
    assert cascade(chain, L1_HZ).temperature_k == pytest.approx(cascade(bare, L1_HZ).temperature_k, rel=1e-12)


@given(st.lists(st.tuples(gains_db, figures_db), min_size=1, max_size=6), figures_db)
@settings(deadline=None)
def test_parts_add_up_to_the_cascade(stages: list[tuple[float, float]], last_db: float) -> None:
    chain = (*(amplifier(gain_db, figure_db) for gain_db, figure_db in stages), receiver(last_db))
    parts, whole = part_noises(chain, L1_HZ), cascade(chain, L1_HZ)
    assert sum(part.added_temperature_k for part in parts) == pytest.approx(whole.temperature_k, rel=1e-9)
    assert sum(part.gain_db for part in parts[:-1]) == pytest.approx(whole.net_gain_db, abs=1e-9)
    assert parts[-1].gain_db == 0.0


def test_late_preamplifier_costs_what_stands_ahead_of_it() -> None:
    # Hand calculation: with antenna and line at 290 K and gain enough behind, every decibel ahead costs one:
    # T = 290 L F against 290 F.
    chain = (line(13.3), amplifier(90.0, 1.5), receiver(8.0))
    lost_db = cn0_lost_before_preamplifier_db(chain, noise_of(chain, 290.0))
    assert lost_db == pytest.approx(13.3, abs=HUNDREDTH_DB)
    # With an antenna of 100 K the same line costs more: (100 + 290 (L F - 1)) over (100 + 290 (F - 1)).
    cold_db = cn0_lost_before_preamplifier_db(chain, noise_of(chain, 100.0))
    line_ratio, factor = 10.0**1.33, 10.0**0.15
    expected = (100.0 + 290.0 * (line_ratio * factor - 1.0)) / (100.0 + 290.0 * (factor - 1.0))
    assert cold_db == pytest.approx(10.0 * math.log10(expected), abs=HUNDREDTH_DB)


def test_first_preamplifier_costs_nothing_and_none_has_no_cost() -> None:
    first = (amplifier(30.0, 2.0), line(10.0), receiver(8.0))
    assert cn0_lost_before_preamplifier_db(first, noise_of(first, 100.0)) == 0.0
    passive = (line(10.0), receiver(8.0))
    assert cn0_lost_before_preamplifier_db(passive, noise_of(passive, 100.0)) is None


def test_loss_per_metre_of_what_has_a_length() -> None:
    chain = (line(3.0, length_m=20.0), line(1.0), line({"1575.42": 5.0}, length_m=10.0), receiver(8.0))
    assert cable_losses_db_per_m(chain) == (("cable", 0.15), ("cable", 0.5))


def test_noise_alone_at_the_input_of_a_receiver() -> None:
    # Hand calculation: k x 290 K x 187 MHz = -91.26 dBm; with 40 dB ahead, whose own noise is not there,
    # -51.26 dBm.
    chain = (amplifier(40.0, 0.0), receiver(8.0, max_input_dbm=-30.0))
    (margin,) = saturation_margins(chain, noise_of(chain, 290.0), None)
    expected_dbm = 10.0 * math.log10(BOLTZMANN_J_PER_K * 290.0 * 187e6) + 30.0 + 40.0
    assert expected_dbm == pytest.approx(-51.26, abs=HUNDREDTH_DB)
    assert margin.level_dbm == pytest.approx(expected_dbm, abs=1e-9)
    assert margin.margin_db == pytest.approx(21.26, abs=HUNDREDTH_DB)


def test_filters_weaken_a_transmitter_before_their_own_part_and_all_behind() -> None:
    # Hand calculation: -10 dBm, less 30 dB, is -40 dBm at the first part; 20 dB of gain bring it to -20 dBm.
    chain = (
        amplifier(20.0, 2.0, max_input_dbm=-25.0, out_of_band_rejection_db=30.0),
        receiver(8.0, max_input_dbm=-25.0),
    )
    first, last = saturation_margins(chain, noise_of(chain, 100.0), -10.0)
    assert (first.level_dbm, first.margin_db) == pytest.approx((-40.0, 15.0), abs=HUNDREDTH_DB)
    assert (last.level_dbm, last.margin_db) == pytest.approx((-20.0, -5.0), abs=HUNDREDTH_DB)
