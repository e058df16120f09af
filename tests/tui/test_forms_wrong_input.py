"""Wrong input on every field of every form: said beside the field, what was typed stays, nothing is stored."""

import re
from pathlib import Path

import pytest

from fleetcare.tui.forms.all import FORMS
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.form import FormScreen
from tests.tui.conftest import Opened, press, seen
from tests.tui.forms import fill_in, form_with, stored
from tests.tui.wrong_input import BESIDE, FREE, SAID_ELSEWHERE, WRONG

SUBJECT = Subject("PS-1", "Oil and filter", entry=1, reading=12)
CASES = [(name, field, text, said) for (name, field), cases in WRONG.items() for text, said in cases]


def test_every_field_of_every_form_is_tried_or_cannot_be_wrong() -> None:
    fields = {(form.name, field.name) for form in FORMS.values() for field in form.fields}
    assert set(WRONG) <= fields
    assert {key for key in fields - set(WRONG) if key[1] not in FREE} == set()


@pytest.mark.parametrize("name", sorted({name for name, _ in WRONG}))
async def test_wrong_input_in_any_field_is_said_beside_it_and_nothing_is_stored(
    opened: Opened, db: Path, name: str
) -> None:
    before = stored(db)
    amiss = []
    async with opened(size=(80, 24)) as pilot:
        form = await form_with(pilot, name, SUBJECT, {})
        for field, text, said in ((field, text, said) for form, field, text, said in CASES if form == name):
            fill_in(form, {**BESIDE.get(name, {}), field: text})
            await press(pilot, "ctrl+s")
            assert pilot.app.screen is form, f"{field} {text!r} was stored"
            amiss += [f"{field} {text!r}: {word}" for word in _wrongs(form, seen(pilot), field, text, said)]
            form.action_anew()
    assert "\n".join(amiss) == ""
    assert stored(db) == before


def _wrongs(form: FormScreen, lines: list[str], field: str, text: str, said: str) -> list[str]:
    """Say what is not as it should be after something wrong was typed into a field."""
    name, rows = form.form.name, form.rows
    row = rows[SAID_ELSEWHERE.get((name, field, text), field)]
    place = next((n for n, line in enumerate(lines) if line.startswith(f"▌{row.field.label}")), None)
    below = lines[place + 1 : place + 5] if place is not None else []
    beside = " ".join(" ".join(line[15:].strip(" ▁▂▃▄▅▆▇█") for line in below).split())
    checks = {
        f"{said!r} is not said below it, but {beside!r}": said in beside and bool(below) and "! " in below[0],
        "the cursor is not in it": row.editor.has_focus,
        "what was typed is gone": rows[field].value == text,
        "a command is named": not re.search(r"--|fleetcare ", "\n".join(lines)),
    }
    return [word for word, holds in checks.items() if not holds]
