"""What is there already and changes: nameplates, tasks, names of sites and people."""

from datetime import date

import pytest

from fleetcare.context import Context
from fleetcare.drafts.items import ItemChanges, RenameDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.tasks import TaskChanges, TaskEnd
from fleetcare.errors import Refused
from fleetcare.operations.editing import (
    enter_item_edit,
    enter_person_name,
    enter_site_name,
    enter_task_changes,
    enter_task_end,
)
from fleetcare.operations.find import find_item
from fleetcare.operations.listing import list_tasks
from fleetcare.operations.stored_items import item_as_typed
from fleetcare.operations.stored_tasks import task_as_typed
from fleetcare.operations.upkeep import check
from tests.operations.importing import TODAY, engine, machine, reading, task

PLATE = {
    "site": "North Sluice",
    "in_service": "2024-01-10",
    "start_at": "0",
    "meter": "hours",
    "meter_digits": "5.1",
    "cylinders": "6",
    "bore": "114.30",
    "lash_intake": "0.20-0.30",
    "lash_set_exhaust": "0.40",
    "lash_when": "cold",
}


def change(ctx: Context, tag: str, **values: str) -> list[str]:
    """Change a nameplate as a form does."""
    draft = read_draft(ItemChanges, {"tag": tag, **values})
    with ctx.write() as session:
        changes = {name: getattr(draft, name) for name in draft.model_fields_set - {"tag"}}
        return enter_item_edit(session, find_item(session.connection(), tag), changes, TODAY).sentences()


def restate(ctx: Context, name: str, on: str = "2026-05-01", **values: object) -> list[str]:
    """Change a task of P-01 as a form does."""
    with ctx.write() as session:
        draft = read_draft(TaskChanges, {"name": name, "on": on, **values})
        return enter_task_changes(session, "P-01", draft, TODAY).sentences()


def typed(ctx: Context, name: str, on: date = TODAY) -> dict[str, str]:
    """A task of P-01 as one would type it, what is not given left out."""
    with ctx.read() as connection:
        return {
            key: value for key, value in task_as_typed(connection, "P-01", name, on).items() if value not in ("", "no")
        }


def refused(ctx: Context, call: object) -> str:
    """What a change is refused with; nothing of it may be stored."""
    assert callable(call)
    before = check(ctx)
    with pytest.raises(Refused) as error:
        call()
    assert check(ctx) == before
    return str(error.value)


@pytest.fixture
def yard(ctx: Context) -> Context:
    """An engine with a nameplate and a task, in a pump house."""
    machine(ctx, "PH-1", site="north sluice")
    engine(ctx, "P-01", machine="PH-1", **PLATE)
    task(
        ctx, "P-01", "Oil", every="250h; 12mo", ahead="25h; 30d", grace="10h", part="Oil filter:1", labour="1.5h",
        last_done="2026-01-30; 1000h", work="drain",
    )  # fmt: skip
    return ctx


def test_a_nameplate_comes_back_as_it_was_typed(yard: Context) -> None:
    with yard.read() as connection:
        found = item_as_typed(connection, "p-01")
        given = {name: value for name, value in found.items() if value not in ("", "no")}
    wanted = {name: value for name, value in PLATE.items() if name != "meter"}
    assert given == wanted | {"site": "north sluice", "start_at": "0h", "meter_digits": "hours:5.1"}


def test_lash_figures_in_inches_come_back_in_inches(ctx: Context) -> None:
    engine(ctx, "P-01", lash_intake="0.008-0.012in", lash_set_intake="0.010in")
    with ctx.read() as connection:
        found = item_as_typed(connection, "P-01")
    assert (found["lash_intake"], found["lash_set_intake"]) == ("0.008-0.012in", "0.010in")


def test_of_a_machine_only_what_a_machine_has_comes_back(yard: Context) -> None:
    with yard.read() as connection:
        found = item_as_typed(connection, "PH-1")
    assert found.keys() == {"name", "site", "in_service", "as_new", "start_at", "meter_digits"}


def test_an_edit_is_held_against_what_stays(yard: Context) -> None:
    assert change(yard, "P-01", firing_order="1-5-3-6-2-4") == ["P-01 edited."]
    said = refused(yard, lambda: change(yard, "P-01", cylinders="4"))
    assert said.startswith("firing order 1-5-3-6-2-4 goes beyond the engine with cylinders 5, 6")


def test_an_edit_of_nothing_is_refused(yard: Context) -> None:
    assert refused(yard, lambda: change(yard, "P-01")).startswith("nothing to edit")


def test_a_first_day_may_move_back_before_the_meter_began(yard: Context) -> None:
    assert change(yard, "P-01", in_service="2023-12-01", start_at="0") == ["P-01 edited."]
    assert reading(yard, "P-01", "2023-12-24", "12")


def test_a_machine_is_edited_too(yard: Context) -> None:
    assert change(yard, "PH-1", name="Pump house", meter="starts") == ["PH-1 edited."]


