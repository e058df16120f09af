"""Laid-up days, and how far they move the calendar point of a task that pauses while laid up."""

from collections.abc import Iterator
from datetime import date, timedelta

from fleetcare.domain.engines import Status, StatusSpell


def laid_up_stretches(spells: tuple[StatusSpell, ...], until: date) -> Iterator[tuple[date, date]]:
    """Give each laid-up stretch as its first day and the day after its last, cut off after `until`."""
    for place, spell in enumerate(spells):
        if spell.status is not Status.LAID_UP or spell.from_on > until:
            continue
        following = spells[place + 1].from_on if place + 1 < len(spells) else date.max
        yield spell.from_on, min(following, until + timedelta(days=1))


def paused_days(point: date, counts_from: date, spells: tuple[StatusSpell, ...], until: date) -> int:
    """Count the days a point moves: one for each laid-up day after `counts_from`, until the point is passed.

    The first day of a spell counts, the day of return does not; days after `until` are not known yet.
    """
    moved = 0
    for first, end in laid_up_stretches(spells, until):
        begins = max(first, counts_from + timedelta(days=1))
        if begins > point + timedelta(days=moved):
            break
        moved += max(0, (end - begins).days)
    return moved
