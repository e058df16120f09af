"""A line in words and labelled numbers, so that anybody can check it with a pencil.

The only prose about due work; rules hand over figures, never sentences.
"""

from datetime import date
from decimal import Decimal

from fleetcare.domain.lines import DueLine, NextPoint, PastWork, Point, TriggerLine
from fleetcare.domain.quantities import Kind, Span, from_base, plain
from fleetcare.domain.schedules import Anchor, CalendarTrigger, Combine, Trigger
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.row import due_row, unit_of
from fleetcare.rules.explain_forecast import say_clues, say_range

Label = tuple[str, str]

_COMBINES = {
    Combine.FIRST: "due by whichever interval ends first",
    Combine.LAST: "due only when every interval has ended",
}
_ANCHORS = {
    Anchor.FROM_DONE: "counted from when it was done",
    Anchor.FROM_DUE: "counted from its due point: an overrun is charged to the next interval",
    Anchor.ON_GRID: "on a fixed grid: the next multiple after the work",
}


def explain(line: DueLine, facts: ItemFacts) -> list[Label]:
    """Give a line's whole working as labelled sentences, in the order one checks it."""
    labels: list[Label] = [("state", _say_state(line, facts))]
    if line.called_because:
        labels.append(("raised because", line.called_because))
    labels.append(("last done", _say_last_done(line, facts)))
    for trigger in line.triggers:
        labels.extend(_explain_trigger(line, trigger, facts))
    if len(line.triggers) > 1:
        labels.append(("combined", _COMBINES[line.version.combine]))
    if line.not_later_than is not None and line.version.not_later_than is not None:
        span = line.version.not_later_than
        labels.append(("not later than", f"{span} from last done = {line.not_later_than.isoformat()}"))
    if facts.sound_oil:
        from fleetcare.rules.explain_longer_drain import explain_longer  # not worth loading without

        labels.extend(explain_longer(line, facts))
    labels.extend(_explain_deferral(line, facts))
    labels.extend(_explain_standing(line))
    return labels


def say_trigger(trigger: Trigger, unit: str) -> str:
    """Say an interval with what belongs to it: "every 250 h, first after 50 h"."""
    if isinstance(trigger, CalendarTrigger):
        words = [f"once each {trigger.once_each}" if trigger.once_each else f"every {trigger.interval}"]
        if trigger.first is not None:
            words.append(f"first after {trigger.first}")
        if trigger.window_days is not None:
            words.append(f"within {trigger.window_days} d either side")
        if trigger.month_end:
            words.append("through the end of the month")
    else:
        words = [f"every {say_amount(trigger.interval, unit)}"]
        if trigger.first is not None:
            words.append(f"first after {say_amount(trigger.first, unit)}")
    return ", ".join(words)


def say_amount(value: Decimal, unit: str) -> str:
    """Say a figure in base units, not negative, in the unit it is shown in, to the tenth."""
    shown = from_base(value, unit)
    rounded = round(shown, 1)
    if rounded == 0 and shown != 0:
        return f"under 0.1 {unit}"
    return f"{plain(rounded)} {unit}"


def say_past(work: PastWork, facts: ItemFacts) -> str:
    """Say what one entry did to a task: in time, over, with what was missed."""
    if not work.counted:
        return f"does not count: {work.note}"
    words = [f"serves {work.served}"] if work.served else []
    if work.note:
        words.append(work.note)
    for kind, (over, grace) in work.over.items():
        unit = _unit(kind, facts)
        words.append(f"done {_amount(over, kind, unit)} over, {_amount(grace, kind, unit)} allowed")
    for kind, points in work.missed.items():
        words.append(f"missed {', '.join(_say_point(point, _unit(kind, facts)) for point in points)}")
    return "; ".join(words) or "in time"


def _say_point(point: Point, unit: str) -> str:
    return point.isoformat() if isinstance(point, date) else say_amount(point, unit)


def _unit(kind: Kind, facts: ItemFacts) -> str:
    return "d" if kind is Kind.CALENDAR else unit_of(facts, kind)


def _amount(value: Decimal, kind: Kind, unit: str) -> str:
    return f"{plain(value)} d" if kind is Kind.CALENDAR else say_amount(value, unit)


def _say_state(line: DueLine, facts: ItemFacts) -> str:
    row = due_row(line, facts)
    words = [line.state.value]
    if row.remaining is not None:
        left = say_left(row.remaining, row.unit)
        words.append(f"by {line.deciding.kind}, {left}")
    else:
        words.append(line.reason)
    if line.estimated is not None:
        words.append(f"by estimate {line.estimated}")
    return "; ".join(words)


def say_left(remaining: Decimal, unit: str) -> str:
    """Say what remains, or by how much the point is past; never a remainder rounded away."""
    amount = abs(remaining)
    shown = plain(round(amount, 1)) if round(amount, 1) != 0 or amount == 0 else "under 0.1"
    return f"{shown} {unit} over" if remaining < 0 else f"{shown} {unit} left"


def _say_last_done(line: DueLine, facts: ItemFacts) -> str:
    """Say what the line counts from, with the overrun that work had."""
    if line.last_done_on is None:
        origin = line.task.origin
        if origin is not None and origin.as_new and origin.on is not None:
            return f"never; counts from the start on {origin.on.isoformat()}"
        return "not known"
    day = line.last_done_on.isoformat()
    work = next((work for work in line.past if work.number == line.last_done_number), None)
    if work is None:
        return f"{day} (before the log began)"
    late = f": {say_past(work, facts)}" if work.over or work.missed else ""
    return f"{day} (entry {work.number}){late}"


