"""The ranking: sites in order, who is better in everything than whom, and what another choice costs."""

from dataclasses import dataclass

from siteassess.candidates.candidate import Candidate, RefusedCandidate

__all__ = ["USABLE_SATELLITES", "Difference", "RankedSite", "Ranking"]

USABLE_SATELLITES = "usable_satellites"


@dataclass(frozen=True, slots=True, kw_only=True)
class Difference:
    """One criterion of a site beside the same criterion of the first.

    Attributes
    ----------
    criterion : str
        Its key in the table `[require]`, or `USABLE_SATELLITES`.
    signal : str or None
        The signal it is about, where it is about one.
    unit : str
        Unit of the values; "count" for satellites.
    required : bool
        Whether it can fail the site.
    value, first_value : float
        What this site and the first site reach, in `unit`.
    gain : float
        Room of this site less room of the first, positive where this site is better; for satellites the
        difference relative to the first site's number.
    """

    criterion: str
    signal: str | None
    unit: str
    required: bool
    value: float
    first_value: float
    gain: float


@dataclass(frozen=True, slots=True, kw_only=True)
class RankedSite:
    """A site and its place in the order.

    Attributes
    ----------
    rank : int
        1 is the first choice.
    candidate : Candidate
        The site.
    beaten_by : tuple of int
        Ranks of the sites that are at least as good in everything that is required and in usable satellites,
        and better in something of it.
    dominated_by : tuple of int
        The same with every advice.
    differences : tuple of Difference
        Against the first site, where they differ; required criteria first, then by size.
    """

    rank: int
    candidate: Candidate
    beaten_by: tuple[int, ...]
    dominated_by: tuple[int, ...]
    differences: tuple[Difference, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Ranking:
    """Sites in the order of choice.

    Attributes
    ----------
    sites : tuple of RankedSite
        The first choice first.
    refused : tuple of RefusedCandidate
        Sites that cannot be assessed, and so have no rank.
    asked_differently : tuple of str
        Keys of the site files in which the sites do not ask the same.
    same_criteria : bool
        Whether all sites are held against the same criteria; where not, sites with different criteria are
        not compared.
    """

    sites: tuple[RankedSite, ...]
    refused: tuple[RefusedCandidate, ...]
    asked_differently: tuple[str, ...]
    same_criteria: bool
