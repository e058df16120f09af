"""What an entry line says while it is typed, as lines to show: the sentence, or what is asked with its answers."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

from fleetcare.tui.widgets.said_lines import HERE, SaidLine

if TYPE_CHECKING:
    from fleetcare.operations.entry_line import ReadBack

HOW = (
    SaidLine("Whose, what was done, what the dial shows, who did it, in any order: p3 oil 1234 8L fenn", "quiet"),
    SaidLine('Also yesterday, mon, 2026-04-20; top-up 2L; note "…", repair "…", defect "…"', "quiet"),
)
NOBODY = (
    SaidLine("There is no engine yet to write about. Esc closes this; then 2 shows the engines, and a adds one."),
)
_CLEAR = SaidLine("Enter stores it.", "quiet")
_AGAIN = SaidLine("Go on with another line, or Esc.", "quiet")
_MOST_CHOICES = 6


def lines_of(back: "ReadBack", marked: int) -> list[SaidLine]:
    """Give a line read back: the sentence, then the first question with the answers around the one marked."""
    if back.can_be_stored:
        return [SaidLine(back.sentence, "strong"), _CLEAR]
    question, *others = back.questions
    first = min(max(marked - _MOST_CHOICES + 1, 0), max(len(question.choices) - _MOST_CHOICES, 0))
    lines = [SaidLine(back.sentence)] if back.sentence else []
    lines.append(SaidLine(question.asked, "due", "?"))
    for number, choice in enumerate(question.choices):
        if first <= number < first + _MOST_CHOICES:
            is_here = number == marked
            lines.append(SaidLine(choice.said, "strong" if is_here else "", HERE if is_here else ""))
    more = len(question.choices) - _MOST_CHOICES
    if more > 0:
        lines.append(SaidLine(f"… {len(question.choices)} answers, ↑ ↓ go through them", "quiet"))
    if others:
        lines.append(SaidLine(f"then {len(others)} more to answer", "quiet"))
    return lines


def stored_lines(sentences: Sequence[str]) -> list[SaidLine]:
    """Say what was stored."""
    return [*(SaidLine(sentence) for sentence in sentences), _AGAIN]
