"""Buildings and trees of a vector file: what is said of each, checked, with its outline as rings."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Any, Literal

from siteassess.errors import InputError, Mistake
from siteassess.horizon.buildings.geojson import Features
from siteassess.horizon.buildings.rings import Ring, WrongShapeError, polygon_parts
from siteassess.wording import did_you_mean, shown

__all__ = ["Building", "checked_buildings"]

MOST_MISTAKES = 50  # of one file; further ones say nothing new
LONGEST_NAME = 200
COVERS = ("solid", "foliage")
LEAVES = ("in-leaf", "leafless", "evergreen")
# Numbers that a feature may carry: lowest, highest, and whether the lowest itself is allowed.
RANGES = {
    "height_m": (0.0, 2000.0, False),
    "base_m": (-1000.0, 9000.0, True),
    "underside_m": (0.0, 2000.0, True),
    "depth_m": (0.0, 1000.0, False),
    "growth_m_per_year": (0.0, 5.0, True),
}


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Building:
    """One feature: a building, or trees.

    Attributes
    ----------
    name : str
        As given, or "building 17" or "trees 17" by its place in the file.
    cover, leaf : str
        As in `Obstacle`.
    base_m : float
        Foot above the ground of the file.
    height_m : float
        Top above the foot.
    underside_m : float or None
        Open below this height above the foot; None when it stands on the ground.
    depth_m : float or None
        Path through leaves; None for what is solid, and where the outline gives it.
    growth_m_per_year : float or None
        Growth of the top of foliage [m/year]; None where the site's holds.
    parts : tuple of tuple of array
        Polygons, each an outer ring and its holes, in the coordinates of the file.
    """

    name: str
    cover: Literal["solid", "foliage"]
    leaf: Literal["in-leaf", "leafless", "evergreen"]
    base_m: float
    height_m: float
    underside_m: float | None
    depth_m: float | None
    growth_m_per_year: float | None = None
    parts: tuple[tuple[Ring, ...], ...]


def checked_buildings(source: Features, file: str) -> tuple[tuple[Building, ...], tuple[str, ...]]:
    """The buildings of a file, and the names of those with a ring that had to be closed.

    Raises
    ------
    InputError
        With the mistakes of all the features.
    """
    buildings: list[Building] = []
    unclosed: list[str] = []
    mistakes: list[Mistake] = []
    for number, feature in enumerate(source.features, start=1):
        found: list[Mistake] = []
        building, closed = _building(feature, number, file, found)
        if building is not None and not found:
            buildings.append(building)
            if closed:
                unclosed.append(building.name)
        elif len(mistakes) < MOST_MISTAKES:
            mistakes += found
        else:
            further = Mistake(
                file=file, where="", problem="has more mistakes", allowed="the first are listed"
            )
            raise InputError(*mistakes[:MOST_MISTAKES], further)
    if mistakes:
        raise InputError(*mistakes)
    return tuple(buildings), tuple(unclosed)


def _building(feature: Any, number: int, file: str, mistakes: list[Mistake]) -> tuple[Building | None, bool]:
    """One building, or None with its mistakes, and whether a ring of it had to be closed."""
    place = f"feature {number}"

    def refuse(where: str, problem: str, allowed: str, value: object = None) -> None:
        mistakes.append(
            Mistake(file=file, where=f"{place}{where}", problem=problem, allowed=allowed, value=value)
        )

    if not isinstance(feature, dict) or feature.get("type") != "Feature":
        refuse("", "is no Feature", 'its type must be "Feature"')
        return None, False
    properties = feature.get("properties") or {}
    if not isinstance(properties, dict):
        refuse(", properties", f"is {shown(properties)}", "it must be an object with height_m")
        return None, False
    given = properties.get("name")
    name = " ".join(str(given).split())[:LONGEST_NAME] if isinstance(given, str | int) else ""
    if name:
        place = f"feature {number} ({shown(name)})"
    for problem in _property_mistakes(properties):
        refuse(*problem)
    rings: list[tuple[Ring, ...]] = []
    closed = False
    try:
        rings, closed = polygon_parts(feature.get("geometry"))
    except WrongShapeError as error:
        refuse(*error.args)
    if mistakes:
        return None, False
    cover: Literal["solid", "foliage"] = properties.get("cover") or "solid"
    underside_m, depth_m = properties.get("underside_m"), properties.get("depth_m")
    growth = properties.get("growth_m_per_year")
    return Building(
        name=name or f"{'trees' if cover == 'foliage' else 'building'} {number}",
        cover=cover,
        leaf=properties.get("leaf") or "in-leaf",
        base_m=float(properties.get("base_m") or 0.0),
        height_m=float(properties["height_m"]),
        underside_m=None if underside_m is None else float(underside_m),
        depth_m=None if depth_m is None else float(depth_m),
        growth_m_per_year=None if growth is None else float(growth),
        parts=tuple(rings),
    ), closed


def _property_mistakes(properties: Mapping[str, Any]) -> Iterator[tuple[str, str, str, object]]:
    wrong = False
    for key, (low, high, inclusive) in RANGES.items():
        value = properties.get(key)
        if value is None:
            if key == "height_m":
                near = [other for other in properties if did_you_mean(other, [key])]
                wrong = True
                yield (
                    f", {key}",
                    "is missing",
                    f"is {near[0]} meant?" if near else "every feature needs it",
                    None,
                )
        elif isinstance(value, bool) or not isinstance(value, int | float):
            wrong = True
            yield f", {key}", f"is {shown(value)}", "it must be a number", value
        elif not (low <= value if inclusive else low < value) or not value <= high:
            wrong = True
            span = f"lie from {low:g} to {high:g}" if inclusive else f"be above {low:g} and at most {high:g}"
            yield f", {key}", f"is {shown(value)}", f"it must {span}", value
    underside_m = properties.get("underside_m")
    if underside_m is not None and not wrong and underside_m >= properties["height_m"]:
        allowed = f"it must be below height_m, which is {shown(properties['height_m'])}"
        yield ", underside_m", f"is {shown(underside_m)}", allowed, underside_m
    for key, known in (("cover", COVERS), ("leaf", LEAVES)):
        value = properties.get(key)
        if value is not None and value not in known:
            choice = " or ".join(", ".join(f'"{one}"' for one in known).rsplit(", ", 1))
            yield f", {key}", f"is {shown(value)}", f"it must be {choice}", value
    if properties.get("cover") != "foliage":
        for key in ("leaf", "depth_m", "growth_m_per_year"):
            if properties.get(key) is not None:
                value = properties[key]
                yield f", {key}", f"is {shown(value)}", 'it goes with cover "foliage" only', value
