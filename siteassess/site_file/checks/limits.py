"""Whether the limits of `[require]` can be held, and held at once."""

from collections.abc import Iterator

from siteassess.errors import Mistake
from siteassess.site_file.criteria_sets import criteria_sets
from siteassess.site_file.model import Requirements
from siteassess.site_file.refusals import key_path
from siteassess.tables import packaged_rows
from siteassess.wording import did_you_mean, listed, shown

__all__ = ["limit_mistakes"]

# A lower and an upper limit of one quantity.
PAIRS = (
    ("min_net_gain_db", "max_net_gain_db"),
    ("min_supply_voltage_v", "max_supply_voltage_v"),
)
NEED_A_NUMBER = ("min_satellites_share", "max_gap_s")


def limit_mistakes(require: Requirements, systems: tuple[str, ...] | None, file: str) -> Iterator[Mistake]:
    """Unknown sets, limits that no sky can meet, and limits that contradict each other or lack a partner.

    Parameters
    ----------
    require : Requirements
        The table.
    systems : tuple of str, or None
        Satellite systems of the site; None where the table `[sky]` is refused.
    file : str
        The site file.
    """
    yield from _set_mistakes(require, file)
    if systems is not None:
        yield from _satellite_mistakes(require, systems, file)
    for lower, upper in PAIRS:
        low, high = getattr(require, lower), getattr(require, upper)
        if low is not None and high is not None and low > high:
            yield _mistake(file, (lower,), low, f"it must be at most {upper}, which is {shown(high)}")


def _set_mistakes(require: Requirements, file: str) -> Iterator[Mistake]:
    name, known = require.criteria_set, criteria_sets()
    if name is not None and name not in known:
        allowed = did_you_mean(name, known, f"it must be {listed(known, 'or')}")
        yield _mistake(file, ("criteria_set",), name, allowed)


def _satellite_mistakes(require: Requirements, systems: tuple[str, ...], file: str) -> Iterator[Mistake]:
    slots = {system: _slots(system) for system in systems}
    asked, every = require.min_satellites, sum(slots.values())
    if asked is not None and asked > every:
        allowed = f"it must be at most {every}, the slots of {listed(systems)}"
        yield _mistake(file, ("min_satellites",), asked, allowed)
    for system, number in (require.min_satellites_by_system or {}).items():
        place = ("min_satellites_by_system", system)
        if system not in slots:
            allowed = did_you_mean(system, systems, f"its systems are {listed(systems)}")
            yield _mistake(file, place, system, allowed, "is no system of this site")
        elif number > slots[system]:
            yield _mistake(file, place, number, f"it must be at most {slots[system]}, the slots of {system}")
    for key in NEED_A_NUMBER:
        value = getattr(require, key)
        if value is not None and not _has_number(require, key):
            yield _mistake(file, (key,), value, "it needs min_satellites beside it", "counts no satellites")


def _has_number(require: Requirements, key: str) -> bool:
    by_system = key == "min_satellites_share" and bool(require.min_satellites_by_system)
    return require.min_satellites is not None or by_system


def _slots(system: str) -> int:
    """Satellites of the nominal constellation, pairs of expanded slots in place of the slots they replace."""
    rows = packaged_rows(f"orbits/{system.lower()}.csv")
    return sum(row.get("arrangement") != "baseline" for row in rows)


def _mistake(
    file: str, steps: tuple[str, ...], value: object, allowed: str, problem: str | None = None
) -> Mistake:
    return Mistake(
        file=file,
        where=key_path("require", *steps),
        problem=problem or f"is {shown(value)}",
        allowed=allowed,
        value=value,
    )
