"""The rule book as it stands in the shop: each rule with its limits, its source, and which engines it judges."""

from datetime import date
from difflib import get_close_matches
from typing import TYPE_CHECKING

from fleetcare.domain.rule_book import RuleBook
from fleetcare.errors import Refused
from fleetcare.operations.measured import load_measured_engine
from fleetcare.operations.rows import fetch
from fleetcare.operations.shop_book import book_in_force
from fleetcare.rules.explain_rule import RULE_COLUMNS, RuleOrigin, RuleRow, RuleState, rule_row
from fleetcare.rules.judging.applies import rules_for

if TYPE_CHECKING:
    from sqlalchemy import Connection

__all__ = ["RULE_COLUMNS", "RuleRow", "find_rule", "rule_rows"]


def rule_rows(connection: "Connection", on: date) -> list[RuleRow]:
    """Give every rule, shipped and the shop's own, in the order of the book; those switched off come last."""
    from fleetcare.rulebook.rules import shipped_rules  # loads the library that checks them

    book = book_in_force(connection, on)
    judged = _judged_engines(connection, on, book)
    shipped = {rule.id: rule for rule in shipped_rules()}
    rows = []
    for rule in book.rules:
        is_on = not rule.preset or rule.preset in book.chosen
        origin = RuleOrigin.SHIPPED if rule.id in shipped else RuleOrigin.OWN
        origin = RuleOrigin.CHANGED if rule.id in book.overridden else origin
        state = RuleState.IN_FORCE if is_on else RuleState.UNCHOSEN
        rows.append(rule_row(rule, state, origin, judged.get(rule.id, ())))
    rows += [rule_row(shipped[off.id], RuleState.OFF, RuleOrigin.CHANGED, (), off.why) for off in book.off]
    return rows


def find_rule(rows: list[RuleRow], name: str) -> RuleRow:
    """Find a rule by id, whatever its case; refuses an unknown one with the nearest ids."""
    known = {row.id: row for row in rows}
    key = name.strip().lower()
    if key in known:
        return known[key]
    near = get_close_matches(key, known, n=3) or [row_id for row_id in known if key in row_id][:3]
    remedy = f"did you mean {' or '.join(near)}?" if near else "see fleetcare rules for their ids"
    raise Refused(f"there is no rule {name!r}", remedy)


def _judged_engines(connection: "Connection", on: date, book: RuleBook) -> dict[str, list[str]]:
    """Give the tags of the engines in use that each rule is for, by its id."""
    rows = fetch(
        connection,
        "select id from item where is_engine and (withdrawn_on is null or withdrawn_on > :on) order by tag, id",
        on=on.isoformat(),
    )
    judged: dict[str, list[str]] = {}
    for (item,) in rows:
        engine = load_measured_engine(connection, item)
        for rule in rules_for(book, engine) if engine else ():
            judged.setdefault(rule.id, []).append(engine.tag if engine else "")
    return judged
