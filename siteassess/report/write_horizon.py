"""Writes an assembled horizon: two files, both or none."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from pathlib import Path
from typing import TYPE_CHECKING

from siteassess.errors import Mistake, OutputError
from siteassess.report.put_in_place import NewFile, put_files

if TYPE_CHECKING:
    from siteassess.horizon.shares import SkyShares
    from siteassess.horizon.skyline import Skyline
    from siteassess.site_file.model import Site

__all__ = ["HORIZON_FILES", "write_horizon"]

HORIZON_FILES = ("horizon.csv", "panorama.svg")


def write_horizon(
    site: Site,
    skyline: Skyline,
    shares: SkyShares,
    folder: str | Path,
    progress: Callable[[str], None] | None = None,
) -> None:
    """Write a skyline as a survey file and as a drawing into a folder; other files there are left alone.

    Parameters
    ----------
    site : Site
        Whose horizon it is; its own files are not overwritten.
    skyline : Skyline
        What hides the sky.
    shares : SkyShares
        Its shares above the mask.
    folder : str or Path
        Where to; made when it does not exist.
    progress : function, optional
        Called with a few words before each step.

    Raises
    ------
    OutputError
        If the folder or a file cannot be made or replaced, or would take the place of a file that the site
        names; what stood there before still stands.
    """
    own = {(site.path.parent / file).resolve() for source in site.horizon for file in source.files}
    for name in HORIZON_FILES:
        if (Path(folder) / name).resolve() in own:
            raise OutputError(
                Mistake(
                    file=name,
                    where="",
                    problem="is a file of the site itself and is left alone",
                    allowed="name another folder with --out",
                )
            )
    put_files(_files(skyline, shares, site.require.elevation_mask_deg), folder, progress)


def _files(skyline: Skyline, shares: SkyShares, mask_deg: float) -> Iterator[NewFile]:
    from siteassess.horizon.written import horizon_csv
    from siteassess.report.figures.source_panorama import source_panorama_svg

    yield NewFile("horizon.csv", lambda: horizon_csv(skyline).encode(), "writing the horizon")
    yield NewFile(
        "panorama.svg", lambda: source_panorama_svg(skyline, shares, mask_deg).encode(), "drawing the horizon"
    )
