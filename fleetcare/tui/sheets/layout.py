"""Where the cells of a sheet stand on the screen: as the engine stands where there is room, and all of them always.

A `Matrix` has a column for each cylinder and a row for each point of it, in both a cell for each phase. Where the phases
do not fit side by side they stand below each other, and where not all columns fit the rest follow below.
"""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace

from fleetcare.domain.sheets import CellKey
from fleetcare.tui.widgets.text import columns_of, fit

_EDGE = 1  # before each cell, for the cursor
_MARK = 1  # behind each cell, for where its value lies
_BETWEEN = 2  # columns of a listing
_NO_CRANK = 20  # columns below which no crank is drawn between banks


@dataclass(frozen=True, slots=True)
class Shown:
    """What a cell shows when the cursor is elsewhere: the value as read, a mark for where it lies, and a tone."""

    words: str
    mark: str = " "
    tone: str = ""


@dataclass(frozen=True, slots=True)
class MatrixRow:
    """A label, and for each column the cells of its phases."""

    label: str
    cells: tuple[tuple[CellKey, ...], ...]


@dataclass(frozen=True, slots=True)
class Matrix:
    """Cells as they stand on an engine: `heads` name the columns, `phases` the cells side by side in each."""

    heads: tuple[str, ...]
    phases: tuple[str, ...]
    rows: tuple[MatrixRow, ...]


@dataclass(frozen=True, slots=True)
class Flow:
    """Labelled cells one after the other, each of a width of its own."""

    items: tuple[tuple[str, CellKey, int], ...]


@dataclass(frozen=True, slots=True)
class Listing:
    """Labelled cells below each other, in as many columns as there is room for; `phases` head the cells of each."""

    phases: tuple[str, ...]
    items: tuple[tuple[str, tuple[CellKey, ...]], ...]


Blocks = Sequence["Matrix | Flow | Listing"]


@dataclass(frozen=True, slots=True)
class Text:
    """Words at a column of a line, in a tone."""

    at: int
    words: str
    tone: str = ""


@dataclass(frozen=True, slots=True)
class Place:
    """A cell at a column of a line, so many columns wide without its edge and mark."""

    at: int
    key: CellKey
    width: int


@dataclass(frozen=True, slots=True)
class Laid:
    """Lines of words and cells, and on which line each cell stands."""

    lines: tuple[tuple[Text | Place, ...], ...]
    line_of: Mapping[CellKey, int] = field(default_factory=dict)

    def place(self, key: CellKey) -> Place:
        """Give the place of a cell."""
        return next(part for part in self.lines[self.line_of[key]] if isinstance(part, Place) and part.key == key)

    def beside(self, key: CellKey, step: int) -> CellKey:
        """Give the cell before or after one as one reads."""
        keys = [part.key for line in self.lines for part in line if isinstance(part, Place)]
        return keys[min(max(keys.index(key) + step, 0), len(keys) - 1)]

    def beyond(self, key: CellKey, step: int) -> CellKey:
        """Give the cell above or below one, the nearest of that line; itself where there is none."""
        at, number = self.place(key).at, self.line_of[key] + step
        while 0 <= number < len(self.lines):
            places = [part for part in self.lines[number] if isinstance(part, Place)]
            if places:
                return min(places, key=lambda place: abs(place.at - at)).key
            number += step
        return key


def lay_out(blocks: Blocks, width: int, height: int, digits: int, lasts: Mapping[CellKey, str]) -> Laid:
    """Lay out blocks below each other; `digits` is how wide a value is, `lasts` what cells showed last.

    What was last stands below its row where that leaves all lines in sight.
    """
    laid = _lay(blocks, width, digits, lasts)
    if len(laid.lines) > height and lasts:
        laid = _lay(blocks, width, digits, {})
    return laid


def _lay(blocks: Blocks, width: int, digits: int, lasts: Mapping[CellKey, str]) -> Laid:
    lines: list[tuple[Text | Place, ...]] = []
    before: Matrix | Flow | Listing | None = None
    for block in blocks:
        if isinstance(block, Matrix) and isinstance(before, Matrix):
            lines.append((_crank(block, width, digits),))
        elif before is not None:
            lines.append(())
        if isinstance(block, Matrix):
            lines += _matrix(block, width, digits, lasts)
        else:
            lines += _flow(block, width) if isinstance(block, Flow) else _listing(block, width, digits, lasts)
        before = block
    line_of = {part.key: number for number, line in enumerate(lines) for part in line if isinstance(part, Place)}
    return Laid(tuple(lines), line_of)


