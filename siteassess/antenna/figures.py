"""The few numbers that tell antennas apart: directivity, beam width, front-to-back ratio, purity."""

from dataclasses import dataclass

import numpy as np

from siteassess.antenna.energy import MeanGain, effective_area_m2, mean_gain
from siteassess.antenna.gain import at_carrier_dbic, cross_gain_dbic, gain_dbic
from siteassess.antenna.pattern import FloatArray, GainPattern
from siteassess.antenna.polarisation import axial_ratio_db
from siteassess.decibels import mean_db, to_db, to_ratio

__all__ = ["FIGURE_ELEVATIONS_DEG", "AntennaFigures", "GainAt", "antenna_figures", "half_power_width_deg"]

FIGURE_ELEVATIONS_DEG = (5.0, 10.0, 30.0, 90.0)
HALF_POWER_DB = 10.0 * float(np.log10(2.0))
ROUND_DEG = np.arange(0.0, 360.0)


@dataclass(frozen=True, slots=True, kw_only=True)
class GainAt:
    """Gain at one elevation from the plane of the antenna, round all azimuths.

    Attributes
    ----------
    elevation_deg : float
        Elevation.
    mean_dbic, lowest_dbic, highest_dbic : float
        Co-polar gain, the mean as ratios.
    axial_ratio_db : float or None
        Of the mean co- and cross-polar gains; None when the cross-polar gain is not known.
    polarisation_loss_db : float or None
        What part of the power at this elevation is cross-polar, as a loss of the co-polar gain.
    """

    elevation_deg: float
    mean_dbic: float
    lowest_dbic: float
    highest_dbic: float
    axial_ratio_db: float | None
    polarisation_loss_db: float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class AntennaFigures:
    """What a data sheet would say of a pattern at one carrier.

    Attributes
    ----------
    carrier_hz : float
        Carrier; NaN for a pattern that holds at every carrier.
    efficiency : MeanGain
        Mean gain over the sphere, co- and cross-polar.
    peak_gain_dbic, peak_azimuth_deg, peak_elevation_deg : float
        Highest co-polar gain, and where.
    directivity_dbic : float
        Highest co-polar gain over the mean of co- plus cross-polar gain.
    half_power_width_deg, narrowest_deg, widest_deg : float or None
        Width of the main beam through the axis, its mean over the planes and the extremes; None when no
        plane has one.
    front_to_back_db : float
        Highest gain over the gain in the opposite direction.
    effective_area_m2 : float or None
        Toward the highest gain; None without a carrier.
    gains : tuple of GainAt
        At `FIGURE_ELEVATIONS_DEG`.

    References
    ----------
    [IEEE 145] Definitions of terms for antennas.
    """

    carrier_hz: float
    efficiency: MeanGain
    peak_gain_dbic: float
    peak_azimuth_deg: float
    peak_elevation_deg: float
    directivity_dbic: float
    half_power_width_deg: float | None
    narrowest_deg: float | None
    widest_deg: float | None
    front_to_back_db: float
    effective_area_m2: float | None
    gains: tuple[GainAt, ...]


def antenna_figures(pattern: GainPattern, carrier_hz: float) -> AntennaFigures:
    """Figures of a pattern at one carrier; NaN stands for any, when the pattern holds at every carrier.

    Examples
    --------
    >>> from siteassess.antenna.builtin import builtin_pattern
    >>> figures = antenna_figures(builtin_pattern("choke-ring"), 1575.42e6)
    >>> round(figures.directivity_dbic, 1), round(figures.half_power_width_deg)
    (7.8, 76)
    """
    levels = at_carrier_dbic(pattern, pattern.gain_dbic, carrier_hz)
    row = int(np.flatnonzero(levels.max(axis=0) == levels.max())[-1])  # of equal ones, nearest the zenith
    column = int(np.argmax(levels[:, row]))
    peak_dbic = float(levels[column, row])
    azimuth_deg, elevation_deg = float(pattern.azimuth_deg[column]), float(pattern.elevation_deg[row])
    opposite_dbic = float(gain_dbic(pattern, azimuth_deg + 180.0, -elevation_deg, carrier_hz))
    efficiency = mean_gain(pattern, carrier_hz)
    widths_deg = half_power_width_deg(pattern, carrier_hz)
    known = widths_deg[~np.isnan(widths_deg)]
    return AntennaFigures(
        carrier_hz=carrier_hz,
        efficiency=efficiency,
        peak_gain_dbic=peak_dbic,
        peak_azimuth_deg=azimuth_deg,
        peak_elevation_deg=elevation_deg,
        directivity_dbic=peak_dbic - float(to_db(efficiency.total)),
        half_power_width_deg=float(known.mean()) if known.size else None,
        narrowest_deg=float(known.min()) if known.size else None,
        widest_deg=float(known.max()) if known.size else None,
        front_to_back_db=peak_dbic - opposite_dbic,
        effective_area_m2=None if np.isnan(carrier_hz) else float(effective_area_m2(peak_dbic, carrier_hz)),
        gains=tuple(_gain_at(pattern, at_deg, carrier_hz) for at_deg in FIGURE_ELEVATIONS_DEG),
    )


def half_power_width_deg(pattern: GainPattern, carrier_hz: float) -> FloatArray:
    """Width of the main beam in planes through the axis.

    Each plane counts from where its gain falls to half of the pattern's highest on one side of the zenith to
    where it does on the other.

    Returns
    -------
    array, shape (plane,)
        Widths [deg], one for each degree of azimuth; NaN for planes that stay above half of the highest gain,
        or below.
    """
    levels = at_carrier_dbic(pattern, pattern.gain_dbic, carrier_hz)
    half_dbic = float(levels.max()) - HALF_POWER_DB
    from_zenith_deg = np.array([_fall_deg(pattern.elevation_deg, cut, half_dbic) for cut in levels])
    sides_deg = np.interp([ROUND_DEG, (ROUND_DEG + 180.0) % 360.0], pattern.azimuth_deg, from_zenith_deg)
    return np.asarray(sides_deg.sum(axis=0))


def _fall_deg(elevation_deg: FloatArray, cut_dbic: FloatArray, half_dbic: float) -> float:
    """Angle from the zenith at which a cut leaves its main beam; NaN where it does not."""
    peak = int(np.argmax(cut_dbic))  # from there downward: a dip at the zenith is inside the beam
    below = np.flatnonzero(cut_dbic[:peak] < half_dbic)
    if cut_dbic[peak] < half_dbic or not below.size:
        return np.nan
    low = int(below[-1])
    share = (half_dbic - cut_dbic[low]) / (cut_dbic[low + 1] - cut_dbic[low])
    return float(90.0 - elevation_deg[low] - share * (elevation_deg[low + 1] - elevation_deg[low]))


def _gain_at(pattern: GainPattern, elevation_deg: float, carrier_hz: float) -> GainAt:
    co_dbic = gain_dbic(pattern, ROUND_DEG, elevation_deg, carrier_hz)
    cross_dbic = cross_gain_dbic(pattern, ROUND_DEG, elevation_deg, carrier_hz)
    cross_level_db = float(mean_db(cross_dbic) - mean_db(co_dbic))
    known = pattern.cross_gain_dbic is not None
    return GainAt(
        elevation_deg=elevation_deg,
        mean_dbic=float(mean_db(co_dbic)),
        lowest_dbic=float(co_dbic.min()),
        highest_dbic=float(co_dbic.max()),
        axial_ratio_db=float(axial_ratio_db(cross_level_db)) if known else None,
        polarisation_loss_db=float(to_db(1.0 + to_ratio(cross_level_db))) if known else None,
    )
