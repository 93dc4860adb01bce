"""Features of any other vector file, through the optional library pyogrio."""

import json
from pathlib import Path
from typing import Any

from siteassess.errors import InputError, Mistake
from siteassess.horizon.buildings.geojson import Features

__all__ = ["read_vector_file"]


def read_vector_file(path: Path) -> Features:
    """Features of the one layer of a vector file.

    Raises
    ------
    InputError
        If the library is not there, the file cannot be read, or it does not hold exactly one layer.
    """
    try:
        import pyogrio
        from pyogrio.errors import DataSourceError
    except ImportError as error:
        raise _refusal(
            path,
            "is no GeoJSON file",
            'other formats need an extra library: pip install "siteassess[vector]", or save it as .geojson',
        ) from error
    if not path.is_file():
        raise _refusal(path, "there is no such file", f"it was looked for as {path}")
    try:
        layers = pyogrio.list_layers(path)
        if len(layers) != 1:
            raise _refusal(path, f"has {len(layers)} layers", "it must hold one")
        meta, _, geometry, columns = pyogrio.raw.read(path, force_2d=True)
    except DataSourceError as error:
        raise _refusal(path, "cannot be read", "it must be a vector file, such as GeoPackage") from error
    if not len(geometry):
        raise _refusal(path, "has no features", "at least one building must be there")
    return Features(
        features=_as_geojson(geometry, dict(zip(meta["fields"], columns, strict=True))),
        crs=meta["crs"] or "",
    )


def _as_geojson(geometry: Any, columns: dict[str, Any]) -> tuple[dict[str, Any], ...]:
    import shapely

    shapes = [shape and json.loads(shape) for shape in shapely.to_geojson(shapely.from_wkb(geometry))]
    rows = (
        zip(*(column.tolist() for column in columns.values()), strict=True) if columns else [()] * len(shapes)
    )
    return tuple(
        {
            "type": "Feature",
            "geometry": shape,
            "properties": {key: _given(cell) for key, cell in zip(columns, row, strict=True)},
        }
        for shape, row in zip(shapes, rows, strict=True)
    )


def _given(cell: Any) -> Any:
    return None if isinstance(cell, float) and cell != cell else cell  # blank cells of numbers come as NaN


def _refusal(path: Path, problem: str, allowed: str) -> InputError:
    return InputError(Mistake(file=path.name, where="", problem=problem, allowed=allowed))
