"""Verdicts of a lash sheet as signals: each gap once, on its own side."""

from decimal import Decimal

from fleetcare.domain.engines import Side
from fleetcare.domain.rule_book import Basis, Bounds, End, Limits
from fleetcare.domain.sheets import LashSpec, SheetValue
from fleetcare.rules.judge_lash import judge_value
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import judge, judge_sheet
from tests.builders import START
from tests.rules.measured import a_rule, a_sheet, facts, value

SPEC = LashSpec(START, "mm", "any", {Side.EXHAUST: (Decimal("0.40"), Decimal("0.50"))})
TIGHT = a_rule(id="tight", kinds=("lash",), quantity="lash", unit="", shape=Bounds(Basis.SPEC, End.LOW), high=Limits())
WIDE = a_rule(id="wide", kinds=("lash",), quantity="lash", unit="", shape=Bounds(Basis.SPEC, End.HIGH), high=Limits())


def gauged(*values: SheetValue, days: int = 0, **changes: object) -> MeasuredFacts:
    """A lash sheet with what the spec of the engine says of each of its exhaust gaps."""
    sheet = a_sheet(*values, kind="lash", days=days)
    judged = tuple(judge_value(one, Side.EXHAUST, SPEC, "") for one in values)
    return facts(sheet, lash={sheet.entry: judged}, **changes)


def test_a_gap_out_of_its_range_is_a_signal_on_its_own_side() -> None:
    about = gauged(
        value("lash", "0.35", point="1E", phase="found"),
        value("lash", "0.55", point="2E", phase="left"),
        value("lash", "0.40", point="3E", phase="found"),
    )
    tight, wide = judge([TIGHT, WIDE], about)
    assert (tight.rule.id, tight.subject, str(tight.severity), tight.margin) == (
        "tight",
        "1E",
        "alert",
        Decimal("-0.05"),
    )
    assert (wide.rule.id, wide.subject, str(wide.severity), wide.limit) == ("wide", "2E", "alarm", Decimal("0.50"))
    assert wide.measured == Decimal("0.55")
    assert [str(verdict) for _, verdict in judge_sheet([TIGHT, WIDE], about).verdicts] == ["alert", "alarm", "in"]


def test_an_interval_is_as_far_out_as_it_is_for_certain() -> None:
    (signal,) = judge([TIGHT], gauged(value("lash", "0.30..0.35", point="1E", phase="found")))
    assert (signal.measured, signal.margin) == (Decimal("0.35"), Decimal("-0.05"))


def test_a_gap_that_could_not_be_judged_says_why_and_a_shim_has_no_limit_of_its_own() -> None:
    about = gauged(
        value("lash", "0.35..0.45", point="1E", phase="found"), value("shim", "2.75", point="1E", phase="found")
    )
    judged = judge_sheet([TIGHT, WIDE], about)
    assert judged.signals == ()
    assert [(one.rule.id, one.subject, one.why) for one in judged.not_judged] == [
        ("tight", "1E", "lash: undecided"),
        ("wide", "1E", "lash: undecided"),
    ]


def test_a_closing_valve_is_dated_from_the_first_sheet_that_showed_it() -> None:
    before = gauged(value("lash", "0.38", point="1E", phase="found"), days=90)
    now = gauged(value("lash", "0.35", point="1E", phase="found"), earlier=(before.sheet,))
    (signal,) = judge([TIGHT], MeasuredFacts(now.engine, now.sheet, now.earlier, lash={**before.lash, **now.lash}))
    assert signal.since == before.sheet.on
