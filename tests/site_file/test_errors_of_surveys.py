"""Keys that say how far off survey and levels may be, and what is told when they are wrong."""

from collections.abc import Callable
from pathlib import Path

import pytest

from siteassess.errors import InputError
from siteassess.site_file.read import read_site
from siteassess.verdict.uncertainty.survey_errors import instrument_classes, stated_errors

WriteSite = Callable[..., Path]
SURVEY = "complete = true"
ANTENNA = 'pattern = "choke-ring"'
OUTLINES = '\n[[horizon]]\nsource = "outlines"\nfile = "yard.geojson"\n'
TERRAIN = '\n[[horizon]]\nsource = "terrain"\nfile = "dem.tif"\n'
CLASSES = (
    "compass and clinometer, compass and clinometer on a tripod, compass and optical clinometer, "
    "rough compass, smartphone or total station"
)


@pytest.mark.parametrize(
    ("beside", "key", "message"),
    [
        (SURVEY, 'instrument = "theodolite"', f'horizon[1].instrument is "theodolite"; it must be {CLASSES}'),
        (
            SURVEY,
            'instrument = "totalstation"',
            'horizon[1].instrument is "totalstation"; did you mean total station?',
        ),
        (
            SURVEY,
            "instrument = 5",
            "horizon[1].instrument is 5; it must be a text in quotation marks",
        ),
        (
            SURVEY,
            "azimuth_error_deg = -1",
            "horizon[1].azimuth_error_deg is -1; it must lie from 0 to 45",
        ),
        (
            SURVEY,
            "elevation_error_deg = -0.5",
            "horizon[1].elevation_error_deg is -0.5; it must lie from 0 to 45",
        ),
        (SURVEY, "distance_error_m = -2", "horizon[1].distance_error_m is -2; it must lie from 0 to 100"),
        (
            SURVEY,
            'distance_error_m = "1 m"',
            'horizon[1].distance_error_m is "1 m"; it must be a number from 0 to 100',
        ),
        (ANTENNA, "gain_error_db = -1", "antenna.gain_error_db is -1; it must lie from 0 to 10"),
        (ANTENNA, "gain_error_db = 11", "antenna.gain_error_db is 11; it must lie from 0 to 10"),
    ],
)
def test_wrong_errors_are_told(write_site: WriteSite, beside: str, key: str, message: str) -> None:
    with pytest.raises(InputError) as refusal:
        read_site(write_site((beside, f"{beside}\n{key}")))
    assert str(refusal.value) == f"site.toml: {message}"


@pytest.mark.parametrize(
    ("key", "message"),
    [
        ("power_error_db = -1", "sky.power_error_db is -1; it must lie from 0 to 10"),
        ("seed = -1", "sky.seed is -1; it must lie from 0 to 999999"),
        ("seed = 1.5", "sky.seed is 1.5; it must be a whole number from 0 to 999999"),
    ],
)
def test_wrong_keys_of_the_draws_are_told(write_site: WriteSite, key: str, message: str) -> None:
    with pytest.raises(InputError) as refusal:
        read_site(write_site(("[require]", f"[sky]\n{key}\n\n[require]")))
    assert str(refusal.value) == f"site.toml: {message}"


@pytest.mark.parametrize("block", [OUTLINES, TERRAIN])
@pytest.mark.parametrize(
    ("key", "shown"), [('instrument = "total station"', '"total station"'), ("distance_error_m = 1", "1.0")]
)
def test_only_surveys_state_errors(write_site: WriteSite, block: str, key: str, shown: str) -> None:
    with pytest.raises(InputError) as refusal:
        read_site(write_site(extra=f"{block}{key}\n"))
    name = key.partition(" ")[0]
    assert (
        str(refusal.value) == f'site.toml: horizon[2].{name} is {shown}; it goes with source = "survey" only'
    )


@pytest.mark.parametrize("name", instrument_classes())
def test_every_instrument_gives_every_error(write_site: WriteSite, name: str) -> None:
    source = read_site(write_site((SURVEY, f'{SURVEY}\ninstrument = "{name}"'))).horizon[0]
    stated = stated_errors(source)
    assert stated == instrument_classes()[name]
    assert all(value is not None and value > 0.0 for value in stated.values())


def test_finer_instruments_have_smaller_errors() -> None:
    """Authority: instrument practice; a total station before a tripod, a tripod before the free hand."""
    order = ("total station", "compass and clinometer on a tripod", "compass and clinometer", "rough compass")
    for key in ("azimuth_error_deg", "elevation_error_deg"):
        values = [instrument_classes()[name][key] for name in order]
        assert values == sorted(values)
