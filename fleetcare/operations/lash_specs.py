"""Lash specs out of rows: the check ranges and settings of one engine or of many."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Side
from fleetcare.domain.sheets import LashSpec
from fleetcare.operations.rows import Row, fetch, figure, grouped, known_day

if TYPE_CHECKING:
    from sqlalchemy import Connection

USUAL_VALVES = 2
"""Per cylinder, where the nameplate does not say: common practice."""


def load_specs(connection: "Connection", item_id: int) -> tuple[LashSpec, ...]:
    """Load an engine's lash specs in the order they came into force."""
    return specs_of(connection, [item_id]).get(item_id, ())


def specs_of(connection: "Connection", item_ids: Sequence[int]) -> dict[int, tuple[LashSpec, ...]]:
    """Load the lash specs of some engines, each one's in the order they came into force, by engine."""
    rows = fetch(
        connection,
        "select item_id, from_on, unit, condition, intake_low, intake_high, exhaust_low, exhaust_high, set_intake,"
        " set_exhaust from lash_spec where item_id in :ids order by from_on, id",
        ids=list(item_ids),
    )
    return {item: tuple(_spec(row) for row in found) for item, found in grouped(rows).items()}


def _spec(row: Row) -> LashSpec:
    _, from_on, unit, condition, *texts = row
    intake_low, intake_high, exhaust_low, exhaust_high, set_intake, set_exhaust = map(figure, texts)
    ranges = {Side.INTAKE: (intake_low, intake_high), Side.EXHAUST: (exhaust_low, exhaust_high)}
    settings = {Side.INTAKE: set_intake, Side.EXHAUST: set_exhaust}
    return LashSpec(
        from_on=known_day(from_on),
        unit=unit,
        condition=condition,
        ranges={side: (low, high) for side, (low, high) in ranges.items() if low is not None and high is not None},
        settings={side: setting for side, setting in settings.items() if setting is not None},
    )
