"""Applying a schedule: all tasks on all items or none, from a stated start, nothing left out in silence."""

from datetime import date
from decimal import Decimal
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.domain.engines import Status
from fleetcare.domain.quantities import Kind
from fleetcare.drafts.items import EngineDraft, MachineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.schedules import StartDraft
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.errors import FleetError, Refused
from fleetcare.operations.due import due_rows
from fleetcare.operations.find import find_item
from fleetcare.operations.items import add_item
from fleetcare.operations.listing import list_tasks
from fleetcare.operations.schedules import Applied, apply_schedule, what_it_adds
from fleetcare.operations.spells import change_status
from fleetcare.operations.tasks import add_task, remove_task
from fleetcare.rulebook.schedules import find_schedule

TODAY = date(2026, 5, 1)
NEW = {"meter": ["hours"], "in_service": "2026-01-10", "start_at": ["20"], "as_new": True}
USED = {"meter": ["hours"]}

DITCH = """
name = "Ditch pumps"
source = "workshop book"
note = "Check against the manual."
is_for_engines = true
[[task]]
name = "Oil"
every = ["250h", "12mo"]
[[task]]
name = "Lash"
every = "1000h"
needs_sheet = "lash"
[[task]]
name = "Compression"
on_condition = true
[[task]]
name = "Big service"
every = "24mo"
covers = ["Oil", "Lash"]
"""


@pytest.fixture
def ditch(tmp_path: Path) -> str:
    """A schedule of the shop's own."""
    path = tmp_path / "ditch.toml"
    path.write_text(DITCH, encoding="utf-8")
    return str(path)


def engine(ctx: Context, tag: str, **options: object) -> None:
    """Add an engine."""
    with ctx.write() as session:
        add_item(session, read_draft(EngineDraft, {"tag": tag, **options}), TODAY)


def apply(ctx: Context, name: str, *tags: str, start: tuple[str, ...] = ()) -> list[Applied]:
    """Apply a schedule and keep what it did."""
    draft = read_draft(StartDraft, {"counts_from": list(start)})
    with ctx.write() as session:
        return apply_schedule(session, find_schedule(name), tags, draft, TODAY)


def lines(ctx: Context) -> dict[str, tuple[str, Decimal | None, date | None]]:
    """The due list: state, life total and day due of each line."""
    with ctx.read() as connection:
        rows = due_rows(connection, TODAY)
    return {f"{row.engine} {row.task}": (row.state, row.next_due_at, row.next_due_on) for row in rows}


def refusal(ctx: Context, name: str, *tags: str, start: tuple[str, ...] = ()) -> list[str]:
    """What an apply is refused with; nothing of it may be stored."""
    before = lines(ctx)
    with pytest.raises(FleetError) as caught:
        apply(ctx, name, *tags, start=start)
    assert lines(ctx) == before
    return caught.value.lines()


