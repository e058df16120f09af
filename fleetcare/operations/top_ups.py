"""What the log has as topped up on engines: what stands in where an oil sample does not state it."""

from collections.abc import Sequence
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.measured import TopUp
from fleetcare.domain.quantities import Kind, to_base
from fleetcare.operations.load import AS_STORED, Trial, entry_lives, load_counters, own_readings
from fleetcare.operations.rows import fetch, known_day

if TYPE_CHECKING:
    from sqlalchemy import Connection


def load_top_ups(
    connection: "Connection", ids: Sequence[int], until: date, today: date, trial: Trial = AS_STORED
) -> dict[int, list[TopUp]]:
    """Load the top-ups of some engines up to a day, by engine, meters as seen today.

    Those of which nothing tells the hours, as there was no meter yet, are left out.
    """
    rows = fetch(
        connection,
        'select item_id, id, "on", litres, litres_unit from log_entry entry'
        " where item_id in :ids and kind = 'top-up' and litres is not null and \"on\" <= :until and not is_void"
        " and not exists (select 1 from log_entry later where later.supersedes_id = entry.id)",
        ids=list(ids),
        until=until.isoformat(),
    )
    counters = load_counters(connection, list(dict.fromkeys(row[0] for row in rows)), today, trial)
    own = {item: own_readings(found) for item, found in counters.items()}
    top_ups: dict[int, list[TopUp]] = {}
    for item, entry, on, litres, unit in rows:
        life = entry_lives(counters.get(item, {}), own.get(item, {}), entry, known_day(on)).get(Kind.HOURS)
        if life is not None:
            top_ups.setdefault(item, []).append(TopUp(life.value, to_base(Decimal(litres), unit)))
    return top_ups
