"""What the sheets of the demo fleet tell of what is not wrong yet: held against what its engines really do."""

import shutil
from decimal import Decimal
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.operations.find import find_item
from fleetcare.operations.rows import fetch
from tests.demo.test_demo_fleet import ANCHOR, COMMITTED
from tests.demo.true_ahead import (
    PULLED,
    SOUND,
    SOUND_UNTIL,
    Line,
    advised_longer,
    called_early,
    lines_of,
    pull_on,
)
from tests.demo.true_causes import standing


@pytest.fixture(scope="module")
def fleet(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The committed fleet, copied: asking for findings may write down what was worked out."""
    path = tmp_path_factory.mktemp("fleet") / "demo.db"
    shutil.copy(COMMITTED, path)
    return path


def test_one_line_is_called_early_by_its_oil_and_one_by_its_compression(fleet: Path) -> None:
    assert called_early(fleet, ANCHOR) == {line: ahead.subject for line, ahead in PULLED.items()}


@pytest.mark.parametrize("name", PULLED, ids=" ".join)
def test_a_line_called_early_is_so_by_the_true_rate_and_its_range_holds_the_true_hours(name: Line, fleet: Path) -> None:
    ahead = PULLED[name]
    line, _ = lines_of(fleet, ANCHOR, name[0])[name]
    found = pull_on(line)
    assert found is not None
    trigger, pull = found
    assert isinstance(trigger.own, Decimal)
    assert trigger.next is not None
    assert isinstance(trigger.next.interval, Decimal)
    last_done, told = trigger.own - trigger.next.interval, pull.projection
    assert told.trend is not None
    assert told.early is not None
    assert told.late is not None
    assert pull.wear.work == ahead.kind
    assert abs(told.trend.slope * 1000 / ahead.per_1000h - 1) < Decimal("0.1")
    assert told.early <= last_done + ahead.reached_after <= told.late
    assert last_done < pull.at < trigger.own


def test_what_is_called_early_is_no_alarm_yet(fleet: Path) -> None:
    causes = [cause for tag, _ in PULLED for cause in standing(fleet, ANCHOR).get(tag, [])]
    assert not any(cause.is_alarm for cause in causes)
    assert not any(cause.cause == "spent base number" for cause in causes)


def test_one_drain_could_wait_and_not_beyond_where_its_oil_is_truly_spent(fleet: Path) -> None:
    advice = advised_longer(fleet, ANCHOR)
    assert [*advice] == [SOUND]
    line, _ = lines_of(fleet, ANCHOR, SOUND[0])[SOUND]
    own = line.deciding.own
    assert isinstance(own, Decimal)
    assert own + 50 < advice[SOUND].until < own - 250 + SOUND_UNTIL


def test_the_oil_of_one_boat_is_topped_up_by_the_log_alone_and_that_of_the_tractor_by_its_sheets(fleet: Path) -> None:
    stated = {}
    with Context(str(fleet), ANCHOR).read() as connection:
        for tag in ("WB-1P", "TR-3"):
            item = find_item(connection, tag).id
            sheets = fetch(connection, "select count(*) from sheet where item_id = :item and kind = 'oil'", item=item)
            rows = fetch(
                connection,
                "select count(*) from sheet_value join sheet on sheet.id = sheet_id"
                " where item_id = :item and quantity = 'top_up'",
                item=item,
            )
            logged = fetch(
                connection, "select count(*) from log_entry where item_id = :item and kind = 'top-up'", item=item
            )
            stated[tag] = rows[0][0] == sheets[0][0] > 0, bool(rows[0][0]), logged[0][0] >= 2
    assert stated == {"WB-1P": (False, False, True), "TR-3": (True, True, True)}
