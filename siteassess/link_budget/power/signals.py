"""The signals: what each satellite system promises to deliver at the ground."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from types import MappingProxyType

from siteassess.tables import packaged_rows

__all__ = ["Signal", "glonass_carrier_hz", "read_signals"]

GLONASS_STEPS_TO_CARRIER = 2848  # 1602 / (9/16) and 1246 / (7/16) alike


@dataclass(frozen=True, slots=True, kw_only=True)
class Signal:
    """One row of the signal table.

    Attributes
    ----------
    name : str
        Such as "GPS L1 C/A"; the name that site files use.
    system : str
        "GPS", "Galileo", "GLONASS" or "BeiDou".
    carrier_hz : float
        Carrier; for GLONASS FDMA signals channel 0.
    guaranteed_dbw : mapping of str to float
        Orbit class ("MEO", "IGSO", "GEO") to the guaranteed power of the whole signal at a 0 dBic antenna on
        the ground at 5 degrees elevation. A class that is absent does not send the signal.
    atmosphere_included_db : float or None
        Loss in the atmosphere that the document states to have counted; None when it states none.
    beam : str
        "flat", or the name of a column of the beam table.
    tracked_component : str
        Name of the component that the receiver tracks.
    tracked_share_db : float
        Its power relative to the whole signal.
    typical_excess_db : float
        How far satellites usually exceed the guarantee.
    reference : str
        How the document counts the power: reference antenna, and which components together.
    source, status : str
        Published source, and whether it was seen or is from memory.
    """

    name: str
    system: str
    carrier_hz: float
    guaranteed_dbw: Mapping[str, float]
    atmosphere_included_db: float | None
    beam: str
    tracked_component: str
    tracked_share_db: float
    typical_excess_db: float
    reference: str
    source: str
    status: str


@cache
def read_signals() -> Mapping[str, Signal]:
    """Signal table of the package, by name and in the order of the table.

    Examples
    --------
    >>> read_signals()["BeiDou B1C"].guaranteed_dbw["IGSO"]
    -161.0
    """
    signals = (_signal(row) for row in packaged_rows("link_budget/power/signals.csv"))
    return MappingProxyType({signal.name: signal for signal in signals})


def glonass_carrier_hz(channel_0_hz: float, channel: int) -> float:
    """Carrier [Hz] of a GLONASS FDMA channel, from that of channel 0 in either band.

    The budget uses channel 0 for all satellites, which changes the free-space loss by 0.02 dB at most.

    References
    ----------
    [GLONASS ICD] GLONASS ICD 5.1: steps of 9/16 MHz from 1602 MHz and of 7/16 MHz from 1246 MHz; channels
    run from -7 to 6.

    Examples
    --------
    >>> glonass_carrier_hz(1602e6, -7)
    1598062500.0
    """
    return channel_0_hz * (GLONASS_STEPS_TO_CARRIER + channel) / GLONASS_STEPS_TO_CARRIER


def _signal(row: Mapping[str, str]) -> Signal:
    cells = {"MEO": row["meo_dbw"], "IGSO": row["igso_dbw"], "GEO": row["geo_dbw"]}
    included_db = row["atmosphere_included_db"]
    return Signal(
        name=row["signal"],
        system=row["system"],
        carrier_hz=float(row["carrier_hz"]),
        guaranteed_dbw=MappingProxyType({key: float(cell) for key, cell in cells.items() if cell}),
        atmosphere_included_db=float(included_db) if included_db else None,
        beam=row["beam"],
        tracked_component=row["tracked_component"],
        tracked_share_db=float(row["tracked_share_db"]),
        typical_excess_db=float(row["typical_excess_db"]),
        reference=row["reference"],
        source=row["source"],
        status=row["status"],
    )
