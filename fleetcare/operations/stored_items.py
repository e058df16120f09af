"""What is stored of an engine or machine, under the names its draft knows: to lay an edit over, and as one would type it."""

from decimal import Decimal
from typing import TYPE_CHECKING, Any

from fleetcare.domain.quantities import Figure, plain
from fleetcare.operations.find import find_item
from fleetcare.operations.rows import day, fetch, figure

if TYPE_CHECKING:
    from sqlalchemy import Connection

# Nameplate options of the command line and the columns they are kept in.
NAMEPLATE = {
    "duty": "duty",
    "cylinders": "cylinders",
    "layout": "layout",
    "numbering": "numbering",
    "firing_order": "firing_order",
    "fuel": "fuel",
    "bore": "bore_mm",
    "stroke": "stroke_mm",
    "rod": "rod_mm",
    "compression_ratio": "compression_ratio",
    "valves_per_cylinder": "valves_per_cylinder",
    "intake_closes": "intake_closes_deg",
    "bridged": "bridged",
    "adjuster": "adjuster",
    "screw_pitch": "screw_pitch_mm",
    "screw_at": "screw_at",
    "rocker_ratio": "rocker_ratio",
    "shim_step": "shim_step_mm",
    "oil_grade": "oil_grade",
    "sump": "sump_l",
    "rated_rpm": "rated_rpm",
    "rated_kw": "rated_kw",
    "altitude": "altitude_m",
}


def item_as_typed(connection: "Connection", tag: str) -> dict[str, str]:
    """Give what is stored of an engine or machine as one would type it; refuses an unknown tag."""
    item = find_item(connection, tag)
    place, meters = stored_place(connection, item.id), stored_meters(connection, item.id)
    return {
        **{name: str(place[name] or "") for name in ("name", "site", "in_service")},
        "as_new": "yes" if place["as_new"] else "no",
        "start_at": "; ".join(f"{plain(start.value)}{start.unit}" for start in meters["start_at"]),
        "meter_digits": "; ".join(
            f"{kind}:{digits}.{decimals}" for kind, digits, decimals in meters["meter_digits"] if digits
        ),
        **_plate_as_typed(connection, item.id),
        **_lash_as_typed(connection, item.id),
    }


def _plate_as_typed(connection: "Connection", item_id: int) -> dict[str, str]:
    rows = fetch(connection, f"select {', '.join(NAMEPLATE.values())} from engine where item_id = :id", id=item_id)
    return (
        {name: str(value) for name, value in zip(NAMEPLATE, rows[0], strict=True) if value is not None} if rows else {}
    )


def _lash_as_typed(connection: "Connection", item_id: int) -> dict[str, str]:
    typed = {}
    for name, stored in stored_lash(connection, item_id).items():
        match stored:
            case (Decimal() as low, Decimal() as high, str(unit)):
                typed[name] = f"{low}-{high}{'in' if unit == 'in' else ''}"
            case (Decimal() as setting, str(unit)):
                typed[name] = f"{setting}{'in' if unit == 'in' else ''}"
            case str(condition):
                typed[name] = condition
    return typed


def stored_place(connection: "Connection", item_id: int) -> dict[str, object]:
    """Give what an engine is called, where it stands and since when, under the names a draft knows."""
    ((name, site, in_service, as_new, machine, position),) = fetch(
        connection,
        "select item.name, site.name, item.in_service_on, item.as_new, machine.tag, fitting.position"
        " from item left join site on site.id = item.site_id"
        " left join fitting on fitting.engine_id = item.id and fitting.to_on is null"
        " left join item machine on machine.id = fitting.machine_id where item.id = :id",
        id=item_id,
    )
    return {
        "name": name,
        "site": site,
        "in_service": day(in_service),
        "as_new": bool(as_new),
        "machine": machine,
        "position": position,
    }


def stored_meters(connection: "Connection", item_id: int) -> dict[str, list[Any]]:
    """Give the engine's own meters, their digits, and the figures it came with."""
    meters = fetch(
        connection,
        "select meter.kind, meter.unit, meter.digits, coalesce(meter.decimals, 0) from meter"
        " join meter_fit fit on fit.meter_id = meter.id and fit.item_id = meter.item_id"
        " where meter.item_id = :id and fit.to_on is null",
        id=item_id,
    )
    starts = fetch(connection, "select value, unit from start_figure where item_id = :id", id=item_id)
    return {
        "meter": [(kind, unit) for kind, unit, _, _ in meters],
        "meter_digits": [(kind, digits, decimals) for kind, _, digits, decimals in meters],
        "start_at": [Figure(Decimal(value), unit) for value, unit in starts],
    }


def stored_lash(connection: "Connection", item_id: int) -> dict[str, object]:
    """Give the newest lash spec, under the names a draft knows."""
    rows = fetch(
        connection,
        "select unit, intake_low, intake_high, exhaust_low, exhaust_high, set_intake, set_exhaust, condition"
        " from lash_spec where item_id = :id order by from_on desc, id desc limit 1",
        id=item_id,
    )
    if not rows:
        return {}
    unit, *texts, condition = rows[0]
    intake_low, intake_high, exhaust_low, exhaust_high, set_intake, set_exhaust = map(figure, texts)
    return {
        "lash_intake": (intake_low, intake_high, unit),
        "lash_exhaust": (exhaust_low, exhaust_high, unit),
        "lash_set_intake": (set_intake, unit),
        "lash_set_exhaust": (set_exhaust, unit),
        "lash_when": condition,
    }
