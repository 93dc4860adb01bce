"""What a chain with a wrong key or kind is told, word for word; purposes of a minimum C/N0."""

from collections.abc import Callable
from pathlib import Path

import pytest

from siteassess.errors import InputError
from siteassess.site_file.model import Part
from siteassess.site_file.read import read_site
from siteassess.tables import packaged_rows

WriteSite = Callable[..., Path]
CABLE, AMPLIFIER = "loss_db = 5.0", "gain_db = 40.0\nnoise_figure_db = 1.5"
RECEIVER = "noise_figure_db = 8.0\nimplementation_loss_db = 1.0"
KINDS = [row["kind"] for row in packaged_rows("link_budget/chain/parts.csv")]


def refusal(path: Path) -> str:
    with pytest.raises(InputError) as caught:
        read_site(path)
    return str(caught.value)


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        (CABLE, 'kind = "foam, 10mm"', 'chain[2].kind is "foam, 10mm"; did you mean foam, 10 mm?'),
        (
            CABLE,
            'kind = "foam, 10 mm"',
            'chain[2].length_m is missing; the kind "foam, 10 mm" needs it',
        ),
        (
            CABLE,
            'kind = "connector"\nlength_m = 2',
            'chain[2].length_m is 2.0; the kind "connector" has no loss by length',
        ),
        (CABLE, f"{CABLE}\nlength_m = -1", "chain[2].length_m is -1; it must lie from 0 to 1000"),
        (CABLE, f"{CABLE}\ncount = 0", "chain[2].count is 0; it must lie from 1 to 100"),
        (CABLE, f"{CABLE}\ncount = 1.5", "chain[2].count is 1.5; it must be a whole number from 1 to 100"),
        (
            CABLE,
            f"{CABLE}\ncount = 2",
            "chain[2].count is 2; it multiplies the loss of a kind; name the kind",
        ),
        (
            CABLE,
            'kind = "foam, 10 mm"\nlength_m = 3\ncount = 2',
            "chain[2].count is 2; it multiplies the loss of one part of the kind; here it must be 1",
        ),
        (
            CABLE,
            'kind = "connector"\ngain_db = 3',
            'chain[2].gain_db is 3.0; the kind "connector" has loss',
        ),
        (
            CABLE,
            'kind = "in-line amplifier"\nloss_db = { "1575.42" = 1, "1602" = 1 }',
            'chain[2].loss_db is a table; the kind "in-line amplifier" has gain',
        ),
        (
            CABLE,
            'kind = "receiver, geodetic"',
            'chain[2].kind is "receiver, geodetic"; only the last block may be the receiver',
        ),
        (RECEIVER, 'kind = "connector"', 'chain[3].kind is "connector"; it is no kind of receiver'),
        (
            RECEIVER,
            'kind = "receiver, geodetic"\nlength_m = 2',
            "chain[3].length_m is 2.0; the receiver has noise_figure_db and implementation_loss_db only",
        ),
        (
            CABLE,
            f'{CABLE}\nquantisation = "1-bit"',
            'chain[2].quantisation is "1-bit"; only the receiver has it',
        ),
        (
            RECEIVER,
            f'{RECEIVER}\nquantisation = "3-bit"',
            'chain[3].quantisation is "3-bit"; it must be "1-bit" or "2-bit"',
        ),
        (CABLE, f"{CABLE}\nmin_net_gain_db = 3", "chain[2].min_net_gain_db is 3.0; only the receiver has it"),
        (
            RECEIVER,
            f"{RECEIVER}\nmin_net_gain_db = 30\nmax_net_gain_db = 20",
            "chain[3].max_net_gain_db is 20.0; it must be at least min_net_gain_db, 30",
        ),
        (
            CABLE,
            f"{CABLE}\nsupply_current_ma = 3",
            "chain[2].supply_current_ma is 3.0; only a part with gain has it",
        ),
        (
            CABLE,
            'kind = "connector"\nmin_supply_voltage_v = 3',
            "chain[2].min_supply_voltage_v is 3.0; only a part with gain has it",
        ),
        (
            AMPLIFIER,
            f"{AMPLIFIER}\nmin_supply_voltage_v = 5\nmax_supply_voltage_v = 3",
            "chain[1].max_supply_voltage_v is 3.0; it must be at least min_supply_voltage_v, 5",
        ),
        (
            CABLE,
            f'{CABLE}\npasses_supply = "yes"',
            'chain[2].passes_supply is "yes"; it must be true or false',
        ),
        (
            "[require]",
            "[parts]\n[require]",
            "parts.file is missing; it must be a text in quotation marks",
        ),
        (
            "[require]",
            '[sky]\ntracked = "data"\n[require]',
            'sky.tracked is "data"; it must be "pilot" or "whole-signal"',
        ),
        (
            'pattern = "choke-ring"',
            'pattern = "choke-ring"\nunwanted_level_dbm = 90',
            "antenna.unwanted_level_dbm is 90; it must lie from -200 to 50",
        ),
        (
            "min_cn0_dbhz = 33",
            'min_cn0_dbhz = "carrier phase"',
            'require.min_cn0_dbhz is "carrier phase"; did you mean carrier-phase?',
        ),
        (
            "min_cn0_dbhz = 33",
            'min_cn0_dbhz = "navigation"',
            'require.min_cn0_dbhz is "navigation"; it must be a number, a table by signal, or a purpose:'
            " tracking, acquisition, carrier-phase or timing",
        ),
    ],
)
def test_one_mistake_has_one_message(write_site: WriteSite, old: str, new: str, message: str) -> None:
    assert refusal(write_site((old, new))) == f"site.toml: {message}"


