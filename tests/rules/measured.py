"""Measured facts with sane defaults, and the sheet on which a rule's figure is exactly what a test wants."""

from collections.abc import Iterable, Mapping
from dataclasses import replace
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.findings import Signal
from fleetcare.domain.measured import MeasuredEngine, MeasuredSheet, Pools, SheetWord
from fleetcare.domain.measures import QUANTITIES
from fleetcare.domain.rule_book import (
    AgainstSheet,
    Basis,
    Best,
    Bounds,
    By,
    ByAltitude,
    Change,
    Limit,
    Limits,
    Method,
    Rate,
    Rule,
    Since,
    Statistical,
)
from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rulebook.rules import rule_book, shop_rules
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import judge

ON = date(2026, 4, 17)  # a Friday
ENGINE = MeasuredEngine(
    tag="P-01",
    fuel="diesel",
    cylinders=6,
    banks=((1, 2, 3, 4, 5, 6),),
    oil_grade="15W-40",
    sump=Decimal(8),
    rated_kw=Decimal(500),
)


def beyond(figure: str) -> Limit:
    """A limit that passes at the limit itself."""
    return Limit(Decimal(figure))


def reach(figure: str) -> Limit:
    """A limit that is broken at the limit itself."""
    return Limit(Decimal(figure), reach=True)


def a_rule(**changes: object) -> Rule:
    """Iron of at most 100 ppm, an alarm beyond 200."""
    rule = Rule(
        id="iron",
        kinds=("oil",),
        quantity="Fe",
        shape=Bounds(),
        unit="ppm",
        high=Limits(beyond("100"), beyond("200")),
        cause="iron wear",
        message="liners, shafts, gears",
        source="common practice",
        next_step="sample again",
    )
    return replace(rule, **changes)  # type: ignore[arg-type]


def value(quantity: str, text: str, unit: str | None = None, point: str = "", phase: str = "") -> SheetValue:
    """A value as a sheet file has it: value("Fe", "120"), value("water", "<0.1"), value("lash", "0.25..0.30")."""
    own = QUANTITIES[quantity].unit if unit is None else unit
    if ".." in text:
        low, _, high = text.partition("..")
        return SheetValue(quantity, point, Phase(phase), None, Decimal(low), Decimal(high), own)
    if text == "ND":
        return SheetValue(quantity, point, Phase(phase), None, None, None, own, "ND")
    if text.startswith("<"):
        return SheetValue(quantity, point, Phase(phase), Decimal(text[1:]), None, None, own, "<")
    return SheetValue(quantity, point, Phase(phase), Decimal(text), None, None, own)


def a_sheet(*values: SheetValue, kind: str = "oil", on: date = ON, days: int = 0, **changes: object) -> MeasuredSheet:
    """A sheet of a day, `days` before it; its entry number is its day, so that sheets of other days differ."""
    taken = on - timedelta(days=days)
    words = changes.pop("words", {})
    said = tuple(SheetWord(quantity, text) for quantity, text in words.items())  # type: ignore[attr-defined]
    sheet = MeasuredSheet(taken.toordinal(), kind, taken, values, said)
    return replace(sheet, **changes)  # type: ignore[arg-type]


def facts(sheet: MeasuredSheet, **changes: object) -> MeasuredFacts:
    """A sheet of P-01 and nothing beside it."""
    return replace(MeasuredFacts(ENGINE, sheet), **changes)  # type: ignore[arg-type]


def pressures(*figures: str, unit: str = "psi", wet: Mapping[int, str] | None = None) -> MeasuredSheet:
    """A compression sheet, cylinder by cylinder, with the wet values of some."""
    dry = [value("pressure", text, unit, str(number)) for number, text in enumerate(figures, start=1)]
    oiled = [value("pressure", text, unit, str(number), "wet") for number, text in (wet or {}).items()]
    return a_sheet(*dry, *oiled, kind="compression")


def told(rules: Iterable[Rule], about: MeasuredFacts) -> dict[tuple[str, str], str]:
    """The severity of each signal, by rule and subject."""
    return {(signal.rule.id, signal.subject): str(signal.severity) for signal in judge(rules, about)}


def one_signal(rule: Rule, about: MeasuredFacts) -> Signal:
    """The only signal of a rule."""
    (signal,) = judge([rule], about)
    return signal


