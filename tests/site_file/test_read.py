"""Reading site files: what a good one gives, and what a wrong one is told, word for word."""

from datetime import date, datetime
from pathlib import Path

import pytest
from hypothesis import HealthCheck, example, given, settings
from hypothesis import strategies as st
from pydantic import ValidationError

from siteassess.errors import InputError
from siteassess.site_file.model import Place, Position
from siteassess.site_file.read import read_site

ROOF = """\
format = 1
[site]
name = "Grain store"
latitude_deg = 57.14
longitude_deg = -2.09
[mount]
mast_height_m = 1.5
[antenna]
pattern = "choke-ring"
[[chain]]
part = "preamplifier"
gain_db = 30
noise_figure_db = 2.0
[[chain]]
part = "cable"
loss_db = 4.5
[[chain]]
part = "receiver"
noise_figure_db = 8.0
[[horizon]]
source = "survey"
file = "horizon.csv"
[sky]
systems = ["GPS", "GLONASS"]
[require]
elevation_mask_deg = 10
min_cn0_dbhz = 35
"""
NUMBER_OR_TABLE = "it must be a number from 0 to 100, or a table of such numbers"
PLACE_KEYS = (
    "the keys here are name, latitude_deg, longitude_deg, crs, easting_m, northing_m, height_m,"
    " height_system, geoid_height_m and surveyed_by"
)
EITHER_WAY = "it must hold latitude_deg and longitude_deg, or crs, easting_m and northing_m"
ALL_SIGNALS = (
    "GPS L1 C/A, GPS L1C, GPS L2C, GPS L5, Galileo E1, Galileo E5a, Galileo E5b, Galileo E6, GLONASS L1OF,"
    " GLONASS L2OF, BeiDou B1I, BeiDou B1C, BeiDou B2a and BeiDou B3I"
)
PATHS = "write a Windows path with / or in single quotes"


def written(folder: Path, text: str | bytes) -> Path:
    path = folder / "roof.toml"
    path.write_bytes(text if isinstance(text, bytes) else text.encode())
    return path


def changed(old: str, new: str) -> str:
    assert ROOF.count(old) == 1, old
    return ROOF.replace(old, new)


def refusal(folder: Path, text: str | bytes) -> str:
    with pytest.raises(InputError) as caught:
        read_site(written(folder, text))
    return str(caught.value)


def test_defaults(tmp_path: Path) -> None:
    site = read_site(written(tmp_path, ROOF))
    assert site.path == tmp_path / "roof.toml"
    assert site.position == Position(latitude_deg=57.14, longitude_deg=-2.09, height_m=0.0)
    assert site.place.height_system is None
    assert site.place.surveyed_by is None
    assert (site.mount.phase_centre_above_arp_m, site.mount.heading_deg) == (0.0, 0.0)
    assert (site.mount.tilt_deg, site.mount.tilt_azimuth_deg) == (0.0, 0.0)
    assert site.mount.height_above_roof_m is None
    assert site.mount.roof_surface is None
    assert site.mount.phase_centre_height_m == 1.5
    assert not site.antenna.is_file
    assert [part.physical_temperature_k for part in site.chain] == [290.0, 290.0, 290.0]
    assert site.chain[2].implementation_loss_db is None
    (source,) = site.horizon
    assert (source.bearings, source.complete, source.surveyed_on) == ("true-north", False, None)
    assert source.azimuth_error_deg is source.elevation_error_deg is source.instrument_up_m is None
    assert (source.instrument_east_m, source.instrument_north_m) == (0.0, 0.0)
    assert (site.sky.power, site.sky.days, site.sky.step_s) == ("guaranteed", 10.0, 120.0)
    assert site.sky.start == datetime(2026, 1, 1)
    assert (site.require.min_usable_share, site.require.count_weakened) == (0.95, False)
    assert site.require.max_blocked_sky_share is site.require.max_block_share is None
    assert site.require.max_horizon_deg is site.require.min_height_above_roof_m is None
    assert site.require.min_cn0_for("GPS L1 C/A") == 35.0


