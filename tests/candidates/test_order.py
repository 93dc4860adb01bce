"""The order of choice: what decides, in which sequence, and that being better in everything always counts."""

import itertools
import math
import random
from collections.abc import Callable

import pytest
from hypothesis import given
from hypothesis import strategies as st

from siteassess.candidates.candidate import Candidate, room
from siteassess.candidates.order import dominators, in_order
from siteassess.candidates.rank import rank_candidates
from siteassess.verdict.verdict import Finding

Found = Callable[..., Finding]
Made = Callable[..., Candidate]

A_MILLIONTH = 1e-6


def names(candidates: tuple[Candidate, ...]) -> list[str]:
    return [candidate.name for candidate in candidates]


def test_room_is_relative_to_the_limit_and_positive_inside_it(found: Found) -> None:
    """By hand: (0.97 - 0.95) / 0.95, (20 - 12) / 20, and the same the wrong way."""
    assert room(found("min_usable_share", 0.97, 0.95)) == pytest.approx(0.021053, abs=A_MILLIONTH)
    assert room(found("min_usable_share", 0.93, 0.95)) == pytest.approx(-0.021053, abs=A_MILLIONTH)
    assert room(found("max_horizon_deg", 12.0, 20.0)) == 0.4
    assert room(found("max_horizon_deg", 30.0, 20.0)) == -0.5


def test_room_is_finite_where_nothing_is_allowed(found: Found) -> None:
    assert math.isfinite(room(found("max_block_share", 0.5, 0.0)))
    assert room(found("max_block_share", 0.0, 0.0)) == 0.0


def test_pass_stands_before_unproven_before_fail(found: Found, made: Made) -> None:
    wide, narrow = found("min_usable_share", 1.0, 0.5, "S"), found("min_usable_share", 0.51, 0.5, "S")
    passes = made("passes", narrow)
    unproven = made("unproven", wide, unsurveyed_share=0.01)
    fails = made("fails", wide, found("max_horizon_deg", 11.0, 10.0))
    for order in itertools.permutations((passes, unproven, fails)):
        assert names(in_order(order)) == ["passes", "unproven", "fails"]


def test_fewer_missed_criteria_count_before_the_margin(found: Found, made: Made) -> None:
    one = made("one", found("min_usable_share", 0.1, 0.95, "S"), found("min_usable_share", 0.96, 0.95, "T"))
    two = made("two", found("min_usable_share", 0.94, 0.95, "S"), found("min_usable_share", 0.94, 0.95, "T"))
    assert (one.missed, two.missed) == (1, 2)
    assert one.margin < two.margin
    assert names(in_order((two, one))) == ["one", "two"]


def test_larger_margin_stands_first_then_the_second_smallest_room(found: Found, made: Made) -> None:
    low = made("low", found("max_horizon_deg", 9.0, 10.0), found("min_usable_share", 1.0, 0.5, "S"))
    tied = made("tied", found("max_horizon_deg", 8.0, 10.0), found("min_usable_share", 0.7, 0.5, "S"))
    better = made("zz", found("max_horizon_deg", 8.0, 10.0), found("min_usable_share", 0.8, 0.5, "S"))
    assert (low.margin, tied.margin, better.margin) == (0.1, 0.2, 0.2)
    assert names(in_order((low, tied, better))) == ["zz", "tied", "low"]


def test_satellites_then_advice_then_name_then_place_break_ties(found: Found, made: Made) -> None:
    same = found("min_usable_share", 0.97, 0.95, "S")
    few = made("a", same, satellites=20.0)
    many = made("z", same, satellites=21.0)
    assert names(in_order((few, many))) == ["z", "a"]
    near, far = (found("max_horizon_deg", value, 10.0, required=False) for value in (30.0, 5.0))
    assert names(in_order((made("a", same, near), made("z", same, far)))) == ["z", "a"]
    assert names(in_order((made("b", same), made("a", same)))) == ["a", "b"]
    twins = (made("a", same, place="roofs/2"), made("a", same, place="roofs/1"))
    assert [candidate.place for candidate in in_order(twins)] == ["roofs/1", "roofs/2"]


def test_advice_never_moves_a_site_that_differs_in_what_is_required(found: Found, made: Made) -> None:
    good = made(
        "good",
        found("min_usable_share", 0.97, 0.95, "S"),
        found("max_horizon_deg", 80.0, 10.0, required=False),
    )
    other = made(
        "other",
        found("min_usable_share", 0.96, 0.95, "S"),
        found("max_horizon_deg", 0.0, 10.0, required=False),
    )
    assert good.margin == room(good.findings[0])
    assert names(in_order((other, good))) == ["good", "other"]


# Few levels, so that ties, and sites that are better in everything, are common.
LEVELS = st.integers(min_value=0, max_value=3)
SITES = st.lists(st.tuples(LEVELS, LEVELS, LEVELS, LEVELS, st.booleans()), min_size=1, max_size=12)


def from_levels(found: Found, made: Made, levels: list[tuple[int, int, int, int, bool]]) -> list[Candidate]:
    """Sites of four criteria (a required share, a required and an advised angle, satellites) and a survey."""
    return [
        made(
            f"site {index:02d}",
            found("min_usable_share", 0.90 + 0.03 * share, 0.95, "S"),
            found("max_horizon_deg", 14.0 - 3.0 * horizon, 10.0),
            found("max_block_share", 0.2 - 0.05 * block, 0.125, required=False),
            satellites=20.0 + satellites,
            unsurveyed_share=0.1 if gap else 0.0,
        )
        for index, (share, horizon, block, satellites, gap) in enumerate(levels)
    ]


