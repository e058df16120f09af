"""Put rules of the shop in force, or drop them: checked whole, every sheet judged anew, what came and went said."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

from fleetcare.db.tables import ShopRules
from fleetcare.drafts.findings import RulesDraft
from fleetcare.errors import Refused
from fleetcare.operations.finding_rows import FindingRecord, rows_of
from fleetcare.operations.judged import Progress, judged_with
from fleetcare.operations.judged_rows import Kept, keep
from fleetcare.operations.names import person_id
from fleetcare.operations.rows import fetch
from fleetcare.operations.shop_book import ShopText, book_of, shop_texts
from fleetcare.rules.finding_life import FindingState

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

_OVER = frozenset({FindingState.CLEARED, FindingState.JOINED, FindingState.WITHDRAWN})


@dataclass(frozen=True, slots=True)
class Rejudged:
    """What other rules make of the fleet, not stored yet: a text, or None where it is dropped, and what came and went."""

    name: str
    text: str | None
    kept: tuple[Kept, ...]
    came: tuple[FindingRecord, ...]
    went: tuple[FindingRecord, ...]
    notes: tuple[str, ...] = ()


def try_rules(connection: "Connection", path: Path, on: date, progress: Progress | None = None) -> Rejudged:
    """Judge the fleet by a file of rules in the place of those of its name. Nothing is stored.

    Raises Refusals with everything that is wrong in the file.
    """
    from fleetcare.rulebook.rules import read_rule_file, read_shop_text

    text = read_rule_file(path, path.name)
    read_shop_text(text, path.name)  # what is wrong is said of the file, not of the name it is kept under
    texts = shop_texts(connection, on)
    if any((one.name, one.text) == (path.stem, text) for one in texts):
        raise Refused(f"{path.stem} is in force already, word for word", "change the file first")
    new = ShopText(path.stem, text, on, "", "")
    return _rejudge(connection, texts, (*_without(texts, path.stem), new), path.stem, text, on, progress)


def try_without(connection: "Connection", name: str, on: date, progress: Progress | None = None) -> Rejudged:
    """Judge the fleet without the rules of a name. Nothing is stored; refuses a name that has none in force."""
    texts = shop_texts(connection, on)
    rest = _without(texts, name)
    if len(rest) == len(texts):
        names = ", ".join(one.name for one in texts)
        raise Refused(f"no rules of the shop are called {name!r}", f"choose one of {names or 'none yet'}")
    return _rejudge(connection, texts, rest, name, None, on, progress)


def store_rules(session: "Session", rejudged: Rejudged, draft: RulesDraft) -> None:
    """Put rules in force, or out of it, from a day on, with what the fleet was judged to be by them."""
    session.add(
        ShopRules(
            name=rejudged.name,
            text=rejudged.text or "",
            is_dropped=rejudged.text is None,
            from_on=draft.on,
            why=draft.why,
            person_id=person_id(session, draft.by) or 0,
        )
    )
    session.flush()
    keep(session.connection(), rejudged.kept)


def _without(texts: Sequence[ShopText], name: str) -> tuple[ShopText, ...]:
    return tuple(one for one in texts if one.name != name)


def _rejudge(
    connection: "Connection",
    before: tuple[ShopText, ...],
    after: tuple[ShopText, ...],
    name: str,
    text: str | None,
    on: date,
    progress: Progress | None,
) -> Rejudged:
    after = tuple(sorted(after, key=lambda one: one.name))
    notes = _unknown_engines(connection, after)
    behind = 0  # engines that had to be judged by the rules before, to tell what comes and goes

    def by_the_rules_before(done: int, of: int) -> None:
        nonlocal behind
        behind = done
        if progress is not None:
            progress(done, 2 * of)

    def by_the_new_rules(done: int, of: int) -> None:
        if progress is not None:
            progress(behind + done, behind + of)

    try:
        had = _standing(connection, before, on, by_the_rules_before)
    except Refused as error:
        had = _Standing({}, ())
        notes = (*notes, f"the rules before did not fit this program, so nothing went: {error.lines()[0]}")
    has = _standing(connection, after, on, by_the_new_rules)
    came = tuple(row for key, row in has.rows.items() if key not in had.rows)
    went = tuple(row for key, row in had.rows.items() if key not in has.rows)
    return Rejudged(name, text, has.kept, came, went, notes)


@dataclass(frozen=True, slots=True)
class _Standing:
    """The findings that are not over, by engine, cause and subject, and what is to be kept of how they were made."""

    rows: dict[tuple[str, str, str], FindingRecord]
    kept: tuple[Kept, ...]


def _standing(connection: "Connection", texts: tuple[ShopText, ...], on: date, progress: Progress) -> _Standing:
    lives, kept = judged_with(connection, texts, progress)
    rows = rows_of(connection, lives, on)
    standing = {(row.engine, row.cause, row.subject): row for row in rows if row.state not in _OVER}
    return _Standing(standing, kept)


def _unknown_engines(connection: "Connection", texts: tuple[ShopText, ...]) -> tuple[str, ...]:
    """Say which engines the shop's rules name that nobody has."""
    known = {row[0] for row in fetch(connection, "select tag_key from item where withdrawn_on is null")}
    return tuple(
        f"the preset {preset} is on for {tag}, which is no engine here"
        for preset, tags in book_of(texts).chosen.items()
        for tag in tags
        if tag.strip().casefold() not in known
    )
