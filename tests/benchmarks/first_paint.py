"""How soon the screens stand, follow a change, and how little they do meanwhile.

    python -m tests.benchmarks.first_paint [PAIRS]

In a pseudo-terminal of 80 by 24: from process start until the last visible row of Due on demo_fleet.db is in the
terminal's output, against an empty Textual app that also imports sqlmodel, in turn, A B A B, so that the machine's
drift cancels out; goal 1.3. Then a list of 100,000 rows in memory against one of 100 (goal 1.2), the demo (goal 5 s), a
change made by another process (goal 2 s), and the processor's time while nothing happens (goal 2 %). Linux only.
"""

import asyncio
import fcntl
import os
import pty
import select
import shutil
import signal
import struct
import subprocess
import sys
import termios
import time
from collections.abc import Iterator
from contextlib import contextmanager
from datetime import date
from functools import partial
from pathlib import Path
from statistics import median
from tempfile import TemporaryDirectory

from fleetcare.context import Context
from fleetcare.tui.app import FleetApp
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.widgets.columns import Column, Section
from fleetcare.tui.widgets.long_list import LongList

DEMO = Path(__file__).parents[2] / "demo_fleet.db"
ON = "2026-05-01"
WIDTH, HEIGHT = 80, 24
PATIENCE = 60.0
EMPTY = """
import sqlmodel
from textual.app import App
from textual.widgets import Static
class Empty(App):
    def compose(self):
        yield Static("painted")
Empty().run()
"""


@contextmanager
def in_terminal(*command: str) -> Iterator[tuple[int, int, float]]:
    """Start a command in a pseudo-terminal; give its process id, the terminal, and the moment it was started."""
    environment = {**os.environ, "TERM": "xterm-256color", "COLORTERM": "truecolor"}
    begun = time.perf_counter()
    process, terminal = pty.fork()
    if process == 0:
        os.execvpe(command[0], command, environment)
    fcntl.ioctl(terminal, termios.TIOCSWINSZ, struct.pack("HHHH", HEIGHT, WIDTH, 0, 0))
    try:
        yield process, terminal, begun
    finally:
        os.kill(process, signal.SIGINT)  # and not SIGKILL: a demo takes its folder away
        read_away(terminal, 1)
        os.close(terminal)
        os.waitpid(process, 0)


def read_until(terminal: int, text: str, times: int = 1) -> float:
    """Read what a terminal is sent until some text is among it so many times, and give that moment."""
    wanted, got = text.encode(), b""
    end = time.perf_counter() + PATIENCE
    while got.count(wanted) < times:
        if not select.select([terminal], [], [], max(end - time.perf_counter(), 0))[0]:
            raise TimeoutError(f"{text!r} did not come within {PATIENCE:.0f} s")
        got += os.read(terminal, 65536)
    return time.perf_counter()


def read_away(terminal: int, seconds: float) -> None:
    """Read what a terminal is sent for some time, or until its program has ended."""
    end = time.perf_counter() + seconds
    while (left := end - time.perf_counter()) > 0:
        if select.select([terminal], [], [], left)[0]:
            try:
                os.read(terminal, 65536)
            except OSError:  # what Linux says of a terminal nobody holds any more
                return


def last_visible_task(database: Path) -> tuple[str, int]:
    """Give the task of the lowest row in sight, and how many times it stands on the screen."""

    async def look() -> tuple[str, int]:
        app = FleetApp(Context(str(database), date.fromisoformat(ON)))
        async with app.run_test(size=(WIDTH, HEIGHT)) as pilot:
            await app.workers.wait_for_complete()
            await pilot.pause()
            assert isinstance(app.screen, DueScreen)
            tasks = {line.row.task for line in app.screen.shown}
            strips = app.screen._compositor.render_strips(app.size)
            drawn = [segment.text.strip() for strip in strips for segment in strip]
        task = [text for text in drawn if text in tasks][-1]
        return task, "\n".join(drawn).count(task)

    return asyncio.run(look())


def paint(command: tuple[str, ...], text: str, times: int = 1) -> tuple[float, float]:
    """Give the seconds from the start of a command until a text is so often in its terminal's output.

    First those of the clock, then those of the processor, which other work on the machine drags out less.
    """
    with in_terminal(*command) as (process, terminal, begun):
        return read_until(terminal, text, times) - begun, _processor_seconds(process)


