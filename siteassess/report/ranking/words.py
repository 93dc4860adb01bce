"""How a ranking names its sites and criteria, and writes margins and prices."""

from collections import Counter
from collections.abc import Sequence
from dataclasses import replace

from siteassess.candidates.ranking import USABLE_SATELLITES, Difference, RankedSite, Ranking
from siteassess.errors import Mistake
from siteassess.report.phrases import NOTHING, percent, plain, told_apart
from siteassess.verdict.criteria import read_criteria

__all__ = [
    "OUTCOMES",
    "criterion_name",
    "gains",
    "gives_up",
    "margin_text",
    "mistake_text",
    "rank_list",
    "site_names",
]

# A file that is not there is told with its folders on standard error; a report holds none of the machine's.
LOOKED_FOR = "it was looked for as"
OUTCOMES = {"pass": "passes", "unproven": "unproven", "fail": "fails"}
MOST_SHOWN_PERCENT = 999.0


def site_names(ranking: Ranking) -> list[str]:
    """Name of each ranked site; with its place where another has the same name."""
    names = [plain(site.candidate.name) for site in ranking.sites]
    times = Counter(names)
    return [
        f"{name} ({plain(site.candidate.place)})" if times[name] > 1 else name
        for name, site in zip(names, ranking.sites, strict=True)
    ]


def criterion_name(criterion: str, signal: str | None) -> str:
    """What a criterion is about; the name of a signal alone stands for its usable share."""
    if criterion == USABLE_SATELLITES:
        return "Usable satellites"
    if criterion == "min_usable_share" and signal is not None:
        return signal
    title = read_criteria()[criterion].title
    return f"{signal}: {title}" if signal else title


def margin_text(margin: float) -> str:
    """A margin in percent of the limit, with its sign, and decimals enough to tell it from none.

    Examples
    --------
    >>> margin_text(0.0459), margin_text(-0.00002), margin_text(-1e8)
    ('+4.6\\xa0%', '−0.002\\xa0%', 'below −999\\xa0%')
    """
    if abs(100.0 * margin) > MOST_SHOWN_PERCENT:
        edge = percent(MOST_SHOWN_PERCENT / 100.0, 0)
        return f"above +{edge}" if margin > 0 else f"below −{edge}"
    decimals = next((digits for digits in (1, 2, 3) if round(100.0 * margin, digits) or not margin), 4)
    return f"{'+' if margin > 0 else ''}{percent(margin, decimals)}"


def mistake_text(mistake: Mistake) -> str:
    """A mistake in the words of the reader, without folders of the machine.

    Examples
    --------
    >>> mistake_text(Mistake(file="site.toml", where="", problem="there is no such file",
    ...                      allowed="it was looked for as /home/a/site.toml"))
    'site.toml: there is no such file'
    """
    if mistake.allowed.startswith(LOOKED_FOR):
        mistake = replace(mistake, allowed="")
    return plain(str(mistake))


def rank_list(ranks: Sequence[int], most_ranks: int) -> str:
    """Ranks of other sites, or how many they are; a dash where there is none.

    Examples
    --------
    >>> rank_list((1, 4), 2), rank_list((1, 4, 5), 2), rank_list((), 2)
    ('no. 1, 4', '3 spots', '–')
    """
    if len(ranks) > most_ranks:
        return f"{len(ranks)} spots"
    return "no. " + ", ".join(str(rank) for rank in ranks) if ranks else NOTHING


def gives_up(site: RankedSite, most: int) -> str:
    """Where the site is worse than the first, the first few of the criteria."""
    return _differences([difference for difference in site.differences if difference.gain < 0], most)


def gains(site: RankedSite, most: int) -> str:
    """Where the site is better than the first, the first few of the criteria."""
    return _differences([difference for difference in site.differences if difference.gain > 0], most)


def _differences(differences: Sequence[Difference], most: int) -> str:
    told = [_difference(difference) for difference in differences[:most]]
    more = len(differences) - len(told)
    if more > 0:
        told.append(f"and {more} more")
    return "; ".join(told) or "nothing"


def _difference(difference: Difference) -> str:
    name = criterion_name(difference.criterion, difference.signal)
    value, first = told_apart(difference.value, difference.first_value, difference.unit)
    return f"{name} {value} instead of {first}"
