"""One spot surveyed twice: what changed round it, and what that did to every finding."""

import os
from dataclasses import dataclass, replace
from datetime import date
from math import hypot
from pathlib import Path
from typing import Literal

from siteassess.assessment import Assessment, assess_file
from siteassess.candidates.outline_changes import OutlineChange, Tolerance, outline_changes, tolerance
from siteassess.errors import InputError, Mistake, gather
from siteassess.horizon.buildings.plan import east_north_m
from siteassess.site_file.model import Site
from siteassess.verdict.criteria import read_criteria
from siteassess.verdict.uncertainty.survey_errors import survey_errors
from siteassess.verdict.verdict import Finding, ObstacleCost

__all__ = [
    "SAME_SPOT_M",
    "FindingChange",
    "ObstacleChange",
    "Resurvey",
    "changed_findings",
    "resurvey",
    "surveyed_on",
]

SAME_SPOT_M = 5.0  # own default: marks farther apart are two spots
SAME_VALUE = 1e-6  # results for programs have no more digits


@dataclass(frozen=True, slots=True, kw_only=True)
class FindingChange:
    """One criterion held against the spot twice; None where a site file does not lead to this finding.

    Attributes
    ----------
    before, after : Finding or None
        As found.
    direction : str
        "better", "worse", "same", "new" or "gone"; of the value, or of the outcome where that differs.
    """

    before: Finding | None
    after: Finding | None
    direction: Literal["better", "worse", "same", "new", "gone"]

    @property
    def finding(self) -> Finding:
        """The later of the two that exists."""
        found = self.after or self.before
        assert found is not None
        return found


@dataclass(frozen=True, slots=True, kw_only=True)
class ObstacleChange:
    """One obstacle by its name; None where one of the surveys does not have it."""

    name: str
    before: ObstacleCost | None
    after: ObstacleCost | None


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Resurvey:
    """Two surveys of one spot.

    Attributes
    ----------
    before, after : Assessment
        The spot by each of them.
    apart_m : float
        From mark to mark.
    risen_m : float
        How much higher the antenna stands in the second.
    tolerance : Tolerance
        What counts as no change of an edge.
    outline : tuple of OutlineChange
        Where the highest edge rose or fell, the largest difference first.
    obstacles : tuple of ObstacleChange
        In the order of the second survey, then what is gone.
    findings : tuple of FindingChange
        In the order of the second verdict, then what is gone.
    """

    before: Assessment
    after: Assessment
    apart_m: float
    risen_m: float
    tolerance: Tolerance
    outline: tuple[OutlineChange, ...]
    obstacles: tuple[ObstacleChange, ...]
    findings: tuple[FindingChange, ...]


def resurvey(before: str | os.PathLike[str], after: str | os.PathLike[str]) -> Resurvey:
    """Assess one spot by two surveys and compare.

    Parameters
    ----------
    before, after : str or path
        Site files, or folders that hold `site.toml`: the earlier survey and the later one.

    Raises
    ------
    InputError
        With the mistakes of both, or if they are not two surveys of one spot in this order.
    """
    old, new = gather(lambda: _assessed(before), lambda: _assessed(after))
    apart_m = _apart_m(old.site, new.site)
    file = _with_folder(after, new.site.path.name)
    mistakes = [*_spot_mistakes(apart_m, file), *_date_mistakes(old.site, new.site, file)]
    if mistakes:
        raise InputError(*mistakes)
    allowed = tolerance([error for one in (old, new) for error in survey_errors(one.site, one.skyline)])
    return Resurvey(
        before=old,
        after=new,
        apart_m=apart_m,
        risen_m=_antenna_height_m(new.site) - _antenna_height_m(old.site),
        tolerance=allowed,
        outline=outline_changes(old.skyline, new.skyline, allowed),
        obstacles=_obstacles(old.verdict.obstacles, new.verdict.obstacles),
        findings=changed_findings(old.verdict.findings, new.verdict.findings),
    )


def surveyed_on(site: Site) -> date | None:
    """Day of the latest survey of a site; None where none is dated."""
    return max((source.surveyed_on for source in site.horizon if source.surveyed_on), default=None)


def changed_findings(before: tuple[Finding, ...], after: tuple[Finding, ...]) -> tuple[FindingChange, ...]:
    """Findings of two verdicts side by side."""
    old = {(one.criterion, one.signal): one for one in before}
    pairs = [(old.pop((one.criterion, one.signal), None), one) for one in after]
    return (
        *(FindingChange(before=was, after=now, direction=_direction(was, now)) for was, now in pairs),
        *(FindingChange(before=was, after=None, direction="gone") for was in old.values()),
    )


def _assessed(path: str | os.PathLike[str]) -> Assessment:
    """A site; its mistakes name the folder, because the files of both surveys may have the same names."""
    try:
        return assess_file(path)
    except InputError as error:
        raise InputError(
            *(replace(mistake, file=_with_folder(path, mistake.file)) for mistake in error.mistakes)
        ) from error


def _with_folder(path: str | os.PathLike[str], file: str) -> str:
    given = Path(path)
    folder = given if given.is_dir() else given.parent
    return f"{folder.name}/{file}" if folder.name else file


def _direction(before: Finding | None, after: Finding) -> Literal["better", "worse", "same", "new"]:
    if before is None:
        return "new"
    # By the outcome where it turned, whether by the value or by the limit; else by the value.
    rank = {"missed": 0, "unproven": 1, "met": 2}
    gained = float(rank[after.outcome] - rank[before.outcome])
    if gained == 0.0 and abs(after.value - before.value) > SAME_VALUE:
        at_least = read_criteria()[after.criterion].sense == "at least"
        gained = after.value - before.value if at_least else before.value - after.value
    return "better" if gained > 0.0 else "worse" if gained < 0.0 else "same"


def _obstacles(
    before: tuple[ObstacleCost, ...], after: tuple[ObstacleCost, ...]
) -> tuple[ObstacleChange, ...]:
    """Obstacles of one name belong together, in the order in which they stand there."""
    old = list(before)
    changes = []
    for now in after:
        was = next((one for one in old if one.name == now.name), None)
        if was is not None:
            old.remove(was)
        changes.append(ObstacleChange(name=now.name, before=was, after=now))
    return (*changes, *(ObstacleChange(name=was.name, before=was, after=None) for was in old))


def _antenna_height_m(site: Site) -> float:
    return site.position.height_m + site.mount.phase_centre_height_m


def _apart_m(one: Site, other: Site) -> float:
    east_m, north_m = east_north_m(other.position.longitude_deg, other.position.latitude_deg, one.position)
    return hypot(float(east_m), float(north_m), other.position.height_m - one.position.height_m)


def _spot_mistakes(apart_m: float, file: str) -> list[Mistake]:
    if apart_m <= SAME_SPOT_M:
        return []
    far = f"{apart_m:.1f} m" if apart_m < 1000.0 else f"{apart_m / 1000.0:.1f} km"
    return [
        Mistake(
            file=file,
            where="its survey mark",
            problem=f"lies {far} from that of the earlier survey",
            allowed=f"two surveys of one spot have it within {SAME_SPOT_M:g} m",
            value=apart_m,
        )
    ]


def _date_mistakes(before: Site, after: Site, file: str) -> list[Mistake]:
    first, second = surveyed_on(before), surveyed_on(after)
    if first is None or second is None or first <= second:
        return []
    return [
        Mistake(
            file=file,
            where="its survey",
            problem=f"is of {second}, before the other one of {first}",
            allowed="name the earlier one first",
            value=second,
        )
    ]
