"""How much of the processor storing takes, against what importing one library takes on the same machine.

    python -m tests.benchmarks.write_path [ROUNDS]

Each figure is the least of some rounds of processor time, as other work on the machine only ever adds to it. The demo
fleet: goal 2.2 s on a machine where `import sqlmodel` takes 0.4 s, so a ratio of 5.5. A generated yard of 50 and of 100
engines: what one more costs, and whether a larger yard costs more for each (goal 1.2). The due list of a generated
yard of 500 engines, 5,000 lines, from start to end: goal 3 s.
"""

import os
import resource
import subprocess
import sys
import time
from datetime import date
from pathlib import Path
from tempfile import TemporaryDirectory

from fleetcare.demo.build import build

ON = date(2026, 5, 1)


def built(folder: str, engines: int | None = None) -> tuple[float, Path]:
    """Build a yard, the demo fleet where no size is named; give the processor's seconds and the file."""
    out = Path(folder, f"{time.perf_counter_ns()}.db")
    begun = time.process_time()
    build(out, ON, engines)
    return time.process_time() - begun, out


def processor(*command: str) -> float:
    """Run Python to the end, its output thrown away, and give the processor's seconds."""
    before = resource.getrusage(resource.RUSAGE_CHILDREN)
    subprocess.run([sys.executable, *command], check=True, stdout=subprocess.DEVNULL)
    after = resource.getrusage(resource.RUSAGE_CHILDREN)
    return after.ru_utime + after.ru_stime - before.ru_utime - before.ru_stime


def main() -> None:
    """Measure and print."""
    rounds = int(sys.argv[1]) if len(sys.argv) > 1 else 5
    with TemporaryDirectory() as folder:
        built(folder, 1)  # loads what a first write loads
        library = min(processor("-c", "import sqlmodel") for _ in range(rounds))
        demo = min(built(folder)[0] for _ in range(rounds))
        small, large = (min(built(folder, engines)[0] for _ in range(rounds)) for engines in (50, 100))
        path = built(folder, 500)[1]
        due = ("-m", "fleetcare", "--db", str(path), "--as-of", ON.isoformat(), "due", "--format", "csv")
        listed = min(processor(*due) for _ in range(rounds))
    lines = [
        f"least of {rounds} rounds, {os.cpu_count()} cores, Python {sys.version.split()[0]}, all of the processor",
        f"import sqlmodel           {library:.2f} s",
        f"the demo fleet            {demo:.2f} s, ratio {demo / library:.1f}, goal 5.5",
        f"one more generated engine {(large - small) / 50 * 1000:.0f} ms; of 100 against of 50: {large / small / 2:.2f} each, goal 1.2",
        f"due list of 5,000 lines   {listed:.2f} s, goal 3",
    ]
    sys.stdout.write("\n".join(lines) + "\n")


if __name__ == "__main__":
    main()
