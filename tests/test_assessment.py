"""The whole flow: shares that add up, laws that must hold, and the mistakes of all files in one go."""

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest

from siteassess import assess, read_site
from siteassess.assessment import assess_file
from siteassess.errors import InputError
from siteassess.horizon.shares import covered_share
from siteassess.sky_tracks.density import sky_density

WALL = "azimuth_deg,elevation_deg,distance_m,obstacle\n0,0,,\n150,40,20,wall\n210,40,20,wall\n"
ROUNDING = 1e-12
TWO_TENTHS_OF_A_PERCENT = 0.002

WriteSite = Callable[..., Path]


def test_open_sky_hides_nothing_and_passes(write_site: WriteSite) -> None:
    verdict = assess(read_site(write_site())).verdict
    assert verdict.outcome == "pass"
    assert verdict.blocked_satellite_time_share == 0.0
    assert verdict.sky.blocked_share_above_mask == 0.0
    assert all(signal.hidden_share == signal.lost_share == 0.0 for signal in verdict.signals)


def test_level_ten_degree_horizon_hides_its_zone(write_site: WriteSite) -> None:
    """Authority: the zone of a sphere, sin 10 degrees of the hemisphere."""
    horizon = "azimuth_deg,elevation_deg\n0,10\n"
    sky = assess(read_site(write_site(horizon=horizon))).verdict.sky
    assert sky.blocked_share_of_hemisphere == pytest.approx(0.17365, abs=0.0002)


def test_no_survey_leaves_the_site_unproven(write_site: WriteSite) -> None:
    path = write_site()
    text = path.read_text(encoding="utf-8")
    path.write_text(text[: text.index("[[horizon]]")] + text[text.index("[require]") :], encoding="utf-8")
    verdict = assess(read_site(path)).verdict
    assert verdict.outcome == "unproven"
    assert verdict.sky.unsurveyed_share == pytest.approx(1.0)


def test_unsurveyed_sky_does_not_save_a_site_that_fails(write_site: WriteSite) -> None:
    horizon = "azimuth_deg,elevation_deg,obstacle\n100,60,barn\n300,60,barn\n"
    path = write_site(("complete = true", "complete = false"), horizon=horizon)
    verdict = assess(read_site(path)).verdict
    assert verdict.outcome == "fail"
    assert 0 < verdict.sky.unsurveyed_share < 1


def test_weak_chain_is_told_from_a_bad_roof(write_site: WriteSite) -> None:
    path = write_site(("min_cn0_dbhz = 33", "min_cn0_dbhz = 48"))
    verdict = assess(read_site(path)).verdict
    assert verdict.outcome == "fail"
    assert "Antenna and chain alone miss the limit" in verdict.findings[0].reason


def test_obstacles_and_sectors_add_up(write_site: WriteSite) -> None:
    trees = "30,25,,grove,foliage,8\n70,25,,grove,foliage,8\n"
    horizon = "azimuth_deg,elevation_deg,distance_m,obstacle,cover,depth_m\n0,12,,,,\n"
    horizon += "150,40,20,wall,,\n210,40,20,wall,,\n190,50,30,tower,,\n230,45,30,tower,,\n" + trees
    assessment = assess(read_site(write_site(horizon=horizon)))
    verdict = assessment.verdict
    blocked = sum(obstacle.blocked_satellite_time_share for obstacle in verdict.obstacles)
    assert blocked == pytest.approx(verdict.blocked_satellite_time_share, abs=ROUNDING)
    for signal in verdict.signals:
        lost = sum(obstacle.lost_satellite_time_share[signal.signal] for obstacle in verdict.obstacles)
        assert lost == pytest.approx(signal.lost_share, abs=ROUNDING)
        assert signal.usable_share == pytest.approx(
            signal.open_sky_usable_share - signal.lost_share, abs=ROUNDING
        )
        assert signal.samples_share == pytest.approx(1.0 - signal.hidden_share, abs=ROUNDING)
    assert sum(sector.satellite_time_share for sector in verdict.sectors) == pytest.approx(1.0, abs=ROUNDING)


def test_sky_density_agrees_with_the_samples(write_site: WriteSite) -> None:
    """The angular form, cell by cell, against satellite positions counted one by one."""
    assessment = assess(read_site(write_site(horizon=WALL)))
    tracks = assessment.tracks
    density_of = np.ones(len(tracks.satellite), dtype=bool)
    density = sky_density(tracks, density_of, cell_deg=1.0)
    above = density.elevation_edges_deg[:-1] >= 10.0
    covered = covered_share(assessment.skyline, density.azimuth_edges_deg, density.elevation_edges_deg)
    time = density.mean_satellites[:, above]
    share = float((time * covered[:, above]).sum() / time.sum())
    assert share == pytest.approx(
        assessment.verdict.blocked_satellite_time_share, abs=TWO_TENTHS_OF_A_PERCENT
    )


def test_an_obstacle_more_never_helps(write_site: WriteSite) -> None:
    more = WALL + "30,25,15,shed\n60,25,15,shed\n"
    less = assess(read_site(write_site(horizon=WALL, folder="less"))).verdict
    worse = assess(read_site(write_site(horizon=more, folder="more"))).verdict
    for before, after in zip(less.signals, worse.signals, strict=True):
        assert after.usable_share < before.usable_share
        assert after.hidden_share > before.hidden_share


