"""What a machine's meter counts for the engines fitted in it, whenever its readings are written down."""

from datetime import date
from decimal import Decimal

from fleetcare.context import Context
from fleetcare.domain.quantities import Kind
from fleetcare.drafts.items import EngineDraft, MachineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.work import ReadingDraft
from fleetcare.operations.find import find_engine, find_item
from fleetcare.operations.items import add_item, edit_item, fit_engine
from fleetcare.operations.load import load_counters
from fleetcare.operations.readings import record_reading

TODAY = date(2026, 5, 1)


def machine(ctx: Context, tag: str, **values: object) -> None:
    """Add a machine."""
    with ctx.write() as session:
        add_item(session, read_draft(MachineDraft, {"tag": tag, **values}), TODAY)


def lorry(ctx: Context, tag: str) -> None:
    """Add a lorry with an odometer that began at 20000 km."""
    machine(ctx, tag, meter=["distance"], in_service="2025-01-01", start_at=["20000km"])


def engine(ctx: Context, tag: str, **values: object) -> None:
    """Add an engine."""
    with ctx.write() as session:
        add_item(session, read_draft(EngineDraft, {"tag": tag, **values}), TODAY)


def reading(ctx: Context, tag: str, value: str, on: str, **values: object) -> None:
    """Read a meter."""
    with ctx.write() as session:
        record_reading(session, read_draft(ReadingDraft, {"tag": tag, "value": value, "on": on, **values}))


def fit(ctx: Context, tag: str, machine_tag: str | None, on: str) -> None:
    """Move an engine."""
    with ctx.write() as session:
        fit_engine(session, find_engine(session.connection(), tag), machine_tag, date.fromisoformat(on))


def life(ctx: Context, tag: str, on: date = TODAY) -> Decimal:
    """The latest life total of distance."""
    with ctx.read() as connection:
        item = find_item(connection, tag)
        latest = load_counters(connection, [item.id], on)[item.id][Kind.DISTANCE].latest
    assert latest is not None
    return latest.life


def test_an_engine_counts_from_what_the_odometer_showed_when_it_was_fitted_though_that_was_typed_later(
    ctx: Context,
) -> None:
    lorry(ctx, "LR-1")
    engine(ctx, "E-1", machine="LR-1", in_service="2025-06-01")
    reading(ctx, "LR-1", "34000", "2026-04-01")
    reading(ctx, "LR-1", "30000", "2025-06-01")
    assert life(ctx, "E-1") == 4000


def test_between_readings_the_odometer_is_taken_to_the_tenth(ctx: Context) -> None:
    lorry(ctx, "LR-1")
    engine(ctx, "E-1", machine="LR-1", in_service="2025-01-08")
    reading(ctx, "LR-1", "21000", "2025-01-22")
    assert life(ctx, "E-1") == Decimal("666.7")


def test_before_the_first_reading_that_one_is_taken(ctx: Context) -> None:
    machine(ctx, "LR-1", meter=["distance"])
    engine(ctx, "E-1", machine="LR-1", in_service="2025-06-01")
    reading(ctx, "LR-1", "34000", "2026-04-01")
    reading(ctx, "LR-1", "34500", "2026-04-20")
    assert life(ctx, "E-1") == 500


def test_an_engine_moved_to_another_machine_goes_on_from_its_own_life_total(ctx: Context) -> None:
    lorry(ctx, "LR-1")
    machine(ctx, "LR-2", meter=["distance"], in_service="2025-01-01", start_at=["50000km"])
    engine(ctx, "E-1", machine="LR-1", in_service="2025-06-01", start_at=["7000km"])
    for tag, value, on in (
        ("LR-1", "30000", "2025-06-01"),
        ("LR-1", "35000", "2026-02-01"),
        ("LR-2", "60000", "2026-02-01"),
    ):
        reading(ctx, tag, value, on)
    fit(ctx, "E-1", "LR-2", "2026-02-01")
    reading(ctx, "LR-1", "36000", "2026-03-01")
    reading(ctx, "LR-2", "61500", "2026-03-01")
    assert life(ctx, "E-1", date(2026, 2, 1)) == 12000
    assert life(ctx, "E-1") == 13500


def test_a_reading_typed_late_moves_what_was_counted_in_the_machine_left(ctx: Context) -> None:
    lorry(ctx, "LR-1")
    lorry(ctx, "LR-2")
    engine(ctx, "E-1", machine="LR-1", in_service="2025-01-01")
    reading(ctx, "LR-1", "35000", "2026-01-01")
    fit(ctx, "E-1", "LR-2", "2026-02-01")
    reading(ctx, "LR-2", "24000", "2026-02-01")
    assert life(ctx, "E-1") == 15000
    reading(ctx, "LR-1", "35900", "2026-02-01")
    assert life(ctx, "E-1") == 15900


def test_a_meter_given_to_a_machine_later_counts_for_its_engine_from_its_own_start(ctx: Context) -> None:
    machine(ctx, "LR-1")
    engine(ctx, "E-1", machine="LR-1", in_service="2025-01-01")
    with ctx.write() as session:
        values = {"tag": "LR-1", "meter": ["distance"], "in_service": "2025-06-01", "start_at": ["50000km"]}
        edit_item(session, find_item(session.connection(), "LR-1"), read_draft(MachineDraft, values), date(2025, 6, 1))
    reading(ctx, "LR-1", "52000", "2026-01-01")
    assert life(ctx, "E-1") == 2000


def test_an_odometer_that_was_replaced_goes_on_counting_for_the_engine(ctx: Context) -> None:
    lorry(ctx, "LR-1")
    engine(ctx, "E-1", machine="LR-1", in_service="2025-01-01")
    reading(ctx, "LR-1", "40", "2026-01-10", replaced=["35000", "0"], unmetered="100km")
    assert life(ctx, "E-1") == 15140


def test_an_odometer_that_went_round_counts_its_turns_from_the_day_the_engine_was_fitted(ctx: Context) -> None:
    machine(ctx, "LR-1", meter=["distance"], meter_digits="5.0", in_service="2025-01-01", start_at=["99000km"])
    reading(ctx, "LR-1", "99900", "2025-02-01")
    reading(ctx, "LR-1", "400", "2025-03-01", rolled_over=True)
    engine(ctx, "E-1", machine="LR-1", in_service="2025-03-01")
    reading(ctx, "LR-1", "1000", "2025-04-01")
    assert life(ctx, "E-1") == 600
