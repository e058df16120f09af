"""Which engines entries of the ledger may have changed the judging of.

The ledger has every row that is stored or changed, so nothing passes this by. A kind of row that is not known here touches
every engine: too much judging is safe, too little is not.
"""

import json
from collections.abc import Callable
from typing import TYPE_CHECKING, Any

from fleetcare.domain.measured import OIL
from fleetcare.operations.kin import Kin
from fleetcare.operations.rows import fetch

if TYPE_CHECKING:
    from sqlalchemy import Connection

_OF_ITEM = frozenset({"lash_spec", "log_entry", "meter_fit", "start_figure"})
"""Rows that say whose they are in `item_id`."""

_BY_METER = frozenset({"meter", "meter_fit", "reading", "reading_mark"})
"""Rows of a meter, which counts for whoever it is fitted to."""

_OF_FAMILY = frozenset({"engine", "sheet", "sheet_value"})
"""Rows that may touch engines like theirs: what is usual for these is told by the oil samples of all."""

NEVER = frozenset(
    {
        "deferral",
        "deferral_figure",
        "duty_factor",
        "finding_answer",  # answers are held against what was judged each time they are asked for
        "fitting",  # whom a meter counts for stands in meter_fit
        "log_part",
        "log_task",
        "origin_figure",
        "person",
        "shop_rules",  # told by the digest of the rules
        "site",
        "status_spell",
        "task",
        "task_call",
        "task_cover",
        "task_origin",
        "task_part",
        "task_trigger",
        "task_version",
    }
)
"""Rows judging does not look at."""

_EVERYBODY = 0
_METERS = "select item_id from meter_fit where meter_id = :meter"
_READ_AFRESH = (
    "select item_id from meter_fit fit where meter_id = :meter and not exists (select 1 from reading known"
    ' left join log_entry entry on entry.id = known.entry_id where known.meter_id = :meter and known."on" < :on'
    " and known.\"on\" >= coalesce(fit.from_on, '') and coalesce(entry.is_void, 0) = 0"
    ' and known."on" >= (select max(taken_on) from sheet where sheet.item_id = fit.item_id)'
    " and not exists (select 1 from log_entry later where later.supersedes_id = known.entry_id)"
    " and not exists (select 1 from reading_mark where reading_id = known.id))"
)
"""Whose sheets a new reading may tell the hours of: of nobody read between the newest sheet and it, as that tells them."""
_SHEET = "select item_id from sheet where id = :sheet"
_HAS_OIL = f"select 1 from sheet where kind = '{OIL}' and {{}} = :number limit 1"
_SAMPLED_SINCE = f"select item_id from sheet where item_id = :item and kind = '{OIL}' and taken_on >= :on limit 1"
"""Whose samples a new top-up may stand in for."""
_NEW_OIL = (
    "select 1 from sheet join sheet_value on sheet_value.sheet_id = sheet.id where sheet.entry_id = :entry"
    " and sheet_value.phase = 'new' limit 1"
)
_MARKED = "select meter_id from reading where id = :reading"


def touched(connection: "Connection", since: int) -> Callable[[int, int], bool]:
    """Give a test of whether the engine of a number was touched after an entry of the ledger; none are before `since`."""
    newest: dict[int, int] = {}
    kin = Kin(connection)
    rows = fetch(connection, "select seq, kind, payload from ledger where seq > :since order by seq", since=since)
    for seq, kind, payload in rows:
        if kind not in NEVER:
            for item in _items(connection, kin, kind, json.loads(payload)):
                newest[item] = seq
    return lambda item, seq: max(newest.get(item, 0), newest.get(_EVERYBODY, 0)) > seq


def _items(connection: "Connection", kin: Kin, kind: str, row: dict[str, Any]) -> set[int]:
    """Give the engines a row may touch."""
    if kind == "item":
        return {row["id"]}
    if kind in _OF_FAMILY:
        return _of_family(connection, kin, kind, row)
    if kind == "log_entry":
        if row["supersedes_id"] is None:  # what else is new with it are rows of their own
            is_top_up = row["kind"] == "top-up"
            return _of(connection, _SAMPLED_SINCE, item=row["item_id"], on=row["on"]) if is_top_up else set()
        if fetch(connection, _NEW_OIL, entry=row["supersedes_id"]):
            return {_EVERYBODY}
        has_oil = fetch(connection, _HAS_OIL.format("entry_id"), number=row["supersedes_id"])
        return {*kin.of(row["item_id"])} if has_oil else {row["item_id"]}
    if kind == "reading":
        return _of(connection, _READ_AFRESH, meter=row["meter_id"], on=row["on"])
    items = {row["item_id"]} if kind in _OF_ITEM else set()
    if kind in _BY_METER:
        items |= _of(connection, _METERS, meter=_meter(connection, kind, row))
    return items if kind in _OF_ITEM | _BY_METER else {_EVERYBODY}


def _of_family(connection: "Connection", kin: Kin, kind: str, row: dict[str, Any]) -> set[int]:
    """Give the engines a nameplate, a sheet or a value may touch."""
    if kind == "sheet":  # its values are stored along with it
        return {*kin.of(row["item_id"])} if row["kind"] == OIL else {row["item_id"]}
    if kind == "engine":  # nobody knows by now which family it left
        has_oil = fetch(connection, _HAS_OIL.format("item_id"), number=row["item_id"])
        return {_EVERYBODY} if has_oil else {row["item_id"]}
    is_new_oil = row["phase"] == "new"  # every engine with that grade may be held against it
    return {_EVERYBODY} if is_new_oil else _of(connection, _SHEET, sheet=row["sheet_id"])


def _meter(connection: "Connection", kind: str, row: dict[str, Any]) -> int:
    if kind == "reading_mark":
        return next(iter(_of(connection, _MARKED, reading=row["reading_id"])))
    number: int = row["id"] if kind == "meter" else row["meter_id"]
    return number


def _of(connection: "Connection", sql: str, **values: int | str) -> set[int]:
    return {row[0] for row in fetch(connection, sql, **values)}