VERDICTS = ("fail", "unproven", "pass")
OUTCOMES = ("missed", "unproven", "met")


def better_in_everything(one: Candidate, other: Candidate) -> bool:
    """Pareto dominance as it is defined in every textbook: nowhere worse, somewhere better."""

    def goods(candidate: Candidate) -> list[float]:
        by_criterion = {finding.criterion: finding for finding in candidate.findings}
        return [
            by_criterion["min_usable_share"].value,
            -by_criterion["max_horizon_deg"].value,
            -by_criterion["max_block_share"].value,
            candidate.usable_satellites,
            VERDICTS.index(candidate.outcome),
            *(OUTCOMES.index(by_criterion[key].outcome) for key in sorted(by_criterion)),
        ]

    pairs = list(zip(goods(one), goods(other), strict=True))
    return all(a >= b for a, b in pairs) and any(a > b for a, b in pairs)


@given(levels=SITES)
def test_site_that_is_better_in_everything_stands_above(
    found: Found, made: Made, levels: list[tuple[int, int, int, int, bool]]
) -> None:
    ordered = in_order(tuple(from_levels(found, made, levels)))
    for above, below in itertools.combinations(ordered, 2):
        assert not better_in_everything(below, above)


@given(levels=SITES)
def test_beaten_by_is_what_the_definition_says(
    found: Found, made: Made, levels: list[tuple[int, int, int, int, bool]]
) -> None:
    ordered = in_order(tuple(from_levels(found, made, levels)))
    assert dominators(ordered, with_advice=True) == tuple(
        tuple(index for index, one in enumerate(ordered) if better_in_everything(one, other))
        for other in ordered
    )


@given(levels=SITES, seed=st.integers())
def test_ranking_does_not_depend_on_the_order_of_the_sites(
    found: Found, made: Made, levels: list[tuple[int, int, int, int, bool]], seed: int
) -> None:
    candidates = from_levels(found, made, levels)
    shuffled = random.Random(seed).sample(candidates, len(candidates))
    assert rank_candidates(candidates) == rank_candidates(shuffled)


def test_sites_with_different_criteria_do_not_beat_each_other(found: Found, made: Made) -> None:
    best = made("best", found("min_usable_share", 1.0, 0.95, "S"))
    worse = made("worse", found("min_usable_share", 0.5, 0.95, "S"))
    other_signal = made("other signal", found("min_usable_share", 0.4, 0.95, "T"))
    advised = made("advised", found("min_usable_share", 0.3, 0.95, "S", required=False))
    ranking = rank_candidates((best, worse, other_signal, advised))
    rank = {site.candidate.name: site.rank for site in ranking.sites}
    beaten = {site.candidate.name: site.dominated_by for site in ranking.sites}
    assert beaten == {"best": (), "worse": (rank["best"],), "other signal": (), "advised": ()}
    assert not ranking.same_criteria


def test_equal_sites_do_not_beat_each_other(found: Found, made: Made) -> None:
    same = found("min_usable_share", 0.97, 0.95, "S")
    assert dominators(in_order((made("a", same), made("b", same))), with_advice=True) == ((), ())


def test_missed_by_less_than_a_millionth_is_still_missed(found: Found, made: Made) -> None:
    met = made("met", found("min_usable_share", 0.95, 0.95, "S"))
    missed = made("a", found("min_usable_share", 0.95 - 1e-9, 0.95, "S"))
    assert met.margin == missed.margin == 0.0
    assert names(in_order((missed, met))) == ["met", "a"]
    assert dominators(in_order((missed, met)), with_advice=True) == ((), (0,))


def test_advice_can_keep_a_site_from_being_dominated_but_not_from_being_beaten(
    found: Found, made: Made
) -> None:
    low, high = (found("max_horizon_deg", value, 10.0, required=False) for value in (30.0, 5.0))
    best = made("best", found("min_usable_share", 0.99, 0.95, "S"), low)
    worse = made("worse", found("min_usable_share", 0.97, 0.95, "S"), high)
    silent = made("silent", found("min_usable_share", 0.96, 0.95, "S"))
    ranking = rank_candidates((silent, worse, best))
    assert [site.candidate.name for site in ranking.sites] == ["best", "worse", "silent"]
    assert [site.beaten_by for site in ranking.sites] == [(), (1,), (1, 2)]
    assert [site.dominated_by for site in ranking.sites] == [(), (), ()]


@given(levels=SITES)
def test_who_dominates_beats_or_differs_in_advice_alone(
    found: Found, made: Made, levels: list[tuple[int, int, int, int, bool]]
) -> None:
    for site in rank_candidates(from_levels(found, made, levels)).sites:
        assert all(rank < site.rank for rank in site.beaten_by + site.dominated_by)
        for rank in set(site.dominated_by) - set(site.beaten_by):
            assert {difference.required for difference in site.differences if rank == 1} <= {False}


def test_criterion_met_by_a_hair_dominates_one_missed_by_a_hair(found: Found, made: Made) -> None:
    failing = found("max_horizon_deg", 30.0, 10.0)
    met = made("met", found("min_usable_share", 0.95, 0.95, "S"), failing)
    missed = made("a", found("min_usable_share", 0.95 - 1e-9, 0.95, "S"), failing)
    assert dominators(in_order((missed, met)), with_advice=False) == ((), (0,))
