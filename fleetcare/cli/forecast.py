"""`forecast`: when a meter will show a figure."""

import argparse
from typing import TYPE_CHECKING

from fleetcare.cli import output
from fleetcare.cli.parser import Commands, typed
from fleetcare.cli.shop import context_of, tenth
from fleetcare.domain.quantities import parse_dial, plain

if TYPE_CHECKING:
    from fleetcare.operations.forecast import Reach


def add_commands(commands: Commands) -> None:
    """Add `forecast`."""
    forecast = commands.add_parser("forecast", help="when a meter will show a figure")
    forecast.add_argument("tag", metavar="TAG")
    forecast.add_argument(
        "--to", type=typed(parse_dial), required=True, metavar="VALUE", help="what the dial will show, such as 1500h"
    )
    forecast.add_argument("--meter", metavar="KIND", help="hours, distance, fuel or starts, where there are several")
    forecast.add_argument("--json", action="store_true", help="print one JSON object")
    forecast.set_defaults(run=_forecast)


def _forecast(given: argparse.Namespace) -> None:
    from fleetcare.drafts.fields import parse_counted_kind
    from fleetcare.operations.forecast import forecast_reach

    kind = parse_counted_kind(given.meter) if given.meter is not None else None
    context = context_of(given)
    with context.read() as connection:
        reach = forecast_reach(connection, given.tag, given.to, context.today(), kind, is_future=context.is_future)
    if given.json:
        output.deliver(output.json_text(_as_json(reach)))
    else:
        _say(reach)


def _as_json(reach: "Reach") -> dict[str, object]:
    return {
        "early_date": reach.forecast.early,
        "likely_date": reach.forecast.likely,
        "late_date": reach.forecast.late,
        "readings_used": reach.forecast.readings_used,
        "reason": reach.forecast.reason,
    }


def _say(reach: "Reach") -> None:
    life = f" ({plain(tenth(reach.life))} {reach.unit} of life)" if reach.life != reach.dial else ""
    output.say(f"{reach.tag} shows {plain(reach.dial)} {reach.unit}{life}: {reach.range}")
    if reach.latest is not None:
        dial, on = reach.latest
        used = reach.forecast.readings_used
        count = f"{used} {'reading' if used == 1 else 'readings'}"
        output.say(f"It showed {plain(tenth(dial))} {reach.unit} on {on.isoformat()}, the newest of {count}.")
    if reach.clues:
        output.say(f"Rests on: {reach.clues}.")
