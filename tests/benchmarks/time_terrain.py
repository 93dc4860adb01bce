"""Time the skyline of an elevation raster against one pass of sine, cosine, arctangent and square root.

The pass runs over 345 600 numbers. Reading and placing the raster is left out. Run with
``python tests/benchmarks/time_terrain.py [--quick]``. Nothing here fails on a time.
"""

import argparse
import time
from collections.abc import Callable

import numpy as np

from siteassess.horizon.terrain.height_grid import MISSING_M, HeightGrid
from siteassess.horizon.terrain.read import terrain_skyline

CELL_M = 30.0
YARDSTICK = np.linspace(0.1, 3.0, 345_600)
AIM = 1.5


def invented_hills(cells: int, roughness: float) -> np.ndarray:
    """Ground of 400 m of relief, one standard deviation; its spectrum falls with a power of the frequency."""
    frequency = np.hypot(np.fft.fftfreq(cells)[:, None], np.fft.rfftfreq(cells)[None, :])
    frequency[0, 0] = np.inf
    random = np.random.default_rng(1)
    waves = (
        random.normal(size=frequency.shape) + 1j * random.normal(size=frequency.shape)
    ) / frequency**roughness
    height_m = np.fft.irfft2(waves, (cells, cells))
    return 400.0 * height_m / height_m.std()


def grid_about(height_m: np.ndarray, row: int, column: int) -> HeightGrid:
    terms = np.zeros((2, 2, 2))
    terms[:, 0, 0] = column + 1.0, row + 1.0
    terms[0, 1, 0], terms[1, 0, 1] = 1000.0 / CELL_M, -1000.0 / CELL_M
    framed = np.pad(height_m, 1, constant_values=MISSING_M).astype(np.float32)
    return HeightGrid(height_m=framed, terms=terms, unit_m=1000.0, cell_m=CELL_M)


def best_seconds(work: Callable[[], object], repeats: int) -> float:
    def once() -> float:
        begun = time.perf_counter()
        work()
        return time.perf_counter() - begun

    return min(once() for _ in range(repeats))


def yardstick() -> None:
    np.sin(YARDSTICK), np.cos(YARDSTICK), np.arctan2(YARDSTICK, YARDSTICK[::-1]), np.sqrt(YARDSTICK)


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="a small raster, one repeat each")
    quick = parser.parse_args().quick
    cells, repeats = (400, 1) if quick else (2000, 25)
    print(f"{'work':<36}{'ms':>8}{'yardstick':>11}{'ratio':>8}{'aim':>6}")
    for name, roughness in (("smooth hills", 2.5), ("rough hills", 2.0)):
        height_m = invented_hills(cells, roughness)
        inner = slice(cells * 3 // 10, cells * 7 // 10)
        for place, found in (("valley", np.argmin), ("ridge", np.argmax)):
            row, column = np.unravel_index(found(height_m[inner, inner]), height_m[inner, inner].shape)
            row, column = int(row) + inner.start, int(column) + inner.start
            grid, eye_m = grid_about(height_m, row, column), float(height_m[row, column]) + 2.0
            own = best_seconds(
                lambda grid=grid, eye_m=eye_m: terrain_skyline((grid,), eye_m, 100.0, CELL_M * cells / 2.0),
                repeats,
            )
            other = best_seconds(yardstick, repeats)
            work = f"{cells} x {cells} cells, {name}, {place}"
            print(f"{work:<36}{own * 1e3:>8.1f}{other * 1e3:>11.1f}{own / other:>8.2f}{AIM:>6.1f}")


if __name__ == "__main__":
    main()
