"""Shares of satellite-time by the angular form, with any skyline, noise or mask."""

from collections.abc import Iterator

import numpy as np
from numpy.typing import NDArray

from siteassess.constants import REFERENCE_TEMPERATURE_K
from siteassess.decibels import to_db
from siteassess.horizon.skyline import Skyline
from siteassess.horizon.view import covers, outline_elevation_deg
from siteassess.link_budget.noise.antenna_noise import seen_temperature_k
from siteassess.link_budget.noise.seen_sky import seen_sky
from siteassess.link_budget.obstacles.way_in import skyline_loss_db
from siteassess.verdict.cures.angular import AngularForm
from siteassess.verdict.states import WEAKENED_FROM_DB

__all__ = ["noise_gain_db", "shares_above", "usable_shares", "usable_weights", "within_reach"]

FloatArray = NDArray[np.float64]
IndexArray = NDArray[np.int64]

# An edge reaches as far as the root of the wavelength: within a band by 1 % of some 2 degrees at most.
ONE_BAND = 1.03
REACH_ASIDE_DEG, REACH_ABOVE_DEG = 3, 1.0


def noise_gain_db(form: AngularForm, skyline: Skyline) -> dict[float, float]:
    """How much less noise [dB] there is with another skyline, by carrier."""
    gain_db = {}
    for carrier_hz, noise in form.noise.items():
        antenna_k = seen_temperature_k(
            noise.taken_in, seen_sky(skyline, carrier_hz), noise.sky_k, REFERENCE_TEMPERATURE_K
        )
        gain_db[carrier_hz] = float(to_db(noise.system_k / (antenna_k + noise.chain_k)))
    return gain_db


def usable_shares(
    form: AngularForm, skyline: Skyline, gain_db: dict[float, float] | None = None
) -> dict[str, float]:
    """Usable share of every signal with another skyline.

    Parameters
    ----------
    form : AngularForm
        The site.
    skyline : Skyline
        What stands round it now.
    gain_db : dict of float to float, or None
        From :func:`noise_gain_db`; None leaves the noise as it was.
    """
    return {
        signal: usable / total if total > 0.0 else 0.0
        for signal, (usable, total) in usable_weights(form, skyline, gain_db).items()
    }


def usable_weights(
    form: AngularForm, skyline: Skyline, gain_db: dict[float, float] | None = None
) -> dict[str, tuple[float, float]]:
    """Usable satellite-time of every signal above the mask, and all of it; see :func:`usable_shares`."""
    parts = _usable_parts(form, skyline, form.mask_deg, gain_db or {})
    return {
        one.signal.name: (float((form.weight[at] * usable).sum()), float(form.weight[at].sum()))
        for one, (at, usable) in zip(form.signals, parts, strict=True)
    }


def within_reach(form: AngularForm, skyline: Skyline) -> NDArray[np.bool_]:
    """Directions that obstacles of a skyline may touch as long as these come no higher, shape (direction,).

    They lie at most 1 degree above the highest direction that is hidden or loses anything within 3 degrees of
    azimuth. So much may the reach of an edge grow while it comes down.
    """
    counts = form.elevation_deg >= form.mask_deg
    open_share = np.zeros(len(form.weight))
    open_share[counts] = _open_share(form, skyline, np.flatnonzero(counts))
    touched = counts & (open_share < 1.0)
    for loss_db in _loss_db(form, skyline, open_share, counts).values():
        touched |= loss_db > 0.0
    degree = form.azimuth_deg.astype(np.int64) % 360
    highest_deg = np.full(360, -90.0)
    np.maximum.at(highest_deg, degree[touched], form.apparent_elevation_deg[touched])
    aside = range(-REACH_ASIDE_DEG, REACH_ASIDE_DEG + 1)
    ceiling_deg = np.max([np.roll(highest_deg, step) for step in aside], axis=0) + REACH_ABOVE_DEG
    return np.asarray(form.apparent_elevation_deg <= ceiling_deg[degree])


