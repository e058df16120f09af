"""Wrong input on every field of every form: said beside the field, what was typed stays, nothing is stored."""

from pathlib import Path

import pytest

from fleetcare.tui.forms.all import FORMS
from fleetcare.tui.forms.base import Subject
from tests.tui.conftest import Opened, press, seen
from tests.tui.forms import form_with, stored

SUBJECT = Subject("PS-1", "Oil and filter", entry=1)

# What is typed into a field, and what is then said below it.
WRONG = {
    ("log", "on"): ("2026-02-30", "there is no day 2026-02-30"),
    ("log", "at"): ("many", "'many' is not"),
    ("log", "part"): ("Oil filter:0", "0 cannot be right"),
    ("log", "top_up"): ("8", "'8' is not a volume; write it like 8L"),
    ("log", "until"): ("2026-06-01", "“… until” says by when a follow-up is due; give “Follow-up” as well"),
    ("correct", "on"): ("30.4.2026", "'30.4.2026' is not a date"),
    ("correct", "at"): ("12 furlongs", "furlongs"),
    ("correct", "part"): ("Oil filter:x", "x"),
    ("correct", "top_up"): ("0L", "0L cannot be right"),
    ("void", "why"): ("", "voiding an entry needs a reason"),
    ("defer", "until"): ("soon", "'soon' is not"),
    ("defer", "why"): ("", "this is missing"),
    ("defer", "by"): ("", "this is missing"),
    ("reading", "value"): ("", "this is missing"),
    ("reading", "on"): ("2026-5-1", "'2026-5-1' is not a date"),
    ("swap", "on"): ("1776-07-04", "1776-07-04 cannot be right"),
    ("swap", "old_last"): ("none", "'none' is not"),
    ("swap", "new_first"): ("", "this is missing"),
    ("swap", "unmetered"): ("some", "'some' is not"),
    ("swap", "value"): ("12h 3", "12h 3"),
    ("lay-up", "on"): ("today", "'today' is not a date"),
    ("return", "on"): ("", "this is missing"),
    ("return", "by"): ("", "this is missing"),
    ("stand-down", "on"): ("x", "'x' is not a date"),
    ("withdraw", "on"): ("2026-13-01", "there is no day 2026-13-01"),
    ("move", "machine"): ("", "goes into a machine or out of one; give “Into” or “Take it out”"),
    ("move", "on"): ("1 May", "'1 May' is not a date"),
    ("engine", "tag"): ("", "this is missing"),
    ("engine", "meter"): ("hour", "no meter counts 'hour'"),
    ("engine", "in_service"): ("2024", "'2024' is not a date"),
    ("engine", "start_at"): ("nought", "'nought' is not"),
    ("engine", "cylinders"): ("six", "'six'"),
    ("engine", "firing_order"): ("1-2-3", "1-2-3"),
    ("task", "name"): ("", "this is missing"),
    ("task", "every"): ("sometimes", "'sometimes'"),
    ("task", "first"): ("soon", "'soon'"),
    ("task", "ahead"): ("a bit", "'a bit'"),
    ("task", "grace"): ("some", "'some'"),
    ("task", "last_done"): ("spring", "'spring'"),
    ("task", "part"): ("Oil filter:none", "none"),
    ("schedule", "name"): ("", "this is missing"),
    ("schedule", "counts_from"): ("maybe", "'maybe'"),
}
# What only the database can tell is wrong, or several fields together: said at the foot, the cursor in the field.
REFUSED = {
    ("log", "task"): ("Oyl and filter", "did you mean Oil and filter?"),
    ("log", "on"): ("2026-05-02", "2026-05-02 has not come yet"),
    ("log", "at"): ("5600km", "no meter counts distance of PS-1"),
    ("correct", "task"): ("Oyl", "has no task 'Oyl'"),
    ("correct", "repair"): ("valve cover", "entry 1 is no repair; leave out “Repair”"),
    ("correct", "defect"): ("drips", "entry 1 is no defect; leave out “Defect”"),
    ("defer", "until"): ("2025-01-01", "2025-01-01 is past"),
    ("reading", "on"): ("2026-05-02", "2026-05-02 has not come yet"),
    ("swap", "old_last"): ("1", "1 h on 2026-05-01 does not fit reading"),
    ("lay-up", "on"): ("2026-05-02", "2026-05-02 has not come yet"),
    ("withdraw", "on"): ("2026-05-02", "2026-05-02 has not come yet"),
    ("stand-down", "on"): ("2026-05-02", "2026-05-02 has not come yet"),
    ("return", "on"): ("2026-05-02", "2026-05-02 has not come yet"),
    ("move", "machine"): ("PH-7", "'PH-7'"),
    ("engine", "tag"): ("PS-2", "PS-2"),
    ("engine", "machine"): ("PH-7", "'PH-7'"),
    ("task", "name"): ("Oil and filter", "Oil and filter"),
    ("schedule", "name"): ("nonesuch", "'nonesuch'"),
}
# Fields in which nothing can be wrong: text of one's own, and a yes or no.
FREE = {
    "by",
    "note",
    "why",
    "repair",
    "defect",
    "position",
    "part_done",
    "follow_up",
    "out",
    "as_new",
    "name",
    "site",
    "fuel",
    "work",
    "source",
}
# What the other fields of a form need for the refusal to be about this one.
BESIDE = {
    "defer": {"until": "2026-06-01", "why": "x", "by": "Harbin"},
    "return": {"by": "Harbin"},
    "swap": {"old_last": "302", "new_first": "0"},
    "reading": {"value": "310"},
    "void": {"by": "Harbin"},
    "engine": {"tag": "PS-7", "cylinders": "6"},
    "task": {"name": "Belts", "every": "500h"},
    "schedule": {"name": "diesel-genset"},
    "move": {"machine": "PH-1"},
}


