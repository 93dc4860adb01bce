"""How the report writes numbers, directions and names."""

import unicodedata

__all__ = [
    "NOTHING",
    "azimuth_range",
    "compass_point",
    "decibels",
    "in_unit",
    "number",
    "percent",
    "plain",
    "told_apart",
]

NOTHING = "–"
COMPASS_POINTS = (
    "north",
    "north-east",
    "east",
    "south-east",
    "south",
    "south-west",
    "west",
    "north-west",
)
UNITS = {"deg": "°", "m": " m", "count": "", "": ""}
WHOLE = ("s", "satellites")


def plain(text: str) -> str:
    """A user's text on one line, without signs that steer a terminal or turn the reading direction.

    Examples
    --------
    >>> plain("Roof\\u202e \\x1b[31mwest\\n")
    'Roof [31mwest'
    """
    seen = "".join(" " if unicodedata.category(sign) in ("Cc", "Zl", "Zp") else sign for sign in text)
    return " ".join("".join(sign for sign in seen if unicodedata.category(sign) != "Cf").split())


def number(value: float | None, decimals: int = 1) -> str:
    """A number with a true minus sign and never a minus zero; a dash where there is none.

    Examples
    --------
    >>> number(-158.46), number(-0.01), number(None)
    ('−158.5', '0.0', '–')
    """
    if value is None or value != value:
        return NOTHING
    text = f"{value:.{decimals}f}"
    if float(text) == 0:
        text = text.lstrip("-")
    return text.replace("-", "−")


def percent(share: float | None, decimals: int = 1) -> str:
    """A share of 0..1 in percent.

    Examples
    --------
    >>> percent(0.1234)
    '12.3\\xa0%'
    """
    return (
        NOTHING if share is None or share != share else f"{number(100 * share, decimals)}\N{NO-BREAK SPACE}%"
    )


def decibels(value_db: float | None) -> str:
    """A level or a loss to a tenth of a decibel."""
    return number(value_db, 1)


def in_unit(value: float, unit: str, decimals: int = 1) -> str:
    """A finding's value or limit with its unit: a share in percent, degrees or metres.

    Examples
    --------
    >>> in_unit(12.34, "deg"), in_unit(0.5, "m", 2), in_unit(6.0, "satellites")
    ('12.3°', '0.50\\xa0m', '6\\xa0satellites')
    """
    if unit == "share":
        return percent(value, decimals)
    decimals = 0 if unit in WHOLE else decimals
    return number(value, decimals) + UNITS.get(unit, f" {unit}").replace(" ", "\N{NO-BREAK SPACE}")


def told_apart(value: float, limit: float, unit: str) -> tuple[str, str]:
    """Value and limit with as many decimals as it takes to see which is larger.

    Examples
    --------
    >>> told_apart(0.94996, 0.95, "share")
    ('94.996\\xa0%', '95.000\\xa0%')
    """
    for decimals in (1, 2, 3, 4):
        texts = in_unit(value, unit, decimals), in_unit(limit, unit, decimals)
        if texts[0] != texts[1] or value == limit:
            break
    return texts


def compass_point(azimuth_deg: float) -> str:
    """The nearest of eight compass points.

    Examples
    --------
    >>> compass_point(350.0), compass_point(112.6)
    ('north', 'south-east')
    """
    return COMPASS_POINTS[round(azimuth_deg / 45.0) % 8]


def azimuth_range(from_deg: float, to_deg: float) -> str:
    """Azimuths from and to, clockwise.

    Examples
    --------
    >>> azimuth_range(350.0, 372.5), azimuth_range(0.0, 360.0)
    ('350.0° to 12.5°', 'all round')
    """
    if to_deg - from_deg >= 360.0:
        return "all round"
    return f"{number(from_deg % 360.0)}° to {number(to_deg % 360.0)}°"