def test_every_key_arrives(tmp_path: Path) -> None:
    text = """\
format = 1
[site]
name = " Grain store, north parapet "
latitude_deg = -33
longitude_deg = 359.5
height_m = 61.2
height_system = "orthometric"
geoid_height_m = 49.5
surveyed_by = "Crew 2"
[mount]
mast_height_m = 2
max_mast_height_m = 4
phase_centre_above_arp_m = 0.05
heading_deg = 360
tilt_deg = 1.5
tilt_azimuth_deg = 90
height_above_roof_m = 2.5
roof_surface = "gravel"
[antenna]
pattern = 'antennas\\new.CSV'
[[chain]]
part = "Receiver, upper rack"
noise_figure_db = { "1561" = 3, "1575.42" = 4 }
physical_temperature_k = 300
implementation_loss_db = 1.5
[[horizon]]
source = "survey"
file = "first.csv"
surveyed_on = 2026-10-04
bearings = "true-north"
complete = true
azimuth_error_deg = 1
elevation_error_deg = 0.5
instrument_east_m = -1
instrument_north_m = 2
instrument_up_m = 1.6
[[horizon]]
source = "survey"
file = "second.csv"
[sky]
systems = ["GPS", "BeiDou"]
signals = ["BeiDou B1I", "GPS L1 C/A"]
power = "typical"
start = 2026-06-01T02:30:00+02:00
days = 1
step_s = 30
[require]
elevation_mask_deg = 0
min_cn0_dbhz = { "BeiDou B1I" = 33, "GPS L1 C/A" = 36.5 }
min_usable_share = 0.9
count_weakened = true
max_blocked_sky_share = 0.25
max_block_share = 0.125
max_horizon_deg = 10
min_height_above_roof_m = 0.5
"""
    site = read_site(written(tmp_path, text))
    assert site.format == 1
    assert site.place.name == "Grain store, north parapet"
    assert site.position == Position(latitude_deg=-33.0, longitude_deg=-0.5, height_m=61.2 + 49.5)
    assert site.place.surveyed_by == "Crew 2"
    assert site.mount.model_dump() == {
        "mast_height_m": 2.0,
        "max_mast_height_m": 4.0,
        "phase_centre_above_arp_m": 0.05,
        "heading_deg": 360.0,
        "tilt_deg": 1.5,
        "tilt_azimuth_deg": 90.0,
        "height_above_roof_m": 2.5,
        "roof_surface": "gravel",
    }
    assert site.antenna.is_file
    assert site.chain[0].noise_figure_db == {"1561": 3.0, "1575.42": 4.0}
    assert (site.chain[0].physical_temperature_k, site.chain[0].implementation_loss_db) == (300.0, 1.5)
    assert [source.file for source in site.horizon] == ["first.csv", "second.csv"]
    assert site.horizon[0].surveyed_on == date(2026, 10, 4)
    assert site.horizon[0].complete
    assert (site.horizon[0].azimuth_error_deg, site.horizon[0].elevation_error_deg) == (1.0, 0.5)
    assert (site.horizon[0].instrument_east_m, site.horizon[0].instrument_north_m) == (-1.0, 2.0)
    assert site.horizon[0].instrument_up_m == 1.6
    assert site.sky.systems == ("GPS", "BeiDou")
    assert site.sky.signals == ("BeiDou B1I", "GPS L1 C/A")
    assert site.sky.start == datetime(2026, 6, 1, 0, 30)  # in UTC
    assert (site.sky.power, site.sky.days, site.sky.step_s) == ("typical", 1.0, 30.0)
    assert site.require.min_cn0_for("BeiDou B1I") == 33.0
    assert site.require.min_cn0_for("GPS L1 C/A") == 36.5
    assert (site.require.max_blocked_sky_share, site.require.max_block_share) == (0.25, 0.125)
    assert (site.require.max_horizon_deg, site.require.min_height_above_roof_m) == (10.0, 0.5)
    assert (site.require.min_usable_share, site.require.count_weakened) == (0.9, True)


