"""Spells of an engine: what may follow what, whoever asks."""

from datetime import date

import pytest

from fleetcare.context import Context
from fleetcare.domain.engines import Status
from fleetcare.drafts.items import EngineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, find_engine
from fleetcare.operations.items import add_item
from fleetcare.operations.spells import change_status

TODAY = date(2026, 5, 1)


@pytest.fixture
def engine(ctx: Context) -> FoundItem:
    """An engine in service."""
    with ctx.write() as session:
        return add_item(session, read_draft(EngineDraft, {"tag": "P-01"}), TODAY)


def change(ctx: Context, engine: FoundItem, status: Status, on: str) -> None:
    """Begin a spell."""
    with ctx.write() as session:
        change_status(session, engine, status, date.fromisoformat(on))


@pytest.mark.parametrize("status", [Status.LAID_UP, Status.IN_SERVICE, Status.WITHDRAWN])
@pytest.mark.parametrize("on", ["2026-04-30", "2026-05-01"])
def test_a_withdrawn_engine_changes_its_status_no_more_not_even_before_it_was(
    ctx: Context, engine: FoundItem, status: Status, on: str
) -> None:
    change(ctx, engine, Status.WITHDRAWN, "2026-05-01")
    with pytest.raises(Refused, match="P-01 is withdrawn; add it anew"):
        change(ctx, engine, status, on)


def test_a_spell_written_down_late_takes_its_place_before_the_later_one(ctx: Context, engine: FoundItem) -> None:
    change(ctx, engine, Status.STOOD_DOWN, "2026-04-20")
    change(ctx, engine, Status.LAID_UP, "2026-04-01")
    with pytest.raises(Refused, match="P-01 is laid up since 2026-04-01"):
        change(ctx, engine, Status.LAID_UP, "2026-04-10")
    with pytest.raises(Refused, match="P-01 is stood down since 2026-04-20"):
        change(ctx, engine, Status.STOOD_DOWN, "2026-04-25")


def test_in_service_is_what_an_engine_is_until_somebody_says_otherwise(ctx: Context, engine: FoundItem) -> None:
    with pytest.raises(Refused, match="P-01 is in service; nothing needs to be done"):
        change(ctx, engine, Status.IN_SERVICE, "2026-04-01")


def test_the_tag_is_free_from_the_day_it_was_withdrawn(ctx: Context, engine: FoundItem) -> None:
    change(ctx, engine, Status.WITHDRAWN, "2026-05-01")
    with ctx.write() as session:
        again = add_item(session, read_draft(EngineDraft, {"tag": "p-01"}), TODAY)
    with ctx.read() as connection:
        assert find_engine(connection, "P-01").id == again.id != engine.id
