"""Where every satellite stands in the sky of the site, epoch by epoch."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

__all__ = ["SkyTracks"]

FloatArray = NDArray[np.float64]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SkyTracks:
    """Azimuth, elevation and range of every satellite at every epoch.

    Attributes
    ----------
    satellite, system, orbit_class : tuple of str, one element a satellite
        As in `CircularOrbits`.
    radius_m : array, shape (satellite,)
        Orbit radius.
    time_s : array, shape (epoch,)
        Seconds since the start of the run, evenly spaced.
    azimuth_deg, elevation_deg : array, shape (satellite, epoch)
        Azimuth clockwise from true north, geometric (true) elevation above the ellipsoidal horizon.
    range_m : array, shape (satellite, epoch)
        Distance from the antenna.
    own_epochs : integer array, shape (satellite,)
        Number of leading epochs that make up a whole number of the satellite's ground-track cycles:
        the span over which its own shares are counted.
    joint_epochs : int
        Number of leading epochs in the window of the joint counts.
    """

    satellite: tuple[str, ...]
    system: tuple[str, ...]
    orbit_class: tuple[str, ...]
    radius_m: FloatArray
    time_s: FloatArray
    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    range_m: FloatArray
    own_epochs: NDArray[np.int64]
    joint_epochs: int