@pytest.mark.parametrize(
    ("sky", "systems", "signals"),
    [
        (
            "",
            ("GPS", "Galileo", "GLONASS", "BeiDou"),
            ("GPS L1 C/A", "Galileo E1", "GLONASS L1OF", "BeiDou B1C"),
        ),
        ('systems = ["BeiDou", "GPS"]', ("BeiDou", "GPS"), ("GPS L1 C/A", "BeiDou B1C")),
        ('signals = ["Galileo E5a", "Galileo E1"]', ("Galileo",), ("Galileo E5a", "Galileo E1")),
    ],
)
def test_signals_follow_systems_and_systems_follow_signals(
    tmp_path: Path, sky: str, systems: tuple[str, ...], signals: tuple[str, ...]
) -> None:
    site = read_site(written(tmp_path, changed('systems = ["GPS", "GLONASS"]', sky)))
    assert site.sky.systems == systems
    assert site.sky.signals == signals


def test_byte_order_mark_and_crlf(tmp_path: Path) -> None:
    plain = read_site(written(tmp_path, ROOF))
    marked = read_site(written(tmp_path, b"\xef\xbb\xbf" + ROOF.replace("\n", "\r\n").encode()))
    assert marked == plain


def test_folder_that_holds_site_toml(tmp_path: Path) -> None:
    (tmp_path / "site.toml").write_text(ROOF, encoding="utf-8")
    assert read_site(str(tmp_path)).path == tmp_path / "site.toml"


def test_site_without_horizon_or_sky(tmp_path: Path) -> None:
    text = ROOF.replace('[[horizon]]\nsource = "survey"\nfile = "horizon.csv"\n', "")
    site = read_site(written(tmp_path, text.replace('[sky]\nsystems = ["GPS", "GLONASS"]\n', "")))
    assert site.horizon == ()
    assert len(site.sky.signals) == 4


def test_site_is_frozen(tmp_path: Path) -> None:
    with pytest.raises(ValidationError):
        read_site(written(tmp_path, ROOF)).mount.mast_height_m = 3.0


