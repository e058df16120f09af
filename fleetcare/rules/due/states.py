"""States: of a trigger from what remains, and of a line from its triggers.

With r = next - now: clear r > ahead; near 0 < r <= ahead; due -grace <= r <= 0; overdue r < -grace,
all decided unrounded. A window is due from its first day to its last.
"""

from collections.abc import Callable, Sequence
from datetime import date
from decimal import Decimal

from fleetcare.domain.lines import State, TriggerLine
from fleetcare.domain.schedules import Combine


def state_of(remaining: Decimal, ahead: Decimal, grace: Decimal) -> State:
    """Give the state of a trigger from what remains to its point; all three in one unit."""
    if remaining > ahead:
        return State.CLEAR
    if remaining > 0:
        return State.NEAR
    return State.DUE if remaining >= -grace else State.OVERDUE


def window_state(today: date, opens: date, last: date, ahead: Decimal) -> State:
    """Give the state of a windowed trigger: near before it opens, due inside, overdue after."""
    if today > last:
        return State.OVERDUE
    if today >= opens:
        return State.DUE
    return State.NEAR if (opens - today).days <= ahead else State.CLEAR


def worst(states: Sequence[State]) -> State:
    """Give the state that matters most; unset hides an all-clear, never a warning."""
    return min(states, key=lambda state: state.rank)


def combine(how: Combine, states: Sequence[State]) -> State:
    """Combine the states of a line's triggers: the worst for `first`, the mildest for `last`.

    `first` is unset where a trigger is, unless another is near, due or overdue; `last` where any is.
    """
    if how is Combine.FIRST:
        return worst(states)
    if State.UNSET in states:
        return State.UNSET
    return max(states, key=lambda state: state.rank)


def deciding(how: Combine, triggers: Sequence[TriggerLine]) -> TriggerLine:
    """Give the trigger that decides a line, one of those in the state they combine to.

    For `first` the earliest likely date, else the smallest share of its interval left; for `last`
    the latest, else the largest; else option order.
    """
    state = combine(how, [t.state for t in triggers])
    candidates = [t for t in triggers if t.state is state]
    pick: Callable[..., TriggerLine] = min if how is Combine.FIRST else max
    dated = [(t.forecast.likely, t) for t in candidates if t.forecast is not None and t.forecast.likely is not None]
    if len(dated) == len(candidates):
        best = pick(day for day, _ in dated)
        candidates = [t for day, t in dated if day == best]
    return pick(candidates, key=_share)


def _share(line: TriggerLine) -> Decimal:
    return line.share if line.share is not None else Decimal(0)
