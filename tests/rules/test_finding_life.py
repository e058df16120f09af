"""The life of a finding: its id, its state on each day, and what answers do to it."""

from datetime import date, timedelta
from decimal import Decimal

import pytest

from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Severity
from fleetcare.domain.sheets import Judgement, Place, Verdict
from fleetcare.rulebook.rules import rule_book
from fleetcare.rules.finding_life import (
    Answer,
    AnswerKind,
    At,
    FindingLife,
    FindingState,
    Lived,
    finding_lives,
    live,
    withdrawn,
)
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judge_history import judge_history
from fleetcare.rules.judging.applies import rules_for
from tests.rules.measured import ENGINE, ON, a_rule, a_sheet, value

RULES = (a_rule(), a_rule(id="copper", quantity="Cu", cause="copper wear"))


def iron(*figures: str, firsts: dict[int, int] | None = None) -> tuple[FindingLife, ...]:
    """The findings of an engine whose iron was this on sheets 1, 2, 3, ... of as many days after the 17th of April."""
    sheets = [a_sheet(value("Fe", text), days=-number, entry=number) for number, text in enumerate(figures, start=1)]
    return lives_of(*sheets, firsts=firsts)


def lives_of(*sheets: MeasuredSheet, firsts: dict[int, int] | None = None) -> tuple[FindingLife, ...]:
    """The findings of an engine with some sheets."""
    return finding_lives(judge_history(sheets, ENGINE, RULES, Background()), firsts or {})


def day(number: int) -> date:
    """The day of a sheet."""
    return ON + timedelta(days=number)


def an_answer(kind: AnswerKind = AnswerKind.ACCEPT, on: int = 1, **changes: object) -> Answer:
    """Somebody answers the iron of sheet 1 on its day."""
    told: dict[str, object] = {"severity": Severity.ALERT, "why": "known", "by": "Fenn", "number": 1}
    told |= {"finding": "1-iron", "cause": "iron wear", "subject": "", "kind": kind, "on": day(on)}
    return Answer(**(told | changes))  # type: ignore[arg-type]


def on_day(lives: tuple[FindingLife, ...], number: int, *answers: Answer) -> Lived:
    """The only finding there is on the day of a sheet."""
    (lived,) = live(lives, answers, day(number))
    return lived


def test_a_finding_is_known_by_the_sheet_it_began_on_its_rule_and_its_subject() -> None:
    (life,) = iron("120", "130")
    assert (life.id, life.begun, life.end) == ("1-iron", At(day(1), 1), None)
    low = a_sheet(
        *(value("pressure", text, "psi", str(n)) for n, text in enumerate(("150", "100"), 1)), kind="compression"
    )
    rules = rules_for(rule_book(), ENGINE)
    (low_life,) = finding_lives(judge_history((low,), ENGINE, rules, Background()), {low.entry: 7})
    assert low_life.id == "7-compression-r75-2"


def test_a_finding_keeps_its_id_when_its_sheet_is_put_right() -> None:
    assert [life.id for life in iron("120", firsts={1: 1})] == ["1-iron"]
    corrected = lives_of(a_sheet(value("Fe", "130"), entry=9), firsts={9: 4})
    assert [life.id for life in corrected] == ["4-iron"]


def test_a_new_finding_is_open() -> None:
    assert on_day(iron("120"), 1).state is FindingState.OPEN


def test_a_later_sheet_that_finds_it_in_clears_it_and_the_next_one_out_begins_anew() -> None:
    lives = iron("120", "90", "130")
    first, second = live(lives, (), day(3))
    assert (first.life.id, first.state) == ("1-iron", FindingState.CLEARED)
    assert first.because == "cleared by entry 2 on 2026-04-19"
    assert (second.life.id, second.state) == ("3-iron", FindingState.OPEN)
    assert on_day(lives, 1).state is FindingState.OPEN


def test_a_cause_found_of_other_points_than_before_is_another_finding_that_wants_an_answer_of_its_own() -> None:
    hot = a_rule(id="hot", kinds=("spot",), quantity="exhaust", unit="°C", cause="hot cylinders", of_engine=True)

    def exhausts(number: int, *figures: str) -> MeasuredSheet:
        values = [value("exhaust", text, point=str(place)) for place, text in enumerate(figures, start=1)]
        return a_sheet(*values, kind="spot", days=-number, entry=number)

    def begun(*sheets: MeasuredSheet) -> list[str]:
        return [life.id for life in finding_lives(judge_history(sheets, ENGINE, (hot,), Background()), {})]

    one, both, other = exhausts(1, "120", "90"), exhausts(2, "120", "120"), exhausts(3, "90", "120")
    assert begun(one, both, other) == ["1-hot"]
    assert begun(one, other) == ["1-hot", "3-hot"]
    accepted = an_answer(finding="1-hot", cause="hot cylinders")
    first, second = live(
        finding_lives(judge_history((one, other), ENGINE, (hot,), Background()), {}), (accepted,), day(3)
    )
    assert (first.state, second.state) == (FindingState.CLEARED, FindingState.OPEN)


def test_its_row_is_that_of_the_newest_sheet_up_to_the_day() -> None:
    lives = iron("120", "220")
    assert (on_day(lives, 1).row.measured, on_day(lives, 1).row.severity) == (Decimal(120), "alert")
    assert (on_day(lives, 2).row.measured, on_day(lives, 2).row.severity) == (Decimal(220), "alarm")


