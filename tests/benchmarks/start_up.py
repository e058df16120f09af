"""How long the due list takes from start to end, against what loading one library costs.

    python -m tests.benchmarks.start_up [PAIRS]

Runs both in turn, A B A B, and prints medians and the median of the ratios pair by pair, by the clock and by the
processor, then where the time goes. The goal is a ratio of at most 1.25; the machine's drift cancels out in the pairs.
Both have their modules compiled beforehand, as an installed program has.
"""

import os
import resource
import subprocess
import sys
import time
from pathlib import Path
from statistics import median
from tempfile import TemporaryDirectory

DEMO = Path(__file__).parents[2] / "demo_fleet.db"
DUE = [sys.executable, "-m", "fleetcare", "--db", str(DEMO), "due", "--format", "csv"]
LIBRARY = [sys.executable, "-c", "import sqlmodel"]


def installed(folder: str) -> dict[str, str]:
    """Give an environment in which modules are compiled once, into a folder, whatever holds in this one."""
    here = {name: value for name, value in os.environ.items() if name != "PYTHONDONTWRITEBYTECODE"}
    return {**here, "PYTHONPYCACHEPREFIX": folder}


def seconds(command: list[str], environment: dict[str, str]) -> tuple[float, float]:
    """Give the seconds a command takes by the clock, and those of the processor; its output is thrown away."""
    before, begun = resource.getrusage(resource.RUSAGE_CHILDREN), time.perf_counter()
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL, env=environment)
    ended, after = time.perf_counter(), resource.getrusage(resource.RUSAGE_CHILDREN)
    return ended - begun, after.ru_utime + after.ru_stime - before.ru_utime - before.ru_stime


def profile(environment: dict[str, str], most: int = 12) -> list[str]:
    """Give the dearest imports of the due list, cumulated microseconds first."""
    traced = subprocess.run(
        [sys.executable, "-X", "importtime", *DUE[1:]], check=True, capture_output=True, text=True, env=environment
    )
    rows = [line.removeprefix("import time:").split("|") for line in traced.stderr.splitlines() if "|" in line]
    costs = [(int(row[1]), row[2].strip()) for row in rows if row[1].strip().isdigit()]
    return [f"{cost / 1000:8.1f} ms  {name}" for cost, name in sorted(costs, reverse=True)[:most]]


def main() -> None:
    """Measure and print."""
    pairs = int(sys.argv[1]) if len(sys.argv) > 1 else 20
    with TemporaryDirectory() as folder:
        environment = installed(folder)
        for command in (DUE, LIBRARY):
            seconds(command, environment)  # one run of each compiles, and warms the file cache
        times = [(seconds(DUE, environment), seconds(LIBRARY, environment)) for _ in range(pairs)]
        dearest = profile(environment)
    lines = [f"{pairs} interleaved pairs, {os.cpu_count()} cores, Python {sys.version.split()[0]}"]
    for number, what in enumerate(("by the clock", "of the processor")):
        found = [(due[number], library[number]) for due, library in times]
        ratios = [due / library for due, library in found]
        lines += [
            f"{what}: due list {median(due for due, _ in found):.3f} s,"
            f" import sqlmodel {median(library for _, library in found):.3f} s",
            f"  ratio {median(ratios):.2f} ({min(ratios):.2f} to {max(ratios):.2f}), goal 1.25",
        ]
    sys.stdout.write("\n".join([*lines, "dearest imports, cumulated:", *dearest]) + "\n")


if __name__ == "__main__":
    main()