def _matrix(block: Matrix, width: int, digits: int, lasts: Mapping[CellKey, str]) -> Iterator[tuple[Text | Place, ...]]:
    cell = _EDGE + digits + _MARK
    label = _label_width(block)
    if len(block.heads) * len(block.phases) * cell + label > width and len(block.phases) > 1:
        block = _stacked(block)
        label = _label_width(block)
    column = cell * len(block.phases)
    room = max((width - label) // column, 1)
    for first in range(0, len(block.heads), room):
        yield from _columns(block, range(first, min(first + room, len(block.heads))), label, column, cell, lasts)


def _columns(
    block: Matrix, numbers: range, label: int, column: int, cell: int, lasts: Mapping[CellKey, str]
) -> Iterator[tuple[Text | Place, ...]]:
    """Lay out some columns of a block: their heads, then row by row."""
    starts = [(number, label + place * column) for place, number in enumerate(numbers)]
    yield tuple(Text(at + _EDGE, block.heads[number].center(column - _EDGE - _MARK), "strong") for number, at in starts)
    if len(block.phases) > 1:
        yield tuple(
            Text(at + place * cell + _EDGE, fit(phase, cell - _EDGE), "quiet")
            for _, at in starts
            for place, phase in enumerate(block.phases)
        )
    for row in block.rows:
        cells = [
            Place(at + place * cell, key, cell - _EDGE - _MARK)
            for number, at in starts
            for place, key in enumerate(row.cells[number])
        ]
        yield (Text(1, row.label, "strong"), *cells)
        told = [Text(one.at + _EDGE, fit(lasts[one.key], one.width), "quiet") for one in cells if one.key in lasts]
        if told:
            yield (Text(1, fit("last", label - 1).rstrip(), "quiet"), *told)


def _stacked(block: Matrix) -> Matrix:
    """Give the block with the phases of each row below each other."""
    rows = [
        MatrixRow(f"{row.label} {phase}", tuple((group[place],) for group in row.cells))
        for row in block.rows
        for place, phase in enumerate(block.phases)
    ]
    return replace(block, phases=block.phases[:1], rows=tuple(rows))


def _flow(block: Flow, width: int) -> Iterator[tuple[Text | Place, ...]]:
    line: list[Text | Place] = []
    at = 1
    for label, key, wide in block.items:
        needs = columns_of(label) + _EDGE + wide + _MARK + 1
        if line and at + needs > width:
            yield tuple(line)
            line, at = [], 1
        line += [Text(at, label, "quiet"), Place(at + columns_of(label), key, wide)]
        at += needs + 1
    yield tuple(line)


def _listing(
    block: Listing, width: int, digits: int, lasts: Mapping[CellKey, str]
) -> Iterator[tuple[Text | Place, ...]]:
    """Lay out labelled cells column by column; a cell with a last value has it behind."""
    cell = _EDGE + digits + _MARK
    label = max(columns_of(name) for name, _ in block.items) + 1
    last = digits + 1 if lasts else 0
    column = label + cell * len(block.phases) + last + _BETWEEN
    count = max(min((width - 1 + _BETWEEN) // column, len(block.items)), 1)
    rows = -(-len(block.items) // count)
    starts = [1 + number * column for number in range(count)]
    heads = [*block.phases, *(["last"] if last else [])]
    if any(heads):
        yield tuple(
            Text(start + label + place * cell + _EDGE, fit(head, cell - _EDGE), "quiet")
            for start in starts
            for place, head in enumerate(heads)
        )
    for row in range(rows):
        line: list[Text | Place] = []
        for start, (name, keys) in zip(starts, block.items[row::rows], strict=False):
            at = start + label
            line += [Text(start, name, ""), *(Place(at + n * cell, key, digits) for n, key in enumerate(keys))]
            if last and keys[0] in lasts:
                line.append(Text(at + len(keys) * cell + _EDGE, fit(lasts[keys[0]], digits), "quiet"))
        yield tuple(line)


def _label_width(block: Matrix) -> int:
    return max(columns_of(label) for label in ("last", *(row.label for row in block.rows))) + 2


def _crank(block: Matrix, width: int, digits: int) -> Text:
    """Draw the crank between two banks."""
    cell = (_EDGE + digits + _MARK) * len(block.phases)
    wide = min(max(len(block.heads) * cell, _NO_CRANK), width - _label_width(block))
    return Text(_label_width(block), " crank ".center(wide, "─"), "quiet")
