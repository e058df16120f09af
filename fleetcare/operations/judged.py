"""What the rules made of each engine: kept in the table `judged_engine`, judged anew where that no longer holds.

A kept row holds while the rules are the same and no entry of the ledger since touches what was judged; an entry that may
have touched it makes the engine's facts be looked at again, and other facts make it be judged again. So a row may be
dropped at any time, and what is read is what judging everything anew would give.
"""

import hashlib
from collections.abc import Callable, Iterable, Sequence
from contextlib import suppress
from dataclasses import dataclass, field
from datetime import date
from functools import lru_cache
from typing import TYPE_CHECKING

from fleetcare.db.chain import last_entry
from fleetcare.domain.wear import MeasuredWears
from fleetcare.errors import Refused
from fleetcare.operations.entries import first_entries, first_of
from fleetcare.operations.families import Families
from fleetcare.operations.judged_rows import FAR_BEHIND, Kept, keep, keep_later, kept_rows, newest_day, sheet_owners
from fleetcare.operations.judged_touched import touched
from fleetcare.operations.lives_json import kept_under, lives_of, lives_text
from fleetcare.operations.measured import EngineSheets, load_engine_sheets
from fleetcare.operations.shop_book import ShopText, book_digest, book_in_force, book_of, shop_texts
from fleetcare.operations.wears_json import wears_of, wears_text
from fleetcare.rules.finding_life import FindingLife, finding_lives
from fleetcare.rules.judge_history import Judging, in_order
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.lash_wear import lash_shown
from fleetcare.rules.measured_wear import measured_wears
from fleetcare.rules.next_checks import with_its_chance

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.domain.rule_book import RuleBook

Lives = dict[int, tuple[FindingLife, ...]]
"""The findings of engines, by the number of the engine."""

Progress = Callable[[int, int], None]
"""Told how many engines of how many are judged."""

_AT_ONCE = 20  # engines: enough that loading is cheap, few enough that progress moves


@dataclass(slots=True)
class _Found:
    """What reading came to: rows that hold, and those to be kept."""

    rows: dict[int, Kept]
    made: list[Kept] = field(default_factory=list)


def finding_lives_on(connection: "Connection", on: date, progress: Progress | None = None) -> Lives:
    """Give the findings of every engine that was ever measured, as known on a day.

    What had to be judged anew is kept once the connection is closed, if the file can be written then.
    """
    texts, newest = shop_texts(connection, on), shop_texts(connection, date.max)
    if texts != newest or on < newest_day(connection):
        return judge_anew(connection, on, texts, progress)
    found = _current(connection, newest, sheet_owners(connection), progress)
    keep_later(connection, found.made)
    return {item: lives_of(row.lives) for item, row in found.rows.items()}


def judged_with(
    connection: "Connection", texts: tuple[ShopText, ...], progress: Progress | None = None
) -> tuple[Lives, tuple[Kept, ...]]:
    """Give the findings of every engine by the rules the shop would have with some texts, and the rows to keep of that."""
    found = _current(connection, texts, sheet_owners(connection), progress)
    return {item: lives_of(row.lives) for item, row in found.rows.items()}, tuple(found.made)


def judge_anew(
    connection: "Connection", on: date, texts: tuple[ShopText, ...], progress: Progress | None = None
) -> Lives:
    """Judge every engine that was ever measured by its sheets up to a day, whatever is kept."""
    judging, firsts = Judging(book_of(texts)), first_entries(connection)
    lives: Lives = {}
    owners, families = sheet_owners(connection), Families(connection, on)
    for ids in _batches(owners, progress):
        for one in load_engine_sheets(connection, on, ids, families=families):
            lives[one.item_id] = judge_lives(one, judging, firsts)
    return lives


def judge_lives(found: EngineSheets, judging: Judging, firsts: dict[int, int]) -> tuple[FindingLife, ...]:
    """Judge an engine sheet by sheet, and give the life of each of its findings."""
    sheets = in_order(found.sheets, firsts)
    return finding_lives(judging.judge_history(sheets, found.engine, found.background), firsts)


def wears_judged(connection: "Connection", ids: Sequence[int]) -> dict[int, MeasuredWears]:
    """Give what the newest sheets of some engines show over their hours, judged anew where what is kept does not hold.

    Where the shop's rules no longer fit this program, none can be judged: only what their lash shows is given.
    """
    try:
        found = _current(connection, shop_texts(connection, date.max), ids, None)
    except Refused:
        return wears_anew(connection, date.max, ids)
    keep_later(connection, found.made)
    return {item: wears_of(row.content.partition("\n")[0])[0] for item, row in found.rows.items()}


