"""What was measured on the engines of the demo fleet besides their valve lash, told in days before the anchor day."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from datetime import date, timedelta
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.demo.oil import Sampled, samples
from fleetcare.demo.use import PROVING_TENTHS, is_proving
from fleetcare.drafts.sheets import SheetIn, SheetRow

if TYPE_CHECKING:
    from fleetcare.demo.items import Item
    from fleetcare.demo.yard import Yard


@dataclass(frozen=True, slots=True)
class Tested:
    """A compression or leak-down test, or spot readings: how many days ago, and its rows as `quantity,point,phase,value`."""

    ago: int
    kind: str
    rows: tuple[str, ...]
    gauge: str = ""


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
    """Everything that was measured on an engine in passing, but its valve lash."""

    oil: Sampled | None = None
    tested: tuple[Tested, ...] = ()
    ran: Ran | None = None


@dataclass(frozen=True, slots=True)
class Taken:
    """A sheet of a day, of a kind, with what it was taken with."""

    on: date
    kind: str
    sheet: SheetIn
    values: Mapping[str, str] = field(default_factory=dict)


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
    if item.measured.oil is not None:
        yield from _oil(yard, item, item.measured.oil)
    if item.measured.ran is not None:
        yield from _runs(yard, item, item.measured.ran)


def _oil(yard: "Yard", item: "Item", sampled: Sampled) -> Iterator[Taken]:
    last = yard.last_round(item.tag) if item.meters else yard.anchor
    rounds = [day for day in yard.rounds() if yard.came[item.tag] < day <= last][:: sampled.every][::-1]
    reports = samples(item.tag, sampled, [_hours_on_oil(yard, item, day) for day in rounds])
    for day, report in zip(rounds, reports, strict=True):
        yield Taken(day, "oil", report, {"gauge": "Fen Edge Laboratory"})


def _hours_on_oil(yard: "Yard", item: "Item", day: date) -> Decimal | None:
    """Give the hours since the last drain, None where no meter of the engine counts hours, or none is told."""
    if not item.meters or item.meters[0].kind != "hours":
        return None
    drains = [
        on
        for kept in item.tasks
        if kept.name.startswith("Oil")
        for on, _ in kept.plan.work(yard, item.tag, kept.name)
        if on <= day
    ]
    curve = yard.curves[item.tag]
    return curve.at(day) - curve.at(max(drains)) if drains else None


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
