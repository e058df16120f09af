"""What else happened in the demo fleet, told in days before the anchor day."""

from collections.abc import Collection, Iterator, Mapping
from datetime import date, timedelta

from fleetcare.demo.steps import Step, Verb
from fleetcare.demo.tasks import LASH
from fleetcare.demo.yard import METER_REPLACED, ROLLED_OVER, Yard

_SUPERVISOR = "Harbin"
_MISTYPED, _MISREAD = "PS-02", "TR-2"

# Days ago, tag, and what was written down.
_LOGGED: tuple[tuple[int, str, Mapping[str, object]], ...] = (
    (424, "LE-2", {"repair": "Pistons and rings renewed before the move", "component": "pistons", "downtime": "60h"}),
    (390, "WB-1P", {"top_up": "1.5L", "by": "Quill"}),
    (310, "PS-01", {"repair": "Raw water pump seal renewed", "component": "raw water pump", "downtime": "5h"}),
    (260, "TR-2", {"top_up": "2L", "by": "Fenn"}),
    (204, "PS-05", {"defect": "Main bearing knocks", "note": "not worth a repair", "by": "Fenn"}),
    (165, "TR-2", {"top_up": "2L", "by": "Fenn"}),
    (140, "LE-1", {"top_up": "1L", "by": "Quill"}),
    (118, "PS-03", {"top_up": "2.5L", "by": "Quill"}),
    (61, "LE-1", {"top_up": "1.5L", "by": "Quill"}),
    (44, "PS-03", {"top_up": "3L", "by": "Quill"}),
    (33, "SB-02", {"note": "Mice in the louvres; mesh fitted", "by": "Quill"}),
    (
        30,
        "PS-03",
        {"task": ["Injector test"], "defect": "White smoke on a cold start", "follow_up": True, "until": -20},
    ),
    (12, "TR-2", {"defect": "Oil pressure low at hot idle", "follow_up": True, "until": 0, "by": "Fenn"}),
    (10, "WB-1P", {"task": ["Reduction gear oil"], "part_done": True, "note": "drained; the right oil is on order"}),
)


def diary(yard: Yard) -> Iterator[Step]:
    """Give the moves, spells, troubles, deferrals and corrections of the history."""
    for ago, tag, values in _LOGGED:
        until = values.get("until")
        dated = {**values, "until": yard.ago(until)} if isinstance(until, int) else values
        yield Step(yard.ago(ago), Verb.LOG, tag, dated)
    lash = {**LASH, "every": ["1000h"], "needs_sheet": "lash", "last_done": [yard.ago(300)]}
    yield Step(yard.ago(290), Verb.TASK, "PS-02", lash)
    yield Step(yard.ago(420), Verb.FIT, "LE-2", {"machine": "LR-2"})
    yield from _spells(yard)
    yield from _deferrals(yard)
    yield from _corrections(yard)


def _spells(yard: Yard) -> Iterator[Step]:
    for ago, tag, status, why in (
        (200, "PS-05", "withdrawn", "main bearing; not worth a repair"),
        (130, "PS-04", "laid up", "the relief channel is dry until the bank is mended"),
        (12, "TR-2", "stood down", "oil pressure low at hot idle"),
    ):
        yield Step(yard.ago(ago), Verb.STATUS, tag, {"status": status, "why": why, "by": _SUPERVISOR})
    yield Step(yard.ago(150), Verb.FACTOR, "TR-2", {"kind": "hours", "factor": "0.8", "why": "dust on the banks"})


def _deferrals(yard: Yard) -> Iterator[Step]:
    later = yard.shown("LR-1", yard.latest("LR-1"), yard.anchor, more=700)
    for ago, tag, task, until, why in (
        (9, "LE-1", "Oil and filter", later, "filters on order"),
        (52, "TR-1", "Hydraulic hoses", yard.ago(6), "mowing first, hoses looked at daily"),
    ):
        yield Step(yard.ago(ago), Verb.DEFER, tag, {"task": task, "until": [until], "why": why, "by": _SUPERVISOR})


def _corrections(yard: Yard) -> Iterator[Step]:
    yield Step(yard.ago(75), Verb.LOG, "TR-2", {"top_up": "15L", "by": "Fenn"}, name="top-up typed wrong")
    yield Step(
        yard.ago(74), Verb.CORRECT, values={"top_up": "1.5L", "why": "comma left out"}, about="top-up typed wrong"
    )
    wrong_engine = {"task": ["Raw water impeller"], "at": [yard.dial("WB-1P", yard.ago(40))], "by": "Quill"}
    yield Step(yard.ago(40), Verb.LOG, "WB-1P", wrong_engine, name="wrong engine")
    yield Step(
        yard.ago(38), Verb.CORRECT, values={"void": True, "why": "it was the starboard engine"}, about="wrong engine"
    )


def day_corrected(work: Collection[Step]) -> Step:
    """Give the correction of an oil change that was entered a day late."""
    entry = next(step for step in work if step.name == "PS-03 Oil and filter")
    values = {"on": entry.on - timedelta(days=1), "why": "done the evening before"}
    return Step(entry.on + timedelta(days=3), Verb.CORRECT, values=values, about=entry.name)


def odd_readings(yard: Yard, work: Collection[Step]) -> dict[tuple[str, date], Mapping[str, object]]:
    """Give what is special about some readings, by tag and day: replaced, rolled over, mistyped and then sure."""
    before = yard.replaced_on - timedelta(days=1)
    curve = yard.curves[METER_REPLACED]
    unmetered = curve.at(yard.replaced_on) - curve.at(before)
    monday = _quiet_day(yard, work, _MISTYPED, weekday=0, longest=6)
    mistyped = yard.shown(_MISTYPED, yard.curves[_MISTYPED].at(monday), monday, more=110)
    misread_on = misread_day(yard, work)
    misread = yard.shown(_MISREAD, yard.curves[_MISREAD].at(misread_on), misread_on, more=20)
    return {
        (METER_REPLACED, yard.replaced_on): {
            "replaced": [yard.dial(METER_REPLACED, before), "0"],
            "unmetered": f"{unmetered}h",
            "note": "the old meter stood still",
        },
        (ROLLED_OVER, yard.rolled_over_on): {"rolled_over": True},
        (_MISTYPED, monday): {"value": mistyped},
        (_MISTYPED, monday + timedelta(days=7)): {"sure": True, "note": "read twice; last week's was mistyped"},
        (_MISREAD, misread_on): {"value": misread},
    }


def misread_day(yard: Yard, work: Collection[Step]) -> date:
    """Give the day a reading was taken off another tractor, to be voided the day after."""
    return _quiet_day(yard, work, _MISREAD, weekday=1, longest=2)


def misread_voided(yard: Yard, work: Collection[Step]) -> Step:
    """Give the voiding of that reading."""
    on = misread_day(yard, work)
    why = {"why": "read off the other tractor"}
    return Step(on + timedelta(days=1), Verb.VOID_READING, values=why, about=f"{_MISREAD} {on}")


def _quiet_day(yard: Yard, work: Collection[Step], tag: str, *, weekday: int, longest: int) -> date:
    """Give the latest such weekday, two months back or more, with no work on that engine then nor in the days after."""
    busy = {step.on for step in work if step.tag == tag}
    day = yard.ago(60)
    while day.weekday() != weekday or any(day + timedelta(days=n) in busy for n in range(longest + 1)):
        day -= timedelta(days=1)
    return day
