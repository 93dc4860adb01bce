"""How far readings without a distance may be off because the instrument stood elsewhere than the antenna."""

from math import asin, degrees, hypot

__all__ = ["NEAREST_OBSTACLE_M", "parallax_bound_deg"]

NEAREST_OBSTACLE_M = 50.0  # own choice: what stands nearer is to be surveyed with its distance


def parallax_bound_deg(
    offset_m: tuple[float, float, float], distance_m: float = NEAREST_OBSTACLE_M
) -> float | None:
    """Largest angle [deg] by which a point moves on the sky between instrument and antenna.

    Parameters
    ----------
    offset_m : tuple of float
        From the antenna to the instrument: east, north, up [m].
    distance_m : float
        The point stands at least so far from either [m].

    Returns
    -------
    float or None
        None where the offset is not smaller than the distance: then there is no bound.

    Examples
    --------
    >>> round(parallax_bound_deg((2.0, 0.0, -1.5)), 2)
    2.87
    """
    # From a distance d an offset e spans most when square to the other line of sight: e / d = sin.
    offset = hypot(*offset_m)
    return degrees(asin(offset / distance_m)) if offset < distance_m else None
