"""Where every satellite stands in the sky of the site, epoch by epoch."""

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.orbits.elements import CircularOrbits
from siteassess.orbits.propagation import earth_fixed_amplitudes_m, phases_deg
from siteassess.sky_tracks.frames import GeodeticPosition, earth_fixed_of_geodetic_m, east_north_up

__all__ = ["SkyTracks", "sky_tracks"]

FINE_STEPS = (
    128  # epochs of one block: short enough that the blocks of a satellite stay in the processor's cache
)

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


def sky_tracks(
    orbits: CircularOrbits, position: GeodeticPosition, *, days: float, step_s: float
) -> SkyTracks:
    """Tracks of all satellites over the sky of a place.

    Parameters
    ----------
    orbits : CircularOrbits
        Orbits of n satellites; their start is the start of the run.
    position : GeodeticPosition
        Where the antenna is: `latitude_deg`, `longitude_deg` and `height_m`, WGS 84.
    days : float
        Window of the joint counts. The run is longer where a ground-track cycle is.
    step_s : float
        Seconds from epoch to epoch.

    Returns
    -------
    SkyTracks
        Azimuth, elevation and range by satellite and epoch.

    Notes
    -----
    In even steps every rotation of a circular orbit is the product of a rotation by whole blocks of epochs
    and one within the block. East, north and up of a satellite are therefore one product of two small
    matrices, and only the angles of the blocks and of one block's epochs need a sine and cosine.
    """
    joint_epochs = max(1, round(days * 86_400.0 / step_s))
    epochs = max([joint_epochs, *(round(cycle_s / step_s) for cycle_s in orbits.cycle_s)])
    azimuth_deg, elevation_deg, range_m = np.empty((3, len(orbits.satellite), epochs))
    blocks, within = _local_factors(orbits, position, epochs, step_s)
    for satellite in range(len(orbits.satellite)):
        west_south_up_m = (blocks[satellite] @ within[satellite]).reshape(3, -1)[:, :epochs]
        _look(west_south_up_m, azimuth_deg[satellite], elevation_deg[satellite], range_m[satellite])
    return SkyTracks(
        satellite=orbits.satellite,
        system=orbits.system,
        orbit_class=orbits.orbit_class,
        radius_m=orbits.radius_m,
        time_s=step_s * np.arange(epochs),
        azimuth_deg=azimuth_deg,
        elevation_deg=elevation_deg,
        range_m=range_m,
        own_epochs=_own_epochs(orbits.cycle_s, epochs, step_s),
        joint_epochs=joint_epochs,
    )


def _own_epochs(cycle_s: FloatArray, epochs: int, step_s: float) -> NDArray[np.int64]:
    """Epochs in the largest whole number of cycles that the run holds."""
    cycles = np.maximum(1.0, np.floor(epochs * step_s / cycle_s))
    return np.rint(cycles * cycle_s / step_s).astype(np.int64)


def _local_factors(
    orbits: CircularOrbits, position: GeodeticPosition, epochs: int, step_s: float
) -> tuple[FloatArray, FloatArray]:
    """Two matrices a satellite whose product is west, south and up [m] at every epoch.

    Returns
    -------
    blocks : array, shape (satellite, 3 * block, 7)
        Rotations by whole blocks, and the position of the place.
    within : array, shape (satellite, 7, epoch of a block)
        Rotations from the start of the block.
    """
    fine = min(FINE_STEPS, epochs)
    coarse = math.ceil(epochs / fine)
    axes = east_north_up(position.latitude_deg, position.longitude_deg) * [[-1.0], [-1.0], [1.0]]
    place_m = earth_fixed_of_geodetic_m(position.latitude_deg, position.longitude_deg, position.height_m)
    local_m = np.einsum("ac,csr->sar", axes, earth_fixed_amplitudes_m(orbits))  # (satellite, axis, rotation)
    start_deg, rate_deg_per_s = phases_deg(orbits)  # (satellite, rotation)
    block_s = (step_s * fine * np.arange(coarse))[:, None]
    # (satellite, block, rotation)
    turn_rad = np.deg2rad(start_deg[:, None] + rate_deg_per_s[:, None] * block_s)
    turned_m = local_m[:, :, None] * np.exp(1j * turn_rad)[:, None]  # (satellite, axis, block, rotation)
    offset_m = np.broadcast_to(-(axes @ place_m)[:, None, None], (*turned_m.shape[:3], 1))
    blocks = np.concatenate([turned_m.real, turned_m.imag, offset_m], axis=-1)
    # (satellite, rotation, epoch)
    within_rad = np.deg2rad(rate_deg_per_s[..., None] * (step_s * np.arange(fine)))
    # The real part of z exp(ia) is Re(z) cos(a) - Im(z) sin(a); the last row carries the offset.
    ones = np.ones((len(start_deg), 1, fine))
    within = np.concatenate([np.cos(within_rad), -np.sin(within_rad), ones], axis=1)
    return blocks.reshape(len(start_deg), 3 * coarse, 7), within


def _look(
    west_south_up_m: FloatArray, azimuth_deg: FloatArray, elevation_deg: FloatArray, range_m: FloatArray
) -> None:
    """Fill the sky coordinates of one satellite in place."""
    west_m, south_m, up_m = west_south_up_m
    # Counted from south, the arctangent runs from -180 to 180 while the azimuth runs from 0 to 360.
    np.arctan2(west_m, south_m, out=azimuth_deg)
    azimuth_deg *= 180.0 / math.pi
    azimuth_deg += 180.0
    azimuth_deg[azimuth_deg >= 360.0] = 0.0
    west_square, south_square, up_square = west_south_up_m * west_south_up_m
    horizontal_square = west_square + south_square
    np.sqrt(horizontal_square + up_square, out=range_m)
    np.arctan2(up_m, np.sqrt(horizontal_square), out=elevation_deg)
    elevation_deg *= 180.0 / math.pi
