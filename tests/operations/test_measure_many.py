"""Many sheets stored in one go are stored as one by one, or not at all."""

import shutil
from collections.abc import Iterable
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import LogDraft
from fleetcare.errors import FleetError, Refusals, Refused
from fleetcare.operations.measure import measure_many
from fleetcare.operations.rows import fetch
from fleetcare.operations.upkeep import check
from tests.operations.importing import TODAY
from tests.operations.measure_yard import SHEETS, take, yard_of_four
from tests.operations.sheet_yard import sheet

ROWS = (
    "select entry.id, entry.kind, entry.note, person.name, sheet.kind, taken_on, gauge, quantity, point, phase, value, unit,"
    " qualifier from sheet join log_entry entry on entry.id = sheet.entry_id join sheet_value on sheet_id = sheet.id"
    " left join person on person.id = entry.person_id order by sheet_value.id"
)
TOLD = [
    {"kind": kind, "on": f"2026-04-{day:02}", "by": "Fenn", "gauge": "G1", "note": f"sheet of {kind}"}
    for day, kind in enumerate(SHEETS, start=1)
]


def drafts(told: Iterable[dict[str, str]]) -> list[LogDraft]:
    return [read_draft(LogDraft, {"tag": "P-01", "sheet": sheet(*SHEETS[one["kind"]]), **one}) for one in told]


def stored(ctx: Context) -> list[tuple[object, ...]]:
    with ctx.read() as connection:
        return list(fetch(connection, ROWS))


def test_many_sheets_are_stored_as_one_by_one(ctx: Context, tmp_path: Path) -> None:
    yard_of_four(ctx)
    other = Context(str(shutil.copy(ctx.path, tmp_path / "other.db")))
    with ctx.write() as session:
        assert measure_many(session, drafts(TOLD), TODAY) == len(TOLD)
    for one in TOLD:
        take(other, **one)
    assert stored(ctx) == stored(other)
    assert check(ctx).problems == ()


def test_what_is_stored_already_is_not_stored_again(ctx: Context) -> None:
    yard_of_four(ctx)
    take(ctx, **TOLD[0])
    for new in (len(TOLD) - 1, 0):
        with ctx.write() as session:
            assert measure_many(session, drafts(TOLD), TODAY) == new


@pytest.mark.parametrize(
    ("wrong", "error"),
    [
        ({"on": "2027-01-01"}, Refused),
        ({"received": "2026-01-01"}, Refused),
        ({"tag": "P-99"}, Refused),
        ({"sheet": sheet("pressure,9,dry,27,bar")}, Refusals),
    ],
)
def test_with_one_bad_sheet_none_is_stored(ctx: Context, wrong: dict[str, object], error: type[FleetError]) -> None:
    yard_of_four(ctx)
    bad = read_draft(
        LogDraft,
        {"tag": "P-01", "kind": "compression", "on": "2026-04-20", "sheet": sheet("pressure,1,dry,27,bar"), **wrong},
    )
    with pytest.raises(error), ctx.write() as session:
        measure_many(session, [*drafts(TOLD), bad], TODAY)
    assert stored(ctx) == []
