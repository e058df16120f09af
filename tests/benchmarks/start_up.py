"""How long the due list takes from start to end, against what loading one library costs.

    python -m tests.benchmarks.start_up [PAIRS]

Runs both in turn, A B A B, and prints medians and the median of the ratios pair by pair, then where
the time goes. The goal is a ratio of at most 1.25; the machine's drift cancels out in the pairs.
"""

import os
import subprocess
import sys
import time
from pathlib import Path
from statistics import median

DEMO = Path(__file__).parents[2] / "demo_fleet.db"
DUE = [sys.executable, "-m", "fleetcare", "--db", str(DEMO), "due", "--format", "csv"]
LIBRARY = [sys.executable, "-c", "import sqlmodel"]


def seconds(command: list[str]) -> float:
    """Give the time from start to end of a command, its output thrown away."""
    begun = time.perf_counter()
    subprocess.run(command, check=True, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    return time.perf_counter() - begun


def profile(most: int = 12) -> list[str]:
    """Give the dearest imports of the due list, cumulated microseconds first."""
    traced = subprocess.run(
        [sys.executable, "-X", "importtime", *DUE[1:]], check=True, capture_output=True, text=True, env=os.environ
    )
    rows = [line.removeprefix("import time:").split("|") for line in traced.stderr.splitlines() if "|" in line]
    costs = [(int(row[1]), row[2].strip()) for row in rows if row[1].strip().isdigit()]
    return [f"{cost / 1000:8.1f} ms  {name}" for cost, name in sorted(costs, reverse=True)[:most]]


def main() -> None:
    """Measure and print."""
    pairs = int(sys.argv[1]) if len(sys.argv) > 1 else 20
    for command in (DUE, LIBRARY):
        seconds(command)  # one run of each to warm the file cache
    times = [(seconds(DUE), seconds(LIBRARY)) for _ in range(pairs)]
    ratios = [due / library for due, library in times]
    lines = [
        f"{pairs} interleaved pairs, {os.cpu_count()} cores, Python {sys.version.split()[0]}",
        f"due list       median {median(due for due, _ in times):.3f} s",
        f"import sqlmodel median {median(library for _, library in times):.3f} s",
        f"ratio          median {median(ratios):.2f} ({min(ratios):.2f} to {max(ratios):.2f}), goal 1.25",
        "dearest imports, cumulated:",
        *profile(),
    ]
    sys.stdout.write("\n".join(lines) + "\n")


if __name__ == "__main__":
    main()
