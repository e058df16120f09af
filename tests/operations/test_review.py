"""The morning review: what it can be narrowed by, and how it is put under headings."""

from dataclasses import replace
from datetime import date
from decimal import Decimal

import pytest

from fleetcare.cli.main import run
from fleetcare.context import Context
from fleetcare.operations.due import due_rows
from fleetcare.operations.due_words import Group, group_of
from fleetcare.operations.review import Facet, Order, ReviewLine, Wanted, arrange, choices, review
from tests.cli.conftest import no_screens
from tests.operations.test_due_words import a_row

FRIDAY = date(2026, 5, 1)


def a_line(*, name: str = "Pump diesel", work: str = "drain", **changes: object) -> ReviewLine:
    """A line of the review: an oil change 12 h over."""
    row = a_row(**changes)
    return ReviewLine(row, name, work, group_of(row))


def titles(lines: list[ReviewLine], order: Order) -> list[str]:
    """Give the headings of some lines in an order."""
    return [part.title for part in arrange(lines, order, FRIDAY)]


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("", True),
        ("oil", True),
        ("OIL p-01", True),
        ("sluice diesel", True),
        ("drain overdue", True),
        ("oil gearbox", False),
        ("  ", True),
    ],
)
def test_a_line_is_found_by_all_words_in_any_order_and_case(text: str, found: bool) -> None:
    assert Wanted(text).takes(a_line()) is found


def test_values_of_one_kind_add_up_and_those_of_two_kinds_must_both_hold() -> None:
    oil, air = a_line(), a_line(task="Air filter", work="filter", site="Board Yard")
    works = frozenset({(Facet.WORK, "drain"), (Facet.WORK, "filter")})
    assert [Wanted(chosen=works).takes(line) for line in (oil, air)] == [True, True]
    both = works | {(Facet.SITE, "Board Yard")}
    assert [Wanted(chosen=both).takes(line) for line in (oil, air)] == [False, True]


def test_what_is_wanted_is_said_in_the_order_of_the_facets() -> None:
    chosen = frozenset({(Facet.ENGINE, "P-01"), (Facet.STATE, "due"), (Facet.WORK, "")})
    assert Wanted("oil", chosen).words == ["due", "no kind of work", "P-01", '"oil"']


def test_by_urgency_lines_stand_in_their_groups_in_the_order_of_the_morning() -> None:
    lines = [
        a_line(state="clear"),
        a_line(state="near", estimated="due"),
        a_line(),
        a_line(state="unset"),
        a_line(engine_status="laid up"),
        a_line(state="near"),
        a_line(state="due"),
    ]
    assert titles(lines, Order.URGENCY) == [str(group) for group in Group]


def test_by_day_this_week_and_the_next_come_before_months_and_no_day_last() -> None:
    def ahead(day: str | None) -> ReviewLine:
        likely = date.fromisoformat(day) if day else None
        return a_line(state="clear", remaining=Decimal(9), likely_date=likely)

    lines = [
        ahead(None),
        ahead("2026-06-30"),
        ahead("2026-05-11"),
        ahead("2026-05-10"),
        ahead("2026-05-04"),
        ahead("2026-05-03"),
        ahead("2026-05-02"),
        ahead("2026-05-01"),
        a_line(),
    ]
    parts = arrange(lines, Order.DAY, FRIDAY)
    assert [(part.title, len(part.lines)) for part in parts] == [
        ("by today", 2),
        ("by Sunday 2026-05-03", 2),
        ("by Sunday 2026-05-10", 2),
        ("in 2026-05", 1),
        ("in 2026-06", 1),
        ("no day known", 1),
    ]


def test_work_overdue_due_or_probably_due_is_for_today_whatever_its_likely_day() -> None:
    later = date(2027, 1, 19)
    lines = [a_line(likely_date=later), a_line(state="due", likely_date=later)]
    lines.append(a_line(state="near", estimated="due", likely_date=later))
    assert titles(lines, Order.DAY) == ["by today"]


def test_by_site_and_by_engine_headings_are_in_order_of_name_and_lines_keep_theirs() -> None:
    lines = [a_line(engine="b"), a_line(engine="A", site=""), a_line(engine="b", task="Coolant", site="Alder Bank")]
    assert titles(lines, Order.SITE) == ["no site", "Alder Bank", "North Sluice"]
    assert titles(lines, Order.ENGINE) == [
        "A, Pump diesel",
        "b, Pump diesel, Alder Bank",
        "b, Pump diesel, North Sluice",
    ]


@pytest.mark.parametrize("order", list(Order))
def test_whatever_the_order_no_line_is_lost(order: Order) -> None:
    lines = [a_line(engine=f"P-{n}", state=state) for n, state in enumerate(("overdue", "near", "clear"))]
    assert sorted(line.key for part in arrange(lines, order, FRIDAY) for line in part.lines) == [
        line.key for line in lines
    ]


def test_choices_count_the_lines_of_every_value() -> None:
    lines = [a_line(), a_line(state="due"), replace(a_line(task="Coolant"), work="")]
    assert choices(lines) == [
        (Facet.STATE, "overdue", 2),
        (Facet.STATE, "due", 1),
        (Facet.SITE, "North Sluice", 3),
        (Facet.WORK, "", 1),
        (Facet.WORK, "drain", 2),
        (Facet.ENGINE, "P-01", 3),
    ]


def test_the_review_holds_the_rows_of_the_due_list_in_its_order_and_the_shop(ctx: Context) -> None:
    place = ("--db", str(ctx.path), "--as-of", "2026-05-01")
    new = ("--in-service", "2024-01-10", "--start-at", "0", "--as-new", "--meter", "hours")
    for words in (
        ("setting", "shop-name", "Tallow Fen"),
        ("engine", "add", "P-01", "--name", "Pump diesel", *new),
        ("machine", "add", "PH-1"),
        ("engine", "add", "LATER", "--in-service", "2026-06-01"),
        ("task", "add", "P-01", "Oil", "--every", "250h", "--work", "drain"),
        ("task", "add", "P-01", "Coolant", "--every", "1y"),
    ):
        assert run((*place, *words), no_screens) == 0
    with ctx.read() as connection:
        found, rows = review(connection, ctx.today()), due_rows(connection, ctx.today())
    assert [line.row for line in found.lines] == rows
    assert {line.row.task: (line.name, line.work) for line in found.lines} == {
        "Oil": ("Pump diesel", "drain"),
        "Coolant": ("Pump diesel", ""),
    }
    assert (found.shop, found.items, found.on) == ("Tallow Fen", 2, ctx.today())
