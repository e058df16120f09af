"""What the figures on a nameplate make of each other."""

from collections.abc import Mapping
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.operations.find import find_item
from fleetcare.operations.rows import fetch
from fleetcare.rules.explain import Label
from fleetcare.rules.geometry import displacement, mean_piston_speed

if TYPE_CHECKING:
    from sqlalchemy import Connection


def derived_figures(plate: Mapping[str, object]) -> list[Label]:
    """Give displacement and mean piston speed as labels, as far as the nameplate's columns allow."""
    bore, stroke, cylinders, rpm = (_figure(plate, name) for name in ("bore_mm", "stroke_mm", "cylinders", "rated_rpm"))
    labels = []
    if bore is not None and stroke is not None and cylinders is not None:
        swept = displacement(bore, stroke, int(cylinders))
        ratio = f"bore/stroke {swept.bore_stroke_ratio:.2f}, {swept.shape}"
        labels.append(("displacement", f"{swept.litres:.2f} L ({ratio})"))
    if stroke is not None and rpm is not None:
        speed = mean_piston_speed(stroke, rpm)
        labels.append(("mean piston speed", f"{speed:.1f} m/s at rated speed"))
    return labels


def _figure(plate: Mapping[str, object], name: str) -> Decimal | None:
    value = plate.get(name)
    return Decimal(str(value)) if value is not None else None


def plate_values(connection: "Connection", tag: str) -> dict[str, str]:
    """Give what an engine's nameplate says, column by column, what it does not say left out; nothing for a machine."""
    item = find_item(connection, tag)
    columns = [row[1] for row in fetch(connection, "pragma table_info(engine)")]
    rows = fetch(connection, "select * from engine where item_id = :id", id=item.id)
    return {
        name: str(value) for row in rows for name, value in zip(columns, row, strict=True) if value not in (None, "")
    }
