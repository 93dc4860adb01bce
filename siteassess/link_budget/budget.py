"""The link budget of every signal of every satellite at every epoch above the mask."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from siteassess.link_budget.chain.receive_chain import ChainNoise
from siteassess.link_budget.power.signals import Signal

__all__ = ["BudgetLines", "LinkBudget", "SignalBudget", "SkySamples"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]
BoolArray = NDArray[np.bool_]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SkySamples:
    """All satellite positions above the elevation mask, flattened; every array has shape (sample,).

    Attributes
    ----------
    satellite, epoch : integer array
        Indices into `SkyTracks`.
    azimuth_deg, elevation_deg, apparent_elevation_deg : array
        Direction, geometric elevation and elevation after refraction.
    counts_for_shares : boolean array
        Whether the epoch lies in the satellite's own ground-track cycles.
    hiding_obstacle : integer array
        Index in `Skyline.obstacles` of the highest solid obstacle that hides the direction; -1 where it is
        open.
    unsurveyed : boolean array
        Whether nobody looked at this direction and nothing known hides it.
    """

    satellite: IndexArray
    epoch: IndexArray
    azimuth_deg: FloatArray
    elevation_deg: FloatArray
    apparent_elevation_deg: FloatArray
    counts_for_shares: BoolArray
    hiding_obstacle: IndexArray
    unsurveyed: BoolArray

    @property
    def hidden(self) -> BoolArray:
        """Whether a solid obstacle stands in the direct line, shape (sample,)."""
        return self.hiding_obstacle >= 0


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class BudgetLines:
    """The budget of one signal and orbit class under an open sky, line by line against elevation.

    All arrays have shape (elevation,). The antenna's gain is averaged over azimuth as ratios.

    Attributes
    ----------
    orbit_class : str
        "MEO", "IGSO" or "GEO".
    elevation_deg : array
        Geometric elevation.
    eirp_dbw : array
        Power that the satellite radiates toward the site, as of an isotropic radiator.
    spreading_loss_db, atmosphere_loss_db : array
        Free-space loss, and loss in the gases of the air or what the interface document allows for it.
    received_power_dbw : array
        Whole signal at a 0 dBic antenna: the three lines above together.
    antenna_gain_dbic : array
        Co-polar gain of the antenna as mounted.
    cn0_open_sky_dbhz : array
        C/N0 of the tracked component.
    """

    orbit_class: str
    elevation_deg: FloatArray
    eirp_dbw: FloatArray
    spreading_loss_db: FloatArray
    atmosphere_loss_db: FloatArray
    received_power_dbw: FloatArray
    antenna_gain_dbic: FloatArray
    cn0_open_sky_dbhz: FloatArray


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SignalBudget:
    """One signal, satellite by satellite and epoch by epoch.

    Attributes
    ----------
    signal : Signal
        Row of the signal table.
    noise : ChainNoise
        Antenna, chain and receiver at the signal's carrier.
    min_cn0_dbhz : float
        What the user asks of this signal.
    sample : integer array, shape (n,)
        Indices into `SkySamples` of the satellites that send this signal, ascending.
    received_power_dbw, antenna_gain_dbic, obstacle_loss_db, cn0_dbhz, cn0_open_sky_dbhz : array, shape (n,)
        Terms of the budget; `cn0_dbhz` = `cn0_open_sky_dbhz` - `obstacle_loss_db`. The loss counts leaves and
        diffraction, and holds no meaning where the sample is hidden.
    costly_obstacle : integer array, shape (n,)
        Index of the obstacle with the largest loss; -1 where none costs anything.
    lines : tuple of BudgetLines
        One entry an orbit class that sends the signal.
    """

    signal: Signal
    noise: ChainNoise
    min_cn0_dbhz: float
    sample: IndexArray
    received_power_dbw: FloatArray
    antenna_gain_dbic: FloatArray
    obstacle_loss_db: FloatArray
    cn0_dbhz: FloatArray
    cn0_open_sky_dbhz: FloatArray
    costly_obstacle: IndexArray
    lines: tuple[BudgetLines, ...]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class LinkBudget:
    """Everything that the verdict needs to know about signal strength.

    Attributes
    ----------
    samples : SkySamples
        Every satellite position above the mask.
    signals : tuple of SignalBudget
        In the order of the site file.
    """

    samples: SkySamples
    signals: tuple[SignalBudget, ...]
