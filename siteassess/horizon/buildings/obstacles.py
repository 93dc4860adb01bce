"""Buildings in plan as obstacles on the sky."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

import numpy as np

from siteassess.errors import InputError, Mistake
from siteassess.horizon.buildings.building import Building
from siteassess.horizon.buildings.hidden_walls import screen_tangent, surely_hidden
from siteassess.horizon.buildings.layered_edges import layered_edges
from siteassess.horizon.buildings.plan import drop_m
from siteassess.horizon.buildings.radial_layers import count_of_layers
from siteassess.horizon.buildings.silhouettes import visible_edges
from siteassess.horizon.buildings.walls import Parts, Walls, walls_of
from siteassess.horizon.curves import BoolArray, FloatArray
from siteassess.horizon.skyline import Obstacle
from siteassess.wording import shown

__all__ = ["obstacles_of"]

NEAREST_M = 0.001  # a wall nearer to the antenna's axis has no azimuths
MOST_LAYERS = 500_000  # pieces that one outline may be cut into


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Stand:
    """How buildings stand to the antenna; arrays have shape (building,), `surrounds` (part,).

    Heights count from the antenna; `hangs` says that open sky lies below.
    """

    foot_m: FloatArray
    top_m: FloatArray
    hangs: BoolArray
    leaves: BoolArray
    surrounds: BoolArray


def obstacles_of(
    buildings: Sequence[Building], parts: Parts, antenna_m: float, file: str
) -> tuple[Obstacle, ...]:
    """Buildings as obstacles, in their order; those that others hide are left out.

    Parameters
    ----------
    buildings : sequence of Building
        What stands there.
    parts : Parts
        Their outlines in plan, from the antenna's axis.
    antenna_m : float
        The antenna's phase centre above the ground.
    file : str
        Name of the file they come from.

    Raises
    ------
    InputError
        If the antenna stands in a building, or an outline is too intricate.
    """
    walls = walls_of(parts)
    stand = _stand(buildings, walls, antenna_m, len(parts.building))
    mistakes = [*_inside_mistakes(buildings, parts, walls, stand, file)]
    if mistakes:
        raise InputError(*mistakes)
    own = walls.building
    # What surrounds the antenna and is solid lies below it: the building that it stands on.
    solid = ~(stand.hangs | stand.leaves)[own] & ~stand.surrounds[walls.part] & (walls.nearest_m >= NEAREST_M)
    standing = walls.taken(solid)
    level_m = stand.top_m[standing.building]
    screen = screen_tangent(standing, level_m)
    found = [
        (
            edge.building,
            Obstacle(
                name=buildings[edge.building].name,
                cover="solid",
                azimuth_deg=edge.azimuth_deg,
                elevation_deg=edge.elevation_deg,
                distance_m=edge.distance_m,
                straight_in_space=True,
                source=file,
            ),
        )
        for edge in visible_edges(standing, level_m, screen)
    ]
    layered = (stand.hangs | stand.leaves)[own] & (stand.top_m[own] > 0.0) & (walls.end_deg > walls.start_deg)
    found += _layered(buildings, walls.taken(layered), stand, screen, file)
    return tuple(obstacle for _, obstacle in sorted(found, key=lambda one: one[0]))


def _stand(buildings: Sequence[Building], walls: Walls, antenna_m: float, parts: int) -> _Stand:
    nearest_m = np.full(len(buildings), np.inf)
    np.minimum.at(nearest_m, walls.building, walls.nearest_m)
    nearest_m[np.isinf(nearest_m)] = 0.0  # left out: it has no walls
    # By building, so that its edges stay straight.
    foot_m = np.array([one.base_m for one in buildings]) - antenna_m - drop_m(nearest_m)
    open_m = np.array([-np.inf if one.underside_m is None else one.underside_m for one in buildings])
    crossings = np.bincount(walls.part[walls.crosses_north], minlength=parts)
    return _Stand(
        foot_m=foot_m,
        top_m=foot_m + [one.height_m for one in buildings],
        hangs=foot_m + open_m > 0.0,  # an underside below the antenna opens no sky
        leaves=np.array([one.cover == "foliage" for one in buildings], dtype=np.bool_),
        surrounds=crossings % 2 == 1,
    )


def _inside_mistakes(
    buildings: Sequence[Building], parts: Parts, walls: Walls, stand: _Stand, file: str
) -> Iterator[Mistake]:
    touched = np.zeros(len(parts.building), dtype=np.bool_)
    touched[walls.part[walls.nearest_m < NEAREST_M]] = True
    tall = (stand.top_m > 0.0)[parts.building]
    solid = ~(stand.hangs | stand.leaves)[parts.building]
    remedy = "check the outline, its heights, ground_up_m and the site's position"
    for part in np.flatnonzero(tall & (touched | stand.surrounds & solid)).tolist():
        building = parts.building[part]
        name = shown(buildings[building].name)
        if touched[part]:
            yield Mistake(
                file=file, where=name, problem="has a wall on the axis of the antenna", allowed=remedy
            )
        else:
            problem = f"stands round the antenna and is {stand.top_m[building]:.1f} m taller"
            yield Mistake(file=file, where=name, problem=problem, allowed=remedy)


def _layered(
    buildings: Sequence[Building], walls: Walls, stand: _Stand, screen: FloatArray, file: str
) -> Iterator[tuple[int, Obstacle]]:
    """Leaves and what hangs free, part by part."""
    if not len(walls):
        return
    shown_part = np.zeros(len(stand.surrounds), dtype=np.bool_)
    shown_part[walls.part[~surely_hidden(walls, stand.top_m[walls.building], screen)]] = True
    starts = np.flatnonzero(np.append(True, walls.part[1:] != walls.part[:-1]))
    for first, last in zip(starts, np.append(starts[1:], len(walls)), strict=True):
        part, index = walls.part[first], int(walls.building[first])
        if not shown_part[part] and not stand.surrounds[part]:
            continue
        building, own = buildings[index], walls.taken(np.arange(first, last))
        if count_of_layers(own) > MOST_LAYERS:
            problem = "is too intricate for leaves or for what hangs free"
            raise InputError(
                Mistake(
                    file=file,
                    where=f"the outline of {shown(building.name)}",
                    problem=problem,
                    allowed="leave out corners",
                )
            )
        for edge in layered_edges(
            own,
            building,
            float(stand.foot_m[index]),
            hangs=bool(stand.hangs[index]),
            surrounds=bool(stand.surrounds[part]),
        ):
            yield (
                index,
                Obstacle(
                    name=building.name,
                    cover=building.cover,
                    leaf=building.leaf,
                    azimuth_deg=edge.azimuth_deg,
                    elevation_deg=edge.elevation_deg,
                    underside_deg=edge.underside_deg,
                    distance_m=edge.distance_m,
                    depth_m=edge.depth_m,
                    straight_in_space=True,
                    source=file,
                ),
            )