def _explain_trigger(line: DueLine, trigger: TriggerLine, facts: ItemFacts) -> list[Label]:
    kind = trigger.kind
    unit = _unit(kind, facts)
    if trigger.next is None:
        return [(kind.value, f"{say_trigger(trigger.trigger, unit)}: unset, {trigger.unset_because}")]
    labels = [(kind.value, _say_sum(line, trigger, trigger.next, facts, unit))]
    if facts.wears:
        from fleetcare.rules.explain_next_check import explain_next_check  # not worth loading without

        labels += explain_next_check(line, trigger, facts)
    labels.append(("", _say_now(trigger, trigger.next, facts, unit)))
    if kind is not Kind.CALENDAR and trigger.forecast is not None:
        labels.append(("", _say_forecast(trigger, unit)))
    return labels


def _say_sum(line: DueLine, trigger: TriggerLine, next_point: NextPoint, facts: ItemFacts, unit: str) -> str:
    """Say how the own point comes about: what it counts from, plus what, makes what."""
    start = trigger.counts_from
    approximate = "~" if trigger.approximate else ""
    begin = start.isoformat() if isinstance(start, date) else f"{approximate}{say_amount(start or Decimal(0), unit)}"
    own = next_point.point
    if isinstance(own, date):
        if line.called_because:
            return f"raised {begin}: due {own.isoformat()}"
        text = f"{say_trigger(trigger.trigger, unit)}, from {begin}: due {own.isoformat()}"
        if next_point.nominal is not None and next_point.opens is not None:
            text += f" (nominal {next_point.nominal.isoformat()}, window opens {next_point.opens.isoformat()})"
        if next_point.paused_days:
            text += f", {next_point.paused_days} laid-up d counted on"
    else:
        text = f"{say_trigger(trigger.trigger, unit)}, from {begin}: due at {say_amount(own, unit)}"
        dial = facts.counters[trigger.kind].dial_of(own) if trigger.kind in facts.counters else None
        if dial is not None:
            text += f", {plain(round(dial, 1))} {unit} on the dial"
    if next_point.factor != 1:
        interval = next_point.interval
        effective = str(interval) if isinstance(interval, Span) else say_amount(interval, unit)
        text += f"; duty factor {plain(next_point.factor)} makes the interval {effective}"
    if line.version.effective_anchor is not Anchor.FROM_DONE:
        text += f"; {_ANCHORS[line.version.effective_anchor]}"
    if next_point.passed:
        text += f"; {_say_passed(line, next_point.passed, unit)}"
    return text


def _say_passed(line: DueLine, passed: tuple[Point, ...], unit: str) -> str:
    """Name the grid points skipped, or count the whole intervals missed."""
    if line.version.effective_anchor is Anchor.ON_GRID:
        return f"skipped {', '.join(_say_point(point, unit) for point in passed)}"
    count = len(passed)
    return f"{count} whole {'interval' if count == 1 else 'intervals'} missed"


def _say_now(trigger: TriggerLine, next_point: NextPoint, facts: ItemFacts, unit: str) -> str:
    assert trigger.remaining is not None
    if isinstance(trigger.now, Decimal):
        read = facts.counters[trigger.kind].latest
        when = f", read {read.on.isoformat()}" if read is not None else ""
        now = f"now {say_amount(trigger.now, unit)}{when}"
        left = say_left(from_base(trigger.remaining, unit), unit)
        ahead, grace = say_amount(next_point.ahead, unit), say_amount(trigger.grace, unit)
    else:
        now = f"today {trigger.now.isoformat() if trigger.now else ''}"
        left = say_left(trigger.remaining, "d")
        ahead, grace = f"{plain(next_point.ahead)} d", f"{plain(next_point.grace)} d"
    return f"{now}: {left}; near from {ahead} ahead, {grace} grace: {trigger.state}"


def _say_forecast(trigger: TriggerLine, unit: str) -> str:
    forecast = trigger.forecast
    assert forecast is not None
    if forecast.likely is None:
        return f"no date: {forecast.reason}"
    text = f"reached {say_range(forecast)}; rests on {say_clues(forecast)}"
    if trigger.likely_now is not None:
        text += f"; likely {say_amount(trigger.likely_now, unit)} by now, {trigger.estimated}"
    return text


def _explain_deferral(line: DueLine, facts: ItemFacts) -> list[Label]:
    if line.deferral is None:
        return []
    row = due_row(line, facts)
    ended = "; ended, no grace after it" if line.deferral_ended else ""
    return [
        (
            "deferred",
            f"until {row.deferred_until} by {line.deferral.by} on {line.deferral.on.isoformat()}:"
            f" {line.deferral.why}{ended}",
        )
    ]


def _explain_standing(line: DueLine) -> list[Label]:
    """Give what else bears on a line: covering, demands, cautions, where it comes from."""
    version = line.version
    demands = [
        text
        for text, holds in (("required by law", version.law), ("required by the insurer", version.insurer))
        if holds
    ]
    labels = [
        ("covered by", line.covered_by),
        ("engine", "" if line.status == "in service" else line.status.value),
        ("demand", ", ".join(demands)),
        ("needs", f"its {version.needs_sheet} sheet" if version.needs_sheet else ""),
        ("parts", ", ".join(f"{plain(quantity)} × {name}" for name, quantity in version.parts)),
        ("labour", f"{plain(version.labour_hours)} h" if version.labour_hours is not None else ""),
        ("caution", version.caution),
        ("source", version.source or "not stated"),
    ]
    return [(label, text) for label, text in labels if text]
