"""The newest sheets of a case beside each other, as rules look at them, put together by hand."""

from dataclasses import replace
from decimal import Decimal
from fractions import Fraction

from fleetcare.domain.findings import Evidence, Signal
from fleetcare.domain.measured import MeasuredSheet, Pools
from fleetcare.domain.measures import QUANTITIES
from fleetcare.domain.rule_book import Pattern, Rule
from fleetcare.domain.sheets import Phase
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import tell
from tests.property.case import Case
from tests.property.other_units import convert
from tests.rules.measured import ON


def single(rules: tuple[Rule, ...]) -> list[Rule]:
    """The rules that work out a figure for each value."""
    return [rule for rule in rules if not isinstance(rule.shape, Pattern)]


def newest(case: Case) -> list[MeasuredFacts]:
    """The newest sheet of each kind, with those before it and with what single rules say of the others."""
    by_kind: dict[str, list[MeasuredSheet]] = {}
    for sheet in case.sheets:
        by_kind.setdefault(sheet.kind, []).append(sheet)
    alone = [facts_of(case, sheets) for sheets in by_kind.values()]
    told = {facts.sheet.kind: one_by_one(case.rules, facts) for facts in alone}
    return [
        replace(
            facts,
            others=tuple(other.sheet for other in alone if other is not facts),
            standing=tuple(signal for kind, signals in told.items() if kind != facts.sheet.kind for signal in signals),
        )
        for facts in alone
    ]


def facts_of(case: Case, sheets: list[MeasuredSheet]) -> MeasuredFacts:
    """The last of some sheets of a kind with what is known beside it."""
    pool: dict[str, tuple[Decimal, ...]] = {}
    for sheet in sheets[:-1] if sheets[-1].kind == "oil" else []:
        for value in sheet.values:
            if value.phase is Phase.NONE and not value.qualifier and value.value is not None:
                there = convert(Fraction(value.value), value.unit, QUANTITIES[value.quantity].unit)
                assert there is not None
                figure = Decimal(there.numerator) / Decimal(there.denominator)
                pool[value.quantity] = (*pool.get(value.quantity, ()), figure)
    family = case.family.before(ON) if sheets[-1].kind == "oil" else {}
    behind = case.background
    return MeasuredFacts(
        case.engine,
        sheets[-1],
        tuple(sheets[:-1]),
        case.fresh,
        Pools(pool, family),
        (),
        (),
        behind.lash,
        behind.holidays,
    )


def one_by_one(rules: tuple[Rule, ...], facts: MeasuredFacts) -> list[Signal]:
    """What each single rule says of a sheet, asked by itself."""
    asked = [rule for rule in single(rules) if facts.sheet.kind in rule.kinds]
    return [signal for rule in asked for signal in tell([rule], facts).signals]


def flagged(signals: list[Signal] | tuple[Signal, ...]) -> set[Evidence]:
    """All values some signal calls out."""
    return {value for signal in signals for value in signal.flagged}