def test_records_of_python_users_are_checked_too() -> None:
    with pytest.raises(ValidationError):
        Place(name="Roof", latitude_deg=91.0)


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        # Shapes and ranges
        ("format = 1", "format = 2", "format is 2; it must be 1"),
        ("format = 1", "format = true", "format is true; it must be 1"),
        ("format = 1", "format = 1.0", "format is 1.0; it must be 1"),
        ("format = 1\n", "", "format is missing; it must be 1"),
        ("mast_height_m = 1.5", "mast_height_m = -3.0", "mount.mast_height_m is -3.0; it must be at least 0"),
        ("mast_height_m = 1.5", "", "mount.mast_height_m is missing; it must be a number, at least 0"),
        (
            "mast_height_m = 1.5",
            "mast_height_m = 1.5\nmax_mast_height_m = 1.0",
            "mount.max_mast_height_m is 1.0; it must be at least mast_height_m, which is 1.5",
        ),
        (
            "mast_height_m = 1.5",
            "mast_height_m = 1.5\nmax_mast_height_m = -1.0",
            "mount.max_mast_height_m is -1.0; it must be at least 0",
        ),
        (
            "mast_height_m = 1.5",
            "mast_heigth_m = 1.5",
            "mount.mast_heigth_m is an unknown key; did you mean mast_height_m?",
        ),
        (
            "mast_height_m = 1.5",
            "mast_height_m = 1.5\nelevation_mask_deg = 5",
            "mount.elevation_mask_deg is an unknown key; it belongs in [require]",
        ),
        ("[mount]", "qqqqq = 1\n[mount]", f"site.qqqqq is an unknown key; {PLACE_KEYS}"),
        (
            "format = 1",
            'format = 1\n"a b\\u0007" = 2',
            '"a b " is an unknown key; the keys here are format, site, mount, antenna, chain, parts, horizon,'
            " foliage, sky and require",
        ),
        ("57.14", "97.14", "site.latitude_deg is 97.14; it must lie from -90 to 90"),
        ("57.14", "nan", "site.latitude_deg is nan; it must be a number from -90 to 90"),
        ("57.14", "-inf", "site.latitude_deg is -inf; it must be a number from -90 to 90"),
        ("57.14", "true", "site.latitude_deg is true; it must be a number from -90 to 90"),
        ("57.14", '"57,14"', 'site.latitude_deg is "57,14"; it must be a number from -90 to 90'),
        ("57.14", "[57.14]", "site.latitude_deg is a list; it must be a number from -90 to 90"),
        ("57.14", "{}", "site.latitude_deg is a table; it must be a number from -90 to 90"),
        ("57.14", "12:30:00", "site.latitude_deg is 12:30:00; it must be a number from -90 to 90"),
        (
            "57.14",
            "0x" + "f" * 5000,
            "site.latitude_deg is a number of more than 18 digits; it must be a number from -90 to 90",
        ),
        ('"Grain store"', '" "', 'site.name is " "; it must not be blank'),
        ('"Grain store"', "7", "site.name is 7; it must be a text in quotation marks"),
        (
            '"Grain store"',
            '"a\\tb"',
            'site.name is "a b"; it must be one line without control characters',
        ),
        (
            '"Grain store"',
            f'"{"x" * 201}"',
            f'site.name is "{"x" * 57}..."; it must have at most 200 characters',
        ),
        ("[mount]\nmast_height_m = 1.5", "", "mount is missing; it must be a table [mount]"),
        ("gain_db = 30", "gain_db = -1", "chain[1].gain_db is -1; it must lie from 0 to 100"),
        ("gain_db = 30", 'gain_db = "30"', f'chain[1].gain_db is "30"; {NUMBER_OR_TABLE}'),
        ("gain_db = 30", "gain_db = []", f"chain[1].gain_db is an empty list; {NUMBER_OR_TABLE}"),
        (
            "loss_db = 4.5",
            "loss_db = { 1575.42 = 4.5 }",
            'chain[2].loss_db.1575 is a table; write the key in quotation marks, such as "1575.42" = ...',
        ),
        (
            "loss_db = 4.5",
            'loss_db = { "1575.42" = -4.5, "1602" = 4 }',
            'chain[2].loss_db."1575.42" is -4.5; it must lie from 0 to 100',
        ),
        ("[[horizon]]", "[horizon]", "horizon is a table; it must be one or more blocks [[horizon]]"),
        ("[[horizon]]", "[[horizonn]]", "horizonn is an unknown key; did you mean horizon?"),
        (
            'source = "survey"',
            'source = "surveyed"',
            'horizon[1].source is "surveyed"; it must be "survey", "outlines" or "terrain"',
        ),
        (
            'file = "horizon.csv"',
            "",
            "horizon[1].file is missing; it must be a text in quotation marks, or a list of such texts",
        ),
        (
            'file = "horizon.csv"',
            'file = "C:\\new\\table.csv"',
            f'horizon[1].file is "C: ew able.csv"; it must be one line without control characters ({PATHS})',
        ),
        (
            'file = "horizon.csv"',
            'file = "h.csv"\ncomplete = 1',
            "horizon[1].complete is 1; it must be true or false",
        ),
        (
            'file = "horizon.csv"',
            'file = "h.csv"\nsurveyed_on = "2026-10-04"',
            'horizon[1].surveyed_on is "2026-10-04";'
            " it must be a date without quotation marks, such as 2026-10-04",
        ),
        (
            'file = "horizon.csv"',
            'file = "h.csv"\nsurveyed_on = 2026-10-04T12:00:00',
            "horizon[1].surveyed_on is 2026-10-04T12:00:00;"
            " it must be a date without quotation marks, such as 2026-10-04",
        ),
        ('["GPS", "GLONASS"]', '"GPS"', 'sky.systems is "GPS"; it must be a list of texts'),
        ('["GPS", "GLONASS"]', "[1]", "sky.systems[1] is 1; it must be a text in quotation marks"),
        ("[sky]", "[sky]\ndays = 0", "sky.days is 0; it must be above 0 and at most 40"),
        ("[sky]", "[sky]\ndays = true", "sky.days is true; it must be a number, above 0 and at most 40"),
        ("[sky]", "[sky]\nstep_s = 1", "sky.step_s is 1; it must lie from 10 to 900"),
        ("[sky]", '[sky]\npower = "most"', 'sky.power is "most"; it must be "guaranteed" or "typical"'),
        (
            "[sky]",
            "[sky]\nstart = 2026-01-01",
            "sky.start is 2026-01-01;"
            " it must be a date and time without quotation marks, such as 2026-01-01T00:00:00",
        ),
        (
            "elevation_mask_deg = 10",
            "elevation_mask_deg = 90",
            "require.elevation_mask_deg is 90; it must be at least 0 and below 90",
        ),
        (
            "min_cn0_dbhz = 35",
            "min_cn0_dbhz = 70.5",
            "require.min_cn0_dbhz is 70.5; it must lie from 0 to 70",
        ),
        (
            "min_cn0_dbhz = 35",
            "",
            "require.min_cn0_dbhz is missing; it must be a number from 0 to 70, or a table of such numbers",
        ),
        # The position
        ("longitude_deg = -2.09", "", "site.longitude_deg is missing; it goes with latitude_deg"),
        ("latitude_deg = 57.14\nlongitude_deg = -2.09", "", f"site has no position; {EITHER_WAY}"),
        (
            "longitude_deg = -2.09",
            'longitude_deg = -2.09\ncrs = "EPSG:27700"\nheight_system = "ellipsoidal"',
            'site.crs is "EPSG:27700"; it is a projected system, which goes with easting_m and northing_m',
        ),
        (
            "longitude_deg = -2.09",
            "longitude_deg = -2.09\neasting_m = 394000",
            "site gives its position twice, by latitude_deg and longitude_deg and by easting_m;"
            f" {EITHER_WAY}",
        ),
        (
            "longitude_deg = -2.09",
            "longitude_deg = -2.09\ngeoid_height_m = 49",
            'site.geoid_height_m is 49.0; it goes with height_system = "orthometric" only',
        ),
        # The chain
        (
            'part = "cable"',
            'part = "Receiver"',
            'chain[2].part is "Receiver"; only the last block may be the receiver',
        ),
        (
            'part = "receiver"',
            'part = "recorder"',
            'chain[3].part is "recorder"; the last block must be the receiver',
        ),
        (
            "noise_figure_db = 8.0",
            "noise_figure_db = 8.0\nloss_db = 1",
            "chain[3].loss_db is 1.0; the receiver has noise_figure_db and implementation_loss_db only",
        ),
        (
            "noise_figure_db = 8.0",
            'noise_figure_db = 8.0\ngain_db = { "1575" = 3, "1602" = 3 }',
            "chain[3].gain_db is a table; the receiver has noise_figure_db and implementation_loss_db only",
        ),
        ("noise_figure_db = 8.0", "", "chain[3].noise_figure_db is missing; the receiver needs it"),
        ("loss_db = 4.5", "", "chain[2] has neither gain_db nor loss_db; one of them must be given"),
        ("gain_db = 30", "gain_db = 30\nloss_db = 1", "chain[1] has gain_db and loss_db; keep one of them"),
        ("noise_figure_db = 2.0", "", "chain[1].noise_figure_db is missing; a part with gain needs it"),
        (
            "loss_db = 4.5",
            "loss_db = 4.5\nnoise_figure_db = 4.5",
            "chain[2].noise_figure_db is 4.5;"
            " the noise of a lossy part follows from loss_db and physical_temperature_k",
        ),
        (
            "loss_db = 4.5",
            "loss_db = 4.5\nimplementation_loss_db = 1",
            "chain[2].implementation_loss_db is 1.0; only the receiver has it",
        ),
        (
            "loss_db = 4.5",
            "loss_db = {}",
            "chain[2].loss_db is an empty table;"
            " it must be a number, or hold a value at the carriers of the site's signals",
        ),
        (
            "loss_db = 4.5",
            'loss_db = { "L1" = 4.5, "1602" = 5 }',
            "chain[2].loss_db.L1 is no carrier;"
            ' the keys are carriers in MHz in quotation marks, such as "1575.42"',
        ),
        (
            "loss_db = 4.5",
            'loss_db = { "157542000" = 4.5, "1602" = 5 }',
            "chain[2].loss_db.157542000 is no carrier;"
            ' the keys are carriers in MHz in quotation marks, such as "1575.42"',
        ),
        (
            "loss_db = 4.5",
            'loss_db = { "1575" = 4.5, "1575.0" = 4.6, "1602" = 5 }',
            'chain[2].loss_db."1575.0" stands there twice; keep one',
        ),
        (
            "loss_db = 4.5",
            'loss_db = { "1500" = 4.5, "1600" = 5 }',
            "chain[2].loss_db has no value at 1602 MHz (GLONASS L1OF);"
            " the table must span the carriers of the site's signals",
        ),
        # Names of the packaged tables
        (
            '"choke-ring"',
            '"Choke Ring"',
            'antenna.pattern is "Choke Ring"; did you mean choke-ring?',
        ),
        (
            '"choke-ring"',
            '"xyz"',
            'antenna.pattern is "xyz"; it must be a file that ends in .csv, or isotropic, hemisphere, patch,'
            " ground-plane or choke-ring",
        ),
        ('"GLONASS"]', '"GLONAS"]', 'sky.systems[2] is "GLONAS"; did you mean GLONASS?'),
        ('"GLONASS"]', '"X"]', 'sky.systems[2] is "X"; the systems are GPS, Galileo, GLONASS and BeiDou'),
        ('"GLONASS"]', '"GPS"]', 'sky.systems[2] is "GPS"; it stands there twice; keep one'),
        ('["GPS", "GLONASS"]', "[]", "sky.systems is an empty list; it must name at least one"),
        ("systems =", "signals = []\n#", "sky.signals is an empty list; it must name at least one"),
        ("systems =", 'signals = ["GPS L1CA"]\n#', 'sky.signals[1] is "GPS L1CA"; did you mean GPS L1 C/A?'),
        ("systems =", 'signals = ["X"]\n#', f'sky.signals[1] is "X"; the signals are {ALL_SIGNALS}'),
        (
            "[sky]",
            '[sky]\nsignals = ["GPS L5", "GLONASS L1OF", "Galileo E1"]',
            'sky.signals[3] is "Galileo E1"; sky.systems must name Galileo too',
        ),
        (
            "[sky]",
            "[sky]\nstart = 1066-10-14T09:00:00",
            "sky.start is 1066-10-14T09:00:00; it must lie in the years 1980 to 2099",
        ),
        # Minimum C/N0 by signal
        (
            "min_cn0_dbhz = 35",
            'min_cn0_dbhz = { "GPS L1 C/A" = 35, "GLONASS L1OF" = 33, "GPS L1CA" = 34 }',
            'require.min_cn0_dbhz."GPS L1CA" is no signal of this site; did you mean GPS L1 C/A?',
        ),
        (
            "min_cn0_dbhz = 35",
            'min_cn0_dbhz = { "GPS L1CA" = 35, "GLONASS L1OF" = 33 }',
            'require.min_cn0_dbhz."GPS L1CA" is no signal of this site; did you mean GPS L1 C/A?',
        ),
        (
            "min_cn0_dbhz = 35",
            'min_cn0_dbhz = { "GPS L1 C/A" = 35, "GLONASS L1OF" = 33, "X" = 34 }',
            "require.min_cn0_dbhz.X is no signal of this site; its signals are GPS L1 C/A and GLONASS L1OF",
        ),
        (
            "min_cn0_dbhz = 35",
            "min_cn0_dbhz = {}",
            "require.min_cn0_dbhz has no value for GPS L1 C/A and GLONASS L1OF;"
            " a table must hold one for every signal of the site",
        ),
    ],
)
def test_one_mistake_has_one_message(tmp_path: Path, old: str, new: str, message: str) -> None:
    assert refusal(tmp_path, changed(old, new)) == f"roof.toml: {message}"


