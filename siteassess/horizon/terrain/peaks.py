"""From rays to one broken line: peaks that stand between rays are put in, needless points are taken out."""

import numpy as np

from siteassess.horizon.curves import NOTHING_DEG, BoolArray, FloatArray, IndexArray
from siteassess.horizon.terrain.far_skyline import NOTHING_TANGENT, RAYS, FarSkyline, tangent
from siteassess.horizon.terrain.height_grid import HeightGrid, rays_of

__all__ = ["Line", "broken_line", "peaks_beside"]

ELEVATION_TOLERANCE_DEG = 0.01
DISTANCE_TOLERANCE = 0.1  # of its logarithm: a tenth of the distance
LEAST_PEAK_DEG = 0.002  # peaks that rise less are left out
LONGEST_RUN = 64  # points that one straight piece may replace

Line = tuple[FloatArray, FloatArray, FloatArray]  # azimuth_deg, elevation_deg, distance_m over the ground


def peaks_beside(
    grid: HeightGrid, eye_m: float, nearest_m: float, reach_m: float, seen: FarSkyline, ray: IndexArray
) -> Line:
    """The nodes of the cells in which rays meet the skyline, as they are seen.

    Parameters
    ----------
    grid : HeightGrid
        The ground that the rays meet.
    eye_m, nearest_m, reach_m : float
        As for `far_skyline`.
    seen : FarSkyline
        What is seen along the rays.
    ray : integer array, shape (some,)
        Rays to look beside.
    """
    azimuth_deg = ray * (360.0 / RAYS)
    distance_m = seen.distance_m[ray]
    place = rays_of(grid, azimuth_deg).at(np.arange(len(ray)), distance_m)
    corner = np.floor(place)[:, :, None] + np.array([[0, 0, 1, 1], [0, 1, 0, 1]])[:, None, :]
    # Back from cells to metres: straight within a cell, as at the antenna.
    to_ground_m = np.linalg.inv(np.stack([grid.terms[:, 1, 0], grid.terms[:, 0, 1]], axis=1) / grid.unit_m)
    aside_m = np.einsum("ij,jrn->irn", to_ground_m, corner - place[:, :, None])
    azimuth_rad = np.deg2rad(azimuth_deg)[:, None]
    east_m = distance_m[:, None] * np.sin(azimuth_rad) + aside_m[0]
    north_m = distance_m[:, None] * np.cos(azimuth_rad) + aside_m[1]
    away_m = np.hypot(east_m, north_m)
    rows, columns = grid.height_m.shape
    counts = (
        (away_m >= nearest_m)
        & (away_m <= reach_m)
        & (corner >= 0).all(axis=0)
        & (corner[0] < columns)
        & (corner[1] < rows)
    )
    node = (corner[1, counts] * columns + corner[0, counts]).astype(np.int64)
    height_m = np.asarray(grid.height_m.ravel()[node], dtype=float)
    elevation_deg = np.rad2deg(np.arctan(tangent(height_m, away_m[counts], eye_m)))
    return np.rad2deg(np.arctan2(east_m[counts], north_m[counts])) % 360.0, elevation_deg, away_m[counts]


def broken_line(seen: FarSkyline, peaks: Line) -> Line:
    """The skyline from north round to north, linear between its points.

    Parameters
    ----------
    seen : FarSkyline
        What is seen along the rays.
    peaks : Line
        Ground that may stand above the line between two rays, in any order.

    Returns
    -------
    Line
        Azimuths ascend from 0 to 360. Where rays meet no ground the elevation is -90 and the distance NaN.
    """
    ray_deg = np.arange(RAYS + 1) * (360.0 / RAYS)
    edge_deg = np.rad2deg(np.arctan(np.append(seen.tangent, seen.tangent[0])))
    edge_deg[np.append(seen.tangent, seen.tangent[0]) == NOTHING_TANGENT] = NOTHING_DEG
    distance_m = np.append(seen.distance_m, seen.distance_m[0])
    ray = np.minimum((peaks[0] * (RAYS / 360.0)).astype(np.int64), RAYS - 1)
    higher = peaks[1] > np.interp(peaks[0], ray_deg, edge_deg) + LEAST_PEAK_DEG
    higher &= np.minimum(edge_deg[ray], edge_deg[ray + 1]) > NOTHING_DEG
    azimuth_deg = np.append(ray_deg, peaks[0][higher])
    order = np.argsort(azimuth_deg, kind="stable")
    line = (
        azimuth_deg[order],
        np.append(edge_deg, peaks[1][higher])[order],
        np.append(distance_m, peaks[2][higher])[order],
    )
    kept = _needed(*line)
    return line[0][kept], line[1][kept], line[2][kept]


def _needed(azimuth_deg: FloatArray, elevation_deg: FloatArray, distance_m: FloatArray) -> BoolArray:
    """Which points of a line a straight piece cannot replace; long runs are tried first."""
    nearness = np.log(np.where(np.isnan(distance_m), 1.0, distance_m))
    needed = np.ones(len(azimuth_deg), dtype=np.bool_)
    run = LONGEST_RUN
    while run >= 2:
        first = np.arange(0, len(azimuth_deg) - run, run)
        first = first[needed[first[:, None] + np.arange(1, run)].all(axis=1)]
        inner = first[:, None] + np.arange(1, run)
        begin, end = first[:, None], first[:, None] + run
        width_deg = np.maximum(azimuth_deg[end] - azimuth_deg[begin], 1e-12)
        part = (azimuth_deg[inner] - azimuth_deg[begin]) / width_deg
        straight = np.ones(len(first), dtype=np.bool_)
        for values, tolerance in (
            (elevation_deg, ELEVATION_TOLERANCE_DEG),
            (nearness, DISTANCE_TOLERANCE),
        ):
            bend = values[inner] - values[begin] - part * (values[end] - values[begin])
            straight &= (np.abs(bend) <= tolerance).all(axis=1)
        needed[inner[straight]] = False
        run //= 2
    return needed
