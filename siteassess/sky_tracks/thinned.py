"""A thinned sky: all the satellite-time of a place in far fewer directions than positions."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.sky_tracks.tracks import SkyTracks

__all__ = ["ThinnedSky", "thinned_sky"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class ThinnedSky:
    """Directions that stand for all satellite positions near them; arrays have shape (direction,).

    Attributes
    ----------
    system, orbit_class : tuple of str, one element a group
        What the satellites of a group have in common.
    radius_m : array, shape (group,)
        Orbit radius.
    group : integer array
        Group of each direction, ascending.
    azimuth_deg, elevation_deg : array
        Mean azimuth and geometric elevation of the positions that a direction stands for.
    spread_deg : array
        Standard deviation of their elevations.
    weight : array
        Their satellite-time: satellites of the group that stand there on average.
    """

    system: tuple[str, ...]
    orbit_class: tuple[str, ...]
    radius_m: FloatArray
    group: IndexArray
    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    spread_deg: FloatArray
    weight: FloatArray


def thinned_sky(tracks: SkyTracks, ring_edges_deg: FloatArray, sector_deg: FloatArray) -> ThinnedSky:
    """Satellite-time in cells of the sky, each cell standing at the mean of the positions in it.

    Parameters
    ----------
    tracks : SkyTracks
        The sky of the site.
    ring_edges_deg : array, shape (ring + 1,)
        Elevations between which rings of cells lie, ascending.
    sector_deg : array, shape (ring,)
        Width in azimuth of the cells of each ring; 360 is a multiple of it.

    Returns
    -------
    ThinnedSky
        Every satellite counts over its own ground-track cycles. Satellites with the same system, orbit class
        and radius are one group.
    """
    sectors = np.rint(360.0 / sector_deg).astype(np.int64)
    first = np.append(0, np.cumsum(sectors))
    radii = [round(radius_m) for radius_m in tracks.radius_m.tolist()]
    names = list(zip(tracks.system, tracks.orbit_class, radii, strict=True))
    groups = list(dict.fromkeys(names))
    sums = np.zeros((len(groups), 4, first[-1]))
    for satellite, name in enumerate(names):
        epochs = int(tracks.own_epochs[satellite])
        elevation_deg = tracks.elevation_deg[satellite, :epochs]
        above = np.flatnonzero((elevation_deg >= ring_edges_deg[0]) & (elevation_deg < ring_edges_deg[-1]))
        elevation_deg, azimuth_deg = elevation_deg[above], tracks.azimuth_deg[satellite, above]
        ring = np.searchsorted(ring_edges_deg, elevation_deg, side="right") - 1
        cell = first[ring] + (azimuth_deg * (sectors / 360.0)[ring]).astype(np.int64)
        for total, value in zip(
            sums[groups.index(name)],
            (None, azimuth_deg, elevation_deg, elevation_deg * elevation_deg),
            strict=True,
        ):
            total += np.bincount(cell, weights=value, minlength=first[-1]) / epochs
    group, cell = np.nonzero(sums[:, 0])
    weight, azimuth_deg, elevation_deg, square = sums[group, :, cell].T
    azimuth_deg, elevation_deg, square = azimuth_deg / weight, elevation_deg / weight, square / weight
    return ThinnedSky(
        system=tuple(name[0] for name in groups),
        orbit_class=tuple(name[1] for name in groups),
        radius_m=np.array([tracks.radius_m[names.index(name)] for name in groups]),
        group=group,
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        spread_deg=np.sqrt(np.maximum(square - elevation_deg**2, 0.0)),
        weight=weight,
    )