def shares_above(form: AngularForm, skyline: Skyline, mask_deg: FloatArray) -> dict[str, FloatArray]:
    """Usable share of every signal above each of several masks, shape (mask,); 0 above all satellites.

    Parameters
    ----------
    form, skyline : AngularForm, Skyline
        The site.
    mask_deg : array, shape (mask,)
        Ascending; each an edge between cells, which whole degrees are.
    """
    shares = {}
    for one, (at, usable) in zip(form.signals, _usable_parts(form, skyline, mask_deg[0], {}), strict=True):
        step = np.searchsorted(mask_deg, form.elevation_deg[at], side="right") - 1

        def above(weight: FloatArray, step: IndexArray = step) -> FloatArray:
            summed = np.bincount(step, weights=weight, minlength=len(mask_deg))
            return np.asarray(np.cumsum(summed[::-1])[::-1])

        total = above(form.weight[at])
        shares[one.signal.name] = above(form.weight[at] * usable) / np.maximum(total, np.finfo(float).tiny)
    return shares


def _usable_parts(
    form: AngularForm, skyline: Skyline, mask_deg: float, gain_db: dict[float, float]
) -> Iterator[tuple[IndexArray, FloatArray]]:
    """Of every signal: its directions above a mask, and the usable part of each."""
    counts = form.elevation_deg >= mask_deg
    open_share = np.zeros(len(form.weight))
    open_share[counts] = _open_share(form, skyline, np.flatnonzero(counts))
    loss_db = _loss_db(form, skyline, open_share, counts)
    for one in form.signals:
        own = counts[one.direction]
        at, carrier_hz = one.direction[own], one.signal.carrier_hz
        own_loss_db = loss_db[carrier_hz][at]
        spare_db = one.cn0_open_sky_dbhz[own] - own_loss_db - one.min_cn0_dbhz
        spare_db += gain_db.get(carrier_hz, 0.0)
        # Open and strong are both the upper part of a cell.
        usable = np.minimum(open_share[at], _upper_part(spare_db, one.half_range_db[own]))
        if not form.count_weakened:
            usable[own_loss_db >= WEAKENED_FROM_DB] = 0.0
        yield at, usable


def _loss_db(
    form: AngularForm, skyline: Skyline, open_share: FloatArray, counts: NDArray[np.bool_]
) -> dict[float, FloatArray]:
    """Loss at every direction, by carrier; 0 where no signal of that carrier comes from or all is hidden.

    It is taken half-way between the top of the cell and what hides its foot.
    """
    middle_deg = form.apparent_elevation_deg + form.half_height_deg * (1.0 - open_share)
    loss_db: dict[float, FloatArray] = {}
    for band_hz in _bands_hz(sorted(form.noise)):
        wanted = np.zeros(len(form.weight), dtype=np.bool_)
        for one in form.signals:
            if one.signal.carrier_hz in band_hz:
                wanted[one.direction] = True
        at = np.flatnonzero(wanted & counts & (open_share > 0.0))
        band_loss_db = np.zeros(len(form.weight))
        middle_hz = float(np.mean(band_hz))
        band_loss_db[at], _ = skyline_loss_db(skyline, form.azimuth_deg[at], middle_deg[at], middle_hz)
        loss_db |= dict.fromkeys(band_hz, band_loss_db)
    return loss_db


def _bands_hz(carriers_hz: list[float]) -> list[list[float]]:
    """Ascending carriers in bands so narrow that obstacles cost about the same in all of a band."""
    bands_hz: list[list[float]] = []
    for carrier_hz in carriers_hz:
        if bands_hz and carrier_hz <= ONE_BAND * bands_hz[-1][0]:
            bands_hz[-1].append(carrier_hz)
        else:
            bands_hz.append([carrier_hz])
    return bands_hz


def _open_share(form: AngularForm, skyline: Skyline, at: IndexArray) -> FloatArray:
    """Part of some directions that nothing solid hides."""
    azimuth_deg, elevation_deg = form.azimuth_deg[at], form.apparent_elevation_deg[at]
    above_deg = elevation_deg - outline_elevation_deg(skyline, azimuth_deg)
    open_share = _upper_part(above_deg, form.half_height_deg[at])
    for obstacle in skyline.obstacles:
        if obstacle.cover == "solid" and obstacle.hangs_free:
            open_share[covers(obstacle, azimuth_deg, elevation_deg)] = 0.0
    return open_share


def _upper_part(above: FloatArray, half: FloatArray) -> FloatArray:
    """Part of what spreads evenly from `above` - `half` to `above` + `half` that is at least 0."""
    return np.asarray(np.clip(0.5 + 0.5 * above / half, 0.0, 1.0))
