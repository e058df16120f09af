"""Bench sums: an answer with its working, no database needed."""

import argparse
from collections.abc import Callable
from dataclasses import dataclass
from decimal import Decimal
from typing import Any

from fleetcare.cli import output
from fleetcare.cli.parser import CommandParser, Commands, number, whole
from fleetcare.domain.quantities import plain
from fleetcare.rules import geometry
from fleetcare.rules.fuel_use import Scale, fuel_use, reciprocal_constant


@dataclass(frozen=True, slots=True)
class Answer:
    """What a sum prints: a sentence with the working, or with --json the object."""

    sentence: str
    keys: dict[str, Any]


def add_commands(commands: Commands) -> None:
    """Add `calc` and its sums."""
    calc = commands.add_parser("calc", help="bench sums, no database needed")
    sums = calc.add_subparsers(metavar="SUM", required=True)

    speed = _add_sum(sums, "piston-speed", "mean piston speed from stroke and speed", _piston_speed)
    speed.add_argument("--stroke", type=number, required=True, metavar="MM", help="stroke in mm")
    speed.add_argument("--rpm", type=number, required=True, help="engine speed in turns a minute")

    swept = _add_sum(sums, "displacement", "litres swept, and how bore and stroke compare", _displacement)
    swept.add_argument("--bore", type=number, required=True, metavar="MM", help="bore in mm")
    swept.add_argument("--stroke", type=number, required=True, metavar="MM", help="stroke in mm")
    swept.add_argument("--cylinders", type=whole, required=True, metavar="N", help="number of cylinders")

    fuel = _add_sum(sums, "fuel-use", "L/100 km and miles per gallon, each from the other", _fuel_use)
    given = fuel.add_mutually_exclusive_group(required=True)
    given.add_argument("--litres-per-100km", type=number, metavar="L", help="litres per 100 km")
    given.add_argument("--mpg-us", type=number, metavar="MPG", help="miles per US gallon")
    given.add_argument("--mpg-imp", type=number, metavar="MPG", help="miles per imperial gallon")


def _add_sum(sums: Commands, name: str, summary: str, answer: Callable[[argparse.Namespace], Answer]) -> CommandParser:
    parser = sums.add_parser(name, help=summary)
    parser.add_argument("--json", action="store_true", help="print one JSON object, figures unrounded")
    parser.set_defaults(run=lambda given: _print(answer(given), as_json=given.json))
    return parser


def _print(answer: Answer, *, as_json: bool) -> None:
    if as_json:
        output.deliver(output.json_text(answer.keys))
    else:
        output.say(answer.sentence)


def _piston_speed(given: argparse.Namespace) -> Answer:
    speed = geometry.mean_piston_speed(given.stroke, given.rpm)
    return Answer(
        f"Mean piston speed {_shown(speed)} m/s: "
        f"2 × {plain(given.stroke)} mm stroke × {plain(given.rpm)} rpm / 60 000.",
        {"mean_piston_speed_m_s": speed},
    )


def _displacement(given: argparse.Namespace) -> Answer:
    swept = geometry.displacement(given.bore, given.stroke, given.cylinders)
    bore, stroke = plain(given.bore), plain(given.stroke)
    return Answer(
        f"Displacement {_shown(swept.litres)} L: π/4 × ({bore} mm)² × {stroke} mm × {given.cylinders}; "
        f"bore/stroke {_shown(swept.bore_stroke_ratio)}, {swept.shape}.",
        {"litres": swept.litres, "bore_stroke_ratio": swept.bore_stroke_ratio, "class": swept.shape},
    )


def _fuel_use(given: argparse.Namespace) -> Answer:
    values: dict[Scale, Decimal | None] = {
        Scale.LITRES_PER_100KM: given.litres_per_100km,
        Scale.MPG_US: given.mpg_us,
        Scale.MPG_IMP: given.mpg_imp,
    }
    scale, value = next((scale, value) for scale, value in values.items() if value is not None)
    use = fuel_use(value, scale)
    figures = {Scale.LITRES_PER_100KM: use.litres_per_100km, Scale.MPG_US: use.mpg_us, Scale.MPG_IMP: use.mpg_imp}
    others = ", ".join(f"{_shown(figure)} {other}" for other, figure in figures.items() if other is not scale)
    us, imperial = _shown(reciprocal_constant(Scale.MPG_US)), _shown(reciprocal_constant(Scale.MPG_IMP))
    return Answer(
        f"{plain(value)} {scale} is {others}: L/100 km = {us} / mpg (US) = {imperial} / mpg (imperial).",
        {"litres_per_100km": use.litres_per_100km, "mpg_us": use.mpg_us, "mpg_imp": use.mpg_imp},
    )


def _shown(value: Decimal) -> str:
    """Round for reading: four decimals at most, fewer where they are zeros."""
    return plain(round(value, 4))
