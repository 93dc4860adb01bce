"""The site file's page and schema say what the records say."""

import json
import re
from importlib import resources
from pathlib import Path
from typing import Any

import pytest

from siteassess.site_file.model import Requirements
from siteassess.site_file.schema import site_schema
from siteassess.tables import packaged_rows

PAGE = (Path(__file__).parents[2] / "docs" / "site_file.md").read_text(encoding="utf-8")
SCHEMA = site_schema()
TABLES = {
    "[site]": "Place",
    "[mount]": "Mount",
    "[antenna]": "AntennaChoice",
    "[parts]": "PartsChoice",
    "[[chain]]": "Part",
    "[[horizon]]": "HorizonSource",
    "[foliage]": "Foliage",
    "[sky]": "SkyModel",
    "[require]": "Requirements",
}
KEYS = [(heading, key) for heading, record in TABLES.items() for key in SCHEMA["$defs"][record]["properties"]]


def cells_of(heading: str, key: str) -> dict[str, str]:
    section = re.split(r"^## ", PAGE, flags=re.MULTILINE)
    table = next(part for part in section if part.startswith(heading))
    row = next(line for line in table.splitlines() if line.startswith(f"| `{key}` |"))
    cells = [cell.strip() for cell in row.strip("|").split("|")]
    return dict(zip(("key", "type", "unit", "range", "default", "meaning"), cells, strict=True))


def bounds_of(node: dict[str, Any]) -> str:
    number = node.get("oneOf", [node])[0]
    low, high = number.get("minimum"), number.get("maximum")
    if low is not None and high is not None:
        return f"{low} to {high}"
    if low is not None:
        return f"at least {low}"
    return ""


@pytest.mark.parametrize(("heading", "key"), KEYS)
def test_every_key_stands_on_the_page_with_its_range_and_default(heading: str, key: str) -> None:
    record = SCHEMA["$defs"][TABLES[heading]]
    node = record["properties"][key]
    cells = cells_of(f"`{heading}`", key)
    assert bounds_of(node) in cells["range"]
    assert all(f'"{name}"' in cells["range"] + cells["meaning"] for name in node.get("enum", ()))
    assert (cells["default"] == "required") == (key in record["required"] if "required" in record else False)
    default = node.get("default")
    if isinstance(default, float):
        assert cells["default"] == f"{default:g}"
    elif isinstance(default, bool):
        assert cells["default"] == str(default).lower()
    elif isinstance(default, str):
        assert default in cells["default"]


@pytest.mark.parametrize("key", SCHEMA["properties"])
def test_every_table_stands_on_the_page(key: str) -> None:
    assert (cells_of("Top level", key)["default"] == "required") == (key in SCHEMA["required"])


@pytest.mark.parametrize(("heading", "key"), KEYS)
def test_every_key_describes_itself_with_its_unit(heading: str, key: str) -> None:
    description = SCHEMA["$defs"][TABLES[heading]]["properties"][key]["description"]
    unit = re.search(r"_(db_per_m|deg|m|db|dbm|k|s|dbhz|share|v|ma|ohm)$", key)
    names = {"db": "dB", "k": "K", "dbhz": "dB-Hz", "db_per_m": "dB/m", "dbm": "dBm", "v": "V", "ma": "mA"}
    if unit:
        assert f"[{names.get(unit[1], unit[1])}]" in description


def test_packaged_schema_is_made_from_the_records() -> None:
    # tests/builders/build_site_schema.py writes it.
    packaged = resources.files("siteassess").joinpath("site_file/site.schema.json").read_text("utf-8")
    assert json.loads(packaged) == SCHEMA


def test_schema_has_no_null_which_toml_cannot_write() -> None:
    assert "null" not in json.dumps(SCHEMA)


def test_starter_and_page_name_every_signal_and_pattern() -> None:
    for row in packaged_rows("link_budget/power/signals.csv"):
        assert row["signal"] in " ".join(PAGE.split())
    starter = resources.files("siteassess").joinpath("site_file/starter_site/site.toml").read_text("utf-8")
    for row in packaged_rows("antenna/builtin.csv"):
        assert f"`{row['pattern']}`" in PAGE
        assert row["pattern"] in starter


@pytest.mark.parametrize(("heading", "key"), KEYS)
def test_starter_holds_every_key(heading: str, key: str) -> None:
    starter = resources.files("siteassess").joinpath("site_file/starter_site/site.toml").read_text("utf-8")
    assert re.search(rf"^(# )?{key} = ", starter, flags=re.MULTILINE)


def test_every_criterion_of_the_table_is_a_key() -> None:
    assert {row["key"] for row in packaged_rows("verdict/criteria.csv")} <= set(Requirements.model_fields)
