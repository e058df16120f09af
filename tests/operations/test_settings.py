"""The shop's settings: what holds without one, what may be stored, and what they change."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.context import Context
from fleetcare.domain.quantities import Kind
from fleetcare.drafts.items import EngineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import ReadingDraft
from fleetcare.errors import FleetError, Misread, Refused
from fleetcare.operations.items import add_item
from fleetcare.operations.readings import record_reading
from fleetcare.operations.settings import SETTINGS, cap_per_day, change_setting, read_settings, spec_of, stale_days
from fleetcare.operations.upkeep import check


def change(ctx: Context, name: str, value: str) -> str:
    """Store one setting in a write of its own."""
    with ctx.write() as session:
        return change_setting(session, name, value)


def values(ctx: Context) -> dict[str, str]:
    """Every setting in force."""
    with ctx.read() as connection:
        return read_settings(connection)


def test_without_anything_stored_the_defaults_hold(ctx: Context) -> None:
    assert values(ctx) == {
        "cap-hours": "24",
        "cap-distance": "1800",
        "cap-fuel": "10000",
        "cap-starts": "200",
        "stale-days": "",
        "shop-name": "",
        "supervisors": "",
        "holidays": "",
    }


def test_every_setting_says_what_it_means() -> None:
    assert all(spec.meaning for spec in SETTINGS)


@pytest.mark.parametrize(
    ("name", "typed", "stored"),
    [
        ("cap-hours", "20", "20"),
        ("cap-hours", "22.50h", "22.5"),
        ("Cap-Distance ", "900 km", "900"),
        ("cap-fuel", "400L", "400"),
        ("cap-starts", "40 starts", "40"),
        ("stale-days", "30d", "30"),
        ("shop-name", "  Tallow  Fen\nDrainage Board ", "Tallow Fen Drainage Board"),
    ],
)
def test_a_value_is_stored_plain_and_holds_from_then_on(ctx: Context, name: str, typed: str, stored: str) -> None:
    assert change(ctx, name, typed) == stored
    assert values(ctx)[spec_of(name).name] == stored


def test_the_caps_and_the_stale_days_are_read_as_numbers(ctx: Context) -> None:
    change(ctx, "cap-hours", "12.5")
    change(ctx, "stale-days", "14")
    with ctx.read() as connection:
        assert cap_per_day(connection, Kind.HOURS) == Decimal("12.5")
        assert cap_per_day(connection, Kind.STARTS) == 200
        assert stale_days(connection) == 14


def test_without_set_stale_days_each_meter_has_its_own_rhythm(ctx: Context) -> None:
    with ctx.read() as connection:
        assert stale_days(connection) is None


@pytest.mark.parametrize("nothing", ["", "  "])
def test_an_empty_value_goes_back_to_the_default(ctx: Context, nothing: str) -> None:
    before = values(ctx)
    for spec in SETTINGS:
        change(ctx, spec.name, "2026-12-25" if spec.name == "holidays" else "7")
        change(ctx, spec.name, nothing)
    assert values(ctx) == before


@pytest.mark.parametrize(
    ("name", "value", "kind", "wrong"),
    [
        ("cap-hours", "many", Misread, "cap-hours: 'many' is not a figure"),
        ("cap-hours", "-4", Misread, "cap-hours: '-4' is not a figure"),
        ("cap-hours", "nan", Misread, "cap-hours: 'nan' is not a figure"),
        ("cap-hours", "24km", Misread, "cap-hours: '24km' is not in h; give it in h"),
        ("cap-distance", "900mi", Misread, "cap-distance: '900mi' is not in km; give it in km"),
        ("cap-fuel", "0", Refused, "cap-fuel: it cannot be 0; give a number above 0 (most litres"),
        ("stale-days", "1.5", Refused, "stale-days: it cannot be 1.5; give whole days"),
        ("stale-days", "2w", Misread, "stale-days: '2w' is not in d; give it in d"),
    ],
)
def test_what_cannot_be_a_value_is_refused_and_nothing_changes(
    ctx: Context, name: str, value: str, kind: type[FleetError], wrong: str
) -> None:
    before = check(ctx)
    with pytest.raises(kind) as error:
        change(ctx, name, value)
    assert error.value.lines()[0].startswith(wrong)
    assert check(ctx) == before


@pytest.mark.parametrize(
    ("name", "remedy"),
    [
        ("cap-hour", "did you mean cap-hours"),
        ("STALE", "did you mean stale-days?"),
        ("[/b]", "choose one of cap-hours, cap-distance, cap-fuel, cap-starts, stale-days, shop-name, supervisors"),
    ],
)
def test_an_unknown_name_is_answered_with_the_nearest(name: str, remedy: str) -> None:
    with pytest.raises(Refused) as error:
        spec_of(name)
    assert error.value.detail == f"there is no setting {name!r}"
    assert error.value.remedy.startswith(remedy)


def test_every_change_is_in_the_ledger_and_the_same_value_again_is_none(ctx: Context) -> None:
    change(ctx, "cap-hours", "20")
    first = check(ctx)
    assert first.problems == ()
    change(ctx, "cap-hours", "20h")
    assert check(ctx) == first
    change(ctx, "cap-hours", "21")
    assert check(ctx).head != first.head


def test_a_cap_decides_whether_a_reading_is_plausible(ctx: Context) -> None:
    with ctx.write() as session:
        add_item(session, read_draft(EngineDraft, {"tag": "P-01", "meter": ["hours"]}), date(2026, 5, 1))
        for day, value in (("2026-04-01", "100"), ("2026-04-02", "140")):
            record_reading(session, read_draft(ReadingDraft, {"tag": "P-01", "value": value, "on": day}))
    change(ctx, "cap-hours", "10")
    draft = read_draft(ReadingDraft, {"tag": "P-01", "value": "161", "on": "2026-04-03"})
    with pytest.raises(Refused, match="gains 21 h in 1 day, at most 10 h a day"), ctx.write() as session:
        record_reading(session, draft)
