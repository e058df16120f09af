"""A schedule written out of an engine's tasks gives another engine the same tasks."""

import tomllib
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.drafts.schedules import ScheduleOut
from fleetcare.errors import Refused
from fleetcare.operations.schedules_out import write_schedule
from fleetcare.rulebook.schedules import find_schedule
from tests.cli.conftest import set_up

YARD = """
engine add P-01 --cylinders 6 --meter hours --in-service 2024-01-10 --start-at 0 --as-new
task add P-01 "Small service" --every 250h --ahead 25h --part "Oil filter:1" --labour 1.5h --work drain
task add P-01 "Big service" --every 1000h --every 12mo --covers "Small service" --law --source "shop rule 7"
task add P-01 "Valve lash" --every 1000h --first 50h --grace 10h --anchor on-grid --grid-origin 0h --needs-sheet lash
task add P-01 "Head bolts" --every 50h --once
task add P-01 "Quote \\"odd\\"" --on-condition
engine add P-02 --meter hours --in-service 2024-01-10 --start-at 0
"""


@pytest.fixture
def yard(ctx: Context, db: Path) -> Context:
    """An engine with tasks of every kind, and one with none."""
    set_up(db, YARD)
    return ctx


def draft(path: Path, **changes: str) -> ScheduleOut:
    """Write the tasks of P-01 to a file."""
    return ScheduleOut(**{"tag": "P-01", "name": "Ours", "source": "shop rule 4", "file": str(path)} | changes)


def write(yard: Context, asked: ScheduleOut) -> str:
    """Write a schedule out, and give what is said of it."""
    with yard.read() as connection:
        return write_schedule(connection, asked, yard.today()).said[0]


def test_a_schedule_holds_each_recurring_task_with_its_options_smaller_jobs_first(
    yard: Context, tmp_path: Path
) -> None:
    path = tmp_path / "ours.toml"
    assert write(yard, draft(path)).startswith("4 tasks of P-01 written to")
    tasks = find_schedule(str(path)).tasks
    assert [task["name"] for task in tasks] == ["Small service", "Big service", "Valve lash", 'Quote "odd"']
    assert tasks[0]["every"] == ["250h"]
    assert (tasks[0]["ahead"], tasks[0]["part"], tasks[0]["labour"]) == (["25h"], ["Oil filter:1"], "1.5h")
    assert (tasks[1]["covers"], tasks[1]["law"], tasks[1]["source"]) == (["Small service"], True, "shop rule 7")
    assert (tasks[2]["needs_sheet"], tasks[2]["grace"], tasks[2]["first"]) == ("lash", ["10h"], ["50h"])
    assert "grid_origin" not in tasks[2]  # where one engine's grid begins is that engine's own


def test_a_schedule_written_out_is_written_out_alike_from_whoever_it_was_given_to(
    yard: Context, tmp_path: Path
) -> None:
    first, second = tmp_path / "first.toml", tmp_path / "second.toml"
    write(yard, draft(first))
    set_up(yard.path, f"schedule apply {first} P-02 --from start")
    write(yard, draft(second, tag="P-02"))
    assert tomllib.loads(first.read_text())["task"] == tomllib.loads(second.read_text())["task"]


def test_an_engine_without_tasks_a_file_of_another_name_and_a_missing_folder_are_refused(
    yard: Context, tmp_path: Path
) -> None:
    with pytest.raises(Refused, match="P-02 has no tasks to write down"):
        write(yard, draft(tmp_path / "x.toml", tag="P-02"))
    write(yard, draft(tmp_path / "ours.toml"))
    with pytest.raises(Refused, match="is a schedule of another name"):
        write(yard, draft(tmp_path / "ours.toml", name="Theirs"))
    with pytest.raises(Refused, match="cannot be written: No such file or directory"):
        write(yard, draft(tmp_path / "none" / "ours.toml"))
    assert [path.name for path in tmp_path.glob("*.toml")] == ["ours.toml"]
