"""The tables that come with the package: their sources, their units, and that they are whole."""

import csv
import math
from pathlib import Path

import numpy as np
import pytest

import siteassess
from siteassess.tables import packaged_columns, packaged_header, packaged_rows

PACKAGE = Path(siteassess.__file__).parent
# A starter site is an example for users, not a table.
TABLES = sorted(
    path.relative_to(PACKAGE).as_posix()
    for path in PACKAGE.rglob("*.csv")
    if "starter" not in path.parent.name
)

UNIT_SUFFIXES = (
    *("_deg", "_m", "_s", "_hz", "_k", "_db", "_dbi", "_dbic", "_dbw", "_dbhz", "_share"),
    *("_per_day", "_utc", "_per_100m", "_v", "_ma"),
)
# Numbers that have no unit, or that carry it in the column beside them.
WITHOUT_UNIT = {"slot", "advice_limit", "value", "order", "f", "g"}

# A blank cell means something in these columns; everywhere else it is a gap.
MAY_BE_BLANK = {
    "link_budget/power/beam.csv": {"gps_l1_ca_dbw", "gps_l1_p_dbw", "gps_l2_p_dbw"},  # peaks lie apart
    "link_budget/chain/parts.csv": {  # a kind has what its construction has
        *("k1_db_per_100m", "k2_db_per_100m", "ohm_per_100m", "loss_db", "gain_db", "noise_figure_db"),
        *("supply_voltage_v", "supply_current_ma", "min_supply_voltage_v", "max_supply_voltage_v"),
        "passes_supply",
    },
    "link_budget/power/signals.csv": {"meo_dbw", "igso_dbw", "geo_dbw", "atmosphere_included_db"},
    "orbits/beidou.csv": {
        *("node_deg", "argument_of_latitude_deg", "crossing_longitude_deg"),
        *("nodal_period_s", "held_revolutions_per_day"),
    },
    "verdict/criteria.csv": {"unit", "advice_limit", "part_of"},
}
PATTERNS = [name for name in TABLES if "gain_dbic" in packaged_rows(name)[0]]

# Satellite navigation bands of the Radio Regulations: 1164 to 1300 and 1559 to 1610 MHz (value from memory).
NAVIGATION_BANDS_HZ = ((1164e6, 1300e6), (1559e6, 1610e6))


def is_number(cell: str) -> bool:
    try:
        return math.isfinite(float(cell))
    except ValueError:
        return False


def number_columns(name: str) -> list[str]:
    rows = packaged_rows(name)
    filled = {column: [row[column] for row in rows if row[column]] for column in rows[0]}
    return [column for column, cells in filled.items() if cells and all(map(is_number, cells))]


@pytest.mark.parametrize("name", TABLES)
def test_table_says_where_it_is_from(name: str) -> None:
    header = packaged_header(name)
    assert header.get("source"), "no # source: line"
    assert header.get("edition"), "no # edition: line"
    status = header.get("status", "")
    assert any(word in status for word in ("seen", "memory", "computed", "own default")), status


@pytest.mark.parametrize("name", TABLES)
def test_table_is_plain_utf8_with_one_header_and_even_rows(name: str) -> None:
    content = (PACKAGE / name).read_bytes()
    assert b"\r" not in content
    assert not content.startswith(b"\xef\xbb\xbf")
    lines = [line for line in content.decode("utf-8").splitlines() if not line.startswith("#")]
    widths = {len(cells) for cells in csv.reader(lines)}
    assert len(widths) == 1, f"rows of {sorted(widths)} cells"
    assert len(lines) > 1


@pytest.mark.parametrize("name", TABLES)
def test_number_columns_carry_their_unit(name: str) -> None:
    unnamed = [
        column
        for column in number_columns(name)
        if column not in WITHOUT_UNIT and not column.endswith(UNIT_SUFFIXES)
    ]
    assert not unnamed


