"""How much of the sky is hidden, as solid angles in closed form."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from siteassess.angles import wrap_azimuth_deg
from siteassess.horizon.blocks import largest_block
from siteassess.horizon.curves import FloatArray, capped_area, edge_elevation
from siteassess.horizon.regions import Region, foliage_region, solid_region
from siteassess.horizon.skyline import Skyline

__all__ = ["SkyShares", "covered_share", "sky_shares"]


@dataclass(frozen=True, slots=True, kw_only=True)
class SkyShares:
    """Shares of solid angle that the skyline takes.

    Attributes
    ----------
    blocked_share_of_hemisphere : float
        Sky hidden by solid obstacles, from 0 degrees up, as a share of the hemisphere.
    blocked_share_above_mask : float
        Sky hidden by solid obstacles above the mask, as a share of the sky above the mask.
    largest_block_share : float
        The largest stretch of hidden sky above the mask that is contiguous in azimuth, as a share of the
        hemisphere.
    largest_block_deg : tuple of float, or None
        Azimuths from and to of that stretch, clockwise (the second may pass 360); None when nothing is
        hidden.
    foliage_share_above_mask : float
        Sky above the mask that is open but for leaves, as a share of the sky above the mask.
    unsurveyed_share : float
        Sky above the mask in directions that nobody looked at and that nothing known hides, as a share of the
        sky above the mask.
    obstacle_blocked_share_above_mask : tuple of float
        One element an obstacle of the skyline: the sky above the mask where it is the highest that hides (or,
        for foliage, the highest foliage over open sky), as a share of the sky above the mask.
    sector_blocked_share : tuple of float
        Hidden share of the sky above the mask in each of the eight 45 degree sectors round N, NE, ... NW.
    peak_elevation_deg, peak_azimuth_deg : float
        Highest point of all solid edges, hanging ones too (0 and 0 when there is none above the horizon).
    """

    blocked_share_of_hemisphere: float
    blocked_share_above_mask: float
    largest_block_share: float
    largest_block_deg: tuple[float, float] | None
    foliage_share_above_mask: float
    unsurveyed_share: float
    obstacle_blocked_share_above_mask: tuple[float, ...]
    sector_blocked_share: tuple[float, ...]
    peak_elevation_deg: float
    peak_azimuth_deg: float


def sky_shares(skyline: Skyline, mask_deg: float) -> SkyShares:
    """How much of the sky the skyline takes, in closed form.

    Parameters
    ----------
    skyline : Skyline
        What was surveyed.
    mask_deg : float
        Elevation mask, 0 <= mask < 90 [deg].

    Returns
    -------
    SkyShares
        The blocked shares of the solid obstacles add up to the blocked share of them all.

    References
    ----------
    The solid angle below an edge el(az) is the integral of sin(el) over azimuth; the zone of the sphere from
    the horizon up to a level edge takes sin(el) of the hemisphere.
    """
    solid, leaves = solid_region(skyline), foliage_region(skyline)
    solid_sr, leaves_sr = _area_sr(solid, mask_deg, 90.0), _area_sr(leaves, mask_deg, 90.0)
    above_mask_sr = 2.0 * np.pi * (1.0 - np.sin(np.deg2rad(mask_deg)))
    taken_sr = np.bincount(
        np.concatenate([solid.obstacle, leaves.obstacle]),
        weights=np.concatenate([solid_sr, leaves_sr]),
        minlength=len(skyline.obstacles),
    )
    block_share, block_deg = largest_block(solid, solid_sr, mask_deg)
    peak_elevation_deg, peak_azimuth_deg = _peak(solid)
    return SkyShares(
        blocked_share_of_hemisphere=_share(_area_sr(solid, 0.0, 90.0).sum() / (2.0 * np.pi)),
        blocked_share_above_mask=_share(solid_sr.sum() / above_mask_sr),
        largest_block_share=block_share,
        largest_block_deg=block_deg,
        foliage_share_above_mask=_share(leaves_sr.sum() / above_mask_sr),
        unsurveyed_share=_share(_unsurveyed_sr(skyline, solid, mask_deg) / above_mask_sr),
        obstacle_blocked_share_above_mask=tuple(_share(area) for area in taken_sr / above_mask_sr),
        sector_blocked_share=tuple(
            _share(area) for area in _sectors_sr(solid, mask_deg) / (above_mask_sr / 8)
        ),
        peak_elevation_deg=peak_elevation_deg,
        peak_azimuth_deg=peak_azimuth_deg,
    )


def covered_share(
    skyline: Skyline, azimuth_edges_deg: ArrayLike, elevation_edges_deg: ArrayLike
) -> FloatArray:
    """Fraction of each cell of the sky that solid obstacles hide.

    Parameters
    ----------
    skyline : Skyline
        What was surveyed.
    azimuth_edges_deg : array_like, shape (a + 1,)
        Ascending, within 0..360.
    elevation_edges_deg : array_like, shape (e + 1,)
        Ascending, within -90..90.

    Returns
    -------
    array, shape (a, e)
        Share of the cell's solid angle.
    """
    azimuth_edges_deg = np.asarray(azimuth_edges_deg, dtype=float)
    elevation_edges_deg = np.asarray(elevation_edges_deg, dtype=float)
    region = _cut(solid_region(skyline), azimuth_edges_deg)
    cells = len(azimuth_edges_deg) - 1
    cell = np.searchsorted(azimuth_edges_deg, _middle_deg(region), side="right") - 1
    inside = (cell >= 0) & (cell < cells)
    below_sr = np.stack(
        [
            np.bincount(
                cell[inside], weights=(region.sign * _capped_sr(region, level))[inside], minlength=cells
            )
            for level in elevation_edges_deg.tolist()
        ],
        axis=1,
    )
    width_rad = np.deg2rad(np.diff(azimuth_edges_deg))
    height = np.diff(np.sin(np.deg2rad(elevation_edges_deg)))
    share: FloatArray = np.clip(np.diff(below_sr, axis=1) / (width_rad[:, None] * height), 0.0, 1.0)
    return share


def _share(value: float) -> float:
    """A share without the last digits of rounding that would put it outside 0..1."""
    return min(max(float(value), 0.0), 1.0)


def _middle_deg(region: Region) -> FloatArray:
    return 0.5 * (region.start_deg + region.end_deg)


def _capped_sr(region: Region, cap_deg: float) -> FloatArray:
    return capped_area(region.curves, region.curve, region.start_deg, region.end_deg, cap_deg)


def _area_sr(region: Region, low_deg: float, high_deg: float) -> FloatArray:
    """Signed solid angle of each piece between two levels."""
    return region.sign * (_capped_sr(region, high_deg) - _capped_sr(region, low_deg))


def _cut(region: Region, azimuth_deg: FloatArray) -> Region:
    """The same region, its pieces cut at the given ascending azimuths."""
    first = np.searchsorted(azimuth_deg, region.start_deg, side="right")
    cuts = np.maximum(np.searchsorted(azimuth_deg, region.end_deg, side="left") - first, 0)
    piece = np.repeat(np.arange(len(cuts)), cuts + 1)
    number = np.arange(len(piece)) - np.repeat(np.cumsum(cuts + 1) - cuts - 1, cuts + 1)
    edges_deg = np.append(azimuth_deg, 360.0)
    index = first[piece] + number
    start_deg = np.where(number == 0, region.start_deg[piece], edges_deg[np.maximum(index - 1, 0)])
    end_deg = np.where(
        number == cuts[piece], region.end_deg[piece], edges_deg[np.minimum(index, len(azimuth_deg))]
    )
    return Region(
        curves=region.curves,
        start_deg=start_deg,
        end_deg=end_deg,
        curve=region.curve[piece],
        sign=region.sign[piece],
        obstacle=region.obstacle[piece],
    )


def _sectors_sr(region: Region, mask_deg: float) -> FloatArray:
    """Hidden sky above the mask in the eight sectors, north first."""
    cut = _cut(region, np.linspace(22.5, 337.5, 8))
    sector = np.floor(_middle_deg(cut) / 45.0 + 0.5).astype(np.int64) % 8
    return np.bincount(sector, weights=_area_sr(cut, mask_deg, 90.0), minlength=8).astype(np.float64)


def _unsurveyed_sr(skyline: Skyline, region: Region, mask_deg: float) -> float:
    """Sky above the mask in the gaps of the survey, less what known obstacles hide there."""
    gaps_deg = skyline.unsurveyed_deg.reshape(-1, 2)
    width_rad = np.deg2rad(gaps_deg[:, 1] - gaps_deg[:, 0]).sum()
    cut = _cut(region, gaps_deg.ravel())
    in_gap = np.searchsorted(gaps_deg.ravel(), _middle_deg(cut), side="right") % 2 == 1
    hidden_sr = _area_sr(cut, mask_deg, 90.0)[in_gap].sum()
    return float(width_rad * (1.0 - np.sin(np.deg2rad(mask_deg))) - hidden_sr)


def _peak(region: Region) -> tuple[float, float]:
    """Elevation and azimuth of the highest solid edge; 0 and 0 where none is above the horizon."""
    azimuth_deg = np.concatenate([region.start_deg, region.end_deg])
    curve = np.concatenate([region.curve, region.curve])
    elevation_deg = edge_elevation(region.curves, curve, azimuth_deg)
    if not len(elevation_deg) or elevation_deg.max() <= 0.0:
        return 0.0, 0.0
    highest = int(np.argmax(elevation_deg))
    return float(elevation_deg[highest]), float(wrap_azimuth_deg(azimuth_deg[highest]))
