"""The figures of an entry line: which meter shows each, and what a volume beside the work is."""

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date

from fleetcare.domain.quantities import Figure, Kind
from fleetcare.drafts.entry_parts import Part, Piece, typed_figure
from fleetcare.drafts.entry_questions import Choice, Question
from fleetcare.drafts.entry_vocabulary import ItemWords, MeterWords
from fleetcare.drafts.entry_words import Word


@dataclass(frozen=True, slots=True)
class DialFigure:
    """What a dial shows, in its meter's unit if none was typed, and from where to where in the line it stands."""

    figure: Figure
    start: int
    end: int


@dataclass(frozen=True, slots=True)
class Figures:
    """The figures of a line: those on a dial, and volumes of oil."""

    dials: tuple[DialFigure, ...] = ()
    filled: Figure | None = None
    top_up: Figure | None = None
    questions: tuple[Question, ...] = ()


def settle_figures(
    words: Sequence[Word], pieces: Sequence[Piece], item: ItemWords, day: date, *, has_work: bool
) -> Figures:
    """Give each figure to a meter that counts on a day, or ask.

    A bare number is what the only meter shows. A volume is what a fuel meter shows, or was filled in along with the
    work; where it can be both that is asked. It is a top-up only where the line says so.
    """
    meters = [meter for meter in item.meters if meter.counts_on(day)]
    dials: dict[Kind, DialFigure] = {}
    volumes: dict[Part, Figure] = {}
    questions: list[Question] = []
    for piece in pieces:
        if piece.figure is None:
            continue
        start, end = words[piece.first].start, words[piece.end - 1].end
        found = _place(piece, piece.figure, item.tag, meters, has_work)
        if isinstance(found, MeterWords):
            figure = Figure(piece.figure.value, piece.figure.unit or found.unit)
            if found.kind in dials:
                asked = f"{dials[found.kind].figure} or {figure}: what does the {found.kind} meter show? Keep one"
                questions.append(Question(start, end, asked))
            dials[found.kind] = DialFigure(figure, start, end)
        elif isinstance(found, Part):
            volumes[found] = piece.figure
        else:
            questions.append(Question(start, end, *found))
    return Figures(tuple(dials.values()), volumes.get(Part.FILLED), volumes.get(Part.TOP_UP), tuple(questions))


def _place(
    piece: Piece, figure: Figure, tag: str, meters: Sequence[MeterWords], has_work: bool
) -> MeterWords | Part | tuple[str, tuple[Choice, ...]]:
    """Give the meter a figure is read off, or what kind of volume it is, or what to ask."""
    fitting = [meter for meter in meters if figure.kind in {None, meter.kind}]
    typed = typed_figure(figure)
    if piece.part is Part.LITRES and fitting and has_work:
        choices = Choice(f"{figure} filled in", f"fill {typed}"), Choice(f"{figure} on the dial", f"at {typed}")
        return f"{typed}: {', '.join(choice.said for choice in choices)}?", choices
    if piece.part in {Part.FILLED, Part.TOP_UP} or (piece.part is Part.LITRES and not fitting):
        if figure.value == 0:
            return f"{typed} cannot be right; give a volume above 0", ()
        if piece.part is not Part.LITRES:
            return piece.part
        return (
            Part.FILLED if has_work else (f"{typed}: topped up?", (Choice(f"{figure} topped up", f"top-up {typed}"),))
        )
    if not fitting:
        return f"{typed}: no meter counts {figure.kind or 'anything'} of {tag} on that day", ()
    if len(fitting) > 1:
        shown = [Figure(figure.value, meter.unit) for meter in fitting]
        return f"{typed}: {', '.join(map(str, shown))}?", tuple(Choice(str(one), typed_figure(one)) for one in shown)
    return fitting[0]
