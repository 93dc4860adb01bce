"""The figures on signal strength and noise: the waterfall, the noise map and the polar cut."""

from xml.etree import ElementTree

import numpy as np
import pytest

from siteassess.antenna.builtin import builtin_pattern
from siteassess.assessment import explained
from siteassess.report.figures.antenna_plot import antenna_svg
from siteassess.report.figures.noise_map import noise_map_svg
from siteassess.report.figures.waterfall import waterfall, waterfall_svg
from siteassess.report.sections.changes import changes_section

THOUSANDTH_DB = 0.001


def test_steps_lead_from_the_satellite_to_the_budget(markup_assessment):
    fall = waterfall(markup_assessment)
    budget = markup_assessment.budget.signals[0]
    lines = budget.lines[0]
    (open_dbhz,) = lines.cn0_open_sky_dbhz[lines.elevation_deg == 30.0]
    obstacles_db = next(step.change_db for step in fall.site if step.label.startswith("Obstacles"))
    assert obstacles_db <= 0.0
    assert fall.cn0_dbhz == pytest.approx(open_dbhz + obstacles_db, abs=THOUSANDTH_DB)
    # Authority: k x 290 K = -203.975 dBW/Hz.
    assert fall.path[2].change_db == pytest.approx(203.975, abs=THOUSANDTH_DB)


def test_steps_of_the_chain_are_its_noise(markup_assessment):
    noise = markup_assessment.budget.signals[0].noise
    steps_db = [
        step.change_db for step in waterfall(markup_assessment).site if step.label.startswith("Noise:")
    ]
    assert len(steps_db) == len(markup_assessment.site.chain)
    rise = noise.system_temperature_k / noise.antenna_temperature_k
    assert sum(steps_db) == pytest.approx(-10.0 * np.log10(rise), abs=THOUSANDTH_DB)


def test_hidden_share_is_that_of_the_samples_near_the_elevation(markup_assessment):
    fall = waterfall(markup_assessment)
    samples, budget = markup_assessment.budget.samples, markup_assessment.budget.signals[0]
    near = np.abs(samples.elevation_deg[budget.sample] - fall.elevation_deg) <= 2.5
    assert fall.hidden_share == pytest.approx(samples.hidden[budget.sample][near].mean())


@pytest.mark.parametrize("draw", [waterfall_svg, noise_map_svg])
def test_figures_are_drawings_that_repeat(markup_assessment, draw):
    svg = draw(markup_assessment)
    assert ElementTree.fromstring(svg).tag == "{http://www.w3.org/2000/svg}svg"
    assert svg == draw(markup_assessment)
    assert len(svg) < 200_000


def test_cut_of_a_pattern_that_names_no_carrier_has_two_lines():
    svg = antenna_svg(builtin_pattern("choke-ring"))
    assert svg.count("stroke: #1f4e79") == 2  # co- and cross-polar
    assert antenna_svg(builtin_pattern("hemisphere")).count("stroke: #1f4e79") == 1


def test_changes_are_told_for_the_first_and_the_worst_signal(markup_assessment):
    assert changes_section(markup_assessment) is None
    section = changes_section(explained(markup_assessment))
    worst = min(markup_assessment.verdict.signals, key=lambda shares: shares.usable_share).signal
    first = markup_assessment.budget.signals[0].signal.name
    assert [table.caption.partition(":")[0] for table in section.tables] == list(
        dict.fromkeys([first, worst])
    )
    assert all(len(row) == len(section.tables[0].header) for row in section.tables[0].rows)
