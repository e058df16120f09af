"""The entry line: what some words of it are taken as, whatever their order, and what becomes of it."""

from datetime import date
from decimal import Decimal
from typing import Any

import pytest

from fleetcare.domain.quantities import Figure
from fleetcare.drafts.entry_line import understand
from fleetcare.drafts.entry_parts import Part
from fleetcare.drafts.entry_understood import Understood
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import LogDraft, ReadingDraft
from tests.drafts.entry_yard import MONDAY, YARD


def read(text: str) -> Understood:
    """Read a line that leaves nothing open."""
    line = understand(text, YARD)
    assert [question.asked for question in line.questions] == []
    return line


def figures(line: Understood) -> list[str]:
    """Give what the dials show."""
    return [str(figure) for figure in line.figures]


def test_the_line_of_the_design_is_work_with_a_figure_a_volume_and_a_name() -> None:
    line = read("p3 oil 1234 8L fenn")
    assert (line.tag, line.tasks, line.by, line.on) == ("P-03", ("Oil and filter",), "Fenn", MONDAY)
    assert (figures(line), line.filled) == (["1234 h"], Figure(Decimal(8), "L"))


@pytest.mark.parametrize(
    "text", ["P-03", "p3", "p03", "P3", "p-3", "P.03", "engine p3", 'engine "p-03"', "machine P-03"]
)
def test_a_tag_is_known_whatever_its_case_hyphens_and_leading_zeros(text: str) -> None:
    assert read(f"{text} 1234").tag == "P-03"


def test_a_tag_that_fits_only_loosely_gives_way_to_the_one_typed_exactly() -> None:
    assert (read("k-5 7").tag, read("K-05 7").tag) == ("K-5", "K-05")


@pytest.mark.parametrize("text", ["weed boat 2 anodes", "weedboat2 anodes", 'engine "Weed boat 2" anodes'])
def test_a_tag_of_several_words_may_be_typed_as_it_is_or_as_one(text: str) -> None:
    assert (read(text).tag, read(text).tasks) == ("Weed boat 2", ("Anodes",))


def test_a_number_that_is_a_tag_is_a_figure_where_another_tag_stands() -> None:
    assert (read("12 oil 900").tag, figures(read("12 oil 900"))) == ("12", ["900 h"])
    assert (read("p3 oil 12").tag, figures(read("p3 oil 12"))) == ("P-03", ["12 h"])


@pytest.mark.parametrize(
    ("text", "tasks"),
    [
        ("p3 oil", ("Oil and filter",)),
        ("p3 oi fi", ("Oil and filter",)),
        ("p3 OIL AND FILTER", ("Oil and filter",)),
        ("p3 lash", ("Valve lash",)),
        ("p3 raw-water", ("Raw-water impeller",)),
        ("p3 task lash", ("Valve lash",)),
        ('p3 task "valve lash"', ("Valve lash",)),
        ("p3 oil+lash", ("Oil and filter", "Valve lash")),
        ("p3 lash + oil + raw w i", ("Valve lash", "Oil and filter", "Raw-water impeller")),
        ("p3 oil 1234 + lash", ("Oil and filter", "Valve lash")),
        ("p3 oil + oil", ("Oil and filter",)),
        ("p4 oil", ("Oil",)),
        ("p4 oil c", ("Oil cooler",)),
        ("p4 250 h service", ("250 h service",)),
    ],
)
def test_a_task_is_known_by_its_name_or_the_beginnings_of_its_words(text: str, tasks: tuple[str, ...]) -> None:
    assert read(text).tasks == tasks


def test_a_name_given_in_full_is_that_name_though_its_words_could_be_figures() -> None:
    line = read("p4 250 h service 1600")
    assert (line.tasks, figures(line)) == (("250 h service",), ["1600 h"])


def test_a_number_is_a_task_where_the_dial_cannot_show_it_too() -> None:
    line = read("p4 250 1600h")
    assert (line.tasks, figures(line)) == (("250 h service",), ["1600 h"])


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        ("p3 1234", ["1234 h"]),
        ("p3 1234.5 h", ["1234.5 h"]),
        ("p3 at 1234H", ["1234 h"]),
        ("P-03 , 1234 h;", ["1234 h"]),
        ("le1 3743h 131975 km", ["3743 h", "131975 km"]),
        ("le1 82005mi", ["82005 mi"]),
        ("ps7 468428L", ["468428 L"]),
        ("ps7 oil 20000h at 468428L", ["20000 h", "468428 L"]),
        ("n1 5 2026-04-01", ["5 h"]),
    ],
)
def test_a_figure_is_what_the_meter_of_its_unit_shows_or_the_only_one(text: str, shown: list[str]) -> None:
    assert figures(read(text)) == shown


@pytest.mark.parametrize(
    ("text", "filled", "topped_up"),
    [
        ("p3 oil 8L", "8 L", None),
        ("p3 8 galimp lash", "8 galimp", None),
        ("p3 8L repair seal", "8 L", None),
        ("ps7 oil filled 8L", "8 L", None),
        ("p3 fill 8L", "8 L", None),
        ("p3 top-up 2galus", None, "2 galus"),
        ("p3 top up 2L fenn", None, "2 L"),
        ("p3 oil 8L topup 0.5L", "8 L", "0.5 L"),
    ],
)
def test_a_volume_beside_work_is_filled_in_and_topped_up_only_where_it_is_said(
    text: str, filled: str | None, topped_up: str | None
) -> None:
    line = read(text)
    said = [str(volume) if volume else None for volume in (line.filled, line.top_up)]
    assert said == [filled, topped_up]


