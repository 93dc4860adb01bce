"""What the field form asks for: the keys of a site file and the columns of a horizon file, in words."""

from dataclasses import dataclass

from siteassess.tables import packaged_rows

__all__ = ["CLASSES", "COLUMNS", "GROUPS", "PHOTOGRAPHS", "RULES", "Column", "Field", "Group"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Field:
    """One thing to be written down.

    Attributes
    ----------
    label : str
        What is asked.
    key : str
        Where it goes in the site file; empty where it stays on paper.
    unit : str
        Unit of the number; empty for words.
    choices : tuple of str
        Words to choose from, as the site file has them.
    wide : bool
        Whether it takes the whole width.
    """

    label: str
    key: str = ""
    unit: str = ""
    choices: tuple[str, ...] = ()
    wide: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Group:
    """Fields that belong together, and what to mind about them."""

    heading: str
    fields: tuple[Field, ...]
    note: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Column:
    """A column of the table of break points: its key in the horizon file, its heading, its width on paper."""

    key: str
    label: str
    unit: str = ""
    width_mm: float = 0.0  # 0: what the others leave


# What the errors of a class are: azimuth, elevation, distance.
CLASSES = {
    row["instrument"]: (row["azimuth_error_deg"], row["elevation_error_deg"], row["distance_error_m"])
    for row in packaged_rows("verdict/uncertainty/instrument_classes.csv")
}

GROUPS = (
    Group(
        heading="Spot",
        fields=(
            Field(label="Name of the spot", key="site.name", wide=True),
            Field(label="Surveyed by", key="site.surveyed_by"),
            Field(label="Day of the survey", key="horizon.surveyed_on", unit="year-month-day"),
            Field(label="Latitude of the mark", key="site.latitude_deg", unit="deg, north +"),
            Field(label="Longitude of the mark", key="site.longitude_deg", unit="deg, east +"),
            Field(label="Height of the mark, ellipsoidal", key="site.height_m", unit="m"),
            Field(label="Antenna above the mark", key="mount.mast_height_m", unit="m"),
        ),
        note="The mark is a point on the roof that can be found again. Everything is measured from it.",
    ),
    Group(
        heading="Instrument",
        fields=(
            Field(label="Instrument and its number", wide=True),
            Field(label="Class", key="horizon.instrument", choices=tuple(CLASSES), wide=True),
            Field(label="Error of azimuths", key="horizon.azimuth_error_deg", unit="deg"),
            Field(label="Error of elevations", key="horizon.elevation_error_deg", unit="deg"),
            Field(label="Error of distances", key="horizon.distance_error_m", unit="m"),
            Field(label="Eye above the mark", key="horizon.instrument_up_m", unit="m"),
            Field(label="Stood east of the mark", key="horizon.instrument_east_m", unit="m, west −"),
            Field(label="Stood north of the mark", key="horizon.instrument_north_m", unit="m, south −"),
        ),
        note="Best stand where the antenna will be, at its height. Errors are one standard deviation; "
        "without them those of the class hold.",
    ),
    Group(
        heading="North",
        fields=(
            Field(
                label="Azimuths are counted from",
                key="horizon.bearings",
                choices=("true-north", "magnetic-north", "grid-north"),
                wide=True,
            ),
            Field(label="Landmark sighted", key="horizon.landmark", wide=True),
            Field(label="Reading toward it", key="horizon.landmark_reading_deg", unit="deg"),
            Field(label="Its true bearing", key="horizon.landmark_bearing_deg", unit="deg"),
        ),
        note="A landmark of known direction goes before any compass: with its reading and its bearing the "
        "choice below does not count. Read a compass away from steel.",
    ),
    Group(
        heading="Weather and view",
        fields=(
            Field(label="Sight, wind, fog", wide=True),
            Field(
                label="Every azimuth was looked at",
                key="horizon.complete",
                choices=("true", "false"),
                wide=True,
            ),
        ),
    ),
)

COLUMNS = (
    Column(key="azimuth_deg", label="Azimuth", unit="deg", width_mm=18),
    Column(key="elevation_deg", label="Elevation", unit="deg", width_mm=18),
    Column(key="distance_m", label="Distance, level", unit="m", width_mm=18),
    Column(key="obstacle", label="Obstacle"),
    Column(key="cover", label="Cover", width_mm=16),
    Column(key="leaf", label="Leaf", width_mm=16),
    Column(key="depth_m", label="Depth", unit="m", width_mm=14),
    Column(key="underside_deg", label="Under-side", unit="deg", width_mm=17),
    Column(key="width_m", label="Width", unit="m", width_mm=14),
)

RULES = (
    "Far skyline: no obstacle name. Azimuths ascend from 0 to 360; a row wherever the slope changes, and no "
    "gap wider than 30 degrees.",
    "Near things: one name for each, a row for each corner of its upper edge, a distance on all its rows.",
    "Two rows at one azimuth are a vertical edge.",
    "A pole or rod is one row, with distance and width.",
    "What hangs free (bridge, jib, canopy) has an underside on all its rows; the sky below it stays open.",
    "Cover is blank for solid things, foliage for trees, unsurveyed for azimuths that could not be seen.",
    "Trees need the depth of their leaves along the sight; leaf is in-leaf, leafless or evergreen.",
    "Distance is level, from the instrument to the edge. Elevations lie from −5 to 90 degrees.",
)

PHOTOGRAPHS = ("N", "NE", "E", "SE", "S", "SW", "W", "NW")
