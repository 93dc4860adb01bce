"""The signal table against the interface documents."""

import math

import pytest

from siteassess.link_budget.power.signals import glonass_carrier_hz, read_signals
from siteassess.tables import packaged_header

# Guaranteed minima by orbit class [dBW]: IS-GPS-200F Table 3-Va, IS-GPS-705B Table 3-III (two components of
# -157.9), IS-GPS-800 Table 3.2-1, Galileo OS SIS ICD 2.1 Table 12, GLONASS ICD 5.1, BeiDou SIS ICDs.
GUARANTEED_DBW = {
    "GPS L1 C/A": {"MEO": -158.5},
    "GPS L1C": {"MEO": -157.0},
    "GPS L2C": {"MEO": -160.0},
    "GPS L5": {"MEO": -154.9},
    "Galileo E1": {"MEO": -157.25},
    "Galileo E5a": {"MEO": -155.25},
    "Galileo E5b": {"MEO": -155.25},
    "Galileo E6": {"MEO": -155.25},
    "GLONASS L1OF": {"MEO": -161.0},
    "GLONASS L2OF": {"MEO": -167.0},
    "BeiDou B1I": {"MEO": -163.0, "IGSO": -163.0, "GEO": -163.0},
    "BeiDou B1C": {"MEO": -159.0, "IGSO": -161.0},
    "BeiDou B2a": {"MEO": -156.0, "IGSO": -158.0},
    "BeiDou B3I": {"MEO": -163.0, "IGSO": -163.0, "GEO": -163.0},
}

# Multiples of 10.23 MHz, from the same documents.
MULTIPLES = {
    "GPS L1 C/A": 154,
    "GPS L1C": 154,
    "GPS L2C": 120,
    "GPS L5": 115,
    "Galileo E1": 154,
    "Galileo E5a": 115,
    "Galileo E5b": 118,
    "Galileo E6": 125,
    "BeiDou B1I": 152.6,
    "BeiDou B1C": 154,
    "BeiDou B2a": 115,
    "BeiDou B3I": 124,
}

HUNDREDTH_DB = 0.01


def test_guaranteed_minima_are_those_of_the_documents() -> None:
    assert {name: dict(signal.guaranteed_dbw) for name, signal in read_signals().items()} == GUARANTEED_DBW


@pytest.mark.parametrize("name", MULTIPLES)
def test_carriers_are_multiples_of_the_common_clock(name: str) -> None:
    assert read_signals()[name].carrier_hz == pytest.approx(MULTIPLES[name] * 10.23e6, abs=1.0)


def test_names_start_with_their_system() -> None:
    assert all(name.startswith(signal.system + " ") for name, signal in read_signals().items())


def test_tracked_component_of_l5_has_the_guarantee_of_one_component() -> None:
    # IS-GPS-705B Table 3-III, block IIF: -157.9 dBW for I5 and for Q5.
    l5 = read_signals()["GPS L5"]
    assert l5.guaranteed_dbw["MEO"] + l5.tracked_share_db == pytest.approx(-157.9, abs=2 * HUNDREDTH_DB)


def test_tracked_pilot_of_l1c_has_the_guarantee_of_the_pilot() -> None:
    # IS-GPS-800 Table 3.2-1: -158.25 dBW for L1Cp, three quarters of the whole.
    l1c = read_signals()["GPS L1C"]
    assert l1c.guaranteed_dbw["MEO"] + l1c.tracked_share_db == pytest.approx(-158.25, abs=HUNDREDTH_DB)


@pytest.mark.parametrize(
    ("name", "share"),
    [
        ("GPS L1 C/A", 1.0),
        ("GPS L1C", 0.75),  # IS-GPS-800: the pilot has 75 %
        ("GPS L2C", 0.5),
        ("Galileo E1", 0.5),
        ("GLONASS L1OF", 1.0),
        ("BeiDou B1I", 1.0),
        ("BeiDou B1C", 0.75),  # BDS-SIS-ICD-B1C: data to pilot 1 : 3
        ("BeiDou B2a", 0.5),
    ],
)
def test_tracked_share_follows_the_split_of_the_components(name: str, share: float) -> None:
    assert read_signals()[name].tracked_share_db == pytest.approx(10 * math.log10(share), abs=HUNDREDTH_DB)


def test_only_glonass_states_a_loss_in_the_atmosphere() -> None:
    # GLONASS ICD 5.1: 2 dB are in the guaranteed level.
    stated = {
        name: signal.atmosphere_included_db
        for name, signal in read_signals().items()
        if signal.atmosphere_included_db is not None
    }
    assert stated == {"GLONASS L1OF": 2.0, "GLONASS L2OF": 2.0}


@pytest.mark.parametrize(
    ("channel_0_hz", "channel", "carrier_hz"),
    [(1602e6, -7, 1598.0625e6), (1602e6, 6, 1605.375e6), (1246e6, -7, 1242.9375e6), (1246e6, 6, 1248.625e6)],
)
def test_glonass_channels_have_the_carriers_of_the_document(
    channel_0_hz: float, channel: int, carrier_hz: float
) -> None:
    # GLONASS ICD 5.1: 1602 + K 9/16 and 1246 + K 7/16 MHz.
    assert glonass_carrier_hz(channel_0_hz, channel) == pytest.approx(carrier_hz, abs=1.0)


@pytest.mark.parametrize("table", ["power/signals", "power/beam", "obstacles/fresnel"])
def test_link_budget_tables_say_where_they_come_from(table: str) -> None:
    assert {"source", "edition", "status"} <= packaged_header(f"link_budget/{table}.csv").keys()


def test_the_signal_table_cannot_be_changed() -> None:
    with pytest.raises(TypeError):
        read_signals()["GPS L1 C/A"].guaranteed_dbw["GEO"] = -150.0  # type: ignore[index]
