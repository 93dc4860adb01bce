"""What the ranking says, once: the page and the document only lay it out."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.phrases import NOTHING, number, percent, plain, told_apart
from siteassess.report.pieces import Answer, Content, Section, Table
from siteassess.report.ranking.chart import MOST_ROWS
from siteassess.report.ranking.criteria import criteria_tables
from siteassess.report.ranking.words import (
    OUTCOMES,
    criterion_name,
    gains,
    gives_up,
    margin_text,
    mistake_text,
    rank_list,
    site_names,
)
from siteassess.report.sections.setting import CAUTIONS
from siteassess.wording import listed

if TYPE_CHECKING:
    from siteassess.candidates.ranking import RankedSite, Ranking

__all__ = ["ranking_content"]

MOST_RANKS = 4
MOST_NAMED = 4
MOST_TOLD, MOST_PRICED = 2, 4  # differences: on the first page, in the table
TONES = {"pass": "met", "unproven": "unproven", "fail": "missed"}

RULES = (
    "First by verdict: pass before unproven before fail. Then by the number of required criteria that are "
    "missed, the fewest first.",
    "Then by margin. The room of a criterion is how far inside its limit a site lies, relative to the limit; "
    "it is negative where the limit is missed. The margin of a site is the smallest room of its required "
    "criteria. Where two margins are equal, the next smallest room decides, and so on.",
    "Then by the mean number of satellites usable at once, then by the room of advice, then by name.",
    "A spot is beaten when another one is nowhere worse and somewhere better in verdict, required criteria "
    "and usable satellites; it is beaten in all when that holds with every advice, too. Whoever beats a spot "
    "stands above it. Spots that are held against different criteria do not beat each other.",
    "Margins are relative to each criterion's own limit, and the smallest decides. They weigh no costs of "
    "access, power, network or permission; those are for the reader to weigh.",
    "Values that differ by less than the survey's errors are no reason to prefer one spot to another.",
)


def ranking_content(ranking: Ranking) -> Content:
    """Everything that page and document say about a ranking, in the order of reading.

    Parameters
    ----------
    ranking : Ranking
        At least one site of which has a rank.
    """
    from siteassess import __version__

    first = ranking.sites[0].candidate
    return Content(
        title="Ranking of spots for a GNSS reference-station antenna",
        site=_spots(len(ranking.sites)).capitalize() + " compared",
        outcome=first.outcome,
        verdict=f"First: {site_names(ranking)[0]}",
        answers=_answers(ranking),
        facts=_facts(ranking),
        cautions_heading="Cautions",
        cautions=CAUTIONS,
        sections=tuple(section for section in _sections(ranking) if section is not None),
        maker=f"siteassess {__version__}",
    )


def _spots(count: int) -> str:
    return "one spot" if count == 1 else f"{count} spots"


def _answers(ranking: Ranking) -> tuple[Answer, ...]:
    names = site_names(ranking)
    answers = [Answer(label="First", question="Why this one?", answer=_why(ranking.sites[0]))]
    if len(ranking.sites) > 1:
        second = ranking.sites[1]
        answers.append(
            Answer(
                label="Second",
                question="What is the second choice, and what does it cost?",
                answer=f"{names[1]}; it {_verdict(second)}. It gives up: {gives_up(second, MOST_TOLD)}. "
                f"It gains: {gains(second, MOST_TOLD)}.",
            )
        )
    answers.append(Answer(label="Count", question="How many are good enough?", answer=_how_many(ranking)))
    if len(ranking.sites) > 1:
        answers.append(
            Answer(label="Beaten", question="Which can be left out?", answer=_left_out(ranking, names))
        )
    return tuple(answers)


def _verdict(site: RankedSite) -> str:
    return "is unproven" if site.candidate.outcome == "unproven" else OUTCOMES[site.candidate.outcome]


def _why(site: RankedSite) -> str:
    candidate = site.candidate
    worst = candidate.required[0]
    value, limit = told_apart(worst.value, worst.limit, worst.unit)
    name = criterion_name(worst.criterion, worst.signal)
    closest = f"{name}, {value} against {limit}"
    asked = len(candidate.required)
    if candidate.outcome == "pass":
        return (
            f"It passes. Its margin is {margin_text(candidate.margin)}; its closest criterion is {closest}."
        )
    if candidate.outcome == "unproven":
        return (
            f"No spot passes. This one misses nothing, with a margin of {margin_text(candidate.margin)}, but "
            f"{percent(candidate.sky.unsurveyed_share)} of its sky above the mask was not surveyed. "
            f"Its closest criterion is {closest}."
        )
    return (
        f"No spot passes. This one misses {candidate.missed} of {asked} required criteria, by "
        f"{margin_text(candidate.margin)} at worst: {closest}."
    )


def _how_many(ranking: Ranking) -> str:
    outcomes = [site.candidate.outcome for site in ranking.sites]
    counts = [f"{outcomes.count('pass') or 'none'} of {len(outcomes)} pass"]
    counts += [f"{outcomes.count('unproven')} unproven"] if "unproven" in outcomes else []
    counts += [f"{outcomes.count('fail')} failing"] if "fail" in outcomes else []
    text = f"{', '.join(counts).capitalize()}."
    if ranking.refused:
        text += f" {_spots(len(ranking.refused)).capitalize()} could not be assessed."
    return text


def _left_out(ranking: Ranking, names: list[str]) -> str:
    beaten = [(site.rank, name) for site, name in zip(ranking.sites, names, strict=True) if site.beaten_by]
    if not beaten:
        return "None: each is better than every other one in something that is required."
    named = "; ".join(f"no. {rank}, {name}" for rank, name in beaten[:MOST_NAMED])
    more = len(beaten) - MOST_NAMED
    text = (
        f"{_spots(len(beaten)).capitalize()}, beaten by another one in everything that is required: "
        f"{named}{f'; and {more} more' if more > 0 else ''}."
    )
    in_all = sum(bool(site.dominated_by) for site in ranking.sites)
    return f"{text} Counting every advice, too: {_spots(in_all) if in_all else 'none'}."


def _facts(ranking: Ranking) -> tuple[tuple[str, str], ...]:
    facts = [
        ("Ranked by", "verdict, required criteria missed, margin, usable satellites"),
        ("Margin", "smallest room of the required criteria, relative to their limits"),
    ]
    if ranking.asked_differently:
        facts.append(
            (
                "Not asked alike",
                f"The site files differ in {listed(ranking.asked_differently)}. Each spot is held against "
                "its own file, so margins and values here do not all mean the same.",
            )
        )
    if not ranking.same_criteria:
        facts.append(("Not compared", "Spots with different criteria or signals do not beat each other."))
    return tuple(facts)


def _sections(ranking: Ranking) -> tuple[Section | None, ...]:
    return (
        _order_section(ranking),
        _chart_section(ranking),
        _price_section(ranking) if len(ranking.sites) > 1 else None,
        Section(key="criteria", heading="Criterion by criterion", tables=criteria_tables(ranking)),
        _refused_section(ranking) if ranking.refused else None,
        Section(key="rules", heading="How the order comes about", points=RULES),
    )


def _order_section(ranking: Ranking) -> Section:
    names = site_names(ranking)
    return Section(
        key="order",
        heading="The order",
        tables=(
            Table(
                caption="The best first. Missed: required criteria; satellites: mean number usable at once; "
                "hidden: sky above the mask behind solid obstacles; beaten by: spots that are nowhere worse "
                "and somewhere better in what is required and in satellites; in all: the same with every "
                "advice.",
                header=(
                    "No.",
                    "Spot",
                    "Site file",
                    "Verdict",
                    "Missed",
                    "Margin",
                    "Satellites",
                    "Hidden",
                    "Beaten by",
                    "in all by",
                ),
                rows=tuple(_order_row(site, name) for site, name in zip(ranking.sites, names, strict=True)),
                align="rlllrrrrll",
                tones=tuple(TONES[site.candidate.outcome] for site in ranking.sites),
            ),
        ),
    )


def _order_row(site: RankedSite, name: str) -> tuple[str, ...]:
    candidate = site.candidate
    return (
        str(site.rank),
        name,
        plain(candidate.place),
        OUTCOMES[candidate.outcome],
        f"{candidate.missed} of {len(candidate.required)}",
        margin_text(candidate.margin),
        number(candidate.usable_satellites),
        percent(candidate.sky.blocked_share_above_mask),
        rank_list(site.beaten_by, MOST_RANKS),
        rank_list(site.dominated_by, MOST_RANKS),
    )


def _chart_section(ranking: Ranking) -> Section:
    shown = f" The first {MOST_ROWS} of {len(ranking.sites)} spots." if len(ranking.sites) > MOST_ROWS else ""
    return Section(
        key="margins",
        heading="How far from their limits",
        figure="ranking",
        figure_caption=(
            "Every required criterion of every spot as a stroke: to the right of the line it is met, to the "
            "left, on the shaded ground, it is missed. The mark is the margin: filled circle, passes; open "
            "square, unproven; cross, fails; a triangle points to one beyond the edge. The scale is linear "
            f"within about 2 % of the limit and logarithmic further out.{shown}"
        ),
    )


def _price_section(ranking: Ranking) -> Section:
    names = site_names(ranking)
    return Section(
        key="prices",
        heading="What another choice costs",
        sentences=(f"Each spot beside the first, {names[0]}.",),
        tables=(
            Table(
                caption="Required criteria first, the largest difference first. The name of a signal stands "
                "for its usable share.",
                header=("No.", "Spot", "It gives up", "It gains"),
                rows=tuple(
                    (str(site.rank), name, gives_up(site, MOST_PRICED), gains(site, MOST_PRICED))
                    for site, name in zip(ranking.sites[1:], names[1:], strict=True)
                ),
                align="rlll",
            ),
        ),
    )


def _refused_section(ranking: Ranking) -> Section:
    return Section(
        key="refused",
        heading="Not ranked",
        sentences=("These sites could not be assessed.",),
        tables=(
            Table(
                caption="Every mistake that was found.",
                header=("Site file", "Mistake"),
                rows=tuple(
                    (plain(site.place) or NOTHING, mistake_text(mistake))
                    for site in ranking.refused
                    for mistake in site.mistakes
                ),
                align="ll",
            ),
        ),
    )