def test_an_item_that_counts_as_new_counts_every_task_from_its_start(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-01", **NEW)
    apply(ctx, ditch, "P-01")
    assert lines(ctx) == {
        "P-01 Oil": ("clear", Decimal(270), date(2027, 1, 10)),
        "P-01 Lash": ("clear", Decimal(1020), None),
        "P-01 Big service": ("clear", None, date(2028, 1, 10)),
    }


def test_any_other_item_needs_its_start_stated(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-02", **USED)
    (line,) = refusal(ctx, ditch, "P-02")
    assert line.startswith("P-02 does not count as new, so where its tasks begin must be said; give --from start")


def test_from_start_counts_from_the_first_day_of_an_item_that_does_not_count_as_new(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-02", **{**NEW, "as_new": False})
    apply(ctx, ditch, "P-02", start=("start",))
    assert lines(ctx)["P-02 Oil"] == ("clear", Decimal(270), date(2027, 1, 10))


def test_from_unset_leaves_every_line_unset_even_on_an_item_that_counts_as_new(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-01", **NEW)
    apply(ctx, ditch, "P-01", start=("unset",))
    assert {state for state, _, _ in lines(ctx).values()} == {"unset"}


def test_a_day_and_a_dial_figure_say_when_every_task_was_last_done(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-02", **NEW)
    apply(ctx, ditch, "P-02", start=("2026-04-01", "150h"))
    assert lines(ctx)["P-02 Oil"] == ("clear", Decimal(400), date(2027, 4, 1))


def test_a_dial_figure_alone_leaves_the_calendar_unset(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-02", **NEW)
    apply(ctx, ditch, "P-02", start=("150",))
    assert lines(ctx)["P-02 Lash"] == ("clear", Decimal(1150), None)
    assert lines(ctx)["P-02 Big service"] == ("unset", None, None)


def test_from_start_is_refused_where_no_first_day_is_known(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-02", **USED)
    (line,) = refusal(ctx, ditch, "P-02", start=("start",))
    assert line.startswith(
        "P-02 has no in-service day for --from start to count from; give it with fleetcare engine edit P-02"
    )


def test_from_start_is_refused_where_a_meter_has_no_start_figure(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-02", **USED, in_service="2026-01-10")
    (line,) = refusal(ctx, ditch, "P-02", start=("start",))
    assert line.startswith(
        "P-02 has no start figure of hours for --from start to count from; give it with fleetcare engine edit P-02"
    )


@pytest.mark.parametrize(
    ("start", "wrong"),
    [
        (("2026-05-02",), "--from 2026-05-02 has not come yet"),
        (("2026-04-01", "2026-04-02"), "--from names two days"),
        (("100", "200"), "--from names two figures of the hours meter"),
        (("100km",), "no meter counts distance of P-02"),
        (("start", "100h"), "--from start stands alone"),
        (("unset", "start"), "--from unset stands alone"),
        (("12mo",), "counts_from: '12mo' is a span of time, not a dial figure; write start, unset, a day"),
    ],
)
def test_a_start_that_cannot_be_is_refused(ctx: Context, ditch: str, start: tuple[str, ...], wrong: str) -> None:
    engine(ctx, "P-02", **USED)
    (line,) = refusal(ctx, ditch, "P-02", start=start)
    assert line.startswith(wrong)


def test_one_item_that_cannot_take_it_keeps_it_from_all(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-01", **NEW)
    engine(ctx, "P-03")
    (line,) = refusal(ctx, ditch, "P-01", "P-03", start=("100h",))
    assert line.startswith("no meter counts hours of P-03")


def test_task_names_an_item_has_already_are_refused_by_name_for_every_item_at_once(ctx: Context, ditch: str) -> None:
    for tag in ("P-01", "P-02"):
        engine(ctx, tag, **NEW)
    apply(ctx, ditch, "P-02")
    with ctx.write() as session:
        item = find_item(session.connection(), "P-01")
        add_task(session, item, read_draft(TaskDraft, {"name": "OIL", "every": ["100h"]}), TODAY)
    first, second = refusal(ctx, ditch, "P-01", "P-02")
    assert first.startswith(f"P-01 has these of {ditch} already: Oil; end them with fleetcare task remove P-01 NAME")
    assert second.startswith(f"P-02 has these of {ditch} already: Oil, Lash, Compression, Big service;")


def test_a_task_that_was_ended_does_not_stand_in_the_way(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-01", **NEW)
    with ctx.write() as session:
        item = find_item(session.connection(), "P-01")
        add_task(session, item, read_draft(TaskDraft, {"name": "Oil", "every": ["100h"]}), TODAY)
        remove_task(session, item, "Oil", TODAY, TODAY)
    (applied,) = apply(ctx, ditch, "P-01")
    assert applied.added == ("Oil", "Lash", "Compression", "Big service")


def test_an_item_named_twice_is_given_the_tasks_once(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-01", **NEW)
    assert [applied.item.tag for applied in apply(ctx, ditch, "P-01", "p-01")] == ["P-01"]


def test_tasks_that_no_meter_counts_are_added_and_named(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-03")
    (applied,) = apply(ctx, ditch, "P-03", start=("2026-04-01",))
    assert applied.uncounted == {Kind.HOURS: ("Oil", "Lash")}
    assert lines(ctx)["P-03 Oil"] == ("unset", None, date(2027, 4, 1))
    assert lines(ctx)["P-03 Big service"] == ("clear", None, date(2028, 4, 1))


def test_hydraulic_adjusters_need_no_lash_set_and_nothing_covers_it(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-01", **NEW, adjuster="hydraulic")
    (applied,) = apply(ctx, ditch, "P-01")
    assert applied.left_out == ("Lash",)
    assert [row.task for row in applied.rows] == ["Oil", "Big service"]


def test_an_on_condition_task_is_added_and_has_no_line(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-01", **NEW)
    (applied,) = apply(ctx, ditch, "P-01")
    assert "Compression" in applied.added
    assert "Compression" not in [row.task for row in applied.rows]


def test_a_schedule_for_engines_is_not_for_their_machine(ctx: Context, ditch: str) -> None:
    with ctx.write() as session:
        add_item(session, read_draft(MachineDraft, {"tag": "PH-1"}), TODAY)
    (line,) = refusal(ctx, ditch, "PH-1", start=("unset",))
    assert line.endswith("is for engines and PH-1 is a machine; name the engine fitted in it")


def test_the_lorry_schedules_fit_a_machine_with_an_odometer_and_its_engine(ctx: Context) -> None:
    with ctx.write() as session:
        options = {"tag": "L-01", "meter": ["distance"], "in_service": "2026-01-10", "start_at": ["0"], "as_new": True}
        add_item(session, read_draft(MachineDraft, options), TODAY)
    engine(ctx, "L-01E", machine="L-01", in_service="2026-01-10", start_at=["0"], as_new=True)
    (lorry,), (its_engine,) = apply(ctx, "lorry", "L-01"), apply(ctx, "lorry-diesel", "L-01E")
    assert lorry.uncounted == its_engine.uncounted == {}
    assert lines(ctx)["L-01 Chassis grease"] == ("overdue", Decimal(2500), date(2026, 4, 10))
    assert lines(ctx)["L-01E Oil and filter"] == ("clear", Decimal(5000), date(2027, 1, 10))


@pytest.mark.parametrize("name", ["diesel-genset", "zzzz-2d-4", "emergency-exercise"])
def test_a_standby_set_can_have_the_general_the_law_and_the_exercise_schedule_together(ctx: Context, name: str) -> None:
    engine(ctx, "P-01", **NEW)
    for other in ("diesel-genset", "zzzz-2d-4", "emergency-exercise"):
        if other != name:
            apply(ctx, other, "P-01")
    assert apply(ctx, name, "P-01")[0].uncounted == {}


def test_an_unknown_tag_is_refused(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-01", **NEW)
    with pytest.raises(Refused, match="no engine or machine has the tag 'P-1'; did you mean P-01"):
        apply(ctx, ditch, "P-1")


def test_a_withdrawn_engine_is_given_nothing(ctx: Context, ditch: str) -> None:
    engine(ctx, "P-01", **NEW)
    with ctx.write() as session:
        change_status(session, find_item(session.connection(), "P-01"), Status.WITHDRAWN, date(2026, 4, 1))
    assert refusal(ctx, ditch, "P-01") == ["P-01 is withdrawn since 2026-04-01; add it anew with fleetcare engine add"]


def test_what_a_schedule_would_add_is_said_with_what_stands_against_it_and_stored_by_nobody(
    ctx: Context, ditch: str
) -> None:
    engine(ctx, "P-01", adjuster="hydraulic")
    with ctx.write() as session:
        item = find_item(session.connection(), "P-01")
        add_task(session, item, read_draft(TaskDraft, {"name": "OIL", "every": ["100h"]}), TODAY)
    with ctx.read() as connection:
        tasks, source = what_it_adds(connection, "P-01", ditch)
        assert [row.name for row in list_tasks(connection, "P-01", TODAY)] == ["OIL"]
    assert tasks == [
        "Oil: 250h or 12mo; P-01 has one already",
        "Lash: 1000h; left out, hydraulic adjusters keep the lash",
        "Compression: on condition",
        "Big service: 24mo",
    ]
    assert source == "workshop book"