@pytest.mark.parametrize("name", TABLES)
def test_table_has_no_gaps_where_none_is_allowed(name: str) -> None:
    allowed = MAY_BE_BLANK.get(name, set())
    rows = packaged_rows(name)
    gaps = {column for row in rows for column, cell in row.items() if not cell.strip()}
    assert gaps <= allowed
    assert allowed <= set(rows[0]), "a column that may be blank is not there"


@pytest.mark.parametrize("name", TABLES)
def test_rows_are_told_apart_by_their_key(name: str) -> None:
    rows = packaged_rows(name)
    key = [next(iter(rows[0])), *(column for column in ("arrangement", "key") if column in rows[0])]
    keys = [tuple(row[column] for column in key) for row in rows]
    assert len(set(keys)) == len(keys)


@pytest.mark.parametrize("name", [*PATTERNS, "link_budget/power/beam.csv"])
def test_elevations_ascend(name: str) -> None:
    assert np.all(np.diff(packaged_columns(name)["elevation_deg"]) > 0)


@pytest.mark.parametrize("name", PATTERNS)
def test_pattern_covers_the_sphere_in_even_steps(name: str) -> None:
    elevation_deg = packaged_columns(name)["elevation_deg"]
    assert elevation_deg[0] == -90.0
    assert elevation_deg[-1] == 90.0
    assert len(set(np.diff(elevation_deg))) == 1


def test_beam_curves_reach_from_5_degrees_to_the_zenith() -> None:
    table = packaged_columns("link_budget/power/beam.csv")
    assert table["elevation_deg"][[0, -1]].tolist() == [5.0, 90.0]
    for column, level_dbw in table.items():
        assert np.all(np.isfinite(level_dbw[[0, -1]])), column


def test_signals_lie_in_the_navigation_bands_and_are_sent_by_somebody() -> None:
    beams = {"flat", *packaged_columns("link_budget/power/beam.csv")}
    for row in packaged_rows("link_budget/power/signals.csv"):
        carrier_hz = float(row["carrier_hz"])
        assert any(low <= carrier_hz <= high for low, high in NAVIGATION_BANDS_HZ), row["signal"]
        assert row["beam"] in beams
        assert any(row[column] for column in ("meo_dbw", "igso_dbw", "geo_dbw"))
        assert float(row["tracked_share_db"]) <= 0.0


def test_every_signal_has_satellites_in_the_constellation_tables() -> None:
    for row in packaged_rows("link_budget/power/signals.csv"):
        satellites = packaged_rows(f"orbits/{row['system'].lower()}.csv")
        classes = {satellite["orbit_class"].lower() for satellite in satellites}
        assert {name for name in ("meo", "igso", "geo") if row[f"{name}_dbw"]} <= classes


def test_criteria_say_how_they_are_met() -> None:
    for row in packaged_rows("verdict/criteria.csv"):
        assert row["unit"] in {"share", "deg", "m", "s", "satellites", "dB", "dB-Hz", "dB/m", "V", ""}
        assert row["sense"] in {"at least", "at most"}


@pytest.mark.parametrize("name", ["verdict/criteria.csv", "verdict/criteria_sets.csv"])
def test_every_criterion_has_a_source_and_a_status(name: str) -> None:
    for row in packaged_rows(name):
        assert row["source"], row["key"]
        assert any(word in row["status"] for word in ("seen", "memory", "own default")), row["key"]


def test_limits_that_take_part_in_a_finding_name_it() -> None:
    rows = {row["key"]: row for row in packaged_rows("verdict/criteria.csv")}
    for row in rows.values():
        assert not row["part_of"] or not rows[row["part_of"]]["part_of"]


def test_sets_hold_limits_of_the_criteria_table_and_a_mask_each() -> None:
    keys: dict[str, set[str]] = {}
    for row in packaged_rows("verdict/criteria_sets.csv"):
        keys.setdefault(row["set"], set()).add(row["key"])
    criteria = {row["key"] for row in packaged_rows("verdict/criteria.csv")}
    assert list(keys) == ["igs", "ngs-mark", "timing"]
    for of_set in keys.values():
        assert of_set - criteria == {"elevation_mask_deg"}
