"""Time the ranking of many sites: two processes against one, a further site against one alone; memory.

Run with ``python tests/benchmarks/time_rank.py [--quick]``. Nothing here fails on a time. What two processes
can gain on the machine at that moment is measured with plain NumPy beside it.
"""

import argparse
import subprocess
import sys
import tempfile
import time
from pathlib import Path

SITEASSESS = [sys.executable, "-m", "siteassess"]
PLAIN_NUMPY = """
import subprocess, sys
work = "import numpy as np; x = np.linspace(0, 1, 20000); [np.sin(x) for _ in range(int({loops}))]"
jobs = [subprocess.Popen([sys.executable, "-c", work]) for _ in range({jobs})]
assert not any(job.wait() for job in jobs)
"""
PEAK_MEMORY = (
    "import resource, subprocess, sys; subprocess.run(sys.argv[1:], check=True, stdout=subprocess.DEVNULL); "
    "print(resource.getrusage(resource.RUSAGE_CHILDREN).ru_maxrss // 1024)"
)


def write_sites(folder: Path, count: int) -> list[str]:
    """Starter sites, each with a name, a place and a general skyline of its own."""
    subprocess.run([*SITEASSESS, "new", str(folder / "starter")], check=True, stderr=subprocess.DEVNULL)
    site = (folder / "starter" / "site.toml").read_text(encoding="utf-8")
    horizon = (folder / "starter" / "horizon.csv").read_text(encoding="utf-8")
    sites = []
    for number in range(count):
        place = folder / f"spot_{number:03d}"
        place.mkdir()
        named = site.replace('name = "', f'name = "{number:03d} ', 1)
        (place / "site.toml").write_text(named, encoding="utf-8")
        columns = horizon.partition("\n")[0].count(",")
        shed = f"{number % 350},{5 + number % 30},40,shed" + "," * (columns - 3)
        wall = f"{number % 350 + 8},{5 + number % 30},40,shed" + "," * (columns - 3)
        (place / "horizon.csv").write_text(f"{horizon.rstrip()}\n{shed}\n{wall}\n", encoding="utf-8")
        sites.append(str(place))
    return sites


def seconds(command: list[str], repeats: int) -> float:
    """The shortest of several runs: what the machine can do when nobody else uses it."""

    def once() -> float:
        begun = time.perf_counter()
        subprocess.run(command, check=True, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        return time.perf_counter() - begun

    return min(once() for _ in range(repeats))


def peak_mb(command: list[str]) -> str:
    run = subprocess.run(
        [sys.executable, "-c", PEAK_MEMORY, *command], check=True, capture_output=True, text=True
    )
    return run.stdout.strip()


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--quick", action="store_true", help="a few sites, one repeat")
    quick = parser.parse_args().quick
    few, many, repeats = (2, 8, 1) if quick else (20, 200, 2)
    with tempfile.TemporaryDirectory() as folder:
        sites = write_sites(Path(folder), many)
        rank = [*SITEASSESS, "rank", "--json", "--quiet", "--jobs"]
        alone_s = seconds([*SITEASSESS, "assess", "--json", sites[0]], repeats + 2)
        few_s = seconds([*rank, "1", *sites[:few]], repeats)
        one_s, two_s = seconds([*rank, "1", *sites], repeats), seconds([*rank, "2", *sites], repeats)
        loops = 100 if quick else 12000
        plain_s = [
            seconds([sys.executable, "-c", PLAIN_NUMPY.format(loops=loops / jobs, jobs=jobs)], repeats)
            for jobs in (1, 2)
        ]
        further_s = {"1": (one_s - few_s) / (many - few), "2": two_s / many}
        lines = [
            ("assess --json", f"{alone_s:8.3f} s"),
            (f"rank --json of {many}, one process", f"{one_s:8.3f} s"),
            (f"rank --json of {many}, two processes", f"{two_s:8.3f} s"),
            ("one process / two processes", f"{one_s / two_s:8.2f}   aim: 1.7 at least"),
            ("the same of plain NumPy", f"{plain_s[0] / plain_s[1]:8.2f}"),
            ("a further site, one process / assess", f"{further_s['1'] / alone_s:8.2f}   aim: 0.6 at most"),
            ("a site, two processes / assess", f"{further_s['2'] / alone_s:8.2f}   aim: 0.6 at most"),
        ]
        for jobs in ("1", "2"):
            peaks = [peak_mb([*rank, jobs, *part]) for part in (sites[:few], sites)]
            lines.append(
                (f"peak MB of {few} and of {many} sites, {jobs} at a time", f"{' and '.join(peaks):>13}")
            )
        for name, figure in lines:
            print(f"{name:<44}{figure}")


if __name__ == "__main__":
    main()