def test_a_finding_whose_values_went_to_another_is_joined_to_that() -> None:
    rules = rules_for(rule_book(), ENGINE)
    leaks = (value("leak", "5", point="1"), value("leak", "30", point="2"))
    first = a_sheet(*leaks, kind="leakdown", entry=1, days=9)
    low = a_sheet(
        value("pressure", "150", "psi", "1"),
        value("pressure", "100", "psi", "2"),
        value("pressure", "102", "psi", "2", "wet"),
        value("pressure", "150", "psi", "3"),
        kind="compression",
        entry=2,
        days=5,
    )
    gap = value("lash", "0.30", "mm", "2E", "found")
    lash = a_sheet(gap, kind="lash", entry=3, days=3)
    tight = Judgement(
        gap,
        Verdict.ALERT,
        Place.BELOW,
        (Decimal("0.40"), Decimal("0.50")),
        Decimal("0.40"),
        Decimal("-0.10"),
        Decimal("0.10"),
        "mm",
    )
    background = Background(lash={3: (tight,)})
    lives = finding_lives(judge_history((first, low, lash), ENGINE, rules, background), {})
    states = {one.life.id: (one.state, one.because) for one in live(lives, (), ON)}
    closing = next(life.id for life in lives if life.cause == "closing exhaust valve")
    assert closing == "3-pattern-exhaust-valve-2"
    assert states["1-leakdown-bands-2"] == (FindingState.JOINED, f"joined to {closing} by entry 3 on 2026-04-14")


def test_an_accepted_finding_stays_accepted_until_it_is_graver() -> None:
    lives = iron("120", "130", "220")
    accepted = an_answer()
    assert on_day(lives, 1, accepted).state is FindingState.ACCEPTED
    assert on_day(lives, 2, accepted).because == "accepted as alert by Fenn on 2026-04-18: known"
    graver = on_day(lives, 3, accepted)
    assert graver.state is FindingState.OPEN
    assert graver.because == "graver than when it was accepted as alert by Fenn on 2026-04-18: known"


def test_an_alarm_that_was_accepted_stays_so_when_it_is_milder() -> None:
    accepted = an_answer(severity=Severity.ALARM)
    assert on_day(iron("220", "120"), 2, accepted).state is FindingState.ACCEPTED


def test_an_acceptance_does_not_hold_for_the_next_finding_of_that_cause() -> None:
    _, second = live(iron("120", "90", "130"), [an_answer()], day(3))
    assert second.state is FindingState.OPEN


def test_an_answer_of_a_later_day_is_not_known_yet() -> None:
    assert on_day(iron("120", "130"), 1, an_answer(on=2)).state is FindingState.OPEN


def test_of_several_answers_the_newest_counts_whatever_their_order() -> None:
    raised = an_answer(AnswerKind.FOLLOW_UP, number=2)
    for answers in ((an_answer(), raised), (raised, an_answer())):
        assert on_day(iron("120"), 1, *answers).state is FindingState.FOLLOW_UP


def test_a_follow_up_holds_until_a_later_sheet_still_flags_after_it_was_done() -> None:
    lives = iron("120", "130", "140")
    done = an_answer(AnswerKind.FOLLOW_UP, done=At(day(2), 2))
    assert on_day(lives, 1, done).because == "follow-up raised by Fenn on 2026-04-18: known"
    waiting = on_day(lives, 2, done)
    assert waiting.state is FindingState.FOLLOW_UP
    assert waiting.because.endswith("; done on 2026-04-19, not measured since")
    again = on_day(lives, 3, done)
    assert again.state is FindingState.OPEN
    assert again.because == "still there on 2026-04-20, after its follow-up was done on 2026-04-19"


def test_a_sheet_that_did_not_measure_it_does_not_open_it_after_the_follow_up() -> None:
    sheets = (a_sheet(value("Fe", "120"), entry=1), a_sheet(value("Cu", "5"), entry=3, days=-3))
    done = an_answer(AnswerKind.FOLLOW_UP, done=At(day(2), 2))
    (lived,) = live(lives_of(*sheets), [done], day(5))
    assert lived.state is FindingState.FOLLOW_UP


def test_a_follow_up_that_was_removed_without_being_done_leaves_it_open() -> None:
    removed = an_answer(AnswerKind.FOLLOW_UP, removed_on=day(2))
    lives = iron("120", "130")
    assert on_day(lives, 1, removed).state is FindingState.FOLLOW_UP
    assert on_day(lives, 2, removed).because == "its follow-up was removed on 2026-04-19 without being done"


def test_an_answer_finds_its_finding_by_cause_and_day_when_the_id_is_gone() -> None:
    lives = iron("120", "130", firsts={1: 5})
    assert on_day(lives, 2, an_answer()).state is FindingState.ACCEPTED
    assert withdrawn(lives, [an_answer()], day(2)) == ()


def test_an_answer_to_a_finding_that_is_no_more_is_said() -> None:
    first, second = an_answer(), an_answer(number=2, why="still known", on=2)
    lives = iron("90", "90", "120")
    assert withdrawn(lives, [second, first], day(3)) == (second,)
    assert withdrawn(lives, [second, first], day(1)) == (first,)
    assert withdrawn(lives, [first], day(0)) == ()


@pytest.mark.parametrize("kind", AnswerKind)
def test_a_cleared_finding_is_cleared_whatever_was_answered(kind: AnswerKind) -> None:
    lived = on_day(iron("120", "90"), 2, an_answer(kind))
    assert lived.state is FindingState.CLEARED
    assert lived.answer is not None
