"""One line from anywhere: what breaks with the past or cannot be stored is asked about before anything is stored."""

import pytest

from fleetcare.context import Context
from fleetcare.domain.engines import Status
from fleetcare.drafts.entry_questions import Question
from fleetcare.errors import Refused
from fleetcare.operations.entry_line import load_vocabulary, read_back, store_line
from fleetcare.operations.find import find_engine
from fleetcare.operations.spells import change_status
from tests.operations.entry_yard import TODAY, Reader, back, ctx, rows, store

__all__ = ["back", "ctx"]

HIGH = "1900 h on 2026-04-20 does not fit reading 6 of P-03 (1200 h on 2026-04-01): gains 700 h in 19 days, at most 24 h a day"
LOW = "9980 h on 2026-04-20 does not fit reading 9 of R-1 (9990 h on 2026-04-18): lower by 10 h"
FIRST = "5 h lies below 9000 h, the meter's first figure; check the figure"
SURE, TURNED, NEW = (
    "it is right; what it breaks with is set aside",
    "the dial went round to 0",
    "a new meter was fitted",
)


def asked(back: Reader, text: str) -> Question:
    """Give the one question a line leaves open."""
    (only,) = back(text).questions
    return only


@pytest.mark.parametrize(
    ("text", "words", "said", "answers"),
    [
        ("p3 1900", "1900", HIGH, {SURE: "1900h sure", NEW: None}),
        ("p3 oil at 1900 h fenn", "at 1900 h", HIGH, {SURE: "1900h sure", NEW: None}),
        ("r1 oil 9980", "9980", LOW, {SURE: "9980h sure", NEW: None}),
        ("r1 oil 5", "5", FIRST, {TURNED: "5h rolled over", NEW: None}),
    ],
)
def test_a_figure_that_breaks_with_the_past_is_asked_about_with_every_explanation_that_would_hold(
    back: Reader, text: str, words: str, said: str, answers: dict[str, str | None]
) -> None:
    question = asked(back, text)
    assert (text[question.start : question.end], question.asked) == (words, said)
    assert {choice.said: choice.text for choice in question.choices} == answers


def test_each_figure_of_a_line_is_held_against_its_own_meter(back: Reader) -> None:
    found = back("le1 oil 500h 60000km")
    assert [question.choices[0].text for question in found.questions] == ["500h sure", "60000km sure"]
    assert back("le1 oil 500h sure 60000km sure").questions == ()


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("p3 1234 rolled over", "the digits of the hours meter of P-03 are not known; give them first:"),
        ("r1 12345", "12345 h does not fit on 4 digits; check the figure"),
        ("r1 8000 sure", "8000 h lies below 9000 h, the meter's first figure; check the figure"),
        ("r1 500 rolled over", "500 h on 2026-04-20 does not fit reading 9 of R-1"),
        ("g9 oil", "Oil counts hours, and no reading of G-9 lies on or before 2026-04-20; say what the dial showed"),
    ],
)
def test_what_the_meter_cannot_show_is_said(back: Reader, text: str, said: str) -> None:
    assert asked(back, text).asked.startswith(said)


def test_what_was_answered_is_stored(ctx: Context, back: Reader) -> None:
    assert store(ctx, back("r1 oil 5h rolled over fenn"))[0] == "Reading 10: R-1 shows 5 h on 2026-04-20."
    kept = rows(ctx, "select value, rolled_over, entry_id from reading where id >= 10 order by id")
    assert kept == [("5", 1, None), ("5", 0, 2)]
    store(ctx, back("p3 oil 900 sure"))
    assert rows(ctx, "select reading_id, mark from reading_mark") == [(5, "suspect"), (6, "suspect")]


def test_many_readings_that_would_be_set_aside_are_counted(ctx: Context, back: Reader) -> None:
    for figure in ("1210", "1220"):
        store(ctx, back(f"p3 {figure}"))
    assert back("p3 900 sure").sentence.endswith("set aside as suspect: 4 readings")


@pytest.mark.parametrize(
    ("text", "words", "answers"),
    [
        ("p3 lash 1234", "lash", ["with its lash sheet", "done in part, it stays open"]),
        ("p3 oil + valve l 1234", "valve l", ["with its lash sheet"]),
    ],
)
def test_work_that_needs_a_sheet_cannot_be_said_in_a_line(
    back: Reader, text: str, words: str, answers: list[str]
) -> None:
    question = asked(back, text)
    assert (text[question.start : question.end], question.asked) == (
        words,
        "Valve lash closes only with its lash sheet",
    )
    assert [choice.said for choice in question.choices] == answers


def test_what_is_clear_is_said_while_something_is_asked(back: Reader) -> None:
    assert back("p3 oil 1900 fenn").sentence == "P-03, oil and filter, 1900 h on the dial, Fenn"
    assert back("p3 oil 1234 zzz").sentence == "P-03, oil and filter, 1234 h on the dial"


@pytest.mark.parametrize("text", ["", "p3", "p3 1900", "p3 lash 1234", "g9 oil", "p99 oil"])
def test_a_line_with_an_open_question_is_not_stored(ctx: Context, back: Reader, text: str) -> None:
    before = ctx.path.read_bytes()
    seen = back(text)
    with pytest.raises(Refused, match=r"a question is open: .*answer it, then store the line"):
        store(ctx, seen)
    assert ctx.path.read_bytes() == before


@pytest.mark.parametrize(
    ("meanwhile", "by_now"),
    [
        ("p3 oil 1240", "P-03, oil and filter, 1234 h on the dial, Fenn; next 1490 h or 20 Apr 2027"),
        ('p3 oil 1234 by "Fenner"', "P-03, oil and filter, 1234 h on the dial"),
    ],
)
def test_a_line_that_says_or_does_something_else_by_now_is_not_stored(
    ctx: Context, back: Reader, meanwhile: str, by_now: str
) -> None:
    seen = back("p3 oil 1234 fen")
    assert seen.can_be_stored
    store(ctx, back(meanwhile))
    before = ctx.path.read_bytes()
    with pytest.raises(Refused, match="the line would do something else by now; read it again"):
        store(ctx, seen)
    assert back("p3 oil 1234 fen").sentence == by_now
    assert ctx.path.read_bytes() == before


def test_a_line_read_back_yesterday_is_not_stored_today(ctx: Context) -> None:
    with ctx.read() as connection:
        seen = read_back(connection, "p3 oil 1210", TODAY.replace(day=19))
    with pytest.raises(Refused, match="the line would do something else by now"), ctx.write() as session:
        store_line(session, seen, TODAY)


def test_an_engine_withdrawn_since_the_vocabulary_was_loaded_is_said(ctx: Context) -> None:
    with ctx.read() as connection:
        words = load_vocabulary(connection, TODAY)
    with ctx.write() as session:
        change_status(session, find_engine(session.connection(), "P-03"), Status.WITHDRAWN, TODAY, why="sold")
    with ctx.read() as connection:
        (question,) = read_back(connection, "p3 oil 1234", TODAY, words).questions
    assert question.asked == "P-03 is withdrawn since 2026-04-20; add it anew with fleetcare engine add"


@pytest.mark.parametrize(("text", "leads_to"), [("p3 valve lash 1210", "sheet"), ("p3 oil 5", "meter")])
def test_an_answer_that_no_line_can_hold_says_what_it_leads_to(back: Reader, text: str, leads_to: str) -> None:
    (question,) = back(text).questions
    assert [choice.leads_to for choice in question.choices if choice.text is None] == [leads_to]
    assert {choice.leads_to for choice in question.choices if choice.text is not None} == {""}
