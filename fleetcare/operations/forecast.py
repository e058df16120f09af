"""When a meter will show a figure, and what that rests on."""

from dataclasses import dataclass
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.forecasts import Forecast
from fleetcare.domain.quantities import Figure, Kind, from_base, to_base
from fleetcare.errors import Refused
from fleetcare.operations.find import find_item, find_meters, pick_meter
from fleetcare.operations.load import item_facts
from fleetcare.rules.due.outlook import outlooks
from fleetcare.rules.explain_forecast import say_clues, say_range
from fleetcare.rules.forecast import History

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class Reach:
    """When a dial figure is reached: the forecast, its range and what it rests on in words.

    `dial` is the figure asked for, `life` the life total it stands for, both in `unit`; `latest` is what this
    dial showed last and the day, None where it was never read.
    """

    tag: str
    kind: Kind
    unit: str
    dial: Decimal
    life: Decimal
    latest: tuple[Decimal, date] | None
    forecast: Forecast
    range: str
    clues: str


def forecast_reach(
    connection: "Connection", tag: str, figure: Figure, on: date, kind: Kind | None = None, *, is_future: bool = False
) -> Reach:
    """Forecast when a meter of an engine or machine shows a figure, taken as a dial figure of the day `on`.

    Refuses a figure that belongs to no one meter, or has more digits than the dial.
    """
    item = find_item(connection, tag)
    meter = pick_meter(find_meters(connection, item.id, on), figure, item.tag, kind)
    facts = item_facts(connection, on, [item.id])[0]
    counter = facts.counters[meter.kind]
    dial = from_base(to_base(figure.value, figure.unit), meter.unit) if figure.unit else figure.value
    modulus = counter.starts[-1].fit.meter.modulus
    if modulus is not None and dial >= modulus:
        raise Refused(f"{figure} does not fit on the {meter.kind} meter of {item.tag}", f"give one below {modulus}")
    life = counter.life_at(dial, on)
    assert life is not None  # the meter counts on that day
    latest = counter.latest
    if latest is not None and life <= latest.life:
        # Reached is reached, whatever the status forbids to forecast.
        forecast = History([(read.on, read.life) for read in counter.readings]).reach(life)
    else:
        forecast = outlooks(facts, is_future)[meter.kind].reach(life)
    by_this_dial = latest if latest is not None and latest.reading.meter_id == meter.id else None
    return Reach(
        tag=item.tag,
        kind=meter.kind,
        unit=meter.unit,
        dial=dial,
        life=from_base(life, meter.unit),
        latest=(by_this_dial.reading.value, by_this_dial.on) if by_this_dial is not None else None,
        forecast=forecast,
        range=say_range(forecast),
        clues=say_clues(forecast),
    )
