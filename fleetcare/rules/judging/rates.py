"""Change per so many hours: between two sheets, or of an oil since its change.

An oil counts by its own hours, anything else by those of the engine. Between two samples of one fill it is the rate of
rules/oil_rates.py, since the change that of rules/oil.py; with both, make-up can be corrected for. Where new oil is not
known nothing is taken off, as the sources print absolute figures. Bounds such as "<1" tell no rate.

Not across an oil change: the oil is another where its hours went down, or where it ran less than the engine did between
the two. Of a change at least the hours on the oil before are missing then, of inexact hours few: half of them decides. What top-up is large is common practice: a tenth of the sump.
"""

from collections.abc import Sequence
from decimal import Decimal

from fleetcare.domain.findings import Evidence, Step
from fleetcare.domain.measured import OIL, MeasuredSheet
from fleetcare.domain.rule_book import Rate, Rule, Since
from fleetcare.domain.trends import Hindrance
from fleetcare.errors import Refused
from fleetcare.rules.judging.comparing import before
from fleetcare.rules.judging.facts import CannotTell, Figure, MeasuredFacts
from fleetcare.rules.judging.spans import decimal, known
from fleetcare.rules.judging.values import HOURS_ON_OIL, TOP_UP, Measured, fresh_of, single, title
from fleetcare.rules.oil import wear_rate
from fleetcare.rules.oil_rates import OilRate, OilSample, rate_between

_LARGE_TOP_UP = Decimal("0.1")


def figure(rule: Rule, shape: Rate, one: Measured, values: Sequence[Measured], facts: MeasuredFacts) -> Figure:
    """Give the rate of a value, in the unit of the rule per `per` hours."""
    work = _since_change if shape.since is Since.NEW else _of_oil if facts.sheet.kind == OIL else _of_engine
    try:
        return work(rule, shape, one, facts)
    except Refused as error:  # a figure that cannot be right, as the sums of the bench say
        raise CannotTell(error.detail, one.point) from None


def _of_engine(rule: Rule, shape: Rate, one: Measured, facts: MeasuredFacts) -> Figure:
    then = before(rule.quantity, one, facts)
    now_at, then_at = facts.sheet.engine_hours, _sheet_of(then, facts).engine_hours
    if now_at is None or then_at is None:
        raise CannotTell("the engine hours of both sheets are not known", one.point)
    hours = now_at - then_at
    if hours <= 0 or hours < shape.least_hours:
        raise CannotTell("the engine ran too little in between", one.point)
    now, was = _plain(one, rule.unit), _plain(then, rule.unit)
    steps = _steps(rule, now, then, was, hours)
    rate = shape.per * (now - was) / hours
    return Figure(one.point, known(rate), one.evidence, rule.low, rule.high, (then.evidence,), steps)


def _of_oil(rule: Rule, shape: Rate, one: Measured, facts: MeasuredFacts) -> Figure:
    then = before(rule.quantity, one, facts)
    now, was = _plain(one, rule.unit), _plain(then, rule.unit)
    rate = _rate(shape, rule.unit, (one, now), (then, was), facts)
    if rate.hours < shape.least_hours:
        raise CannotTell("too few hours in between", one.point)
    steps = _steps(rule, now, then, was, rate.hours)
    figure = rate.corrected if shape.is_corrected else rate.as_read
    return Figure(one.point, known(figure), one.evidence, rule.low, rule.high, (then.evidence,), steps)


def check_same_fill(one: Measured, facts: MeasuredFacts) -> None:
    """Raise CannotTell where a value and that of the sample before do not compare: other oil, a large top-up, too close."""
    then = before(one.quantity, one, facts)
    pair = (one, _plain(one, one.unit)), (then, _plain(then, one.unit))
    try:
        _rate(Rate(Since.BEFORE, 10), one.unit, *pair, facts)
    except Refused as error:
        raise CannotTell(error.detail, one.point) from None


def _rate(
    shape: Rate, unit: str, now: tuple[Measured, Decimal], then: tuple[Measured, Decimal], facts: MeasuredFacts
) -> OilRate:
    """Give the rate between two samples of one fill, each value with its figure in a unit."""
    (one, ppm_now), (before_it, ppm_then) = now, then
    sheet = _sheet_of(before_it, facts)
    now_at, then_at = _given(facts.sheet, HOURS_ON_OIL), _given(sheet, HOURS_ON_OIL)
    if is_other_fill((sheet, then_at), (facts.sheet, now_at)):
        raise CannotTell("the oil was changed in between", one.point)
    first, second = (
        OilSample(Decimal(0), at, ppm, _top_up(taken, is_needed=shape.is_corrected))
        for at, ppm, taken in ((then_at, ppm_then, sheet), (now_at, ppm_now, facts.sheet))
    )
    fresh = fresh_of(facts.sheet, facts.fresh, one.quantity)
    rate = rate_between(
        first,
        second,
        per_hours=shape.per,
        most_make_up=_LARGE_TOP_UP,
        sump=facts.engine.sump,
        fresh=_plain(fresh, unit) if fresh else Decimal(0),
    )
    if isinstance(rate, Hindrance):
        raise CannotTell(rate.obstacle, one.point)
    return rate


