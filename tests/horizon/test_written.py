"""A skyline that is written and read again is the same skyline: a round trip, whatever its sources."""

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest
from hypothesis import HealthCheck, assume, given, settings
from hypothesis import strategies as st

from siteassess.errors import InputError
from siteassess.horizon.looked_at import gaps_between
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.shares import sky_shares
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.survey.read import Survey, read_survey
from siteassess.horizon.view import (
    depth_m,
    edge_distance_m,
    edge_elevation_deg,
    outline_elevation_deg,
    underside_elevation_deg,
)
from siteassess.horizon.written import horizon_csv
from siteassess.site_file.model import HorizonSource, Mount

# What the page on horizons promises.
OUTLINE_DEG = 0.001
SHARE = 1e-6
DISTANCE_SHARE = 1e-3
LOWEST_DEG = -5.0

MakeSkyline = Callable[..., Skyline]
MakeObstacle = Callable[..., Obstacle]

ANGLE = st.floats(0.0, 359.0).map(lambda angle: round(angle, 2))
HEIGHT = st.floats(-4.0, 70.0).map(lambda angle: round(angle, 2))
DISTANCE = st.floats(3.0, 800.0).map(lambda metres: round(metres, 2))


@st.composite
def general_rows(draw: st.DrawFn) -> list[str]:
    azimuths = sorted(draw(st.lists(ANGLE, min_size=1, max_size=9, unique=True)))
    rows = []
    for azimuth in azimuths:
        away = draw(st.none() | DISTANCE)
        heights = draw(st.lists(HEIGHT, min_size=1, max_size=2))
        rows += [f"{azimuth},{height},{'' if away is None else away},,,,,," for height in heights]
    return rows


@st.composite
def named_rows(draw: st.DrawFn, label: str) -> list[str]:
    kind = draw(st.sampled_from(["wall", "hanging", "leaves", "pole", "unsurveyed"]))
    if kind == "pole":
        width = draw(st.floats(0.05, 2.0))
        return [f"{draw(ANGLE)},{draw(HEIGHT)},{draw(DISTANCE)},{label},,,,,{width:.3f}"]
    start, steps = draw(ANGLE), draw(st.lists(st.floats(0.5, 80.0), min_size=1, max_size=4))
    azimuths = start + np.cumsum([0.0, *steps])
    assume(azimuths[-1] < start + 359.0)
    away = draw(st.booleans()) and kind != "unsurveyed"
    rows = []
    for azimuth in (azimuths % 360.0).round(2).tolist():
        height = draw(HEIGHT)
        rows.append(
            f"{azimuth},{height},{draw(DISTANCE) if away else ''},{label},"
            f"{ {'leaves': 'foliage', 'unsurveyed': 'unsurveyed'}.get(kind, '') },"
            f"{draw(st.sampled_from(['in-leaf', 'evergreen'])) if kind == 'leaves' and not rows else ''},"
            f"{draw(DISTANCE) if kind == 'leaves' else ''},"
            f"{height - draw(st.floats(0.1, 9.0)) if kind == 'hanging' else ''},"
        )
    return rows


@st.composite
def survey_text(draw: st.DrawFn) -> str:
    rows = draw(general_rows()) if draw(st.booleans()) else []
    for number in range(draw(st.integers(0 if rows else 1, 4))):
        rows += draw(named_rows(f"thing {number}"))
    header = "azimuth_deg,elevation_deg,distance_m,obstacle,cover,leaf,depth_m,underside_deg,width_m"
    return "\n".join([header, *rows]) + "\n"


def read(path: Path, text: str, **block: object) -> Survey:
    path.write_text(text, encoding="utf-8")
    return read_survey(
        path, HorizonSource(source="survey", file=path.name, **block), Mount(mast_height_m=1.5)
    )


def skyline_of(*surveys: Survey) -> Skyline:
    obstacles = tuple(obstacle for one in surveys for obstacle in one.obstacles)
    return Skyline(
        obstacles=obstacles,
        outline=upper_envelope(obstacles),
        unsurveyed_deg=gaps_between(np.concatenate([one.surveyed_deg for one in surveys])),
    )


