"""Text from people made harmless, and cells as plain text."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.domain.cautions import GENERAL
from fleetcare.domain.lines import State
from fleetcare.domain.printable import cell_text, clean


@pytest.mark.parametrize(
    ("text", "shown"),
    [
        ("Oil and filter", "Oil and filter"),
        ("Ölfilter × 2 – größer", "Ölfilter × 2 – größer"),
        ("\x1b[31mred", "\\x1b[31mred"),
        ("two\nlines\tand\x7f", "two\\nlines\\tand\\x7f"),
        ("\x9b2J", "\\x9b2J"),
        ("abc\u202edef", "abc\\u202edef"),
        ("\ud800", "\\ud800"),
        ("\U000e0041", "\\U000e0041"),
        ("[/b]", "[/b]"),
    ],
)
def test_what_could_drive_a_terminal_is_shown_as_an_escape(text: str, shown: str) -> None:
    assert clean(text) == shown


@pytest.mark.parametrize(
    ("cell", "text"),
    [
        (None, ""),
        (Decimal("1250.00"), "1250"),
        (Decimal("1E+3"), "1000"),
        (date(2026, 5, 1), "2026-05-01"),
        (State.OVERDUE, "overdue"),
        (12, "12"),
    ],
)
def test_a_cell_is_plain_text(cell: object, text: str) -> None:
    assert cell_text(cell) == text


def test_the_general_caution_names_manual_codes_law_and_competent_people() -> None:
    assert all(word in GENERAL for word in ("manual", "codes", "law", "competent", "licensed"))
