"""The built-in patterns behave as antennas of their kind do."""

import numpy as np
import pytest

from siteassess.antenna.builtin import builtin_pattern, builtin_patterns
from siteassess.antenna.gain import cross_gain_dbic, gain_dbic
from siteassess.tables import packaged_header

L1_HZ = 1575.42e6
TABLES = ["patch", "ground-plane", "choke-ring"]


def gain_at(name: str, elevation_deg: object) -> np.ndarray:
    return gain_dbic(builtin_pattern(name), 0.0, elevation_deg, L1_HZ)  # type: ignore[arg-type]


def test_names_of_the_built_in_patterns() -> None:
    assert list(builtin_patterns()) == ["isotropic", "hemisphere", *TABLES]


@pytest.mark.parametrize("name", list(builtin_patterns()))
def test_pattern_covers_the_sphere_and_says_what_it_rests_on(name: str) -> None:
    pattern = builtin_pattern(name)
    assert pattern.name == name
    assert pattern.elevation_deg[[0, -1]].tolist() == [-90.0, 90.0]
    assert np.all(np.diff(pattern.elevation_deg) >= 0.0)
    assert np.isfinite(pattern.gain_dbic).all()
    assert pattern.rests_on


@pytest.mark.parametrize("name", TABLES)
def test_table_says_that_it_is_generic(name: str) -> None:
    assert "own default, generic" in builtin_pattern(name).rests_on
    assert packaged_header(f"antenna/{name}.csv")["status"].startswith("own default")


@pytest.mark.parametrize("name", TABLES)
def test_gain_falls_from_zenith_to_nadir_without_jumps(name: str) -> None:
    steps_db = np.diff(builtin_pattern(name).gain_dbic[0, 0])
    assert np.all(steps_db > 0.0)
    assert np.all(steps_db < 3.0)


def test_patch_gains_upward_and_little_downward() -> None:
    # Common practice, no source: about 3 to 5 dBic upward, 20 to 30 dB less downward in all.
    pattern = builtin_pattern("patch")
    both = 10.0 ** (gain_dbic(pattern, 0.0, [-90.0, 90.0], L1_HZ) / 10.0)
    both += 10.0 ** (cross_gain_dbic(pattern, 0.0, [-90.0, 90.0], L1_HZ) / 10.0)
    assert 3.0 <= gain_at("patch", 90.0) <= 5.0
    assert 20.0 < 10.0 * np.log10(both[1] / both[0]) < 30.0


def test_ground_plane_antenna_keeps_to_a_data_sheet() -> None:
    # Authority: limits of a base-station antenna data sheet: below +7 dBi at zenith, above 0 dBi from 45 to
    # 90 degrees, above -5 dBi from 10 to 45, above -10 dBi from 0 to 10.
    elevation_deg = np.arange(0.0, 91.0)
    gain = gain_at("ground-plane", elevation_deg)
    assert gain[-1] < 7.0
    assert np.all(gain[elevation_deg >= 45.0] > 0.0)
    assert np.all(gain[elevation_deg >= 10.0] > -5.0)
    assert np.all(gain > -10.0)


def test_choke_ring_rolls_off_steeply() -> None:
    # Common practice, no source: 6 to 7 dBic at zenith, 11 to 13.5 dB less at 10 to 5 degrees.
    zenith, at_10, at_5 = gain_at("choke-ring", [90.0, 10.0, 5.0])
    assert 6.0 < zenith < 7.0
    assert 11.0 < zenith - at_10 < zenith - at_5 < 13.5


def test_choke_ring_looks_down_less_than_a_patch() -> None:
    below_deg = np.arange(-90.0, 0.0, 5.0)
    assert np.all(gain_at("choke-ring", below_deg) < gain_at("ground-plane", below_deg))
    assert np.all(gain_at("ground-plane", below_deg) < gain_at("patch", below_deg))
