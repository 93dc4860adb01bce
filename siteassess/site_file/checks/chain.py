"""What a receive chain must be made of, and where its tables by carrier must have values."""

import re
from collections.abc import Iterator, Mapping

from siteassess.errors import Mistake
from siteassess.site_file.model import Part
from siteassess.site_file.refusals import key_path
from siteassess.wording import listed, shown

__all__ = ["chain_mistakes", "not_spanned"]

RECEIVER = re.compile(r"receiver\b", re.IGNORECASE)
CARRIER_KEY = re.compile(r"[0-9]{1,6}(\.[0-9]{1,12})?")
CARRIERS_MHZ = (100.0, 10_000.0)
BY_CARRIER = ("gain_db", "loss_db", "noise_figure_db", "implementation_loss_db")
ONE_HERTZ_MHZ = 1e-6
ONLY_RECEIVER = ("implementation_loss_db", "quantisation", "min_net_gain_db", "max_net_gain_db")
ONLY_WITH_GAIN = ("supply_current_ma", "min_supply_voltage_v", "max_supply_voltage_v")


def chain_mistakes(
    chain: tuple[Part | None, ...], carriers_hz: Mapping[str, float], file: str
) -> Iterator[Mistake]:
    """Mistakes of the blocks `[[chain]]`, in their order.

    Parameters
    ----------
    chain : tuple of Part or None
        The blocks; None where a block is refused as such.
    carriers_hz : mapping of str to float
        Carrier of each signal of the site; empty when the signals are refused.
    file : str
        Name of the site file.
    """
    for index, part in enumerate(chain):
        if part is None:
            continue
        is_last = index == len(chain) - 1
        is_receiver = RECEIVER.match(part.part) is not None
        if is_last != is_receiver:
            allowed = (
                "the last block must be the receiver"
                if is_last
                else "only the last block may be the receiver"
            )
            yield _given(file, index, "part", part.part, allowed)
        elif part.kind is None:
            yield from (
                _receiver_mistakes(file, index, part) if is_receiver else _part_mistakes(file, index, part)
            )
        yield from _misplaced(file, index, part, is_receiver=is_receiver)
        yield from _range_mistakes(file, index, part)
        for key in BY_CARRIER:
            value = getattr(part, key)
            if isinstance(value, dict):
                yield from _table_mistakes(file, ("chain", index, key), value, carriers_hz)


def _receiver_mistakes(file: str, index: int, part: Part) -> Iterator[Mistake]:
    for key in ("gain_db", "loss_db"):
        value = getattr(part, key)
        if value is not None:
            allowed = "the receiver has noise_figure_db and implementation_loss_db only"
            yield _given(file, index, key, value, allowed)
    if part.noise_figure_db is None:
        yield _missing(file, index, "noise_figure_db", "the receiver needs it")


def _part_mistakes(file: str, index: int, part: Part) -> Iterator[Mistake]:
    where = key_path("chain", index)
    if part.gain_db is None and part.loss_db is None:
        yield Mistake(
            file=file,
            where=where,
            problem="has neither gain_db nor loss_db",
            allowed="one of them must be given",
            value=part.part,
        )
    elif part.gain_db is not None and part.loss_db is not None:
        yield Mistake(
            file=file,
            where=where,
            problem="has gain_db and loss_db",
            allowed="keep one of them",
            value=part.part,
        )
    elif part.gain_db is not None and part.noise_figure_db is None:
        yield _missing(file, index, "noise_figure_db", "a part with gain needs it")
    elif part.loss_db is not None and part.noise_figure_db is not None:
        allowed = "the noise of a lossy part follows from loss_db and physical_temperature_k"
        yield _given(file, index, "noise_figure_db", part.noise_figure_db, allowed)
    if part.count != 1:
        yield _given(file, index, "count", part.count, "it multiplies the loss of a kind; name the kind")


def _misplaced(file: str, index: int, part: Part, *, is_receiver: bool) -> Iterator[Mistake]:
    """Keys that mean something for other parts only."""
    keys = () if is_receiver else ONLY_RECEIVER
    for key in keys:
        if getattr(part, key) is not None:
            yield _given(file, index, key, getattr(part, key), "only the receiver has it")
    has_gain = part.gain_db is not None or (part.kind is not None and not is_receiver)
    for key in () if has_gain else ONLY_WITH_GAIN:
        if getattr(part, key) is not None:
            yield _given(file, index, key, getattr(part, key), "only a part with gain has it")


def _range_mistakes(file: str, index: int, part: Part) -> Iterator[Mistake]:
    for lowest, highest in (
        ("min_net_gain_db", "max_net_gain_db"),
        ("min_supply_voltage_v", "max_supply_voltage_v"),
    ):
        low, high = getattr(part, lowest), getattr(part, highest)
        if low is not None and high is not None and high < low:
            yield _given(file, index, highest, high, f"it must be at least {lowest}, {low:g}")


def _table_mistakes(
    file: str, steps: tuple[str | int, ...], table: dict[str, float], carriers_hz: Mapping[str, float]
) -> Iterator[Mistake]:
    if not table:
        allowed = "it must be a number, or hold a value at the carriers of the site's signals"
        yield Mistake(file=file, where=key_path(*steps), problem="is an empty table", allowed=allowed)
        return
    low, high = CARRIERS_MHZ
    wrong = [key for key in table if not CARRIER_KEY.fullmatch(key) or not low <= float(key) <= high]
    for key in wrong:
        yield Mistake(
            file=file,
            where=key_path(*steps, key),
            problem="is no carrier",
            allowed='the keys are carriers in MHz in quotation marks, such as "1575.42"',
            value=key,
        )
    if wrong:
        return
    mhz = [float(key) for key in table]
    for position, key in enumerate(table):
        if mhz[position] in mhz[:position]:
            yield Mistake(
                file=file,
                where=key_path(*steps, key),
                problem="stands there twice",
                allowed="keep one",
                value=key,
            )
    outside = not_spanned(mhz, carriers_hz)
    if outside:
        yield Mistake(
            file=file,
            where=key_path(*steps),
            problem=f"has no value at {listed(outside)}",
            allowed="the table must span the carriers of the site's signals",
        )


def not_spanned(mhz: list[float], carriers_hz: Mapping[str, float]) -> list[str]:
    """Carriers of signals, in words, that lie outside those of a table [MHz]."""
    return [
        f"{carrier_hz / 1e6:.10g} MHz ({signal})"
        for signal, carrier_hz in carriers_hz.items()
        if not min(mhz) - ONE_HERTZ_MHZ <= carrier_hz / 1e6 <= max(mhz) + ONE_HERTZ_MHZ
    ]


def _given(file: str, index: int, key: str, value: object, allowed: str) -> Mistake:
    problem = "is a table" if isinstance(value, dict) else f"is {shown(value)}"
    return Mistake(
        file=file, where=key_path("chain", index, key), problem=problem, allowed=allowed, value=value
    )


def _missing(file: str, index: int, key: str, allowed: str) -> Mistake:
    return Mistake(file=file, where=key_path("chain", index, key), problem="is missing", allowed=allowed)
