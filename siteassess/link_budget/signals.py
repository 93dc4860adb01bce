"""The signals: what each satellite system promises to deliver at the ground."""

from collections.abc import Mapping
from dataclasses import dataclass

__all__ = ["Signal"]


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
        Orbit class ("MEO", "IGSO", "GEO") to the guaranteed power of the whole signal at a 0 dBic antenna on the
        ground at 5 degrees elevation. A class that is absent does not send the signal.
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
    source: str
    status: str
