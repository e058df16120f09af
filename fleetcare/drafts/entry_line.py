"""One typed line becomes what somebody wants written down, or the questions that are open before it can be."""

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from datetime import date

from fleetcare.drafts.entry_choose import choose
from fleetcare.drafts.entry_figures import Figures, settle_figures
from fleetcare.drafts.entry_parts import WHAT, Part, Piece, pieces, tag_pieces
from fleetcare.drafts.entry_questions import (
    Choice,
    Question,
    ask_about_doubles,
    ask_about_unknown,
    ask_which,
    ask_whose,
)
from fleetcare.drafts.entry_understood import Taken, Understood
from fleetcare.drafts.entry_vocabulary import ItemWords, Vocabulary
from fleetcare.drafts.entry_words import Word, split_words

_CANNOT_BE_KEPT = re.compile("[\ud800-\udfff]")  # half a character: no file can hold it


@dataclass(frozen=True, slots=True)
class _Reading:
    """One way to take the whole line: whose it is, where that is clear, how much it leaves open, and its pieces."""

    item: ItemWords | None
    cost: int
    pieces: tuple[Piece, ...]


def understand(text: str, vocabulary: Vocabulary) -> Understood:
    """Take a line apart. What can be two things, or nothing, is asked about and never guessed."""
    words = split_words(text)
    readings = _readings(text, words, vocabulary)
    least = min(reading.cost for reading in readings)
    best = [reading for reading in readings if reading.cost == least]
    found = sorted({piece for reading in best for piece in reading.pieces}, key=lambda piece: (piece.first, piece.said))
    groups = list(_groups(found))
    questions = [ask_which(text, words, group) for group in groups if len(group) > 1]
    settled = [group[0] for group in groups if len(group) == 1]
    if not any(piece.part is Part.TAG for piece in found):
        questions.append(ask_whose(words, found, vocabulary))
    line = _Line(text, words, found, settled, vocabulary)
    questions += line.general_questions()
    items = {reading.item.tag: reading.item for reading in best if reading.item is not None}
    figures = Figures()
    if len(items) == 1:
        (item,) = items.values()
        figures = line.figures(item)
        questions += [*ask_about_unknown(words, settled, item, vocabulary), *figures.questions]
        questions += [] if questions else line.last_questions(figures, item)
    return line.understood(figures, sorted(questions, key=lambda question: question.start))


def _readings(text: str, words: Sequence[Word], vocabulary: Vocabulary) -> list[_Reading]:
    """Read the line once for each of its words that can be a tag; as nobody's where none can."""
    tags = tag_pieces(words, vocabulary)
    readings = []
    for span in sorted({(tag.first, tag.end) for tag in tags}):
        names = {tag.name for tag in tags if (tag.first, tag.end) == span}
        item = vocabulary.item(min(names)) if len(names) == 1 else None
        known = [replace(tag, is_firm=tag.is_firm or (tag.first, tag.end) == span) for tag in tags]
        cost, chosen = choose(len(words), [*known, *pieces(text, words, vocabulary, item)])
        has_tag = any(piece.part is Part.TAG for piece in chosen)
        found = tuple(replace(piece, is_firm=False) for piece in chosen)
        readings.append(_Reading(item if has_tag else None, cost, found))
    if not readings:
        cost, chosen = choose(len(words), pieces(text, words, vocabulary, None))
        readings.append(_Reading(None, cost, tuple(chosen)))
    return readings


def _groups(found: Sequence[Piece]) -> Iterator[list[Piece]]:
    """Put pieces that lie over each other together."""
    group: list[Piece] = []
    for piece in found:
        if group and piece.first >= max(one.end for one in group):
            yield group
            group = []
        group.append(piece)
    if group:
        yield group


