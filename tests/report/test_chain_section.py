"""The section on the chain, and what programs read of it."""

from pathlib import Path

import pytest

from siteassess import Assessment, assess, read_site
from siteassess.report.content import report_content
from siteassess.report.results import assessment_record
from siteassess.report.sections.chain import chain_section
from siteassess.report.summary import MOST_LINES, summary_lines

SITE = Path(__file__).parents[2] / "example_sites" / "chain_mistake"
HALF_A_LAST_DIGIT_K = 0.3  # of six printed lines


@pytest.fixture(scope="module")
def late_preamplifier() -> Assessment:
    return assess(read_site(SITE))


def test_the_mistake_in_the_chain_is_the_first_finding(late_preamplifier: Assessment) -> None:
    """The invented pump house: 13.3 dB of cable, 0.3 dB of connectors, 0.2 dB of arrester stand ahead."""
    verdict = late_preamplifier.verdict
    worst = verdict.findings[0]
    assert verdict.outcome == "fail"
    assert (worst.criterion, worst.outcome) == ("max_cn0_lost_before_preamplifier_db", "missed")
    assert worst.value > 13.3 + 0.3 + 0.2
    assert worst.reason.startswith(
        "preamplifier in the cabinet stands behind surge arrester, cable down the wall and connectors;"
    )
    missed = {finding.criterion for finding in verdict.findings if finding.outcome == "missed"}
    assert missed >= {"max_cable_loss_db_per_m", "min_usable_share"}
    met = {finding.criterion for finding in verdict.findings if finding.outcome == "met"}
    assert met >= {"min_supply_voltage_v", "max_supply_voltage_v", "min_saturation_margin_db"}


def test_with_the_preamplifier_first_the_same_site_passes(late_preamplifier: Assessment) -> None:
    """What the finding promises is what the whole budget gives."""
    site = late_preamplifier.site
    chain = (site.chain[3], *site.chain[:3], *site.chain[4:])
    moved = assess(site.model_copy(update={"chain": chain}))
    assert moved.verdict.outcome == "pass"
    promised_db = late_preamplifier.verdict.findings[0].value
    gained_db = [
        after.cn0_median_dbhz - before.cn0_median_dbhz
        for after, before in zip(moved.verdict.signals, late_preamplifier.verdict.signals, strict=True)
    ]
    assert max(gained_db) == pytest.approx(promised_db, abs=0.01)


def test_summary_names_it_and_stays_short(late_preamplifier: Assessment) -> None:
    lines = summary_lines(late_preamplifier)
    assert len(lines) <= MOST_LINES
    assert "C/N0 lost to parts ahead of the preamplifier" in " ".join(lines)


def test_noise_of_the_parts_adds_up_to_the_system(late_preamplifier: Assessment) -> None:
    for table in chain_section(late_preamplifier).tables:
        *parts, system = (float(row[3]) for row in table.rows)
        assert sum(parts) == pytest.approx(system, abs=HALF_A_LAST_DIGIT_K)
        gains = [float(row[1].replace("−", "-")) for row in table.rows[1:-2]]
        assert sum(gains) == pytest.approx(float(table.rows[-1][2].replace("−", "-")), abs=0.03)


def test_chain_table_names_kinds_and_voltage(late_preamplifier: Assessment) -> None:
    section = chain_section(late_preamplifier)
    names = [row[0] for row in section.tables[0].rows]
    assert names[0] == "Antenna"
    assert names[2:4] == ["cable down the wall (foam, 6 mm; 40 m)", "connectors (connector; 2 in a row)"]
    assert section.tables[0].rows[4][5] == "5.00"
    assert "“foam, 6 mm”: data sheets, 33.2 and 28.5 dB per 100 m" in section.sentences[1]


def test_site_without_kinds_names_no_table(markup_assessment: Assessment) -> None:
    assert len(chain_section(markup_assessment).sentences) == 1
    assert "chain" in [section.key for section in report_content(markup_assessment).sections]


def test_programs_find_the_chain_by_carrier(late_preamplifier: Assessment) -> None:
    noises = assessment_record(late_preamplifier)["noise"]
    for noise in noises:
        assert noise["supply_voltage_v"] == pytest.approx(5.0, abs=0.01)
        added_k = sum(part["added_temperature_k"] for part in noise["parts"])
        assert noise["antenna_temperature_k"] + added_k == pytest.approx(
            noise["system_temperature_k"], abs=0.01
        )
        assert -60.0 < noise["gain_over_temperature_db_per_k"] < -15.0


def test_unknown_voltage_is_null(markup_assessment: Assessment) -> None:
    assert assessment_record(markup_assessment)["noise"][0]["supply_voltage_v"] is None


def test_facts_name_the_purpose(late_preamplifier: Assessment) -> None:
    facts = dict(report_content(late_preamplifier).facts)
    assert facts["Minimum C/N0"] == "35 dB-Hz (carrier-phase)"


def test_whole_signal_brings_the_power_of_the_other_component(late_preamplifier: Assessment) -> None:
    # Authority: signal table; the pilot of Galileo E1 is half the signal, GPS L1 C/A has no pilot.
    site = late_preamplifier.site
    whole = assess(site.model_copy(update={"sky": site.sky.model_copy(update={"tracked": "whole-signal"})}))
    gained_db = {
        after.signal: after.cn0_median_dbhz - before.cn0_median_dbhz
        for after, before in zip(whole.verdict.signals, late_preamplifier.verdict.signals, strict=True)
    }
    assert gained_db["Galileo E1"] == pytest.approx(3.01, abs=0.001)
    assert gained_db["GPS L1 C/A"] == pytest.approx(0.0, abs=1e-9)
    assert whole.budget.signals[1].signal.tracked_component == "whole signal"
