"""Dial figures and life totals: one counting thread through replaced, swapped and rolled-over meters.

A life total is the figure the item came with plus, over its fits, what each meter moved
(last - first, whole turns of the dial included) and what ran unmetered after it.
"""

from bisect import bisect_right
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date
from decimal import Decimal

from fleetcare.domain.meters import Counter, LifeFigure, LifeReading, Meter, MeterFit, Reading
from fleetcare.domain.quantities import from_base, to_base

_TENTH = Decimal("0.1")


@dataclass(frozen=True, slots=True)
class _Start:
    """Where a fit begins: its first figure with turns counted, and the life and metered totals there."""

    fit: MeterFit
    first: Decimal
    life: Decimal
    metered: Decimal


@dataclass(frozen=True, slots=True)
class CounterHistory:
    """A counter seen as life totals up to a day: accepted readings in order, and the fit now counting."""

    counter: Counter
    until: date
    readings: tuple[LifeReading, ...]
    starts: tuple[_Start, ...]
    turns: tuple[Reading, ...]

    @property
    def latest(self) -> LifeReading | None:
        """The latest accepted reading, or None."""
        return self.readings[-1] if self.readings else None

    @property
    def unit(self) -> str | None:
        """The unit of the meter now counting, or None where nothing has counted yet."""
        return self.starts[-1].fit.meter.unit if self.starts else None

    def life_at(self, dial: Decimal, on: date) -> Decimal | None:
        """Turn a dial figure of a day into a life total; None where no meter was counting on that day."""
        start = self._start_on(on)
        if start is None:
            return None
        return start.life + _moved(start, self.turns, dial, on)

    def life_of(self, meter_id: int, dial: Decimal, on: date) -> Decimal | None:
        """Turn what one meter showed on a day into a life total; None where it had not begun to count by then."""
        begun = [
            start
            for start in self.starts
            if start.fit.meter.id == meter_id and (start.fit.from_on is None or start.fit.from_on <= on)
        ]
        return begun[-1].life + _moved(begun[-1], self.turns, dial, on) if begun else None

    def metered_at(self, dial: Decimal, on: date) -> Decimal | None:
        """Like `life_at`, without what ran unmetered: what a meter can have gained between two readings."""
        start = self._start_on(on)
        if start is None:
            return None
        return start.metered + _moved(start, self.turns, dial, on)

    def dial_of(self, life: Decimal) -> Decimal | None:
        """Turn a life total into what the meter now counting shows there.

        None where that lies before this meter began, or where nothing counts.
        """
        start = self._start_on(self.until)
        if start is None:
            return None
        meter = start.fit.meter
        dial = start.first + from_base(life - start.life, meter.unit)
        if dial < start.first:
            return None
        return dial % meter.modulus if meter.modulus else dial

    def figure_on(self, on: date) -> LifeFigure | None:
        """Give the life total on a day: a reading of that day, else between its neighbours, marked approximate.

        After the last reading the last one holds, approximate; before the first there is none.
        """
        before = bisect_right(self.readings, on, key=lambda reading: reading.on)
        if not before:
            return None
        earlier = self.readings[before - 1]
        if earlier.on == on:
            return LifeFigure(earlier.life)
        if before == len(self.readings):
            return LifeFigure(earlier.life, approximate=True)
        later = self.readings[before]
        gained = (later.life - earlier.life) * (on - earlier.on).days / (later.on - earlier.on).days
        return LifeFigure(earlier.life + gained, approximate=True)

    def _start_on(self, on: date) -> _Start | None:
        found = None
        for start in self.starts:
            if start.fit.from_on is None or start.fit.from_on <= on:
                found = start
        if found is not None and found.fit.to_on is not None and found.fit.to_on < on:
            return None
        return found


def counter_history(counter: Counter, until: date) -> CounterHistory:
    """See a counter as life totals, ignoring everything dated after `until`.

    Readings come out by day, within a day by life total; the same figure twice on a day is one.
    """
    accepted = [r for r in counter.readings if r.accepted and r.on <= until]
    turns = tuple(r for r in accepted if r.rolled_over)
    fits = tuple(fit for fit in counter.fits if fit.from_on is None or fit.from_on <= until)
    starts = _starts(counter.came_with, fits, turns)
    lives: dict[tuple[date, Decimal], LifeReading] = {}
    for reading in accepted:
        for start in starts:
            if start.fit.meter.id == reading.meter_id and _counts(start.fit, reading):
                moved = _moved(start, turns, reading.value, reading.on)
                life = LifeReading(reading, reading.on, start.life + moved, start.metered + moved)
                lives.setdefault((life.on, life.life), life)
                break
    ordered = tuple(sorted(lives.values(), key=lambda r: (r.on, r.life)))
    return CounterHistory(counter, until, ordered, starts, turns)


def dial_on(meter: Meter, readings: Sequence[Reading], on: date, until: date) -> Decimal:
    """Tell what a meter showed on a day by its readings up to `until`, in its unit.

    Between two readings to the tenth; before the first what that one says, 0 where it was never read.
    """
    own = tuple(reading for reading in readings if reading.meter_id == meter.id)
    history = counter_history(Counter(meter.kind, Decimal(0), (MeterFit(meter, None, Decimal(0)),), own), until)
    if not history.readings:
        return Decimal(0)
    figure = history.figure_on(on) or LifeFigure(history.readings[0].life)
    dial = history.dial_of(figure.value)
    assert dial is not None
    return round(dial / _TENTH) * _TENTH if figure.approximate else dial


def _starts(came_with: Decimal, fits: Sequence[MeterFit], turns: Iterable[Reading]) -> tuple[_Start, ...]:
    starts = []
    life = metered = came_with
    for fit in fits:
        first = _with_turns(fit, turns, fit.first, fit.from_on)
        starts.append(_Start(fit, first, life, metered))
        if fit.last is not None:
            moved = to_base(_with_turns(fit, turns, fit.last, fit.to_on) - first, fit.meter.unit)
            life += moved + to_base(fit.unmetered, fit.meter.unit)
            metered += moved
    return tuple(starts)


def _counts(fit: MeterFit, reading: Reading) -> bool:
    """Tell whether a reading of the fit's meter falls inside the fit."""
    begun = fit.from_on is None or fit.from_on <= reading.on
    return begun and (fit.to_on is None or reading.on <= fit.to_on)


def _moved(start: _Start, turns: Iterable[Reading], dial: Decimal, on: date) -> Decimal:
    """What a fit counted until its meter showed a figure on a day, in the base unit."""
    return to_base(_with_turns(start.fit, turns, dial, on) - start.first, start.fit.meter.unit)


def _with_turns(fit: MeterFit, turns: Iterable[Reading], dial: Decimal, on: date | None) -> Decimal:
    """Add the dial's whole turns up to a day.

    On the day of a turn, figures below half the dial lie after it, and so do those up to what it then read.
    """
    modulus = fit.meter.modulus
    if modulus is None or on is None:
        return dial
    count = 0
    for turn in turns:
        is_after = turn.on < on or (turn.on == on and (dial < modulus / 2 or dial <= turn.value))
        if turn.meter_id == fit.meter.id and is_after:
            count += 1
    return dial + count * modulus
