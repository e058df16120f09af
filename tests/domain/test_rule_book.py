"""The words of the rule book and of findings."""

from datetime import date
from decimal import Decimal

from fleetcare.domain.findings import Finding, Signal
from fleetcare.domain.rule_book import Limit, Limits, Severity, worst
from tests.rules.measured import ON, a_rule


def _signal(**changes: object) -> Signal:
    return Signal(**{"rule": a_rule(), "severity": Severity.ALERT, "subject": "", "on": ON, "flagged": ()} | changes)  # type: ignore[arg-type]


def test_the_worst_of_some_severities_is_alarm_if_any_is() -> None:
    assert worst([Severity.ALERT, Severity.ALARM]) is Severity.ALARM
    assert worst([Severity.ALERT]) is Severity.ALERT


def test_limits_are_true_where_there_is_one() -> None:
    assert not Limits()
    assert Limits(alarm=Limit(Decimal(0)))


def test_a_finding_is_as_grave_as_its_gravest_evidence_and_as_old_as_its_oldest() -> None:
    old = _signal(since=date(2026, 1, 3))
    grave = _signal(severity=Severity.ALARM, measured=Decimal(3))
    finding = Finding("P-01", "", (old, grave))
    assert (finding.severity, finding.since, finding.rule, finding.cause) == (
        "alarm",
        date(2026, 1, 3),
        "iron",
        "iron wear",
    )


def test_the_figure_of_a_finding_is_its_gravest_one_with_a_figure_else_the_lead() -> None:
    pattern, mild = _signal(severity=Severity.ALARM), _signal(measured=Decimal(1))
    grave = _signal(severity=Severity.ALARM, measured=Decimal(2))
    assert Finding("P-01", "", (pattern, mild, grave)).figure is grave
    assert Finding("P-01", "", (pattern,)).figure is pattern


def test_a_finding_is_due_by_the_earliest_day_any_rule_sets() -> None:
    signals = (_signal(), _signal(due_by=date(2026, 4, 21)), _signal(due_by=date(2026, 4, 20)))
    assert Finding("P-01", "", signals).due_by == date(2026, 4, 20)
    assert Finding("P-01", "", signals[:1]).due_by is None
