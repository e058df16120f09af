"""How many findings want an answer on a day."""

from datetime import date

import pytest

from fleetcare.context import Context
from fleetcare.db.tables import ShopRules
from fleetcare.operations.kept_lives import kept_lives
from fleetcare.operations.names import person_id
from fleetcare.operations.open_findings import OpenFindings, open_findings, say_open
from tests.operations.importing import TODAY, correct, reading
from tests.operations.measure_yard import take, yard_of_four

LOW = tuple(f"pressure,{cylinder},dry,{bar},bar" for cylinder, bar in enumerate((27, 27, 17, 27), 1))


def count(ctx: Context, on: date = TODAY) -> OpenFindings | None:
    with ctx.read() as connection:
        return open_findings(connection, on)


def test_where_nothing_was_measured_there_is_none(ctx: Context) -> None:
    assert count(yard_of_four(ctx)) == OpenFindings(0, 0)


def test_alarms_and_alerts_are_counted_apart_as_of_a_day(ctx: Context) -> None:
    take(yard_of_four(ctx), "compression", *LOW, on="2026-04-20")
    take(ctx, "spot", "coolant,,,104,", on="2026-04-25")
    assert count(ctx) == OpenFindings(1, 1, frozenset({"P-01"}))
    assert count(ctx, date(2026, 4, 24)) == OpenFindings(1, 0, frozenset({"P-01"}))


def test_what_is_kept_is_counted_where_it_holds_and_judged_anew_where_it_does_not(ctx: Context) -> None:
    entry = take(yard_of_four(ctx), "compression", *LOW, on="2026-04-20").report.sheet.entry
    assert kept(ctx)
    reading(ctx, "P-01", "2026-04-21", "1150")
    assert not kept(ctx)
    assert count(ctx) == OpenFindings(1, 0, frozenset({"P-01"}))
    assert kept(ctx)
    assert not kept(ctx, date(2026, 4, 19))
    assert count(ctx, date(2026, 4, 19)) == OpenFindings(0, 0)
    correct(ctx, entry, void=True, why="wrong engine")
    assert count(ctx) == OpenFindings(0, 0)


def kept(ctx: Context, on: date = TODAY) -> bool:
    """Whether findings are told from what is kept alone."""
    with ctx.read() as connection:
        return kept_lives(connection, on) is not None


def test_rules_that_no_longer_fit_do_not_stop_whoever_asks_what_is_due(ctx: Context) -> None:
    take(yard_of_four(ctx), "compression", *LOW, on="2026-04-20")
    with ctx.write() as session:
        who = person_id(session, "Quill") or 0
        session.add(ShopRules(name="ours", text="[[rule]]\nid = 3", from_on=TODAY, why="x", person_id=who))
    assert count(ctx) is None


@pytest.mark.parametrize(
    ("found", "said"),
    [
        (OpenFindings(0, 0), ""),
        (OpenFindings(1, 0), "1 finding wants an answer: 1 alarm"),
        (OpenFindings(2, 1), "3 findings want an answer: 2 alarms, 1 alert"),
        (None, "Which findings want an answer cannot be told"),
    ],
)
def test_it_is_said_in_a_sentence(found: OpenFindings | None, said: str) -> None:
    assert say_open(found) == said
