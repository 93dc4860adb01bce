"""Features of a GeoJSON file [RFC 7946], before their properties and coordinates are judged."""

import json
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any, NoReturn

from siteassess.errors import InputError, Mistake
from siteassess.tables import read_user_text
from siteassess.wording import shown

__all__ = ["Features", "read_geojson"]

Feature = Mapping[str, Any]

COLLECTION = 'it must be a "FeatureCollection" or a "Feature": buildings need properties'
# How the older GeoJSON named the one reference system that is left.
LONGITUDE_LATITUDE = ("CRS84", "4326")


@dataclass(frozen=True, slots=True, kw_only=True)
class Features:
    """What one vector file holds.

    Attributes
    ----------
    features : tuple of mapping
        Each with "geometry" and "properties" as in GeoJSON; nothing in them has been checked.
    crs : str
        Reference system that the file names; empty where it names none.
    """

    features: tuple[Feature, ...]
    crs: str = ""


def read_geojson(path: Path) -> Features:
    """Features of a GeoJSON file.

    Raises
    ------
    InputError
        If it cannot be read, is not JSON, or is no collection of features.

    References
    ----------
    [RFC 7946] 3.2, 3.3; 4: the coordinates are longitude and latitude, WGS 84.
    """
    document = _parsed(read_user_text(path), path.name)
    kind = document.get("type") if isinstance(document, dict) else None
    if not isinstance(kind, str):
        _refuse(path.name, "", "is not GeoJSON", COLLECTION)
    if kind not in ("FeatureCollection", "Feature"):
        _refuse(path.name, "type", f"is {shown(kind)}", COLLECTION)
    features = document.get("features") if kind == "FeatureCollection" else [document]
    if not isinstance(features, list):
        _refuse(path.name, "features", "is no list", "a FeatureCollection holds its features there")
    if not features:
        _refuse(path.name, "", "has no features", "at least one building must be there")
    return Features(features=tuple(features), crs=_named_system(document))


def _parsed(text: str, file: str) -> Any:
    def no_number(name: str) -> NoReturn:
        _refuse(file, "", f"holds {name}", "JSON has no such number")

    try:
        return json.loads(text, parse_constant=no_number)
    except json.JSONDecodeError as error:
        where = f"line {error.lineno}, column {error.colno}"
        _refuse(file, where, "is not JSON", error.msg[:1].lower() + error.msg[1:])
    except RecursionError:
        _refuse(file, "", "is nested too deeply", "a GeoJSON file has about ten levels")
    except ValueError:  # from the conversion of a number of thousands of digits
        _refuse(file, "", "holds a number of too many digits", "")


def _named_system(document: dict[str, Any]) -> str:
    """Reference system in the form that GeoJSON had before [RFC 7946]."""
    member = document.get("crs")
    properties = member.get("properties") if isinstance(member, dict) else None
    name = properties.get("name") if isinstance(properties, dict) else None
    return name if isinstance(name, str) and not name.endswith(LONGITUDE_LATITUDE) else ""


def _refuse(file: str, where: str, problem: str, allowed: str) -> NoReturn:
    raise InputError(Mistake(file=file, where=where, problem=problem, allowed=allowed)) from None
