"""Several sources together: their order does not matter, another one opens no sky, and each stays known."""

from collections.abc import Callable
from itertools import permutations
from pathlib import Path

import numpy as np
import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from siteassess.errors import InputError
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.read import read_site_skyline, read_skyline
from siteassess.horizon.shares import sky_shares
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.view import hiding_obstacle, is_unsurveyed, outline_elevation_deg
from siteassess.site_file.read import read_site

ROUNDING = 1e-9
AZIMUTHS_DEG = np.linspace(0.05, 359.95, 720)

ANGLE = st.floats(0.0, 359.0)
HEIGHT = st.floats(-4.0, 80.0)


@st.composite
def obstacles(draw: st.DrawFn) -> Obstacle:
    kind = draw(st.sampled_from(["wall", "line", "jib", "trees"]))
    steps = draw(st.lists(st.floats(0.1, 60.0), min_size=1, max_size=5))
    azimuth_deg = draw(ANGLE) + np.cumsum([0.0, *steps])
    elevation_deg = np.array([draw(HEIGHT) for _ in azimuth_deg])
    return Obstacle(
        name=kind,
        cover="foliage" if kind == "trees" else "solid",
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        underside_deg=elevation_deg - 5.0 if kind == "jib" else None,
        depth_m=np.full(len(azimuth_deg), 4.0) if kind == "trees" else None,
        straight_in_space=kind == "wall",
    )


SOURCES = st.lists(st.lists(obstacles(), max_size=4), min_size=1, max_size=3)


def together(sources: list[list[Obstacle]]) -> Skyline:
    all_of_them = tuple(obstacle for source in sources for obstacle in source)
    return Skyline(
        obstacles=all_of_them, outline=upper_envelope(all_of_them), unsurveyed_deg=np.empty((0, 2))
    )


@settings(max_examples=60, derandomize=True, deadline=None, suppress_health_check=list(HealthCheck))
@given(sources=SOURCES)
def test_the_order_of_sources_changes_nothing(sources: list[list[Obstacle]]) -> None:
    first = together(sources)
    shares = sky_shares(first, 10.0)
    for order in permutations(sources):
        other = together(list(order))
        np.testing.assert_allclose(
            outline_elevation_deg(other, AZIMUTHS_DEG),
            outline_elevation_deg(first, AZIMUTHS_DEG),
            atol=ROUNDING,
        )
        again = sky_shares(other, 10.0)
        assert again.blocked_share_above_mask == pytest.approx(shares.blocked_share_above_mask, abs=ROUNDING)
        assert again.foliage_share_above_mask == pytest.approx(shares.foliage_share_above_mask, abs=ROUNDING)


@settings(max_examples=60, derandomize=True, deadline=None, suppress_health_check=list(HealthCheck))
@given(sources=SOURCES, further=st.lists(obstacles(), min_size=1, max_size=4))
def test_another_source_opens_no_sky(sources: list[list[Obstacle]], further: list[Obstacle]) -> None:
    before, after = together(sources), together([*sources, further])
    lower, higher = (outline_elevation_deg(one, AZIMUTHS_DEG) for one in (before, after))
    assert (higher >= lower - ROUNDING).all()
    azimuth_deg, elevation_deg = np.meshgrid(AZIMUTHS_DEG[::7], np.linspace(0.5, 89.5, 45))
    hidden, still = (hiding_obstacle(one, azimuth_deg, elevation_deg) >= 0 for one in (before, after))
    assert (still | ~hidden).all()
    one, other = sky_shares(before, 0.0), sky_shares(after, 0.0)
    assert other.blocked_share_of_hemisphere >= one.blocked_share_of_hemisphere - ROUNDING


# The example with three sources: which one makes the outline where, read off its files.


@pytest.fixture(scope="module")
def ridge() -> Skyline:
    return read_site_skyline(Path(__file__).parents[2] / "example_sites" / "ridge_mast")[1]


@pytest.mark.parametrize(
    ("azimuth_deg", "elevation_deg", "name", "source"),
    [
        (90.0, 15.0, "machine room", "horizon.csv"),
        (203.0, 20.0, "relay pole", "horizon.csv"),
        (190.0, 3.0, "store", "buildings.geojson"),
        (280.0, 9.0, "terrain", "ground.tif"),
    ],
)
def test_every_azimuth_knows_its_source(
    azimuth_deg: float, elevation_deg: float, name: str, source: str, ridge: Skyline
) -> None:
    obstacle = ridge.obstacles[int(hiding_obstacle(ridge, azimuth_deg, elevation_deg))]
    assert (obstacle.name, obstacle.source) == (name, source)
    piece = int(np.searchsorted(ridge.outline.start_deg, azimuth_deg, side="right")) - 1
    assert ridge.obstacles[int(ridge.outline.obstacle[piece])].source == source


def test_terrain_that_is_complete_closes_the_gap_of_the_survey(tmp_path: Path, ridge: Skyline) -> None:
    """The fog between 242 and 334 degrees is wider than 30 degrees; only `complete` fills it."""
    assert len(ridge.unsurveyed_deg) == 0
    folder = Path(__file__).parents[2] / "example_sites" / "ridge_mast"
    text = (folder / "site.toml").read_text(encoding="utf-8")
    for file in ("horizon.csv", "buildings.geojson", "ground.tif"):
        text = text.replace(f'"{file}"', f'"{(folder / file).as_posix()}"')
    (tmp_path / "site.toml").write_text(text.replace("complete = true", "complete = false"), encoding="utf-8")
    skyline = read_skyline(read_site(tmp_path))
    np.testing.assert_allclose(skyline.unsurveyed_deg, [[242.0, 334.0]], atol=0.01)
    # What is known to be hidden there is not unsurveyed.
    assert is_unsurveyed(skyline, [280, 280], [5, 15]).tolist() == [False, True]


def test_the_two_disagreements_of_the_example_are_found(ridge: Skyline) -> None:
    roof, ridge_line = ridge.disagreements
    assert (roof.survey_obstacle, roof.model_obstacle) == ("machine room", "upper station")
    assert 82.0 < roof.start_deg < roof.end_deg < 109.0
    assert (ridge_line.model, ridge_line.model_obstacle) == ("ground.tif", "terrain")
    assert ridge_line.difference_deg < -2.0


def test_mistakes_of_site_file_and_survey_come_together(write_site: Callable[..., Path]) -> None:
    path = write_site(("min_cn0_dbhz = 33", "min_cn0_dbhz = -1"), horizon="azimuth_deg,elevation_deg\n0,99\n")
    with pytest.raises(InputError) as refusal:
        read_site_skyline(path)
    assert str(refusal.value).splitlines() == [
        "site.toml: require.min_cn0_dbhz is -1; it must lie from 0 to 70",
        "horizon.csv: line 2, elevation_deg is 99; it must lie from -5 to 90",
    ]
