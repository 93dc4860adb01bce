"""Outlines of buildings in the plan round the antenna, repaired where they cross themselves."""

from collections.abc import Sequence
from typing import Any

import numpy as np

from siteassess.errors import InputError, Mistake
from siteassess.horizon.buildings.building import Building
from siteassess.horizon.buildings.plan import east_north_m, far_m
from siteassess.horizon.buildings.walls import Parts, parts_of
from siteassess.horizon.curves import BoolArray, FloatArray, IndexArray
from siteassess.site_file.model import Position
from siteassess.wording import listed, shown

__all__ = ["placed_parts", "remark"]

FARTHEST_M = 50_000.0  # nothing beyond is looked at; if all is, the reference system is wrong
MOST_CROSSING_CORNERS = 2000  # of an outline that crosses itself; crossings grow with the square of it
MOST_NAMES = 5


def placed_parts(
    buildings: Sequence[Building], crs: str, site: Position, file: str
) -> tuple[Parts, tuple[str, ...]]:
    """The polygons of buildings in metres from the site, and what was changed in them.

    Parameters
    ----------
    buildings : sequence of Building
        With coordinates in `crs`.
    crs : str
        Reference system; empty for longitude and latitude, WGS 84.
    site : Position
        The antenna's axis.
    file : str
        Where the buildings come from, for messages.

    Returns
    -------
    parts : Parts
        Without the buildings beyond 50 km.
    remarks : tuple of str
        Sentences.

    Raises
    ------
    InputError
        If coordinates are out of range or far away, or an outline cannot be repaired.
    """
    rings = [ring for building in buildings for part in building.parts for ring in part]
    degrees = _degrees(np.concatenate(rings), crs, file)
    parts = parts_of(
        np.stack(east_north_m(*degrees, site), axis=1),
        [len(ring) for ring in rings],
        [len(part) for building in buildings for part in building.parts],
        [len(building.parts) for building in buildings],
    )
    parts, left_out = _near(parts, len(buildings), *degrees, site, file)
    parts, repaired = _repaired(parts, buildings, file)
    remarks = []
    if left_out:
        count = f"{left_out} building{'s' if left_out > 1 else ''}"
        remarks.append(f"{file}: {count} more than {FARTHEST_M / 1000:g} km away left out.")
    if len(repaired):
        names = [buildings[index].name for index in repaired]
        remarks.append(remark(file, names, "crosses or touches itself and was repaired"))
    return parts, tuple(remarks)


def remark(file: str, names: Sequence[str], what: str) -> str:
    """A sentence on what was done to the outlines of some buildings."""
    some = [shown(name) for name in names[:MOST_NAMES]]
    if len(names) > MOST_NAMES:
        some.append(f"{len(names) - MOST_NAMES} more")
    return f"{file}: the outline of {listed(some)} {what}."


def _degrees(coordinates: FloatArray, crs: str, file: str) -> tuple[FloatArray, FloatArray]:
    """Longitudes and latitudes."""
    longitude_deg, latitude_deg = coordinates.T
    if crs:
        longitude_deg, latitude_deg = _transformer(crs, file).transform(longitude_deg, latitude_deg)
    # NaN and infinity, from outside the area of a projection, are not within either.
    wrong = np.flatnonzero(~((np.abs(longitude_deg) <= 360.0) & (np.abs(latitude_deg) <= 90.0)))
    if wrong.size:
        first, second = coordinates[wrong[0]].tolist()
        raise _refusal(
            file,
            "coordinates",
            f"hold {first:.10g}, {second:.10g}",
            f"they do not lie in the area of {crs}"
            if crs
            else "they must be longitude and latitude in degrees; if they are projected, give crs",
        )
    return longitude_deg, latitude_deg


def _transformer(crs: str, file: str) -> Any:
    from pyproj import Transformer
    from pyproj.exceptions import ProjError

    try:
        # always_xy: easting before northing, longitude before latitude, whatever the system's own order.
        return Transformer.from_crs(crs, "EPSG:4326", always_xy=True)
    except ProjError as error:
        raise _refusal(file, "crs", f"is {shown(crs)}", "no way from it to WGS 84 is known") from error


