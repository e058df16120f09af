"""What the laboratory finds in the oil of the demo fleet: invented figures of a sound engine, and what a fault adds.

Each figure of a sound engine takes five steps in a shuffled order, over and over, so that no sample is odd by chance. An
oil that is followed through its fill gains and loses by the hour instead, and what is topped up thins it.
"""

from collections.abc import Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from decimal import Decimal
from itertools import pairwise
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

_GAINS = {
    "Fe": "8",
    "Cr": "0.4",
    "Al": "0.8",
    "Cu": "1.5",
    "Pb": "0.6",
    "Sn": "0.3",
    "Si": "0.8",
    "Na": "0.5",
    "K": "0.2",
    "kv100": "-0.1",
    "soot": "0.15",
    "tbn": "-1.2",
}
"""What the oil of a sound engine gains in 100 h, in the unit it is reported in."""

_PPM = (0, "0.5")
_READ = {"kv100": (1, "0.05"), "soot": (1, "0.02"), "tbn": (1, "0.05")}
"""To how many decimals a figure of a followed oil is read, and the size of a step it is off by."""

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


@dataclass(frozen=True, slots=True)
class Followed:
    """How the newest `fills` of oil of an engine were followed: a sample every so many hours on it.

    `gains` are what comes per 100 h of some figures, below 0 what is used up; the rest is that of a sound engine. At each
    of the hours `topped_up` so many litres went in: with `is_stated` the sheets say so, else the log alone.
    """

    every: int
    fills: int = 1
    gains: Mapping[str, str] = field(default_factory=dict)
    topped_up: tuple[int, ...] = ()
    litres: str = "0.5"
    is_stated: bool = True


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
        cells = _cells(said)
        if sampled.is_first and place == 0:
            cells += [{"quantity": name, "phase": "new", "value": text} for name, text in NEW_OIL.items()]
        yield _report(cells)


def fill_samples(tag: str, followed: Followed, sump: Decimal, hours: Sequence[Decimal]) -> Iterator[SheetIn]:
    """Give the report on each sample of one fill, oldest first; `hours` are those on the oil then, `sump` is in L."""
    gains = {**_GAINS, **followed.gains}
    share = Decimal(followed.litres) / sump
    for place, on_oil in enumerate(hours):
        added = [at for at in followed.topped_up if at < on_oil]
        said = {"hours_on_oil": f"{on_oil:f}", "tbn_method": "perchloric", **_BELOW}
        if followed.is_stated:
            said["top_up"] = f"{len(added) * Decimal(followed.litres):f}"
        for name, gain in gains.items():
            places, feel = _READ.get(name, _PPM)
            held = _held(Decimal(NEW_OIL.get(name, "0")), Decimal(gain) / 100, share, (*added, on_oil))
            read = held + Decimal(feel) * (_step(tag, name, place) - _STEPS // 2)
            said[name] = f"{max(read, Decimal(0)):.{places}f}"
        yield _report(_cells(said))


def _held(new: Decimal, gain: Decimal, share: Decimal, times: Sequence[Decimal | int]) -> Decimal:
    """Give what an oil holds at the last of some hours, gaining so much an hour; at each before, new oil took a share."""
    held = new
    for then, now in pairwise((0, *times)):
        held += gain * (now - then)
        if now is not times[-1]:
            held += (new - held) * share
    return held


def _cells(said: Mapping[str, str]) -> list[dict[str, str]]:
    return [{"quantity": name, "value": text} for name, text in said.items()]


def _report(cells: Iterable[dict[str, str]]) -> SheetIn:
    return SheetIn(tuple(SheetRow(number, row) for number, row in enumerate(cells, start=2)))


def _sound(tag: str, name: str, place: int, least: str, step: str) -> Decimal:
    return Decimal(least) + Decimal(step) * _step(tag, name, place)


def _step(tag: str, name: str, place: int) -> int:
    lap, turn = divmod(place, _STEPS)
    return Random(f"{tag} {name} {lap}").sample(range(_STEPS), _STEPS)[turn]