def test_kind_that_resembles_none_is_told_them_all(write_site: WriteSite) -> None:
    *first, last = (f'"{kind}"' for kind in KINDS)
    assert refusal(write_site((CABLE, 'kind = "???"'))) == (
        f'site.toml: chain[2].kind is "???"; the kinds are {", ".join(first)} and {last}'
    )


@pytest.mark.parametrize("row", packaged_rows("verdict/purposes.csv"), ids=lambda row: row["purpose"])
def test_purpose_stands_for_its_number(write_site: WriteSite, row: dict[str, str]) -> None:
    site = read_site(write_site(("min_cn0_dbhz = 33", f'min_cn0_dbhz = "{row["purpose"]}"')))
    assert site.require.min_cn0_for("GPS L1 C/A") == float(row["min_cn0_dbhz"])


def test_purposes_ask_the_more_the_finer_they_are() -> None:
    limits = [float(row["min_cn0_dbhz"]) for row in packaged_rows("verdict/purposes.csv")]
    assert limits == sorted(limits)


def test_carrier_phase_purpose_holds_two_millimetres() -> None:
    # Authority: noise of a phase-locked loop, sqrt(B / c (1 + 1 / (2 T c))) rad (textbook, from memory), with
    # B = 15 Hz and T = 1 ms; 2.2 mm at 1575.42 MHz.
    from math import pi, sqrt

    ratio = 10.0**3.5
    phase_rad = sqrt(15.0 / ratio * (1.0 + 1.0 / (2.0 * 1e-3 * ratio)))
    assert phase_rad / (2.0 * pi) * 190.294 == pytest.approx(2.2, abs=0.05)
    assert {row["purpose"]: row["min_cn0_dbhz"] for row in packaged_rows("verdict/purposes.csv")}[
        "carrier-phase"
    ] == "35"


def test_block_without_a_kind_rests_on_nothing_but_itself() -> None:
    assert Part(part="cable", loss_db=1.0).rests_on == ""


def test_page_holds_the_tables_of_the_package() -> None:
    import runpy

    project = Path(__file__).parents[2]
    builder = runpy.run_path(str(project / "tests" / "builders" / "build_site_tables.py"))
    page = (project / "docs" / "site_file.md").read_text(encoding="utf-8")
    assert page == builder["with_tables"](page), "run tests/builders/build_site_tables.py"
