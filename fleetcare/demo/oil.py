"""What the laboratory finds in the oil of the demo fleet: invented figures of a sound engine, and what a fault adds.

Each figure of a sound engine takes five steps in a shuffled order, over and over, so that no sample is odd by chance.
"""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from decimal import Decimal
from random import Random

from fleetcare.drafts.sheets import SheetIn, SheetRow

_ELEMENTS = {
    "Fe": ("20", "3"),
    "Cr": ("1", "1"),
    "Al": ("3", "1"),
    "Cu": ("5", "2"),
    "Pb": ("2", "1"),
    "Sn": ("1", "1"),
    "Si": ("6", "1"),
    "Na": ("4", "1"),
    "K": ("1", "1"),
}
"""The least of each, and the size of a step, in ppm."""

_CONDITION = {"kv100": ("13.8", "0.1"), "tbn": ("7.6", "0.1"), "soot": ("0.3", "0.1")}
_BELOW = {"water": "<0.05", "fuel": "<1"}
_STEPS = 5
_WHOLE = 3
"""The newest samples were reported whole, older ones with their elements alone."""

NEW_OIL = {"kv100": "14.4", "tbn": "10.5", "Si": "4", "Na": "3", "K": "1", "Al": "1"}


@dataclass(frozen=True, slots=True)
class Sampled:
    """How the oil of an engine was sampled: on every so many rounds.

    `rises` is what a fault adds to the newest samples, `found` what they say instead, each up to the newest. With
    `is_first` the laboratory had new oil of the grade beside the first sample.
    """

    every: int = 2
    rises: Mapping[str, tuple[str, ...]] = field(default_factory=dict)
    found: Mapping[str, tuple[str, ...]] = field(default_factory=dict)
    is_first: bool = False


def samples(tag: str, sampled: Sampled, hours: list[Decimal | None]) -> Iterator[SheetIn]:
    """Give the report on each sample, oldest first; `hours` are those on the oil then, as far as anybody counts them."""
    for place, on_oil in enumerate(hours):
        left = len(hours) - place
        figures = {name: _sound(tag, name, place, *usual) for name, usual in _ELEMENTS.items()}
        if left <= _WHOLE:
            figures |= {name: _sound(tag, name, place, *usual) for name, usual in _CONDITION.items()}
        for name, rises in sampled.rises.items():
            if left <= len(rises):
                figures[name] += Decimal(rises[-left])
        said = {name: f"{figure:f}" for name, figure in figures.items()}
        said |= _BELOW if left <= _WHOLE else {}
        said |= {name: texts[-left] for name, texts in sampled.found.items() if left <= len(texts)}
        if left <= _WHOLE:
            said |= {"tbn_method": "perchloric"} | ({"hours_on_oil": f"{on_oil:f}"} if on_oil is not None else {})
        cells = [{"quantity": name, "value": text} for name, text in said.items()]
        if sampled.is_first and place == 0:
            cells += [{"quantity": name, "phase": "new", "value": text} for name, text in NEW_OIL.items()]
        yield SheetIn(tuple(SheetRow(number, row) for number, row in enumerate(cells, start=2)))


def _sound(tag: str, name: str, place: int, least: str, step: str) -> Decimal:
    lap, turn = divmod(place, _STEPS)
    steps = Random(f"{tag} {name} {lap}").sample(range(_STEPS), _STEPS)
    return Decimal(least) + Decimal(step) * steps[turn]
