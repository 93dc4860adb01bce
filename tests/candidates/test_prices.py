"""What another choice costs, and in what the sites were not asked alike."""

import dataclasses
from collections.abc import Callable

import pytest

from siteassess.candidates.candidate import Candidate
from siteassess.candidates.rank import rank_candidates
from siteassess.verdict.verdict import Finding

Found = Callable[..., Finding]
Made = Callable[..., Candidate]

A_MILLIONTH = 1e-6


def test_price_is_told_criterion_by_criterion(found: Found, made: Made) -> None:
    first = made(
        "first",
        found("min_usable_share", 0.99, 0.95, "S"),
        found("min_usable_share", 0.96, 0.95, "T"),
        found("min_height_above_roof_m", 1.0, 0.5, required=False),
        satellites=30.0,
    )
    second = made(
        "second",
        found("min_usable_share", 0.955, 0.95, "S"),
        found("min_usable_share", 0.96, 0.95, "T"),
        found("min_height_above_roof_m", 2.0, 0.5, required=False),
        satellites=27.0,
    )
    ranking = rank_candidates((second, first))
    assert ranking.sites[0].differences == ()
    told = [
        (difference.criterion, difference.signal, difference.value, difference.first_value)
        for difference in ranking.sites[1].differences
    ]
    assert told == [
        ("min_usable_share", "S", 0.955, 0.99),
        ("min_height_above_roof_m", None, 2.0, 1.0),
        ("usable_satellites", None, 27.0, 30.0),
    ]
    # By hand: (0.955 - 0.99) / 0.95, (2.0 - 1.0) / 0.5 and (27 - 30) / 30.
    assert [difference.gain for difference in ranking.sites[1].differences] == pytest.approx(
        [-0.036842, 2.0, -0.1], abs=A_MILLIONTH
    )


def test_criterion_that_only_one_site_has_has_no_price(found: Found, made: Made) -> None:
    first = made("first", found("min_usable_share", 0.99, 0.95, "S"))
    second = made("second", found("min_usable_share", 0.97, 0.95, "T"))
    ranking = rank_candidates((first, second))
    assert ranking.sites[1].differences == ()
    assert not ranking.same_criteria


def test_what_is_not_asked_alike_is_named(found: Found, made: Made) -> None:
    first = made("first", found("min_usable_share", 0.99, 0.95, "S"))
    asked = dict(first.asked) | {"require.min_cn0_dbhz": "40.0"}
    second = dataclasses.replace(first, name="second", asked=tuple(asked.items()))
    assert rank_candidates((first, second)).asked_differently == ("require.min_cn0_dbhz",)
    assert rank_candidates((first, first)).asked_differently == ()
