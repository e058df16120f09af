"""Figures, days and text from people as plain text, harmless for a terminal."""

import re
from datetime import date
from decimal import Decimal

from fleetcare.domain.quantities import plain

# Control characters (C0, DEL, C1), line separators, marks that turn writing direction, lone surrogates, invisible tags.
UNPRINTABLE = re.compile(
    "[\x00-\x1f\x7f-\x9f\u061c\u200e\u200f\u2028-\u202e\u2066-\u2069\ufeff\ud800-\udfff\U000e0000-\U000e007f]"
)


def clean(text: str) -> str:
    """Give the text with everything that could drive a terminal shown as an escape: ESC becomes \\x1b."""
    return UNPRINTABLE.sub(lambda found: found[0].encode("unicode_escape").decode(), text)


def cell_text(cell: object) -> str:
    """Give the content of a cell as text: None as empty, days in ISO form, figures without exponent."""
    match cell:
        case None:
            return ""
        case Decimal():
            return plain(cell)
        case date():
            return cell.isoformat()
        case _:
            return str(cell)
