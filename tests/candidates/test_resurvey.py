"""Two surveys of one spot: what rose and fell, what it did to the findings, and who is refused."""

import json
from collections.abc import Callable
from pathlib import Path

import pytest
from click.testing import CliRunner

from siteassess.candidates.resurvey import Resurvey, resurvey
from siteassess.cli import main
from siteassess.errors import InputError
from siteassess.report.resurvey.content import resurvey_content
from siteassess.report.resurvey.results import resurvey_json, resurvey_lines
from siteassess.report.resurvey.write import RESURVEY_FILES

WriteSite = Callable[..., Path]
HEAD = "azimuth_deg,elevation_deg,distance_m,obstacle,cover,depth_m,underside_deg\n0,2,,,,,\n"
HALL = "100,20,40,hall,solid,,\n140,20,40,hall,solid,,\n"
BARN = "350,15,,barn,solid,,\n20,15,,barn,solid,,\n"
ONE_COLUMN_DEG = 0.5


def dated(day: str, more: str = "") -> tuple[str, str]:
    return "complete = true", f"complete = true\nsurveyed_on = {day}\n{more}"


def compared(write_site: WriteSite, old: str, new: str, more: str = "") -> Resurvey:
    before = write_site(dated("2024-05-01", more), horizon=HEAD + old, folder="old")
    after = write_site(dated("2026-05-01", more), horizon=HEAD + new, folder="new")
    return resurvey(before, after)


def test_a_survey_against_itself_changes_nothing(write_site: WriteSite) -> None:
    same = compared(write_site, HALL + BARN, HALL + BARN)
    assert same.outline == ()
    assert {one.direction for one in same.findings} == {"same"}
    assert [(one.name, one.before == one.after) for one in same.obstacles] == [
        ("general skyline", True),
        ("hall", True),
        ("barn", True),
    ]
    assert (same.apart_m, same.risen_m) == (0.0, 0.0)


def test_what_was_built_rose_and_what_was_torn_down_fell(write_site: WriteSite) -> None:
    """Authority: the files. The barn runs through north; edges are looked up every half degree."""
    found = compared(write_site, HALL, BARN)
    fell, rose = found.outline
    assert (fell.kind, fell.name, fell.after_deg) == ("fell", "hall", 2.0)
    assert fell.azimuth_from_deg == pytest.approx(100.0, abs=ONE_COLUMN_DEG)
    assert fell.azimuth_to_deg == pytest.approx(140.0, abs=ONE_COLUMN_DEG)
    assert (rose.kind, rose.name, rose.before_deg, rose.after_deg) == ("rose", "barn", 2.0, 15.0)
    assert rose.azimuth_from_deg == pytest.approx(350.0, abs=ONE_COLUMN_DEG)
    assert rose.azimuth_to_deg == pytest.approx(380.0, abs=ONE_COLUMN_DEG)
    assert rose.largest_deg == pytest.approx(13.0)
    assert [(one.name, one.before is None, one.after is None) for one in found.obstacles] == [
        ("general skyline", False, False),
        ("barn", True, False),
        ("hall", False, True),
    ]


def test_findings_get_worse_by_what_rises_and_better_the_other_way_round(write_site: WriteSite) -> None:
    """Law: an added wall never helps, and the way back is the way there with the signs turned."""
    there, back = compared(write_site, "", HALL), compared(write_site, HALL, "")
    shares = [one for one in there.findings if one.finding.criterion == "min_usable_share"]
    assert {one.direction for one in shares} == {"worse"}
    turned = {"worse": "better", "better": "worse", "same": "same"}
    ways = [
        {(one.finding.criterion, one.finding.signal): one.direction for one in found.findings}
        for found in (there, back)
    ]
    assert {key: turned[way] for key, way in ways[0].items()} == ways[1]


@pytest.mark.parametrize(
    ("more", "up_deg", "changed"),
    [
        # Two standard deviations of the difference of two surveys with 1 deg each: 2.83 deg.
        ("elevation_error_deg = 1.0", 2.5, False),
        ("elevation_error_deg = 1.0", 3.1, True),
        ("", 0.4, False),
        ("", 0.6, True),
    ],
)
def test_what_the_errors_explain_is_no_change(
    write_site: WriteSite, more: str, up_deg: float, changed: bool
) -> None:
    """Authority: independent errors add as squares."""
    found = compared(write_site, HALL, HALL.replace(",20,", f",{20 + up_deg},"), more)
    assert bool(found.outline) is changed


@pytest.mark.parametrize(("turn_deg", "changed"), [(2, False), (4, True)])
def test_a_wall_that_stands_a_little_aside_is_the_same_wall(
    write_site: WriteSite, turn_deg: int, changed: bool
) -> None:
    """Authority: independent errors add as squares; 2.83 deg for two surveys with 1 deg each."""
    aside = HALL.replace("100,", f"{100 + turn_deg},").replace("140,", f"{140 + turn_deg},")
    found = compared(write_site, HALL, aside, "azimuth_error_deg = 1.0")
    assert bool(found.outline) is changed


