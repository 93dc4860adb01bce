"""How much of the sky is hidden, as solid angles."""

from dataclasses import dataclass

__all__ = ["SkyShares"]


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
        The largest stretch of hidden sky above the mask that is contiguous in azimuth, as a share of the hemisphere.
    largest_block_deg : tuple of float, or None
        Azimuths from and to of that stretch, clockwise (the second may pass 360); None when nothing is hidden.
    foliage_share_above_mask : float
        Sky above the mask that is open but for leaves, as a share of the sky above the mask.
    unsurveyed_share : float
        Sky above the mask in directions that nobody looked at and that nothing known hides, as a share of the sky
        above the mask.
    obstacle_blocked_share_above_mask : tuple of float
        One element an obstacle of the skyline: the sky above the mask where it is the highest that hides (or, for
        foliage, the highest foliage over open sky), as a share of the sky above the mask.
    sector_blocked_share : tuple of float
        Hidden share of the sky above the mask in each of the eight 45 degree sectors centred on N, NE, E, ... NW.
    peak_elevation_deg, peak_azimuth_deg : float
        Highest point of the outline of what is solid (0 and 0 when there is none above the horizon).
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
