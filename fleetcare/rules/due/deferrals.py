"""Deferrals: one due point moved by somebody, until the first of its ends."""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal

from fleetcare.domain.lines import NextPoint, Point, State
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Deferral, TaskVersion
from fleetcare.rules.due.states import state_of, window_state, worst

_NO_GRACE = Decimal(0)


@dataclass(frozen=True, slots=True)
class Standing:
    """How one trigger stands: the point in force, what remains to it, and the state."""

    point: Point
    remaining: Decimal
    state: State
    own_state: State
    deferred: bool = False


def has_ended(deferral: Deferral, today: date, lives: dict[Kind, Decimal]) -> bool:
    """Tell whether any end of a deferral is behind us: its day, its figure, or its cap."""
    if deferral.until_on is not None and today > deferral.until_on:
        return True
    ends = {**deferral.caps, **deferral.until_life}
    return any(kind in lives and lives[kind] > end for kind, end in ends.items())


@dataclass(frozen=True, slots=True)
class Move:
    """What a deferral does to one trigger: the point it moves to, None where only a day holds it back.

    `until_on` is set for a counted trigger deferred to a day. After its end a move only takes the grace away.
    """

    to: Point | None
    ended: bool
    until_on: date | None = None


def move_of(deferral: Deferral, version: TaskVersion, kind: Kind, ended: bool) -> Move | None:
    """Give what a deferral does to the trigger of a kind, None where it does not name it.

    A day moves the calendar trigger, and on a task without one the counted trigger.
    """
    if kind is Kind.CALENDAR:
        return Move(deferral.until_on, ended) if deferral.until_on is not None else None
    until_on = deferral.until_on if version.calendar is None else None
    figures = [ends[kind] for ends in (deferral.until_life, deferral.caps) if kind in ends]
    if until_on is None and not figures:
        return None
    return Move(min(figures, default=None), ended, until_on)


def stand(next_point: NextPoint, now: Point, today: date, move: Move | None) -> Standing:
    """Work out how a trigger stands against its point in force.

    A deferred point has no grace, and past its own point a trigger is never better than near.
    """
    own = _remaining(next_point.point, now)
    own_state = _own_state(next_point, own, today, next_point.grace)
    if move is None:
        return Standing(next_point.point, own, own_state, own_state)
    if move.ended:
        return Standing(next_point.point, own, _own_state(next_point, own, today, _NO_GRACE), own_state)
    point = next_point.point if move.to is None else move.to
    remaining = _remaining(point, now)
    states = [State.NEAR if own <= 0 else State.CLEAR]
    if move.until_on == today:
        states.append(State.DUE)
    if move.to is not None:
        states.append(state_of(remaining, next_point.ahead, _NO_GRACE))
    elif own > 0:
        states.append(own_state)
    return Standing(point, remaining, worst(states), own_state, deferred=True)


def _own_state(next_point: NextPoint, remaining: Decimal, today: date, grace: Decimal) -> State:
    if next_point.opens is not None and isinstance(next_point.point, date):
        return window_state(today, next_point.opens, next_point.point, next_point.ahead)
    return state_of(remaining, next_point.ahead, grace)


def _remaining(point: Point, now: Point) -> Decimal:
    if isinstance(point, date) and isinstance(now, date):
        return Decimal((point - now).days)
    assert isinstance(point, Decimal)
    assert isinstance(now, Decimal)
    return point - now
