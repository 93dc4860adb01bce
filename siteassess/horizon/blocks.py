"""Blocks: stretches of sky hidden above the mask that no open azimuth interrupts."""

import numpy as np

from siteassess.horizon.curves import BoolArray, FloatArray, edge_elevation, level_azimuth
from siteassess.horizon.regions import Region

__all__ = ["largest_block"]

TOUCHING_DEG = 1e-6  # obstacles that leave less open between them are one block


def largest_block(
    region: Region, area_sr: FloatArray, mask_deg: float
) -> tuple[float, tuple[float, float] | None]:
    """Share of the hemisphere and azimuths of the largest stretch hidden above the mask without a gap."""
    first_deg, last_deg, above = _above_mask(region, mask_deg)
    upper = above & (region.sign > 0.0)
    start_deg, end_deg = first_deg[upper], last_deg[upper]
    if not len(start_deg):
        return 0.0, None
    order = np.argsort(start_deg, kind="stable")
    reach_deg = np.maximum.accumulate(end_deg[order])
    new = np.append(True, start_deg[order][1:] > reach_deg[:-1] + TOUCHING_DEG)
    block_start = start_deg[order][new]
    block_end = reach_deg[np.append(np.flatnonzero(new)[1:] - 1, len(reach_deg) - 1)]
    # A piece that nowhere passes the mask has no area above it, in whatever block it is counted.
    block = np.clip(np.searchsorted(block_start, 0.5 * (first_deg + last_deg), side="right") - 1, 0, None)
    block_sr = np.bincount(block, weights=area_sr, minlength=len(block_start))
    if len(block_start) > 1 and block_start[0] + 360.0 <= block_end[-1] + TOUCHING_DEG:
        block_sr[-1] += block_sr[0]
        block_end[-1] = block_end[0] + 360.0
        block_sr, block_start, block_end = block_sr[1:], block_start[1:], block_end[1:]
    largest = int(np.argmax(block_sr))
    share = float(block_sr[largest] / (2.0 * np.pi))
    return share, (float(block_start[largest]), float(block_end[largest]))


def _above_mask(region: Region, mask_deg: float) -> tuple[FloatArray, FloatArray, BoolArray]:
    """Azimuths from and to of the part of each edge that lies above the mask, and whether there is one."""
    curve, start_deg, end_deg = region.curve, region.start_deg, region.end_deg
    first_deg = edge_elevation(region.curves, curve, start_deg)
    last_deg = edge_elevation(region.curves, curve, end_deg)
    level_deg = np.clip(mask_deg, np.minimum(first_deg, last_deg), np.maximum(first_deg, last_deg))
    pass_deg = level_azimuth(region.curves, curve, start_deg, end_deg, level_deg)
    above = np.maximum(first_deg, last_deg) > mask_deg
    start_deg = np.where(above & (first_deg < mask_deg), pass_deg, start_deg)
    end_deg = np.where(above & (last_deg < mask_deg), pass_deg, end_deg)
    return start_deg, end_deg, above
