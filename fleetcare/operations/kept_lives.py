"""The findings of all engines from what is kept of judged ones: light to load, for whoever only counts them."""

from datetime import date
from typing import TYPE_CHECKING

from fleetcare.operations.judged_rows import kept_rows, newest_day, sheet_owners
from fleetcare.operations.judged_touched import touched
from fleetcare.operations.lives_json import kept_under, lives_of
from fleetcare.operations.shop_book import book_digest, shop_texts
from fleetcare.rules.finding_life import FindingLife

if TYPE_CHECKING:
    from sqlalchemy import Connection


def kept_lives(connection: "Connection", on: date) -> dict[int, tuple[FindingLife, ...]] | None:
    """Give the findings of every engine, as known on a day; None where any would have to be judged anew for that."""
    texts, owners = shop_texts(connection, on), sheet_owners(connection)
    if texts != shop_texts(connection, date.max) or on < newest_day(connection):
        return None
    rows, mark = kept_rows(connection, owners), kept_under(book_digest(texts))
    if len(rows) < len(owners) or any(row.book != mark for row in rows.values()):
        return None
    is_touched = touched(connection, min((row.seq for row in rows.values()), default=0))
    if any(is_touched(item, row.seq) for item, row in rows.items()):
        return None
    return {item: lives_of(row.lives) for item, row in rows.items()}
