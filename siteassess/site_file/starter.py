"""A commented site to begin with."""

import os
from importlib import resources
from pathlib import Path
from tempfile import TemporaryDirectory

from siteassess.errors import InputError, Mistake, OutputError

__all__ = ["write_starter"]

# The site file comes last: a folder without it is no site.
FILES = ("horizon.csv", "site.toml")


def write_starter(folder: str | os.PathLike[str]) -> None:
    """A commented `site.toml` and its `horizon.csv`, which assess at once.

    Parameters
    ----------
    folder : str or path
        Made where it is not there yet.

    Raises
    ------
    InputError
        If the folder is not empty, or a file stands in its place.
    OutputError
        If it cannot be written; then nothing is left in it.
    """
    folder = Path(folder)
    name = folder.name or str(folder)
    try:
        folder.mkdir(parents=True, exist_ok=True)
        if any(folder.iterdir()):
            raise InputError(_refusal(name, "the folder is not empty"))
        _write(folder)
    except (FileExistsError, NotADirectoryError) as error:
        raise InputError(_refusal(name, "there is a file in its place")) from error
    except (OSError, ValueError) as error:  # ValueError: a NUL character in the path
        reason = (getattr(error, "strerror", None) or str(error)).lower()
        mistake = Mistake(file=name, where="", problem="the site cannot be written", allowed=reason)
        raise OutputError(mistake) from error


def _write(folder: Path) -> None:
    """Both files, or none: each is complete before it takes its place."""
    templates = resources.files("siteassess").joinpath("site_file/starter_site")
    with TemporaryDirectory(dir=folder) as workshop:
        for file in FILES:
            (Path(workshop) / file).write_bytes(templates.joinpath(file).read_bytes())
        for file in FILES:
            (Path(workshop) / file).replace(folder / file)


def _refusal(name: str, problem: str) -> Mistake:
    return Mistake(file=name, where="", problem=problem, allowed="a new site needs a new or an empty folder")
