"""The shape of the satellites' transmit beams, as the interface documents let it be seen at the ground."""

from typing import Any

import numpy as np
from numpy.typing import ArrayLike

from siteassess.decibels import to_db
from siteassess.link_budget.power.gases import gas_loss_db
from siteassess.link_budget.power.spreading import free_space_loss_db, slant_range_m
from siteassess.tables import packaged_columns

__all__ = ["LOWEST_ELEVATION_DEG", "beam_gain_db", "even_cone_gain_dbi"]

LOWEST_ELEVATION_DEG = 5.0  # interface documents guarantee nothing below; the beam is held from here down

GPS_RADIUS_M = 26_559.7e3  # SPS Performance Standard 2001, Table 3-1
GPS_CARRIER_HZ = {"gps_l1_ca_dbw": 1575.42e6, "gps_l1_p_dbw": 1575.42e6, "gps_l2_p_dbw": 1227.60e6}
# Minimum received power that [IS-GPS-200] Table 3-Va guarantees for the satellites of Figure 6-1.
GPS_MINIMUM_DBW = {"gps_l1_ca_dbw": -158.5, "gps_l1_p_dbw": -161.5, "gps_l2_p_dbw": -164.5}


def beam_gain_db(beam: str, elevation_deg: ArrayLike) -> Any:
    """Power radiated toward a site, over what the guaranteed minimum needs at 5 degrees elevation [dB].

    The published curve of received power against elevation, less spreading and less gas loss. The curve is
    linear between the points of the table; below 5 degrees the value there holds.

    Parameters
    ----------
    beam : str
        Column of the beam table.
    elevation_deg : array
        Geometric elevation [deg].

    References
    ----------
    [IS-GPS-200] IS-GPS-200F, Figure 6-1 and Table 3-Va.

    Examples
    --------
    >>> round(float(beam_gain_db("gps_l1_ca_dbw", 90.0) - beam_gain_db("gps_l1_ca_dbw", 5.0)), 1)
    -2.3
    """
    table = packaged_columns("link_budget/power/beam.csv")
    known = np.isfinite(table[beam])
    held_deg = np.maximum(elevation_deg, LOWEST_ELEVATION_DEG)
    curve_db = np.interp(held_deg, table["elevation_deg"][known], table[beam][known]) - GPS_MINIMUM_DBW[beam]
    carrier_hz = GPS_CARRIER_HZ[beam]
    return curve_db + _path_loss_db(carrier_hz, held_deg) - _path_loss_db(carrier_hz, LOWEST_ELEVATION_DEG)


def even_cone_gain_dbi(half_angle_deg: ArrayLike) -> Any:
    """Gain [dBi] of a lossless beam that fills a cone evenly: the sphere's solid angle over that of the cone.

    Examples
    --------
    >>> round(float(even_cone_gain_dbi(21.3)), 1)
    14.7
    """
    return to_db(2.0 / (1.0 - np.cos(np.deg2rad(half_angle_deg))))


def _path_loss_db(carrier_hz: float, elevation_deg: ArrayLike) -> Any:
    spreading_loss_db = free_space_loss_db(slant_range_m(GPS_RADIUS_M, elevation_deg), carrier_hz)
    return spreading_loss_db + gas_loss_db(carrier_hz, elevation_deg)
