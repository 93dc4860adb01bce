"""Edges of what hangs free or is made of leaves, with undersides and paths through leaves."""

from dataclasses import dataclass

import numpy as np

from siteassess.horizon.buildings.building import Building
from siteassess.horizon.buildings.radial_layers import NOWHERE, Layers, radial_layers
from siteassess.horizon.buildings.stretches import unbroken
from siteassess.horizon.buildings.walls import Walls
from siteassess.horizon.curves import FloatArray, IndexArray

__all__ = ["LayeredEdge", "layered_edges"]

LONGEST_STEP_DEG = 2.0  # between points of leaves; the path through them bends between the corners
ZENITH_TANGENT = float(np.tan(np.pi / 2.0))


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class LayeredEdge:
    """An unbroken edge on the sky; arrays have shape (point,), as in `Obstacle`."""

    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    distance_m: FloatArray
    underside_deg: FloatArray | None
    depth_m: FloatArray | None


def layered_edges(
    walls: Walls, building: Building, foot_m: float, *, hangs: bool, surrounds: bool
) -> list[LayeredEdge]:
    """Edges of one polygon of trees, or of a building that hangs free.

    Parameters
    ----------
    walls : Walls
        Of the polygon.
    building : Building
        What it belongs to; its top is above the antenna.
    foot_m : float
        Its foot above the antenna.
    hangs : bool
        Whether its underside counts: it lies above the antenna.
    surrounds : bool
        Whether the antenna's axis runs through the polygon.

    Returns
    -------
    list of LayeredEdge
        Layers behind each other are edges of their own where they hang free, so that the sky between them
        stays open; else they are one edge, and their paths through leaves add.
    """
    layers = radial_layers(walls, surrounds)
    top_m = foot_m + building.height_m
    bottom_m = foot_m + building.underside_m if hangs and building.underside_m is not None else None
    leaves = building.cover == "foliage"
    layer, azimuth_deg = _steps(layers, LONGEST_STEP_DEG if leaves else 360.0)
    seen = [_seen(walls, layers, layer, edge_deg, top_m, bottom_m) for edge_deg in azimuth_deg]
    tangent, lower, distance_m, depth_m = (np.stack(column, axis=1) for column in zip(*seen, strict=True))
    if building.depth_m is not None:
        depth_m = np.full_like(tangent, building.depth_m)
    elif bottom_m is None:
        depth_m = _added(depth_m, layers, layer)
    columns = np.stack(
        [np.stack(azimuth_deg, axis=1), *np.rad2deg(np.arctan([tangent, lower])), depth_m, distance_m]
    )
    rank = layers.rank[layer]
    order = np.argsort(rank, kind="stable") if bottom_m is not None else np.flatnonzero(rank == 0)
    return [
        LayeredEdge(
            azimuth_deg=edge[0],
            elevation_deg=edge[1],
            underside_deg=None if bottom_m is None else edge[2],
            depth_m=edge[3] if leaves else None,
            distance_m=edge[4],
        )
        for _, edge in unbroken(rank[order], columns[:, order])
    ]


def _steps(layers: Layers, longest_deg: float) -> tuple[IndexArray, tuple[FloatArray, FloatArray]]:
    """Layers cut into steps of azimuth: the layer of each step, its start and end, ascending by start."""
    width_deg = layers.end_deg - layers.start_deg
    count = np.maximum(np.ceil(width_deg / longest_deg), 1.0).astype(np.int64)
    layer = np.repeat(np.arange(len(count)), count)
    number = np.arange(len(layer)) - np.repeat(np.cumsum(count) - count, count)
    start_deg, end_deg = (
        np.where(
            number + ahead == count[layer],
            layers.end_deg[layer],
            layers.start_deg[layer] + width_deg[layer] * ((number + ahead) / count[layer]),
        )
        for ahead in (0, 1)
    )
    return layer, (start_deg, end_deg)


def _seen(
    walls: Walls,
    layers: Layers,
    layer: IndexArray,
    azimuth_deg: FloatArray,
    top_m: float,
    bottom_m: float | None,
) -> tuple[FloatArray, FloatArray, FloatArray, FloatArray]:
    """Tangents of the upper and lower edge, slant distance of the upper one, path through the layer."""
    near_m = _near_m(walls, layers.near[layer], azimuth_deg)
    far_m = walls.distance_m(layers.far[layer], azimuth_deg)
    # What stands on the ground is one edge, that of its first layer.
    first_m = near_m
    if bottom_m is None:
        first_m = _near_m(walls, layers.near[_first_layer(layers)[layer]], azimuth_deg)
    overhead = first_m == 0.0
    tangent = np.where(overhead, ZENITH_TANGENT, top_m / np.where(overhead, 1.0, first_m))
    lower = np.zeros_like(far_m) if bottom_m is None else bottom_m / far_m
    # Overhead there is no upper edge; the nearest edge is that of the far side.
    distance_m = np.where(overhead, np.hypot(far_m, bottom_m or top_m), np.hypot(first_m, top_m))
    half_way = np.tan(0.5 * (np.arctan(tangent) + np.arctan(lower)))
    enters_m = near_m if bottom_m is None else np.maximum(near_m, bottom_m / half_way)
    leaves_m = np.minimum(far_m, top_m / half_way)
    depth_m = np.maximum(leaves_m - enters_m, 0.0) * np.hypot(1.0, half_way)
    return tangent, lower, distance_m, depth_m


def _near_m(walls: Walls, near: IndexArray, azimuth_deg: FloatArray) -> FloatArray:
    return np.where(near == NOWHERE, 0.0, walls.distance_m(np.maximum(near, 0), azimuth_deg))


def _first_layer(layers: Layers) -> IndexArray:
    """For each layer, the nearest one along the same lines of sight."""
    return np.searchsorted(layers.start_deg, layers.start_deg)


def _added(depth_m: FloatArray, layers: Layers, layer: IndexArray) -> FloatArray:
    """Paths of all layers along a line of sight, at its first layer."""
    first = _first_layer(layers)[layer]
    step = np.searchsorted(layer, first) + np.arange(len(layer)) - np.searchsorted(layer, layer)
    return np.stack([np.bincount(step, weights=column, minlength=len(layer)) for column in depth_m.T], axis=1)
