"""Shipped schedules are whole and sourced; a file not in form says what is wrong, in which task and field."""

from pathlib import Path

import pytest

from fleetcare.domain.schedules import DRAIN
from fleetcare.drafts.schedules import read_tasks
from fleetcare.errors import FleetError, Refused
from fleetcare.rulebook.schedules import Schedule, find_schedule, is_file_name, shipped_schedules

SHIPPED = shipped_schedules()
COMMON = [schedule for schedule in SHIPPED if schedule.source == "common practice, verify against the manual"]

README = Path(__file__).parents[2] / "README.md"

HEAD = 'name = "Ditch pumps"\nsource = "workshop book"\nnote = "Check against the manual."\n'
TASK = '[[task]]\nname = "Oil"\nevery = "250h"\n'


def _name(schedule: Schedule) -> str:
    return schedule.id


@pytest.mark.parametrize("schedule", SHIPPED, ids=_name)
def test_a_shipped_schedule_reads_as_tasks_that_could_be_added_one_by_one(schedule: Schedule) -> None:
    assert [draft.name for draft in read_tasks(schedule)] == [task["name"] for task in schedule.tasks]


@pytest.mark.parametrize("schedule", SHIPPED, ids=_name)
def test_a_shipped_schedule_says_that_it_is_a_default_to_be_checked(schedule: Schedule) -> None:
    assert "default" in schedule.note
    assert "maker's manual, local codes and law" in schedule.note


@pytest.mark.parametrize("schedule", SHIPPED, ids=_name)
def test_every_shipped_task_has_a_work_kind_a_caution_and_a_source(schedule: Schedule) -> None:
    assert [d.name for d in read_tasks(schedule) if not (d.work and d.caution and d.source)] == []


@pytest.mark.parametrize("schedule", SHIPPED, ids=_name)
def test_only_the_oil_of_an_engine_is_work_of_the_kind_that_an_oil_sample_ends_with(schedule: Schedule) -> None:
    drained = [draft.name for draft in read_tasks(schedule) if draft.work == DRAIN]
    assert all(name.split()[0] == "Oil" for name in drained)
    assert schedule.is_for_engines or not drained


def test_the_other_fluids_of_shipped_schedules_are_kinds_of_work_of_their_own() -> None:
    kinds = {draft.name: draft.work for schedule in SHIPPED for draft in read_tasks(schedule)}
    told = {
        "Coolant change": "coolant",
        "Gearbox and axle oil": "gear-oil",
        "Reverse gear oil": "gear-oil",
        "Tank water drained": "fuel",
    }
    assert {name: kinds[name] for name in told} == told
    named = {name for name in kinds if any(word in name.lower() for word in ("oil", "coolant", "drain"))}
    assert {name for name in named if kinds[name] != DRAIN} == {*told}


def test_the_readme_names_every_kind_of_work_of_shipped_schedules() -> None:
    kinds = {draft.work for schedule in SHIPPED for draft in read_tasks(schedule)}
    assert [kind for kind in sorted(kinds) if f"`{kind}`" not in README.read_text(encoding="utf-8")] == []


def test_general_schedules_cover_the_engines_of_a_mixed_yard_and_claim_no_more_than_common_practice() -> None:
    names = {"diesel-genset", "lorry", "lorry-diesel", "petrol-utility", "pump-diesel", "workboat-diesel"}
    assert {schedule.id for schedule in COMMON} == names
    assert not any(draft.law or draft.insurer for schedule in COMMON for draft in read_tasks(schedule))


@pytest.mark.parametrize("schedule", [s for s in COMMON if s.is_for_engines], ids=_name)
def test_valve_lash_of_a_general_schedule_closes_with_its_sheet_and_comes_early_the_first_time(
    schedule: Schedule,
) -> None:
    (lash,) = (draft for draft in read_tasks(schedule) if draft.work == "lash")
    assert (lash.needs_sheet, bool(lash.first)) == ("lash", True)


@pytest.mark.parametrize("schedule", COMMON, ids=_name)
def test_the_yearly_service_of_a_general_schedule_covers_the_smaller_jobs(schedule: Schedule) -> None:
    (yearly,) = (draft for draft in read_tasks(schedule) if draft.name.startswith("Annual"))
    assert len(yearly.covers) >= 4


def test_a_lorry_and_its_engine_count_in_km_and_months_only() -> None:
    units = {
        str(interval).split()[1]
        for name in ("lorry", "lorry-diesel")
        for draft in read_tasks(find_schedule(name))
        for interval in draft.every
    }
    assert units <= {"km", "w", "mo"}


def test_item_4_of_a_table_is_listed_before_item_10() -> None:
    ids = [schedule.id for schedule in SHIPPED]
    assert ids.index("zzzz-2d-4") < ids.index("zzzz-2d-10")


def test_a_shipped_schedule_is_found_whatever_the_case() -> None:
    assert find_schedule("Diesel-GenSet").id == "diesel-genset"


def test_an_unknown_schedule_is_refused_with_the_nearest_names() -> None:
    with pytest.raises(Refused, match="no schedule 'diesel-gensett'; did you mean diesel-genset"):
        find_schedule("diesel-gensett")
    with pytest.raises(Refused, match="see fleetcare schedule list"):
        find_schedule("qqq")


