"""The JSON: keys that scripts rely on, rounding, and nothing that JSON cannot hold."""

import dataclasses
import json
import math
import re

import numpy as np

from siteassess.assessment import explained
from siteassess.report.results import assessment_record, json_text
from siteassess.report.sections.setting import CAUTIONS

KEYS = {
    "": {
        "format", "tool_version", "site", "verdict", "findings", "sky", "obstacles", "signals", "satellites",
        "noise", "what_if", "assumptions", "cautions", "surveys", "sectors", "counts", "time", "causes",
        "cures", "uncertainty", "disagreements",
    },
    "site": {"name", "latitude_deg", "longitude_deg", "height_m"},
    "findings": {
        "criterion", "signal", "value", "limit", "unit", "required", "outcome", "source", "reason",
    },
    "sky": {
        "blocked_share_of_hemisphere", "blocked_share_above_mask", "largest_block_share",
        "foliage_share_above_mask", "unsurveyed_share", "blocked_satellite_time_share",
    },
    "obstacles": {
        "name", "blocked_share_above_mask", "blocked_satellite_time_share", "lost_satellite_time_share",
        "foliage_loss_db", "behind_loss_db", "grazing_hours_per_day",
    },
    "surveys": {
        "file", "bearings", "correction_deg", "uncertainty_deg", "instrument_offset_m", "rows",
        "rows_without_distance", "parallax_bound_deg", "parallax_distance_m", "remarks",
    },
    "signals": {
        "signal", "system", "carrier_hz", "usable_share", "usable_share_of_open_sky", "weakened_share",
        "lost_share", "hidden_share", "samples_share", "cn0_dbhz", "by_elevation",
    },
    "satellites": {
        "satellite", "system", "orbit_class", "signal", "hours_above_mask_per_day", "usable_share",
        "received_power_dbw", "cn0_dbhz",
    },
    "what_if": {"change", "signal", "cn0_gain_db", "usable_share", "usable_share_now"},
    "noise": {
        "carrier_hz", "antenna_temperature_k", "antenna_noise_k", "surroundings_cost_db",
        "system_temperature_k", "noise_figure_db", "net_gain_db", "gain_over_temperature_db_per_k",
        "supply_voltage_v", "parts",
    },
}  # fmt: skip
BY_ELEVATION = {
    "elevation_deg", "orbit_class", "received_power_dbw", "tracked_share_db", "antenna_gain_dbic",
    "cn0_open_sky_dbhz",
}  # fmt: skip


def test_keys_are_those_of_the_format(markup_assessment):
    record = assessment_record(explained(markup_assessment))
    assert record["format"] == "siteassess-assessment/1"
    assert set(record) == KEYS[""]
    for part in ("site", "sky"):
        assert set(record[part]) == KEYS[part]
    for part in ("findings", "obstacles", "surveys", "signals", "satellites", "noise", "what_if"):
        assert record[part], part
        assert all(set(entry) == KEYS[part] for entry in record[part])
    for signal in record["signals"]:
        assert set(signal["cn0_dbhz"]) == {"p05", "median", "p95"}
        assert all(set(entry) == BY_ELEVATION for entry in signal["by_elevation"])
    for satellite in record["satellites"]:
        assert set(satellite["received_power_dbw"]) == {"min", "max"}
        assert set(satellite["cn0_dbhz"]) == {"min", "median", "max"}
    names = [signal["signal"] for signal in record["signals"]]
    assert all(list(entry["lost_satellite_time_share"]) == names for entry in record["obstacles"])


def test_elevations_run_from_2_5_to_87_5_for_each_orbit_class(markup_assessment):
    for signal in assessment_record(markup_assessment)["signals"]:
        for orbit_class in {entry["orbit_class"] for entry in signal["by_elevation"]}:
            elevations = [
                entry["elevation_deg"]
                for entry in signal["by_elevation"]
                if entry["orbit_class"] == orbit_class
            ]
            assert elevations == [2.5 + 5.0 * step for step in range(18)]


def test_numbers_have_no_more_decimals_than_promised(markup_assessment):
    """A share 6, decibels 3, degrees 4: counted in the text itself."""
    for line in json_text(markup_assessment).splitlines():
        found = re.fullmatch(r'\s*"([a-z0-9_]+)": (-?\d+\.(\d+)),?', line)
        if not found:
            continue
        key, number, decimals = found[1], float(found[2]), len(found[3])
        allowed = 4 if key.endswith("_deg") else 6 if "share" in key or key in ("value", "limit") else 3
        assert decimals <= allowed, line
        assert str(number) != "-0.0", line


def test_text_is_json_that_every_reader_takes(markup_assessment):
    """RFC 8259, section 6: numbers such as NaN and Infinity are not permitted."""

    def refuse(constant):
        raise AssertionError(constant)

    text = json_text(markup_assessment)
    assert json.loads(text, parse_constant=refuse) == assessment_record(markup_assessment)
    assert text.endswith("}\n")
    assert "\r" not in text


def test_what_does_not_exist_is_null(markup_assessment):
    verdict = markup_assessment.verdict
    nothing = dataclasses.replace(
        verdict.signals[0], usable_share_of_open_sky=None, cn0_p05_dbhz=None, usable_share=math.nan
    )
    changed = dataclasses.replace(
        markup_assessment, verdict=dataclasses.replace(verdict, signals=(nothing, *verdict.signals[1:]))
    )
    signal = json.loads(json_text(changed))["signals"][0]
    assert signal["usable_share_of_open_sky"] is None
    assert signal["usable_share"] is None
    assert signal["cn0_dbhz"]["p05"] is None


def test_names_and_cautions_arrive_unchanged(markup_assessment):
    record = json.loads(json_text(markup_assessment))
    assert record["site"]["name"] == markup_assessment.site.place.name
    assert [entry["name"] for entry in record["obstacles"]] == [
        obstacle.name for obstacle in markup_assessment.skyline.obstacles
    ]
    assert record["cautions"] == list(CAUTIONS)


def test_budget_terms_add_up(markup_assessment):
    """C/N0 = power at 0 dBic + tracked share + gain - N0 - implementation loss: the definition itself.

    N0 = k T [IEEE standard noise temperature relation], k from SI 2019.
    """
    record = assessment_record(markup_assessment)
    system_k = {noise["carrier_hz"]: noise["system_temperature_k"] for noise in record["noise"]}
    implementation_loss_db = 1.0
    thousandths_of_four_terms_db = 0.003
    for signal in record["signals"]:
        noise_dbw_per_hz = 10.0 * math.log10(1.380649e-23 * system_k[signal["carrier_hz"]])
        for entry in signal["by_elevation"]:
            expected = (
                entry["received_power_dbw"]
                + entry["tracked_share_db"]
                + entry["antenna_gain_dbic"]
                - noise_dbw_per_hz
                - implementation_loss_db
            )
            assert np.isclose(entry["cn0_open_sky_dbhz"], expected, atol=thousandths_of_four_terms_db)


def test_printed_json_cannot_steer_the_terminal(markup_assessment):
    name = "Roof \x1b[31m \x9b31m \u202e \u2028 \u5317\u5854"
    place = markup_assessment.site.place.model_copy(update={"name": name})
    site = markup_assessment.site.model_copy(update={"place": place})
    text = json_text(dataclasses.replace(markup_assessment, site=site))
    assert not {"\x1b", "\x9b", "\u202e", "\u2028"} & set(text)
    assert "\u5317\u5854" in text
    assert json.loads(text)["site"]["name"] == name