def assert_same(before: Skyline, after: Skyline) -> None:
    """The same outline, shares, gaps and named obstacles."""
    breaks = np.concatenate([before.outline.start_deg, after.outline.start_deg])
    azimuth_deg = np.concatenate([np.linspace(0.0, 360.0, 1441), breaks])
    # Beside a vertical edge a millionth of a degree of azimuth decides.
    azimuth_deg = azimuth_deg[np.abs(azimuth_deg[:, None] - breaks).min(axis=1) > 2e-6]
    seen, again = (np.maximum(outline_elevation_deg(one, azimuth_deg), LOWEST_DEG) for one in (before, after))
    steep = np.abs(seen - outline_elevation_deg(before, azimuth_deg + 2e-6)) > OUTLINE_DEG
    np.testing.assert_allclose(again[~steep], seen[~steep], atol=OUTLINE_DEG)
    assert_same_shares(before, after)
    np.testing.assert_allclose(after.unsurveyed_deg, before.unsurveyed_deg, atol=1e-5)
    named = [one for one in before.obstacles if one.name != "general skyline"]
    found = [one for one in after.obstacles if one.name != "general skyline"]
    assert [(one.cover, one.hangs_free, one.width_m) for one in found] == [
        (one.cover, one.hangs_free, None if one.width_m is None else pytest.approx(one.width_m, abs=1e-6))
        for one in named
    ]
    for one, other in zip(named, found, strict=True):
        assert one.leaf == other.leaf or one.cover == "solid"
        assert_same_obstacle(one, other)


def assert_same_shares(before: Skyline, after: Skyline) -> None:
    for mask_deg in (0.0, 10.0):
        one, other = sky_shares(before, mask_deg), sky_shares(after, mask_deg)
        for name in (
            "blocked_share_of_hemisphere",
            "blocked_share_above_mask",
            "largest_block_share",
            "foliage_share_above_mask",
            "unsurveyed_share",
        ):
            assert getattr(other, name) == pytest.approx(getattr(one, name), abs=SHARE), name
        assert other.sector_blocked_share == pytest.approx(one.sector_blocked_share, abs=8 * SHARE)


def assert_same_obstacle(one: Obstacle, other: Obstacle) -> None:
    first, last = one.azimuth_deg[0], one.azimuth_deg[-1]
    azimuth_deg = first + (last - first) * np.linspace(0.001, 0.999, 101)
    breaks = np.concatenate(
        [one.azimuth_deg, other.azimuth_deg + 360.0 * np.round((first - other.azimuth_deg[0]) / 360.0)]
    )
    azimuth_deg = azimuth_deg[np.abs(azimuth_deg[:, None] - breaks).min(axis=1) > 1e-5]
    seen = edge_elevation_deg(one, azimuth_deg)
    above = seen > LOWEST_DEG
    flat = above & (np.abs(edge_elevation_deg(one, azimuth_deg + 2e-6) - seen) < OUTLINE_DEG)
    azimuth_deg = azimuth_deg[flat]
    for part in (edge_elevation_deg, underside_elevation_deg):
        np.testing.assert_allclose(part(other, azimuth_deg), part(one, azimuth_deg), atol=OUTLINE_DEG)
    np.testing.assert_allclose(depth_m(other, azimuth_deg), depth_m(one, azimuth_deg), rtol=DISTANCE_SHARE)
    np.testing.assert_allclose(
        edge_distance_m(other, azimuth_deg), edge_distance_m(one, azimuth_deg), rtol=DISTANCE_SHARE
    )


@settings(max_examples=60, derandomize=True, deadline=None, suppress_health_check=list(HealthCheck))
@given(
    texts=st.lists(survey_text(), min_size=1, max_size=2),
    complete=st.booleans(),
    up_m=st.floats(0.5, 2.5),
    east_m=st.sampled_from([0.0, 0.0, 0.7]),
)
def test_any_skyline_is_read_as_it_was_written(
    tmp_path: Path, texts: list[str], complete: bool, up_m: float, east_m: float
) -> None:
    block = {"complete": complete, "instrument_up_m": up_m, "instrument_east_m": east_m}
    try:
        before = skyline_of(*(read(tmp_path / "given.csv", text, **block) for text in texts))
    except InputError:
        assume(False)
    text = horizon_csv(before)
    after = skyline_of(read(tmp_path / "horizon.csv", text, complete=True))
    assert_same(before, after)
    again = horizon_csv(after)
    assert_same(after, skyline_of(read(tmp_path / "horizon.csv", again, complete=True)))


