"""Deferrals: one due point moved by somebody, until the first of its ends."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from datetime import date
from decimal import Decimal

from fleetcare.domain.lines import NextPoint, Point, State, apart
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
    deferred: bool = False
    pulled: bool = False


def has_ended(deferral: Deferral, today: date, lives: Mapping[Kind, Decimal]) -> bool:
    """Tell whether any end of a deferral is behind us: its day, its figure, or its cap; on an end it still holds."""
    if deferral.until_on is not None and today > deferral.until_on:
        return True
    ends = (*deferral.until_life.items(), *deferral.caps.items())
    return any(kind in lives and lives[kind] > end for kind, end in ends)


@dataclass(frozen=True, slots=True)
class Move:
    """What a deferral does to one trigger: the point it moves to, None where only a day holds it back.

    `until_on` is set for a counted trigger deferred to a day. After its end a move only takes the grace away,
    which it does all along.
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


def stand(
    next_point: NextPoint, now: Point, today: date, move: Move | None, pulled_to: Decimal | None = None
) -> Standing:
    """Work out how a trigger stands against its point in force.

    A deferred point has no grace, and past its own point a trigger is never better than near. One that counts
    is due on the day it is deferred to where it is past its own point by then, and not called for before.
    One pulled forward, with its usual ahead, is due from there on, and overdue by the point it had without.
    """
    standing = _unpulled(next_point, now, today, move)
    if pulled_to is None or apart(pulled_to, standing.point) >= 0:
        return standing
    remaining = apart(pulled_to, now)
    state = state_of(max(remaining, _NO_GRACE), next_point.ahead, _NO_GRACE)
    return Standing(pulled_to, remaining, worst([standing.state, state]), pulled=True)


def _unpulled(next_point: NextPoint, now: Point, today: date, move: Move | None) -> Standing:
    own = apart(next_point.point, now)
    own_state = _own_state(next_point, own, today)
    if move is None or move.ended:
        return Standing(next_point.point, own, own_state)
    if own > 0:
        least = own_state if move.to is None else State.CLEAR
    else:
        least = State.DUE if move.until_on == today else State.NEAR
    if move.to is None:
        return Standing(next_point.point, own, least, deferred=True)
    remaining = apart(move.to, now)
    return Standing(move.to, remaining, worst([least, state_of(remaining, next_point.ahead, _NO_GRACE)]), deferred=True)


def without_grace(next_point: NextPoint) -> NextPoint:
    """Give a point as a deferral leaves it, in force or ended: no grace after it."""
    return replace(next_point, grace=_NO_GRACE)


def _own_state(next_point: NextPoint, remaining: Decimal, today: date) -> State:
    if next_point.opens is not None and isinstance(next_point.point, date):
        return window_state(today, next_point.opens, next_point.point, next_point.ahead)
    return state_of(remaining, next_point.ahead, next_point.grace)