@pytest.mark.parametrize(
    ("text", "message"),
    [
        (b"format = 1\n\xff\n", "line 2 is not UTF-8; save the file in the encoding UTF-8"),
        (
            "format = 1\n[site\n",
            "line 2, column 6 is not TOML; expected ']' at the end of a table declaration",
        ),
        ('name = "', "the end of the file is not TOML; unterminated string"),
        ("a = " + "[" * 5000, "is nested too deeply"),
        ("a" + ".a" * 5000 + " = 1", "is nested too deeply"),
        ("a = " + "9" * 5000, "holds a number of too many digits"),
        (
            '[antenna]\npattern = "C:\\Users\\antenna.csv"\n',
            f"line 2 holds a backslash that TOML cannot read; {PATHS}",
        ),
        ('file = "survey\\horizon.csv"\n', f"line 1 holds a backslash that TOML cannot read; {PATHS}"),
    ],
)
def test_unreadable_file(tmp_path: Path, text: str | bytes, message: str) -> None:
    assert refusal(tmp_path, text) == f"roof.toml: {message}"


def test_missing_file(tmp_path: Path) -> None:
    path = tmp_path / "cellar.toml"
    with pytest.raises(InputError) as caught:
        read_site(path)
    assert str(caught.value) == f"cellar.toml: there is no such file; it was looked for as {path}"
    (mistake,) = caught.value.mistakes
    assert (mistake.file, mistake.where) == ("cellar.toml", "")


