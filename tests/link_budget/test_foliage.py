"""Losses through leaves against ITU-R P.833 and Weissberger."""

import numpy as np
import pytest

from siteassess.link_budget.obstacles.foliage import (
    FOLIAGE_MODELS,
    leaf_factor,
    leaves_loss_db,
    mixed_forest_loss_db,
    slant_path_loss_db,
    weissberger_loss_db,
    woodland_loss_db,
)

MILLIBEL_HALF = 0.005
HUNDREDTH_DB = 0.01
L1_HZ, L5_HZ = 1575.42e6, 1176.45e6


# ITU-R P.833-10, 2.2: 0.25 f^0.39 d^0.25 theta^0.05.
@pytest.mark.parametrize(
    ("depth_m", "elevation_deg", "loss_db"),
    [(5, 10, 7.407), (10, 10, 8.809), (20, 10, 10.476), (10, 30, 9.306), (10, 60, 9.635)],
)
def test_slant_path_has_the_values_of_the_recommendation(
    depth_m: float, elevation_deg: float, loss_db: float
) -> None:
    assert slant_path_loss_db(depth_m, L1_HZ, elevation_deg) == pytest.approx(loss_db, abs=MILLIBEL_HALF)


# Weissberger 1982: 0.45 f^0.284 d to 14 m, 1.33 f^0.284 d^0.588 beyond, f in GHz.
@pytest.mark.parametrize(
    ("carrier_hz", "depth_m", "loss_db"),
    [
        (L1_HZ, 1, 0.512),
        (L1_HZ, 5, 2.560),
        (L1_HZ, 10, 5.120),
        (L1_HZ, 14, 7.168),
        (L1_HZ, 14.0001, 7.142),
        (L1_HZ, 20, 8.809),
        (L1_HZ, 50, 15.10),
        (L1_HZ, 100, 22.69),
        (L1_HZ, 400, 51.28),
        (L5_HZ, 10, 4.713),
        (L5_HZ, 20, 8.108),
    ],
)
def test_weissberger_has_the_published_values(carrier_hz: float, depth_m: float, loss_db: float) -> None:
    assert weissberger_loss_db(depth_m, carrier_hz) == pytest.approx(loss_db, abs=HUNDREDTH_DB / 2)


# ITU-R P.833-10, 2.1 with Table 1, mixed forest at 949 and 1852.2 MHz.
@pytest.mark.parametrize(
    ("rate_db_per_m", "largest_loss_db", "losses_db"),
    [(0.17, 26.5, [0.837, 1.647, 3.191, 12.548]), (0.30, 29.0, [1.462, 2.850, 5.420, 18.693])],
)
def test_woodland_has_the_values_of_the_recommendation(
    rate_db_per_m: float, largest_loss_db: float, losses_db: list[float]
) -> None:
    loss_db = woodland_loss_db(np.array([5.0, 10.0, 20.0, 100.0]), rate_db_per_m, largest_loss_db)
    assert loss_db == pytest.approx(losses_db, abs=MILLIBEL_HALF)


def test_a_leafless_tree_costs_a_sixth_less() -> None:
    # ITU-R P.833-10: near 1 GHz a tree in leaf costs about 20 % more dB than a leafless one.
    assert leaf_factor("in-leaf") / leaf_factor("leafless") == pytest.approx(1.20, abs=1e-9)
    assert leaf_factor("evergreen") == leaf_factor("in-leaf")


def test_few_leaves_cost_little() -> None:
    # Limits: none without leaves, in proportion below 1 m, and no step where the fit takes over.
    loss_db = slant_path_loss_db(np.array([0.0, 0.5, 1.0, 1.0001]), L1_HZ, 30.0)
    assert loss_db[0] == 0.0
    assert loss_db[1] == pytest.approx(loss_db[2] / 2.0)
    assert loss_db[3] - loss_db[2] == pytest.approx(0.0, abs=HUNDREDTH_DB)


def test_slant_path_stays_defined_at_the_horizon() -> None:
    loss_db = slant_path_loss_db(10.0, L1_HZ, np.array([-1.0, 0.0, 1.0]))
    assert loss_db == pytest.approx(loss_db[-1])


@pytest.mark.parametrize("shape", [(), (3,), (2, 3), (0,)])
def test_shapes_broadcast_and_nan_stays(shape: tuple[int, ...]) -> None:
    depth_m = np.full(shape, 8.0)
    assert np.shape(slant_path_loss_db(depth_m, L1_HZ, 30.0)) == shape
    assert np.shape(weissberger_loss_db(depth_m, L1_HZ)) == shape
    assert np.shape(woodland_loss_db(depth_m, 0.3, 29.0)) == shape
    assert np.isnan(slant_path_loss_db(np.nan, L1_HZ, 30.0))
    assert np.isnan(weissberger_loss_db(np.nan, L1_HZ))


# ITU-R P.833-10, Table 1, mixed forest: its own carriers, and between them linearly (0.26 dB/m and 28.2 dB at
# 1575.42 MHz).
@pytest.mark.parametrize(
    ("carrier_hz", "loss_db"),
    [(949e6, 1.647), (1852.2e6, 2.850), (L1_HZ, 28.23 * (1 - np.exp(-2.602 / 28.23)))],
)
def test_mixed_forest_follows_the_table(carrier_hz: float, loss_db: float) -> None:
    assert mixed_forest_loss_db(10.0, carrier_hz) == pytest.approx(loss_db, abs=MILLIBEL_HALF)


# The same three publications, 10 m of leaves at 30 degrees on L1; a bare tree costs 1 / 1.2 of it [P.833].
@pytest.mark.parametrize(
    ("model", "loss_db"), [("P.833 slant path", 9.306), ("P.833 woodland", 2.486), ("Weissberger", 5.120)]
)
def test_models_are_chosen_by_name(model: str, loss_db: float) -> None:
    assert leaves_loss_db(model, "in-leaf", 10.0, L1_HZ, 30.0) == pytest.approx(loss_db, abs=MILLIBEL_HALF)
    assert leaves_loss_db(model, "evergreen", 10.0, L1_HZ, 30.0) == pytest.approx(loss_db, abs=MILLIBEL_HALF)
    assert leaves_loss_db(model, "leafless", 10.0, L1_HZ, 30.0) == pytest.approx(
        loss_db / 1.2, abs=MILLIBEL_HALF
    )


def test_every_model_of_the_site_file_is_there() -> None:
    from typing import get_args

    from siteassess.site_file.model import Foliage

    assert set(get_args(Foliage.model_fields["model"].annotation)) == set(FOLIAGE_MODELS)


def test_models_take_arrays_that_broadcast() -> None:
    for model in FOLIAGE_MODELS:
        loss_db = leaves_loss_db(
            model, "in-leaf", np.array([[1.0], [5.0]]), L1_HZ, np.array([5.0, 10.0, 20.0])
        )
        assert np.broadcast_shapes(np.shape(loss_db), (2, 3)) == (2, 3)
