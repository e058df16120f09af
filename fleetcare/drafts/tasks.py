"""A task as somebody states it: intervals, what binds to them, and what cannot go together."""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import Literal, Self

from pydantic import model_validator

from fleetcare.domain.quantities import Amount, Figure, Kind, Span
from fleetcare.domain.schedules import Anchor, Combine, Period
from fleetcare.drafts.fields import (
    Day,
    DaysOrDials,
    Hours,
    Intervals,
    Note,
    Parts,
    SpanField,
    Text,
    Texts,
    parse_day_or_dial,
)
from fleetcare.drafts.reading_in import Draft
from fleetcare.errors import Refused
from fleetcare.rules.due.calendar import period_span

SheetKind = Literal["lash", "compression", "leakdown", "run", "spot", "oil"]
_SHORTEST = Decimal("0.1")
"""Counted interval: what the finest dial tells apart."""


@dataclass(frozen=True, slots=True)
class TriggerDraft:
    """One interval with what binds to it; figures as entered."""

    kind: Kind
    every: Amount | Span
    first: Amount | Span | None = None
    ahead: Amount | Span | None = None
    grace: Amount | Span | None = None
    once_each: Period | None = None
    window_days: int | None = None
    month_end: bool = False
    grid_origin: date | Figure | None = None


class TaskFields(Draft):
    """A task's name, its intervals and its rules, each by itself."""

    name: Text
    every: Intervals = ()
    first: Intervals = ()
    ahead: Intervals = ()
    grace: Intervals = ()
    combine: Combine = Combine.FIRST
    anchor: Anchor | None = None
    through_month_end: bool = False
    once_each: Period | None = None
    window: SpanField | None = None
    grid_origin: DaysOrDials = ()
    not_later_than: SpanField | None = None
    last_done: DaysOrDials = ()
    work: Note = ""
    law: bool = False
    insurer: bool = False
    needs_sheet: SheetKind | None = None
    covers: Texts = ()
    once: bool = False
    on_condition: bool = False
    pause_while_laid_up: bool = False
    deferrable: Literal["yes", "no"] | None = None
    labour: Hours | None = None
    part: Parts = ()
    caution: Note = ""
    source: Note = ""


class TaskChanges(TaskFields):
    """What should stand in a task from a day on, lists whole; what is neither given nor `cleared` stays as it is."""

    on: Day
    cleared: Texts = ()


class TaskEnd(Draft):
    """A task that is not needed any more from a day on."""

    name: Text
    on: Day


class TaskDraft(TaskFields):
    """A task as a whole, checked against itself."""

    @model_validator(mode="after")
    def _check(self) -> Self:
        check_task(self)
        return self

    @property
    def is_deferrable(self) -> bool:
        """Whether its due points may be moved: never by law or insurer, not once-each unless said."""
        if self.law or self.insurer:
            return False
        if self.deferrable is not None:
            return self.deferrable == "yes"
        return self.once_each is None

    def triggers(self) -> tuple[TriggerDraft, ...]:
        """Give the intervals in option order, each with what binds to it."""
        intervals = list(self.every)
        if self.once and not intervals:
            intervals = list(self.first)
        if self.once_each is not None and not any(isinstance(i, Span) for i in intervals):
            intervals.append(period_span(self.once_each))
        return tuple(self._trigger(interval) for interval in intervals)

    def _trigger(self, every: Amount | Span) -> TriggerDraft:
        kind = kind_of(every)
        is_calendar = kind is Kind.CALENDAR
        return TriggerDraft(
            kind=kind,
            every=every,
            first=_bound(self.first, kind),
            ahead=_bound(self.ahead, kind),
            grace=_bound(self.grace, kind),
            once_each=self.once_each if is_calendar else None,
            window_days=self.window.nominal_days if is_calendar and self.window else None,
            month_end=self.through_month_end and is_calendar,
            grid_origin=next((o for o in self.grid_origin if _origin_binds(o, kind)), None),
        )


class LastDoneDraft(Draft):
    """When a task was last done, before the log began: a day, a figure of each dial, or both."""

    last_done: DaysOrDials


def origin_kind(text: str) -> Kind | None:
    """Give the kind a grid's origin binds to, None for a bare figure."""
    origin = parse_day_or_dial(text)
    return Kind.CALENDAR if isinstance(origin, date) else origin.kind


def kind_of(interval: Amount | Span) -> Kind:
    """Give the trigger kind an interval belongs to."""
    return Kind.CALENDAR if isinstance(interval, Span) else interval.kind


def _bound(options: tuple[Amount | Span, ...], kind: Kind) -> Amount | Span | None:
    return next((option for option in options if kind_of(option) is kind), None)


def _origin_binds(origin: date | Figure, kind: Kind) -> bool:
    if isinstance(origin, date):
        return kind is Kind.CALENDAR
    return kind is not Kind.CALENDAR and origin.kind in {None, kind}


def length(interval: Amount | Span) -> Decimal:
    """Give an interval's size for comparing it with another of its kind: base units, or days."""
    return Decimal(interval.nominal_days) if isinstance(interval, Span) else interval.base


