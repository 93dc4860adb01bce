"""What the window of the joint counts holds, epoch by epoch, and where it falls short."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from siteassess.sky_tracks.dilution import Dilution

__all__ = ["SectorCount", "Shortfall", "Timeline"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Shortfall:
    """How often and how long the sky falls short of a limit, and what is missing then.

    Attributes
    ----------
    what : str
        "satellites" or "PDOP".
    system : str
        The system whose satellites are counted, or all systems.
    limit : float
        Satellites that are needed, or the largest PDOP.
    share : float
        Share of the window.
    times : int
        How many times it begins to fall short.
    longest_s : float
        The longest of these times; cut where the window ends.
    missing_by_system, missing_by_sector : mapping from name to float
        Mean number of satellites above the mask that are not usable while it falls short.
    """

    what: Literal["satellites", "PDOP"]
    system: str
    limit: float
    share: float
    times: int
    longest_s: float
    missing_by_system: Mapping[str, float]
    missing_by_sector: Mapping[str, float]


@dataclass(frozen=True, slots=True, kw_only=True)
class SectorCount:
    """Mean number of satellites in view and of usable ones in one 45 degree sector."""

    name: str
    in_view_mean: float
    usable_mean: float


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Timeline:
    """The window of the joint counts. Nominal orbits: time is elapsed, never the time of day.

    Attributes
    ----------
    step_s : float
        Seconds that each epoch stands for.
    systems : tuple of str
        Names of the rows of the counts: the site's systems, then all together.
    in_view, usable : integer array, shape (system + 1, epoch)
        Satellites above the mask that send any of the site's signals, and those of them with at least one
        usable signal.
    dilution_in_view, dilution : Dilution
        Of these satellites, with one clock a system.
    sectors : tuple of SectorCount
        N, NE, E, ... NW.
    shortfalls : tuple of Shortfall
        Of all satellites, of single systems where the site file asks for them, and of PDOP.
    """

    step_s: float
    systems: tuple[str, ...]
    in_view: NDArray[np.int64]
    usable: NDArray[np.int64]
    dilution_in_view: Dilution
    dilution: Dilution
    sectors: tuple[SectorCount, ...]
    shortfalls: tuple[Shortfall, ...]

    @property
    def window_s(self) -> float:
        """Length of the window [s]."""
        return self.step_s * len(self.dilution.position)

    def shortfall(self, what: str, system: str) -> Shortfall:
        """The shortfall of satellites of a system, or of all, or of PDOP."""
        return next(one for one in self.shortfalls if (one.what, one.system) == (what, system))
