"""Bench sums on what bore, stroke and speed make of each other, and on fuel use on the road."""

import argparse
from decimal import Decimal

from fleetcare.cli.calc.answers import Answer, add_sum, shown
from fleetcare.cli.parser import Commands, number, whole
from fleetcare.domain.quantities import plain


def add_sums(sums: Commands) -> None:
    """Add `piston-speed`, `displacement` and `fuel-use`."""
    speed = add_sum(sums, "piston-speed", "mean piston speed from stroke and speed", _piston_speed)
    speed.add_argument("--stroke", type=number, required=True, metavar="MM", help="stroke in mm")
    speed.add_argument("--rpm", type=number, required=True, help="engine speed in turns a minute")

    swept = add_sum(sums, "displacement", "litres swept, and how bore and stroke compare", _displacement)
    swept.add_argument("--bore", type=number, required=True, metavar="MM", help="bore in mm")
    swept.add_argument("--stroke", type=number, required=True, metavar="MM", help="stroke in mm")
    swept.add_argument("--cylinders", type=whole, required=True, metavar="N", help="number of cylinders")

    fuel = add_sum(sums, "fuel-use", "L/100 km and miles per gallon, each from the other", _fuel_use)
    one = fuel.add_mutually_exclusive_group(required=True)
    one.add_argument("--litres-per-100km", type=number, metavar="L", help="litres per 100 km")
    one.add_argument("--mpg-us", type=number, metavar="MPG", help="miles per US gallon")
    one.add_argument("--mpg-imp", type=number, metavar="MPG", help="miles per imperial gallon")


def _piston_speed(given: argparse.Namespace) -> Answer:
    from fleetcare.rules import geometry

    speed = geometry.mean_piston_speed(given.stroke, given.rpm)
    return Answer(
        f"Mean piston speed {shown(speed)} m/s: 2 × {plain(given.stroke)} mm stroke × {plain(given.rpm)} rpm / 60 000.",
        {"mean_piston_speed_m_s": speed},
    )


def _displacement(given: argparse.Namespace) -> Answer:
    from fleetcare.rules import geometry

    swept = geometry.displacement(given.bore, given.stroke, given.cylinders)
    bore, stroke = plain(given.bore), plain(given.stroke)
    return Answer(
        f"Displacement {shown(swept.litres)} L: π/4 × ({bore} mm)² × {stroke} mm × {given.cylinders}; "
        f"bore/stroke {shown(swept.bore_stroke_ratio)}, {swept.shape}.",
        {"litres": swept.litres, "bore_stroke_ratio": swept.bore_stroke_ratio, "class": swept.shape},
    )


def _fuel_use(given: argparse.Namespace) -> Answer:
    from fleetcare.rules.fuel_use import Scale, fuel_use, reciprocal_constant

    values: dict[Scale, Decimal | None] = {
        Scale.LITRES_PER_100KM: given.litres_per_100km,
        Scale.MPG_US: given.mpg_us,
        Scale.MPG_IMP: given.mpg_imp,
    }
    scale, value = next((scale, value) for scale, value in values.items() if value is not None)
    use = fuel_use(value, scale)
    figures = {Scale.LITRES_PER_100KM: use.litres_per_100km, Scale.MPG_US: use.mpg_us, Scale.MPG_IMP: use.mpg_imp}
    others = ", ".join(f"{shown(figure)} {other}" for other, figure in figures.items() if other is not scale)
    us, imperial = shown(reciprocal_constant(Scale.MPG_US)), shown(reciprocal_constant(Scale.MPG_IMP))
    return Answer(
        f"{plain(value)} {scale} is {others}: L/100 km = {us} / mpg (US) = {imperial} / mpg (imperial).",
        {"litres_per_100km": use.litres_per_100km, "mpg_us": use.mpg_us, "mpg_imp": use.mpg_imp},
    )
