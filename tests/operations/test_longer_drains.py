"""A longer drain as advised: taken by a supervisor alone, to the advised figure, and why there is none to take.

The yard of `test_measured_wears`: changed at 1200 h, 1600 h now; iron of 10, 20, 31 and 40 ppm was watched for 300 h, up to
1600 h of life, so that nothing is told beyond 1900 h.
"""

from decimal import Decimal
from typing import Any

import pytest

from fleetcare.context import Context
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import DeferralDraft
from fleetcare.errors import Refused
from fleetcare.operations.entering import Entered, enter_deferral
from fleetcare.operations.longer_drains import find_advice
from fleetcare.operations.rows import fetch
from fleetcare.operations.settings import change_setting
from fleetcare.operations.upkeep import check
from tests.operations.importing import TODAY, engine, log, reading, task
from tests.operations.measure_yard import take
from tests.operations.test_measured_wears import drained, row, samples, working, yard

SOUND = "10 20 31 40"


def sound(ctx: Context, *also: str, supervisors: str = "Harbin, Quill", **more: object) -> Context:
    """P-01, whose oil is sound until 1900 h and is due to be drained at 1650 h."""
    drained(samples(yard(ctx), SOUND), "450h", *also, **more)
    with ctx.write() as session:
        change_setting(session, "supervisors", supervisors)
    return ctx


def put_off(
    ctx: Context, *until: str, by: str = "Harbin", name: str = "Oil", tag: str = "P-01", **more: object
) -> Entered:
    """Put a task off, as advised where no figure is given."""
    told = {"tag": tag, "task": name, "until": list(until), "why": "oil is sound", "by": by, "on": TODAY, **more}
    with ctx.write() as session:
        return enter_deferral(session, read_draft(DeferralDraft, {"as_advised": not until, **told}), TODAY)


def refusal(ctx: Context, **more: object) -> str:
    """Why a line is not put off as advised; nothing may be stored then."""
    before = check(ctx)
    with pytest.raises(Refused) as error:
        put_off(ctx, as_advised=True, **more)  # type: ignore[arg-type]
    assert check(ctx) == before
    return str(error.value)


def test_a_supervisor_takes_the_advice_and_the_line_is_deferred_to_the_advised_figure(ctx: Context) -> None:
    entered = put_off(sound(ctx), by="QUILL")
    assert entered.sentences() == [
        "Oil of P-01 deferred until 1900 h by QUILL: as advised: oil is sound",
        "P-01  Oil: 1650 h → 1900 h",
    ]
    found = row(ctx, "Oil")
    assert (found.next_due_at, found.own_due_at) == (Decimal(1900), Decimal(1650))
    assert found.reason == "as advised: oil is sound"
    with ctx.read() as connection:
        figures = fetch(connection, "select kind, role, value, unit from deferral_figure")
        assert figures == [("hours", "until", "1900", "h")]


def test_it_ends_as_deferrals_end(ctx: Context) -> None:
    put_off(sound(ctx))
    log(ctx, "2026-05-01", "Oil", at=["1600h"])
    assert (row(ctx, "Oil").next_due_at, row(ctx, "Oil").deferred_until) == (Decimal(2050), "")


def test_the_other_bound_of_the_task_holds_whatever_its_hours_and_is_named(ctx: Context) -> None:
    put_off(sound(ctx, "12mo"))
    found = row(ctx, "Oil")
    assert (found.next_due_at, str(found.next_due_on)) == (Decimal(1900), "2027-01-01")
    assert working(ctx, "Oil")["calendar"].startswith("every 12 mo, from 2026-01-01: due 2027-01-01")


def test_a_not_later_than_holds_too(ctx: Context) -> None:
    sound(ctx, combine="last", not_later_than="6mo")
    with ctx.read() as connection:
        advice = find_advice(connection, "P-01", "Oil", TODAY)
    assert advice is not None
    assert advice.said == (
        "oil sound until 1900 h on the dial (looked at: base number, Fe iron);"
        " it stays due by 2026-07-01 whatever its hours; ask the engine's manual first"
    )
    put_off(ctx)
    assert str(row(ctx, "Oil").next_due_on) == "2026-07-01"


def test_the_figure_is_that_of_the_dial_where_the_meter_was_replaced(ctx: Context) -> None:
    sound(ctx)
    reading(ctx, "P-01", "2026-05-01", "0", replaced=["1600", "0"])
    entered = put_off(ctx)
    assert entered.said == ["Oil of P-01 deferred until 300 h by Harbin: as advised: oil is sound"]
    assert row(ctx, "Oil").next_due_at == 1900


@pytest.mark.parametrize(
    ("supervisors", "told"),
    [
        (
            "",
            "nobody is named as a supervisor, and only a supervisor may let an oil stay in longer; name them:"
            " fleetcare setting supervisors 'Fenn', several with commas between",
        ),
        (
            "Harbin, Quill",
            "Fenn is not among the supervisors (Harbin, Quill); let one of them take it, or name another:"
            " fleetcare setting supervisors NAMES",
        ),
    ],
)
def test_nobody_else_takes_it(ctx: Context, supervisors: str, told: str) -> None:
    assert refusal(sound(ctx, supervisors=supervisors), by="Fenn") == told


