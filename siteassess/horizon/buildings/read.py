"""One file of building outlines, from its coordinates to obstacles."""

from dataclasses import dataclass, replace
from pathlib import Path

import numpy as np

from siteassess.horizon.buildings.building import Building, checked_buildings
from siteassess.horizon.buildings.geojson import read_geojson
from siteassess.horizon.buildings.obstacles import obstacles_of
from siteassess.horizon.buildings.placed import placed_parts, remark
from siteassess.horizon.buildings.vector_file import read_vector_file
from siteassess.horizon.curves import FloatArray
from siteassess.horizon.skyline import Obstacle
from siteassess.site_file.model import HorizonSource, Mount, Position

__all__ = ["Outlines", "read_outlines"]

GEOJSON = (".geojson", ".json")


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Outlines:
    """What one file of outlines says.

    Attributes
    ----------
    obstacles : tuple of Obstacle
        As seen from the antenna, in the order of the file; buildings that others hide are left out.
    surveyed_deg : array, shape (stretch, 2)
        Azimuths from and to of what was looked at.
    remarks : tuple of str
        What was changed in the outlines, in sentences.
    """

    obstacles: tuple[Obstacle, ...]
    surveyed_deg: FloatArray
    remarks: tuple[str, ...]


def read_outlines(
    path: Path,
    source: HorizonSource,
    mount: Mount,
    position: Position,
    *,
    years: float = 0.0,
    growth_m_per_year: float = 0.0,
) -> Outlines:
    """A file of building outlines, as seen from the antenna's phase centre.

    Parameters
    ----------
    path : Path
        GeoJSON, or any other vector file when the extra `vector` is installed.
    source : HorizonSource
        Reference system, height of the ground, and whether the file holds all that hides the sky.
    mount : Mount
        Height of the antenna above the survey mark.
    position : Position
        The survey mark.
    years, growth_m_per_year : float
        Age of the outlines for which they are read, and the growth of trees that do not say it themselves.

    Raises
    ------
    InputError
        With the mistakes of the file.
    """
    features = (read_geojson if path.suffix.lower() in GEOJSON else read_vector_file)(path)
    buildings, unclosed = checked_buildings(features, path.name)
    if years > 0.0:
        buildings = tuple(_grown(building, years, growth_m_per_year) for building in buildings)
    parts, remarks = placed_parts(buildings, source.crs or features.crs, position, path.name)
    antenna_m = mount.phase_centre_height_m - source.ground_up_m
    if unclosed:
        remarks = (remark(path.name, unclosed, "was not closed and was closed"), *remarks)
    return Outlines(
        obstacles=obstacles_of(buildings, parts, antenna_m, path.name),
        surveyed_deg=np.array([[0.0, 360.0]]) if source.complete else np.empty((0, 2)),
        remarks=remarks,
    )


def _grown(building: Building, years: float, growth_m_per_year: float) -> Building:
    """Foliage with its top raised; what is solid stays."""
    own = building.growth_m_per_year
    rise_m = years * (growth_m_per_year if own is None else own)
    return replace(building, height_m=building.height_m + rise_m) if building.cover == "foliage" else building
