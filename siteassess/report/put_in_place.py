"""Puts files in place: all of them, or none."""

import errno
import secrets
import shutil
from collections.abc import Callable, Iterable
from dataclasses import dataclass
from pathlib import Path

from siteassess.errors import Mistake, OutputError

__all__ = ["NewFile", "put_files"]


@dataclass(frozen=True, slots=True)
class NewFile:
    """A file to be written: its name, what makes it, and a few words for whoever waits."""

    name: str
    make: Callable[[], bytes]
    words: str = ""


def put_files(
    files: Iterable[NewFile], folder: str | Path, progress: Callable[[str], None] | None = None
) -> None:
    """Write files into a folder; other files there are left alone.

    All are made in a temporary folder first. After any error what stood there before still stands.

    Parameters
    ----------
    files : iterable of NewFile
        Asked for one after the other; errors of the asking leave the folder alone, too.
    folder : str or Path
        Where to; made when it does not exist.
    progress : function, optional
        Called with a few words before each step.

    Raises
    ------
    OutputError
        If the folder or a file cannot be made or replaced.
    """
    folder = Path(folder)
    tell = progress or (lambda words: None)
    try:
        _write(files, folder, tell)
    except OSError as error:
        raise OutputError(
            Mistake(
                file=folder.name or str(folder),
                where="",
                problem=f"the report cannot be written: {error.strerror or error}",
                allowed="what stood there before is unchanged",
                value=str(folder),
            )
        ) from error


def _write(files: Iterable[NewFile], folder: Path, tell: Callable[[str], None]) -> None:
    # Inside a folder that exists: beside it may lie on another disk, where nothing can be renamed to.
    home = folder if folder.is_dir() else folder.parent
    for place in (folder, *folder.parents):
        if place.exists() and not place.is_dir():
            raise NotADirectoryError(errno.ENOTDIR, f"{place.name} is a file, not a folder")
    home.mkdir(parents=True, exist_ok=True)
    fresh = home / f".siteassess-{secrets.token_hex(4)}"
    fresh.mkdir()
    try:
        names = []
        for file in files:
            if file.words:
                tell(file.words)
            (fresh / file.name).write_bytes(file.make())
            names.append(file.name)
        tell("putting the report in place")
        _put_in_place(fresh, folder, names)
    finally:
        shutil.rmtree(fresh, ignore_errors=True)


def _put_in_place(fresh: Path, folder: Path, names: list[str]) -> None:
    """Rename the whole folder where there was none; else swap file by file, and back again on any error."""
    if not folder.exists():
        try:
            fresh.rename(folder)
            return
        except OSError:
            if not folder.is_dir():  # else another run has made it meanwhile
                raise
    before = fresh / "before"
    before.mkdir()
    stood = [name for name in names if (folder / name).exists()]
    for name in stood:
        shutil.copy2(folder / name, before / name)
    swapped: list[str] = []
    try:
        for name in names:
            (fresh / name).replace(folder / name)
            swapped.append(name)
    except BaseException:
        for name in swapped:
            if name in stood:
                (before / name).replace(folder / name)
            else:
                (folder / name).unlink()
        raise
