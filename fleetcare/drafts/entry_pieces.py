"""Every way in which some words of an entry line can be taken as a part of it."""

import re
from collections.abc import Iterator, Sequence
from datetime import date

from fleetcare.domain.days import parse_day
from fleetcare.domain.quantities import UNITS, Figure, Kind, parse_dial
from fleetcare.drafts.entry_parts import FLAGS, GALLON, TAGGED, TEXTS, VOLUMES, Part, Piece
from fleetcare.drafts.entry_vocabulary import ItemWords, Names, Vocabulary
from fleetcare.drafts.entry_words import JOIN, Fit, Word, day_word, name_parts
from fleetcare.errors import FleetError

_SAYS_WHAT_FOLLOWS = {"by", "on", "at", "task", "top", *TAGGED, *TEXTS, *FLAGS, *VOLUMES}
_UNIT_WORDS = {symbol.lower() for symbol in UNITS}
_BARE = re.compile(r"[0-9]*\.?[0-9]+", re.ASCII)
_ISO_LIKE = re.compile(r"[0-9]+-[0-9]+-[0-9]+", re.ASCII)


def tag_pieces(words: Sequence[Word], vocabulary: Vocabulary) -> list[Piece]:
    """Give every way in which words of a line can be a tag."""
    found = []
    for first, word in enumerate(words):
        is_marked = word.key in TAGGED and first + 1 < len(words)
        if is_marked and words[first + 1].is_quoted:
            tag = vocabulary.exactly(words[first + 1].text)
            found += [Piece(first, first + 2, Part.TAG, tag, is_firm=True)] if tag is not None else []
        elif is_marked:
            found += [
                Piece(first, end, Part.TAG, tag, is_firm=True) for end, tag in _tags(words, first + 1, vocabulary)
            ]
        for end, tag in _tags(words, first, vocabulary):
            found.append(Piece(first, end, Part.TAG, tag, is_firm=end - first > 1))
    return found


def _tags(words: Sequence[Word], first: int, vocabulary: Vocabulary) -> Iterator[tuple[int, str]]:
    for end in range(first + 1, min(first + vocabulary.longest_tag, len(words)) + 1):
        if words[end - 1].is_quoted or words[end - 1].text == JOIN:
            return
        for tag in vocabulary.tagged(" ".join(word.text for word in words[first:end])):
            if end - first in {1, len(tag.split())}:
                yield end, tag


def pieces(text: str, words: Sequence[Word], vocabulary: Vocabulary, item: ItemWords | None) -> list[Piece]:
    """Give every way in which words of a line about an item can be anything but a tag."""
    tasks = Names(item.tasks if item is not None else ())
    kinds = {meter.kind for meter in item.meters} if item is not None else set()
    only = kinds.pop() if len(kinds) == 1 else None
    found: list[Piece] = []
    for first in range(len(words)):
        found += _texts(text, words, first)
        found += _flags(words, first)
        found += _days(words, first, vocabulary.on)
        found += _figures(words, first, only)
        found += _named(words, first, tasks, Part.TASK, "task")
        found += _named(words, first, vocabulary.people, Part.PERSON, "by")
        found += _new_person(words, first, vocabulary)
    return found


def _texts(text: str, words: Sequence[Word], first: int) -> Iterator[Piece]:
    """Quoted text is a note; after note, defect or repair it is that, and so is unquoted all that follows."""
    word = words[first]
    if word.is_quoted and word.text:
        yield Piece(first, first + 1, Part.NOTE, word.text, is_firm=True)
    if word.key not in TEXTS or first + 1 == len(words):
        return
    following = words[first + 1]
    if following.is_quoted and following.text:
        yield Piece(first, first + 2, TEXTS[word.key], following.text, is_firm=True)
    elif not following.is_quoted:
        yield Piece(first, len(words), TEXTS[word.key], " ".join(text[following.start :].split()))


def _flags(words: Sequence[Word], first: int) -> Iterator[Piece]:
    word = words[first]
    if word.key == JOIN:
        yield Piece(first, first + 1, Part.JOIN)
    if word.key in FLAGS:
        yield Piece(first, first + 1, FLAGS[word.key])
    two = "-".join(found.key for found in words[first : first + 2])
    if two in FLAGS and word.key not in FLAGS:
        yield Piece(first, first + 2, FLAGS[two], is_firm=True)


