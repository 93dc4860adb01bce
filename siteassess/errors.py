"""What can be wrong with a user's input, said once and in one form.

Every mistake names the file, the place in it, what was given and what is allowed. Readers gather all the
mistakes of a file before they raise, and :func:`siteassess.assess` gathers those of all files.
"""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

__all__ = ["InputError", "Mistake", "OutputError", "SiteAssessError", "gather"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Mistake:
    """One mistake in one input file.

    Attributes
    ----------
    file : str
        Name of the file as the user gave it, without folders.
    where : str
        Key ("mount.mast_height_m") or line and column ("line 7, elevation_deg"); empty for the whole file.
    problem : str
        What was found there, in words that follow ``where``: "is -3.0", "is missing".
    allowed : str
        What would be right, as a clause: "it must be at least 0".
    value : object
        What was given, for programs; None when nothing was.

    Examples
    --------
    >>> print(Mistake(file="roof.toml", where="mount.mast_height_m", problem="is -3.0",
    ...               allowed="it must be at least 0", value=-3.0))
    roof.toml: mount.mast_height_m is -3.0; it must be at least 0
    """

    file: str
    where: str
    problem: str
    allowed: str
    value: object = None

    def __str__(self) -> str:
        subject = f"{self.where} {self.problem}" if self.where else self.problem
        return f"{self.file}: {subject}; {self.allowed}" if self.allowed else f"{self.file}: {subject}"


class SiteAssessError(Exception):
    """A site cannot be assessed; ``mistakes`` says why, one entry each.

    Attributes
    ----------
    mistakes : tuple of Mistake
        All that was found, in the order of the input.
    """

    def __init__(self, *mistakes: Mistake) -> None:
        super().__init__("\n".join(str(mistake) for mistake in mistakes))
        self.mistakes = mistakes


class InputError(SiteAssessError):
    """A site file, or a file that it names, is wrong."""


class OutputError(SiteAssessError):
    """The report cannot be written; what was there before still stands."""


def gather(*readers: Callable[[], Any]) -> tuple[Any, ...]:
    """Results of several readers, or one error that holds the mistakes of them all.

    Raises
    ------
    InputError
        If any reader raised one.
    """
    results: list[Any] = []
    mistakes: list[Mistake] = []
    for reader in readers:
        try:
            results.append(reader())
        except InputError as error:
            mistakes.extend(error.mistakes)
    if mistakes:
        raise InputError(*mistakes)
    return tuple(results)