def test_a_task_comes_back_as_it_was_typed(yard: Context) -> None:
    assert typed(yard, "oil") == {
        "every": "250h; 12mo",
        "ahead": "25h; 30d",
        "grace": "10h",
        "combine": "first",
        "part": "Oil filter:1",
        "labour": "1.5h",
        "last_done": "2026-01-30; 1000h",
        "work": "drain",
    }


def test_the_lists_of_a_changed_task_are_taken_whole(yard: Context) -> None:
    said = restate(yard, "Oil", every="200h", ahead="25h")
    assert said[0] == "Oil of P-01 changed from 2026-05-01."
    assert said[1].startswith("P-01  Oil: 1250 h")
    assert (typed(yard, "Oil")["every"], typed(yard, "Oil")["ahead"]) == ("200h", "25h")
    assert typed(yard, "Oil", date(2026, 4, 30))["every"] == "250h; 12mo"


def test_what_binds_to_an_interval_taken_away_is_named(yard: Context) -> None:
    said = refused(yard, lambda: restate(yard, "Oil", every="200h"))
    assert said == "--ahead 30 d binds to no interval of this task; add an --every counting calendar"


def test_what_is_cleared_of_a_task_is_gone(yard: Context) -> None:
    restate(yard, "Oil", cleared="grace; part; labour; work")
    assert typed(yard, "Oil").keys() == {"every", "ahead", "combine", "last_done"}


def test_a_task_that_now_pauses_says_what_ages_all_the_same(yard: Context) -> None:
    said = restate(yard, "Oil", pause_while_laid_up="yes")
    assert "Note: the calendar of Oil pauses while laid up; oil, coolant, belts and batteries age all the same." in said


def test_a_last_done_alone_makes_no_version(yard: Context) -> None:
    reading(yard, "P-01", "2026-03-01", "1100")
    assert restate(yard, "Oil", last_done="2026-02-02; 1010h")[0] == "Oil of P-01 changed."
    assert typed(yard, "Oil")["last_done"] == "2026-02-02; 1010h"


def test_a_grid_that_is_kept_goes_on_from_the_dial_it_was_given_at(yard: Context) -> None:
    task(yard, "P-01", "Book", every="250h", anchor="on-grid", grid_origin="100h")
    restate(yard, "Book", caution="hot")
    assert typed(yard, "Book")["grid_origin"] == "100h"
    restate(yard, "Book", cleared="grid_origin")
    assert "grid_origin" not in typed(yard, "Book")


def test_a_change_of_nothing_is_refused(yard: Context) -> None:
    assert refused(yard, lambda: restate(yard, "Oil")) == "nothing to edit; change what should be otherwise"


def test_a_task_ends_and_keeps_its_history(yard: Context) -> None:
    with yard.write() as session:
        said = enter_task_end(session, "P-01", TaskEnd(name="oil", on=TODAY), TODAY).sentences()
    assert said[0] == "Oil of P-01 ended on 2026-05-01; its history stays."
    with yard.read() as connection:
        assert list_tasks(connection, "P-01", TODAY) == []


def test_a_site_has_one_name_wherever_it_stands(yard: Context) -> None:
    with yard.write() as session:
        said = enter_site_name(session, RenameDraft(known="NORTH sluice", name="North Gate")).sentences()
    assert said == ["north sluice is called North Gate now."]
    with yard.read() as connection:
        assert {item_as_typed(connection, tag)["site"] for tag in ("P-01", "PH-1")} == {"North Gate"}
    check(yard)


def test_a_name_may_change_its_capitals_only(yard: Context) -> None:
    with yard.write() as session:
        enter_site_name(session, RenameDraft(known="north sluice", name="North Sluice"))
    with yard.read() as connection:
        assert item_as_typed(connection, "P-01")["site"] == "North Sluice"


def test_names_stay_one_row_each(yard: Context) -> None:
    engine(yard, "P-02", site="Ousel Outfall")

    def rename(known: str, name: str) -> None:
        with yard.write() as session:
            enter_site_name(session, RenameDraft(known=known, name=name))

    assert refused(yard, lambda: rename("north sluice", "ousel OUTFALL")) == (
        "there is a site 'Ousel Outfall' already; write another name"
    )
    assert refused(yard, lambda: rename("South", "x")) == (
        "there is no site 'South'; choose one of Ousel Outfall, north sluice"
    )
    assert refused(yard, lambda: rename("north sluice", "north sluice")) == (
        "the site is called 'north sluice' already; write the new name"
    )


def test_a_person_keeps_what_was_written_down_under_the_old_name(yard: Context) -> None:
    reading(yard, "P-01", "2026-03-01", "1100", by="Fen")
    with yard.write() as session:
        assert enter_person_name(session, RenameDraft(known="Fen", name="Fenn")).said == ["Fen is called Fenn now."]
    said = refused(yard, lambda: _rename_nobody(yard))
    assert said == "there is no person 'Quill'; choose one of Fenn"


def _rename_nobody(ctx: Context) -> None:
    with ctx.write() as session:
        enter_person_name(session, RenameDraft(known="Quill", name="Q"))
