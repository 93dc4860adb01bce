import math
from datetime import UTC, datetime, timedelta, timezone

import erfa
import pytest

from siteassess.orbits.sidereal import SIDEREAL_RATE_DEG_PER_S, days_between, mean_sidereal_angle_deg

TENTH_ARCSECOND_DEG = 0.1 / 3600
TWO_SECONDS_OF_TIME_DEG = 2 / 240  # the published angle may count nutation (1.2 s) and UT1 - UTC (0.9 s)


@pytest.mark.parametrize(
    "time",
    [
        datetime(1993, 7, 1),
        datetime(2000, 1, 1, 12),
        datetime(2016, 2, 29, 23, 59, 59),
        datetime(2021, 12, 12, 0, 19, 42),
        datetime(2049, 12, 31, 6),
    ],
)
def test_sidereal_angle_is_that_of_the_iau_1982_model(time: datetime) -> None:
    # Authority: the gmst82 routine of ERFA, the free edition of the IAU's Standards of Fundamental Astronomy.
    julian_date = erfa.dtf2d("UT1", *time.timetuple()[:6])
    expected_deg = math.degrees(erfa.gmst82(*julian_date))
    assert mean_sidereal_angle_deg(time) == pytest.approx(expected_deg, abs=TENTH_ARCSECOND_DEG)


def test_hour_angle_at_the_epoch_of_the_gps_slots() -> None:
    # Authority: GPS SPS Performance Standard 2001, Table 3-1: 18 h 36 min 14.4 s at 0 h on 1 July 1993.
    published_deg = 15 * (18 + 36 / 60 + 14.4 / 3600)
    assert mean_sidereal_angle_deg(datetime(1993, 7, 1)) == pytest.approx(
        published_deg, abs=TWO_SECONDS_OF_TIME_DEG
    )


def test_rate_is_the_rotation_of_the_earth() -> None:
    # Authority: IS-GPS-200 20.3.3.4.3, 7.2921151467e-5 rad/s against the stars; the equinox, against which
    # sidereal time counts, moves itself by 1e-7 of that.
    published_deg_per_s = math.degrees(7.2921151467e-5)
    assert pytest.approx(published_deg_per_s, rel=2e-7) == SIDEREAL_RATE_DEG_PER_S


def test_time_zones_are_honoured_and_naive_times_are_utc() -> None:
    naive = datetime(2026, 1, 1, 12)
    aware = datetime(2026, 1, 1, 14, tzinfo=timezone(timedelta(hours=2)))
    assert mean_sidereal_angle_deg(naive) == mean_sidereal_angle_deg(aware)
    assert days_between(naive, aware) == 0.0
    assert days_between(naive.replace(tzinfo=UTC), datetime(2026, 1, 3)) == 1.5