def test_every_field_of_every_form_is_tried_or_cannot_be_wrong() -> None:
    fields = {(form.name, field.name) for form in FORMS.values() for field in form.fields}
    tried = {*WRONG, *REFUSED}
    assert tried <= fields
    assert {key for key in fields - tried if key[1] not in FREE} == set()


@pytest.mark.parametrize(("name", "field"), WRONG, ids=str)
async def test_what_cannot_be_read_is_said_below_its_field(opened: Opened, db: Path, name: str, field: str) -> None:
    text, said = WRONG[name, field]
    before = stored(db)
    async with opened(size=(100, 30)) as pilot:
        form = await form_with(pilot, name, SUBJECT, {**BESIDE.get(name, {}), field: text})
        await press(pilot, "ctrl+s")
        lines = seen(pilot)
        place = next(n for n, line in enumerate(lines) if line.startswith(f"▌{form.rows[field].field.label}"))
        assert said in lines[place + 1], "\n".join(lines)
        assert form.rows[field].editor.has_focus
        assert form.rows[field].value == text
    assert stored(db) == before


@pytest.mark.parametrize(("name", "field"), REFUSED, ids=str)
async def test_what_the_shop_s_record_refuses_is_said_at_the_foot_with_the_cursor_in_its_field(
    opened: Opened, db: Path, name: str, field: str
) -> None:
    text, said = REFUSED[name, field]
    before = stored(db)
    async with opened(size=(100, 30)) as pilot:
        form = await form_with(pilot, name, SUBJECT, {**BESIDE.get(name, {}), field: text})
        await press(pilot, "ctrl+s")
        foot = "\n".join(seen(pilot)[-4:])
        assert said in foot, "\n".join(seen(pilot))
        assert not [f"--{own.name}" for own in form.form.fields if f"--{own.name}" in foot]
        assert form.rows[field].editor.has_focus
        assert form.rows[field].value == text
    assert stored(db) == before