def test_turning_the_antenna_changes_nothing_when_its_pattern_is_round(write_site: WriteSite) -> None:
    turned = ("mast_height_m = 1.5", "mast_height_m = 1.5\nheading_deg = 77.0")
    plain = assess(read_site(write_site(folder="plain"))).budget.signals[0]
    heading = assess(read_site(write_site(turned, folder="turned"))).budget.signals[0]
    np.testing.assert_allclose(heading.cn0_dbhz, plain.cn0_dbhz, atol=1e-9)


def test_typical_power_is_stronger_by_its_excess(write_site: WriteSite) -> None:
    guaranteed = assess(read_site(write_site(folder="guaranteed"))).budget.signals[0]
    typical = assess(
        read_site(write_site(folder="typical", extra='\n[sky]\npower = "typical"\n'))
    ).budget.signals[0]
    excess_db = typical.cn0_dbhz - guaranteed.cn0_dbhz
    np.testing.assert_allclose(excess_db, guaranteed.signal.typical_excess_db, atol=1e-9)


def test_counting_weakened_signals_raises_the_usable_share(write_site: WriteSite) -> None:
    grove = "azimuth_deg,elevation_deg,obstacle,cover,depth_m\n0,0,,,\n"
    grove += "60,40,grove,foliage,5\n240,40,grove,foliage,5\n"
    strict = assess(read_site(write_site(horizon=grove, folder="strict"))).verdict.signals[0]
    lenient_path = write_site(horizon=grove, folder="lenient", extra="count_weakened = true\n")
    lenient = assess(read_site(lenient_path)).verdict.signals[0]
    assert strict.hidden_share == lenient.hidden_share == 0.0
    assert strict.weakened_share == lenient.weakened_share > 0.1
    assert lenient.usable_share > strict.usable_share


@pytest.mark.parametrize("latitude_deg", [-90.0, 0.0, 90.0])
@pytest.mark.parametrize("longitude_deg", [-180.0, 180.0])
def test_poles_and_date_line_are_places_too(
    write_site: WriteSite, latitude_deg: float, longitude_deg: float
) -> None:
    path = write_site(
        ("latitude_deg = 48.0", f"latitude_deg = {latitude_deg}"),
        ("longitude_deg = 11.0", f"longitude_deg = {longitude_deg}"),
    )
    verdict = assess(read_site(path)).verdict
    assert verdict.outcome == "pass"


def test_mistakes_of_all_files_come_together(write_site: WriteSite) -> None:
    path = write_site(
        ("elevation_mask_deg = 10", "elevation_mask_deg = 90"),
        ("mast_height_m = 1.5", "mast_height_m = 1.5\nmast_heigth_m = 2"),
        ('pattern = "choke-ring"', 'pattern = "antenna.csv"'),
        horizon="azimuth_deg,elevation_deg\n0,95\n",
    )
    with pytest.raises(InputError) as refused:
        assess_file(path)
    assert [(mistake.file, mistake.where) for mistake in refused.value.mistakes] == [
        ("site.toml", "mount.mast_heigth_m"),
        ("site.toml", "require.elevation_mask_deg"),
        ("horizon.csv", "line 2, elevation_deg"),
        ("antenna.csv", ""),
    ]


def test_files_are_read_even_where_the_mount_cannot_be_made_out(write_site: WriteSite) -> None:
    """Seen from an antenna on the mark, the reading 0.3 m east of it would be refused for that alone."""
    path = write_site(
        ("mast_height_m = 1.5", 'mast_height_m = "1.5"'),
        ("complete = true", "complete = true\ninstrument_east_m = -0.3\ninstrument_up_m = 1.6"),
        ('pattern = "choke-ring"', 'pattern = "antenna.csv"'),
        horizon="azimuth_deg,elevation_deg,distance_m,obstacle\n0,0,,\n90,0,0.3,rail\n100,0,0.3,rail\n",
    )
    with pytest.raises(InputError) as refused:
        assess_file(path)
    assert [(mistake.file, mistake.where) for mistake in refused.value.mistakes] == [
        ("site.toml", "mount.mast_height_m"),
        ("antenna.csv", ""),
    ]


@pytest.mark.parametrize(
    ("right", "wrong", "message"),
    [
        ("choke-ring", "chokering", 'site.toml: antenna.pattern is "chokering"; did you mean choke-ring?'),
        (
            'source = "survey"',
            'source = "photo"',
            'site.toml: horizon[1].source is "photo"; it must be "survey", "outlines" or "terrain"',
        ),
        (
            "complete = true",
            'complete = true\n\n[[horizon]]\nsource = "survey"\nfile = "horizon.csv"',
            'site.toml: horizon[2].file is "horizon.csv"; it stands there twice; keep one',
        ),
    ],
)
def test_what_leads_to_no_other_file_has_one_message(
    write_site: WriteSite, right: str, wrong: str, message: str
) -> None:
    with pytest.raises(InputError) as refused:
        assess_file(write_site((right, wrong)))
    assert str(refused.value) == message


def test_a_wrong_site_file_alone_is_told_once(write_site: WriteSite) -> None:
    with pytest.raises(InputError) as refused:
        assess_file(write_site(("mast_height_m = 1.5", "mast_height_m = -1.5")))
    assert len(refused.value.mistakes) == 1


def test_mistakes_of_pattern_and_horizon_come_together(write_site: WriteSite) -> None:
    path = write_site(
        ('pattern = "choke-ring"', 'pattern = "antenna.csv"'), horizon="azimuth_deg,elevation_deg\n"
    )
    with pytest.raises(InputError) as refused:
        assess(read_site(path))
    assert {mistake.file for mistake in refused.value.mistakes} == {"horizon.csv", "antenna.csv"}
