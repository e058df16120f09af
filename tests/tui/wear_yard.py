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


def wear(db: Path) -> None:
    """Let cylinder 3 of PS-1 fall while the others stand, and iron rise in its oil: two samples of a fill, four of the next."""
    type_in(db, "engine", "edit", "PS-1", "--sump", "12")
    for on, at, third in (
        ("2024-08-01", "412", "25.9"),
        ("2025-05-20", "820.5", "24.2"),
        ("2025-12-01", "40", "22.9"),
        ("2026-04-30", "302", "21.8"),
    ):
        sheet(
            db,
            "compression",
            on,
            *compressions("26.0", "26.1", third, "26.2", "26.0", "26.1"),
            gauge="C 2",
            at=f"{at}h",
        )
    for on, at, hours, iron in (
        ("2025-05-20", "820.5", "120", "21"),
        ("2025-09-20", "960.5", "260", "38"),
        ("2025-12-20", "80", "60", "19"),
        ("2026-01-20", "140", "120", "37"),
        ("2026-02-20", "200", "180", "58"),
        ("2026-04-20", "260", "240", "76"),
    ):
        sheet(db, "oil", on, *sample(hours, iron, *_others(int(hours))), gauge="Lab A", at=f"{at}h")


def _others(hours: int) -> tuple[str, ...]:
    """What else a laboratory says of an oil that ran so many hours."""
    return (
        *("water,,,<0.05,%", "fuel,,,ND,%", f"soot,,,{hours / 200:.1f},%", f"Si,,,{4 + hours // 40},ppm", "Na,,,4,ppm"),
        *(
            f"kv100,,,{14.6 - hours / 300:.1f},",
            "kv100,,new,14.7,",
            f"tbn,,,{10.2 - hours / 60:.1f},",
            "tbn,,new,10.2,",
        ),
        *(f"Cr,,,{1 + hours // 90},ppm", f"Al,,,{2 + hours // 80},ppm", f"Cu,,,{3 + hours // 30},ppm", "Pb,,,<2,ppm"),
        "Fe,,new,2,ppm",
    )
