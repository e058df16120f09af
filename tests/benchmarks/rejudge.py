"""What judging every sheet of a fleet anew costs, against loading the same sheets as facts.

    python -m tests.benchmarks.rejudge [ENGINES] [PAIRS]

A generated yard of 500 engines with 26 sheets each, of every kind: lash, compression, leak-down, runs, spot readings and
oil samples of 20 values. One sheet in ten is odd: a third of its values lie past a limit. Loading and re-judging (which loads as well) are timed in turn,
A B A B, by the processor's time; goal: at most 4 times. The profile of one more re-judging follows.
"""

import cProfile
import pstats
import sqlite3
import sys
import time
from collections.abc import Callable, Iterator
from contextlib import closing
from datetime import date, timedelta
from pathlib import Path
from random import Random
from statistics import median
from tempfile import TemporaryDirectory

from fleetcare.context import Context
from fleetcare.demo.build import build
from fleetcare.operations.families import Families
from fleetcare.operations.judged import judge_anew
from fleetcare.operations.judged_rows import sheet_owners
from fleetcare.operations.measured import load_engine_sheets

ON = date(2026, 5, 1)
_AT_ONCE = 20
_OIL = {
    "Fe": (30, 120), "Cr": (2, 15), "Al": (6, 30), "Cu": (8, 40), "Pb": (3, 20), "Sn": (2, 12), "Si": (6, 40),
    "Na": (8, 120), "K": (4, 60), "B": (20, 60), "Mo": (40, 60), "Ca": (2000, 2400), "Zn": (1100, 1300), "P": (900, 1100),
}  # fmt: skip
Value = tuple[str, str, str, float | str, str]


def sheets(dice: Random, cylinders: int) -> Iterator[tuple[str, int, list[Value]]]:
    """Make up the sheets of an engine: kind, days before the day, values."""

    share = 0.0  # of the values of the sheet now made up that are odd

    def near(usual: float, odd: float, digits: int = 1) -> float:
        return round((odd if dice.random() < share else usual) * dice.uniform(0.97, 1.03), digits)

    def next_sheet() -> None:
        nonlocal share
        share = 0.33 if dice.random() < 0.1 else 0.0

    points = [str(number) for number in range(1, cylinders + 1)]
    for number in range(8):
        next_sheet()
        oil: list[Value] = [(name, "", "", near(*pair), "ppm") for name, pair in _OIL.items()]
        oil += [("hours_on_oil", "", "", near(200, 240), "h"), ("water", "", "", near(0.05, 0.4, 2), "%")]
        oil += [("fuel", "", "", near(0.5, 5), "%"), ("soot", "", "", near(1, 5), "%")]
        oil += [("kv100", "", "", near(14.5, 11), "mm2/s"), ("tbn", "", "", near(8, 3), "mg KOH/g")]
        yield "oil", 60 + 120 * number, oil
    for number in range(4):
        next_sheet()
        lash = [(one + side, *pair) for one in points for side, pair in (("I", (0.25, 0.15)), ("E", (0.45, 0.35)))]
        gaps: list[Value] = [("lash", one, "found", near(usual, odd, 2), "mm") for one, usual, odd in lash]
        yield "lash", 50 + 250 * number, gaps
        next_sheet()
        yield "compression", 51 + 250 * number, [("pressure", one, "dry", near(2700, 1900), "kPa") for one in points]
        next_sheet()
        run: list[Value] = [("minutes", "", "", near(40, 20), "min"), ("load", "", "", near(45, 20), "%")]
        yield "run", 20 + 90 * number, [*run, ("purpose", "", "", "test", "")]
        next_sheet()
        spot: list[Value] = [("oil_pressure", "", "", near(250, 90), "kPa"), ("coolant", "", "", near(85, 105), "°C")]
        yield "spot", 10 + 60 * number, spot
    for number in range(2):
        next_sheet()
        yield "leakdown", 52 + 400 * number, [("leak", one, "", near(6, 28), "%") for one in points]


def fill(path: Path) -> int:
    """Write made-up sheets for every engine of a file, behind the ledger's back; give how many."""
    dice = Random(20260501)
    count = 0
    with closing(sqlite3.connect(path)) as connection, connection:
        engines = connection.execute("select item_id, coalesce(cylinders, 4) from engine order by item_id").fetchall()
        for item, cylinders in engines:
            for kind, days, values in sheets(dice, cylinders):
                count += 1
                on = (ON - timedelta(days=days)).isoformat()
                entry = connection.execute(
                    'insert into log_entry (uid, recorded_at, item_id, "on", kind, title, note, component, litres_unit,'
                    " is_void, why) values (?, ?, ?, ?, 'other', '', '', '', '', 0, '')",
                    (f"e{count}", on, item, on),
                ).lastrowid
                sheet = connection.execute(
                    "insert into sheet (uid, recorded_at, item_id, entry_id, kind, taken_on, conditions, gauge, lab_number)"
                    " values (?, ?, ?, ?, ?, ?, 'cold', '', '')",
                    (f"s{count}", on, item, entry, kind, on),
                ).lastrowid
                connection.executemany(
                    "insert into sheet_value (uid, recorded_at, sheet_id, quantity, point, phase, value, qualifier, unit)"
                    " values (?, ?, ?, ?, ?, ?, ?, ?, ?)",
                    [
                        (f"v{count}-{place}", on, sheet, quantity, point, phase, *_stored(value), unit)
                        for place, (quantity, point, phase, value, unit) in enumerate(values)
                    ],
                )
    return count


def _stored(value: float | str) -> tuple[str | None, str]:
    """Give a value and a qualifier as the table has them: of a word only the latter."""
    return (None, value) if isinstance(value, str) else (str(value), "")


def load(context: Context) -> None:
    """Load all sheets as facts, in the same batches re-judging takes."""
    with context.read() as connection:
        owners, families = sheet_owners(connection), Families(connection, ON)
        for begin in range(0, len(owners), _AT_ONCE):
            load_engine_sheets(connection, ON, owners[begin : begin + _AT_ONCE], families=families)


def rejudge(context: Context) -> None:
    """Judge all of them anew."""
    with context.read() as connection:
        judge_anew(connection, ON, ())


def timed(work: Callable[[Context], None], context: Context) -> float:
    """Give the processor's seconds some work takes."""
    begun = time.process_time()
    work(context)
    return time.process_time() - begun


def main() -> None:
    """Measure and print."""
    engines, pairs = (*map(int, sys.argv[1:]), *(500, 5)[len(sys.argv) - 1 :])
    with TemporaryDirectory() as folder:
        path = Path(folder, "yard.db")
        build(path, ON, engines)
        count = fill(path)
        context = Context(str(path), ON)
        rejudge(context)  # loads what a first judging loads
        both = [(timed(load, context), timed(rejudge, context)) for _ in range(pairs)]
        profile = cProfile.Profile()
        profile.runcall(rejudge, context)
    loaded, judged = (median(times) for times in zip(*both, strict=True))
    ratio = median(judging / loading for loading, judging in both)
    sys.stdout.write(
        f"{engines} engines, {count} sheets, {pairs} pairs\n"
        f"loaded as facts  {loaded:.2f} s\nloaded, judged   {judged:.2f} s, ratio {ratio:.2f}, goal 4\n\n"
    )
    pstats.Stats(profile).sort_stats("cumulative").print_stats(25)


if __name__ == "__main__":
    main()
