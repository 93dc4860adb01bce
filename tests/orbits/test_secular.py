import numpy as np
import pytest

from siteassess.orbits.secular import secular_rates

TWO_SECONDS = 2.0
PUBLISHED_DIGITS_DEG_PER_DAY = 0.00005
SEVEN_PER_CENT = (
    0.07  # Moon and Sun move the node too, at this height by about 6 % of what the flattening does
)


@pytest.mark.parametrize(
    ("radius_m", "inclination_deg", "period_s"),
    [
        (26_559_700.0, 55.0, 43_077.3),
        (25_508_000.0, 64.8, 40_544.1),
        (29_599_801.0, 56.0, 50_680.9),
        (27_906_100.0, 55.0, 46_392.4),
    ],
    ids=["GPS", "GLONASS", "Galileo", "BeiDou"],
)
def test_nodal_period_is_near_the_measured_one(
    radius_m: float, inclination_deg: float, period_s: float
) -> None:
    # Authority: mean nodal periods computed from the precise orbits (SP3) of 2021-12-12.
    along_deg_per_s, _ = secular_rates(radius_m, inclination_deg)
    assert 360.0 / along_deg_per_s == pytest.approx(period_s, abs=TWO_SECONDS)


def test_node_rate_of_the_nominal_gps_almanac() -> None:
    # Authority: GPS SPS Performance Standard 2001, Table A-2-1: -4.4874e-7 degrees a second.
    _, node_deg_per_s = secular_rates(26_559_700.0, 55.0)
    assert node_deg_per_s * 86_400 == pytest.approx(-4.4874e-7 * 86_400, abs=PUBLISHED_DIGITS_DEG_PER_DAY)


def test_node_rate_of_galileo_is_mostly_that_of_the_flattening() -> None:
    # Authority: reference constellation of the Galileo OS SDD, -0.02764398 degrees a day.
    _, node_deg_per_s = secular_rates(29_599_801.0, 56.0)
    assert node_deg_per_s * 86_400 == pytest.approx(-0.02764398, rel=SEVEN_PER_CENT)


def test_laws_of_the_secular_rates() -> None:
    along, node = secular_rates([[8e6], [4.2e7]], [0.0, 60.0, 90.0])
    assert along.shape == node.shape == (2, 3)
    assert np.all(node[:, 0] < node[:, 1])  # the node of a flat orbit moves westward fastest
    np.testing.assert_allclose(node[:, 2], 0.0, atol=1e-18)  # and that of a polar orbit stands still
    mean_motion = np.degrees(np.sqrt(3.986004418e14 / np.array([8e6, 4.2e7]) ** 3))
    np.testing.assert_allclose(
        along[:, 1], mean_motion, rtol=1e-12
    )  # 4 cos^2(60 deg) = 1: no change along the orbit