def test_folder_without_site_toml(tmp_path: Path) -> None:
    with pytest.raises(InputError) as caught:
        read_site(tmp_path)
    path = tmp_path / "site.toml"
    assert str(caught.value) == f"site.toml: there is no such file; it was looked for as {path}"


def test_empty_file_names_all_that_is_missing(tmp_path: Path) -> None:
    assert refusal(tmp_path, "") == (
        "roof.toml: format is missing; it must be 1\n"
        "roof.toml: site is missing; it must be a table [site]\n"
        "roof.toml: mount is missing; it must be a table [mount]\n"
        "roof.toml: antenna is missing; it must be a table [antenna]\n"
        "roof.toml: chain is missing; it must be one or more blocks [[chain]]\n"
        "roof.toml: require is missing; it must be a table [require]"
    )


def test_mistakes_of_every_kind_are_gathered(tmp_path: Path) -> None:
    text = changed("mast_height_m = 1.5", "mast_height_m = -1.0\nroof = 2")
    text = text.replace('"choke-ring"', '"chokering"').replace("longitude_deg = -2.09", "")
    text = text.replace("gain_db = 30", "gain_db = nan").replace('part = "receiver"', 'part = "rack"')
    text = text.replace('"GPS", ', '"GSP", ')
    keys = (
        "mast_height_m, max_mast_height_m, phase_centre_above_arp_m, heading_deg, tilt_deg, tilt_azimuth_deg,"
        " height_above_roof_m"
    )
    assert refusal(tmp_path, text) == (
        "roof.toml: mount.mast_height_m is -1.0; it must be at least 0\n"
        f"roof.toml: mount.roof is an unknown key; the keys here are {keys} and roof_surface\n"
        f"roof.toml: chain[1].gain_db is nan; {NUMBER_OR_TABLE}\n"
        "roof.toml: site.longitude_deg is missing; it goes with latitude_deg\n"
        'roof.toml: sky.systems[1] is "GSP"; did you mean GPS?\n'
        'roof.toml: antenna.pattern is "chokering"; did you mean choke-ring?\n'
        'roof.toml: chain[3].part is "rack"; the last block must be the receiver'
    )


