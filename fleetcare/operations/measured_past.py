"""How compression and oil of an engine went over its life, for the page of the engine."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.lines import DueLine
from fleetcare.domain.measured import COMPRESSION, OIL, MeasuredSheet
from fleetcare.domain.quantities import Kind
from fleetcare.domain.rule_book import Rule
from fleetcare.operations.find import FoundItem
from fleetcare.operations.measured import EngineSheets, load_engine_sheets
from fleetcare.operations.shop_book import book_in_force
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.explain_measured import MeasuredRow, measured_rows
from fleetcare.rules.explain_measured_past import measured_row
from fleetcare.rules.judge_engine import facts_of, judge_engine
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.levels import levels_of
from fleetcare.rules.measured_ahead import ahead_of, rate_of
from fleetcare.rules.measured_past import MeasuredPast, compression_pasts, oil_pasts
from fleetcare.rules.oil_fills import Along, along_of, fills_of, seen_until
from fleetcare.rules.trend_row import TrendRow, Trends

if TYPE_CHECKING:
    from sqlalchemy import Connection

    from fleetcare.domain.rule_book import RuleBook

_Place = tuple[str, str, str]
"""Quantity, point and phase of a value."""

_FIRST_KEYS = {COMPRESSION: ("c", "compression"), OIL: ("o", "oil")}


@dataclass(frozen=True, slots=True)
class MeasuredTrends:
    """The past of what is measured on sheets of each kind that has a part of its own on the page."""

    compression: Trends
    oil: Trends


@dataclass(frozen=True, slots=True)
class _About:
    """What every row of an engine is worked out from: its sheets, its rules, its hours and what measures it again.

    `life` is its life total now, h, None where nothing counts or counted it.
    """

    found: EngineSheets
    book: "RuleBook"
    rules: Sequence[Rule]
    life: Decimal | None
    intervals: Mapping[str, Decimal]

    def sheets(self, kind: str) -> tuple[MeasuredSheet, ...]:
        """Its sheets of a kind, oldest first."""
        return tuple(sheet for sheet in self.found.sheets if sheet.kind == kind)


def measured_trends(
    connection: "Connection", item: FoundItem, facts: ItemFacts, lines: Sequence[DueLine]
) -> MeasuredTrends:
    """Load what the sheets of an engine show over time; without any it says what to do. `lines` are those of the engine."""
    found = next(iter(load_engine_sheets(connection, facts.on, [item.id])), None)
    if found is None or not {COMPRESSION, OIL} & {sheet.kind for sheet in found.sheets}:
        return MeasuredTrends(Trends(why_none=_why_none(item, COMPRESSION)), Trends(why_none=_why_none(item, OIL)))
    hours = facts.counters.get(Kind.HOURS)
    latest = hours.latest if hours is not None else None
    book = book_in_force(connection, facts.on)
    about = _About(
        found=found,
        book=book,
        rules=rules_for(book, found.engine),
        life=latest.life if latest is not None else None,
        intervals=_intervals(lines),
    )
    return MeasuredTrends(_compression(about, item, facts.on), _oil(about, item, facts.on))


def _compression(about: _About, item: FoundItem, on: date) -> Trends:
    counts_hours = about.life is not None
    pasts = compression_pasts(about.sheets(COMPRESSION), about.found.engine.banks, counts_hours=counts_hours)
    return Trends(
        rows=_rows(pasts, about),
        counts_hours=counts_hours,
        until=_today(about, on),
        why_none=_why_none(item, COMPRESSION),
        is_adjusted=False,
    )


def _oil(about: _About, item: FoundItem, on: date) -> Trends:
    sheets, found, counts_hours = about.sheets(OIL), about.found, about.life is not None
    pasts = oil_pasts(sheets, found.engine.sump, found.background.fresh, counts_hours=counts_hours)
    over_oil = along_of(sheets, counts_hours=counts_hours) is Along.OIL
    begins = {fill.begins for fill in fills_of(sheets).values()} if over_oil else set()
    return Trends(
        rows=_rows(pasts, about),
        counts_hours=over_oil or counts_hours,
        until=float(seen_until(sheets, about.life)) if over_oil else _today(about, on),
        why_none=_why_none(item, OIL),
        is_adjusted=False,
        begins=tuple(sorted(map(float, begins))),
    )


def _today(about: _About, on: date) -> float:
    """Give how far along the hours of life, or days, it is by now."""
    return float(about.life) if about.life is not None else on.toordinal()


def _rows(pasts: Sequence[MeasuredPast], about: _About) -> tuple[TrendRow, ...]:
    newest = {past.last.sheet.entry: past.last.sheet for past in pasts}
    judged = {entry: _judged(sheet, about) for entry, sheet in newest.items()}
    facts = {entry: _facts(sheet, about) for entry, sheet in newest.items()}
    return tuple(_row(past, judged[past.last.sheet.entry], facts[past.last.sheet.entry], about) for past in pasts)


def _row(past: MeasuredPast, judged: Mapping[_Place, MeasuredRow], facts: MeasuredFacts, about: _About) -> TrendRow:
    last = past.last
    levels = levels_of(about.rules, last.measured, facts)
    return measured_row(
        past,
        judged.get((past.quantity, past.point, last.measured.phase)),
        levels,
        ahead_of(past, levels, life=about.life, interval=about.intervals.get(last.sheet.kind)),
        rate_of(past),
        counts_hours=about.life is not None,
    )


def _facts(sheet: MeasuredSheet, about: _About) -> MeasuredFacts:
    """Give what a sheet is judged by alone, as when it was the newest of its kind."""
    sheets = about.sheets(sheet.kind)
    return facts_of(sheets[: sheets.index(sheet) + 1], about.found.engine, about.found.background)


def _judged(sheet: MeasuredSheet, about: _About) -> dict[_Place, MeasuredRow]:
    """Judge a sheet beside those of its day and before, and give its values by quantity, point and phase."""
    found = about.found
    then = [one for one in found.sheets if (one.on, one.entry) <= (sheet.on, sheet.entry)]
    judged = judge_engine(then, found.engine, about.book, found.background).sheets[sheet.entry]
    rows = measured_rows(judged, ())
    return {(row.quantity, row.point, row.phase): row for row in rows}


def _intervals(lines: Sequence[DueLine]) -> dict[str, Decimal]:
    """Give the hours between inspections of each kind, as the first line says that measures it again by hours."""
    intervals: dict[str, Decimal] = {}
    for line in lines:
        for trigger in line.triggers:
            interval = trigger.next.interval if trigger.kind is Kind.HOURS and trigger.next is not None else None
            if isinstance(interval, Decimal):
                for kind in {line.version.needs_sheet, line.version.work}:
                    intervals.setdefault(kind, interval)
    return intervals


def _why_none(item: FoundItem, kind: str) -> str:
    if not item.is_engine:
        return f"{item.tag} is a machine: its engines are measured, each on its own page."
    key, command = _FIRST_KEYS[kind]
    said = "No compression was measured yet" if kind == COMPRESSION else "No oil sample was taken yet"
    return f"{said}. Write one down: x and {key} on this page, or fleetcare measure {command} {item.tag} FILE."
