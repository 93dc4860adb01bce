"""How messages to the user show values and suggest names."""

from collections.abc import Iterable

__all__ = ["did_you_mean", "listed", "shown"]

LONGEST_SHOWN = 60


def shown(value: object) -> str:
    """A value as the user wrote it, texts in quotation marks, cut where it is long.

    Examples
    --------
    >>> print(shown(True), shown(-3.0), shown("roof"))
    true -3.0 "roof"
    """
    if isinstance(value, bool):
        return "true" if value else "false"
    if isinstance(value, str):
        printable = "".join(sign if sign.isprintable() else " " for sign in value)
        return f'"{_cut(printable)}"'
    if isinstance(value, int) and value.bit_length() > LONGEST_SHOWN:
        return "a number of more than 18 digits"  # Python refuses to print the longest ones
    return _cut(str(value))


def listed(names: Iterable[str], last: str = "and") -> str:
    """Names as a sentence has them.

    Examples
    --------
    >>> listed(["GPS", "Galileo", "BeiDou"], "or")
    'GPS, Galileo or BeiDou'
    """
    *first, final = names
    return f"{', '.join(first)} {last} {final}" if first else final


def did_you_mean(name: str, known: Iterable[str], otherwise: str = "") -> str:
    """The nearest known name as a question, or another text when none is near.

    Examples
    --------
    >>> did_you_mean("mast_heigth_m", ["mast_height_m", "tilt_deg"])
    'did you mean mast_height_m?'
    """
    from difflib import get_close_matches

    by_letters = {_letters(candidate): candidate for candidate in known}
    # difflib compares every pair of letters: a name of a megabyte is no misspelling.
    close = get_close_matches(_letters(name[:200]), by_letters, n=1)
    return f"did you mean {by_letters[close[0]]}?" if close else otherwise


def _letters(name: str) -> str:
    return "".join(sign for sign in name.casefold() if sign.isalnum())


def _cut(text: str) -> str:
    return text if len(text) <= LONGEST_SHOWN else f"{text[: LONGEST_SHOWN - 3]}..."
