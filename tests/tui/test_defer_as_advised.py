"""The form that puts a line off, of a drain whose oil is known to be sound: the advice shown, filled in, and taken."""

import pytest
from textual.pilot import Pilot

from fleetcare.context import Context
from fleetcare.operations.settings import change_setting
from fleetcare.tui.forms.base import Subject
from fleetcare.tui.screens.due import DueScreen
from fleetcare.tui.screens.form import FormScreen
from tests.operations.importing import task
from tests.operations.measure_yard import take
from tests.operations.test_measured_wears import drained, row, samples, yard
from tests.tui.conftest import Opened, line_with, press
from tests.tui.forms import fill_in, form_with, stored
from tests.tui.sheets import said

OIL = Subject("P-01", "Oil")
TOLD = {"why": "oil is sound", "by": "Harbin"}


@pytest.fixture
def sound(ctx: Context) -> Context:
    """P-01, whose oil is due to be drained at 1650 h and known to be sound until 1900 h."""
    drained(samples(yard(ctx), "10 20 31 40"), "450h", "12mo")
    with ctx.write() as session:
        change_setting(session, "supervisors", "Harbin")
    return ctx


async def advised(pilot: Pilot[None], told: dict[str, str]) -> FormScreen:
    """Open the form of the drain, fill it in and say yes to the advice."""
    form = await form_with(pilot, "defer", OIL, told)
    form.rows["as_advised"].editor.focus()
    await press(pilot, "space")
    return form


async def test_the_advice_stands_above_and_a_yes_fills_in_its_figure(opened: Opened, sound: Context) -> None:
    async with opened(context=sound) as pilot:
        form = await form_with(pilot, "defer", OIL, {})
        assert "Advised oil sound until 1900 h on the dial (looked at: base number, Fe iron)" in said(pilot)
        assert "it stays due by 2027-01-01 whatever its hours" in said(pilot)
        assert line_with(pilot, "As advised", "[ ] no")
        form.rows["as_advised"].editor.focus()
        await press(pilot, "space")
        assert line_with(pilot, "Until", "1900h")
        await press(pilot, "space")
        assert form.values["until"] == ""


async def test_a_supervisor_takes_it(opened: Opened, sound: Context) -> None:
    async with opened(context=sound) as pilot:
        await advised(pilot, TOLD)
        await press(pilot, "ctrl+s")
        assert isinstance(pilot.app.screen, DueScreen)
        assert "deferred until 1900 h by Harbin: as advised: oil is sound" in said(pilot)
    assert row(sound, "Oil").next_due_at == 1900


async def test_nobody_else_takes_it_and_that_is_said_beside_the_name(opened: Opened, sound: Context) -> None:
    before = stored(sound.path)
    async with opened(context=sound) as pilot:
        form = await advised(pilot, {**TOLD, "by": "Fenn"})
        await press(pilot, "ctrl+s")
        assert pilot.app.screen is form
        assert "Fenn is not among the supervisors (Harbin); let one of them take it, or name another" in said(pilot)
        assert "fleetcare setting" not in said(pilot)
        assert form.rows["by"].editor.has_focus
    assert stored(sound.path) == before


async def test_another_figure_is_not_the_advised_one(opened: Opened, sound: Context) -> None:
    async with opened(context=sound) as pilot:
        form = await advised(pilot, TOLD)
        fill_in(form, {"until": "1950h"})
        await press(pilot, "ctrl+s")
        assert pilot.app.screen is form
        assert "it is advised until 1900 h by now, not until 1950" in said(pilot)


async def test_further_without_the_advice_is_warned_of(opened: Opened, sound: Context) -> None:
    async with opened(context=sound, size=(120, 40)) as pilot:
        await form_with(pilot, "defer", OIL, {**TOLD, "until": "1950h"})
        await press(pilot, "ctrl+s")
        assert "Beware: the oil is only known to be sound until 1900 h on the dial" in said(pilot)


async def test_a_yes_kept_half_typed_is_none_any_more_once_nothing_is_advised(opened: Opened, sound: Context) -> None:
    async with opened(context=sound) as pilot:
        await advised(pilot, TOLD)
        await press(pilot, "escape")
        take(sound, "oil", "hours_on_oil,,,400,h", "Fe,,,250,ppm", on="2026-05-01", sure=True)
        form = await form_with(pilot, "defer", OIL, {})
        assert (form.values["until"], form.values["as_advised"]) == ("1900h", "no")
        assert "dvised" not in said(pilot)


async def test_a_line_without_an_advice_does_not_ask(opened: Opened, sound: Context) -> None:
    task(sound, "P-01", "Belts", every=["450h"], last_done=["1200h", "2026-01-01"])
    async with opened(context=sound) as pilot:
        await form_with(pilot, "defer", Subject("P-01", "Belts"), {})
        assert "dvised" not in said(pilot)
