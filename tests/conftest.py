"""Site files for tests, and the promise that an installed package is what is tested."""

import os
from collections.abc import Callable
from pathlib import Path

import pytest

import siteassess

CHECKOUT = Path(__file__).parent.parent

SITE_TOML = """\
format = 1

[site]
name = "Test roof"
latitude_deg = 48.0
longitude_deg = 11.0
height_m = 600.0

[mount]
mast_height_m = 1.5

[antenna]
pattern = "choke-ring"

[[chain]]
part = "preamplifier"
gain_db = 40.0
noise_figure_db = 1.5

[[chain]]
part = "cable"
loss_db = 5.0

[[chain]]
part = "receiver"
noise_figure_db = 8.0
implementation_loss_db = 1.0

[[horizon]]
source = "survey"
file = "horizon.csv"
complete = true

[require]
elevation_mask_deg = 10
min_cn0_dbhz = 33
"""

OPEN_HORIZON = "azimuth_deg,elevation_deg\n0,0\n"


def pytest_sessionstart() -> None:
    """Where the wheel is under test, the checkout beside the tests must not be what they import."""
    if os.environ.get("SITEASSESS_EXPECT_INSTALLED"):
        assert CHECKOUT not in Path(siteassess.__file__).parents, siteassess.__file__


@pytest.fixture(autouse=True)
def _documentation_runs_in_the_checkout(monkeypatch: pytest.MonkeyPatch) -> None:
    """Examples in the documents name files as somebody in the project folder would."""
    monkeypatch.chdir(CHECKOUT)


@pytest.fixture
def write_site(tmp_path: Path) -> Callable[..., Path]:
    """Writes site.toml (with replacements) and horizon.csv into a folder of the test's own."""

    def write(
        *replacements: tuple[str, str], horizon: str = OPEN_HORIZON, extra: str = "", folder: str = ""
    ) -> Path:
        text = SITE_TOML
        for old, new in replacements:
            assert old in text, old
            text = text.replace(old, new)
        place = tmp_path / folder
        place.mkdir(exist_ok=True)
        (place / "site.toml").write_text(text + extra, encoding="utf-8")
        (place / "horizon.csv").write_text(horizon, encoding="utf-8")
        return place / "site.toml"

    return write