@pytest.mark.parametrize("name", ["mine.toml", "MINE.TOML", "./mine", "yard\\mine"])
def test_a_name_with_a_folder_or_the_ending_toml_is_a_file(name: str) -> None:
    assert is_file_name(name)


def own(tmp_path: Path, text: str, encoding: str = "utf-8") -> str:
    """Write a schedule of the shop's own and give its name."""
    path = tmp_path / "ditch.toml"
    path.write_text(text, encoding=encoding)
    return str(path)


def test_a_task_without_a_source_of_its_own_has_that_of_its_schedule(tmp_path: Path) -> None:
    schedule = find_schedule(own(tmp_path, HEAD + TASK + TASK.replace("Oil", "Air") + 'source = "pump book"\n'))
    assert [task["source"] for task in schedule.tasks] == ["workshop book", "pump book"]


def test_a_file_saved_with_a_byte_order_mark_is_read(tmp_path: Path) -> None:
    assert find_schedule(own(tmp_path, HEAD + TASK, "utf-8-sig")).name == "Ditch pumps"


@pytest.mark.parametrize(
    ("text", "wrong"),
    [
        (HEAD, ": it has no tasks"),
        (HEAD + "task = []\n", ": it has no tasks"),
        (HEAD + 'task = ["Oil"]\n', ": it has no tasks"),
        (TASK, ": name is missing"),
        (HEAD + "fuel = 5\n" + TASK, ": fuel is 5; write text in quotes"),
        (HEAD + 'is_for_engines = "yes"\n' + TASK, ": is_for_engines is 'yes'; write true or false"),
        (HEAD + "every = '1w'\n" + TASK, ": every is not known here"),
        (HEAD + "[[task]]\nevery = '1w'\n", ", task 1: name is missing"),
        (HEAD + "[[task]]\nname = 7\nevery = '1w'\n", ", task 1: name is missing"),
        (HEAD + TASK + "evry = '1w'\n", ", task 'Oil': evry is not known here"),
        (HEAD + TASK + "last_done = '100h'\n", ", task 'Oil': last_done is not known here"),
        (HEAD + TASK + "labour = 1.5\n", ", task 'Oil': labour is 1.5; write text in quotes"),
        (HEAD + TASK + "law = 'yes'\n", ", task 'Oil': law is 'yes'; write true or false"),
        (HEAD + TASK + "grace = ['10h', 3]\n", ", task 'Oil': grace is 3; write text in quotes, or a list"),
        (HEAD + TASK + "covers = 'Air'\n", ", task 'Oil': covers 'Air', which is no task above it"),
        (HEAD + TASK + "covers = ['Oil']\n", ", task 'Oil': covers 'Oil', which is no task above it"),
        (HEAD + TASK + TASK.replace("Oil", "oil "), ", task 'oil ': the name is taken by a task above it"),
        (HEAD + "[[task]\n", " is not TOML"),
    ],
)
def test_a_file_not_in_form_says_where_and_what(tmp_path: Path, text: str, wrong: str) -> None:
    name = own(tmp_path, text)
    with pytest.raises(Refused) as caught:
        find_schedule(name)
    assert str(caught.value).startswith(name + wrong)


@pytest.mark.parametrize(
    ("line", "wrong"),
    [
        ("every = '250'", "every: '250' has no unit"),
        ("every = '250 hours'", "every: '250 hours' has the unknown unit 'hours'"),
        ("first = '3mo'\nevery = '250h'", "--first 3 mo binds to no interval of this task"),
        ("ahead = '300h'\nevery = '250h'", "--ahead 300 h is not shorter than the interval of 250 h"),
        ("needs_sheet = 'oil change'\nevery = '250h'", "needs_sheet: "),
        ("law = true\ndeferrable = 'yes'\nevery = '250h'", "work required by law or insurer is never deferrable"),
        ("once_each = 'fortnight'", "once_each: "),
    ],
)
def test_a_task_that_cannot_be_is_refused_with_file_task_and_field(tmp_path: Path, line: str, wrong: str) -> None:
    name = own(tmp_path, f"{HEAD}[[task]]\nname = 'Oil'\n{line}\n")
    with pytest.raises(Refused) as caught:
        read_tasks(find_schedule(name))
    assert str(caught.value).startswith(f"{name}, task 'Oil': {wrong}")
    assert caught.value.exit_code == 1


def test_everything_wrong_with_a_file_is_told_at_once(tmp_path: Path) -> None:
    name = own(
        tmp_path, HEAD + TASK.replace("250h", "250") + TASK.replace("Oil", "Air") + "labour = '1km'\nwindow = 'x'"
    )
    with pytest.raises(FleetError) as caught:
        read_tasks(find_schedule(name))
    assert len(caught.value.lines()) == 3


def test_a_file_that_cannot_be_read_is_refused_in_one_line(tmp_path: Path) -> None:
    (tmp_path / "latin.toml").write_bytes(b'name = "L\xf6schpumpe"\n')
    with pytest.raises(Refused, match="is not UTF-8 text; save it as UTF-8"):
        find_schedule(str(tmp_path / "latin.toml"))
    with pytest.raises(Refused, match="No such file"):
        find_schedule(str(tmp_path / "none.toml"))
    with pytest.raises(Refused, match=r"cannot read .*; name a TOML file that can be read"):
        find_schedule(str(tmp_path) + "/")
