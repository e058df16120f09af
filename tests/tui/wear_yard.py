"""Compression and oil of PS-1 over its life, typed in as sheets: what its page draws."""

from pathlib import Path

from tests.tui.conftest import type_in


def sheet(db: Path, kind: str, on: str, *rows: str, tag: str = "PS-1", gauge: str = "", at: str = "") -> None:
    """Measure an engine."""
    file = db.with_name(f"{kind}.csv")
    file.write_text("\n".join(["quantity,point,phase,value,unit", *rows]), encoding="utf-8")
    said = [*(["--gauge", gauge] if gauge else []), *(["--at", at] if at else [])]
    type_in(db, "measure", kind, tag, str(file), "--on", on, *said, "--sure")


def compressions(*figures: str, unit: str = "bar") -> tuple[str, ...]:
    """The rows of a compression sheet, cylinder by cylinder."""
    return tuple(f"pressure,{place},dry,{text},{unit}" for place, text in enumerate(figures, start=1))


def sample(hours: str, iron: str, *more: str) -> tuple[str, ...]:
    """The rows of an oil sample without top-up."""
    return ("top_up,,,0,L", f"hours_on_oil,,,{hours},h", f"Fe,,,{iron},ppm", *more)
