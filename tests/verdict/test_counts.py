"""Satellites at once: counted by hand, and what must hold whatever the sky."""

from types import SimpleNamespace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from siteassess.site_file.model import Requirements
from siteassess.verdict.time.counts import (
    JointSamples,
    at_least_share,
    counts_at_once,
    joint_samples,
    number_reached,
    usable_counts,
)
from siteassess.verdict.time.over_time import over_time, runs

COUNTS = st.lists(st.integers(0, 40), min_size=1, max_size=60).map(np.array)


def joint(rows, *, epochs, systems=("GPS", "Galileo")) -> JointSamples:
    """Rows of epoch, system and whether it is usable."""
    epoch, system, usable = (np.array(column) for column in zip(*rows, strict=True))
    return JointSamples(
        epochs=epochs,
        systems=systems,
        sample=np.arange(len(rows)),
        epoch=epoch,
        system=system,
        usable=usable.astype(bool),
    )


def sky(joint_samples, azimuth_deg, require=None, step_s=120.0):
    samples = SimpleNamespace(
        azimuth_deg=np.asarray(azimuth_deg, dtype=float), elevation_deg=np.full(len(azimuth_deg), 40.0)
    )
    asked = {"elevation_mask_deg": 10.0, "min_cn0_dbhz": 35.0, **(require or {})}
    return over_time(joint_samples, samples, Requirements(**asked), step_s)


def test_only_satellites_that_send_a_signal_are_counted_within_the_window() -> None:
    samples = SimpleNamespace(satellite=np.array([0, 0, 1, 2]), epoch=np.array([0, 1, 0, 0]))
    # GPS is seen at both epochs, the second of which lies outside the window; satellite 2 sends nothing.
    budget = SimpleNamespace(
        samples=samples,
        signals=[
            SimpleNamespace(signal=SimpleNamespace(name="L1"), sample=np.array([0, 1])),
            SimpleNamespace(signal=SimpleNamespace(name="E1"), sample=np.array([2])),
        ],
    )
    states = {
        "L1": SimpleNamespace(usable=np.array([True, True])),
        "E1": SimpleNamespace(usable=np.array([False])),
    }
    tracks = SimpleNamespace(system=("GPS", "Galileo", "Galileo"), joint_epochs=1)
    counted = joint_samples(budget, tracks, states)
    assert counted.sample.tolist() == [0, 2]
    assert counted.usable.tolist() == [True, False]
    in_view, usable = counts_at_once(counted)
    assert in_view.tolist() == [[1], [1], [2]]
    assert usable.tolist() == [[1], [0], [1]]
    assert [count.usable_mean for count in usable_counts(counted.systems, in_view, usable)] == [1, 0, 1]


def test_time_falls_short_as_often_and_as_long_as_counted_by_hand() -> None:
    """Six epochs of two minutes with 2, 1, 1, 2, 1, 2 usable satellites; two are asked."""
    rows = [(epoch, 0, True) for epoch in range(6)]
    rows += [(epoch, 1, epoch in (0, 3, 5)) for epoch in range(6)]
    azimuth_deg = [180.0] * 6 + [90.0, 10.0, 350.0, 90.0, 90.0, 90.0]
    timeline = sky(joint(rows, epochs=6), azimuth_deg, {"min_satellites": 2})
    short = timeline.shortfall("satellites", "all systems")
    assert (short.share, short.times, short.longest_s) == (0.5, 2, 240.0)
    assert short.missing_by_system == {"GPS": 0.0, "Galileo": 1.0}
    assert short.missing_by_sector["N"] == pytest.approx(2 / 3)  # azimuths 10 and 350 both lie round north
    assert short.missing_by_sector["E"] == pytest.approx(1 / 3)
    sectors = {sector.name: (sector.in_view_mean, sector.usable_mean) for sector in timeline.sectors}
    assert sectors["S"] == (1.0, 1.0)
    assert sectors["N"] == pytest.approx((1 / 3, 0.0))


def test_a_single_system_is_held_against_its_own_number() -> None:
    rows = [(0, 0, True), (1, 0, False), (0, 1, True), (1, 1, False)]
    timeline = sky(joint(rows, epochs=2), [0.0] * 4, {"min_satellites_by_system": {"Galileo": 1}})
    short = timeline.shortfall("satellites", "Galileo")
    assert (short.limit, short.share, short.times) == (1, 0.5, 1)
    assert short.missing_by_system == {"GPS": 0.0, "Galileo": 1.0}


def test_undetermined_positions_are_beyond_any_pdop() -> None:
    timeline = sky(joint([(0, 0, True)], epochs=3), [0.0], {"max_pdop": 1e9})
    assert timeline.shortfall("PDOP", "all systems").share == 1.0


def test_an_empty_sky_falls_short_all_the_time() -> None:
    nothing = joint([(0, 0, False)], epochs=4)
    timeline = sky(nothing, [0.0], {"min_satellites": 1})
    short = timeline.shortfall("satellites", "all systems")
    assert (short.share, short.times, short.longest_s) == (1.0, 1, 480.0)


def test_runs_end_with_the_window() -> None:
    assert runs(np.array([False, True, True, False, True])).tolist() == [2, 1]
    assert runs(np.zeros(3, dtype=bool)).tolist() == []
    assert runs(np.zeros(0, dtype=bool)).tolist() == []


@given(count=COUNTS, share=st.floats(0, 1))
def test_a_number_reached_is_the_largest_that_is_there_long_enough(count, share) -> None:
    """Definition, counted epoch by epoch."""
    reached = number_reached(count, share)
    assert np.mean(count >= reached) >= share - 1e-9
    assert np.mean(count >= reached + 1) < share or reached == count.max()


@given(count=COUNTS)
def test_shares_fall_as_the_number_grows(count) -> None:
    share = at_least_share(count)
    assert share[0] == 1.0
    assert np.all(np.diff(share) <= 0)
    assert len(share) == count.max() + 1


ROWS = st.lists(st.tuples(st.integers(0, 4), st.integers(0, 1), st.booleans()), min_size=1, max_size=40)


@settings(deadline=None)
@given(rows=ROWS, more=ROWS)
def test_another_constellation_never_lowers_the_count(rows, more) -> None:
    before = counts_at_once(joint(rows, epochs=5))
    added = [*rows, *((epoch, 2, usable) for epoch, _, usable in more)]
    after = counts_at_once(joint(added, epochs=5, systems=("GPS", "Galileo", "BeiDou")))
    for fewer, more_of_them in zip(before, after, strict=True):
        assert np.all(more_of_them[-1] >= fewer[-1])
        assert np.array_equal(more_of_them[:2], fewer[:2])
