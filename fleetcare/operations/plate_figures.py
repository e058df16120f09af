"""What the figures on a nameplate make of each other."""

from collections.abc import Mapping
from decimal import Decimal

from fleetcare.rules.explain import Label
from fleetcare.rules.geometry import displacement, mean_piston_speed


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
