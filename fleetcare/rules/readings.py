"""Which readings can be true together: the hard rule, and the longest plausible chain.

Hard rule, between neighbours: 0 <= gained <= cap x (days + 1). The day of slack is there because readings are
dated, not timed. Speed limits as the test of a series, and changing as little of it as possible, are
after Song, Zhang, Wang, Yu, SCREEN, SIGMOD 2015; the chain is the longest increasing subsequence
with that limit. Rollovers and new meters are told by people, never guessed: figures are metered life
totals in the base unit, in which both are already allowed for.
"""

from collections.abc import Sequence
from datetime import date
from decimal import Decimal

from fleetcare.domain.quantities import plain

Figure = tuple[date, Decimal]


def breaks_rule(earlier: Figure, later: Figure, cap_per_day: Decimal, unit: str) -> str | None:
    """Why two neighbouring figures cannot both be true, in words; None where they can.

    `earlier` is not dated after `later`. Exactly nothing gained and exactly the cap for one day more are both allowed.
    """
    if _can_follow(earlier, later, cap_per_day):
        return None
    days = (later[0] - earlier[0]).days
    gained = later[1] - earlier[1]
    if gained < 0:
        return f"lower by {_amount(-gained, unit)}"
    spell = {0: "on one day", 1: "in 1 day"}.get(days, f"in {days} days")
    return f"gains {_amount(gained, unit)} {spell}, at most {_amount(cap_per_day, unit)} a day"


def plausible_chain(figures: Sequence[Figure], cap_per_day: Decimal, holding: int | None = None) -> frozenset[int]:
    """The indexes of the most figures that can all be true: each neighbouring pair keeps the hard rule.

    Figures count in order of day, within a day by value. With `holding` the chain goes through that index,
    whatever else falls off. Between chains of the same length the one with the later readings wins.
    Every earlier figure is tried as the one before, so that no run of bad readings, however long, cuts a chain.
    """
    order = sorted(range(len(figures)), key=lambda index: figures[index])
    held = 0 if holding is None else order.index(holding)
    lengths: list[int] = []  # of the longest chain ending here; 0 where it could not hold the held one
    before: list[int] = []
    longest: list[int] = []  # the greatest of the lengths so far: how far back it is worth looking
    for place, index in enumerate(order):
        after_held = holding is not None and place > held
        best, link = (0, -1) if after_held else (1, -1)
        for other in range(place - 1, held - 1 if after_held else -1, -1):
            if longest[other] < best:
                break
            if lengths[other] >= max(best, 1) and _can_follow(figures[order[other]], figures[index], cap_per_day):
                best, link = lengths[other] + 1, other
        lengths.append(best)
        before.append(link)
        longest.append(max(best, longest[-1] if longest else 0))
    place = max(range(held, len(order)), key=lambda end: (lengths[end], end), default=-1)
    chain = []
    while place >= 0:
        chain.append(order[place])
        place = before[place]
    return frozenset(chain)


def misfits(figures: Sequence[Figure], is_new: Sequence[bool], cap_per_day: Decimal) -> dict[int, int]:
    """Which new figures cannot be true: the index of each, and that of the figure it breaks the hard rule with.

    `figures` are in order of day, within a day by value. Old ones are taken as true; of two new ones that break
    the rule with each other, the one off the longest plausible chain is wrong. Without the misfits no new figure
    breaks the rule with a neighbour. The order in which new figures came plays no part.
    """
    found: dict[int, int] = {}
    kept: list[int] = []
    chain: frozenset[int] | None = None
    for index, figure in enumerate(figures):
        while kept and not _can_follow(figures[kept[-1]], figure, cap_per_day):
            before = kept[-1]
            if not (is_new[before] or is_new[index]):
                kept.append(index)
                break
            wrong = index if is_new[index] else before
            if is_new[before] and is_new[index]:
                chain = plausible_chain(figures, cap_per_day) if chain is None else chain
                wrong = index if before in chain else before
            found[wrong] = before if wrong == index else index
            if wrong == index:
                break
            kept.pop()
        else:
            kept.append(index)
    return found


def _can_follow(earlier: Figure, later: Figure, cap_per_day: Decimal) -> bool:
    (day, value), (later_day, later_value) = earlier, later
    return value <= later_value and later_value - value <= cap_per_day * ((later_day - day).days + 1)


def _amount(value: Decimal, unit: str) -> str:
    return f"{plain(value)} {unit}"
