"""The power that arrives: what an antenna of 0 dBic receives of the whole signal, term by term."""

from dataclasses import dataclass
from typing import Any, Literal

import numpy as np
from numpy.typing import ArrayLike, NDArray

from siteassess.constants import SPEED_OF_LIGHT_M_PER_S
from siteassess.decibels import to_db
from siteassess.link_budget.power.beam import LOWEST_ELEVATION_DEG, beam_gain_db
from siteassess.link_budget.power.gases import gas_loss_db
from siteassess.link_budget.power.signals import Signal
from siteassess.link_budget.power.spreading import free_space_loss_db, slant_range_m

__all__ = ["PowerTerms", "power_flux_density_dbw_per_m2", "received_power"]

FloatArray = NDArray[np.float64]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class PowerTerms:
    """Terms of the received power, all of one shape: eirp - spreading - atmosphere = received.

    Attributes
    ----------
    eirp_dbw : array
        Power that the satellite radiates toward the site, as of an isotropic radiator.
    spreading_loss_db : array
        Free-space loss.
    atmosphere_loss_db : array
        Loss in the gases of the air, or what the interface document allows for the atmosphere.
    received_power_dbw : array
        Whole signal at a 0 dBic antenna, as interface documents count it.
    """

    eirp_dbw: FloatArray
    spreading_loss_db: FloatArray
    atmosphere_loss_db: FloatArray
    received_power_dbw: FloatArray


def received_power(
    signal: Signal,
    orbit_class: str,
    elevation_deg: ArrayLike,
    radius_m: ArrayLike,
    *,
    power: Literal["guaranteed", "typical"] = "guaranteed",
) -> PowerTerms:
    """Power of a whole signal at a 0 dBic antenna under an open sky.

    A beam of known shape follows its published curve. Elsewhere the guaranteed level is held from 5 degrees
    elevation up: the cautious reading, since the document promises no more. Below 5 degrees the power
    radiated at 5 degrees holds, while spreading and gases go on.

    Parameters
    ----------
    signal : Signal
        Row of the signal table.
    orbit_class : str
        "MEO", "IGSO" or "GEO"; one that sends the signal.
    elevation_deg, radius_m : array
        Geometric elevation [deg] and distance of the satellite from the centre of the Earth [m]; the two
        shapes broadcast.
    power : str
        "guaranteed", or "typical" with the excess of the signal table.

    Returns
    -------
    PowerTerms
        Arrays of the broadcast shape; NaN where an argument is.

    Raises
    ------
    KeyError
        If satellites of this orbit class do not send the signal.

    References
    ----------
    [IS-GPS-200] IS-GPS-200F, 3.3.1.6 and 6.3.1; the documents of the other systems stand in the signal table.

    Examples
    --------
    >>> from siteassess.link_budget.power.signals import read_signals
    >>> terms = received_power(read_signals()["GPS L1 C/A"], "MEO", 40.0, 26_559.7e3)
    >>> round(float(terms.received_power_dbw), 2)
    -156.48
    """
    elevation, radius = np.broadcast_arrays(np.asarray(elevation_deg, float), np.asarray(radius_m, float))
    level_dbw = signal.guaranteed_dbw[orbit_class] + (signal.typical_excess_db if power == "typical" else 0.0)
    eirp_dbw = level_dbw + _radiated_excess_db(signal, elevation, radius)
    spreading_loss_db = free_space_loss_db(slant_range_m(radius, elevation), signal.carrier_hz)
    atmosphere_loss_db = _atmosphere_loss_db(signal, elevation)
    return PowerTerms(
        eirp_dbw=eirp_dbw,
        spreading_loss_db=spreading_loss_db,
        atmosphere_loss_db=atmosphere_loss_db,
        received_power_dbw=eirp_dbw - spreading_loss_db - atmosphere_loss_db,
    )


def power_flux_density_dbw_per_m2(power_dbw: ArrayLike, carrier_hz: ArrayLike) -> Any:
    """Power through a square metre [dBW/m2] of a wave that a 0 dBic antenna receives with `power_dbw`.

    Examples
    --------
    >>> round(float(power_flux_density_dbw_per_m2(-158.5, 1575.42e6)), 2)
    -133.1
    """
    wavelength_m = SPEED_OF_LIGHT_M_PER_S / np.asarray(carrier_hz)
    effective_area_m2 = wavelength_m**2 / (4.0 * np.pi)  # of a 0 dBic antenna
    return np.asarray(power_dbw) - to_db(effective_area_m2)


def _radiated_excess_db(signal: Signal, elevation_deg: FloatArray, radius_m: FloatArray) -> Any:
    """Power that the satellite radiates toward the site over the power guaranteed at the ground [dB]."""
    if signal.beam == "flat":  # the beam is taken to make up for the path, down to 5 degrees
        made_up_deg, beam_db = np.maximum(elevation_deg, LOWEST_ELEVATION_DEG), np.zeros(())
    else:
        made_up_deg, beam_db = np.asarray(LOWEST_ELEVATION_DEG), beam_gain_db(signal.beam, elevation_deg)
    spreading_loss_db = free_space_loss_db(slant_range_m(radius_m, made_up_deg), signal.carrier_hz)
    return beam_db + spreading_loss_db + _atmosphere_loss_db(signal, made_up_deg)


def _atmosphere_loss_db(signal: Signal, elevation_deg: ArrayLike) -> Any:
    """Gas loss, or the document's own allowance, which then grows below 5 degrees as the gas loss does."""
    gas_db = gas_loss_db(signal.carrier_hz, elevation_deg)
    if signal.atmosphere_included_db is None:
        return gas_db
    growth_db = gas_db - gas_loss_db(signal.carrier_hz, LOWEST_ELEVATION_DEG)
    return signal.atmosphere_included_db + np.maximum(growth_db, 0.0)
