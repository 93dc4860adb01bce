"""The skyline as a taller mast sees it: same points in space, seen from higher up."""

from dataclasses import replace

import numpy as np

from siteassess.horizon.curves import FloatArray
from siteassess.horizon.outline import upper_envelope
from siteassess.horizon.skyline import Obstacle, Skyline
from siteassess.horizon.survey.carry import Points, carried

__all__ = ["keeps_its_angles", "raised"]


def raised(skyline: Skyline, rise_m: float) -> Skyline:
    """A skyline seen from higher up.

    A point at the horizontal distance r and elevation el goes down to arctan(tan(el) - rise / r). What is
    nearer goes down further, and no point goes up. Points without a distance keep their angles.

    Parameters
    ----------
    skyline : Skyline
        As seen from the present phase centre.
    rise_m : float
        How much higher the antenna stands; negative for a shorter mast [m].

    Returns
    -------
    Skyline
        Paths through leaves stay as they are. What hides behind something else from here is not known to the
        skyline, so it does not appear behind it from higher up.
    """
    if rise_m == 0.0:
        return skyline
    obstacles = tuple(_raised(obstacle, rise_m) for obstacle in skyline.obstacles)
    return replace(skyline, obstacles=obstacles, outline=upper_envelope(obstacles))


def keeps_its_angles(obstacle: Obstacle) -> bool:
    """Whether some point of an obstacle above the horizon carries no distance, so that it cannot move."""
    if obstacle.distance_m is None:
        return bool((obstacle.elevation_deg > 0.0).any())
    return bool((np.isnan(obstacle.distance_m) & (obstacle.elevation_deg > 0.0)).any())


def _raised(obstacle: Obstacle, rise_m: float) -> Obstacle:
    if obstacle.distance_m is None:
        return obstacle
    unknown = np.full_like(obstacle.elevation_deg, np.nan)

    def or_unknown(values: FloatArray | None) -> FloatArray:
        return unknown if values is None else values

    seen = carried(
        Points(
            azimuth_deg=obstacle.azimuth_deg,
            elevation_deg=obstacle.elevation_deg,
            underside_deg=or_unknown(obstacle.underside_deg),
            distance_m=obstacle.distance_m,
            depth_m=unknown,
        ),
        (0.0, 0.0, -rise_m),
    )
    return replace(
        obstacle,
        elevation_deg=seen.elevation_deg,
        underside_deg=None if obstacle.underside_deg is None else seen.underside_deg,
        distance_m=seen.distance_m,
    )