def _near(
    parts: Parts,
    buildings: int,
    longitude_deg: FloatArray,
    latitude_deg: FloatArray,
    site: Position,
    file: str,
) -> tuple[Parts, int]:
    """The parts of buildings within reach, and the number of buildings beyond."""
    distance_m = np.full(buildings, np.inf)
    owner = parts.building[parts.part[parts.ring]]
    np.minimum.at(distance_m, owner, far_m(longitude_deg, latitude_deg, site))
    near = distance_m <= FARTHEST_M
    if not near.any():
        allowed = "check the site's position and the reference system of the file"
        could_be = np.abs(longitude_deg) <= 90.0
        swapped_m = far_m(latitude_deg[could_be], longitude_deg[could_be], site)
        if (swapped_m <= FARTHEST_M).any():
            allowed = "longitude must stand before latitude; swapped, they lie at the site"
        nearest_km = distance_m.min() / 1000.0
        raise _refusal(file, "the nearest building", f"is {nearest_km:.0f} km away", allowed)
    return (parts if near.all() else _kept(parts, near)), int((~near).sum())


def _kept(parts: Parts, near: BoolArray) -> Parts:
    """The parts of some buildings, which keep their numbers."""
    part_kept = near[parts.building]
    ring_kept = part_kept[parts.part]
    corner_kept = ring_kept[parts.ring]

    def renumbered(owner: IndexArray, kept: BoolArray) -> IndexArray:
        return np.asarray((np.cumsum(kept) - 1)[owner])

    return Parts(
        east_m=parts.east_m[corner_kept],
        north_m=parts.north_m[corner_kept],
        ring=renumbered(parts.ring[corner_kept], ring_kept),
        part=renumbered(parts.part[ring_kept], part_kept),
        building=parts.building[part_kept],
    )


def _repaired(parts: Parts, buildings: Sequence[Building], file: str) -> tuple[Parts, IndexArray]:
    """Parts that do not cross themselves, and the buildings that were changed for it."""
    import shapely

    corners_m = np.stack([parts.east_m, parts.north_m], axis=1)
    ring_from = np.append(np.searchsorted(parts.ring, np.arange(len(parts.part))), len(corners_m))
    part_from = np.append(np.searchsorted(parts.part, np.arange(len(parts.building))), len(parts.part))
    polygons = shapely.from_ragged_array(shapely.GeometryType.POLYGON, corners_m, (ring_from, part_from))
    wrong = np.flatnonzero(~shapely.is_valid(polygons))
    if not wrong.size:
        return parts, wrong
    sizes = np.diff(ring_from[part_from])
    kept = np.delete(np.arange(len(polygons)), wrong)
    shapes, owner = [*polygons[kept]], [*parts.building[kept]]
    for index in wrong.tolist():
        name = f"the outline of {shown(buildings[parts.building[index]].name)}"
        if sizes[index] > MOST_CROSSING_CORNERS:
            problem = f"crosses or touches itself and has {sizes[index]} corners"
            raise _refusal(file, name, problem, f"it is repaired up to {MOST_CROSSING_CORNERS} corners only")
        sound = [
            shape
            for shape in shapely.get_parts(shapely.get_parts(shapely.make_valid(polygons[index])))
            if shape.geom_type == "Polygon" and shape.area > 0.0
        ]
        if not sound:
            raise _refusal(file, name, "encloses no area", "a thin wall needs its two sides")
        shapes += sound
        owner += [parts.building[index]] * len(sound)
    order = np.argsort(owner, kind="stable")
    _, corners_m, (ring_from, part_from) = shapely.to_ragged_array([shapes[index] for index in order])
    mended = parts_of(corners_m, np.diff(ring_from), np.diff(part_from), [])
    return (
        Parts(
            east_m=mended.east_m,
            north_m=mended.north_m,
            ring=mended.ring,
            part=mended.part,
            building=np.array(owner, dtype=np.int64)[order],
        ),
        np.unique(parts.building[wrong]),
    )


def _refusal(file: str, where: str, problem: str, allowed: str) -> InputError:
    return InputError(Mistake(file=file, where=where, problem=problem, allowed=allowed))
