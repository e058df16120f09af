"""What the log has as topped up on engines: what stands in where an oil sample does not state it."""

from collections.abc import Mapping, Sequence
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.measured import TopUp
from fleetcare.domain.meters import Reading
from fleetcare.domain.quantities import Kind, to_base
from fleetcare.operations.load import entry_lives
from fleetcare.operations.rows import fetch, known_day
from fleetcare.rules.meters import CounterHistory

if TYPE_CHECKING:
    from sqlalchemy import Connection


def load_top_ups(
    connection: "Connection",
    ids: Sequence[int],
    on: date,
    counters: Mapping[int, Mapping[Kind, CounterHistory]],
    own: Mapping[int, Mapping[tuple[int, Kind], Reading]],
) -> dict[int, list[TopUp]]:
    """Load the top-ups of some engines up to a day, by engine; those of which nothing tells the hours are left out.

    `counters` are theirs, and `own` the readings that came with log entries.
    """
    rows = fetch(
        connection,
        'select item_id, id, "on", litres, litres_unit from log_entry entry'
        " where item_id in :ids and kind = 'top-up' and litres is not null and \"on\" <= :on and not is_void"
        " and not exists (select 1 from log_entry later where later.supersedes_id = entry.id)",
        ids=list(ids),
        on=on.isoformat(),
    )
    top_ups: dict[int, list[TopUp]] = {}
    for item, entry, logged_on, litres, unit in rows:
        life = entry_lives(counters.get(item, {}), own.get(item, {}), entry, known_day(logged_on)).get(Kind.HOURS)
        if life is not None:
            top_ups.setdefault(item, []).append(TopUp(life.value, to_base(Decimal(litres), unit)))
    return top_ups
