"""What the sheets of engines show over their hours, from what is kept of judged engines.

Light to load, as every due list needs it: judging is loaded only for engines of which what is kept does not hold.
"""

from collections.abc import Sequence
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.db.chain import last_entry
from fleetcare.domain.wear import MeasuredWears
from fleetcare.operations.judged_rows import FAR_BEHIND, newest_day
from fleetcare.operations.judged_touched import touched
from fleetcare.operations.rows import fetch
from fleetcare.operations.shop_book import book_digest, shop_texts
from fleetcare.operations.wears_json import wears_of

if TYPE_CHECKING:
    from sqlalchemy import Connection


def kept_wears(connection: "Connection", on: date, ids: Sequence[int]) -> dict[int, MeasuredWears]:
    """Give it of some engines, as known on a day; what had to be worked out is kept as `finding_lives_on` says.

    Where the shop's rules no longer fit this program, only lash is told of engines that would have to be judged.
    """
    texts = shop_texts(connection, on)
    if texts != shop_texts(connection, date.max) or on < newest_day(connection):
        from fleetcare.operations.judged import wears_anew  # days gone by are rarely asked about

        return wears_anew(connection, on, ids)
    found = _that_hold(connection, ids, book_digest(texts))
    wanting = [item for item in ids if item not in found]
    if wanting:
        from fleetcare.operations.judged import wears_judged  # takes longer to load than the due list

        found |= wears_judged(connection, wanting)
    return found


def _that_hold(connection: "Connection", ids: Sequence[int], book: str) -> dict[int, MeasuredWears]:
    """Give what is kept and holds, by rules with a digest."""
    rows = fetch(
        connection,
        "select item_id, seq, substr(content, 1, instr(content, char(10)) - 1) from judged_engine where item_id in :ids",
        ids=list(ids),
    )
    kept = {item: (seq, *wears_of(text)) for item, seq, text in rows}
    head = last_entry(connection).seq
    near = {item: row for item, row in kept.items() if row[2] == book and head - row[0] <= FAR_BEHIND}
    is_touched = touched(connection, min((seq for seq, _, _ in near.values()), default=head))
    return {item: wears for item, (seq, wears, _) in near.items() if not is_touched(item, seq)}
