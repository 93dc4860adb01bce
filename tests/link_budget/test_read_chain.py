"""From the chain of a site file to parts with all their values, and what stands in the way."""

from collections.abc import Callable
from pathlib import Path

import pytest

from siteassess import assess, read_site
from siteassess.assessment import assess_file
from siteassess.errors import InputError
from siteassess.link_budget.chain.read import read_chain
from siteassess.link_budget.chain.receive_chain import value_at_carrier

CABLE = 'part = "cable"\nloss_db = 5.0\n'
BY_KIND = 'part = "cable"\nkind = "foam, 10 mm"\nlength_m = 30\n'
PARTS = '[parts]\nfile = "parts.csv"\n\n[require]'

WriteSite = Callable[..., Path]


def refusal(path: Path) -> str:
    with pytest.raises(InputError) as caught:
        assess_file(path)
    return str(caught.value)


def test_chain_without_kinds_is_what_the_site_file_says(write_site: WriteSite) -> None:
    site = read_site(write_site())
    assert read_chain(site) == site.chain


def test_cable_by_kind_has_its_loss_at_every_carrier(write_site: WriteSite) -> None:
    site = read_site(write_site((CABLE, BY_KIND)))
    cable = read_chain(site)[1]
    assert isinstance(cable.loss_db, dict)
    assert set(cable.loss_db) == {"1575.42", "1602"}
    assert value_at_carrier(cable.loss_db, 1575.42e6) == pytest.approx(5.181, abs=0.001)


def test_filling_in_twice_changes_nothing(write_site: WriteSite) -> None:
    connectors = 'part = "connectors"\nkind = "connector"\ncount = 4\n'
    path = write_site((CABLE, connectors), ("[require]", PARTS))
    (path.parent / "parts.csv").write_text("kind,loss_db\nconnector,0.2\n", encoding="utf-8")
    site = read_site(path)
    chain = read_chain(site)
    assert chain[1].loss_db == pytest.approx(0.8)  # the site's own table goes first
    assert read_chain(site.model_copy(update={"chain": chain})) == chain


def test_kind_gives_the_same_as_its_values_by_hand(write_site: WriteSite) -> None:
    by_hand = 'part = "cable"\nloss_db = { "1575.42" = 5.18066, "1602.0" = 5.22724 }\n'
    by_kind = assess(read_site(write_site((CABLE, BY_KIND))))
    explicit = assess(read_site(write_site((CABLE, by_hand))))
    for one, other in zip(by_kind.budget.signals, explicit.budget.signals, strict=True):
        assert one.noise.system_temperature_k == pytest.approx(other.noise.system_temperature_k, abs=0.01)


def test_own_table_that_ends_before_the_signals_do(write_site: WriteSite) -> None:
    path = write_site((CABLE, 'part = "filter"\nkind = "filter"\n'), ("[require]", PARTS))
    text = "kind,carrier_mhz,loss_db\nfilter,1500,1\nfilter,1580,2\n"
    (path.parent / "parts.csv").write_text(text, encoding="utf-8")
    assert refusal(path) == (
        'parts.csv: kind "filter" has no value at 1602 MHz (GLONASS L1OF);'
        " its rows must span the carriers of the site's signals"
    )


def test_kind_that_neither_table_has(write_site: WriteSite) -> None:
    path = write_site((CABLE, 'part = "filter"\nkind = "my filtre"\n'), ("[require]", PARTS))
    (path.parent / "parts.csv").write_text("kind,loss_db\nmy filter,1\n", encoding="utf-8")
    assert refusal(path) == 'site.toml: chain[2].kind is "my filtre"; did you mean my filter?'


def test_mistakes_of_site_file_and_parts_table_are_told_together(write_site: WriteSite) -> None:
    path = write_site((CABLE, BY_KIND), ("[require]", PARTS), ("mast_height_m = 1.5", "mast_height_m = -1.0"))
    (path.parent / "parts.csv").write_text("kind,loss_db\nfilter,-1\n", encoding="utf-8")
    assert refusal(path) == (
        "site.toml: mount.mast_height_m is -1.0; it must be at least 0\n"
        "parts.csv: line 2, loss_db is -1; it must lie from 0 to 100"
    )


def test_parts_table_that_is_not_there(write_site: WriteSite) -> None:
    path = write_site(("[require]", PARTS))
    assert refusal(path).startswith("parts.csv: there is no such file; it was looked for as ")


NO_VOLTAGE = (
    "the voltage follows from supply_voltage_v behind the preamplifier, supply_current_ma of all parts"
    " with gain and loop_resistance_ohm of all parts between"
)


@pytest.mark.parametrize(
    ("limit", "reason"),
    [
        ("max_cable_loss_db_per_m = 0.2", "no part of the chain has length_m"),
        ("min_saturation_margin_db = 10", "no part of the chain has max_input_dbm"),
        ("min_supply_voltage_v = 4.5", NO_VOLTAGE),
        ("max_supply_voltage_v = 5.5", NO_VOLTAGE),
    ],
)
def test_limit_without_a_value_to_hold_it_against(write_site: WriteSite, limit: str, reason: str) -> None:
    path = write_site(("[require]", f"[require]\n{limit}"))
    key = limit.partition(" ")[0]
    assert refusal(path) == f"site.toml: require.{key} cannot be held against anything; {reason}"


def test_order_of_a_chain_without_gain(write_site: WriteSite) -> None:
    path = write_site(
        ('part = "preamplifier"\ngain_db = 40.0\nnoise_figure_db = 1.5\n', 'part = "pad"\nloss_db = 1.0\n'),
        ("[require]", "[require]\nmax_cn0_lost_before_preamplifier_db = 1"),
    )
    assert refusal(path) == (
        "site.toml: require.max_cn0_lost_before_preamplifier_db cannot be held against anything;"
        " no part of the chain has gain"
    )