def _days(words: Sequence[Word], first: int, on: date) -> Iterator[Piece]:
    day = read_day(words[first], on)
    if day is not None:
        yield Piece(first, first + 1, Part.DAY, day=day)
    marked = read_day(words[first + 1], on) if words[first].key == "on" and first + 1 < len(words) else None
    if marked is not None:
        yield Piece(first, first + 2, Part.DAY, day=marked, is_firm=True)


def read_day(word: Word, on: date) -> date | None:
    """Read a word as a day; None where it is none."""
    if not _ISO_LIKE.fullmatch(word.key):
        return day_word(word.key, on)
    try:
        return parse_day(word.key)
    except FleetError:
        return None


def _figures(words: Sequence[Word], first: int, only: Kind | None) -> Iterator[Piece]:
    """A number is what a dial shows, a volume may be; `only` is what the meters count where they all count one kind."""
    found = _figure(words, first)
    if found is not None:
        end, figure = found
        taken_as = Part.LITRES if figure.kind is Kind.FUEL else Part.FIGURE
        yield Piece(first, end, taken_as, figure=figure, kind=figure.kind or only)
    marker, after = words[first].key, first + 1
    if marker == "top" and after < len(words) and words[after].key == "up":
        marker, after = "top-up", after + 1
    part = Part.FIGURE if marker == "at" else VOLUMES.get(marker)
    marked = _figure(words, after) if part is not None else None
    if part is not None and marked is not None and (part is Part.FIGURE or marked[1].kind is Kind.FUEL):
        yield Piece(first, marked[0], part, figure=marked[1], kind=marked[1].kind or only, is_firm=True)


def _figure(words: Sequence[Word], first: int) -> tuple[int, Figure] | None:
    """Read a number with its unit, in the same word or the next, and where it ends; None where it is none."""
    if first >= len(words):
        return None
    text, end = words[first].key, first + 1
    if _BARE.fullmatch(text) and end < len(words) and words[end].key in {*_UNIT_WORDS, GALLON}:
        text, end = text + words[end].key, end + 1
    try:
        return end, parse_dial(text)
    except FleetError:
        return None


def _named(words: Sequence[Word], first: int, names: Names, part: Part, marker: str) -> Iterator[Piece]:
    """Words that are, or begin, words of a name; a word before them may say what name it is."""
    for end, name, fit in _runs(words, first, names):
        yield Piece(first, end, part, name, is_firm=fit is Fit.IN_FULL and end - first > 1)
    if words[first].key != marker or first + 1 == len(words):
        return
    exact = names.exactly(words[first + 1].text) if words[first + 1].is_quoted else None
    if exact is not None:
        yield Piece(first, first + 2, part, exact, is_firm=True)
    for end, name, _ in _runs(words, first + 1, names):
        yield Piece(first, end, part, name, is_firm=True)


def _runs(words: Sequence[Word], first: int, names: Names) -> Iterator[tuple[int, str, Fit]]:
    typed: tuple[str, ...] = ()
    for end in range(first + 1, len(words) + 1):
        parts = name_parts(words[end - 1].key)
        typed += parts
        fits = names.fitting(typed) if parts else {}
        if not fits:
            return
        for name, fit in fits.items():
            yield end, name, fit


def _new_person(words: Sequence[Word], first: int, vocabulary: Vocabulary) -> Iterator[Piece]:
    """A name nobody had so far counts only after "by", and as one word or in quotes."""
    if words[first].key != "by" or first + 1 == len(words):
        return
    name = words[first + 1]
    if name.is_quoted:
        is_new = bool(name.text) and vocabulary.people.exactly(name.text) is None
    else:
        says_else = name.key in _SAYS_WHAT_FOLLOWS or read_day(name, vocabulary.on) is not None
        is_new = name.text[0].isalpha() and not says_else and not any(_runs(words, first + 1, vocabulary.people))
    if is_new:
        yield Piece(first, first + 2, Part.PERSON, name.text, is_firm=name.is_quoted, is_new=True)
