"""Writes the invented landscape of example_sites/ridge_mast as an elevation raster.

Run it from the project folder:

    python tests/builders/build_ridge_terrain.py
"""

from pathlib import Path

import numpy as np
from numpy.typing import ArrayLike, NDArray

RASTER = Path("example_sites/ridge_mast/ground.tif")
CRS = "EPSG:32631"
EASTING_M, NORTHING_M = 500_000.0, 6_762_000.0  # of the mast
CELL_M, CELLS = 60.0, 200
STEP_M = 0.1  # heights are whole numbers of it


def ground_m(east_m: ArrayLike, north_m: ArrayLike) -> NDArray[np.float64]:
    """Height of the ground, from the mast: a knoll, a ridge to the north-west, a valley behind."""
    x, y = np.asarray(east_m) / 1000.0, np.asarray(north_m) / 1000.0
    toward_nw, along = (y - x) / np.sqrt(2.0), (x + y) / np.sqrt(2.0)
    knoll = 90.0 * np.exp(-(x**2 + y**2) / 0.5)
    ridge = 400.0 * np.exp(-(((toward_nw - 2.4) / 0.6) ** 2)) * (1.0 + 0.22 * np.cos(2.1 * along + 0.6))
    summit = 330.0 * np.exp(-((x + 3.1) ** 2 + (y - 0.6) ** 2) / 0.5)
    valley = -170.0 * np.exp(-(((toward_nw + 2.6) / 1.1) ** 2))
    far_side = 240.0 * np.exp(-(((toward_nw + 5.0) / 0.7) ** 2)) * (1.0 + 0.3 * np.sin(1.7 * along))
    swell = 9.0 * np.sin(2.3 * x + 0.4) * np.cos(1.9 * y)
    return np.asarray(430.0 + knoll + ridge + summit + valley + far_side + swell)


def main() -> None:
    import rasterio
    from rasterio.transform import Affine

    half_m = 0.5 * CELLS * CELL_M
    middle_m = (np.arange(CELLS) + 0.5) * CELL_M - half_m
    height_m = ground_m(middle_m[None, :], -middle_m[:, None])
    with rasterio.open(
        RASTER,
        "w",
        driver="GTiff",
        crs=CRS,
        transform=Affine(CELL_M, 0.0, EASTING_M - half_m, 0.0, -CELL_M, NORTHING_M + half_m),
        width=CELLS,
        height=CELLS,
        count=1,
        dtype="int16",
        compress="deflate",
        predictor=2,
        zlevel=9,
    ) as raster:
        raster.write(np.round(height_m / STEP_M).astype(np.int16), 1)
        raster.scales, raster.offsets, raster.units = (STEP_M,), (0.0,), ("m",)


if __name__ == "__main__":
    main()
