"""The entry line: what is asked about it, and the answers it offers."""

import pytest

from fleetcare.drafts.entry_line import LONGEST, understand
from fleetcare.drafts.entry_questions import Question
from fleetcare.drafts.entry_vocabulary import ItemWords, Vocabulary
from tests.drafts.entry_yard import HOURS, MONDAY, YARD


def question(text: str, vocabulary: Vocabulary = YARD) -> Question:
    """Give the one question a line leaves open."""
    (only,) = understand(text, vocabulary).questions
    return only


def answers(text: str, vocabulary: Vocabulary = YARD) -> list[str | None]:
    """Give what may be put in place of the words asked about."""
    return [choice.text for choice in question(text, vocabulary).choices]


@pytest.mark.parametrize(
    ("text", "words", "asked", "choices"),
    [
        ("k5 7", "k5", "k5: K-05, K-5?", ["engine K-05", "engine K-5"]),
        ("p4 oil coo + serv", "serv", "serv: 250 h service, 500 h service?", ["250 h service", "500 h service"]),
        ("p3 oil fen", "fen", "fen: done by Ada Fenwick, done by Fenn?", ['by "Ada Fenwick"', "by Fenn"]),
        ("p3 o f", "o f", "o f: task Oil and filter, ", ["oil and filter"]),
        ("ps7 har 9h", "har", "har: task Harbour check, done by Harbin?", ["harbour check", "by Harbin"]),
        ("ps7 mon 9h", "mon", "mon: task Monday look-round, on 2026-04-20?", ["monday look round", "on 2026-04-20"]),
        ("p4 250", "250", "250: task 250 h service, 250 on the dial?", ["250 h service", "at 250"]),
        (
            "p4 250 h s",
            "250 h s",
            "250 h s: task 250 h service, 250 h on the dial and task 250 h",
            ["250 h service", "at 250h 250 h service"],
        ),
        ("12 oil 77", "12", "12: engine or machine 12, 12 on the dial?", ["engine 12", "at 12"]),
        ("le1 oil 3743", "3743", "3743: 3743 h, 3743 km?", ["3743h", "3743km"]),
        ("ps7 oil 8L", "8L", "8L: 8 L filled in, 8 L on the dial?", ["fill 8L", "at 8L"]),
        ("p3 8L", "8L", "8L: topped up?", ["top-up 8L"]),
        ("p3 oil 8gal", "8gal", "8gal: which gallon?", ["8galus", "8galimp"]),
        ("p3 oil 9h 8 gal", "gal", "gal: which gallon?", ["galus", "galimp"]),
        ("p3 oil lash", "lash", "lash: Oil and filter and Valve lash, both?", ["+ lash"]),
        ("p3", "", "what was done, or what does the dial show?", [" oil and filter", " valve lash"]),
        ("tr1 fenn", "", "what was done, or what does the dial show?", [" task Brakes"]),
    ],
)
def test_what_can_be_several_things_is_asked_about_and_never_guessed(
    text: str, words: str, asked: str, choices: list[str]
) -> None:
    first = understand(text, YARD).questions[0]
    assert text[first.start : first.end] == words
    assert first.asked.startswith(asked)
    assert [choice.text for choice in first.choices][: len(choices)] == choices


def test_two_words_that_can_each_be_the_tag_are_both_asked_about() -> None:
    assert [one.asked for one in understand("12 oil 77", YARD).questions] == [
        "12: engine or machine 12, 12 on the dial?",
        "77: engine or machine 77, 77 on the dial?",
    ]


