"""The words of an entry line: where each stands, and how forgiving a tag, a name and a day are read."""

import re
from dataclasses import dataclass
from datetime import date, timedelta
from enum import IntEnum

_WORD = re.compile(r'"(?P<quoted>[^"]*)(?P<end>"?)|\+|[^\s"+]+')
_CURLY_QUOTES = str.maketrans(dict.fromkeys("\u201c\u201d\u201e", '"'))
_PART_OF_NAME = re.compile(r"[^\W_]+")
_ZEROS = re.compile(r"(?<![0-9])0+(?=[0-9])", re.ASCII)
_BETWEEN_WORDS = ".,;:"
_WEEKDAYS = ("monday", "tuesday", "wednesday", "thursday", "friday", "saturday", "sunday")
_SHORTEST_WEEKDAY = 3

JOIN = "+"


@dataclass(frozen=True, slots=True)
class Word:
    """A word, a join or a quoted text of a line, and where it stands in it; a quote that does not end is not closed."""

    text: str
    start: int
    end: int
    is_quoted: bool = False
    is_closed: bool = True

    @property
    def key(self) -> str:
        """The word whatever its case; nothing for quoted text, which stands for itself."""
        return "" if self.is_quoted else self.text.casefold()


class Fit(IntEnum):
    """How typed words fit a name."""

    NOT = 0
    IN_PART = 1
    IN_FULL = 2


def split_words(text: str) -> list[Word]:
    """Take a line apart; what stands between words, such as the comma of a list, is left out."""
    words = []
    for found in _WORD.finditer(text.translate(_CURLY_QUOTES)):
        start, end = found.span()
        if found["quoted"] is not None:
            words.append(Word(" ".join(found["quoted"].split()), start, end, True, bool(found["end"])))
            continue
        bare = found[0].rstrip(_BETWEEN_WORDS)
        if bare:
            words.append(Word(bare, start, start + len(bare)))
    return words


def tag_key(text: str) -> str:
    """Give what tags are told apart by when typed in a hurry: P-03, p 3 and p3 have the same."""
    return "".join(_PART_OF_NAME.findall(_ZEROS.sub("", text.casefold())))


def name_parts(name: str) -> tuple[str, ...]:
    """Give the words of a name whatever their case, without what stands between them."""
    return tuple(_PART_OF_NAME.findall(name.casefold()))


def fit_name(typed: tuple[str, ...], name: tuple[str, ...]) -> Fit:
    """Tell whether typed words are the words of a name, or each begins one of them, in their order."""
    if typed == name:
        return Fit.IN_FULL
    left = iter(name)
    return Fit.IN_PART if all(any(part.startswith(word) for part in left) for word in typed) else Fit.NOT


def day_word(key: str, on: date) -> date | None:
    """Read today, yesterday or a weekday, of three letters at least: the last such day up to `on`. None for others."""
    if key in {"today", "yesterday"}:
        return on - timedelta(days=key == "yesterday")
    for number, name in enumerate(_WEEKDAYS):
        if len(key) >= _SHORTEST_WEEKDAY and name.startswith(key):
            return on - timedelta(days=(on.weekday() - number) % 7)
    return None
