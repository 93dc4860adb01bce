"""Findings, their order and their words."""

from dataclasses import replace

import pytest

from siteassess.horizon.shares import SkyShares
from siteassess.site_file.model import Mount, Requirements
from siteassess.verdict.criteria import read_criteria
from siteassess.verdict.findings.site_findings import site_findings, worst_first
from siteassess.verdict.verdict import ObstacleCost, SignalShares

OPEN_SKY = SkyShares(
    blocked_share_of_hemisphere=0.0,
    blocked_share_above_mask=0.0,
    largest_block_share=0.0,
    largest_block_deg=None,
    foliage_share_above_mask=0.0,
    unsurveyed_share=0.0,
    obstacle_blocked_share_above_mask=(),
    sector_blocked_share=(0.0,) * 8,
    peak_elevation_deg=0.0,
    peak_azimuth_deg=0.0,
)
GOOD = SignalShares(
    signal="GPS L1 C/A",
    usable_share=0.99,
    open_sky_usable_share=1.0,
    usable_share_of_open_sky=0.99,
    weakened_share=0.0,
    lost_share=0.01,
    hidden_share=0.01,
    samples_share=0.99,
    cn0_p05_dbhz=38.0,
    cn0_median_dbhz=45.0,
    cn0_p95_dbhz=50.0,
)
SILO = ObstacleCost(
    name="silo",
    cover="solid",
    azimuth_from_deg=10.0,
    azimuth_to_deg=40.0,
    peak_azimuth_deg=20.0,
    peak_elevation_deg=40.0,
    blocked_share_above_mask=0.05,
    blocked_satellite_time_share=0.06,
    lost_satellite_time_share={"GPS L1 C/A": 0.12},
)


def findings(*, sky=OPEN_SKY, signals=(GOOD,), obstacles=(), height_above_roof_m=None, **require):
    require = {"elevation_mask_deg": 10.0, "min_cn0_dbhz": 35.0, **require}
    mount = Mount(mast_height_m=1.5, height_above_roof_m=height_above_roof_m)
    return {
        (finding.criterion, finding.signal): finding
        for finding in worst_first(site_findings(Requirements(**require), mount, sky, signals, obstacles))
    }


def test_a_signal_below_its_share_is_missed_and_names_the_obstacle() -> None:
    bad = replace(GOOD, usable_share=0.85, lost_share=0.15)
    finding = findings(signals=(bad,), obstacles=(SILO,))["min_usable_share", "GPS L1 C/A"]
    assert (finding.outcome, finding.required, finding.source) == ("missed", True, "site file")
    assert finding.reason == (
        "Usable for 85.0% of the satellite-time above the mask; 95.0% is asked. "
        "Obstacles take 15.0%, most of it silo (12.0%)."
    )


def test_antenna_and_chain_alone_are_named_when_they_miss_the_limit() -> None:
    weak = replace(GOOD, usable_share=0.80, open_sky_usable_share=0.80, lost_share=0.0)
    finding = findings(signals=(weak,))["min_usable_share", "GPS L1 C/A"]
    assert finding.reason == (
        "Usable for 80.0% of the satellite-time above the mask; 95.0% is asked. "
        "Antenna and chain alone miss the limit: even under an open sky only 80.0% reaches 35 dB-Hz."
    )


def test_shares_have_the_decimals_that_tell_them_from_the_limit() -> None:
    close = replace(GOOD, usable_share=0.9498, open_sky_usable_share=0.94996, lost_share=0.0002)
    assert findings(signals=(close,))["min_usable_share", "GPS L1 C/A"].reason == (
        "Usable for 94.98% of the satellite-time above the mask; 95.00% is asked. "
        "Antenna and chain alone miss the limit: even under an open sky only 94.996% reaches 35 dB-Hz."
    )


def test_a_mask_above_all_satellites_is_named_as_the_reason() -> None:
    nothing = replace(
        GOOD, usable_share=0.0, open_sky_usable_share=0.0, lost_share=0.0, hidden_share=0.0, samples_share=0.0
    )
    finding = findings(signals=(nothing,), elevation_mask_deg=89.5)["min_usable_share", "GPS L1 C/A"]
    assert finding.outcome == "missed"
    assert finding.reason == "No satellite that sends it rises above the mask of 89.5 degrees."


def test_unsurveyed_sky_leaves_a_met_limit_unproven_and_a_missed_one_missed() -> None:
    sky = replace(OPEN_SKY, unsurveyed_share=0.25)
    met = findings(sky=sky)["min_usable_share", "GPS L1 C/A"]
    missed = findings(sky=sky, signals=(replace(GOOD, usable_share=0.5),))["min_usable_share", "GPS L1 C/A"]
    assert met.outcome == "unproven"
    assert met.reason.endswith("Holds only if the unsurveyed sky (25.0% of the sky above the mask) is open.")
    assert missed.outcome == "missed"


def test_limits_that_the_site_file_leaves_out_are_advice() -> None:
    high = replace(OPEN_SKY, peak_elevation_deg=30.0, peak_azimuth_deg=140.0)
    advice = findings(sky=high)["max_horizon_deg", None]
    asked = findings(sky=high, max_horizon_deg=20.0)["max_horizon_deg", None]
    assert (advice.required, advice.outcome, advice.limit) == (False, "missed", 10.0)
    assert advice.source == "IGS CORS Guidelines 1.1.0, sky visibility"
    assert (asked.required, asked.outcome, asked.limit) == (True, "missed", 20.0)


def test_hidden_sky_is_counted_against_the_hemisphere() -> None:
    """Sky above 30 degrees is half the hemisphere (zone of a sphere), so half of it hidden is a quarter."""
    sky = replace(OPEN_SKY, blocked_share_above_mask=0.5)
    finding = findings(sky=sky, elevation_mask_deg=30.0)["max_blocked_sky_share", None]
    assert finding.value == pytest.approx(0.25)
    assert finding.outcome == "met"


def test_roof_height_is_judged_only_when_it_is_known() -> None:
    assert ("min_height_above_roof_m", None) not in findings()
    assert findings(height_above_roof_m=0.3)["min_height_above_roof_m", None].outcome == "missed"


def test_worst_finding_comes_first() -> None:
    signals = (
        replace(GOOD, signal="A", usable_share=0.90),
        replace(GOOD, signal="B", usable_share=0.99),
        replace(GOOD, signal="C", usable_share=0.50),
    )
    obstacles = ()
    sky = replace(OPEN_SKY, peak_elevation_deg=80.0)
    require = Requirements(elevation_mask_deg=10.0, min_cn0_dbhz=35.0)
    ordered = worst_first(site_findings(require, Mount(mast_height_m=1.0), sky, signals, obstacles))
    assert [finding.signal for finding in ordered[:3]] == ["C", "A", "B"]
    assert ordered[3].criterion == "max_horizon_deg"  # the missed advice stands before the met ones


def test_every_criterion_but_the_roof_depends_on_the_sky() -> None:
    sky = replace(OPEN_SKY, unsurveyed_share=0.1)
    outcomes = {
        key[0]: finding.outcome for key, finding in findings(sky=sky, height_above_roof_m=1.0).items()
    }
    assert outcomes.pop("min_height_above_roof_m") == "met"
    assert set(outcomes.values()) == {"unproven"}


def test_every_criterion_is_a_key_of_the_site_file() -> None:
    assert set(read_criteria()) <= set(Requirements.model_fields)