@pytest.mark.parametrize(
    ("word", "day"),
    [
        ("2026-04-01", date(2026, 4, 1)),
        ("on 2026-04-01", date(2026, 4, 1)),
        ("today", MONDAY),
        ("Yesterday", date(2026, 4, 19)),
        ("mon", MONDAY),
        ("tuesday", date(2026, 4, 14)),
        ("on Sun", date(2026, 4, 19)),
        ("sat.", date(2026, 4, 18)),
    ],
)
def test_a_day_is_the_last_such_day_and_today_is_one(word: str, day: date) -> None:
    assert read(f"p3 oil {word} 1234").on == day


@pytest.mark.parametrize(
    ("words", "name", "is_new"),
    [
        ("fenn", "Fenn", False),
        ("qu", "Quill", False),
        ("by harb", "Harbin", False),
        ("ada", "Ada Fenwick", False),
        ("a fenw", "Ada Fenwick", False),
        ('by "ada fenwick"', "Ada Fenwick", False),
        ("by Ruddock", "Ruddock", True),
        ('by "Mary Ruddock"', "Mary Ruddock", True),
        ('by "Fen"', "Fen", True),
    ],
)
def test_a_person_is_known_by_the_beginning_of_the_name_and_a_new_one_needs_by(
    words: str, name: str, is_new: bool
) -> None:
    line = read(f"p3 oil {words} 1234")
    assert (line.by, line.is_new_name, line.tasks) == (name, is_new, ("Oil and filter",))


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ('p3 oil "drain plug new" fenn', {"note": "drain plug new", "by": "Fenn"}),
        ("p3 oil fenn note drain plug 1234 + new", {"note": "drain plug 1234 + new", "by": "Fenn"}),
        ('p3 oil note "drain plug" 1234', {"note": "drain plug"}),
        ('p3 defect "leaks at pump"', {"defect": "leaks at pump"}),
        ("p3 fenn defect leaks at   pump", {"defect": "leaks at pump", "by": "Fenn"}),
        ('p3 repair "new seal" "came with the van"', {"repair": "new seal", "note": "came with the van"}),
        ("p3 \u201cdrain plug\u201d oil", {"note": "drain plug"}),
        ('p3 oil note the "hot" one', {"note": 'the "hot" one'}),
    ],
)
def test_a_text_stands_in_quotes_or_after_its_word_to_the_end_of_the_line(text: str, found: dict[str, Any]) -> None:
    line = read(text)
    assert {name: getattr(line, name) for name in found} == found


def test_each_word_is_underlined_as_what_it_was_taken_for() -> None:
    text = 'p3, oil + lash 1234 h "new" by fenn mon.'
    line = read(text)
    assert [(text[one.start : one.end], one.part) for one in line.taken] == [
        ("p3", Part.TAG),
        ("oil", Part.TASK),
        ("+", Part.JOIN),
        ("lash", Part.TASK),
        ("1234 h", Part.FIGURE),
        ('"new"', Part.NOTE),
        ("by fenn", Part.PERSON),
        ("mon", Part.DAY),
    ]
    assert [one.said for one in line.taken][-4:] == [
        "1234 h on the dial",
        'note "new"',
        "done by Fenn",
        "on 2026-04-20",
    ]


def test_a_line_without_work_is_a_reading_of_each_figure() -> None:
    line = read('le1 3743h 131975km fenn "dial hard to read"')
    drafts = [read_draft(ReadingDraft, fields) for fields in line.readings()]
    assert [(draft.tag, str(draft.value), draft.by, draft.note) for draft in drafts] == [
        ("LE-1", "3743 h", "Fenn", "dial hard to read"),
        ("LE-1", "131975 km", "Fenn", "dial hard to read"),
    ]
    assert not line.is_work


def test_work_is_one_log_entry_and_what_was_filled_in_stands_in_its_note() -> None:
    line = read('p3 oil+lash 1234 8L yesterday "new plug" by Ruddock part-done')
    draft = read_draft(LogDraft, line.work())
    assert (draft.tag, draft.task, draft.on) == ("P-03", ("Oil and filter", "Valve lash"), date(2026, 4, 19))
    assert (draft.at, draft.by, draft.part_done) == ((Figure(Decimal(1234), "h"),), "Ruddock", True)
    assert draft.note == "8 L filled in; new plug"
    assert line.readings() == []


@pytest.mark.parametrize(
    "text", ['p3 "pump noisy"', "p3 fill 8L", "p3 topup 2L", "p3 defect leaks", 'p3 repair "seal" 9']
)
def test_whatever_is_no_plain_reading_goes_into_the_log(text: str) -> None:
    assert read(text).is_work
    assert read_draft(LogDraft, read(text).work()).tag == "P-03"


@pytest.mark.parametrize(
    ("word", "field"), [("sure", "sure"), ("rolled over", "rolled_over"), ("rolled-over", "rolled_over")]
)
def test_work_with_an_explained_figure_asks_for_a_reading_first(word: str, field: str) -> None:
    line = read(f"p3 oil 1234 {word} fenn")
    (draft,) = [read_draft(ReadingDraft, fields) for fields in line.readings()]
    assert (getattr(draft, field), draft.by, str(draft.value)) == (True, "Fenn", "1234 h")
    assert read_draft(LogDraft, line.work()).task == ("Oil and filter",)
