"""What is asked about the words of an entry line that can be several things, nothing, or one thing too many."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from itertools import islice

from fleetcare.domain.days import parse_day
from fleetcare.domain.quantities import parse_dial
from fleetcare.drafts.entry_parts import FLAGS, GALLON, TAGGED, TEXTS, VOLUMES, Part, Piece
from fleetcare.drafts.entry_vocabulary import ItemWords, Names, Vocabulary
from fleetcare.drafts.entry_words import JOIN, Word
from fleetcare.errors import FleetError

_MOST_WAYS = 100
_WHOSE = "which engine or machine?"
_AND_WHICH = "and which task?"
_MANY = {Part.FIGURE, Part.JOIN, Part.UNKNOWN, *FLAGS.values()}
"""Parts of which a line may have several, or whose number is asked about elsewhere."""
_AFTER = {
    "by": "by whom?",
    "on": "on which day?",
    "at": "at which figure?",
    "task": "which task?",
    "top": "how much was topped up, such as top-up 2L?",
    **dict.fromkeys(TAGGED, _WHOSE),
    **dict.fromkeys(TEXTS, "what should it say?"),
    **dict.fromkeys(VOLUMES, "how much, such as 8L?"),
    **{name.partition("-")[0]: f"{name}?" for name in FLAGS if "-" in name},
}
"""What is asked after a word that says what follows, where nothing fitting does."""


@dataclass(frozen=True, slots=True)
class Choice:
    """One answer to a question: what it says, and the text that then stands in place of the words asked about.

    The text is None where the answer takes more than a line can say; it then leads to a form for a "sheet" or a "meter".
    """

    said: str
    text: str | None
    leads_to: str = ""


@dataclass(frozen=True, slots=True)
class Question:
    """What is not clear, from where to where in the line, and answers there may be; others can be typed.

    Where it is about nothing that was typed it stands at the end of the line.
    """

    start: int
    end: int
    asked: str
    choices: tuple[Choice, ...] = ()


def different_ways(pieces: Sequence[Piece]) -> list[tuple[Piece, ...]]:
    """Give the ways to take the same words that do not come to the same, the simplest first."""
    if len(pieces) == 1:
        return [tuple(pieces)]
    first, end = min(piece.first for piece in pieces), max(piece.end for piece in pieces)
    known = [piece for piece in pieces if piece.part is not Part.UNKNOWN]
    ways: dict[frozenset[str], tuple[Piece, ...]] = {}
    for way in islice(_ways(known, first, end), _MOST_WAYS):
        ways.setdefault(frozenset(_say_as(piece) for piece in way), way)
    return sorted(ways.values(), key=len)


def _ways(pieces: Sequence[Piece], at: int, end: int) -> Iterator[tuple[Piece, ...]]:
    """Give the ways in which pieces lie side by side between two words."""
    if at == end:
        yield ()
    for piece in pieces:
        if piece.first == at:
            for rest in _ways(pieces, piece.end, end):
                yield (piece, *rest)


def ask_which(text: str, words: Sequence[Word], pieces: Sequence[Piece], ways: Sequence[tuple[Piece, ...]]) -> Question:
    """Ask what the words of some pieces are that can be taken in several ways."""
    is_one_part = len({piece.part for way in ways for piece in way}) == 1
    choices = []
    for way in ways:
        said = [piece.said if is_one_part else _say_as(piece) for piece in way]
        choices.append(Choice(" and ".join(said), " ".join(piece.typed for piece in way)))
    start, end = words[pieces[0].first].start, words[max(piece.end for piece in pieces) - 1].end
    asked = ", ".join(choice.said for choice in choices) or "what is it"
    return Question(start, end, f"{text[start:end]}: {asked}?", tuple(choices))


def _say_as(piece: Piece) -> str:
    """Say a piece with what it is taken as."""
    return f"{piece.part} {piece.name}" if piece.part in {Part.TAG, Part.TASK} else piece.said


def ask_whose(words: Sequence[Word], pieces: Sequence[Piece], vocabulary: Vocabulary) -> Question:
    """Ask for the engine or machine, with tags that are like a word that was not understood."""
    unknown = [words[piece.first] for piece in pieces if piece.part is Part.UNKNOWN and words[piece.first].key]
    if not unknown:
        end = words[-1].end if words else 0
        return Question(end, end, _WHOSE)
    word = next((word for word in unknown if vocabulary.near(word.text)), unknown[0])
    choices = tuple(Choice(tag, Piece(0, 0, Part.TAG, tag).typed) for tag in vocabulary.near(word.text))
    return Question(word.start, word.end, f"{word.text}: {_WHOSE}", choices)


def ask_about_unknown(
    words: Sequence[Word], pieces: Sequence[Piece], item: ItemWords, vocabulary: Vocabulary
) -> list[Question]:
    """Ask about each word that is nothing known, but of a word and what it announces, a number and its unit once."""
    unknown = [piece.first for piece in pieces if piece.part is Part.UNKNOWN]

    def is_said_by_next(at: int) -> bool:
        is_number = words[at].key[:1].isdecimal() and words[at + 1].key == GALLON
        return is_number or words[at].key in _AFTER

    return [
        _ask_about(words[at], item, vocabulary) for at in unknown if not (at + 1 in unknown and is_said_by_next(at))
    ]


def _ask_about(word: Word, item: ItemWords, vocabulary: Vocabulary) -> Question:
    """Say why a word cannot be what it looks like, else offer what it is like, a new name, or a note."""
    if word.is_quoted:
        return Question(word.start, word.end, "there is nothing between the quotes")
    if word.key in _AFTER:
        return Question(word.start, word.end, f"{word.text}: {_AFTER[word.key]}")
    if word.key.endswith(GALLON) and word.key.removesuffix(GALLON).strip("0123456789.") == "":
        return _ask_which_gallon(word)
    if word.text[0].isdecimal():
        return Question(word.start, word.end, _say_misread(word))
    near = [
        *(Piece(0, 0, Part.TASK, name) for name in Names(item.tasks).near(word.text)),
        *(Piece(0, 0, Part.PERSON, name) for name in vocabulary.people.near(word.text)),
        *(Piece(0, 0, Part.TAG, tag) for tag in vocabulary.near(word.text)),
    ]
    choices = [Choice(_say_as(piece), piece.typed) for piece in near]
    name, note = Piece(0, 0, Part.PERSON, word.text), Piece(0, 0, Part.NOTE, word.text)
    choices += [Choice(f"{name.said}, a new name", name.typed), Choice(note.said, note.typed)]
    return Question(word.start, word.end, f"{word.text}: what is it?", tuple(choices))


def _ask_which_gallon(word: Word) -> Question:
    number = word.key.removesuffix(GALLON)
    choices = tuple(Choice(f"{number} {gallon}".strip(), f"{number}{gallon}") for gallon in ("galus", "galimp"))
    return Question(word.start, word.end, f"{word.text}: which gallon?", choices)


def _say_misread(word: Word) -> str:
    """Say why a word that begins with a digit is no day and no figure."""
    try:
        (parse_day if word.key.count("-") == 2 else parse_dial)(word.key)
    except FleetError as error:
        return str(error)
    return f"{word.text}: what is it?"


def ask_about_doubles(text: str, words: Sequence[Word], pieces: Sequence[Piece]) -> list[Question]:
    """Ask about what a line has twice though it can have it once, and about tasks that are not joined."""
    found = []
    before: dict[str, Piece] = {}
    last = Part.UNKNOWN
    for piece in pieces:
        start, end = words[piece.first].start, words[piece.end - 1].end
        typed = text[start:end]
        is_double = piece.slot in before and piece.part not in _MANY
        if piece.part is Part.JOIN and Part.TASK not in before:
            found.append(Question(start, end, f"{JOIN} stands between two tasks"))
        elif last is Part.JOIN and piece.part is not Part.TASK:
            found.append(Question(start, start, _AND_WHICH))
        elif piece.part is Part.TASK and is_double and last is not Part.JOIN:
            asked = f"{typed}: {before[piece.slot].name} and {piece.name}, both?"
            found.append(Question(start, end, asked, (Choice("both", f"{JOIN} {typed}"),)))
        elif piece.part is not Part.TASK and is_double:
            found.append(Question(start, end, f"{typed}: {before[piece.slot].said}, or {piece.said}? Keep one"))
        before.setdefault(piece.slot, piece)
        last = piece.part
    if last is Part.JOIN:
        found.append(Question(words[-1].end, words[-1].end, _AND_WHICH))
    return found
