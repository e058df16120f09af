"""How the lash of each point of an engine went over its life, for the page of the engine."""

from collections.abc import Mapping, Sequence
from typing import TYPE_CHECKING

from fleetcare.domain.lines import DueLine
from fleetcare.domain.quantities import Kind
from fleetcare.domain.sheets import LASH, spec_on
from fleetcare.domain.trends import Projection
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem
from fleetcare.operations.lash_specs import load_specs
from fleetcare.operations.sheets_load import load_sheets, open_form
from fleetcare.rules.due.facts import ItemFacts
from fleetcare.rules.due.pulls import foreseen_for
from fleetcare.rules.explain_lash_past import PLACES, trend_row
from fleetcare.rules.lash_past import PointPast, lash_past, places_of
from fleetcare.rules.meters import CounterHistory
from fleetcare.rules.trend_row import Ahead as Ahead
from fleetcare.rules.trend_row import TrendRow as TrendRow
from fleetcare.rules.trend_row import Trends as Trends

if TYPE_CHECKING:
    from sqlalchemy import Connection


def lash_trends(connection: "Connection", item: FoundItem, facts: ItemFacts, lines: Sequence[DueLine]) -> Trends:
    """Load the past of every lash point as the engine stands, bank by bank; without points it says why, and what to do.

    Each is projected as the line that measures it again is; `lines` are those of the engine.
    """
    try:
        pasts = load_lash_past(connection, item, facts)
    except Refused as error:
        return Trends(why_none=" ".join(_sentence(line) for line in error.lines()))
    spec = spec_on(load_specs(connection, item.id), facts.on)
    unit, hours = spec.unit if spec is not None else "mm", _hours(facts)
    latest = hours.latest if hours is not None else None
    projections, why_not = _projections(facts, lines)
    return Trends(
        rows=tuple(
            trend_row(
                past,
                spec,
                item.tag,
                counts_hours=hours is not None,
                projection=projections.get(past.name),
                why_not=why_not,
            )
            for past in pasts
        ),
        unit=unit,
        places=PLACES[unit],
        counts_hours=hours is not None,
        until=float(latest.life) if latest is not None else facts.on.toordinal(),
    )


def load_lash_past(connection: "Connection", item: FoundItem, facts: ItemFacts) -> tuple[PointPast, ...]:
    """Load what every lash point of an engine was found and left at, with the checks a trend is fitted to.

    Refuses what has no valves, none known, or none that leave a gap.
    """
    form = open_form(connection, item, facts.on)
    sheets = load_sheets(connection, item.id, facts.on, LASH)
    places = {cylinder: place for place, cylinder in enumerate(cylinder for bank in form.banks for cylinder in bank)}
    points = sorted(form.points, key=lambda point: places[point.cylinder])
    return lash_past(points, sheets, load_specs(connection, item.id), places_of(sheets, _hours(facts)), facts.on)


def _projections(facts: ItemFacts, lines: Sequence[DueLine]) -> tuple[Mapping[str, Projection], str]:
    """Give the projection of each point by the first line that measures it again by hours, or why there is none."""
    if _hours(facts) is None:
        return {}, "not projected: nothing counts its hours"
    about = [line for line in lines if LASH in {line.version.needs_sheet, line.version.work}]
    counted = [(line, trigger) for line in about for trigger in line.triggers if trigger.kind is Kind.HOURS]
    for line, trigger in counted:
        foreseen = foreseen_for(facts, line, trigger)
        if foreseen:
            return {one.wear.subject: one.projection for one in foreseen}, ""
    if not counted:
        return {}, "not projected: no task measures it again by hours"
    line, trigger = counted[0]
    why = "was done since without a sheet" if trigger.next is not None else "is unset"
    return {}, f"not projected: {line.task.name} {why}"


def _hours(facts: ItemFacts) -> CounterHistory | None:
    """Give what counts the hours of an engine, None where nothing does or did yet."""
    hours = facts.counters.get(Kind.HOURS)
    return hours if hours is not None and hours.readings else None


def _sentence(text: str) -> str:
    return f"{text[:1].upper()}{text[1:]}."
