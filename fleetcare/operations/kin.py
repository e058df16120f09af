"""Which engines are alike by their nameplates; what is usual for them is in `families`, which takes longer to load."""

from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.operations.rows import fetch
from fleetcare.rules.j300 import grade_key

if TYPE_CHECKING:
    from sqlalchemy import Connection


class Kin:
    """Which engines are of one family, as their nameplates stand; read when first asked for."""

    def __init__(self, connection: "Connection") -> None:
        self._connection = connection
        self._families: dict[int, tuple[int, ...]] | None = None

    def of(self, item: int) -> tuple[int, ...]:
        """Give all engines of the family of one, itself among them; itself alone where its nameplate says too little."""
        if self._families is None:
            self._families = self._read()
        return self._families.get(item, (item,))

    def _read(self) -> dict[int, tuple[int, ...]]:
        alike: dict[tuple[str, int, Decimal, Decimal, str], list[int]] = {}
        for item, fuel, cylinders, bore, stroke, grade in fetch(
            self._connection,
            "select item_id, fuel, cylinders, bore_mm, stroke_mm, oil_grade from engine where fuel <> ''"
            " and cylinders is not null and bore_mm is not null and stroke_mm is not null order by item_id",
        ):
            key = (fuel.casefold(), cylinders, Decimal(bore), Decimal(stroke), grade_key(grade))
            alike.setdefault(key, []).append(item)
        return {item: tuple(items) for items in alike.values() for item in items}
