"""Whether the parts of a chain that name a kind are whole with what the kind gives."""

from collections.abc import Iterator, Mapping

from siteassess.errors import Mistake
from siteassess.site_file.checks.chain import RECEIVER
from siteassess.site_file.model import Part
from siteassess.site_file.refusals import key_path
from siteassess.tables import packaged_rows
from siteassess.wording import did_you_mean, listed, shown

__all__ = ["kind_mistakes", "packaged_kinds"]

Kinds = Mapping[str, frozenset[str]]
CABLE = "k1_db_per_100m"


def packaged_kinds() -> dict[str, frozenset[str]]:
    """Kinds of the packaged parts table, each with the columns that it fills."""
    return {
        row["kind"]: frozenset(column for column, cell in row.items() if cell)
        for row in packaged_rows("link_budget/chain/parts.csv")
    }


def kind_mistakes(chain: tuple[Part | None, ...], kinds: Kinds, file: str) -> Iterator[Mistake]:
    """Mistakes of the blocks `[[chain]]` that name a kind, in their order.

    Parameters
    ----------
    chain : tuple of Part or None
        The blocks; None where a block is refused as such.
    kinds : mapping of str to frozenset of str
        Columns of the parts table that each kind fills.
    file : str
        Name of the site file.
    """
    for index, part in enumerate(chain):
        if part is None or part.kind is None:
            continue
        if part.kind not in kinds:
            allowed = did_you_mean(part.kind, kinds, f"the kinds are {_quoted(kinds)}")
            yield _mistake(file, index, "kind", f"is {shown(part.kind)}", allowed)
            continue
        given = kinds[part.kind]
        if RECEIVER.match(part.part):
            yield from _receiver_mistakes(file, index, part, given)
        elif "noise_figure_db" in given and "gain_db" not in given:
            allowed = "only the last block may be the receiver"
            yield _mistake(file, index, "kind", f"is {shown(part.kind)}", allowed)
        else:
            yield from _part_mistakes(file, index, part, given)


def _receiver_mistakes(file: str, index: int, part: Part, given: frozenset[str]) -> Iterator[Mistake]:
    if {"gain_db", "loss_db", CABLE} & given or "noise_figure_db" not in given:
        yield _mistake(file, index, "kind", f"is {shown(part.kind)}", "it is no kind of receiver")
        return
    for key in ("gain_db", "loss_db", "length_m"):
        if getattr(part, key) is not None:
            allowed = "the receiver has noise_figure_db and implementation_loss_db only"
            yield _given(file, index, part, key, allowed)


def _part_mistakes(file: str, index: int, part: Part, given: frozenset[str]) -> Iterator[Mistake]:
    amplifies = "gain_db" in given
    for key in ("loss_db",) if amplifies else ("gain_db", "noise_figure_db"):
        if getattr(part, key) is not None:
            has = "gain" if amplifies else "loss"
            yield _given(file, index, part, key, f"the kind {shown(part.kind)} has {has}")
    if CABLE in given and part.length_m is None and part.loss_db is None:
        yield _mistake(file, index, "length_m", "is missing", f"the kind {shown(part.kind)} needs it")
    if CABLE not in given and part.length_m is not None:
        yield _given(file, index, part, "length_m", f"the kind {shown(part.kind)} has no loss by length")
    if part.count != 1 and (amplifies or CABLE in given or part.loss_db is not None):
        allowed = "it multiplies the loss of one part of the kind; here it must be 1"
        yield _given(file, index, part, "count", allowed)
    if not amplifies:
        for key in ("supply_current_ma", "min_supply_voltage_v", "max_supply_voltage_v"):
            if getattr(part, key) is not None:
                yield _given(file, index, part, key, "only a part with gain has it")


def _quoted(kinds: Kinds) -> str:
    return listed(shown(kind) for kind in kinds)


def _given(file: str, index: int, part: Part, key: str, allowed: str) -> Mistake:
    value = getattr(part, key)
    problem = "is a table" if isinstance(value, dict) else f"is {shown(value)}"
    return _mistake(file, index, key, problem, allowed, value)


def _mistake(file: str, index: int, key: str, problem: str, allowed: str, value: object = None) -> Mistake:
    return Mistake(
        file=file, where=key_path("chain", index, key), problem=problem, allowed=allowed, value=value
    )
