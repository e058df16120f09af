"""What was measured on the engines of the demo fleet besides their valve lash, told in days before the anchor day."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from datetime import date, timedelta
from decimal import Decimal
from random import Random
from typing import TYPE_CHECKING

from fleetcare.demo.oil import Followed, Sampled, fill_samples, samples
from fleetcare.demo.use import PROVING_TENTHS, is_proving
from fleetcare.drafts.sheets import SheetIn, SheetRow

if TYPE_CHECKING:
    from fleetcare.demo.items import Item
    from fleetcare.demo.yard import Yard

_LABORATORY = "Fen Edge Laboratory"


@dataclass(frozen=True, slots=True)
class Tested:
    """A compression or leak-down test, or spot readings: how many days ago, and its rows as `quantity,point,phase,value`."""

    ago: int
    kind: str
    rows: tuple[str, ...]
    gauge: str = ""


@dataclass(frozen=True, slots=True)
class Pressed:
    """How the compression of an engine was tested with each job of `task`: pressures (kPa) as they were, cylinder by cylinder.

    `falling` are those a cylinder came down to by the newest test, and by how many kPa in 1000 h.
    """

    task: str
    pressures: tuple[int, ...]
    falling: Mapping[int, tuple[int, int]]


@dataclass(frozen=True, slots=True)
class Ran:
    """How the monthly runs of a standby set went: the newest `times`, so many minutes at so many kW; `last` those of the newest.

    With `is_proved` it also ran ten hours on a load bank on the first nine Thursdays of the year.
    """

    times: int
    minutes: int
    load: str
    last: int | None = None
    is_proved: bool = False


@dataclass(frozen=True, slots=True)
class Measured:
    """Everything that was measured on an engine, but its valve lash."""

    oil: Sampled | Followed | None = None
    tested: tuple[Tested, ...] = ()
    ran: Ran | None = None
    pressed: Pressed | None = None


@dataclass(frozen=True, slots=True)
class Taken:
    """A sheet of a day, of a kind, with what it was taken with; one with a task is its entry of the log.

    `dial` is what the meter showed, where that was written down for it.
    """

    on: date
    kind: str
    sheet: SheetIn
    values: Mapping[str, object] = field(default_factory=dict)
    dial: str = ""


def compression(ago: int, pressures: str, wet: Mapping[int, str] | None = None) -> Tested:
    """Tell a compression test: pressures in kPa cylinder by cylinder, and those of some after a wet test."""
    rows = [f"pressure,{number},dry,{text}" for number, text in enumerate(pressures.split(), start=1)]
    rows += [f"pressure,{number},wet,{text}" for number, text in (wet or {}).items()]
    return Tested(ago, "compression", tuple(rows), gauge="G1")


def sheets_of(yard: "Yard", item: "Item") -> Iterator[Taken]:
    """Give every sheet of an item that was taken by the anchor day, in no order."""
    if item.measured is None:
        return
    for test in item.measured.tested:
        yield Taken(yard.ago(test.ago), test.kind, _sheet(test.rows), {"gauge": test.gauge} if test.gauge else {})
    if isinstance(item.measured.oil, Sampled):
        yield from _oil(yard, item, item.measured.oil)
    if isinstance(item.measured.oil, Followed):
        yield from _fills(yard, item, item.measured.oil)
    if item.measured.pressed is not None:
        yield from _pressed(yard, item, item.measured.pressed)
    if item.measured.ran is not None:
        yield from _runs(yard, item, item.measured.ran)


def _oil(yard: "Yard", item: "Item", sampled: Sampled) -> Iterator[Taken]:
    last = yard.last_round(item.tag) if item.meters else yard.anchor
    rounds = [day for day in yard.rounds() if yard.came[item.tag] < day <= last][:: sampled.every][::-1]
    reports = samples(item.tag, sampled, [_hours_on_oil(yard, item, day) for day in rounds])
    for day, report in zip(rounds, reports, strict=True):
        yield Taken(day, "oil", report, {"gauge": _LABORATORY})


def _fills(yard: "Yard", item: "Item", followed: Followed) -> Iterator[Taken]:
    curve, sump = yard.curves[item.tag], Decimal(str(item.plate["sump"]))
    for filled, until in _followed_fills(yard, item, followed):
        begun = curve.at(filled)
        days = [
            curve.day_of(begun + hours) for hours in range(followed.every, int(curve.at(until) - begun), followed.every)
        ]
        reports = fill_samples(f"{item.tag} {begun:f}", followed, sump, [curve.at(day) - begun for day in days])
        for day, report in zip(days, reports, strict=True):
            yield Taken(day, "oil", report, {"gauge": _LABORATORY}, yard.dial(item.tag, day))


def topped_up_days(yard: "Yard", item: "Item") -> Iterator[tuple[date, str]]:
    """Give each day oil was topped up on an engine whose oil was followed, and how much."""
    followed = item.measured.oil if item.measured is not None else None
    if isinstance(followed, Followed):
        curve = yard.curves[item.tag]
        for filled, until in _followed_fills(yard, item, followed):
            for hours in followed.topped_up:
                if curve.at(filled) + hours < curve.at(until):
                    yield curve.day_of(curve.at(filled) + hours), f"{followed.litres}L"


def _followed_fills(yard: "Yard", item: "Item", followed: Followed) -> Iterator[tuple[date, date]]:
    """Give the day each of the newest fills was filled in, and the day until which it was followed, oldest first."""
    ends = [yard.last_round(item.tag), *_drains(yard, item)][: followed.fills + 1]
    yield from zip(ends[:0:-1], ends[-2::-1], strict=True)


def _pressed(yard: "Yard", item: "Item", pressed: Pressed) -> Iterator[Taken]:
    (plan,) = (kept.plan for kept in item.tasks if kept.name == pressed.task)
    tests = list(plan.work(yard, item.tag, pressed.task))
    curve = yard.curves[item.tag]
    for on, dial in tests:
        before = curve.at(tests[0][0]) - curve.at(on)
        rows = []
        for number, usual in enumerate(pressed.pressures, start=1):
            newest, fall = pressed.falling.get(number, (usual, 0))
            tens = round(min(Decimal(usual), newest + before * fall / 1000) / 10)
            tens += Random(f"{item.tag} {number} {on}").randint(-1, 1)
            rows.append(f"pressure,{number},dry,{tens * 10}")
        values = {"task": [pressed.task], "at": [dial], "gauge": "G1"}
        yield Taken(on, "compression", _sheet(tuple(rows)), values)


def _hours_on_oil(yard: "Yard", item: "Item", day: date) -> Decimal | None:
    """Give the hours since the last drain, None where no meter of the engine counts hours, or none is told."""
    if not item.meters or item.meters[0].kind != "hours":
        return None
    drains = [on for on in _drains(yard, item) if on <= day]
    curve = yard.curves[item.tag]
    return curve.at(day) - curve.at(max(drains)) if drains else None


def _drains(yard: "Yard", item: "Item") -> list[date]:
    """Give the days the oil of an engine was changed, newest first."""
    oil = [kept for kept in item.tasks if kept.name.startswith("Oil")]
    return sorted((on for kept in oil for on, _ in kept.plan.work(yard, item.tag, kept.name)), reverse=True)


def _runs(yard: "Yard", item: "Item", ran: Ran) -> Iterator[Taken]:
    exercise = item.meters[0].exercise
    assert exercise is not None
    days = [day for day in exercise.days(yard.anchor) if day > yard.came[item.tag]][: ran.times]
    for place, day in enumerate(days):
        minutes = ran.last if place == 0 and ran.last is not None else ran.minutes
        yield Taken(day, "run", _run(minutes, ran.load))
    first = yard.anchor.replace(month=1, day=1)
    proved = (first + timedelta(days=number) for number in range((yard.anchor - first).days + 1))
    for day in filter(is_proving, proved if ran.is_proved else ()):
        yield Taken(day, "run", _run(PROVING_TENTHS * 6, ran.load))


def _run(minutes: int, load: str) -> SheetIn:
    return _sheet((f"minutes,,,{minutes}", f"load,,,{load},kW", "purpose,,,test"))


def _sheet(rows: tuple[str, ...]) -> SheetIn:
    names = ("quantity", "point", "phase", "value", "unit")
    return SheetIn(
        tuple(SheetRow(n, dict(zip(names, row.split(","), strict=False))) for n, row in enumerate(rows, start=2))
    )
