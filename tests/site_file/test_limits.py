"""Sets of criteria, and limits that no sky can meet or that contradict each other, word for word."""

from collections.abc import Callable
from pathlib import Path

import pytest

from siteassess import assess, read_site
from siteassess.errors import InputError

Write = Callable[..., Path]
MASK = "elevation_mask_deg = 10\n"
ASKED = "min_cn0_dbhz = 33\n"


def messages(path: Path) -> list[str]:
    with pytest.raises(InputError) as refused:
        read_site(path)
    return [str(mistake) for mistake in refused.value.mistakes]


@pytest.mark.parametrize(
    ("name", "mask_deg", "limits"),
    [
        # IGS CORS Guidelines 1.1.0: 5 degrees acceptable, nothing above 10, reflectors 20 m away or below 5.
        ("igs", 5.0, {"max_horizon_deg": 10.0, "max_reflector_deg": 5.0, "reflector_distance_m": 20.0}),
        # NGS mark suitability: clear above 15 degrees.
        ("ngs-mark", 15.0, {"max_horizon_deg": 15.0, "max_blocked_sky_share": None}),
        # Siting practice for timing receivers: 25 % of the hemisphere above 10 degrees, 12.5 % in one block.
        ("timing", 10.0, {"max_blocked_sky_share": 0.25, "max_block_share": 0.125, "max_horizon_deg": None}),
    ],
)
def test_a_set_brings_its_mask_and_limits(
    write_site: Write, name: str, mask_deg: float, limits: dict[str, float | None]
) -> None:
    require = read_site(write_site((MASK, f'criteria_set = "{name}"\n'))).require
    assert require.elevation_mask_deg == mask_deg
    assert {key: getattr(require, key) for key in limits} == limits
    for key, limit in limits.items():
        assert (require.asked_by(key) or "").startswith(f"criteria set {name}: ") == (limit is not None)


def test_keys_of_the_site_file_win_over_its_set(write_site: Write) -> None:
    extra = 'criteria_set = "igs"\nmax_horizon_deg = 12\nmin_usable_share = 0.9\n'
    require = read_site(write_site((MASK, MASK + extra))).require
    assert (require.elevation_mask_deg, require.max_horizon_deg, require.min_usable_share) == (10, 12, 0.9)
    assert require.asked_by("max_horizon_deg") == "site file"
    assert require.max_reflector_deg == 5.0


def test_limits_of_a_set_are_required_and_name_their_source(write_site: Write) -> None:
    path = write_site((MASK, 'criteria_set = "igs"\n'), horizon="azimuth_deg,elevation_deg\n0,12\n")
    findings = {finding.criterion: finding for finding in assess(read_site(path)).verdict.findings}
    horizon = findings["max_horizon_deg"]
    assert (horizon.required, horizon.outcome) == (True, "missed")
    assert horizon.source == "criteria set igs: IGS CORS Guidelines 1.1.0, sky visibility"
    assert not findings["max_blocked_sky_share"].required


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ('criteria_set = "igss"', 'require.criteria_set is "igss"; did you mean igs?'),
        ('criteria_set = "roof"', 'require.criteria_set is "roof"; it must be igs, ngs-mark or timing'),
        ("criteria_set = 5", "require.criteria_set is 5; it must be a text in quotation marks"),
        (
            "min_satellites = 106",
            "require.min_satellites is 106; "
            "it must be at most 105, the slots of GPS, Galileo, GLONASS and BeiDou",
        ),
        ("min_satellites = 0", "require.min_satellites is 0; it must lie from 1 to 1000"),
        ("min_satellites = 4.5", "require.min_satellites is 4.5; it must be a whole number from 1 to 1000"),
        (
            "min_satellites_by_system = { GPS = 28 }",
            "require.min_satellites_by_system.GPS is 28; it must be at most 27, the slots of GPS",
        ),
        (
            "min_satellites_by_system = { Galilleo = 4 }",
            "require.min_satellites_by_system.Galilleo is no system of this site; did you mean Galileo?",
        ),
        (
            "min_satellites_by_system = { QZSS = 4 }",
            "require.min_satellites_by_system.QZSS is no system of this site; "
            "its systems are GPS, Galileo, GLONASS and BeiDou",
        ),
        (
            "min_satellites_by_system = 4",
            "require.min_satellites_by_system is 4; it must be a table, such as { GPS = 5 }",
        ),
        (
            "max_gap_s = 600",
            "require.max_gap_s counts no satellites; it needs min_satellites beside it",
        ),
        (
            "min_satellites_share = 1.0",
            "require.min_satellites_share counts no satellites; it needs min_satellites beside it",
        ),
        ("max_pdop = 0", "require.max_pdop is 0; it must be above 0"),
        (
            "min_net_gain_db = 30\nmax_net_gain_db = 20",
            "require.min_net_gain_db is 30.0; it must be at most max_net_gain_db, which is 20.0",
        ),
    ],
)
def test_what_cannot_be_held_is_told_once(write_site: Write, text: str, message: str) -> None:
    assert messages(write_site((ASKED, f"{ASKED}{text}\n"))) == [f"site.toml: {message}"]


def test_an_unknown_set_does_not_make_the_mask_missing(write_site: Write) -> None:
    assert messages(write_site((MASK, 'criteria_set = "timming"\n'))) == [
        'site.toml: require.criteria_set is "timming"; did you mean timing?'
    ]


def test_without_a_set_the_mask_is_mandatory(write_site: Write) -> None:
    assert messages(write_site((MASK, ""))) == [
        "site.toml: require.elevation_mask_deg is missing; it must be a number, at least 0 and below 90"
    ]
