"""Loss through leaves, by published models that disagree by 3 to 1 at 10 m: the model is a stated choice."""

from collections.abc import Callable
from typing import Any, Literal

import numpy as np
from numpy.typing import ArrayLike

__all__ = [
    "FOLIAGE_MODELS",
    "leaf_factor",
    "leaves_loss_db",
    "mixed_forest_loss_db",
    "slant_path_loss_db",
    "weissberger_loss_db",
    "woodland_loss_db",
]

LEAFLESS_SHARE = 1.0 / 1.2  # [P.833]: near 1 GHz a tree in leaf costs about 20 % more dB than a bare one
SHORTEST_DEPTH_M = 1.0  # the slant-path fit does not go to zero with the depth; own limit of its use
LOWEST_ELEVATION_DEG = 1.0  # own limit of the elevation term of the fit, which vanishes at the horizon
WEISSBERGER_BREAK_M = 14.0
# [P.833] Table 1, mixed forest: carriers, loss per metre of a short path, largest loss.
FOREST_HZ = (949e6, 1852.2e6, 2117.5e6)
FOREST_DB_PER_M = (0.17, 0.30, 0.34)
FOREST_LARGEST_DB = (26.5, 29.0, 34.1)


def slant_path_loss_db(depth_m: ArrayLike, carrier_hz: ArrayLike, elevation_deg: ArrayLike) -> Any:
    """Loss [dB] on a slant path through a tree or a grove in leaf, by P.833: the default.

    Parameters
    ----------
    depth_m : array
        Path through leaves [m]. Below 1 m, where the fit does not hold, the loss goes with the depth.
    carrier_hz : array
        Carrier [Hz].
    elevation_deg : array
        Elevation of the path [deg]; below 1 degree the loss at 1 degree holds. The three shapes broadcast.

    References
    ----------
    [P.833] ITU-R P.833-10, 2.2: fitted to pine in Austria.

    Examples
    --------
    >>> round(float(slant_path_loss_db(10.0, 1575.42e6, 30.0)), 3)
    9.306
    """
    depth = np.maximum(depth_m, SHORTEST_DEPTH_M)
    elevation = np.maximum(elevation_deg, LOWEST_ELEVATION_DEG)
    loss_db = 0.25 * (np.asarray(carrier_hz) / 1e6) ** 0.39 * depth**0.25 * elevation**0.05  # [P.833] 2.2
    return loss_db * np.clip(depth_m, 0.0, SHORTEST_DEPTH_M) / SHORTEST_DEPTH_M


def weissberger_loss_db(depth_m: ArrayLike, carrier_hz: ArrayLike) -> Any:
    """Loss [dB] through dense, dry trees in leaf by Weissberger's modified exponential decay.

    Valid from 0.23 to 95 GHz and to 400 m of depth.

    References
    ----------
    [Weissberger] Weissberger 1982, ESD-TR-81-101 (report number from memory).

    Examples
    --------
    >>> round(float(weissberger_loss_db(10.0, 1575.42e6)), 2)
    5.12
    """
    depth = np.asarray(depth_m, dtype=float)
    short_db, long_db = 0.45 * depth, 1.33 * depth**0.588
    at_1_ghz_db = np.where(depth <= WEISSBERGER_BREAK_M, short_db, long_db)
    return (np.asarray(carrier_hz) / 1e9) ** 0.284 * at_1_ghz_db


def woodland_loss_db(depth_m: ArrayLike, rate_db_per_m: ArrayLike, largest_loss_db: ArrayLike) -> Any:
    """Loss [dB] in woodland when one end of the path stands in it, by P.833.

    Parameters
    ----------
    depth_m : array
        Path through the wood [m].
    rate_db_per_m : array
        Loss per metre of a short path; 0.17 at 949 MHz and 0.30 at 1852 MHz in the mixed forest of [P.833]
        Table 1.
    largest_loss_db : array
        Loss that other paths limit it to; 26.5 and 29.0 dB there.

    References
    ----------
    [P.833] ITU-R P.833-10, 2.1 and Table 1.

    Examples
    --------
    >>> round(float(woodland_loss_db(10.0, 0.30, 29.0)), 2)
    2.85
    """
    largest = np.asarray(largest_loss_db, dtype=float)
    return largest * -np.expm1(-np.asarray(depth_m) * rate_db_per_m / largest)  # [P.833] 2.1


def mixed_forest_loss_db(depth_m: ArrayLike, carrier_hz: ArrayLike) -> Any:
    """Loss [dB] in the mixed forest of P.833, its rows interpolated to the carrier (own choice).

    References
    ----------
    [P.833] ITU-R P.833-10, 2.1 and Table 1.

    Examples
    --------
    >>> mixed_forest_loss_db(10.0, [1852.2e6, 1575.42e6]).round(2).tolist()
    [2.85, 2.49]
    """
    carrier = np.asarray(carrier_hz, dtype=float)
    rate_db_per_m = np.interp(carrier, FOREST_HZ, FOREST_DB_PER_M)
    return woodland_loss_db(depth_m, rate_db_per_m, np.interp(carrier, FOREST_HZ, FOREST_LARGEST_DB))


# By the names that a site file may choose. They take depth [m], carrier [Hz] and elevation [deg].
FOLIAGE_MODELS: dict[str, Callable[[ArrayLike, ArrayLike, ArrayLike], Any]] = {
    "P.833 slant path": slant_path_loss_db,
    "P.833 woodland": lambda depth_m, carrier_hz, elevation_deg: mixed_forest_loss_db(depth_m, carrier_hz),
    "Weissberger": lambda depth_m, carrier_hz, elevation_deg: weissberger_loss_db(depth_m, carrier_hz),
}


def leaves_loss_db(
    model: str,
    leaf: Literal["in-leaf", "leafless", "evergreen"],
    depth_m: ArrayLike,
    carrier_hz: ArrayLike,
    elevation_deg: ArrayLike,
) -> Any:
    """Loss [dB] by one of the models in a state of the leaves.

    Parameters
    ----------
    model : str
        A name of `FOLIAGE_MODELS`.
    leaf : str
        "in-leaf", "leafless" or "evergreen".
    depth_m, carrier_hz, elevation_deg : array
        Path through leaves [m], carrier [Hz] and elevation of the path [deg]; their shapes broadcast.

    Examples
    --------
    >>> [round(float(leaves_loss_db(name, "in-leaf", 10.0, 1575.42e6, 30.0)), 1) for name in FOLIAGE_MODELS]
    [9.3, 2.5, 5.1]
    """
    return leaf_factor(leaf) * FOLIAGE_MODELS[model](depth_m, carrier_hz, elevation_deg)


def leaf_factor(leaf: Literal["in-leaf", "leafless", "evergreen"]) -> float:
    """Loss [dB] in a state of the leaves over that in leaf; evergreen is always in leaf.

    Examples
    --------
    >>> round(leaf_factor("leafless"), 3)
    0.833
    """
    return LEAFLESS_SHARE if leaf == "leafless" else 1.0