def roundtrip(before: Skyline, tmp_path: Path) -> Skyline:
    return skyline_of(read(tmp_path / "horizon.csv", horizon_csv(before), complete=True))


def test_outlines_and_terrain_survive_too(tmp_path: Path) -> None:
    from siteassess.horizon.read import read_site_skyline

    _, before = read_site_skyline("example_sites/ridge_mast")
    after = roundtrip(before, tmp_path)
    assert_same(before, after)
    assert [one.name for one in after.obstacles] == [
        "general skyline",
        "upper station",
        "machine room",
        "relay pole",
        "upper station (2)",
        "store",
        "spruces",
        "terrain",
    ]


def test_gaps_in_terrain_stay_open(tmp_path: Path, obstacle: MakeObstacle, skyline: MakeSkyline) -> None:
    hills = obstacle(
        [10, 40, 40, 90, 90, 200],
        [3, 12, -90, -90, 8, 2],
        name="terrain",
        distance_m=[900.0, 5000.0, np.nan, np.nan, 700.0, 8000.0],
    )
    before = skyline(hills, gaps_deg=[(0, 10), (40, 90), (200, 360)])
    assert_same_shares(before, roundtrip(before, tmp_path))
    np.testing.assert_allclose(roundtrip(before, tmp_path).unsurveyed_deg, before.unsurveyed_deg, atol=1e-5)


def test_a_canopy_over_the_antenna_keeps_its_sky(
    tmp_path: Path, obstacle: MakeObstacle, skyline: MakeSkyline
) -> None:
    # By hand: 4 m above the antenna, square of 6 m; its edge toward east stands 3 m away.
    edge_deg, corner_deg = np.rad2deg(np.arctan([4 / 3, 4 / (3 * np.sqrt(2))]))
    canopy = obstacle(
        [45, 135, 225, 315, 405],
        [89.999999] * 5,
        name="canopy",
        underside_deg=[corner_deg] * 5,
        distance_m=[np.hypot(3, 4)] * 5,
        straight_in_space=True,
    )
    before = skyline(canopy)
    after = roundtrip(before, tmp_path)
    assert float(underside_elevation_deg(after.obstacles[0], 90.0)) == pytest.approx(
        edge_deg, abs=OUTLINE_DEG
    )
    assert_same_shares(before, after)


def test_an_open_sky_that_was_looked_at_is_a_file_too(tmp_path: Path, skyline: MakeSkyline) -> None:
    after = roundtrip(skyline(), tmp_path)
    assert len(after.unsurveyed_deg) == 0
    assert sky_shares(after, 0.0).blocked_share_of_hemisphere == 0.0


def test_a_sky_that_nobody_looked_at_stays_so(tmp_path: Path, skyline: MakeSkyline) -> None:
    after = roundtrip(skyline(gaps_deg=[(0, 360)]), tmp_path)
    assert after.unsurveyed_deg.tolist() == [[0.0, 360.0]]
    assert after.obstacles == ()


def test_names_are_told_apart_and_are_no_formulas(
    tmp_path: Path, obstacle: MakeObstacle, skyline: MakeSkyline
) -> None:
    names = ["hall", "hall", "=SUM(A1)", "west\nwing, roof", "", "general skyline"]
    things = [
        obstacle([10 * n, 10 * n + 5], [5, 5], name=name, straight_in_space=True, distance_m=[30.0, 30.0])
        for n, name in enumerate(names)
    ]
    after = roundtrip(skyline(*things), tmp_path)
    assert [one.name for one in after.obstacles] == [
        "hall",
        "hall (2)",
        "'=SUM(A1)",
        "west wing, roof",
        "obstacle",
        "general skyline (2)",
    ]


def test_the_file_says_how_it_is_to_be_used() -> None:
    empty = Skyline(obstacles=(), outline=upper_envelope(()), unsurveyed_deg=np.empty((0, 2)))
    assert horizon_csv(empty) == (
        "# The skyline as seen from the antenna's phase centre, azimuths from true north.\n"
        '# Its block in a site file: source = "survey", complete = true, and no key of the instrument.\n'
        "azimuth_deg,elevation_deg,slant_distance_m,obstacle,cover,leaf,depth_m,underside_deg,width_m\n"
        "0,-5,,,,,,,\n"
    )
