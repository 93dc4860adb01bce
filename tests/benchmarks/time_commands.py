"""Time whole commands against processes that only import what they need; print ratios and peak memory.

Run with ``python tests/benchmarks/time_commands.py [--quick]``. Nothing here fails on a time.
"""

import argparse
import os
import statistics
import subprocess
import sys
import tempfile
import time
from pathlib import Path

IMPORT_CLICK = "import click"
IMPORT_NUMPY = "import numpy"
EMPTY_POLAR_PLOT = (
    "import numpy, shapely, pyproj, io; from matplotlib import pyplot as plt; "
    "plt.subplot(projection='polar'); plt.savefig(io.BytesIO(), format='svg')"
)
PEAK_MEMORY = (
    "import resource, subprocess, sys; subprocess.run(sys.argv[1:], check=True, stdout=subprocess.DEVNULL); "
    "print(resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss // 1024)"
)


def median_seconds(command: list[str], repeats: int) -> float:
    def once() -> float:
        begun = time.perf_counter()
        subprocess.run(command, check=True, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        return time.perf_counter() - begun

    once()  # fills the file cache, writes byte code
    return statistics.median(once() for _ in range(repeats))


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="one repeat each")
    repeats = 1 if parser.parse_args().quick else 9
    os.environ["MPLBACKEND"] = "agg"
    os.environ.pop("PYTHONDONTWRITEBYTECODE", None)  # an installed package has its byte code
    siteassess = [sys.executable, "-m", "siteassess"]
    with tempfile.TemporaryDirectory() as folder:
        site = str(Path(folder) / "site")
        subprocess.run([*siteassess, "new", site], check=True, stderr=subprocess.DEVNULL)
        rows = [
            ("siteassess --help", [*siteassess, "--help"], IMPORT_CLICK, 2.0),
            ("assess --json", [*siteassess, "assess", site, "--json"], IMPORT_NUMPY, 5.0),
            ("assess, all outputs", [*siteassess, "assess", site, "--quiet"], EMPTY_POLAR_PLOT, 2.3),
        ]
        print(f"{'command':<22}{'seconds':>9}{'yardstick':>11}{'ratio':>8}{'aim':>6}{'peak MB':>9}")
        for name, command, yardstick, aim in rows:
            own, other = (
                median_seconds(command, repeats),
                median_seconds([sys.executable, "-c", yardstick], repeats),
            )
            peak = subprocess.run(
                [sys.executable, "-c", PEAK_MEMORY, *command], check=True, capture_output=True, text=True
            ).stdout.strip()
            print(f"{name:<22}{own:>9.3f}{other:>11.3f}{own / other:>8.2f}{aim:>6.1f}{peak:>9}")


if __name__ == "__main__":
    main()
