"""Sidereal time: how far the Earth has turned below the orbits."""

from datetime import UTC, datetime

__all__ = ["SIDEREAL_RATE_DEG_PER_S", "days_between", "mean_sidereal_angle_deg"]

J2000 = datetime(2000, 1, 1, 12)
SIDEREAL_RATE_DEG_PER_S = 360.985_647_366_29 / 86_400  # [IAU 1982], against the mean equinox of date


def mean_sidereal_angle_deg(time: datetime) -> float:
    """Greenwich mean sidereal time as an angle: longitude of the mean equinox of date, west of Greenwich.

    Parameters
    ----------
    time : datetime
        UTC, or with a time zone of its own. UT1 is taken as UTC, which costs at most 0.004 degrees.

    Returns
    -------
    float
        Angle [deg], 0 <= angle < 360.

    References
    ----------
    [IAU 1982], as [Meeus 1998] equation 12.4.

    Examples
    --------
    The worked example 12.a of [Meeus 1998] finds 13 h 10 min 46.3668 s:

    >>> round(mean_sidereal_angle_deg(datetime(1987, 4, 10)) - 15 * (13 + 10 / 60 + 46.3668 / 3600), 4)
    0.0
    """
    days = days_between(J2000, time)
    centuries = days / 36_525
    angle_deg = (
        280.460_618_37 + 360.985_647_366_29 * days + 0.000_387_933 * centuries**2 - centuries**3 / 38_710_000
    )
    return angle_deg % 360.0


def days_between(first: datetime, second: datetime) -> float:
    """Days from one time to another; a time without a zone is UTC."""
    return (_as_utc(second) - _as_utc(first)).total_seconds() / 86_400


def _as_utc(time: datetime) -> datetime:
    return time.replace(tzinfo=UTC) if time.tzinfo is None else time.astimezone(UTC)
