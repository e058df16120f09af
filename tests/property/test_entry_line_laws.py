"""What holds for an entry line whatever is typed: it asks and never fails, order plays no part, an answer settles."""

from itertools import pairwise

from hypothesis import given
from hypothesis import strategies as st

from fleetcare.drafts.entry_line import understand
from fleetcare.drafts.entry_understood import Understood
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import LogDraft, ReadingDraft
from tests.drafts.entry_yard import MONDAY, YARD

WORDS = (
    *("p3", "p4", "le1", "ps7", "k5", "12", "77", "weed", "boat", "2", "oil", "lash", "raw", "water", "har", "mon"),
    *("250", "h", "s", "service", "fenn", "fen", "quill", "ada", "by", "on", "at", "task", "engine", "top", "up"),
    *("top-up", "fill", "8L", "8", "gal", "1234", "1234h", "131975km", "0L", "12kg", "3d", "yesterday", "friday"),
    *("2026-04-01", "2026-02-30", "2027-01-01", "note", "defect", "repair", "sure", "rolled", "over", "part-done"),
    *("+", "&", "zzz", "ruddock", '"new', 'plug"', '"', '""', '"seal"'),
)
lines = st.lists(st.sampled_from(WORDS), max_size=9).map(" ".join)
printable = st.text(
    st.characters(exclude_categories=["Cs", "Cc"], exclude_characters='"\u201c\u201d\u201e'), min_size=1
)


def says(line: Understood) -> tuple[object, ...]:
    """Give all a line says, wherever in it that stands."""
    return line.readings(), line.work(), line.is_work, line.is_new_name


def times(asked: str, line: Understood) -> int:
    """Count how often something is asked."""
    return [question.asked for question in line.questions].count(asked)


@given(st.text() | lines)
def test_any_text_is_taken_or_asked_about(text: str) -> None:
    line = understand(text, YARD)
    spans = [(one.start, one.end) for one in line.taken]
    assert all(0 <= start < end <= len(text) for start, end in spans)
    assert all(before[1] <= after[0] for before, after in pairwise(spans))
    assert all(0 <= one.start <= one.end <= len(text) for one in line.questions)
    assert line.on <= MONDAY or line.questions


@given(lines)
def test_a_line_that_leaves_nothing_open_can_be_written_down(text: str) -> None:
    line = understand(text, YARD)
    if not line.questions:
        assert [read_draft(ReadingDraft, fields).tag for fields in line.readings()] or line.is_work
        assert not line.is_work or read_draft(LogDraft, line.work()).tag == line.tag


@given(printable)
def test_a_quoted_text_comes_back_as_it_was_typed_save_its_white_space(text: str) -> None:
    line = understand(f'p3 "{text}" oil', YARD)
    assert line.note == " ".join(text.split())
    assert bool(line.questions) == (not line.note)


KINDS = ("p3", "oil + lash", "1234 h", "8L", "by fenn", "yesterday", '"new plug"', 'repair "seal"', "sure")


@given(st.permutations(KINDS))
def test_the_order_of_what_is_clear_plays_no_part(parts: list[str]) -> None:
    line = understand(" ".join(parts), YARD)
    assert line.questions == ()
    assert says(line) == says(understand(" ".join(KINDS), YARD))


@given(lines, st.data())
def test_an_answer_settles_what_was_asked(text: str, data: st.DataObject) -> None:
    line = understand(text, YARD)
    answers = [(question, choice.text) for question in line.questions for choice in question.choices if choice.text]
    if answers:
        question, answer = data.draw(st.sampled_from(answers))
        after = understand(text[: question.start] + answer + text[question.end :], YARD)
        assert times(question.asked, after) < times(question.asked, line)


@given(lines)
def test_a_line_is_taken_the_same_way_every_time(text: str) -> None:
    assert understand(text, YARD) == understand(text, YARD)
