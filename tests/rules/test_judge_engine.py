"""All that the rules make of an engine: its newest sheets, each beside the others."""

from decimal import Decimal
from itertools import permutations

from fleetcare.domain.engines import Side
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Limits, Method, Pool, RuleBook, Statistical
from fleetcare.domain.sheets import LashSpec, Verdict
from fleetcare.rulebook.rules import rule_book
from fleetcare.rules.judge_engine import Background, JudgedEngine, judge_engine
from fleetcare.rules.judge_lash import judge_value
from tests.rules.measured import ENGINE, a_rule, a_sheet, beyond, pressures, value

IRON = RuleBook((a_rule(),))


def judged(*sheets: MeasuredSheet, book: RuleBook = IRON, background: Background | None = None) -> JudgedEngine:
    """What a book makes of the sheets of P-01."""
    return judge_engine(sheets, ENGINE, book, background or Background())


def causes(*sheets: MeasuredSheet) -> list[tuple[str, str, str]]:
    """What the shipped rules find: severity, cause and subject."""
    found = judged(*sheets, book=rule_book()).findings
    return [(str(one.severity), one.cause, one.subject) for one in found]


def test_only_the_newest_sheet_of_a_kind_is_judged_and_earlier_ones_say_since_when() -> None:
    before, now = a_sheet(value("Fe", "120"), days=30), a_sheet(value("Fe", "130"))
    found = judged(now, before)
    assert list(found.sheets) == [now.entry]
    (finding,) = found.findings
    assert (finding.since, finding.evidence[0].value) == (before.on, "130")
    assert judged(a_sheet(value("Fe", "20")), before).findings == ()


def test_an_engine_without_sheets_has_no_findings() -> None:
    assert judged() == JudgedEngine((), {})


def test_every_value_of_a_judged_sheet_has_its_verdict() -> None:
    sheet = a_sheet(value("Fe", "120"), value("Cu", "5"))
    told = {value.quantity: verdict for value, verdict in judged(sheet).sheets[sheet.entry].verdicts}
    assert told == {"Fe": Verdict.ALERT, "Cu": Verdict.NOT_JUDGED}


def test_a_low_cylinder_whose_exhaust_valve_closes_is_one_finding_from_three_sheets() -> None:
    low = pressures("400", "400", "250", "400", "400", "400", wet={3: "255"})
    leaking = a_sheet(value("leak", "40", point="3"), kind="leakdown", days=1)
    gap = value("lash", "0.30", point="3E", phase="found")
    lash = a_sheet(gap, kind="lash", days=2)
    spec = LashSpec(lash.on, "mm", ranges={Side.EXHAUST: (Decimal("0.40"), Decimal("0.50"))})
    held = Background(lash={lash.entry: (judge_value(gap, Side.EXHAUST, spec, ""),)})
    (finding,) = judged(low, leaking, lash, book=rule_book(), background=held).findings
    assert (finding.cause, finding.subject) == ("closing exhaust valve", "3")
    assert {one.sheet for one in finding.evidence} == {low.entry, leaking.entry, lash.entry}


def test_the_order_of_sheets_changes_nothing() -> None:
    sheets = (
        pressures("400", "400", "250", "400", "400", "400"),
        a_sheet(value("leak", "40", point="3"), kind="leakdown", days=1),
        a_sheet(value("Fe", "300"), days=2),
    )
    assert len({tuple(causes(*order)) for order in permutations(sheets)}) == 1


def test_what_new_oil_has_is_handed_on() -> None:
    sheet = a_sheet(value("tbn", "4"))
    assert not judged(sheet, book=rule_book()).findings
    assert judged(sheet, book=rule_book(), background=Background((value("tbn", "10", phase="new"),))).findings


def test_what_is_usual_is_told_by_the_samples_before_the_newest() -> None:
    iron = a_rule(shape=Statistical(Pool.OWN, Method.MEAN, 3), high=Limits(beyond("3")))
    before = [a_sheet(value("Fe", text), days=days) for days, text in ((30, "40"), (20, "42"), (10, "44"))]
    (finding,) = judged(*before, a_sheet(value("Fe", "60")), book=RuleBook((iron,))).findings
    assert finding.figure.limit == 48  # mean 42, standard deviation 2
