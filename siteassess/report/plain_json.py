"""JSON as the tool writes it: rounded numbers, no NaN, no sign that steers a terminal."""

import json
import math
import re
from typing import Any

__all__ = ["as_json", "rounded"]

# Beyond ASCII, where JSON escapes nothing: they steer terminals, end lines or turn the reading direction.
STEERING_SIGNS = re.compile("[\x7f-\x9f\u2028\u2029\u200e\u200f\u202a-\u202e\u2066-\u2069]")
DECIMALS = {"share": 6, "db": 3, "deg": 4, "m": 3, "k": 3, "hz": 0, "count": 3, "v": 3, "db/m": 4}
DECIMALS |= {"s": 1, "satellites": 0, "": 3}

_on_one_line = json.JSONEncoder(ensure_ascii=False, allow_nan=False).encode


def as_json(record: dict[str, Any]) -> str:
    """A record as JSON, ending in a newline; the same text for the same record.

    Each key and each entry of a list stands on a line of its own, so that two results can be compared line by
    line.

    Examples
    --------
    >>> print(as_json({"verdict": "pass", "signals": [{"usable_share": 1.0}, {"usable_share": 0.5}]}), end="")
    {
      "verdict": "pass",
      "signals": [
        {"usable_share": 1.0},
        {"usable_share": 0.5}
      ]
    }
    """
    keys = (f"  {_on_one_line(key)}: {_entries(value)}" for key, value in record.items())
    text = "{\n" + ",\n".join(keys) + "\n}\n"
    return STEERING_SIGNS.sub(lambda sign: f"\\u{ord(sign[0]):04x}", text)


def _entries(value: Any) -> str:
    if not isinstance(value, list) or not value:
        return _on_one_line(value)
    return "[\n" + ",\n".join(f"    {_on_one_line(entry)}" for entry in value) + "\n  ]"


def rounded(value: float | None, kind: str) -> float | None:
    """A value with the decimals of its kind; None where it does not exist.

    Examples
    --------
    >>> rounded(0.12345678, "share"), rounded(-0.0001, "dB"), rounded(float("nan"), "deg")
    (0.123457, 0.0, None)
    """
    if value is None or not math.isfinite(value):
        return None
    return round(float(value), DECIMALS[kind.lower()]) + 0.0  # no minus zero
