"""Gas loss against ITU-R P.676."""

import numpy as np
import pytest

from siteassess.link_budget.power.gases import gas_loss_db

L1_HZ, L2_HZ, L5_HZ = 1575.42e6, 1227.60e6, 1176.45e6
HALF_MILLIBEL = 0.0005
TWO_MILLIBEL = 0.002


# ITU-R P.676 Annex 1, line by line, at sea level with 1013.25 hPa, 288.15 K and 7.5 g/m3.
@pytest.mark.parametrize(
    ("carrier_hz", "elevation_deg", "loss_db", "tolerance_db"),
    [
        (L1_HZ, 90, 0.0344, HALF_MILLIBEL),
        (L2_HZ, 90, 0.0330, HALF_MILLIBEL),
        (L5_HZ, 90, 0.0327, HALF_MILLIBEL),
        (L1_HZ, 45, 0.0487, HALF_MILLIBEL),
        (L1_HZ, 10, 0.195, TWO_MILLIBEL),
        (L1_HZ, 5, 0.370, TWO_MILLIBEL),
    ],
)
def test_loss_agrees_with_the_recommendation(
    carrier_hz: float, elevation_deg: float, loss_db: float, tolerance_db: float
) -> None:
    assert gas_loss_db(carrier_hz, elevation_deg) == pytest.approx(loss_db, abs=tolerance_db)


def test_loss_grows_steadily_down_to_below_the_horizon() -> None:
    loss_db = gas_loss_db(L1_HZ, np.linspace(90.0, -1.0, 400))
    assert np.all(np.diff(loss_db) > 0)


def test_loss_at_the_horizon_is_that_of_the_horizontal_path() -> None:
    # An exponential atmosphere of scale height H over a sphere of radius R has an air mass of sqrt(pi R / 2
    # H) on the horizon (textbooks); with P.676's 0.0344 dB over 0.00652 dB/km, H is 5.3 km. Without
    # refraction; 10 % for the difference of a uniform shell.
    horizontal_db = 0.0344 * np.sqrt(np.pi * 6378.137 / (2 * 0.0344 / 0.00652))
    assert gas_loss_db(L1_HZ, 0.0) == pytest.approx(horizontal_db, rel=0.10)


@pytest.mark.parametrize("shape", [(), (3,), (2, 3), (0,)])
def test_shapes_broadcast_and_nan_stays(shape: tuple[int, ...]) -> None:
    assert np.shape(gas_loss_db(L1_HZ, np.full(shape, 30.0))) == shape
    assert np.isnan(gas_loss_db(L1_HZ, np.nan))