@pytest.mark.parametrize(
    ("text", "asked"),
    [
        ("", "which engine or machine?"),
        ("fenn 1234", "which engine or machine?"),
        ("note p3 leaks", "which engine or machine?"),
        ("+", "which engine or machine?"),
        ('"p3" 9', "which engine or machine?"),
        ("p33 oil 9", "p33: which engine or machine?"),
        ("oil p33", "p33: which engine or machine?"),
        ("zzz 9", "zzz: which engine or machine?"),
        ("p3 le1 9h", "le1: P-03, or LE-1? Keep one"),
        ("p3 oil today yesterday", "yesterday: on 2026-04-20, or on 2026-04-19? Keep one"),
        ('p3 oil "a" note b', 'note b: note "a", or note "b"? Keep one'),
        ("p3 oil 8L fill 9L", "fill 9L: 8 L, or 9 L filled in? Keep one"),
        ("p3 9h 10", "9 h or 10 h: what does the hours meter show? Keep one"),
        ("p3 9 10", "9 h or 10 h: what does the hours meter show? Keep one"),
        ("p3 9km", "9km: no meter counts distance of P-03 on that day"),
        ("tr1 9", "9: no meter counts anything of TR-1 on that day"),
        ("n1 9 2026-04-10", "9: no meter counts anything of N-1 on that day"),
        ("p3 oil 0L", "0L cannot be right; give a volume above 0"),
        ("p3 oil topup 0L", "0L cannot be right; give a volume above 0"),
        ("p3 oil 2026-04-21", "2026-04-21 has not come yet"),
        ("p3 oil 2026-02-30", "there is no day 2026-02-30; check month and day against a calendar"),
        ("p3 oil on 1066-10-14", "1066-10-14 cannot be right; give a day from 1900-01-01 to 2199-12-31"),
        ("p3 oil 12kg", "'12kg' has the unknown unit 'kg'; use one of h km mi L galus galimp starts d w mo y"),
        ("p3 oil 3d", "'3d' is a span of time, not a dial figure; write what the dial shows, such as 1234h"),
        (
            "p3 oil 1234,5",
            "'1234,5' is not a figure; write digits, a point for decimals, and a unit, such as 250h or 12mo",
        ),
        ("p3 oil 9999999999", "9999999999 cannot be right; give a figure up to 999999999"),
        ("p3 oil by", "by: by whom?"),
        ("p3 oil by 1234", "by: by whom?"),
        ("p3 oil by today", "by: by whom?"),
        ("p3 oil on", "on: on which day?"),
        ("p3 oil at fenn", "at: at which figure?"),
        ("p3 oil + task", "task: which task?"),
        ("p3 oil top up", "up: what is it?"),
        ("p3 oil top-up 9h", "top-up: how much, such as 8L?"),
        ("p3 oil part", "part: part-done?"),
        ("p3 oil note", "note: what should it say?"),
        ("p3 9 engine", "engine: which engine or machine?"),
        ('p3 9 engine "p99"', "engine: which engine or machine?"),
        ('p3 oil ""', "there is nothing between the quotes"),
        ('p3 oil by ""', "there is nothing between the quotes"),
        ('p3 oil note ""', "there is nothing between the quotes"),
        ('p3 oil "new plug', "where does the quoted text end?"),
        ("p3 + oil", "+ stands between two tasks"),
        ("p3 oil +", "and which task?"),
        ("p3 oil + 9", "and which task?"),
        ("p3 oil sure", "sure of which figure?"),
        ("p3 oil 8L rolled over", "which figure rolled over?"),
        ("le1 9h 9km rolled over", "which figure rolled over?"),
        ("p3 9 sure rolled over", "sure, or rolled over? Keep one"),
        ("p3 9 part-done", "which task was done in part?"),
        ("p3 oil x\ud800", "this character cannot be kept, leave it out"),
        ('p3 oil "\ud800"', "this character cannot be kept, leave it out"),
        ("p3 oil &", "&: what is it?"),
    ],
)
def test_what_cannot_be_so_is_said(text: str, asked: str) -> None:
    assert asked in [one.asked for one in understand(text, YARD).questions]


def test_a_word_nobody_knows_is_what_it_is_like_or_a_new_name_or_a_note() -> None:
    found = question("p3 valvs 9")
    assert [(choice.said, choice.text) for choice in found.choices] == [
        ("task Valve lash", "valve lash"),
        ("done by valvs, a new name", "by valvs"),
        ('note "valvs"', 'note "valvs"'),
    ]
    assert answers("p3 oil fnen 9")[0] == "by Fenn"
    assert answers("p3 oil le2")[0] == "engine LE-1"


def test_a_tag_nobody_has_is_asked_about_with_those_like_it() -> None:
    assert answers("ps07x 9") == ["engine PS-7"]
    assert answers("zzz 9") == []


def test_while_it_is_not_clear_whose_the_line_is_its_tasks_are_not_asked_about() -> None:
    assert len(understand("k5 greasing", YARD).questions) == 1


def test_what_is_clear_of_a_line_is_given_though_something_is_asked() -> None:
    line = understand("p4 service 1600 by fenn", YARD)
    assert len(line.questions) == 1
    assert (line.tag, line.by, [str(figure) for figure in line.figures], line.tasks) == ("P-04", "Fenn", ["1600 h"], ())


@pytest.mark.parametrize(
    ("words", "as_text", "as_task"),
    [
        ('ki "x"', "repair \"ki 'x'\"", 'repair kit check note "x"'),
        ("kit + oil", 'repair "kit + oil"', "repair kit check + task Oil"),
        ("kit fill 8L sure", 'repair "kit fill 8L sure"', "repair kit check fill 8L sure"),
        ("kit top up 8 L 9", 'repair "kit top up 8 L 9"', "repair kit check top-up 8L at 9"),
    ],
)
def test_a_text_that_may_be_more_than_a_text_is_asked_about_whole(words: str, as_text: str, as_task: str) -> None:
    yard = Vocabulary(MONDAY, [ItemWords("P-1", ("Repair kit check", "Oil"), (HOURS,))])
    assert set(answers(f"p1 repair {words}", yard)) == {as_text, as_task}


def test_a_gallon_that_is_a_person_leaves_the_number_open() -> None:
    yard = Vocabulary(MONDAY, [ItemWords("P-1", ("Oil",), (HOURS,))], ["Gal"])
    assert question("p1 oil 8 gal", yard).asked == "8: what is it?"


def test_two_ways_that_come_to_the_same_are_no_question() -> None:
    line = understand("p3 oil a fenw 9", YARD)
    assert (line.questions, line.tasks, line.by) == ((), ("Oil and filter",), "Ada Fenwick")


def test_a_number_that_is_a_tag_may_be_its_figure_too() -> None:
    line = understand("12 oil 12", YARD)
    assert (line.questions, line.tag, [str(figure) for figure in line.figures]) == ((), "12", ["12 h"])


def test_a_line_is_no_longer_than_it_can_be_read_with_every_key() -> None:
    text = "p3 note " + "x" * LONGEST
    assert understand(text[:LONGEST], YARD).questions == ()
    assert question(text).asked == "a line holds 500 characters, leave out what is over"


def test_in_a_yard_without_anything_every_line_asks_whose_it_is() -> None:
    assert question("p3 oil 9", Vocabulary(MONDAY)).asked == "p3: which engine or machine?"
