"""Findings about the chain, and their words."""

from types import SimpleNamespace

import pytest

from siteassess.link_budget.chain.receive_chain import cascade
from siteassess.site_file.model import Part, Requirements
from siteassess.verdict.findings.chain import chain_findings
from siteassess.verdict.verdict import Finding

L1_HZ, L5_HZ = 1575.42e6, 1176.45e6
PREAMPLIFIER = Part(
    part="preamplifier",
    gain_db=40.0,
    noise_figure_db=1.5,
    supply_current_ma=60.0,
    min_supply_voltage_v=4.5,
    max_supply_voltage_v=5.5,
)
CABLE = Part(
    part="cable",
    loss_db={"1176.45": 8.0, "1575.42": 10.0},
    length_m=60.0,
    loop_resistance_ohm=5.0,
)
RECEIVER = Part(part="receiver", noise_figure_db=8.0, supply_voltage_v=5.0)
SOUND = (PREAMPLIFIER, CABLE, RECEIVER)


def findings(*chain: Part, unwanted_level_dbm: float | None = None, **require: float) -> dict[str, Finding]:
    noises = []
    for carrier_hz in (L5_HZ, L1_HZ):
        parts = cascade(chain, carrier_hz)
        noises.append(
            SimpleNamespace(
                carrier_hz=carrier_hz,
                antenna_temperature_k=100.0,
                system_temperature_k=100.0 + parts.temperature_k,
                net_gain_db=parts.net_gain_db,
            )
        )
    asked = Requirements(elevation_mask_deg=10.0, min_cn0_dbhz=35.0, **require)
    return {
        finding.criterion: finding for finding in chain_findings(asked, chain, noises, unwanted_level_dbm)
    }


def test_sound_chain_meets_everything_that_is_known_of_it() -> None:
    found = findings(*SOUND)
    assert {key: finding.outcome for key, finding in found.items()} == dict.fromkeys(
        (
            "min_net_gain_db",
            "max_net_gain_db",
            "max_cn0_lost_before_preamplifier_db",
            "max_cable_loss_db_per_m",
            "min_supply_voltage_v",
            "max_supply_voltage_v",
        ),
        "met",
    )
    assert not any(finding.required for finding in found.values())
    assert found["min_net_gain_db"].value == pytest.approx(30.0)
    assert found["max_net_gain_db"].value == pytest.approx(32.0)
    assert found["max_net_gain_db"].reason == (
        "Gain ahead of the receiver at 1176.45 MHz, the carrier where it is highest."
    )


def test_limit_comes_from_site_file_then_part_then_table() -> None:
    window = RECEIVER.model_copy(update={"min_net_gain_db": 31.0})
    by_table = findings(*SOUND)["min_net_gain_db"]
    by_part = findings(PREAMPLIFIER, CABLE, window)["min_net_gain_db"]
    by_file = findings(PREAMPLIFIER, CABLE, window, min_net_gain_db=20.0)["min_net_gain_db"]
    assert (by_table.limit, by_table.required, by_table.outcome) == (15.0, False, "met")
    assert by_table.source == "15 to 20 dB make the receiver's own noise count little, common practice"
    assert (by_part.limit, by_part.source, by_part.required) == (31.0, "the receiver's own window", False)
    assert by_part.outcome == "missed"
    assert (by_file.limit, by_file.source, by_file.required) == (20.0, "site file", True)
    assert by_file.outcome == "met"


def test_preamplifier_behind_the_cable_is_named_with_its_cost() -> None:
    found = findings(CABLE, PREAMPLIFIER, RECEIVER)["max_cn0_lost_before_preamplifier_db"]
    assert found.outcome == "missed"
    # Hand calculation, Friis: 100 + 290 (10 x 1.4125 - 1) + 1540 / 1000 over
    # 100 + 290 (1.4125 - 1) + 290 x 9 / 10000 + 1540 / 1000 K.
    assert found.value == pytest.approx(12.47, abs=0.01)
    assert found.reason == (
        "preamplifier stands behind cable; at the antenna port it would give 12.5 dB more C/N0 at"
        " 1575.42 MHz."
    )


def test_thin_cable_is_held_against_the_published_limit() -> None:
    thin = CABLE.model_copy(update={"length_m": 30.0})
    found = findings(PREAMPLIFIER, thin, RECEIVER)["max_cable_loss_db_per_m"]
    assert found.value == pytest.approx(1.0 / 3.0)
    assert (found.outcome, found.limit) == ("missed", 0.2)
    assert found.source == "IGS CORS Guidelines 1.1.0, cable"
    assert found.reason == "Loss of cable at 1575.42 MHz."


def test_voltage_is_held_against_the_range_of_the_preamplifier() -> None:
    far = CABLE.model_copy(update={"loop_resistance_ohm": 10.0})
    found = findings(PREAMPLIFIER, far, RECEIVER)["min_supply_voltage_v"]
    assert found.value == pytest.approx(4.4)
    assert (found.outcome, found.limit, found.source) == ("missed", 4.5, "the part's own range")
    assert found.reason == "Voltage at preamplifier, behind what the current loses on the way."
    blocked = CABLE.model_copy(update={"passes_supply": False})
    assert findings(PREAMPLIFIER, blocked, RECEIVER)["min_supply_voltage_v"].reason == (
        "No voltage reaches preamplifier: cable blocks direct current."
    )
    high = RECEIVER.model_copy(update={"supply_voltage_v": 12.0})
    assert findings(PREAMPLIFIER, CABLE, high)["max_supply_voltage_v"].outcome == "missed"


def test_strong_transmitter_saturates() -> None:
    weak = RECEIVER.model_copy(update={"max_input_dbm": -30.0})
    quiet = findings(PREAMPLIFIER, CABLE, weak)["min_saturation_margin_db"]
    loud = findings(PREAMPLIFIER, CABLE, weak, unwanted_level_dbm=-60.0)["min_saturation_margin_db"]
    assert quiet.outcome == "met"
    # Hand calculation: k x 220 K x 187 MHz is -92.5 dBm; 32 dB of gain stand ahead at the lower carrier.
    assert quiet.reason == "-60.5 dBm reach receiver: noise of the navigation bands alone."
    assert loud.reason == (
        "-28.0 dBm reach receiver: noise of the navigation bands, and other transmitters, -60 dBm at the"
        " antenna port."
    )
    assert (loud.outcome, loud.limit) == ("missed", 10.0)
    assert loud.value == pytest.approx(-2.0, abs=0.01)


def test_chain_without_gain_has_no_order_and_no_supply() -> None:
    assert set(findings(CABLE, RECEIVER)) == {
        "min_net_gain_db",
        "max_net_gain_db",
        "max_cable_loss_db_per_m",
    }
