"""The morning review: the due list with what one narrows and arranges it by."""

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from datetime import date, timedelta
from enum import StrEnum
from typing import TYPE_CHECKING, Any

from fleetcare.operations.due import DueRow, due_lines
from fleetcare.operations.due_words import Group, group_of
from fleetcare.operations.open_findings import is_measured
from fleetcare.operations.rows import fetch
from fleetcare.operations.settings import read_settings
from fleetcare.rules.due.row import due_row

if TYPE_CHECKING:
    from sqlalchemy import Connection


class Facet(StrEnum):
    """What a review can be narrowed by, beside free text."""

    STATE = "state"
    SITE = "site"
    WORK = "kind of work"
    ENGINE = "engine"


class Order(StrEnum):
    """How a review can be arranged."""

    URGENCY = "urgency"
    DAY = "likely day"
    SITE = "site"
    ENGINE = "engine"


@dataclass(frozen=True, slots=True)
class ReviewLine:
    """One row of the due list, with the name of its engine or machine, its kind of work and its group."""

    row: DueRow
    name: str
    work: str
    group: Group

    @property
    def key(self) -> tuple[str, str]:
        """What names the line for good: no two in use share tag and task."""
        return self.row.engine, self.row.task

    def value_of(self, facet: Facet) -> str:
        """Give what the line says to a facet; empty where nothing is stated."""
        match facet:
            case Facet.STATE:
                return self.group
            case Facet.SITE:
                return self.row.site
            case Facet.WORK:
                return self.work
            case Facet.ENGINE:
                return self.row.engine


@dataclass(frozen=True, slots=True)
class Review:
    """The due list of a day in its order; `items` counts engines and machines in use, those without lines too.

    Where anything `is_measured` there may be findings.
    """

    on: date
    shop: str
    items: int
    lines: tuple[ReviewLine, ...]
    is_measured: bool


@dataclass(frozen=True, slots=True)
class Wanted:
    """What of a review to show: lines that hold every word of `text`, and a chosen value of each chosen facet."""

    text: str = ""
    chosen: frozenset[tuple[Facet, str]] = frozenset()

    @property
    def words(self) -> list[str]:
        """What is wanted, in words: chosen values in the order of the facets, then the text in quotes."""
        chosen = [(facet, value) for facet in Facet for value in sorted(v for f, v in self.chosen if f is facet)]
        return [value or f"no {facet}" for facet, value in chosen] + ([f'"{self.text}"'] if self.text else [])

    def takes(self, line: ReviewLine) -> bool:
        """Tell whether a line is wanted."""
        for facet in {facet for facet, _ in self.chosen}:
            if (facet, line.value_of(facet)) not in self.chosen:
                return False
        row = line.row
        said = " ".join((row.engine, line.name, row.machine, row.site, row.task, line.work, line.group, row.reason))
        return all(word in said.casefold() for word in self.text.casefold().split())


@dataclass(frozen=True, slots=True)
class Part:
    """Lines under one heading; `group` where they are those of one group."""

    title: str
    lines: tuple[ReviewLine, ...]
    group: Group | None = None


def review(connection: "Connection", on: date, *, is_future: bool = False) -> Review:
    """Load the review of a day."""
    in_use = fetch(
        connection,
        "select count(*) from item where (withdrawn_on is null or withdrawn_on > :on)"
        " and (in_service_on is null or in_service_on <= :on)",
        on=on.isoformat(),
    )
    lines = []
    for line, facts in due_lines(connection, on, is_future=is_future):
        row = due_row(line, facts)
        lines.append(ReviewLine(row, line.item.name, line.version.work, group_of(row)))
    shop = read_settings(connection)["shop-name"]
    return Review(on, shop, in_use[0][0], tuple(lines), is_measured(connection))


def arrange(lines: Iterable[ReviewLine], order: Order, on: date) -> list[Part]:
    """Put lines under the headings of an order; within each they keep the order of the due list."""
    match order:
        case Order.URGENCY:
            parts = _parted(lines, lambda line: (list(Group).index(line.group), line.group))
            return [Part(part.title, part.lines, part.lines[0].group) for part in parts]
        case Order.DAY:
            return _parted(sorted(lines, key=lambda line: _day(line, on)), lambda line: _stretch(_day(line, on), on))
        case Order.SITE:
            return _parted(lines, lambda line: (line.row.site.casefold(), line.row.site or "no site"))
        case Order.ENGINE:
            return _parted(lines, lambda line: (line.row.engine.casefold(), _headed(line)))


def _parted(lines: Iterable[ReviewLine], place: Callable[[ReviewLine], tuple[object, str]]) -> list[Part]:
    """Part lines by the place each has in the order of headings, and the heading that stands there."""
    parts: dict[tuple[Any, str], list[ReviewLine]] = {}
    for line in lines:
        parts.setdefault(place(line), []).append(line)
    return [Part(title, tuple(parts[rank, title])) for rank, title in sorted(parts)]


def _day(line: ReviewLine, on: date) -> date:
    """Give the day work is likely to fall due: today where it already has, the end of time where none is known."""
    if line.group in {Group.OVERDUE, Group.DUE, Group.PROBABLY}:
        return on
    return max(line.row.likely_date or date.max, on)


def _stretch(day: date, on: date) -> tuple[date, str]:
    """Give the stretch of time a day falls in: this week and the next, then months."""
    sunday = on + timedelta(days=6 - on.weekday())
    if day == on:
        return on, "by today"
    for last in (sunday, sunday + timedelta(days=7)):
        if day <= last:
            return last, f"by Sunday {last.isoformat()}"
    if day == date.max:
        return day, "no day known"
    return max(day.replace(day=1), last), f"in {day:%Y-%m}"


def _headed(line: ReviewLine) -> str:
    return ", ".join(word for word in (line.row.engine, line.name, line.row.site) if word)


def choices(lines: Iterable[ReviewLine]) -> list[tuple[Facet, str, int]]:
    """Give every value of every facet with how many lines have it; states in their order, the rest by name."""
    counts: dict[tuple[Facet, str], int] = {}
    for line in lines:
        for facet in Facet:
            key = facet, line.value_of(facet)
            counts[key] = counts.get(key, 0) + 1
    facets, groups = list(Facet), [str(group) for group in Group]
    order = sorted(
        counts,
        key=lambda key: (
            facets.index(key[0]),
            groups.index(key[1]) if key[0] is Facet.STATE else 0,
            key[1].casefold(),
        ),
    )
    return [(facet, value, counts[facet, value]) for facet, value in order]
