"""Records of a site file: one class per table, one field per key, every unit in its name.

The classes say which keys there are, their types, ranges and defaults; `refusals` puts what they refuse into
the tool's own words, `checks` holds the keys against each other.
"""

from dataclasses import dataclass
from datetime import date, datetime
from functools import cache
from pathlib import Path
from typing import Annotated, Any, Literal

from pydantic import BaseModel, BeforeValidator, ConfigDict, Discriminator, Field, PrivateAttr, Tag

from siteassess.tables import packaged_rows

__all__ = [
    "AntennaChoice",
    "ByCarrier",
    "Foliage",
    "HorizonSource",
    "Mount",
    "Part",
    "PartsChoice",
    "Place",
    "Position",
    "Requirements",
    "Site",
    "SkyModel",
    "purposes_dbhz",
]


def _shape(value: object) -> str:
    return "table" if isinstance(value, dict) else "number"


def _shape_or_purpose(value: object) -> str:
    return "purpose" if isinstance(value, str) else _shape(value)


def _text_or_list(value: object) -> str:
    return "list" if isinstance(value, tuple) else "text"


def _whole_number(value: object) -> object:
    if type(value) is not int:  # Python takes 1.0 and True for 1
        raise ValueError("it must be 1")
    return value


Azimuth = Annotated[float, Field(ge=0, le=360)]
Latitude = Annotated[float, Field(ge=-90, le=90)]
Longitude = Annotated[float, Field(ge=-180, le=360)]
Height = Annotated[float, Field(ge=0)]
Offset = Annotated[float, Field(ge=-1000, le=1000)]
AngleError = Annotated[float, Field(ge=0, le=45)]
Share = Annotated[float, Field(ge=0, le=1)]
Growth = Annotated[float, Field(ge=0, le=5)]
Temperature = Annotated[float, Field(ge=0, le=1000)]
Cn0 = Annotated[float, Field(ge=0, le=70)]
Decibels = Annotated[float, Field(ge=0, le=100)]
Voltage = Annotated[float, Field(ge=0, le=60)]
SatelliteNumber = Annotated[int, Field(ge=1, le=1000)]
# Control characters would break a report's line; a Windows path in a basic string of TOML brings them in.
Text = Annotated[str, Field(min_length=1, max_length=200, pattern=r"^[^\u0000-\u001f\u007f]*$")]
FilePath = Annotated[str, Field(min_length=1, max_length=4000, pattern=r"^[^\u0000-\u001f\u007f]*$")]
FilePaths = Annotated[
    Annotated[FilePath, Tag("text")] | Annotated[tuple[FilePath, ...], Tag("list")],
    Discriminator(_text_or_list),
]
# Authority and code; a system of heights may be joined to one of places.
SystemCode = Annotated[str, Field(pattern=r"^[A-Za-z]+:[0-9A-Za-z_.]+(\+([A-Za-z]+:)?[0-9A-Za-z_.]+)?$")]
# One number, or a table from the carrier in MHz, as text, to the number at that carrier.
ByCarrier = float | dict[str, float]
DecibelsByCarrier = Annotated[
    Annotated[Decibels, Tag("number")] | Annotated[dict[str, Decibels], Tag("table")], Discriminator(_shape)
]
Cn0BySignal = Annotated[
    Annotated[Cn0, Tag("number")] | Annotated[dict[str, Cn0], Tag("table")] | Annotated[str, Tag("purpose")],
    Discriminator(_shape_or_purpose),
]


@cache
def purposes_dbhz() -> dict[str, float]:
    """Minimum C/N0 by the purpose it is enough for."""
    return {row["purpose"]: float(row["min_cn0_dbhz"]) for row in packaged_rows("verdict/purposes.csv")}