@dataclass(frozen=True, slots=True)
class _Line:
    """A line with the pieces it may be made of, and those that are clear."""

    text: str
    words: Sequence[Word]
    found: Sequence[Piece]
    settled: Sequence[Piece]
    vocabulary: Vocabulary

    @property
    def day(self) -> date:
        """The day it tells of."""
        return next((piece.day for piece in self.settled if piece.day is not None), self.vocabulary.on)

    def has(self, *parts: Part) -> bool:
        """Tell whether any of some parts may be in it."""
        return any(piece.part in parts for piece in self.found)

    def names(self, part: Part) -> list[str]:
        """Give the names that are clear of a part, each once."""
        return list(dict.fromkeys(piece.name for piece in self.settled if piece.part is part))

    def figures(self, item: ItemWords) -> Figures:
        """Settle what the figures of an item are."""
        has_work = self.has(Part.TASK, Part.DEFECT, Part.REPAIR)
        return settle_figures(self.words, self.settled, item, self.day, has_work=has_work)

    def general_questions(self) -> Iterator[Question]:
        """Ask about what is wrong whoever it is about."""
        yield from ask_about_doubles(self.text, self.words, self.settled)
        if self.day > self.vocabulary.on:
            yield self._ask(Part.DAY, f"{self.day} has not come yet")
        unkept = _CANNOT_BE_KEPT.search(self.text)
        if unkept is not None:
            yield Question(*unkept.span(), "this character cannot be kept, leave it out")
        for word in self.words:
            if not word.is_closed:
                yield Question(word.start, word.end, "where does the quoted text end?")

    def last_questions(self, figures: Figures, item: ItemWords) -> Iterator[Question]:
        """Ask about what is wanting in a line of which every word is clear."""
        if not self.has(*WHAT):
            tasks = [Piece(0, 0, Part.TASK, name) for name in item.tasks]
            choices = tuple(Choice(task.name, f" {task.typed}") for task in tasks)
            yield Question(len(self.text), len(self.text), "what was done, or what does the dial show?", choices)
        if self.has(Part.SURE) and not figures.dials:
            yield self._ask(Part.SURE, "sure of which figure?")
        if self.has(Part.ROLLED_OVER) and len(figures.dials) != 1:
            yield self._ask(Part.ROLLED_OVER, "which figure rolled over?")
        if self.has(Part.ROLLED_OVER) and self.has(Part.SURE):
            yield self._ask(Part.ROLLED_OVER, "sure, or rolled over? Keep one")
        if self.has(Part.PART_DONE) and not self.has(Part.TASK):
            yield self._ask(Part.PART_DONE, "which task was done in part?")

    def _ask(self, part: Part, asked: str) -> Question:
        piece = next(piece for piece in self.found if piece.part is part)
        return Question(self.words[piece.first].start, self.words[piece.end - 1].end, asked)

    def understood(self, figures: Figures, questions: Sequence[Question]) -> Understood:
        """Give what is clear, and what is asked."""
        persons = [piece for piece in self.settled if piece.part is Part.PERSON]

        def text_of(part: Part) -> str:
            return next(iter(self.names(part)), "")

        return Understood(
            text=self.text,
            on=self.day,
            taken=tuple(self._taken(piece) for piece in self.settled if piece.part is not Part.UNKNOWN),
            questions=tuple(questions),
            tag=text_of(Part.TAG),
            tasks=tuple(self.names(Part.TASK)),
            dials=figures.dials,
            filled=figures.filled,
            top_up=figures.top_up,
            by=persons[0].name if persons else "",
            is_new_name=bool(persons and persons[0].is_new),
            note=text_of(Part.NOTE),
            defect=text_of(Part.DEFECT),
            repair=text_of(Part.REPAIR),
            is_sure=self.has(Part.SURE),
            has_rolled_over=self.has(Part.ROLLED_OVER),
            is_part_done=self.has(Part.PART_DONE),
        )

    def _taken(self, piece: Piece) -> Taken:
        return Taken(self.words[piece.first].start, self.words[piece.end - 1].end, piece.part, piece.said)