def fleetcare(*words: str) -> tuple[str, ...]:
    """Give the command line that runs this program."""
    return sys.executable, "-m", "fleetcare", *words


def paints(pairs: int) -> list[str]:
    """Measure the first paint against the empty app."""
    row, count = last_visible_task(DEMO)
    ours, empty = fleetcare("--db", str(DEMO), "--as-of", ON), (sys.executable, "-c", EMPTY)
    paint(ours, row, count), paint(empty, "painted")  # one of each to warm the file cache
    times = [(paint(ours, row, count), paint(empty, "painted")) for _ in range(pairs)]
    lines = [
        f"{pairs} interleaved pairs, {os.cpu_count()} cores, Python {sys.version.split()[0]}; last row in sight: {row}"
    ]
    for number, what in enumerate(("by the clock", "of the processor")):
        seconds = [(ours[number], empty[number]) for ours, empty in times]
        ratios = [ours / empty for ours, empty in seconds]
        lines += [
            f"{what}: due {median(s[0] for s in seconds):.3f} s, empty app + sqlmodel {median(s[1] for s in seconds):.3f} s",
            f"  ratio {median(ratios):.2f} ({min(ratios):.2f} to {max(ratios):.2f}), goal 1.3",
        ]
    return lines


def lists(rounds: int = 200) -> list[str]:
    """Measure what showing and drawing a list costs, with 100,000 rows in memory and with 100, in turn."""
    columns: list[Column[tuple[int, str]]] = [
        Column("NUMBER", lambda row: str(row[0]), 6, 10, to_right=True),
        Column("TASK", lambda row: row[1], 10, 40),
    ]
    few, many = ([(n, f"task {n}") for n in range(count)] for count in (100, 100_000))

    async def measure() -> list[tuple[float, float]]:
        app = FleetApp(Context(str(DEMO), date.fromisoformat(ON)))
        async with app.run_test(size=(WIDTH, HEIGHT)) as pilot:
            rows: LongList[tuple[int, str]] = LongList(columns, lambda row: row[0])
            await app.screen.mount(rows)
            await pilot.pause()
            return [(_drawn(rows, few), _drawn(rows, many)) for _ in range(rounds)]

    times = asyncio.run(measure())
    ratio = median(many / few for few, many in times)
    return [f"100,000 rows against 100: {median(t[1] for t in times) * 1000:.2f} ms, ratio {ratio:.2f}, goal 1.2"]


def _drawn(rows: LongList[tuple[int, str]], values: list[tuple[int, str]]) -> float:
    rows.show([])
    begun = time.process_time()
    rows.show([Section("", values)])
    for y in range(rows.size.height):
        rows.render_line(y)
    return time.process_time() - begun


def demo() -> list[str]:
    """Measure the private copy of the demo fleet, until its due list stands."""
    seconds, _ = paint(fleetcare("demo", "--as-of", ON), "OVERDUE")
    return [f"fleetcare demo: {seconds:.2f} s, goal 5"]


def following() -> list[str]:
    """Measure how soon a change by another process shows, and the processor's time while nothing changes."""
    with TemporaryDirectory() as folder:
        copy = Path(shutil.copy(DEMO, folder))
        place = ("--db", str(copy), "--as-of", ON)
        with in_terminal(*fleetcare(*place)) as (process, terminal, _):
            read_until(terminal, *last_visible_task(copy))
            read_away(terminal, 2)
            before = _processor_seconds(process)
            read_away(terminal, 20)
            idle = (_processor_seconds(process) - before) / 20
            subprocess.run(fleetcare(*place, "setting", "shop-name", "Sedge Hen"), check=True, capture_output=True)
            changed = time.perf_counter()
            delay = read_until(terminal, "Sedge Hen") - changed
    return [f"a change shows after {delay:.2f} s, goal 2", f"idle: {idle:.2%} of a processor, goal 2 %"]


def _processor_seconds(process: int) -> float:
    fields = Path(f"/proc/{process}/stat").read_text().rpartition(")")[2].split()
    return (int(fields[11]) + int(fields[12])) / os.sysconf("SC_CLK_TCK")


def main() -> None:
    """Measure and print, each as soon as it is known."""
    pairs = int(sys.argv[1]) if len(sys.argv) > 1 else 20
    for measure in (partial(paints, pairs), lists, following, demo):
        sys.stdout.write("\n".join(measure()) + "\n")
        sys.stdout.flush()


if __name__ == "__main__":
    main()
