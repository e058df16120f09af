"""Bench sums on what bore, stroke and speed make of each other, and on fuel use on the road."""

from decimal import Decimal

from fleetcare.domain.quantities import plain
from fleetcare.sums.base import Answer, Given, Option, Sum, Takes, shown


def _piston_speed(given: Given) -> Answer:
    from fleetcare.rules import geometry

    speed = geometry.mean_piston_speed(given.stroke, given.rpm)
    return Answer(
        f"Mean piston speed {shown(speed)} m/s: 2 × {plain(given.stroke)} mm stroke × {plain(given.rpm)} rpm / 60 000.",
        {"mean_piston_speed_m_s": speed},
    )


def _displacement(given: Given) -> Answer:
    from fleetcare.rules import geometry

    swept = geometry.displacement(given.bore, given.stroke, given.cylinders)
    bore, stroke = plain(given.bore), plain(given.stroke)
    return Answer(
        f"Displacement {shown(swept.litres)} L: π/4 × ({bore} mm)² × {stroke} mm × {given.cylinders}; "
        f"bore/stroke {shown(swept.bore_stroke_ratio)}, {swept.shape}.",
        {"litres": swept.litres, "bore_stroke_ratio": swept.bore_stroke_ratio, "class": swept.shape},
    )


def _fuel_use(given: Given) -> Answer:
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


SUMS = (
    Sum(
        "piston-speed",
        "mean piston speed from stroke and speed",
        (
            Option("stroke", "stroke in mm", "MM", is_required=True, plate="stroke_mm"),
            Option("rpm", "engine speed in turns a minute", is_required=True, plate="rated_rpm"),
        ),
        _piston_speed,
    ),
    Sum(
        "displacement",
        "litres swept, and how bore and stroke compare",
        (
            Option("bore", "bore in mm", "MM", is_required=True, plate="bore_mm"),
            Option("stroke", "stroke in mm", "MM", is_required=True, plate="stroke_mm"),
            Option("cylinders", "number of cylinders", "N", takes=Takes.WHOLE, is_required=True, plate="cylinders"),
        ),
        _displacement,
    ),
    Sum(
        "fuel-use",
        "L/100 km and miles per gallon, each from the other",
        (
            Option("litres-per-100km", "litres per 100 km", "L"),
            Option("mpg-us", "miles per US gallon", "MPG"),
            Option("mpg-imp", "miles per imperial gallon", "MPG"),
        ),
        _fuel_use,
        is_one_of=True,
    ),
)