class Record(BaseModel):
    model_config = ConfigDict(
        strict=True,
        frozen=True,
        extra="forbid",
        allow_inf_nan=False,
        str_strip_whitespace=True,
        defer_build=True,  # a right site file needs the validator of `Site` alone
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class Position:
    """Where the survey mark is, WGS 84; the height is above the ellipsoid where `above` says so.

    `remarks` tell how a height above sea level was used.
    """

    latitude_deg: float
    longitude_deg: float
    height_m: float
    above: Literal["ellipsoid", "sea level"] = "ellipsoid"
    remarks: tuple[str, ...] = ()


class Place(Record):
    """Table `[site]`: what and where the spot is."""

    name: Text = Field(description="Name of the spot, as the report prints it.")
    latitude_deg: Latitude | None = Field(
        default=None, description="Latitude of the survey mark, WGS 84 or in crs, north positive [deg]."
    )
    longitude_deg: Longitude | None = Field(
        default=None, description="Longitude of the survey mark, WGS 84 or in crs, east positive [deg]."
    )
    crs: SystemCode | None = Field(
        default=None,
        description="Reference system of easting_m and northing_m, or of latitude_deg and longitude_deg, "
        "such as EPSG:27700; with heights in it such as EPSG:27700+5701.",
    )
    easting_m: float | None = Field(default=None, description="Easting of the survey mark in crs [m].")
    northing_m: float | None = Field(default=None, description="Northing of the survey mark in crs [m].")
    height_m: Annotated[float, Field(ge=-1000, le=10_000)] = Field(
        default=0.0, description="Height of the survey mark in height_system [m]."
    )
    height_system: Literal["ellipsoidal", "orthometric"] | None = Field(
        default=None,
        description="What height_m is above: the WGS 84 ellipsoid, or sea level. Required with a crs that "
        "has no heights in it; without crs, ellipsoidal.",
    )
    geoid_height_m: Annotated[float, Field(ge=-150, le=150)] | None = Field(
        default=None,
        description="Height of the geoid above the ellipsoid, added to an orthometric height_m [m]. "
        "Without it, from the grids that PROJ has installed.",
    )
    surveyed_by: Text | None = Field(default=None, description="Who surveyed the spot, for the report.")


class Mount(Record):
    """Table `[mount]`: how the antenna stands on the mark."""

    mast_height_m: Height = Field(description="Antenna reference point (ARP) above the survey mark [m].")
    max_mast_height_m: Height | None = Field(
        default=None,
        description="Tallest mast that may stand here [m]: up to it the report tells what more height "
        "brings. Absent: 5 m above mast_height_m.",
    )
    phase_centre_above_arp_m: Annotated[float, Field(ge=-10, le=10)] = Field(
        default=0.0,
        description="Phase centre above the antenna reference point [m]; directions and powers refer to it.",
    )
    heading_deg: Azimuth = Field(
        default=0.0, description="Azimuth of the antenna's north mark, clockwise from true north [deg]."
    )
    tilt_deg: Annotated[float, Field(ge=0, le=180)] = Field(
        default=0.0, description="Angle between the antenna's axis and the zenith [deg]."
    )
    tilt_azimuth_deg: Azimuth = Field(
        default=0.0, description="Azimuth toward which the antenna leans, clockwise from true north [deg]."
    )
    height_above_roof_m: Height | None = Field(
        default=None, description="Antenna above the roof, for the roof rule and reflections [m]."
    )
    roof_surface: Text | None = Field(
        default=None, description="What the roof below the antenna is made of, for the report."
    )

    @property
    def phase_centre_height_m(self) -> float:
        """Height of the antenna's phase centre above the survey mark [m]."""
        return self.mast_height_m + self.phase_centre_above_arp_m


class AntennaChoice(Record):
    """Table `[antenna]`: a built-in pattern, or the path of a CSV file."""

    pattern: FilePath = Field(
        description="Name of a built-in gain pattern, or a CSV file relative to the site file; the value "
        "then ends in .csv."
    )
    gain_error_db: Annotated[float, Field(ge=0, le=10)] = Field(
        default=1.0, description="Uncertainty of the gain pattern, one standard deviation [dB]."
    )
    unwanted_level_dbm: Annotated[float, Field(ge=-200, le=50)] | None = Field(
        default=None,
        description="Level at the antenna port of all transmitters outside the navigation bands [dBm].",
    )

    @property
    def is_file(self) -> bool:
        return self.pattern.lower().endswith(".csv")


class PartsChoice(Record):
    """Table `[parts]`: a parts table of the site's own."""

    file: FilePath = Field(
        description="A CSV file relative to the site file; its kinds go before those of the packaged table."
    )


class Part(Record):
    """One `[[chain]]` block: a part between the antenna port and the receiver, which is the last one.

    What is absent is taken from the part's kind. `rests_on` says where that came from.
    """

    part: Text = Field(
        description="What the part is. The last one must be called receiver, and only that one."
    )
    kind: Text | None = Field(
        default=None,
        description="Row of the parts table that gives every value that is absent here, such as foam, 10 mm.",
    )
    length_m: Annotated[float, Field(ge=0, le=1000)] | None = Field(
        default=None, description="Length of a cable [m]."
    )
    count: Annotated[int, Field(ge=1, le=100)] = Field(
        default=1, description="How many parts of this kind stand one after the other; their losses add."
    )
    gain_db: DecibelsByCarrier | None = Field(
        default=None, description="Gain [dB]; a part with gain needs noise_figure_db too."
    )
    loss_db: DecibelsByCarrier | None = Field(default=None, description="Loss [dB]; for parts without gain.")
    noise_figure_db: DecibelsByCarrier | None = Field(
        default=None,
        description="Noise figure referred to 290 K [dB]; for parts with gain and for the receiver.",
    )
    physical_temperature_k: Temperature = Field(
        default=290.0, description="Temperature of the part itself [K]; sets the noise of a lossy part."
    )
    implementation_loss_db: DecibelsByCarrier | None = Field(
        default=None,
        description="Loss inside the receiver, by filtering and whatever quantisation does not name [dB]; "
        "none when absent.",
    )
    quantisation: Literal["1-bit", "2-bit"] | None = Field(
        default=None,
        description="Samples of the receiver; the loss of their rounding is added to implementation_loss_db.",
    )
    min_net_gain_db: Decibels | None = Field(
        default=None, description="Smallest gain ahead of it that the receiver is made for [dB]."
    )
    max_net_gain_db: Decibels | None = Field(
        default=None, description="Largest gain ahead of it that the receiver is made for [dB]."
    )
    max_input_dbm: Annotated[float, Field(ge=-150, le=50)] | None = Field(
        default=None, description="Level at its input where the part saturates: its 1 dB compression [dBm]."
    )
    out_of_band_rejection_db: Decibels | None = Field(
        default=None,
        description="How much a filter at its input weakens transmitters outside the navigation bands [dB].",
    )
    supply_voltage_v: Voltage | None = Field(
        default=None, description="Voltage that the part feeds toward the antenna [V]."
    )
    supply_current_ma: Annotated[float, Field(ge=0, le=1000)] | None = Field(
        default=None, description="Current that a part with gain draws from the cable [mA]."
    )
    min_supply_voltage_v: Voltage | None = Field(
        default=None, description="Lowest voltage at which a part with gain works [V]."
    )
    max_supply_voltage_v: Voltage | None = Field(
        default=None, description="Highest voltage that a part with gain stands [V]."
    )
    loop_resistance_ohm: Annotated[float, Field(ge=0, le=1000)] | None = Field(
        default=None, description="Resistance to the supply, inner and outer conductor together [ohm]."
    )
    passes_supply: bool | None = Field(
        default=None, description="Whether the supply gets through; it does unless the kind says otherwise."
    )

    _rests_on: str = PrivateAttr(default="")

    @property
    def rests_on(self) -> str:
        """Source and status of what the parts table gave; empty where it gave nothing."""
        return self._rests_on


class HorizonSource(Record):
    """One `[[horizon]]` block: where part of the skyline comes from."""

    source: Literal["survey", "outlines", "terrain"] = Field(description="How the horizon was found.")
    file: FilePaths = Field(
        description="The readings, a CSV file; building outlines, GeoJSON; or an elevation raster, such as "
        "GeoTIFF, or a list of them. Relative to the site file."
    )
    surveyed_on: date | None = Field(default=None, description="Day of the survey, such as 2026-10-04.")
    bearings: Literal["true-north", "magnetic-north", "grid-north"] = Field(
        default="true-north",
        description="What the azimuths of the file are counted from. A landmark goes before it.",
    )
    landmark: Text | None = Field(
        default=None, description="Name of the landmark that was sighted, for the report."
    )
    landmark_reading_deg: Azimuth | None = Field(
        default=None,
        description="Azimuth that the instrument showed toward a landmark of known direction [deg]; it turns "
        "the whole survey.",
    )
    landmark_bearing_deg: Azimuth | None = Field(
        default=None, description="Azimuth of the landmark from the instrument, from true north [deg]."
    )
    landmark_latitude_deg: Latitude | None = Field(
        default=None, description="Latitude of the landmark, WGS 84 [deg]; in place of its bearing."
    )
    landmark_longitude_deg: Longitude | None = Field(
        default=None, description="Longitude of the landmark, WGS 84 [deg]."
    )
    landmark_easting_m: float | None = Field(
        default=None, description="Easting of the landmark in the site's crs [m]; in place of its bearing."
    )
    landmark_northing_m: float | None = Field(
        default=None, description="Northing of the landmark in the site's crs [m]."
    )
    complete: bool = Field(
        default=False,
        description="True when the crew says that every azimuth was looked at. Otherwise gaps of more than "
        "30 deg between neighbouring rows are unsurveyed.",
    )
    azimuth_error_deg: AngleError | None = Field(
        default=None, description="Uncertainty of the azimuths, one standard deviation [deg]."
    )
    elevation_error_deg: AngleError | None = Field(
        default=None, description="Uncertainty of the elevations, one standard deviation [deg]."
    )
    distance_error_m: Annotated[float, Field(ge=0, le=100)] | None = Field(
        default=None, description="Uncertainty of the distances, one standard deviation [m]."
    )
    instrument: Text | None = Field(
        default=None,
        description="Class of the instrument, such as total station; it gives every error that is absent.",
    )
    instrument_east_m: Offset = Field(
        default=0.0, description="Where the instrument stood, east of the survey mark [m]."
    )
    instrument_north_m: Offset = Field(
        default=0.0, description="Where the instrument stood, north of the survey mark [m]."
    )
    instrument_up_m: Offset | None = Field(
        default=None,
        description="Height of the instrument's eye above the survey mark [m]; absent: at the phase centre.",
    )
    crs: SystemCode | None = Field(
        default=None,
        description="Reference system of building outlines, such as EPSG:27700; absent: that of the file, "
        "which for GeoJSON is longitude and latitude, WGS 84.",
    )
    ground_up_m: Offset = Field(
        default=0.0,
        description="Height of the ground at the buildings above the survey mark [m]; negative when the mark "
        "is on a roof.",
    )
    nearest_m: Annotated[float, Field(ge=10, le=100_000)] = Field(
        default=100.0, description="Nearer ground is left out of terrain: it stays with the survey [m]."
    )
    reach_m: Annotated[float, Field(ge=100, le=200_000)] = Field(
        default=30_000.0, description="Ground farther away is left out of terrain [m]."
    )
    heights: Literal["from-raster", "site"] = Field(
        default="from-raster",
        description="How the antenna is set over the terrain: the survey mark on the raster's ground, or at "
        "site.height_m, which then must count from where the raster counts.",
    )
    mark_above_ground_m: Annotated[float, Field(ge=-100, le=1000)] = Field(
        default=0.0,
        description="Survey mark above the raster's ground [m]: the height of the building where the raster "
        "holds bare ground.",
    )

    @property
    def files(self) -> tuple[str, ...]:
        """The files that it names."""
        return (self.file,) if isinstance(self.file, str) else self.file


class Foliage(Record):
    """Table `[foliage]`: what leaves cost, and how fast trees grow."""

    model: Literal["P.833 slant path", "P.833 woodland", "Weissberger"] = Field(
        default="P.833 slant path", description="Model of the loss through leaves."
    )
    growth_m_per_year: Growth = Field(
        default=0.0,
        description="How fast trees grow whose rows do not say it themselves [m/year]; used with "
        "require.good_for_years.",
    )


class SkyModel(Record):
    """Table `[sky]`: which satellites and signals, and the window of the joint counts."""

    systems: tuple[Text, ...] = Field(
        default=("GPS", "Galileo", "GLONASS", "BeiDou"),
        description="Satellite systems; when only signals is given, the systems of these signals.",
    )
    signals: tuple[Text, ...] = Field(
        default=("GPS L1 C/A", "Galileo E1", "GLONASS L1OF", "BeiDou B1C"),
        description="Signals to judge, each by itself, by their names in the signal table; when only systems "
        "is given, those of the default signals that belong to these systems.",
    )
    power: Literal["guaranteed", "typical"] = Field(
        default="guaranteed",
        description="Power of the satellites: the interface documents' minimum, or with a stated excess.",
    )
    power_error_db: Annotated[float, Field(ge=0, le=10)] = Field(
        default=1.0, description="Uncertainty of the power of the signals, one standard deviation [dB]."
    )
    seed: Annotated[int, Field(ge=0, le=999_999)] = Field(
        default=1, description="Seed of the random draws that say how sure the verdict is."
    )
    tracked: Literal["pilot", "whole-signal"] = Field(
        default="pilot",
        description="What the receiver tracks: the component named in the signal table, or the whole signal.",
    )
    start: datetime = Field(
        default=datetime(2026, 1, 1),
        description="Start of the window of joint counts and dilution of precision, UTC, in the years 1980 "
        "to 2099; a time with an offset is converted.",
    )
    days: Annotated[float, Field(gt=0, le=40)] = Field(
        default=10.0, description="Length of that window [days]."
    )
    step_s: Annotated[float, Field(ge=10, le=900)] = Field(
        default=120.0, description="Step of time along the tracks [s]."
    )


def _mask_unless_in_a_set(schema: dict[str, Any]) -> None:
    """The mask is mandatory where no set of criteria gives it."""
    schema["required"] = [key for key in schema["required"] if key != "elevation_mask_deg"]
    schema["if"] = {"not": {"required": ["criteria_set"]}}
    schema["then"] = {"required": ["elevation_mask_deg"]}


class Requirements(Record):
    """Table `[require]`: what the user asks of the spot. Limits that are absent are reported as advice."""

    model_config = ConfigDict(json_schema_extra=_mask_unless_in_a_set)

    criteria_set: Text | None = Field(
        default=None,
        description="Named set of published limits that are asked for: igs, ngs-mark or timing. Keys that "
        "stand here win over those of the set.",
    )
    elevation_mask_deg: Annotated[float, Field(ge=0, lt=90)] = Field(
        description="Satellites below this elevation are not counted [deg]."
    )
    min_cn0_dbhz: Cn0BySignal = Field(
        description="Smallest C/N0 at which a signal is usable [dB-Hz]: one number, a table by signal, or a "
        "purpose such as carrier-phase."
    )
    min_usable_share: Share = Field(
        default=0.95, description="Smallest usable share of a signal's satellite-time above the mask [share]."
    )
    count_weakened: bool = Field(
        default=False,
        description="Whether signals weakened by leaves or round a solid edge count as usable.",
    )
    good_for_years: Annotated[float, Field(gt=0, le=50)] | None = Field(
        default=None,
        description="For how many years the usable share must stay good while trees grow; none when absent.",
    )
    max_blocked_sky_share: Share | None = Field(
        default=None, description="Largest hidden sky above the mask, as a share of the hemisphere [share]."
    )
    max_block_share: Share | None = Field(
        default=None,
        description="Largest stretch of hidden sky above the mask, as a share of the hemisphere [share].",
    )
    max_horizon_deg: Annotated[float, Field(ge=0, le=90)] | None = Field(
        default=None, description="Highest elevation that the solid skyline may reach [deg]."
    )
    max_reflector_deg: Annotated[float, Field(ge=0, le=90)] | None = Field(
        default=None,
        description="Highest elevation of solid obstacles nearer than reflector_distance_m [deg].",
    )
    reflector_distance_m: Annotated[float, Field(ge=0, le=1000)] | None = Field(
        default=None, description="Horizontal distance from which obstacles no longer count as near [m]."
    )
    min_height_above_roof_m: Height | None = Field(
        default=None, description="Smallest height of the antenna above the roof [m]."
    )
    min_metal_roof_offset_m: Annotated[float, Field(ge=0, le=0.1)] | None = Field(
        default=None,
        description="How far the height above a roof of metal must be off any multiple of 19 or 24 cm [m].",
    )
    min_satellites: SatelliteNumber | None = Field(
        default=None, description="How many satellites, of all systems together, must be usable at once."
    )
    min_satellites_share: Share | None = Field(
        default=None, description="Share of time for which that many must be usable [share]."
    )
    min_satellites_by_system: dict[str, SatelliteNumber] | None = Field(
        default=None,
        description="How many satellites of single systems must be usable at once, for the same share.",
    )
    max_gap_s: Annotated[float, Field(ge=0)] | None = Field(
        default=None, description="Longest time with fewer than min_satellites usable [s]."
    )
    max_pdop: Annotated[float, Field(gt=0)] | None = Field(
        default=None, description="Largest dilution of precision of the position, of the usable satellites."
    )
    min_pdop_share: Share | None = Field(
        default=None, description="Share of time for which the PDOP must be within its limit [share]."
    )
    min_net_gain_db: Decibels | None = Field(
        default=None, description="Smallest gain between the antenna port and the receiver [dB]."
    )
    max_net_gain_db: Decibels | None = Field(
        default=None, description="Largest gain between the antenna port and the receiver [dB]."
    )
    max_cn0_lost_before_preamplifier_db: Decibels | None = Field(
        default=None,
        description="Largest loss of C/N0 to what stands ahead of the first part with gain [dB].",
    )
    max_cable_loss_db_per_m: Decibels | None = Field(
        default=None, description="Largest loss of a cable at 1575.42 MHz [dB/m]."
    )
    min_supply_voltage_v: Voltage | None = Field(
        default=None, description="Lowest voltage at the first part with gain [V]."
    )
    max_supply_voltage_v: Voltage | None = Field(
        default=None, description="Highest voltage at the first part with gain [V]."
    )
    min_saturation_margin_db: Decibels | None = Field(
        default=None, description="Smallest distance of the level at any part from its saturation [dB]."
    )

    _asked_by: dict[str, str] = PrivateAttr(default_factory=dict)

    def asked_by(self, key: str) -> str | None:
        """Who asks for a limit: the site file, or the set that it names; None where nobody does."""
        if getattr(self, key) is None:
            return None
        return self._asked_by.get(key, "site file")

    def min_cn0_for(self, signal: str) -> float:
        """Smallest C/N0 [dB-Hz] that the user asks of one signal."""
        asked = self.min_cn0_dbhz
        if isinstance(asked, str):
            return purposes_dbhz()[asked]
        return asked[signal] if isinstance(asked, dict) else asked


class Site(Record):
    """A whole site file, checked.

    `read_site` makes it and fills `position` and `path`.
    """

    format: Annotated[Literal[1], BeforeValidator(_whole_number)] = Field(
        description="Edition of the site file's format."
    )
    place: Place = Field(alias="site")
    mount: Mount
    antenna: AntennaChoice
    chain: tuple[Part, ...] = Field(min_length=1)
    parts: PartsChoice | None = None
    horizon: tuple[HorizonSource, ...] = ()
    # Defaults need no checking, so they wait for no validator of their own.
    foliage: Foliage = Field(default_factory=Foliage.model_construct)
    sky: SkyModel = Field(default_factory=SkyModel.model_construct)
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
