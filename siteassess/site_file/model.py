"""Records of a site file: one class per table, one field per key, every unit in its name.

The classes say which keys there are, their types, ranges and defaults; `site_file.read` turns what they
refuse into the tool's own words.
"""

from dataclasses import dataclass
from datetime import date, datetime
from pathlib import Path
from typing import Annotated, Literal

from pydantic import BaseModel, ConfigDict, Field, PrivateAttr

__all__ = ["AntennaChoice", "HorizonSource", "Mount", "Part", "Place", "Position", "Requirements", "Site", "SkyModel"]

Azimuth = Annotated[float, Field(ge=0, le=360)]
NonNegative = Annotated[float, Field(ge=0)]
Share = Annotated[float, Field(ge=0, le=1)]
Temperature = Annotated[float, Field(ge=0, le=1000)]
# One number, or a table from the carrier in MHz, as text, to the number at that carrier.
ByCarrier = float | dict[str, float]


class Record(BaseModel):
    model_config = ConfigDict(
        strict=True, frozen=True, extra="forbid", allow_inf_nan=False, populate_by_name=True
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class Position:
    """Where the survey mark is, WGS 84; the height is above the ellipsoid."""

    latitude_deg: float
    longitude_deg: float
    height_m: float


class Place(Record):
    """Table `[site]`: what and where the spot is."""

    name: Annotated[str, Field(min_length=1, max_length=200)]
    latitude_deg: Annotated[float, Field(ge=-90, le=90)] | None = None
    longitude_deg: Annotated[float, Field(ge=-180, le=360)] | None = None
    crs: str | None = None
    easting_m: float | None = None
    northing_m: float | None = None
    height_m: Annotated[float, Field(ge=-1000, le=10_000)] = 0.0
    height_system: Literal["ellipsoidal", "orthometric"] | None = None
    geoid_height_m: Annotated[float, Field(ge=-150, le=150)] | None = None
    surveyed_by: str | None = None


class Mount(Record):
    """Table `[mount]`: how the antenna stands on the mark."""

    mast_height_m: NonNegative
    phase_centre_above_arp_m: float = 0.0
    heading_deg: Azimuth = 0.0
    tilt_deg: Annotated[float, Field(ge=0, le=180)] = 0.0
    tilt_azimuth_deg: Azimuth = 0.0
    height_above_roof_m: NonNegative | None = None
    roof_surface: str | None = None

    @property
    def phase_centre_height_m(self) -> float:
        """Height of the antenna's phase centre above the survey mark [m]."""
        return self.mast_height_m + self.phase_centre_above_arp_m


class AntennaChoice(Record):
    """Table `[antenna]`: a built-in pattern, or the path of a CSV file."""

    pattern: Annotated[str, Field(min_length=1)]

    @property
    def is_file(self) -> bool:
        return self.pattern.lower().endswith(".csv")


class Part(Record):
    """One `[[chain]]` block: a part between the antenna port and the receiver, which is the last one."""

    part: Annotated[str, Field(min_length=1)]
    gain_db: ByCarrier | None = None
    loss_db: ByCarrier | None = None
    noise_figure_db: ByCarrier | None = None
    physical_temperature_k: Temperature = 290.0
    implementation_loss_db: ByCarrier | None = None


class HorizonSource(Record):
    """One `[[horizon]]` block: where part of the skyline comes from."""

    source: Literal["survey", "outlines", "terrain"]
    file: Annotated[str, Field(min_length=1)]
    surveyed_on: date | None = None
    bearings: Literal["true-north", "magnetic-north", "grid-north"] = "true-north"
    complete: bool = False
    azimuth_error_deg: NonNegative | None = None
    elevation_error_deg: NonNegative | None = None
    instrument_east_m: float = 0.0
    instrument_north_m: float = 0.0
    instrument_up_m: float | None = None  # None: at the height of the antenna's phase centre


class SkyModel(Record):
    """Table `[sky]`: which satellites and signals, and the window of the joint counts."""

    systems: tuple[str, ...] = ("GPS", "Galileo", "GLONASS", "BeiDou")
    signals: tuple[str, ...] = ("GPS L1 C/A", "Galileo E1", "GLONASS L1OF", "BeiDou B1C")
    power: Literal["guaranteed", "typical"] = "guaranteed"
    start: datetime = datetime(2026, 1, 1)
    days: Annotated[float, Field(gt=0, le=40)] = 10.0
    step_s: Annotated[float, Field(ge=10, le=900)] = 120.0


class Requirements(Record):
    """Table `[require]`: what the user asks of the spot. Limits that are None are advice."""

    elevation_mask_deg: Annotated[float, Field(ge=0, lt=90)]
    min_cn0_dbhz: float | dict[str, float]
    min_usable_share: Share = 0.95
    count_weakened: bool = False
    max_blocked_share_of_hemisphere: Share | None = None
    max_largest_block_share: Share | None = None
    max_horizon_deg: Annotated[float, Field(ge=0, le=90)] | None = None
    min_height_above_roof_m: NonNegative | None = None

    def min_cn0_for(self, signal: str) -> float:
        """Smallest C/N0 [dB-Hz] that the user asks of one signal."""
        return self.min_cn0_dbhz[signal] if isinstance(self.min_cn0_dbhz, dict) else self.min_cn0_dbhz


class Site(Record):
    """A whole site file, checked. Made by `read_site`; `position` and `path` are filled by it."""

    format: Literal[1]
    place: Annotated[Place, Field(alias="site")]
    mount: Mount
    antenna: AntennaChoice
    chain: Annotated[tuple[Part, ...], Field(min_length=1)]
    horizon: tuple[HorizonSource, ...] = ()
    sky: SkyModel = SkyModel()
    require: Requirements

    _path: Path = PrivateAttr(default=Path("site.toml"))
    _position: Position = PrivateAttr(default=Position(latitude_deg=0.0, longitude_deg=0.0, height_m=0.0))

    @property
    def path(self) -> Path:
        """The site file."""
        return self._path

    @property
    def position(self) -> Position:
        """The survey mark in WGS 84, whatever the file's own reference system."""
        return self._position
