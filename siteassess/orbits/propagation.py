"""From orbital elements to positions over the turning Earth."""

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.orbits.elements import CircularOrbits

__all__ = ["PHASES", "earth_fixed_amplitudes_m", "earth_fixed_m", "phases_deg"]

FloatArray = NDArray[np.float64]

# A position on a circular orbit is a sum of three rotations. Their angles are these sums of the Earth-fixed
# longitude of the node (first column) and the argument of latitude (second).
PHASES = np.array([[1.0, 1.0], [1.0, -1.0], [0.0, 1.0]])


def earth_fixed_m(orbits: CircularOrbits, time_s: ArrayLike) -> FloatArray:
    """Earth-fixed positions.

    Parameters
    ----------
    orbits : CircularOrbits
        Orbits of n satellites.
    time_s : array_like, shape (epoch,)
        Seconds since the start of the run.

    Returns
    -------
    array, shape (3, satellite, epoch)
        Earth-centred, Earth-fixed coordinates [m]: x toward 0 E on the equator, y toward 90 E, z north.

    Notes
    -----
    With the longitude of the node L, the argument of latitude u and the inclination i,

        x + iy = r (cos^2(i/2) exp i(L + u) + sin^2(i/2) exp i(L - u)),    z = r sin(i) sin(u),

    which is the rotation of [IS-GPS-200] Table 20-IV, written as products turned into sums.

    References
    ----------
    [IS-GPS-200] Table 20-IV.

    Examples
    --------
    >>> from datetime import datetime
    >>> from siteassess.orbits.constellations import nominal_orbits
    >>> orbits = nominal_orbits(["BeiDou"], datetime(2026, 1, 1))
    >>> x_m, y_m, z_m = earth_fixed_m(orbits, [0.0, 7200.0])[:, -1]  # the last one is geostationary
    >>> np.round(np.rad2deg(np.arctan2(y_m, x_m)), 6).tolist()
    [140.0, 140.0]
    """
    phase_deg, rate_deg_per_s = phases_deg(orbits)
    angle_rad = np.deg2rad(phase_deg[..., None] + rate_deg_per_s[..., None] * np.asarray(time_s, dtype=float))
    return np.real(np.einsum("csp,spe->cse", earth_fixed_amplitudes_m(orbits), np.exp(1j * angle_rad)))


def phases_deg(orbits: CircularOrbits) -> tuple[FloatArray, FloatArray]:
    """Angles of the three rotations at the start, and their rates [deg/s], shape (satellite, 3)."""
    start = np.stack([orbits.node_longitude_deg, orbits.argument_of_latitude_deg], axis=-1)
    rate = np.stack(
        [orbits.node_longitude_rate_deg_per_s, orbits.argument_of_latitude_rate_deg_per_s], axis=-1
    )
    return start @ PHASES.T, rate @ PHASES.T


def earth_fixed_amplitudes_m(orbits: CircularOrbits) -> NDArray[np.complex128]:
    """Complex amplitudes of x, y and z in the three rotations, shape (3, satellite, 3).

    The position is the real part of the sum of amplitude times rotation.
    """
    inclination_rad = np.deg2rad(orbits.inclination_deg)
    forward_m = orbits.radius_m * np.cos(inclination_rad / 2) ** 2
    backward_m = orbits.radius_m * np.sin(inclination_rad / 2) ** 2
    upward_m = orbits.radius_m * np.sin(inclination_rad)
    none_m = np.zeros_like(forward_m)
    return np.array(
        [
            np.stack([forward_m, backward_m, none_m], axis=-1),
            np.stack([forward_m, backward_m, none_m], axis=-1) * -1j,  # Re(-i exp(ia)) = sin(a)
            np.stack([none_m, none_m, upward_m], axis=-1) * -1j,
        ]
    )
