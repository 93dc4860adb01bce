"""The field form: typed in as it asks, it is a valid site."""

import json
import tomllib
from importlib import resources
from pathlib import Path

import pytest
import typst
from click.testing import CliRunner

from siteassess.cli import main
from siteassess.horizon.read import read_site_skyline
from siteassess.horizon.survey.rows import NUMBERS, TEXTS
from siteassess.report.sections.setting import CAUTIONS
from siteassess.report.sheet.fields import COLUMNS, GROUPS
from siteassess.report.sheet.form import PAPER_NAMES, ROWS_PER_PAGE, Paper, sheet_content, sheet_pdf

PAPERS: tuple[Paper, ...] = ("a4", "letter")

# What a crew may have written; the keys come from the form.
ANSWERS = {
    "site.name": '"North roof"',
    "site.surveyed_by": '"Crew 4"',
    "site.latitude_deg": "57.1",
    "site.longitude_deg": "-2.1",
    "site.height_m": "61.2",
    "mount.mast_height_m": "1.5",
    "horizon.surveyed_on": "2026-10-04",
    "horizon.instrument": '"total station"',
    "horizon.azimuth_error_deg": "0.5",
    "horizon.elevation_error_deg": "0.2",
    "horizon.distance_error_m": "0.1",
    "horizon.instrument_east_m": "0.4",
    "horizon.instrument_north_m": "-0.3",
    "horizon.instrument_up_m": "1.6",
    "horizon.bearings": '"magnetic-north"',
    "horizon.landmark": '"church tower"',
    "horizon.landmark_reading_deg": "101.5",
    "horizon.landmark_bearing_deg": "100.0",
    "horizon.complete": "true",
}
ROWS = """\
0,3,,,,,,,
120,2.5,,,,,,,
240,2,,,,,,,
30,12,40,hall,,,,,
44,12,41,hall,,,,,
44,8,41,hall,,,,,
60,8,45,hall,,,,,
100,25,8,rod,,,,,0.05
200,20,30,limes,foliage,in-leaf,6,,
215,21,31,limes,foliage,in-leaf,6,,
300,30,60,jib,,,,28,
320,30,62,jib,,,,28,
340,0,,locked yard,unsurveyed,,,,
350,0,,locked yard,unsurveyed,,,,
"""
WHAT_A_SURVEY_DOES_NOT_FIND = """
[antenna]
pattern = "choke-ring"

[[chain]]
part = "receiver"
noise_figure_db = 3.0

[require]
elevation_mask_deg = 10
min_cn0_dbhz = 33
"""


def asked_keys() -> list[str]:
    return [field.key for group in GROUPS for field in group.fields if field.key]


def test_typed_in_the_form_is_a_valid_site(tmp_path: Path) -> None:
    assert set(asked_keys()) == set(ANSWERS)
    tables: dict[str, list[str]] = {}
    for key in asked_keys():
        table, _, name = key.partition(".")
        tables.setdefault(table, []).append(f"{name} = {ANSWERS[key]}")
    blocks = [f"[{name}]\n" + "\n".join(lines) for name, lines in tables.items() if name != "horizon"]
    survey = '[[horizon]]\nsource = "survey"\nfile = "horizon.csv"\n' + "\n".join(tables["horizon"])
    text = "\n\n".join(["format = 1", *blocks, survey, WHAT_A_SURVEY_DOES_NOT_FIND])
    (tmp_path / "site.toml").write_text(text, encoding="utf-8")
    header = ",".join(column.key for column in COLUMNS)
    (tmp_path / "horizon.csv").write_text(f"{header}\n{ROWS}", encoding="utf-8")
    site, skyline = read_site_skyline(tmp_path)
    assert site.place.name == "North roof"
    assert [one.name for one in skyline.obstacles] == ["general skyline", "hall", "rod", "limes", "jib"]
    assert skyline.unsurveyed_deg.tolist() == [[338.5, 348.5]]  # turned by the landmark


def test_columns_are_those_of_the_horizon_file() -> None:
    known = {*NUMBERS, *TEXTS}
    # A slant distance stands in place of a level one; growth is no reading.
    assert {column.key for column in COLUMNS} == known - {"slant_distance_m", "growth_m_per_year"}


def test_words_to_choose_from_are_those_of_the_site_file() -> None:
    schema = json.loads(
        resources.files("siteassess").joinpath("site_file/site.schema.json").read_text(encoding="utf-8")
    )
    bearings = schema["$defs"]["HorizonSource"]["properties"]["bearings"]["enum"]
    choices = {field.key: field.choices for group in GROUPS for field in group.fields if field.choices}
    assert list(choices["horizon.bearings"]) == bearings
    for word in choices["horizon.complete"]:
        assert isinstance(tomllib.loads(f"complete = {word}")["complete"], bool)


@pytest.mark.parametrize("paper", PAPERS)
def test_the_form_has_four_pages_and_the_same_bytes(paper: Paper) -> None:
    pdf = sheet_pdf(paper)
    assert pdf == sheet_pdf(paper)
    layout = resources.files("siteassess.report.sheet").joinpath("sheet.typ").read_bytes()
    inputs = {"content": json.dumps(sheet_content(paper)), "paper": PAPER_NAMES[paper]}
    pages = typst.compile(layout, format="svg", ignore_system_fonts=True, sys_inputs=inputs)
    assert len(pages) == 4
    height_pt = {"a4": 841.9, "letter": 792.0}[paper]  # ISO 216; 11 inches
    assert float(pages[0].decode().partition('height="')[2].partition("pt")[0]) == pytest.approx(
        height_pt, abs=1
    )


def test_the_form_says_everything() -> None:
    content = sheet_content("a4")
    asked = [field["key"] for group in content["groups"] for field in group["fields"] if field["key"]]
    assert asked == asked_keys()
    assert content["cautions"] == list(CAUTIONS)
    assert content["photographs"] == ["N", "NE", "E", "SE", "S", "SW", "W", "NW"]
    assert ROWS_PER_PAGE["a4"] * content["points_pages"] >= 50
    assert any("30 degrees" in rule for rule in content["rules"])
    assert any("vertical edge" in rule for rule in content["rules"])


def test_command_writes_the_form(tmp_path: Path) -> None:
    out = tmp_path / "form.pdf"
    result = CliRunner().invoke(main, ["sheet", "--paper", "letter", "--out", str(out)])
    assert (result.exit_code, result.stdout) == (0, "")
    assert result.stderr == f"Form written to {out}\n"
    assert out.read_bytes() == sheet_pdf("letter")


def test_command_refuses_what_is_no_pdf_and_no_paper(tmp_path: Path) -> None:
    for arguments in (["--out", str(tmp_path / "form.txt")], ["--paper", "b5"]):
        result = CliRunner().invoke(main, ["sheet", *arguments])
        assert result.exit_code == 2
    assert list(tmp_path.iterdir()) == []


def test_command_says_why_it_cannot_write(tmp_path: Path) -> None:
    (tmp_path / "file").write_text("", encoding="utf-8")
    result = CliRunner().invoke(main, ["sheet", "--out", str(tmp_path / "file" / "form.pdf")])
    assert result.exit_code == 1
    assert result.stderr == (
        "Error: file: the report cannot be written: file is a file, not a folder; "
        "what stood there before is unchanged\n"
    )
