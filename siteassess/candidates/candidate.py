"""What is kept of an assessed site: small, so that a thousand of them fit in memory."""

import json
from dataclasses import dataclass
from pathlib import PurePath
from typing import Literal

from siteassess.assessment import Assessment
from siteassess.errors import Mistake
from siteassess.horizon.shares import SkyShares
from siteassess.site_file.model import Requirements, SkyModel
from siteassess.verdict.criteria import read_criteria
from siteassess.verdict.time.counts import ALL_SYSTEMS
from siteassess.verdict.verdict import Finding, SignalShares, UsableCount

__all__ = ["Candidate", "RefusedCandidate", "candidate_of", "room"]

# A millionth: rooms that differ by less are the same, as in the results for programs.
ROOM_DECIMALS = 6
SATELLITE_DECIMALS = 3


@dataclass(frozen=True, slots=True, kw_only=True)
class Candidate:
    """One assessed site among many.

    Attributes
    ----------
    name : str
        Name of the spot in the site file.
    place : str
        Its site file as seen from the folder that all sites of the ranking have in common, with "/" between
        folders; `site.toml` is left out.
    latitude_deg, longitude_deg, height_m : float
        Survey mark, WGS 84.
    outcome : str
        "pass", "fail" or "unproven".
    findings : tuple of Finding
        As in `Verdict`, the worst first.
    signals : tuple of SignalShares
        Signal by signal.
    counts : tuple of UsableCount
        Satellites at once, system by system, then all.
    sky : SkyShares
        Solid angles.
    blocked_satellite_time_share : float
        Hidden part of the open-sky satellite-time above the mask.
    asked : tuple of tuple of str
        Pairs of key and value, as texts, of what the site file asks and of the sky it asks it for.
    """

    name: str
    place: str
    latitude_deg: float
    longitude_deg: float
    height_m: float
    outcome: Literal["pass", "fail", "unproven"]
    findings: tuple[Finding, ...]
    signals: tuple[SignalShares, ...]
    counts: tuple[UsableCount, ...]
    sky: SkyShares
    blocked_satellite_time_share: float
    asked: tuple[tuple[str, str], ...]

    @property
    def required(self) -> tuple[Finding, ...]:
        """Findings that can fail the site."""
        return tuple(finding for finding in self.findings if finding.required)

    @property
    def missed(self) -> int:
        """Number of required criteria that are missed."""
        return sum(finding.outcome == "missed" for finding in self.required)

    @property
    def margin(self) -> float:
        """Smallest room of the required findings."""
        return min((room(finding) for finding in self.required), default=0.0)

    @property
    def usable_satellites(self) -> float:
        """Mean number of satellites of all systems that are usable at once."""
        of_all = (count.usable_mean for count in self.counts if count.system == ALL_SYSTEMS)
        return round(next(of_all, 0.0), SATELLITE_DECIMALS)


@dataclass(frozen=True, slots=True, kw_only=True)
class RefusedCandidate:
    """A site that cannot be assessed.

    Attributes
    ----------
    given : str
        The site as the user gave it.
    place : str
        As in `Candidate`.
    mistakes : tuple of Mistake
        Why.
    """

    given: str
    place: str
    mistakes: tuple[Mistake, ...]

    @property
    def messages(self) -> tuple[str, ...]:
        """Each mistake with the site as the user gave it, because many files have the same name."""
        own_file = PurePath(self.given).name
        return tuple(
            f"{self.given}{str(mistake).removeprefix(own_file)}"
            if mistake.file == own_file
            else f"{self.given}: {mistake}"
            for mistake in self.mistakes
        )


def room(finding: Finding) -> float:
    """How far inside its limit a value lies, relative to the limit; negative when it is missed.

    A millionth is the finest difference that counts.
    """
    shortfall = read_criteria()[finding.criterion].shortfall(finding.value, finding.limit)
    return round(-shortfall, ROOM_DECIMALS) + 0.0  # no minus zero


def candidate_of(assessment: Assessment, place: str) -> Candidate:
    """What is kept of an assessment.

    Parameters
    ----------
    assessment : Assessment
        What `assess` returned.
    place : str
        Where its site file lies, for the reader.
    """
    site, verdict = assessment.site, assessment.verdict
    return Candidate(
        name=site.place.name,
        place=place,
        latitude_deg=site.position.latitude_deg,
        longitude_deg=site.position.longitude_deg,
        height_m=site.position.height_m,
        outcome=verdict.outcome,
        findings=verdict.findings,
        signals=verdict.signals,
        counts=verdict.counts,
        sky=verdict.sky,
        blocked_satellite_time_share=verdict.blocked_satellite_time_share,
        asked=_asked(site.require, "require") + _asked(site.sky, "sky"),
    )


def _asked(table: Requirements | SkyModel, name: str) -> tuple[tuple[str, str], ...]:
    asked = table.model_dump(mode="json")
    return tuple((f"{name}.{key}", json.dumps(value, sort_keys=True)) for key, value in asked.items())
