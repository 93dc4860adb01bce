"""What the reader of a report must know about a skyline from elevation rasters."""

import numpy as np

from siteassess.horizon.curves import BoolArray, FloatArray
from siteassess.horizon.terrain.height_grid import LOWEST_M, HeightGrid, rays_of
from siteassess.site_file.model import HorizonSource
from siteassess.wording import listed

__all__ = ["eye_remarks", "missing_from_m", "missing_remarks"]

LARGEST_DIFFERENCE_M = 10.0
DIRECTIONS = 720  # in which missing heights are looked for
MOST_STEPS = 2000
MOST_STRETCHES = 6


def eye_remarks(
    source: HorizonSource, files: str, eye_m: float, mark_m: float, ground_m: float | None
) -> tuple[str, ...]:
    """How the antenna was set over the ground, and from where on the ground counts."""
    found = "" if ground_m is None else f", where {files} has the ground at {ground_m:.1f} m"
    how = "site.height_m" if source.heights == "site" else "the raster"
    remarks = [
        f"Terrain is taken from {source.nearest_m:g} m to {source.reach_m / 1000.0:g} km; what stands nearer "
        "is left to the survey.",
        f"The antenna is set {eye_m:.1f} m high in the heights of the terrain: the survey mark lies at "
        f"{mark_m:.1f} m by {how}{found}.",
    ]
    if source.heights == "site" and ground_m is not None and abs(mark_m - ground_m) > LARGEST_DIFFERENCE_M:
        remarks.append(
            f"Mark and ground differ by {abs(mark_m - ground_m):.0f} m: check that site.height_m counts "
            "from where the raster counts."
        )
    if not source.complete:
        remarks.append("Terrain alone counts no azimuth as looked at: nearer things are not in it.")
    return tuple(remarks)


def missing_remarks(grids: tuple[HeightGrid, ...], source: HorizonSource, files: str) -> tuple[str, ...]:
    """Where the rasters have no heights within reach: ground there is not in the skyline."""
    from_m = missing_from_m(grids, source.nearest_m, source.reach_m)
    stretches = _stretches(~np.isnan(from_m))
    if not stretches:
        return ()
    told = [_told(from_m, first, count, source.nearest_m) for first, count in stretches]
    if len(told) > MOST_STRETCHES:
        told = [*told[:MOST_STRETCHES], f"{len(told) - MOST_STRETCHES} more stretches"]
    return (
        f"{files} lacks heights within reach, {listed(told)}: "
        "ground that is missing there hides nothing here.",
    )


def _told(from_m: FloatArray, first: int, count: int, nearest_m: float) -> str:
    """One stretch of directions: where it lies, and from what distance on heights are missing."""
    step_deg = 360.0 / DIRECTIONS
    away_m = float(np.take(from_m, np.arange(first, first + count), mode="wrap").min())
    away = f"from {away_m / 1000.0:.1f} km" if away_m > nearest_m else "at any distance"
    if count == DIRECTIONS:
        return f"all round {away}"
    begin_deg, end_deg = (first - 0.5) * step_deg % 360.0, (first + count - 0.5) * step_deg % 360.0
    return f"toward azimuth {begin_deg:.0f}° to {end_deg:.0f}° {away}"


def missing_from_m(grids: tuple[HeightGrid, ...], nearest_m: float, reach_m: float) -> FloatArray:
    """Nearest distance without a height in each of `DIRECTIONS`, from north on; NaN where none is missing."""
    step_m = max(min(grid.cell_m for grid in grids), (reach_m - nearest_m) / MOST_STEPS)
    distance_m = np.append(np.arange(nearest_m, reach_m, step_m), reach_m)
    known = np.zeros((len(distance_m), DIRECTIONS), dtype=np.bool_)
    for grid in grids:
        known |= _is_known(grid, distance_m)
    from_m = distance_m[np.argmin(known, axis=0)]
    return np.where(known.all(axis=0), np.nan, from_m)


def _is_known(grid: HeightGrid, distance_m: FloatArray) -> BoolArray:
    """Whether the node nearest to places has a height, shape (distance, direction)."""
    rays = rays_of(grid, np.arange(DIRECTIONS) * (360.0 / DIRECTIONS))
    place = rays.at(np.arange(DIRECTIONS), np.repeat(distance_m[:, None], DIRECTIONS, axis=1))
    rows, columns = grid.height_m.shape
    column, row = (
        np.clip(np.round(x), 0, n - 1).astype(np.int64) for x, n in zip(place, (columns, rows), strict=True)
    )
    return np.asarray(grid.height_m[row, column] > LOWEST_M)


def _stretches(missing: BoolArray) -> list[tuple[int, int]]:
    """First direction and count of each run round the circle."""
    if missing.all():
        return [(0, len(missing))]
    begins = np.flatnonzero(missing & ~np.roll(missing, 1))
    ends = np.flatnonzero(missing & ~np.roll(missing, -1))
    if len(begins) and ends[0] < begins[0]:
        ends = np.roll(ends, -1)
    return [(int(a), int((b - a) % len(missing)) + 1) for a, b in zip(begins, ends, strict=True)]