def rules_named(*presets: str) -> tuple[Rule, ...]:
    """The shipped rules for P-01, with these presets named for it."""
    shop = shop_rules({"preset": [{"name": name, "engines": "P-01"} for name in presets]}, "shop")
    return rules_for(rule_book(shop), ENGINE)


def facts_with(rule: Rule, figure: Decimal) -> MeasuredFacts:
    """Facts on which the figure that a rule holds against its limits is exactly this one."""
    point = rule.points[0] if rule.points else ""
    words = {quantity: wanted[0] for quantity, wanted in rule.words.items()}
    at = {"kind": rule.kinds[0], "words": words, "engine_hours": Decimal(1000)}

    def of(amount: Decimal, unit: str, where: str = point) -> SheetValue:
        return value(rule.quantity, f"{amount:f}", unit, where)

    unit = "" if not rule.unit and rule.quantity == "ph" else QUANTITIES[rule.quantity].unit
    match rule.shape:
        case Bounds(Basis.YEAR) | Bounds(Basis.AS_MEASURED) | Bounds(Basis.LESS_NEW) | Bounds(Basis.NAMEPLATE):
            return facts(a_sheet(of(figure, rule.unit), **at))  # type: ignore[arg-type]
        case ByAltitude(_, ((feet, least), *_)):
            high_up = replace(ENGINE, altitude=feet * Decimal("0.3048"))
            return facts(a_sheet(of(least + figure, rule.unit), **at), engine=high_up)  # type: ignore[arg-type]
        case AgainstSheet(reference, by):
            one, other = _pair(reference, by, figure)
            shown = rule.unit if by is By.DIFFERENCE else unit
            return facts(a_sheet(of(one, shown, "1"), of(other, shown, "2"), **at))  # type: ignore[arg-type]
        case Change(since, by):
            was = Decimal(1000) if by is By.DIFFERENCE else Decimal(100)
            now = figure if by is By.RATIO else was + figure
            if since is Since.NEW:
                fresh = (value(rule.quantity, f"{was:f}", unit, phase="new"),)
                return facts(a_sheet(of(now, unit), **at), fresh=fresh)  # type: ignore[arg-type]
            return facts(a_sheet(of(now, unit), **at), earlier=(a_sheet(of(was, unit), days=30, **at),))  # type: ignore[arg-type]
        case Rate(Since.NEW):
            oil = (value("hours_on_oil", "100"), value("top_up", "0"))
            return facts(a_sheet(of(figure, unit), *oil, **at))  # type: ignore[arg-type]
        case Rate(Since.BEFORE):
            now_values = (of(Decimal(100) + figure, unit), value("hours_on_oil", "60"))
            then_values = (of(Decimal(100), unit), value("hours_on_oil", "50"))
            at.pop("engine_hours")
            return facts(a_sheet(*now_values, **at), earlier=(a_sheet(*then_values, days=30, **at),))  # type: ignore[arg-type]
        case Statistical():
            return facts(a_sheet(of(figure, unit), **at), pools=pools_of(rule))  # type: ignore[arg-type]
    raise AssertionError(rule)


def pools_of(rule: Rule) -> Pools:
    """Samples with a median of 100 and a median distance of 10, so that limits lie at 100 + k 14.826; or 1 to 99."""
    assert isinstance(rule.shape, Statistical)
    if rule.shape.method is Method.PERCENTILE:
        samples = tuple(Decimal(number) for number in range(1, 100))
    else:
        samples = tuple(Decimal(number) for number in (*([90] * 10), 100, *([110] * 10)))
    return Pools({rule.quantity: samples}, {rule.quantity: samples})


def limit_of(rule: Rule, limit: Limit, *, is_low: bool) -> Decimal:
    """The figure a limit lies at; of statistics that of `pools_of`."""
    if isinstance(rule.shape, Statistical) and rule.shape.method is not Method.PERCENTILE:
        sign = -1 if is_low else 1
        return 100 + sign * limit.value * Decimal("14.826")
    return limit.value


def _pair(reference: Best, by: By, figure: Decimal) -> tuple[Decimal, Decimal]:
    """Two values of which the first has this figure against the best, or the mean, of both."""
    if reference is Best.MEAN:
        return (figure, 200 - figure) if by is By.RATIO else (1000 + figure, 1000 - figure)
    return (figure, Decimal(100)) if by is By.RATIO else (1000 + figure, Decimal(1000))
