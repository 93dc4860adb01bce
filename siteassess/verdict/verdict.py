"""What the assessment says: findings, shares and the one word at the top of the report."""

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Literal

from siteassess.horizon.shares import SkyShares
from siteassess.verdict.time.timeline import Timeline

__all__ = [
    "Finding",
    "ObstacleCost",
    "SatelliteShare",
    "SectorShare",
    "SignalShares",
    "UsableCount",
    "Verdict",
]


@dataclass(frozen=True, slots=True, kw_only=True)
class Finding:
    """One criterion held against the site.

    Attributes
    ----------
    criterion : str
        Its key in the table `[require]` of the site file.
    signal : str or None
        The signal it is about, where it is about one.
    value, limit : float
        What the site reaches and what is asked, in `unit` ("share", "deg", "m", "s", "satellites", "dB",
        "dB/m", "V").
    required : bool
        False: advice, which never fails a site.
    outcome : str
        "met", "missed" or "unproven" (it would be met, but part of the sky was not surveyed).
    source : str
        Who asks for it: "site file", or the published source of an advice.
    reason : str
        One sentence for the reader of the report.
    """

    criterion: str
    signal: str | None
    value: float
    limit: float
    unit: str
    required: bool
    outcome: Literal["met", "missed", "unproven"]
    source: str
    reason: str


@dataclass(frozen=True, slots=True, kw_only=True)
class SignalShares:
    """How one signal fares over all satellites that send it.

    Shares are of open-sky satellite-time above the mask; `usable_share_of_open_sky` is relative to what
    antenna and chain alone would leave usable, and None when that is nothing. C/N0 figures run over samples
    that are not hidden and are None where there are none.
    """

    signal: str
    usable_share: float
    open_sky_usable_share: float
    usable_share_of_open_sky: float | None
    weakened_share: float
    lost_share: float
    hidden_share: float
    samples_share: float
    cn0_p05_dbhz: float | None
    cn0_median_dbhz: float | None
    cn0_p95_dbhz: float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class SatelliteShare:
    """How one signal of one satellite fares; None where the satellite is never seen."""

    satellite: str
    system: str
    orbit_class: str
    signal: str
    hours_above_mask_per_day: float
    usable_share: float | None
    received_power_min_dbw: float | None
    received_power_max_dbw: float | None
    cn0_min_dbhz: float | None
    cn0_median_dbhz: float | None
    cn0_max_dbhz: float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class ObstacleCost:
    """What one obstacle costs.

    `azimuth_from_deg` to `azimuth_to_deg` runs clockwise (and may pass 360); `peak_elevation_deg` stands at
    `peak_azimuth_deg`. `lost_satellite_time_share` maps each signal to the share of its open-sky
    satellite-time that is usable without obstacles and is not usable because of this one.
    `returned_satellite_time_share` maps it to what becomes usable when this one alone goes; None where that
    was not asked for.

    For leaves, `foliage_loss_db` maps each model to the loss on L1 at the highest point; else it is None. For
    thin things, `behind_loss_db` is the loss on L1 straight behind, and `grazing_hours_per_day` counts
    satellite-hours above the mask within the first Fresnel zone; else they are None.
    """

    name: str
    cover: str
    azimuth_from_deg: float
    azimuth_to_deg: float
    peak_azimuth_deg: float
    peak_elevation_deg: float
    blocked_share_above_mask: float
    blocked_satellite_time_share: float
    lost_satellite_time_share: Mapping[str, float]
    foliage_loss_db: Mapping[str, float] | None = None
    behind_loss_db: float | None = None
    grazing_hours_per_day: float | None = None
    returned_satellite_time_share: Mapping[str, float] | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class SectorShare:
    """One 45 degree sector of azimuth, centred on a compass point; all signals pooled.

    `satellite_time_share` is the sector's part of all open-sky satellite-time above the mask,
    `lost_satellite_time_share` the part of all that time which obstacles take away in this sector,
    `blocked_share` the hidden part of the sector's own sky above the mask (solid angle).
    """

    name: str
    azimuth_from_deg: float
    azimuth_to_deg: float
    satellite_time_share: float
    lost_satellite_time_share: float
    blocked_share: float


@dataclass(frozen=True, slots=True, kw_only=True)
class UsableCount:
    """Satellites of one system, or of all, usable at once over the window of the joint counts.

    Those are counted that send at least one of the site's signals; one is usable when at least one of these
    signals is.
    """

    system: str
    above_mask_mean: float
    usable_mean: float
    usable_min: int
    usable_p05: int


@dataclass(frozen=True, slots=True, kw_only=True)
class Verdict:
    """The result of the assessment.

    Attributes
    ----------
    outcome : str
        "pass", "fail" or "unproven".
    findings : tuple of Finding
        The worst first: required before advice, missed before unproven before met, then by shortfall relative
        to the limit.
    sky : SkyShares
        Solid angles.
    blocked_satellite_time_share : float
        Hidden part of the open-sky satellite-time above the mask, all satellites of the site's systems.
    signals, satellites, obstacles, sectors, counts : tuple
        Details, in the order of the site file; obstacles as in `Skyline.obstacles`.
    timeline : Timeline
        The window of the joint counts, epoch by epoch.
    """

    outcome: Literal["pass", "fail", "unproven"]
    findings: tuple[Finding, ...]
    sky: SkyShares
    blocked_satellite_time_share: float
    signals: tuple[SignalShares, ...]
    satellites: tuple[SatelliteShare, ...]
    obstacles: tuple[ObstacleCost, ...]
    sectors: tuple[SectorShare, ...]
    counts: tuple[UsableCount, ...]
    timeline: Timeline = field(compare=False)