def _since_change(rule: Rule, shape: Rate, one: Measured, facts: MeasuredFacts) -> Figure:
    hours = _given(facts.sheet, HOURS_ON_OIL)
    if hours < shape.least_hours:
        raise CannotTell(f"the oil has run less than {shape.least_hours:f} h", one.point)
    fresh = fresh_of(facts.sheet, facts.fresh, rule.quantity)
    read, new = _plain(one, rule.unit), _plain(fresh, rule.unit) if fresh else Decimal(0)
    make_up, told, used = _make_up(shape, facts)
    rate = wear_rate(read, hours, make_up=make_up, fresh=new)
    steps = (
        Step(title(rule.quantity), read, rule.unit),
        *((Step("in new oil", new, rule.unit),) if fresh else ()),
        Step("hours on the oil", hours, "h"),
        *told,
        *((Step("multiplied for make-up by", rate.factor),) if make_up else ()),
    )
    seen = (*used, *((fresh.evidence,) if fresh else ()))
    span = known(rate.ppm_per_100h * shape.per / 100)
    return Figure(one.point, span, one.evidence, rule.low, rule.high, seen, steps)


def _make_up(
    shape: Rate, facts: MeasuredFacts
) -> tuple[tuple[Decimal, Decimal] | None, tuple[Step, ...], tuple[Evidence, ...]]:
    if not shape.is_corrected:
        return None, (), ()
    litres, sump = _topped_up(facts.sheet), facts.engine.sump
    if sump is None:
        raise CannotTell("the litres of the sump are not known")
    added = single(facts.sheet, TOP_UP)
    by_log = facts.sheet.logged_top_up is not None
    steps = (Step("topped up by the log" if by_log else "topped up", litres, "L"), Step("sump", sump, "L"))
    return (litres, sump), steps, (added.evidence,) if added else ()


def _sheet_of(then: Measured, facts: MeasuredFacts) -> MeasuredSheet:
    return next(sheet for sheet in facts.earlier if sheet.entry == then.evidence.sheet)


def is_other_fill(then: tuple[MeasuredSheet, Decimal], now: tuple[MeasuredSheet, Decimal]) -> bool:
    """Whether the oil was changed between two samples, each with the hours on its oil."""
    (first, first_on_oil), (second, second_on_oil) = then, now
    on_oil = second_on_oil - first_on_oil
    if on_oil < 0:
        return True
    if first.engine_hours is None or second.engine_hours is None:
        return False
    return second.engine_hours - first.engine_hours - on_oil > first_on_oil / 2


def _top_up(sheet: MeasuredSheet, *, is_needed: bool) -> Decimal:
    """Give the litres topped up; a rate as read can do without, as it is only to warn of a large top-up."""
    is_known = single(sheet, TOP_UP) or sheet.logged_top_up is not None
    return _topped_up(sheet) if is_needed or is_known else Decimal(0)


def _topped_up(sheet: MeasuredSheet) -> Decimal:
    """Give the litres topped up since the change, by the log where the sheet says nothing of them."""
    return _given(sheet, TOP_UP) if sheet.logged_top_up is None else sheet.logged_top_up


def _given(sheet: MeasuredSheet, quantity: str) -> Decimal:
    """Give the one plain value of a quantity in hours or litres."""
    one = single(sheet, quantity)
    if one is None:
        raise CannotTell(f"{title(quantity)}: not stated on {sheet.on.isoformat()}")
    return _plain(one, "L" if quantity == TOP_UP else "h")


def _plain(one: Measured, unit: str) -> Decimal:
    """Give a plain figure in a unit."""
    if not one.span.is_known:
        raise CannotTell("a bound tells no rate", one.point)
    return decimal(one.within(unit).low)


def _steps(rule: Rule, now: Decimal, then: Measured, was: Decimal, hours: Decimal) -> tuple[Step, ...]:
    return (
        Step(title(rule.quantity), now, rule.unit),
        Step(f"on {then.evidence.on.isoformat()}", was, rule.unit),
        Step("hours in between", hours, "h"),
    )
