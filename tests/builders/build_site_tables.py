"""Writes the tables of docs/site_file.md that repeat packaged ones: kinds of parts, instruments, purposes.

Run it from the project folder after a change of those tables:

    python tests/builders/build_site_tables.py
"""

from pathlib import Path

from siteassess.link_budget.chain.parts import CABLE_CHECK_HZ, PartKind, cable_loss_db, part_kinds
from siteassess.tables import packaged_rows

PAGE = Path("docs/site_file.md")


def kinds_table() -> str:
    """Kinds of parts, each with what it does and where that comes from."""
    description = {row["kind"]: row["description"] for row in packaged_rows("link_budget/chain/parts.csv")}
    rows = [
        f"| `{name}` | {description[name]} | {_does(kind)} | {kind.rests_on} |"
        for name, kind in part_kinds().items()
    ]
    return "\n".join(["| kind | what it is | what it does | rests on |", "| --- | --- | --- | --- |", *rows])


def _does(kind: PartKind) -> str:
    if kind.k1_db_per_100m is not None:
        loss_db = cable_loss_db(kind.k1_db_per_100m, kind.k2_db_per_100m or 0.0, 100.0, CABLE_CHECK_HZ)
        resistance = "" if kind.ohm_per_100m is None else f", {kind.ohm_per_100m:g} ohm per 100 m"
        return f"{loss_db:.1f} dB per 100 m{resistance}"
    values = kind.values
    told = [f"{values[key]:g} dB of {word}" for key, word in _LEVELS.items() if key in values]
    if "min_supply_voltage_v" in values:
        told.append(f"{values['min_supply_voltage_v']:g} to {values['max_supply_voltage_v']:g} V")
    told += [f"{values[key]:g} {unit}" for key, unit in _SUPPLY.items() if key in values]
    return ", ".join(told)


_LEVELS = {"loss_db": "loss", "gain_db": "gain", "noise_figure_db": "noise figure"}
_SUPPLY = {"supply_current_ma": "mA", "supply_voltage_v": "V toward the antenna"}


def purposes_table() -> str:
    """Purposes, each with its minimum C/N0 and the reason for it."""
    rows = []
    for row in packaged_rows("verdict/purposes.csv"):
        rests_on = f"{row['source']} ({row['status']})"
        rows.append(f"| `{row['purpose']}` | {row['min_cn0_dbhz']} dB-Hz | {row['reason']} | {rests_on} |")
    return "\n".join(["| purpose | minimum | why | rests on |", "| --- | --- | --- | --- |", *rows])


def instruments_table() -> str:
    """Classes of instruments, each with its errors and where they come from."""
    rows = [
        f"| `{row['instrument']}` | {row['azimuth_error_deg']} deg | {row['elevation_error_deg']} deg "
        f"| {row['distance_error_m']} m | {row['source']} ({row['status']}) |"
        for row in packaged_rows("verdict/uncertainty/instrument_classes.csv")
    ]
    head = "| instrument | azimuth | elevation | distance | rests on |"
    return "\n".join([head, "| --- | --- | --- | --- | --- |", *rows])


def with_tables(page: str) -> str:
    """The page with its tables brought up to date."""
    tables = {"kinds": kinds_table(), "instruments": instruments_table(), "purposes": purposes_table()}
    for name, table in tables.items():
        start, end = f"<!-- table: {name} -->\n", "<!-- end of table -->"
        before, _, rest = page.partition(start)
        assert rest, f"the page has no marker {start}"
        page = f"{before}{start}\n{table}\n\n{end}{rest.partition(end)[2]}"
    return page


if __name__ == "__main__":
    PAGE.write_text(with_tables(PAGE.read_text(encoding="utf-8")), encoding="utf-8")
