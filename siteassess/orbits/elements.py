"""Orbital elements of circular nominal orbits."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["CircularOrbits"]

FloatArray = NDArray[np.float64]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class CircularOrbits:
    """Circular orbits, one element a satellite, all arrays of shape (satellite,).

    Attributes
    ----------
    satellite : tuple of str
        System and slot, such as "GPS B1A".
    system : tuple of str
        "GPS", "Galileo", "GLONASS" or "BeiDou".
    orbit_class : tuple of str
        "MEO", "IGSO" or "GEO".
    radius_m : array
        Distance from the centre of the Earth.
    inclination_deg : array
        Inclination.
    node_longitude_deg : array
        Earth-fixed longitude of the ascending node at the start of the run.
    node_longitude_rate_deg_per_s : array
        Its rate: node precession less the rotation of the Earth.
    argument_of_latitude_deg : array
        Angle from the ascending node at the start of the run.
    argument_of_latitude_rate_deg_per_s : array
        Its rate: 360 degrees in a nodal period.
    cycle_s : array
        Ground-track cycle of the satellite's system and orbit class.
    """

    satellite: tuple[str, ...]
    system: tuple[str, ...]
    orbit_class: tuple[str, ...]
    radius_m: FloatArray
    inclination_deg: FloatArray
    node_longitude_deg: FloatArray
    node_longitude_rate_deg_per_s: FloatArray
    argument_of_latitude_deg: FloatArray
    argument_of_latitude_rate_deg_per_s: FloatArray
    cycle_s: FloatArray