def test_mistake_carries_its_value_for_programs(tmp_path: Path) -> None:
    with pytest.raises(InputError) as caught:
        read_site(written(tmp_path, changed("mast_height_m = 1.5", "mast_height_m = -3.0")))
    (mistake,) = caught.value.mistakes
    assert (mistake.where, mistake.value) == ("mount.mast_height_m", -3.0)


def read_or_refused(folder: Path, content: bytes) -> None:
    try:
        read_site(written(folder, content))
    except InputError as error:
        assert error.mistakes
        assert all(str(mistake).startswith("roof.toml: ") for mistake in error.mistakes)


FUZZ = settings(
    max_examples=150,
    deadline=None,
    suppress_health_check=[HealthCheck.function_scoped_fixture],
    derandomize=True,
)


@FUZZ
@given(content=st.binary(max_size=200))
@example(content=b"\xef\xbb\xbf")
@example(content=b"\x00")
def test_arbitrary_bytes_never_raise_anything_else(tmp_path: Path, content: bytes) -> None:
    read_or_refused(tmp_path, content)


LINES = ROOF.splitlines()
NUMBERS = ["1", "-1", "1e400", "nan", "0xfffffffffff", "999999999999999999999999999"]
TIMES = ["1979-05-27", "0001-01-01T00:00:00+01:00", "9999-12-31T23:59:59-01:00", "00:00:00"]
TEXTS = ['""', '"a\\nb"', '"EPSG:3857"', '"x.csv"']
NESTED = ["[]", "[[]]", "[1, [2]]", '["GPS"]', '["GPS", 1]', "{}", "{ a.b = 1 }", '{ "1" = 1 }']
VALUES = st.sampled_from([*NUMBERS, *TIMES, *TEXTS, *NESTED, "true"])