def wears_anew(connection: "Connection", on: date, ids: Sequence[int]) -> dict[int, MeasuredWears]:
    """Give what the sheets of some engines up to a day show over their hours, by the rules of that day.

    Where those no longer fit this program, only what their lash shows is given, which asks no rule.
    """
    book = None
    with suppress(Refused):
        book = book_in_force(connection, on)
    return {found.item_id: _wears(found, book, on) for found in load_engine_sheets(connection, on, ids)}


def refresh(connection: "Connection", ids: Iterable[int] | None = None, progress: Progress | None = None) -> None:
    """Judge what needs it and keep it, in the transaction that is open: of some engines, or of all."""
    wanted = sheet_owners(connection) if ids is None else sorted(set(ids))
    keep(connection, _current(connection, shop_texts(connection, date.max), wanted, progress).made)


def refresh_measured(connection: "Connection", ids: Iterable[int]) -> None:
    """Judge engines that were measured just now, so that nobody waits for it later.

    Where the shop's rules no longer fit this program that is left to whoever asks for findings.
    """
    with suppress(Refused):
        refresh(connection, ids)


def _current(
    connection: "Connection", texts: tuple[ShopText, ...], ids: Sequence[int], progress: Progress | None
) -> _Found:
    """Give the rows of some engines, made anew where they do not hold."""
    digest = kept_under(book_digest(texts))
    head = last_entry(connection).seq
    rows = {item: row for item, row in kept_rows(connection, ids).items() if row.book == digest}
    is_touched = touched(connection, min((row.seq for row in rows.values()), default=head))
    found = _Found({item: row for item, row in rows.items() if not is_touched(item, row.seq)})
    stale = [item for item in ids if item not in found.rows]
    found.made += [row.at(head) for row in found.rows.values() if head - row.seq > FAR_BEHIND]
    firsts = first_entries(connection) if stale else {}
    families = Families(connection, date.max)
    for some in _batches(stale, progress):
        for one in load_engine_sheets(connection, date.max, some, families=families):
            row = _made(one, rows.get(one.item_id), texts, digest, firsts, head)
            found.rows[one.item_id] = row
            found.made.append(row)
    return found


def _made(
    found: EngineSheets,
    before: Kept | None,
    texts: tuple[ShopText, ...],
    digest: str,
    firsts: dict[int, int],
    head: int,
) -> Kept:
    """Judge an engine, unless its facts are what was judged before."""
    facts = _facts_digest(found, firsts)
    if before is not None and before.facts == facts:
        return before.at(head)
    book = book_of(texts)
    wears = wears_text(_wears(found, book, date.max), book_digest(texts))
    return Kept(
        found.item_id, head, digest, facts, f"{wears}\n{lives_text(judge_lives(found, _judging_by(texts), firsts))}"
    )


@lru_cache(maxsize=1)
def _judging_by(texts: tuple[ShopText, ...]) -> Judging:
    return Judging(book_of(texts))


def _wears(found: EngineSheets, book: "RuleBook | None", on: date) -> MeasuredWears:
    """Give what sheets up to a day show; without rules that of their lash alone."""
    lash = lash_shown(found.sheets, found.engine, found.points, found.specs, on)
    if book is None:
        return MeasuredWears(tuple(map(with_its_chance, lash)))
    told = measured_wears(found.sheets, found.engine, rules_for(book, found.engine), found.background)
    return MeasuredWears(tuple(map(with_its_chance, (*lash, *told.pulling))), told.sound_oil)


def _facts_digest(found: EngineSheets, firsts: dict[int, int]) -> str:
    """Give what is another one whenever anything judging looks at is another."""
    chains = [first_of(firsts, sheet.entry) for sheet in found.sheets]
    behind = found.background
    return _digest(
        repr((found.engine, found.points, found.specs, found.sheets, chains)),
        repr((behind.fresh, behind.family.mark, sorted(behind.holidays))),
    )


def _digest(*parts: str) -> str:
    return hashlib.sha256("\0".join(parts).encode()).hexdigest()


def _batches(ids: Sequence[int], progress: Progress | None) -> Iterable[Sequence[int]]:
    for begin in range(0, len(ids), _AT_ONCE):
        yield ids[begin : begin + _AT_ONCE]
        if progress is not None:
            progress(min(begin + _AT_ONCE, len(ids)), len(ids))
