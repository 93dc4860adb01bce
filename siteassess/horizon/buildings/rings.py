"""Outlines as rings of positions, from the geometry of a feature."""

from typing import Any

import numpy as np
from numpy.typing import NDArray

__all__ = ["Ring", "WrongShapeError", "polygon_parts"]

Ring = NDArray[np.float64]  # shape (position, 2), the first one repeated at the end

SHAPES = "it must be a Polygon or a MultiPolygon"


class WrongShapeError(Exception):
    """An outline that is none: place, problem, what is allowed."""


def polygon_parts(geometry: Any) -> tuple[list[tuple[Ring, ...]], bool]:
    """Polygons of a geometry, and whether a ring of it had to be closed."""
    if geometry is None:
        raise WrongShapeError("", "has no geometry", SHAPES)
    kind = geometry.get("type") if isinstance(geometry, dict) else None
    if kind not in ("Polygon", "MultiPolygon"):
        raise WrongShapeError(", geometry", f"is a {kind}" if isinstance(kind, str) else "is none", SHAPES)
    coordinates = geometry.get("coordinates")
    polygons = [coordinates] if kind == "Polygon" else coordinates
    if not isinstance(polygons, list) or not polygons:
        raise WrongShapeError(", coordinates", "are no list of positions", SHAPES)
    parts, closed = [], False
    for polygon in polygons:
        if not isinstance(polygon, list) or not polygon:
            raise WrongShapeError(", coordinates", "hold a polygon without rings", SHAPES)
        rings = [_ring(ring) for ring in polygon]
        parts.append(tuple(ring for ring, _ in rings))
        closed |= any(was_closed for _, was_closed in rings)
    return parts, closed


def _ring(positions: Any) -> tuple[Ring, bool]:
    try:
        ring = np.array(positions)
    except ValueError:  # positions with and without a height, or worse
        ring = np.array(_without_heights(positions))
    if ring.ndim == 0:
        raise WrongShapeError(", coordinates", "hold a ring that is no list", SHAPES)
    if ring.size and (ring.ndim != 2 or ring.shape[1] < 2):
        raise WrongShapeError(", coordinates", "hold a position that is no pair of numbers", SHAPES)
    if ring.size and ring.dtype.kind not in "if":
        raise WrongShapeError(", coordinates", "hold something that is no number", SHAPES)
    ring = np.array(ring[:, :2], dtype=float) if ring.size else np.empty((0, 2))
    if not np.isfinite(ring).all():
        raise WrongShapeError(", coordinates", "hold a number that is too large", SHAPES)
    was_open = bool(len(ring)) and not np.array_equal(ring[0], ring[-1])
    if was_open:
        ring = np.concatenate([ring, ring[:1]])
    if len(ring) < 4:
        allowed = "a ring needs at least 4, the last one like the first"
        raise WrongShapeError(", coordinates", f"hold a ring of {len(ring) - was_open} positions", allowed)
    return ring, was_open


def _without_heights(positions: Any) -> list[Any]:
    pairs = [position[:2] if isinstance(position, list) else position for position in positions]
    if any(not isinstance(pair, list) or len(pair) != 2 for pair in pairs):
        raise WrongShapeError(", coordinates", "hold a position that is no pair of numbers", SHAPES)
    if any(isinstance(value, list | dict) for pair in pairs for value in pair):
        raise WrongShapeError(", coordinates", "hold something that is no number", SHAPES)
    return pairs
