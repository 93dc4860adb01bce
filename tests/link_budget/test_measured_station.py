"""Open-sky C/N0 against a permanent reference station, with nothing fitted.

Authority: tests/authorities/measured_cn0_utah_2018.csv, C/N0 as the receiver recorded it on 2018-07-29.
The chain is not published: tests/link_budget/measured_station.toml states ordinary parts, those of the
starter site.
"""

import csv
from pathlib import Path

import numpy as np
import pytest
from numpy.typing import NDArray

from siteassess import assess, read_site
from siteassess.link_budget.budget import SignalBudget

HERE = Path(__file__).parent
STATION_LOG = HERE.parent / "authorities" / "measured_cn0_utah_2018.csv"

# Noise figure and implementation loss of an unknown chain move the level by about 1 dB each, a generic
# pattern by 1 to 3 dB at low elevations: 2 dB over all elevations is what can be asked without a fit.
TWO_DB = 2.0
LOWEST_BIN_DEG = 7.5  # below, the document guarantees nothing


def measured(signal: str) -> tuple[NDArray[np.float64], NDArray[np.float64]]:
    lines = [
        line for line in STATION_LOG.read_text(encoding="utf-8").splitlines() if not line.startswith("#")
    ]
    bins = [
        (float(row["elevation_deg"]), float(row["mean_dbhz"]))
        for row in csv.DictReader(lines)
        if row["signal"] == signal and float(row["elevation_deg"]) >= LOWEST_BIN_DEG
    ]
    elevation_deg, cn0_dbhz = np.array(bins).T
    return elevation_deg, cn0_dbhz


def predicted_less_measured_db(budget: SignalBudget) -> NDArray[np.float64]:
    elevation_deg, cn0_dbhz = measured(budget.signal.name)
    (lines,) = budget.lines
    at_bin = np.searchsorted(lines.elevation_deg, elevation_deg)
    assert lines.elevation_deg[at_bin].tolist() == elevation_deg.tolist()
    return lines.cn0_open_sky_dbhz[at_bin] - cn0_dbhz


@pytest.fixture(scope="module")
def signals() -> tuple[SignalBudget, ...]:
    return assess(read_site(HERE / "measured_station.toml")).budget.signals


def test_cn0_is_within_2_db_rms_of_a_real_station(signals: tuple[SignalBudget, ...]) -> None:
    difference_db = np.concatenate([predicted_less_measured_db(budget) for budget in signals])
    assert len(difference_db) == 17 + 16 + 16
    assert np.sqrt(np.mean(difference_db**2)) < TWO_DB


def test_cn0_rises_with_elevation_as_much_as_it_does_at_the_station(
    signals: tuple[SignalBudget, ...],
) -> None:
    """The level taken off, what is left is the shape of antenna pattern and transmit beam."""
    for budget in signals:
        difference_db = predicted_less_measured_db(budget)
        assert difference_db.std() < TWO_DB, budget.signal.name