def test_sky_that_is_closed_below_a_bridge_rose(write_site: WriteSite) -> None:
    bridge = "100,30,40,bridge,solid,,25\n140,30,40,bridge,solid,,25\n"
    closed = bridge.replace(",25\n", ",\n").replace("bridge", "bridge with a wall")
    (change,) = compared(write_site, bridge, closed).outline
    assert (change.kind, change.name, change.before_deg) == ("rose", "bridge with a wall", 2.0)
    assert change.largest_deg > 27.0


def test_leaves_count_as_an_edge(write_site: WriteSite) -> None:
    trees = "100,12,40,limes,foliage,5,\n140,12,40,limes,foliage,5,\n"
    (change,) = compared(write_site, trees, trees.replace(",12,", ",16,")).outline
    assert (change.kind, change.name) == ("rose", "limes")
    # Between its ends a straight edge bulges up; the later one by more.
    assert 4.0 < change.largest_deg < 4.5


def test_two_spots_are_refused(write_site: WriteSite) -> None:
    """Authority: 0.001 degrees of latitude are 111.2 m at 48 degrees [TR8350.2]."""
    before = write_site(dated("2024-05-01"), folder="old")
    after = write_site(
        dated("2026-05-01"), ("latitude_deg = 48.0", "latitude_deg = 48.001"), folder="elsewhere"
    )
    with pytest.raises(InputError) as refusal:
        resurvey(before, after)
    assert str(refusal.value) == (
        "elsewhere/site.toml: its survey mark lies 111.2 m from that of the earlier survey; "
        "two surveys of one spot have it within 5 m"
    )


def test_the_wrong_order_is_refused(write_site: WriteSite) -> None:
    before, after = (write_site(dated(day), folder=day) for day in ("2024-05-01", "2026-05-01"))
    with pytest.raises(InputError) as refusal:
        resurvey(after, before)
    assert str(refusal.value) == (
        "2024-05-01/site.toml: its survey is of 2024-05-01, before the other one of 2026-05-01; "
        "name the earlier one first"
    )


def test_mistakes_of_both_name_their_folders(write_site: WriteSite) -> None:
    old = write_site(("mast_height_m = 1.5", "mast_height_m = -1"), folder="old")
    new = write_site(horizon="azimuth_deg,elevation_deg\n0,95\n", folder="new")
    with pytest.raises(InputError) as refusal:
        resurvey(old.parent, new)
    assert [str(mistake) for mistake in refusal.value.mistakes] == [
        "old/site.toml: mount.mast_height_m is -1; it must be at least 0",
        "new/horizon.csv: line 2, elevation_deg is 95; it must lie from -5 to 90",
    ]


def test_without_dates_the_given_order_holds(write_site: WriteSite) -> None:
    found = resurvey(write_site(folder="old"), write_site(folder="new"))
    assert dict(resurvey_content(found).facts)["Earlier survey"] == "Test roof, not dated"


def test_a_taller_mast_is_told(write_site: WriteSite) -> None:
    before = write_site(folder="old")
    after = write_site(("mast_height_m = 1.5", "mast_height_m = 2.5"), folder="new")
    found = resurvey(before, after)
    assert dict(resurvey_content(found).facts)["Antenna"] == "stands 1.00 m higher"


def test_command_prints_json_and_writes_all_files(write_site: WriteSite, tmp_path: Path) -> None:
    before = write_site(dated("2024-05-01"), horizon=HEAD, folder="old")
    after = write_site(dated("2026-05-01"), horizon=HEAD + HALL, folder="new")
    out = tmp_path / "changes"
    result = CliRunner().invoke(main, ["changes", str(before), str(after), "--json", "--out", str(out)])
    assert result.exit_code == 0, result.output
    assert sorted(file.name for file in out.iterdir()) == sorted(RESURVEY_FILES)
    record = json.loads(result.stdout)
    assert record == json.loads((out / "changes.json").read_text(encoding="utf-8"))
    assert record["format"] == "siteassess-changes/1"
    assert set(record) == {
        *("format", "tool_version", "before", "after", "marks_apart_m", "antenna_risen_m", "tolerance"),
        *("outline", "obstacles", "findings", "cautions"),
    }
    assert [one["change"] for one in record["outline"]] == ["rose"]
    page = (out / "changes.html").read_text(encoding="utf-8")
    assert "What rose?" in page
    assert "http" not in page.replace("http://www.w3.org", "")
    assert (out / "changes.pdf").read_bytes().startswith(b"%PDF")


def test_command_says_it_in_a_few_lines(write_site: WriteSite) -> None:
    lines = resurvey_lines(compared(write_site, "", HALL.replace(",20,", ",50,")))
    assert lines[0] == "Test roof: PASS -> FAIL"
    assert lines[1] == "  Result: By the earlier survey the spot passes; by the later one it fails."
    assert lines[2].startswith('  Rose: "hall", 100.0 deg to 140.0 deg, from 2.0 deg to 51.')
    assert lines[3] == "  Fell: Nothing, beyond what the errors of the surveys explain."
    assert max(map(len, lines)) <= 100
    assert len(lines) <= 25


def test_the_same_surveys_give_the_same_bytes(write_site: WriteSite) -> None:
    found = compared(write_site, "", HALL)
    assert resurvey_json(found) == resurvey_json(compared(write_site, "", HALL))