def test_anybody_puts_the_line_off_without_the_advice_as_before(ctx: Context) -> None:
    entered = put_off(sound(ctx), "1700", by="Fenn")
    assert entered.sentences()[1:] == ["P-01  Oil: 1650 h → 1700 h"]


@pytest.mark.parametrize("until", [["1901"], ["2026-07-30"]])
def test_whoever_puts_it_off_beyond_the_advice_is_warned(ctx: Context, until: list[str]) -> None:
    entered = put_off(sound(ctx), *until)
    assert entered.warnings == [
        "Beware: the oil is only known to be sound until 1900 h on the dial; nothing sampled speaks for it beyond."
    ]
    assert row(ctx, "Oil").deferred_until


@pytest.mark.parametrize("until", [["1900"], ["2027-02-01"]])
def test_nobody_is_warned_where_the_hours_are_not_put_off_beyond_it(ctx: Context, until: list[str]) -> None:
    assert put_off(sound(ctx, "12mo"), *until).warnings == []


def test_an_oil_that_is_not_known_to_be_sound_beyond_its_point_has_no_advice_to_go_beyond(ctx: Context) -> None:
    drained(samples(yard(ctx), SOUND), "800h")
    assert put_off(ctx, "2100").warnings == []


def test_one_put_off_already_is_warned_of_again(ctx: Context) -> None:
    put_off(sound(ctx))
    assert put_off(ctx, "2000").warnings
    assert (
        refusal(ctx)
        == "nothing is advised for Oil of P-01: it is put off already; see its working, or put it off without the advice"
    )


def test_what_was_told_must_still_be_advised(ctx: Context) -> None:
    assert (
        refusal(sound(ctx), until=["1850"]) == "it is advised until 1900 h by now, not until 1850; leave --until empty"
    )
    assert put_off(ctx, "1900h", as_advised=True).said


def test_a_day_is_no_advice(ctx: Context) -> None:
    assert refusal(sound(ctx), until=["2026-06-01"]).startswith(
        "until: an advice ends at one dial figure; leave it empty"
    )


@pytest.mark.parametrize(
    ("more", "told"),
    [
        ({"law": True}, "Oil of P-01 is required by law; it cannot be deferred"),
        ({"insurer": True}, "Oil of P-01 is required by the insurer; it cannot be deferred"),
        ({"deferrable": "no"}, "Oil of P-01 is not deferrable; do it, or allow it"),
    ],
)
def test_what_may_not_be_put_off_is_not_put_off_as_advised(ctx: Context, more: dict[str, Any], told: str) -> None:
    assert refusal(sound(ctx, **more)).startswith(told)


def test_a_sample_that_flags_something_is_named(ctx: Context) -> None:
    drained(samples(yard(ctx), "10 20 31 250"), "450h")
    assert "its sample of 2026-05-01 flags iron wear; see" in refusal(ctx)


def test_without_enough_samples_it_says_what_is_wanting(ctx: Context) -> None:
    drained(yard(ctx), "450h")
    assert "nothing is advised for Oil of P-01: no oil sample of it is there; see its working" in refusal(ctx)
    take(ctx, "oil", "Fe,,,40,ppm", on="2026-04-01")
    assert "its sample of 2026-04-01 flags nothing, but nothing in it can be followed over the hours" in refusal(ctx)
    take(ctx, "oil", "hours_on_oil,,,400,h", "top_up,,,0,L", "Fe,,,40,ppm", on="2026-05-01")
    assert "not everything in the oil can be projected: Fe iron: no slope yet: 3 more values needed" in refusal(ctx)


def test_other_work_has_no_advice(ctx: Context) -> None:
    sound(ctx)
    task(ctx, "P-01", "Belts", every=["450h"], last_done=["1200h", "2026-01-01"])
    assert "nothing is advised for Belts of P-01: it is no change of an engine's oil" in refusal(ctx, name="Belts")
    with ctx.read() as connection:
        assert find_advice(connection, "P-01", "Belts", TODAY) is None


def test_a_task_without_a_line_has_no_advice(ctx: Context) -> None:
    engine(ctx, "P-02", meter=["hours"])
    task(ctx, "P-02", "Bleed", on_condition=True)
    with ctx.read() as connection:
        assert find_advice(connection, "P-02", "Bleed", TODAY) is None


def test_the_working_says_who_took_it_and_until_when(ctx: Context) -> None:
    put_off(sound(ctx))
    said = working(ctx, "Oil")
    assert said["deferred"] == "until 1900 h by Harbin on 2026-05-01: as advised: oil is sound"
    assert "longer drain" not in said


def test_names_of_supervisors_are_kept_once_each(ctx: Context) -> None:
    with ctx.write() as session:
        assert change_setting(session, "supervisors", " Harbin ,quill,, HARBIN") == "Harbin, quill"
        with pytest.raises(Refused, match="supervisors: no name stands in ' , '; give names with commas between"):
            change_setting(session, "supervisors", " , ")
        assert change_setting(session, "supervisors", "") == ""
