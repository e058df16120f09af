"""The rule book as the shop keeps it: the shipped rules, with what the shop's own named texts make of them.

Whether the book changed is told without reading it: reading it loads the library that checks it.
"""

import hashlib
import json
from dataclasses import dataclass
from datetime import date
from functools import lru_cache
from typing import TYPE_CHECKING

from fleetcare import __version__
from fleetcare.errors import Refused
from fleetcare.operations.rows import fetch, known_day
from fleetcare.rulebook.shipped import shipped_digest

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.domain.rule_book import RuleBook


@dataclass(frozen=True, slots=True)
class ShopText:
    """Rules of the shop under a name, as TOML, from a day on, who put them in force and why."""

    name: str
    text: str
    from_on: date
    why: str
    by: str


def shop_texts(connection: "Connection", on: date) -> tuple[ShopText, ...]:
    """Give the shop's rules in force on a day, by name; the newest of a name counts."""
    rows = fetch(
        connection,
        "select shop_rules.name, text, is_dropped, from_on, why, person.name from shop_rules"
        " join person on person.id = person_id where from_on <= :on order by from_on, shop_rules.id",
        on=on.isoformat(),
    )
    newest = {row[0]: row for row in rows}
    return tuple(
        ShopText(name, text, known_day(from_on), why, by)
        for name, text, is_dropped, from_on, why, by in sorted(newest.values())
        if not is_dropped
    )


def book_digest(texts: tuple[ShopText, ...]) -> str:
    """Give what is another one whenever the rules, or how they are judged by, are others."""
    said = [__version__, shipped_digest(), *((one.name, one.text) for one in texts)]
    return hashlib.sha256(json.dumps(said).encode()).hexdigest()


def book_of(texts: tuple[ShopText, ...]) -> "RuleBook":
    """Give the rules in force. Raises Refused where a text of the shop no longer fits the rules this program ships."""
    return _book(tuple((one.name, one.text) for one in texts))


def book_in_force(connection: "Connection", on: date) -> "RuleBook":
    """Give the rules that hold for the shop on a day."""
    return book_of(shop_texts(connection, on))


def usable_book(connection: "Connection", on: date) -> tuple["RuleBook", tuple[str, ...]]:
    """Give the rules that hold on a day, or the shipped ones alone where the shop's no longer fit them, and say so.

    A sheet is to be taken whatever became of the rules.
    """
    try:
        return book_in_force(connection, on), ()
    except Refused as error:
        return book_of(()), (f"judged by the shipped rules alone, the shop's own do not fit them: {error.lines()[0]}",)


@lru_cache(maxsize=4)
def _book(texts: tuple[tuple[str, str], ...]) -> "RuleBook":
    from fleetcare.rulebook.rules import read_shop_text, rule_book

    return rule_book(*(read_shop_text(text, name) for name, text in texts))