def check_task(draft: TaskDraft) -> None:
    """Refuse a task whose parts cannot go together, naming the option and the way out."""
    triggers = draft.triggers()
    _check_intervals(draft, triggers)
    for trigger in triggers:
        _check_trigger(trigger)
    _check_calendar_forms(draft, triggers)
    _check_combining(draft, triggers)
    if draft.deferrable == "yes" and (draft.law or draft.insurer):
        raise Refused("work required by law or insurer is never deferrable", "leave out --deferrable yes")


def _check_intervals(draft: TaskDraft, triggers: tuple[TriggerDraft, ...]) -> None:
    if draft.on_condition and triggers:
        raise Refused("on-condition work has no interval", "leave out --every, or --on-condition")
    if not triggers and not draft.on_condition:
        raise Refused("the task has no interval", "give --every, such as --every 250h, or --on-condition")
    kinds = [trigger.kind for trigger in triggers]
    for name, options in (("--every", draft.every), ("--first", draft.first)):
        for option in options:
            if length(option) <= 0:
                raise Refused(f"{name} {option} is no interval", "give a figure above 0")
            if isinstance(option, Amount) and option.value < _SHORTEST:
                raise Refused(f"{name} {option} is shorter than any meter shows", f"give {_SHORTEST} or more")
    for name, options in (
        ("--every", draft.every),
        ("--first", draft.first),
        ("--ahead", draft.ahead),
        ("--grace", draft.grace),
    ):
        bound = [kind_of(option) for option in options]
        for option, kind in zip(options, bound, strict=True):
            if bound.count(kind) > 1:
                raise Refused(f"{name} names {kind} twice", "give one of each kind")
            if kind not in kinds:
                raise Refused(f"{name} {option} binds to no interval of this task", f"add an --every counting {kind}")
    _check_grid(draft, kinds)


def _check_grid(draft: TaskDraft, kinds: list[Kind]) -> None:
    if draft.grid_origin and draft.anchor is not Anchor.ON_GRID:
        raise Refused("--grid-origin needs a grid", "add --anchor on-grid")
    bound: list[Kind] = []
    for origin in draft.grid_origin:
        binds_to = [kind for kind in kinds if _origin_binds(origin, kind)]
        if len(binds_to) > 1:
            raise Refused(f"--grid-origin {origin} could be {' and '.join(binds_to)}", "write its unit behind it")
        if not binds_to:
            raise Refused(f"--grid-origin {origin} binds to no interval of this task", "give one of a kind it counts")
        bound += binds_to
    for kind in bound:
        if bound.count(kind) > 1:
            raise Refused(f"--grid-origin names {kind} twice", "give one of each kind")


def _check_trigger(trigger: TriggerDraft) -> None:
    if trigger.ahead is not None and length(trigger.ahead) >= length(trigger.every):
        raise Refused(
            f"--ahead {trigger.ahead} is not shorter than the interval of {trigger.every}", "give a shorter --ahead"
        )


def _check_calendar_forms(draft: TaskDraft, triggers: tuple[TriggerDraft, ...]) -> None:
    calendar = next((t for t in triggers if t.kind is Kind.CALENDAR), None)
    if draft.window is not None and draft.once_each is not None:
        raise Refused("a task is done in a window or once each period, not both", "leave out one of them")
    if draft.window is not None:
        _check_window(draft.window, calendar)
    if draft.through_month_end and (calendar is None or draft.once_each or draft.window):
        raise Refused("--through-month-end extends a plain calendar interval", "give one, such as --every 12mo")
    if draft.once_each is None or calendar is None:
        return
    if calendar.first is not None:
        raise Refused("--once-each begins with the period after the start point", "leave out the calendar --first")
    if length(calendar.every) != Decimal(period_span(draft.once_each).nominal_days) and not _same_span(
        calendar.every, period_span(draft.once_each)
    ):
        raise Refused(f"--every {calendar.every} is not once each {draft.once_each}", "leave out the calendar --every")


def _same_span(one: Amount | Span, other: Span) -> bool:
    return isinstance(one, Span) and (one.months, one.days) == (other.months, other.days)


def _check_window(window: Span, calendar: TriggerDraft | None) -> None:
    if calendar is None:
        raise Refused("--window lies around a calendar date", "give a calendar interval, such as --every 6mo")
    if calendar.grace is not None:
        raise Refused("--grace with --window would say the same thing twice", "leave out the calendar --grace")
    if window.nominal_days <= 0 or 2 * window.nominal_days >= length(calendar.every):
        raise Refused(f"--window {window} does not fit into the interval of {calendar.every}", "give a shorter window")


def _check_combining(draft: TaskDraft, triggers: tuple[TriggerDraft, ...]) -> None:
    if draft.combine is Combine.FIRST:
        if draft.not_later_than is not None:
            raise Refused("--not-later-than bounds --combine last only", "leave it out, or add an --every")
        return
    if draft.law or draft.insurer:
        raise Refused("work required by law or insurer falls due by its first interval", "leave out --combine last")
    if draft.not_later_than is None:
        raise Refused("--combine last could wait for ever", "bound it with --not-later-than, such as 5y")
    if draft.not_later_than.count <= 0:
        raise Refused(f"--not-later-than {draft.not_later_than} is no bound", "give a span above 0")