@FUZZ
@given(changes=st.dictionaries(st.integers(0, len(LINES) - 1), VALUES, min_size=1, max_size=4))
def test_wrong_values_never_raise_anything_else(tmp_path: Path, changes: dict[int, str]) -> None:
    lines = list(LINES)
    for index, value in changes.items():
        key = lines[index].partition(" = ")[0]
        lines[index] = f"{key} = {value}" if not key.startswith("[") else f"[{value}]"
    read_or_refused(tmp_path, "\n".join(lines).encode())


@FUZZ
@given(text=st.text(alphabet=st.sampled_from("abz[]{}=\"'\\\n.,#0159-:T \tµ"), max_size=60))
def test_text_like_toml_never_raises_anything_else(tmp_path: Path, text: str) -> None:
    read_or_refused(tmp_path, text.encode())


SITE_KEYS = [
    "latitude_deg",
    "longitude_deg",
    "crs",
    "easting_m",
    "northing_m",
    "height_system",
    "geoid_height_m",
]
SITE_VALUES = st.sampled_from(
    [
        "0",
        "1e300",
        "-1e300",
        "500000.0",
        "45.0",
        '"EPSG:25832"',
        '"EPSG:3031"',
        '"EPSG:1"',
        '"orthometric"',
        '"a:b"',
    ]
)


@FUZZ
@given(keys=st.dictionaries(st.sampled_from(SITE_KEYS), SITE_VALUES, max_size=6))
def test_positions_never_raise_anything_else(tmp_path: Path, keys: dict[str, str]) -> None:
    position = "\n".join(f"{key} = {value}" for key, value in keys.items())
    text = changed("latitude_deg = 57.14\nlongitude_deg = -2.09", position)
    read_or_refused(tmp_path, text.encode())


def test_a_system_may_stand_without_a_signal(tmp_path: Path) -> None:
    site = read_site(written(tmp_path, changed("[sky]", '[sky]\nsignals = ["GPS L5"]')))
    assert site.sky.systems == ("GPS", "GLONASS")
