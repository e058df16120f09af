"""One typed line becomes what somebody wants written down, or the questions that are open before it can be."""

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from datetime import date

from fleetcare.drafts.entry_choose import choose
from fleetcare.drafts.entry_figures import Figures, settle_figures
from fleetcare.drafts.entry_parts import WHAT, Part, Piece
from fleetcare.drafts.entry_pieces import pieces, tag_pieces
from fleetcare.drafts.entry_questions import (
    Choice,
    Question,
    ask_about_doubles,
    ask_about_unknown,
    ask_which,
    ask_whose,
    different_ways,
)
from fleetcare.drafts.entry_understood import Taken, Understood
from fleetcare.drafts.entry_vocabulary import ItemWords, Vocabulary
from fleetcare.drafts.entry_words import Word, split_words

LONGEST = 500
"""Most characters of a line: more is no line but a text, and would take too long to be read with every key."""

_CANNOT_BE_KEPT = re.compile("[\ud800-\udfff]")  # half a character: no file can hold it


def understand(text: str, vocabulary: Vocabulary) -> Understood:
    """Take a line apart. What can be two things, or nothing, is asked about and never guessed."""
    if len(text) > LONGEST:
        asked = f"a line holds {LONGEST} characters, leave out what is over"
        return Understood(text, vocabulary.on, questions=(Question(LONGEST, len(text), asked),))
    words = split_words(text)
    groups = [(group, different_ways(group)) for group in _groups(_best_pieces(text, words, vocabulary))]
    settled = [piece for _, ways in groups if len(ways) == 1 for piece in ways[0]]
    possible = [piece for _, ways in groups for way in ways for piece in way]
    line = _Line(text, words, possible, settled, vocabulary)
    questions = [ask_which(text, words, group, ways) for group, ways in groups if len(ways) != 1]
    questions += line.general_questions()
    figures, tags = Figures(), line.names(Part.TAG)
    if len(tags) == 1:
        item = vocabulary.item(tags[0])
        figures = line.figures(item)
        questions += [*ask_about_unknown(words, settled, item, vocabulary), *figures.questions]
        questions += [] if questions else line.last_questions(figures, item)
    return line.understood(figures, sorted(questions, key=lambda question: question.start))


def _best_pieces(text: str, words: Sequence[Word], vocabulary: Vocabulary) -> list[Piece]:
    """Read the line once for each tag its words can be, and give the pieces of the best readings."""
    tags = tag_pieces(words, vocabulary)
    spans: dict[tuple[str, ...], tuple[int, int]] = {}
    for tag in tags:
        span = tag.first, tag.end
        spans.setdefault(tuple(one.name for one in tags if (one.first, one.end) == span), span)
    readings = [choose(len(words), pieces(text, words, vocabulary, None))] if not spans else []
    for names, span in spans.items():
        item = vocabulary.item(names[0]) if len(names) == 1 else None
        known = [replace(tag, is_firm=tag.is_firm or (tag.first, tag.end) == span) for tag in tags]
        readings.append(choose(len(words), [*known, *pieces(text, words, vocabulary, item)]))
    least = min(cost for cost, _ in readings)
    best = {replace(piece, is_firm=False) for cost, found in readings if cost == least for piece in found}
    return sorted(best, key=lambda piece: (piece.first, piece.end, piece.said))


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
    possible: Sequence[Piece]
    settled: Sequence[Piece]
    vocabulary: Vocabulary

    @property
    def day(self) -> date:
        """The day it tells of."""
        return next((piece.day for piece in self.settled if piece.day is not None), self.vocabulary.on)

    def has(self, *parts: Part) -> bool:
        """Tell whether any of some parts may be in it."""
        return any(piece.part in parts for piece in self.possible)

    def names(self, part: Part) -> list[str]:
        """Give the names that are clear of a part, each once."""
        return list(dict.fromkeys(piece.name for piece in self.settled if piece.part is part))

    def figures(self, item: ItemWords) -> Figures:
        """Settle what the figures of an item are."""
        has_work = self.has(Part.TASK, Part.DEFECT, Part.REPAIR)
        return settle_figures(self.words, self.settled, item, self.day, has_work=has_work)

    def general_questions(self) -> Iterator[Question]:
        """Ask about what is wrong whoever it is about."""
        if not self.has(Part.TAG):
            yield ask_whose(self.words, self.settled, self.vocabulary)
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
        piece = next(piece for piece in self.possible if piece.part is part)
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
