"""What another cable, preamplifier or antenna would change."""

from collections.abc import Callable
from pathlib import Path

import numpy as np
import pytest

from siteassess import Assessment, assess, read_site
from siteassess.assessment import explained
from siteassess.verdict.cures.what_if import Change

HUNDREDTH_DB = 0.01
SITE = """\
format = 1
[site]
name = "Test roof"
latitude_deg = 50.0
longitude_deg = 8.0
[mount]
mast_height_m = 1.5
{mount}
[antenna]
pattern = "{antenna}"
[[chain]]
part = "preamplifier"
gain_db = 20.0
noise_figure_db = {noise_figure_db}
[[chain]]
part = "cable"
loss_db = {loss_db}
[[chain]]
part = "receiver"
noise_figure_db = 8.0
[[horizon]]
source = "survey"
file = "horizon.csv"
[sky]
systems = ["GPS"]
days = 1
step_s = 600
[require]
elevation_mask_deg = 5
min_cn0_dbhz = {min_cn0_dbhz}
"""
HORIZON = (
    "azimuth_deg,elevation_deg,obstacle,cover,depth_m\n0,4,,,\n0,30,trees,foliage,4\n80,35,trees,foliage,4\n"
)


@pytest.fixture
def assessed(tmp_path: Path) -> Callable[..., Assessment]:
    def of(**values: object) -> Assessment:
        text = SITE.format(
            **{
                "antenna": "patch",
                "noise_figure_db": 2.5,
                "loss_db": 10.0,
                "mount": "",
                "min_cn0_dbhz": 44,
                **values,
            }
        )
        (tmp_path / "site.toml").write_text(text, encoding="utf-8")
        (tmp_path / "horizon.csv").write_text(HORIZON, encoding="utf-8")
        return explained(assess(read_site(tmp_path / "site.toml")))

    return of


def change(assessment: Assessment, words: str) -> Change:
    (found,) = [one for one in assessment.what_if if one.change == words]
    return found


CHANGES = {
    "half the cable": {"loss_db": 5.0},
    "preamplifier with 1.5 dB noise figure": {"noise_figure_db": 1.5},
    "antenna: choke-ring": {"antenna": "choke-ring"},
    "antenna: ground-plane": {"antenna": "ground-plane"},
}


@pytest.mark.parametrize("mount", ["", "tilt_deg = 20\ntilt_azimuth_deg = 120"], ids=["upright", "tilted"])
@pytest.mark.parametrize(("words", "values"), CHANGES.items(), ids=CHANGES.keys())
def test_change_is_what_the_changed_site_file_gives(
    assessed: Callable[..., Assessment], words: str, values: dict[str, object], mount: str
) -> None:
    before, after = assessed(mount=mount), assessed(mount=mount, **values)
    found = change(before, words)
    (lines,), (lines_after,) = (one.budget.signals[0].lines for one in (before, after))
    gains_db = [
        (lines_after.cn0_open_sky_dbhz - lines.cn0_open_sky_dbhz)[lines.elevation_deg == elevation_deg].item()
        for elevation_deg in (5.0, 10.0, 30.0)
    ]
    assert found.cn0_gain_db == pytest.approx(gains_db, abs=HUNDREDTH_DB)
    assert found.usable_share_now == pytest.approx(before.verdict.signals[0].usable_share, abs=1e-9)
    assert found.usable_share == pytest.approx(after.verdict.signals[0].usable_share, abs=1e-9)


def test_some_change_matters_here(assessed: Callable[..., Assessment]) -> None:
    shares = {one.change: one.usable_share - one.usable_share_now for one in assessed().what_if}
    assert max(shares.values()) > 0.01


def test_some_change_matters_for_the_worse(assessed: Callable[..., Assessment]) -> None:
    found = change(assessed(antenna="choke-ring"), "antenna: patch")
    assert found.usable_share < found.usable_share_now


@pytest.mark.parametrize("min_cn0_dbhz", [42.0, 44.0, 47.0, 50.0])
def test_samples_that_cannot_be_lost_need_no_look(
    assessed: Callable[..., Assessment], monkeypatch: pytest.MonkeyPatch, min_cn0_dbhz: float
) -> None:
    # A quiet chain, so that antennas differ in noise too.
    values = {"antenna": "choke-ring", "noise_figure_db": 0.2, "loss_db": 0.0, "min_cn0_dbhz": min_cn0_dbhz}
    some = assessed(**values).what_if
    monkeypatch.setattr("siteassess.verdict.cures.what_if._least_difference_db", lambda *arguments: -np.inf)
    assert assessed(**values).what_if == some


def test_own_antenna_is_no_change(assessed: Callable[..., Assessment]) -> None:
    assert {one.change for one in assessed().what_if} == set(CHANGES)
