"""Keys of a block of building outlines."""

from collections.abc import Callable
from pathlib import Path

import pytest

from siteassess.errors import InputError
from siteassess.site_file.read import read_site

WriteSite = Callable[..., Path]
OUTLINES = '\n[[horizon]]\nsource = "outlines"\nfile = "yard.geojson"\n'


def test_outlines_have_a_reference_system_and_a_ground(write_site: WriteSite) -> None:
    site = read_site(write_site(extra=OUTLINES + 'crs = "EPSG:27700"\nground_up_m = -12.0\n'))
    block = site.horizon[-1]
    assert (block.source, block.crs, block.ground_up_m) == ("outlines", "EPSG:27700", -12.0)


@pytest.mark.parametrize(
    ("key", "message"),
    [
        (
            'crs = "EPSG:1"',
            'horizon[2].crs is "EPSG:1"; it must be a known reference system, such as EPSG:27700',
        ),
        (
            "instrument_up_m = 1.6",
            'horizon[2].instrument_up_m is 1.6; it goes with source = "survey" only',
        ),
        (
            "elevation_error_deg = 0.5",
            'horizon[2].elevation_error_deg is 0.5; it goes with source = "survey" only',
        ),
    ],
)
def test_keys_that_outlines_cannot_have(write_site: WriteSite, key: str, message: str) -> None:
    with pytest.raises(InputError) as refusal:
        read_site(write_site(extra=f"{OUTLINES}{key}\n"))
    assert str(refusal.value) == f"site.toml: {message}"


@pytest.mark.parametrize(
    ("key", "message"),
    [
        ('crs = "EPSG:27700"', 'horizon[1].crs is "EPSG:27700"; it goes with source = "outlines" only'),
        ("ground_up_m = 2.0", 'horizon[1].ground_up_m is 2.0; it goes with source = "outlines" only'),
    ],
)
def test_keys_of_outlines_that_a_survey_cannot_have(write_site: WriteSite, key: str, message: str) -> None:
    with pytest.raises(InputError) as refusal:
        read_site(write_site(('source = "survey"', f'source = "survey"\n{key}')))
    assert str(refusal.value) == f"site.toml: {message}"
