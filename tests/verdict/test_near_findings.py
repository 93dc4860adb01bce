"""Reflectors and roofs of metal."""

from collections.abc import Callable
from pathlib import Path

import pytest

from siteassess import Assessment, assess, read_site
from siteassess.verdict.findings.near import off_multiples_m
from siteassess.verdict.verdict import Finding

MILLIMETRE_M = 1e-3
HEADER = "azimuth_deg,elevation_deg,distance_m,obstacle,cover,depth_m\n0,0,,,,\n"
COARSE = "\n[sky]\ndays = 1\nstep_s = 900\n"

Write = Callable[..., Path]


def assessed(write_site: Write, rows: str, require: str = "", mount: str = "") -> Assessment:
    replacements = (("min_cn0_dbhz = 33\n", f"min_cn0_dbhz = 33\n{require}\n"),)
    mast = ("mast_height_m = 1.5\n", f"mast_height_m = 1.5\n{mount}\n")
    return assess(read_site(write_site(*replacements, mast, horizon=HEADER + rows, extra=COARSE)))


def finding(assessment: Assessment, criterion: str) -> Finding | None:
    found = [one for one in assessment.verdict.findings if one.criterion == criterion]
    return found[0] if found else None


def test_what_is_near_and_high_is_missed_as_advice(write_site: Write) -> None:
    """Authority: IGS CORS Guidelines 1.1.0, multipath: 20 m away and below 5 degrees."""
    near = finding(assessed(write_site, "100,8,15,shed,,\n120,8,15,shed,,\n"), "max_reflector_deg")
    assert near is not None
    assert (near.outcome, near.required, near.limit) == ("missed", False, 5.0)
    assert near.value == pytest.approx(8.1, abs=0.1)  # a straight edge bulges upward between its ends
    assert near.reason == "shed rises that high nearer than 20 m."


@pytest.mark.parametrize(
    "rows",
    [
        "100,8,30,shed,,\n120,8,30,shed,,\n",  # far
        "100,4,10,shed,,\n120,4,10,shed,,\n",  # low
        "100,30,10,tree,foliage,3\n120,30,10,tree,foliage,3\n",  # leaves
    ],
)
def test_what_is_far_or_low_or_leaves_meets_the_rule(write_site: Write, rows: str) -> None:
    met = finding(assessed(write_site, rows), "max_reflector_deg")
    assert met is not None
    assert met.outcome == "met"


def test_a_long_wall_is_nearest_between_its_ends(write_site: Write) -> None:
    """Geometry: ends at 30 m and 60 degrees on either side put the middle of the wall at 15 m."""
    wall = finding(assessed(write_site, "30,6,30,wall,,\n150,6,30,wall,,\n"), "max_reflector_deg")
    assert wall is not None
    assert wall.outcome == "missed"
    assert wall.value == pytest.approx(11.9, abs=0.1)  # tan 6 degrees over cos 60 degrees


def test_without_distances_the_rule_is_not_proven_and_neither_is_the_site(write_site: Write) -> None:
    assessment = assessed(write_site, "100,11,,shed,,\n101,11,,shed,,\n", require="max_reflector_deg = 5")
    unknown = finding(assessment, "max_reflector_deg")
    assert unknown is not None
    assert (unknown.outcome, unknown.required) == ("unproven", True)
    assert unknown.reason.endswith("How far away is not known of shed.")
    assert assessment.verdict.outcome == "unproven"


def test_heights_over_metal_keep_off_multiples_of_19_and_24_centimetres(write_site: Write) -> None:
    """Authority: IGS CORS Guidelines 1.1.0, stability: heights to avoid over metal."""
    for height_m in (0.19, 0.24, 0.38, 0.96, 1.14):
        assert off_multiples_m(height_m) == pytest.approx(0.0, abs=MILLIMETRE_M)
    mount = 'height_above_roof_m = 0.95\nroof_surface = "Sheet steel"'
    roof = finding(assessed(write_site, "", mount=mount), "min_metal_roof_offset_m")
    assert roof is not None
    assert (roof.outcome, roof.required) == ("missed", False)
    assert roof.value == pytest.approx(0.0, abs=MILLIMETRE_M)
    assert roof.reason == (
        "0.95 m above a roof of Sheet steel; waves from it add up at multiples of 19 and 24 cm."
    )


@pytest.mark.parametrize("mount", ["height_above_roof_m = 0.95", 'roof_surface = "steel"'])
def test_other_roofs_and_unknown_heights_have_no_such_finding(write_site: Write, mount: str) -> None:
    assert finding(assessed(write_site, "", mount=mount), "min_metal_roof_offset_m") is None


def test_a_roof_of_concrete_has_no_such_finding(write_site: Write) -> None:
    mount = 'height_above_roof_m = 0.95\nroof_surface = "concrete"'
    assert finding(assessed(write_site, "", mount=mount), "min_metal_roof_offset_m") is None
