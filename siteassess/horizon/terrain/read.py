"""Elevation rasters as a source of the horizon: the far skyline that they give at the antenna."""

from dataclasses import dataclass, replace
from functools import partial

import numpy as np

from siteassess.errors import InputError, Mistake, gather
from siteassess.horizon.curves import NOTHING_DEG, BoolArray, FloatArray
from siteassess.horizon.ring import closed_ring, opened_ring
from siteassess.horizon.skyline import Obstacle
from siteassess.horizon.survey.carry import Points
from siteassess.horizon.terrain.far_skyline import far_skyline, no_skyline
from siteassess.horizon.terrain.height_grid import LOWEST_M, HeightGrid, surface_m
from siteassess.horizon.terrain.mosaic import height_grids
from siteassess.horizon.terrain.peaks import Line, broken_line, peaks_beside
from siteassess.horizon.terrain.raster import Tile, read_tile
from siteassess.horizon.terrain.remarks import eye_remarks, missing_remarks
from siteassess.site_file.model import HorizonSource, Site
from siteassess.wording import listed

__all__ = ["Terrain", "read_terrain", "terrain_skyline"]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Terrain:
    """What elevation rasters say.

    Attributes
    ----------
    obstacles : tuple of Obstacle
        One, named "terrain".
    surveyed_deg : array, shape (stretch, 2)
        Azimuths from and to of what was looked at.
    remarks : tuple of str
        How the antenna was set over the ground, and where heights are missing, in sentences.
    """

    obstacles: tuple[Obstacle, ...]
    surveyed_deg: FloatArray
    remarks: tuple[str, ...]


def read_terrain(site: Site, source: HorizonSource) -> Terrain:
    """The skyline of the terrain as seen from the antenna's phase centre.

    Parameters
    ----------
    site : Site
        Where the antenna stands; the rasters lie beside its file.
    source : HorizonSource
        The block that names them.

    Raises
    ------
    InputError
        With the mistakes of all the rasters.
    """
    folder = site.path.parent
    tiles: tuple[Tile, ...] = gather(
        *(partial(read_tile, folder / file, site.position, source.reach_m) for file in source.files)
    )
    files = listed(tile.file for tile in tiles)
    if not any(tile.holds_site for tile in tiles):
        raise _refusal(files, "does not hold the site", "check its position, or give the raster that does")
    grids = height_grids(tiles)
    ground_m = _ground_m(grids)
    if source.heights == "site":
        mark_m = site.place.height_m
    elif ground_m is None:
        problem, allowed = "has no height at the survey mark", 'give heights = "site" and site.height_m'
        raise _refusal(files, problem, allowed)
    else:
        mark_m = ground_m + source.mark_above_ground_m
    eye_m = mark_m + site.mount.phase_centre_height_m
    azimuth_deg, elevation_deg, distance_m = terrain_skyline(grids, eye_m, source.nearest_m, source.reach_m)
    is_bare = elevation_deg == NOTHING_DEG
    if is_bare.all():
        raise _refusal(files, "has no heights within reach_m", "check its marks for missing heights")
    points, surveyed_deg = _ring(azimuth_deg[:-1], elevation_deg[:-1], distance_m[:-1], is_bare[:-1])
    terrain = Obstacle(
        name="terrain",
        cover="solid",
        azimuth_deg=points.azimuth_deg,
        elevation_deg=points.elevation_deg,
        distance_m=points.distance_m,
        source=files,
    )
    return Terrain(
        obstacles=(terrain,),
        surveyed_deg=surveyed_deg if source.complete else np.empty((0, 2)),
        remarks=(
            *eye_remarks(source, files, eye_m, mark_m, ground_m),
            *missing_remarks(grids, source, files),
        ),
    )


def terrain_skyline(grids: tuple[HeightGrid, ...], eye_m: float, nearest_m: float, reach_m: float) -> Line:
    """The skyline that grids of heights form together; where they overlap the higher one counts.

    Parameters
    ----------
    grids : tuple of HeightGrid
        The ground.
    eye_m : float
        Height of the antenna's phase centre, in the heights of the grids.
    nearest_m, reach_m : float
        Distances over the ground between which it counts.

    Returns
    -------
    azimuth_deg, elevation_deg, distance_m : array, shape (point,)
        From 0 to 360; linear between the points. Slant distances. Where there is no ground the elevation is
        -90 and the distance NaN.
    """
    seen = no_skyline()
    peaks: list[Line] = []
    for grid in grids:
        before, seen = seen, far_skyline(grid, eye_m, nearest_m, reach_m, seen)
        ray = np.flatnonzero(seen.tangent > before.tangent)
        peaks.append(peaks_beside(grid, eye_m, nearest_m, reach_m, seen, ray))
    all_azimuth_deg, all_elevation_deg, all_distance_m = zip(*peaks, strict=True)
    joined = (
        np.concatenate(all_azimuth_deg),
        np.concatenate(all_elevation_deg),
        np.concatenate(all_distance_m),
    )
    azimuth_deg, elevation_deg, distance_m = broken_line(seen, joined)
    return azimuth_deg, elevation_deg, distance_m / np.cos(np.deg2rad(elevation_deg))


def _ring(
    azimuth_deg: FloatArray, elevation_deg: FloatArray, distance_m: FloatArray, is_bare: BoolArray
) -> tuple[Points, FloatArray]:
    """The points of the skyline, open where there is no ground, and the stretches in which there is."""
    unknown = np.full(int((~is_bare).sum()), np.nan)
    points = Points(
        azimuth_deg=azimuth_deg[~is_bare],
        elevation_deg=elevation_deg[~is_bare],
        underside_deg=unknown,
        distance_m=distance_m[~is_bare],
        depth_m=unknown,
    )
    if not is_bare.any():
        return closed_ring(points), np.array([[0.0, 360.0]])
    gap = np.roll(is_bare, -1)[~is_bare]
    next_deg = np.append(points.azimuth_deg[1:], points.azimuth_deg[0] + 360.0)
    opened = opened_ring(points, gap)
    opened = replace(opened, azimuth_deg=opened.azimuth_deg - 360.0 * np.floor(opened.azimuth_deg[0] / 360.0))
    return opened, np.stack([points.azimuth_deg, next_deg], axis=1)[~gap]


def _ground_m(grids: tuple[HeightGrid, ...]) -> float | None:
    """Height of the ground at the survey mark, in the first grid that has one."""
    for grid in grids:
        place = grid.terms[:, 0, 0]
        # The outer half of the outermost cells has the heights of their nodes.
        inner = np.clip(place, 1.0, np.array(grid.height_m.shape[::-1]) - 2.0)
        if np.abs(inner - place).max() <= 0.5:
            height_m = float(surface_m(grid, inner))
            if height_m > LOWEST_M:
                return height_m
    return None


def _refusal(files: str, problem: str, allowed: str) -> InputError:
    return InputError(Mistake(file=files, where="", problem=problem, allowed=allowed))
