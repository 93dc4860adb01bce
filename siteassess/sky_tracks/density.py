"""Where in the sky the satellites spend their time."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.sky_tracks.tracks import SkyTracks

__all__ = ["SkyDensity", "sky_density"]

FloatArray = NDArray[np.float64]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SkyDensity:
    """Mean number of satellites of a group in each cell of the sky.

    Attributes
    ----------
    azimuth_edges_deg : array, shape (azimuth + 1,)
        Edges of the cells, from 0 to 360.
    elevation_edges_deg : array, shape (elevation + 1,)
        Edges of the cells in geometric elevation, from 0 to 90.
    mean_satellites : array, shape (azimuth, elevation)
        How many satellites stand in the cell on average: satellite-time over time. The sum over all cells is
        the mean number above the horizon.
    """

    azimuth_edges_deg: FloatArray
    elevation_edges_deg: FloatArray
    mean_satellites: FloatArray


def sky_density(tracks: SkyTracks, satellites: NDArray[np.bool_], *, cell_deg: float = 2.0) -> SkyDensity:
    """Mean number of satellites in each cell, every satellite over its own ground-track cycles.

    Parameters
    ----------
    tracks : SkyTracks
        The sky of the site.
    satellites : boolean array, shape (satellite,)
        Which satellites make up the group: commonly one system and orbit class.
    cell_deg : float
        Size of a cell in azimuth and in elevation; 90 must be a multiple of it.

    Returns
    -------
    SkyDensity
        Satellites below the horizon are not counted.
    """
    azimuths, elevations = round(360.0 / cell_deg), round(90.0 / cell_deg)
    counts = np.zeros(azimuths * elevations)
    for satellite in np.flatnonzero(satellites):
        epochs = int(tracks.own_epochs[satellite])
        elevation_deg = tracks.elevation_deg[satellite, :epochs]
        above = elevation_deg >= 0.0
        column = _cell(tracks.azimuth_deg[satellite, :epochs][above], cell_deg, azimuths)
        row = _cell(elevation_deg[above], cell_deg, elevations)
        counts += np.bincount(column * elevations + row, minlength=counts.size) / epochs
    return SkyDensity(
        azimuth_edges_deg=np.linspace(0.0, 360.0, azimuths + 1),
        elevation_edges_deg=np.linspace(0.0, 90.0, elevations + 1),
        mean_satellites=counts.reshape(azimuths, elevations),
    )


def _cell(angle_deg: FloatArray, cell_deg: float, cells: int) -> NDArray[np.int64]:
    """Index of the cell of each angle; the last cell holds its upper edge too."""
    return np.minimum((angle_deg / cell_deg).astype(np.int64), cells - 1)
