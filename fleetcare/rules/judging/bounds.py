"""A value held against low and high limits: as measured, less new oil, as a share of the nameplate, over a year.

Less new oil: elements that fresh oil may bring along (TM 38-301-4: its antifoam gives 3 to 7 ppm of silicon) count from
the level of the fresh oil where that is known, else as measured, as the sources print them. A load in kW or hp counts as
percent of the rated kW; one in percent is taken as it stands. A year's total sums the runs of the calendar year up to
the sheet's own day whose words fit the rule; its working lists the last of them by day, and those before as one sum.
"""

from collections.abc import Iterable, Iterator, Sequence
from decimal import Decimal

from fleetcare.domain.findings import Step
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.measures import dimension
from fleetcare.domain.rule_book import Basis, Bounds, Rule
from fleetcare.rules.judging.facts import CannotTell, Figure, MeasuredFacts
from fleetcare.rules.judging.spans import Span, known
from fleetcare.rules.judging.values import Measured, fresh_of, judged_phases, step, title, values_of
from fleetcare.rules.judging.words import says

_LISTED = 5  # earlier runs of a year told one by one


def figure(rule: Rule, shape: Bounds, one: Measured, values: Sequence[Measured], facts: MeasuredFacts) -> Figure:
    """Give the figure of a value, in the unit of the rule; of a year's total that of all values of the sheet."""
    match shape.basis:
        case Basis.YEAR:
            return _total_of_year(rule, values, facts)
        case Basis.LESS_NEW:
            return _less_new(rule, one, facts)
        case Basis.NAMEPLATE:
            return _share_of_nameplate(rule, one, facts)
        case _:
            return _as_measured(rule, one)


def _as_measured(rule: Rule, one: Measured) -> Figure:
    return Figure(one.point, one.within(rule.unit), one.evidence, rule.low, rule.high, one.used, one.steps)


def _less_new(rule: Rule, one: Measured, facts: MeasuredFacts) -> Figure:
    fresh = fresh_of(facts.sheet, facts.fresh, rule.quantity)
    if fresh is None:
        return _as_measured(rule, one)
    read, new = one.within(rule.unit), fresh.within(rule.unit)
    steps = (step(title(rule.quantity), read, rule.unit), step("in new oil", new, rule.unit))
    return Figure(one.point, read - new, one.evidence, rule.low, rule.high, (fresh.evidence,), steps)


def _share_of_nameplate(rule: Rule, one: Measured, facts: MeasuredFacts) -> Figure:
    if dimension(one.unit) != "power":
        return _as_measured(rule, one)
    rated = facts.engine.rated_kw
    if not rated:
        raise CannotTell("the nameplate has no rated kW", one.point)
    load = one.within("kW")
    steps = (step("load", load, "kW"), Step("nameplate", rated, "kW"))
    return Figure(one.point, load.over(known(rated)).times(100), one.evidence, rule.low, rule.high, (), steps)


def _total_of_year(rule: Rule, values: Sequence[Measured], facts: MeasuredFacts) -> Figure:
    runs = [sheet for sheet in facts.earlier if sheet.on.year == facts.sheet.on.year and says(sheet, rule)]
    before = [judged_phases(values_of(sheet, rule.quantity), rule.phases, rule.points) for sheet in runs]
    total = _sum([one for run in (*before, values) for one in run], rule.unit)
    steps = (
        Step(f"runs in {facts.sheet.on.year}", Decimal(len(runs) + 1)),
        *_by_day(runs, before, values[-1].unit),
        step("this run", _sum(values, values[-1].unit), values[-1].unit),
    )
    used = tuple(one.evidence for one in (*values[:-1], *(one for run in before for one in run)))
    return Figure("", total, values[-1].evidence, rule.low, rule.high, used, steps)


def _by_day(runs: Sequence[MeasuredSheet], told: Sequence[Sequence[Measured]], unit: str) -> Iterator[Step]:
    """Give what each earlier run of a year had, in a unit, oldest first; of many those before the last few as one sum."""
    many = len(runs) - _LISTED if len(runs) > _LISTED + 1 else 0
    if many:
        label = f"{many} from {runs[0].on.isoformat()} to {runs[many - 1].on.isoformat()}"
        yield step(label, _sum([one for run in told[:many] for one in run], unit), unit)
    for sheet, run in zip(runs[many:], told[many:], strict=True):
        yield step(f"on {sheet.on.isoformat()}", _sum(run, unit), unit)


def _sum(values: Iterable[Measured], unit: str) -> Span:
    return sum((one.within(unit) for one in values), known(0))
