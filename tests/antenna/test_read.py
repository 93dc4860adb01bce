"""The antenna of a site: built in, or a file beside the site file."""

from pathlib import Path

import numpy as np
import pytest

from siteassess.antenna.builtin import builtin_pattern, builtin_patterns
from siteassess.antenna.read import read_pattern
from siteassess.errors import InputError
from siteassess.site_file.model import Site


def site_with(pattern: str, folder: Path) -> Site:
    site = Site.model_validate(
        {
            "format": 1,
            "site": {"name": "Test roof", "latitude_deg": 48.0, "longitude_deg": 11.0},
            "mount": {"mast_height_m": 1.5},
            "antenna": {"pattern": pattern},
            "chain": ({"part": "receiver", "noise_figure_db": 3.0},),
            "require": {"elevation_mask_deg": 10.0, "min_cn0_dbhz": 35.0},
        }
    )
    site._path = folder / "site.toml"
    return site


@pytest.mark.parametrize("name", list(builtin_patterns()))
def test_built_in_pattern_by_name(name: str, tmp_path: Path) -> None:
    pattern = read_pattern(site_with(name, tmp_path))
    assert np.array_equal(pattern.gain_dbic, builtin_pattern(name).gain_dbic)


@pytest.mark.parametrize("file", ["antennas/roof.csv", "antennas/ROOF.CSV"])
def test_file_lies_beside_the_site_file(file: str, tmp_path: Path) -> None:
    (tmp_path / "antennas").mkdir()
    (tmp_path / file).write_text("elevation_deg,gain_dbic\n0,-5\n30,1\n60,4\n90,5\n", encoding="utf-8")
    assert read_pattern(site_with(file, tmp_path)).gain_dbic.max() == 5.0


def test_missing_file_is_named(tmp_path: Path) -> None:
    with pytest.raises(InputError, match=r"roof\.csv: there is no such file"):
        read_pattern(site_with("roof.csv", tmp_path))
