"""Skyplot and panorama: where things are drawn, how they read in grey, and that they repeat."""

import re
import xml.etree.ElementTree as ElementTree

import matplotlib
import numpy as np
import pytest
from scipy.optimize import isotonic_regression

from siteassess.report.figures.drawing import obstacle_edges, on_paper, outline_points, shortened
from siteassess.report.figures.labels import label_rows, spread
from siteassess.report.figures.panorama import panorama_svg
from siteassess.report.figures.skyplot import skyplot_svg
from siteassess.report.figures.track_lines import MARGIN_CLASSES, first_signal_margin_db, runs


@pytest.mark.parametrize("draw", [skyplot_svg, panorama_svg])
def test_figure_is_well_formed_and_carries_no_text_and_no_date(markup_assessment, draw):
    svg = draw(markup_assessment)
    elements = {element.tag.rpartition("}")[2] for element in ElementTree.fromstring(svg).iter()}
    assert not {"text", "image", "script", "date"} & elements


@pytest.mark.parametrize("draw", [skyplot_svg, panorama_svg])
def test_figure_does_not_depend_on_the_settings_of_the_user(markup_assessment, draw):
    expected = draw(markup_assessment)
    with matplotlib.rc_context(
        {"axes.facecolor": "red", "font.size": 20, "svg.fonttype": "none", "lines.linewidth": 9}
    ):
        assert draw(markup_assessment) == expected


@pytest.mark.parametrize(
    ("azimuth_deg", "elevation_deg", "expected"),
    [(0, 0, (0, 1)), (90, 0, (1, 0)), (180, 45, (0, -0.5)), (270, 0, (-1, 0)), (123, 90, (0, 0))],
)
def test_horizon_is_the_rim_and_north_is_up(azimuth_deg, elevation_deg, expected):
    """Polar plot of a visibility diagram: horizon at the rim, zenith in the centre (surveying textbooks)."""
    assert on_paper(azimuth_deg, elevation_deg) == pytest.approx(expected, abs=1e-12)


def test_outline_goes_all_round_and_shows_vertical_edges(markup_assessment):
    azimuth_deg, elevation_deg = outline_points(markup_assessment.skyline)
    assert azimuth_deg[0] == pytest.approx(0.0, abs=1e-5)
    assert azimuth_deg[-1] == pytest.approx(360.0, abs=1e-5)
    assert np.all(np.diff(azimuth_deg) <= 1.0)
    at_edge = np.abs(azimuth_deg - 140.0) < 1e-5
    assert np.ptp(elevation_deg[at_edge]) > 30.0


def test_straight_wall_bulges_upward(markup_assessment):
    """A straight level edge is a great circle: its elevation lies above the chord."""
    wall = markup_assessment.skyline.obstacles[
        [obstacle.name for obstacle in markup_assessment.skyline.obstacles].index("<script>alert(1)</script>")
    ]
    azimuth_deg, upper_deg, lower_deg = obstacle_edges(wall)
    straight_deg = np.interp(azimuth_deg, wall.azimuth_deg, wall.elevation_deg)
    assert np.max(upper_deg - straight_deg) > 0.2
    assert np.min(upper_deg - straight_deg) > -1e-4
    assert np.all(lower_deg == 0.0)


def lightness(colour):
    """CIE 1976 L* of an sRGB colour: IEC 61966-2-1 and CIE 15 (coefficients from memory)."""
    red, green, blue = (
        value / 12.92 if value <= 0.04045 else ((value + 0.055) / 1.055) ** 2.4
        for value in matplotlib.colors.to_rgb(colour)
    )
    return 116.0 * (0.2126 * red + 0.7152 * green + 0.0722 * blue) ** (1 / 3) - 16.0


def test_tracks_darken_as_the_margin_grows_and_differ_by_more_than_colour():
    levels = [lightness(look.color) for look in MARGIN_CLASSES]
    assert np.all(np.diff(levels) < -2.0)
    assert levels[0] < 75.0  # still seen on white
    assert len({(look.width, str(look.dash)) for look in MARGIN_CLASSES}) == len(MARGIN_CLASSES)


def test_margin_is_that_of_the_first_signal_a_satellite_sends(markup_assessment):
    margin_db = first_signal_margin_db(markup_assessment)
    for budget in markup_assessment.budget.signals:  # each system sends one signal of this site
        assert np.array_equal(margin_db[budget.sample], budget.cn0_dbhz - budget.min_cn0_dbhz)


def test_tracks_break_between_passes():
    x = np.arange(6.0)
    drawn, _ = runs(x, x, np.ones(6, bool), np.array([1, 1, 0, 1, 1, 0], bool))
    assert np.array_equal(drawn, [0, 1, 2, np.nan, 3, 4, 5, np.nan], equal_nan=True)


@pytest.mark.parametrize("count", [2, 5, 20, 55])
def test_numbers_at_the_rim_move_as_little_as_possible(count):
    """Least squares under an ascending order is isotonic regression: held against scipy."""
    azimuth_deg = np.sort(np.random.default_rng(count).uniform(0.0, 200.0, count))  # opening beyond 200
    placed = spread(azimuth_deg, 3.0)
    steps = 3.0 * np.arange(count)
    assert placed == pytest.approx(isotonic_regression(azimuth_deg - steps).x + steps, abs=1e-9)
    assert np.min(np.diff(placed)) >= 3.0 - 1e-9


def test_numbers_at_the_rim_keep_apart_across_north():
    placed = spread(np.array([359.0, 1.0, 0.0]), 6.0)
    assert np.sort((placed + 180.0) % 360.0).tolist() == pytest.approx([174.0, 180.0, 186.0])


def test_full_rim_shares_the_circle():
    placed = spread(np.zeros(80), 6.5)
    gaps = np.diff(np.sort(placed % 360.0))
    assert gaps == pytest.approx(np.full(79, 4.5))


def test_names_above_the_horizon_do_not_overlap():
    generator = np.random.default_rng(1)
    centre, width = generator.uniform(0, 360, 30).tolist(), generator.uniform(10, 80, 30).tolist()
    rows = label_rows(centre, width, rows=5)
    placed = [
        (row, middle, across)
        for row, middle, across in zip(rows, centre, width, strict=True)
        if row is not None
    ]
    assert len(placed) > 5
    for index, (row, middle, across) in enumerate(placed):
        for other_row, other_middle, other_across in placed[:index]:
            assert row != other_row or abs(middle - other_middle) >= (across + other_across) / 2


def test_long_names_are_cut():
    assert shortened("x" * 40, 10) == "x" * 9 + "…"
    assert shortened("short", 10) == "short"


def test_skyplot_stays_small(markup_assessment):
    assert len(skyplot_svg(markup_assessment)) < 1_000_000
    assert re.search(r'width="\d+(\.\d+)?pt"', skyplot_svg(markup_assessment))
