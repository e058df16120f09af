"""The whole history of the demo fleet up to an anchor day, as a list of dated entries."""

from collections.abc import Collection, Iterator, Mapping, Sequence
from datetime import date, timedelta

from fleetcare.demo.fleet import ITEMS, SHOP
from fleetcare.demo.items import Ago, Item, Shown
from fleetcare.demo.lash import gauged_steps
from fleetcare.demo.measured import sheets_of, topped_up_days
from fleetcare.demo.odd import odd_readings
from fleetcare.demo.rules import NAME, TEXT, WHY
from fleetcare.demo.steps import Step, Verb, in_order
from fleetcare.demo.yard import CHANGEOVER, Yard

_READER = "Quill"
_MECHANICS = ("Fenn", "Quill")


def history(anchor: date, items: Sequence[Item] = ITEMS, changeover: int = CHANGEOVER) -> list[Step]:
    """Give everything entered up to the anchor day, about some items, in order. Refuses a day too early for a history.

    `changeover` is how many days before it the tool came into use.
    """
    yard = Yard(anchor, items, changeover)
    steps = [Step(yard.changeover, yard.changeover, Verb.SETTING, values={"name": "shop-name", "value": SHOP})]
    if items is ITEMS:  # a yard that is made up has no rules of its own
        own = {"name": NAME, "text": TEXT, "why": WHY, "by": "Harbin"}
        steps.append(Step(yard.changeover, yard.changeover, Verb.RULES, values=own))
    for item in items:
        measured = list(_measured(yard, item))
        work = [*_work(yard, item), *gauged_steps(yard, item, _mechanic(item))]
        busy = [*work, *(step for step in measured if step.verb is not Verb.SHEET)]
        steps += [*_arrival(yard, item), *work, *_told(yard, item), *_rounds(yard, item, busy), *measured]
    return in_order(steps)


def _arrival(yard: Yard, item: Item) -> Iterator[Step]:
    """Add the item with its meters, its schedule and its tasks."""
    came = yard.came[item.tag]
    values = {"tag": item.tag, "in_service": came, "as_new": item.as_new, **item.plate}
    if item.meters:
        starts = [f"{yard.start(name)}{m.unit}" for name, m in zip(item.meter_names(), item.meters, strict=True)]
        values |= {"meter": [f"{m.kind}:{m.unit}" for m in item.meters], "start_at": starts}
        values |= {"meter_digits": [f"{m.kind}:{m.digits}" for m in item.meters if m.digits]}
    entered = max(came, yard.changeover)
    yield Step(came, entered, Verb.ENGINE if item.is_engine else Verb.MACHINE, item.tag, values)
    if item.schedule is not None:
        schedule, counts_from = item.schedule
        begins = {"schedule": schedule, "from": str(_resolved(yard, item, counts_from))}
        yield Step(came, entered, Verb.SCHEDULE, item.tag, begins)
    for kept in item.tasks:
        if not isinstance(kept.task, str):
            yield Step(came, entered, Verb.TASK, item.tag, _values(yard, item, kept.task))


def _work(yard: Yard, item: Item) -> Iterator[Step]:
    """Log every job done, save those a sheet came of."""
    by = _mechanic(item)
    gauged = item.gauged.task if item.gauged is not None else None
    pressed = item.measured.pressed.task if item.measured is not None and item.measured.pressed is not None else None
    for kept in item.tasks:
        if kept.name in {gauged, pressed}:
            continue
        note = kept.note
        for day, dial in kept.plan.work(yard, item.tag, kept.name):
            values = {"task": [kept.name], "at": [dial] if dial else [], "by": by, "note": note}
            yield _dated(yard, day, (Verb.CARD_WORK, Verb.LOG), item.tag, values)
            note = ""


def _measured(yard: Yard, item: Item) -> Iterator[Step]:
    """Measure in passing or with a job, and top up; sheets from before the changeover came with it, from paper."""
    by = _mechanic(item)
    for taken in sheets_of(yard, item):
        values = {"sheet": taken.sheet, "kind": taken.kind, "by": by, **taken.values}
        verb = Verb.LOG if "task" in taken.values else Verb.SHEET
        yield Step(taken.on, max(taken.on, yard.changeover), verb, item.tag, values)
        if taken.dial and taken.on not in yard.rounds():
            read = {"value": taken.dial, "by": _READER}
            yield _dated(yard, taken.on, (Verb.CARD_READING, Verb.ROUND), item.tag, read)
    for on, litres in topped_up_days(yard, item):
        values = {"top_up": litres, "at": [yard.dial(item.tag, on)], "by": by}
        yield Step(on, max(on, yard.changeover), Verb.LOG, item.tag, values)


def _mechanic(item: Item) -> str:
    return _MECHANICS[sum(map(ord, item.tag)) % len(_MECHANICS)]


def _dated(yard: Yard, on: date, verbs: tuple[Verb, Verb], tag: str, values: Mapping[str, object]) -> Step:
    """Give a step entered on its day, or at the changeover with the first of two verbs where it is older."""
    is_card = on < yard.changeover
    return Step(on, max(on, yard.changeover), verbs[not is_card], tag, values)


def _told(yard: Yard, item: Item) -> Iterator[Step]:
    for told in item.told:
        on = yard.ago(told.ago)
        values = _values(yard, item, told.values)
        yield Step(on, max(on, yard.changeover), told.verb, item.tag, values, told.name, told.about)


def _rounds(yard: Yard, item: Item, work: Collection[Step]) -> Iterator[Step]:
    """Read every meter on the rounds, and where something odd was read."""
    for name in item.meter_names():
        odd = odd_readings(yard, name, work)
        rounds = {day for day in yard.rounds() if yard.came[item.tag] < day <= yard.last_round(name)}
        for day in sorted(rounds - odd.keys()):
            values = {"value": yard.dial(name, day), "by": _READER}
            yield _dated(yard, day, (Verb.CARD_READING, Verb.ROUND), item.tag, values)
        for day, said in odd.items():
            yield from _odd_reading(item.tag, day, {"value": yard.dial(name, day), "by": _READER, **said})


def _odd_reading(tag: str, day: date, values: dict[str, object]) -> Iterator[Step]:
    why = values.pop("void", None)
    name = f"{tag} {day}"
    yield Step(day, day, Verb.READING, tag, values, name=name)
    if why is not None:
        after = day + timedelta(days=1)
        yield Step(after, after, Verb.VOID_READING, tag, {"why": why}, about=name)


def _values(yard: Yard, item: Item, values: Mapping[str, object]) -> dict[str, object]:
    return {name: _resolved(yard, item, value) for name, value in values.items()}


def _resolved(yard: Yard, item: Item, value: object) -> object:
    """Turn days ago into days, and what a meter showed into figures, also inside a list."""
    if isinstance(value, Ago):
        return yard.ago(value.days)
    if isinstance(value, Shown):
        meter, day = value.of or item.tag, yard.ago(value.ago)
        return yard.shown(meter, yard.curves[meter].at(day), day, more=value.more)
    return [_resolved(yard, item, part) for part in value] if isinstance(value, list) else value
