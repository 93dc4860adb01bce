"""The ranking on a terminal: one short line a site, the first ones only where there are many."""

from __future__ import annotations

from typing import TYPE_CHECKING

from siteassess.report.figures.drawing import shortened
from siteassess.report.phrases import number
from siteassess.report.ranking.words import OUTCOMES, margin_text, rank_list, site_names
from siteassess.report.summary import PLAIN_SIGNS

if TYPE_CHECKING:
    from siteassess.candidates.ranking import RankedSite, Ranking

__all__ = ["MOST_SITES", "ranking_lines"]

MOST_SITES = 22
NAME_LETTERS = 34
MOST_RANKS = 2


def ranking_lines(ranking: Ranking) -> list[str]:
    """A heading and one line a site, for a terminal of 100 columns."""
    sites = ranking.sites[:MOST_SITES]
    names = [shortened(name, NAME_LETTERS) for name in site_names(ranking)[: len(sites)]]
    width = max([4, *map(len, names)])
    heading = f"{'verdict':<9}{'missed':>9}{'margin':>13}{'satellites':>12}  beaten by"
    lines = [f"{'no.':>4}  {'spot':<{width}}  {heading}"]
    lines += [_line(site, f"{name:<{width}}") for site, name in zip(sites, names, strict=True)]
    more = len(ranking.sites) - len(sites)
    if more:
        lines.append(f"      ... and {more} more in the report")
    if ranking.asked_differently:
        lines.append(f"The site files differ in {', '.join(ranking.asked_differently)}.")
    return [line.translate(PLAIN_SIGNS).rstrip() for line in lines]


def _line(site: RankedSite, name: str) -> str:
    candidate = site.candidate
    missed = f"{candidate.missed} of {len(candidate.required)}"
    satellites, ranks = number(candidate.usable_satellites), rank_list(site.beaten_by, MOST_RANKS)
    return (
        f"{site.rank:>4}  {name}  {OUTCOMES[candidate.outcome]:<9}{missed:>9}"
        f"{margin_text(candidate.margin):>13}{satellites:>12}  {ranks}"
    )
