"""The shortest honest start, word for word as the design gives it, on the day of whoever runs it."""

import csv
import io
import shlex
from pathlib import Path

from tests.cli.conftest import Runner

START = r"""
    fleetcare --db t.db engine add P-01 --site "North Sluice" --cylinders 6 --firing-order 1-5-3-6-2-4 \
              --fuel diesel --meter hours --in-service 2024-01-10 --start-at 0 --as-new
    fleetcare --db t.db task add P-01 "Oil and filter" --every 250h --every 12mo --ahead 25h --ahead 30d
    fleetcare --db t.db task add P-01 "Valve lash" --every 1000h --first 50h --grace 10h --anchor from-due --needs-sheet lash
    fleetcare --db t.db reading P-01 1250 --on 2026-05-01
    fleetcare --db t.db log P-01 "Oil and filter" --on 2026-04-20 --at 1234h --by "Fenn"
    fleetcare --db t.db --as-of 2026-05-01 due --format csv
"""


def test_the_six_lines_of_the_start_end_in_a_due_list(fleetcare: Runner, tmp_path: Path) -> None:
    commands = [line for line in START.replace("\\\n", " ").splitlines() if line.strip()]
    assert len(commands) == 6
    for command in commands:
        words = shlex.split(command.replace("t.db", str(tmp_path / "t.db")))[1:]
        ran = fleetcare(*words)
        assert (ran.status, ran.err) == (0, ""), command
    lash, oil = csv.DictReader(io.StringIO(ran.out, newline=""))
    dates = ("early_date", "likely_date", "late_date")
    assert {name: value for name, value in lash.items() if value} == {
        "engine": "P-01", "site": "North Sluice", "task": "Valve lash", "state": "overdue", "trigger": "hours",
        "next_due_at": "50", "remaining": "-1200", "unit": "h", "engine_status": "in service", "meter_unit": "h",
        "next_due_dial": "50", "own_due_at": "50",
    }  # fmt: skip
    assert {name: value for name, value in oil.items() if value and name not in dates} == {
        "engine": "P-01", "site": "North Sluice", "task": "Oil and filter", "state": "clear", "trigger": "hours",
        "last_done_on": "2026-04-20", "last_done_at": "1234", "next_due_at": "1484", "next_due_on": "2027-04-20",
        "remaining": "234", "unit": "h", "engine_status": "in service", "meter_unit": "h", "next_due_dial": "1484",
        "own_due_at": "1484", "own_due_on": "2027-04-20",
    }  # fmt: skip
    assert "2026-05-01" < oil["early_date"] <= oil["likely_date"] <= oil["late_date"]
