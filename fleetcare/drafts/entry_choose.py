"""Take a line whole: of all ways to lay its pieces side by side, those that leave the least open."""

from collections.abc import Sequence
from dataclasses import dataclass, field, replace

from fleetcare.drafts.entry_parts import FLAGS, TEXTS, WHAT, Part, Piece


@dataclass(frozen=True, slots=True)
class _Laid:
    """What matters of the pieces laid so far: the slots they fill, whether they say anything, and what the last is."""

    filled: frozenset[str] = frozenset()
    says_something: bool = False
    last: Part = Part.UNKNOWN


@dataclass(slots=True)
class _Way:
    """The least left open on the way here, and the last pieces of all ways that leave no more."""

    cost: int
    steps: list[tuple[int, _Laid, Piece]] = field(default_factory=list)


def choose(count: int, pieces: Sequence[Piece]) -> tuple[int, list[Piece]]:
    """Give how much is left open at least when all `count` words are taken, and every piece of a way that leaves so little.

    A word that can be nothing is left open, and so is a second piece where a line has one, and a line that names
    nobody or says nothing.
    """
    starting: dict[int, list[Piece]] = {}
    for piece in _with_unknown(count, _without_doubtful(pieces)):
        starting.setdefault(piece.first, []).append(piece)
    ways: list[dict[_Laid, _Way]] = [{} for _ in range(count + 1)]
    ways[0][_Laid()] = _Way(0)
    for at in range(count):
        for laid, way in ways[at].items():
            for piece in starting.get(at, ()):
                cost, after = _lay(laid, piece)
                there, spent = ways[piece.end].get(after), way.cost + cost
                if there is None or spent < there.cost:
                    ways[piece.end][after] = _Way(spent, [(at, laid, piece)])
                elif spent == there.cost:
                    there.steps.append((at, laid, piece))
    ends = {laid: way.cost + _left_open(laid) for laid, way in ways[count].items()}
    least = min(ends.values())
    return least, _walk_back(ways, count, [laid for laid, cost in ends.items() if cost == least])


def _without_doubtful(pieces: Sequence[Piece]) -> list[Piece]:
    """Leave out what a firm piece says is something else; a text to the end of the line holds what it holds."""
    firm = [piece for piece in pieces if piece.is_firm]

    def is_overruled(piece: Piece) -> bool:
        if piece.is_firm:
            return any(one.first <= piece.first and piece.end <= one.end and one.size > piece.size for one in firm)
        end = piece.first + 1 if piece.part in TEXTS.values() else piece.end
        return any(one.first < end and piece.first < one.end for one in firm)

    return [piece for piece in pieces if not is_overruled(piece)]


def _with_unknown(count: int, pieces: Sequence[Piece]) -> list[Piece]:
    """Add, for each word that can be nothing by itself, that it may not be understood."""
    known = {piece.first for piece in pieces if piece.end == piece.first + 1}
    return [*pieces, *(Piece(at, at + 1, Part.UNKNOWN) for at in range(count) if at not in known)]


def _lay(laid: _Laid, piece: Piece) -> tuple[int, _Laid]:
    """Lay a piece after others, and give what that leaves open."""
    is_joined = piece.part is Part.TASK and laid.last is Part.JOIN
    after = replace(laid, last=piece.part)
    cost = int(laid.last is Part.JOIN and not is_joined)
    if piece.part is Part.UNKNOWN:
        return cost + 1, after
    if piece.part is Part.JOIN:
        return cost + int(Part.TASK not in laid.filled), after
    is_double = piece.slot in laid.filled and not is_joined and piece.part not in FLAGS.values()
    says_something = laid.says_something or piece.part in WHAT
    return cost + int(is_double), _Laid(laid.filled | {piece.slot}, says_something, piece.part)


def _left_open(laid: _Laid) -> int:
    """Give what is left open once all is laid: whose it is, that it says nothing, or that a task should follow."""
    return (Part.TAG not in laid.filled) + (not laid.says_something) + (laid.last is Part.JOIN)


def _walk_back(ways: Sequence[dict[_Laid, _Way]], at: int, ends: Sequence[_Laid]) -> list[Piece]:
    """Give every piece on the ways that lead to some ends, in the order of the line."""
    waiting, seen = [(at, laid) for laid in ends], set()
    found: dict[Piece, None] = {}
    while waiting:
        here = waiting.pop()
        if here in seen:
            continue
        seen.add(here)
        for before, laid, piece in ways[here[0]][here[1]].steps:
            found[piece] = None
            waiting.append((before, laid))
    return sorted(found, key=lambda piece: (piece.first, piece.end))
