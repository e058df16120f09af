"""Readings of the demo fleet that need a word: a meter replaced, one rolled over, figures misread and mistyped."""

from collections.abc import Collection, Mapping
from datetime import date, timedelta

from fleetcare.demo.steps import Step
from fleetcare.demo.yard import Yard
from fleetcare.domain.quantities import plain

MISTYPED, MISREAD = "PS-02", "TR-3"
_LATEST = 30

Odd = dict[date, Mapping[str, object]]
"""What a reading of a day says besides or instead of the figure; `void` is why it is voided the day after."""


def odd_readings(yard: Yard, meter: str, work: Collection[Step]) -> Odd:
    """Give what is special about some readings of a meter, given the work on its item."""
    odd: Odd = {}
    replaced, turned = yard.meters[meter].replaced, yard.turned_on(meter)
    if replaced is not None:
        odd |= _replaced(yard, meter, yard.ago(replaced))
    if turned is not None:
        odd |= {turned: {"rolled_over": True}}
    if meter == MISTYPED:
        odd |= _mistyped(yard, meter, work)
    if meter == MISREAD:
        odd |= _misread(yard, meter, work)
    return odd


def _replaced(yard: Yard, meter: str, on: date) -> Odd:
    before = on - timedelta(days=1)
    ran = plain(yard.curves[meter].at(on) - yard.curves[meter].at(before))
    note = "the old meter stood still"
    return {on: {"replaced": [yard.dial(meter, before), "0"], "unmetered": f"{ran}h", "note": note}}


def _mistyped(yard: Yard, meter: str, work: Collection[Step]) -> Odd:
    """Type a figure too high one Monday; the week after the right one is taken for sure, and the other is in doubt."""
    monday = _quiet_day(yard, work, weekday=0, before=7, after=6)
    high = yard.shown(meter, yard.curves[meter].at(monday), monday, more=110)
    sure = {"sure": True, "note": "read twice; last week's was mistyped"}
    return {monday: {"value": high}, monday + timedelta(days=7): sure}


def _misread(yard: Yard, meter: str, work: Collection[Step]) -> Odd:
    """Read the figure off another tractor one Tuesday."""
    tuesday = _quiet_day(yard, work, weekday=1, before=0, after=2)
    high = yard.shown(meter, yard.curves[meter].at(tuesday), tuesday, more=20)
    return {tuesday: {"value": high, "void": "read off the other tractor"}}


def _quiet_day(yard: Yard, work: Collection[Step], *, weekday: int, before: int, after: int) -> date:
    """Give the latest such weekday, two months back or more, with no work on that engine in the days around it."""
    busy = {step.on for step in work}
    day = yard.ago(_LATEST)
    while day.weekday() != weekday or any(day + timedelta(days=n) in busy for n in range(-before, after + 1)):
        day -= timedelta(days=1)
    return day
