"""Chains that a user might build instead: less cable, better cable, a better preamplifier."""

from collections.abc import Sequence

from siteassess.link_budget.chain.parts import CABLE_CHECK_HZ, PartKind, cable_loss_db, part_kinds
from siteassess.link_budget.chain.supply import preamplifier_index
from siteassess.site_file.model import ByCarrier, Part

__all__ = ["chain_changes"]

BETTER_BY_DB = 1.0
BEST_NOISE_FIGURE_DB = 1.0  # what good preamplifiers reach; common practice, no source
NO_CHANGE_DB = 0.05
ADDED = Part(part="preamplifier", gain_db=30.0, noise_figure_db=2.0)


def chain_changes(chain: Sequence[Part]) -> tuple[tuple[str, tuple[Part, ...]], ...]:
    """Changes that make sense for a chain, each in words and as the whole chain that it makes.

    Parameters
    ----------
    chain : sequence of Part
        From the antenna port on, with all its values; the last part is the receiver.

    Examples
    --------
    >>> chain = (Part(part="preamplifier", gain_db=30.0, noise_figure_db=2.5),
    ...          Part(part="cable", loss_db=15.0), Part(part="receiver", noise_figure_db=10.0))
    >>> [words for words, _ in chain_changes(chain)]
    ['half the cable', 'preamplifier with 1.5 dB noise figure']
    """
    changes = [*_half_the_cable(chain), *_better_cable(chain), *_better_preamplifier(chain)]
    return tuple((words, tuple(changed)) for words, changed in changes)


def _is_cable(part: Part) -> bool:
    lossy = part.loss_db is not None and part.gain_db is None
    return lossy and (part.length_m is not None or "cable" in part.part.casefold())


def _half_the_cable(chain: Sequence[Part]) -> list[tuple[str, list[Part]]]:
    if not any(_is_cable(part) for part in chain):
        return []
    return [("half the cable", [_with_loss(part, 0.5) if _is_cable(part) else part for part in chain])]


def _with_loss(part: Part, factor: float) -> Part:
    return part.model_copy(update={"loss_db": _scaled(part.loss_db or 0.0, factor)})


def _scaled(value: ByCarrier, factor: float) -> ByCarrier:
    if isinstance(value, dict):
        return {carrier: number * factor for carrier, number in value.items()}
    return value * factor


def _better_cable(chain: Sequence[Part]) -> list[tuple[str, list[Part]]]:
    """Every cable of a known kind one class up in the packaged table."""
    better = [_next_class(part) for part in chain]
    names = sorted({kind.kind for kind in better if kind is not None})
    if not names:
        return []
    changed = [
        part if kind is None else _of_kind(part, kind) for part, kind in zip(chain, better, strict=True)
    ]
    return [(f"better cable: {', '.join(names)}", changed)]


def _next_class(part: Part) -> PartKind | None:
    """The cable of the packaged table with the next lower loss; None for what is no cable of that table."""
    own = part_kinds().get(part.kind or "")
    if own is None or own.k1_db_per_100m is None or not part.length_m:
        return None
    better = [
        kind
        for kind in part_kinds().values()
        if kind.k1_db_per_100m is not None and _loss_db(kind, 1.0) < _loss_db(own, 1.0)
    ]
    return max(better, key=lambda kind: _loss_db(kind, 1.0), default=None)


def _loss_db(kind: PartKind, length_m: float, carrier_hz: float = CABLE_CHECK_HZ) -> float:
    return cable_loss_db(kind.k1_db_per_100m or 0.0, kind.k2_db_per_100m or 0.0, length_m, carrier_hz)


def _of_kind(part: Part, kind: PartKind) -> Part:
    length_m, loss_db = part.length_m or 0.0, part.loss_db
    carriers = loss_db if isinstance(loss_db, dict) else [f"{CABLE_CHECK_HZ / 1e6:.10g}"]
    losses_db = {carrier: _loss_db(kind, length_m, float(carrier) * 1e6) for carrier in carriers}
    return part.model_copy(update={"kind": kind.kind, "loss_db": losses_db})


def _better_preamplifier(chain: Sequence[Part]) -> list[tuple[str, list[Part]]]:
    first = preamplifier_index(chain)
    if first is None:
        return [("preamplifier added: 30 dB, noise figure 2.0 dB", [ADDED, *chain])]
    now = chain[first].noise_figure_db or 0.0
    worst_db = max(now.values()) if isinstance(now, dict) else now
    wanted_db = max(worst_db - BETTER_BY_DB, min(worst_db, BEST_NOISE_FIGURE_DB))
    if worst_db - wanted_db < NO_CHANGE_DB:
        return []
    part = chain[first].model_copy(update={"noise_figure_db": wanted_db})
    words = f"preamplifier with {wanted_db:.1f} dB noise figure"
    return [(words, [*chain[:first], part, *chain[first + 1 :]])]
