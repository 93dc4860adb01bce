"""Antenna patterns in closed form, each without loss: the mean of the gain over the sphere is 1."""

import math

import numpy as np

from siteassess.antenna.pattern import FloatArray, GainPattern

__all__ = ["FLOOR_DBIC", "by_elevation", "hemisphere", "isotropic", "uniform_cone"]

FLOOR_DBIC = -200.0  # stands for no gain at all


def by_elevation(
    name: str,
    elevation_deg: FloatArray,
    gain_dbic: FloatArray,
    cross_gain_dbic: FloatArray | None = None,
    rests_on: str = "closed form",
) -> GainPattern:
    """Pattern that depends on elevation alone and holds for every carrier; arrays of shape (elevation,)."""

    def everywhere(levels_dbic: FloatArray) -> FloatArray:
        table = np.tile(np.asarray(levels_dbic, dtype=float), (1, 2, 1))
        table.flags.writeable = False
        return table

    return GainPattern(
        name=name,
        carrier_hz=np.array([np.nan]),
        azimuth_deg=np.array([0.0, 360.0]),
        elevation_deg=np.asarray(elevation_deg, dtype=float),
        gain_dbic=everywhere(gain_dbic),
        cross_gain_dbic=None if cross_gain_dbic is None else everywhere(cross_gain_dbic),
        rests_on=rests_on,
    )


def isotropic() -> GainPattern:
    """0 dBic in every direction."""
    return by_elevation("isotropic", np.array([-90.0, 90.0]), np.array([0.0, 0.0]))


def hemisphere() -> GainPattern:
    """Twice the isotropic gain above the plane of the antenna, nothing below."""
    return uniform_cone(90.0, name="hemisphere")


def uniform_cone(half_angle_deg: float, name: str = "uniform cone") -> GainPattern:
    """Even gain 2 / (1 - cos a) inside a cone round the zenith, nothing outside.

    Parameters
    ----------
    half_angle_deg : float
        Angle a from the axis to the side of the cone [deg], above 0 and below 180.

    Examples
    --------
    >>> round(float(uniform_cone(60.0).gain_dbic.max()), 3)
    6.021
    """
    edge_deg = 90.0 - half_angle_deg
    inside_dbic = 10.0 * math.log10(2.0 / (1.0 - math.cos(math.radians(half_angle_deg))))
    return by_elevation(
        name,
        np.array([-90.0, edge_deg, edge_deg, 90.0]),
        np.array([FLOOR_DBIC, FLOOR_DBIC, inside_dbic, inside_dbic]),
    )
