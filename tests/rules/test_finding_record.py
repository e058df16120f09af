"""A finding as a flat row: its figures in words, what is left of one that is no more, and the order of the list."""

from dataclasses import replace
from datetime import date, timedelta
from decimal import Decimal

from fleetcare.domain.rule_book import Severity
from fleetcare.rules.finding_life import Answer, AnswerKind, FindingState, finding_lives, live
from fleetcare.rules.finding_record import FindingRecord, finding_record, say_figures, urgency, withdrawn_record
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judge_history import judge_history
from tests.rules.measured import ENGINE, ON, a_rule, a_sheet, value


def a_record(**changes: object) -> FindingRecord:
    """Too much iron in the oil of P-01."""
    standings = judge_history((a_sheet(value("Fe", "120"), entry=1),), ENGINE, (a_rule(),), Background())
    (lived,) = live(finding_lives(standings, {}), (), ON)
    return replace(finding_record(lived), **changes)  # type: ignore[arg-type]


def test_the_figure_its_limit_and_the_margin_are_said_with_their_unit() -> None:
    assert say_figures(a_record()) == "120 ppm, limit 100 ppm, margin -20 ppm"
    assert say_figures(a_record(unit="", measured=Decimal(3), limit=Decimal(2), margin=Decimal(-1))) == (
        "3, limit 2, margin -1"
    )


def test_a_pattern_alone_has_no_figures_to_say() -> None:
    assert say_figures(a_record(measured=None, limit=None, margin=None)) == ""


def test_of_a_finding_that_is_no_more_the_answer_is_left() -> None:
    answer = Answer(1, "1-iron", "iron wear", "", Severity.ALARM, AnswerKind.ACCEPT, "known", "Fenn", ON)
    row = withdrawn_record(answer, "P-01")
    assert (row.id, row.engine, row.severity, row.state) == ("1-iron", "P-01", "alarm", FindingState.WITHDRAWN)
    assert row.because == "it was answered by Fenn on 2026-04-17: known"
    assert row.explanation.startswith("iron wear at the engine: ")
    assert say_figures(row) == ""


def test_what_wants_an_answer_comes_first_then_the_graver_then_by_engine_day_and_id() -> None:
    earlier: date = ON - timedelta(days=1)
    rows = [
        a_record(id="a", state=FindingState.CLEARED, severity="alarm"),
        a_record(id="b", engine="p-02"),
        a_record(id="c", since=earlier),
        a_record(id="d"),
        a_record(id="e", severity="alarm", engine="Z-01"),
        a_record(id="f", state=FindingState.FOLLOW_UP),
    ]
    assert [row.id for row in sorted(rows, key=urgency)] == ["e", "c", "d", "b", "f", "a"]
