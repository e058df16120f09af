"""Sheets out of rows, and of the lash sheet what decides how a valve is judged, and what the sheets before said."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field
from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Adjuster, Bridged, Layout, ValveTrain
from fleetcare.domain.sheets import LASH, SHIM, LashPoint, LashSpec, Phase, Sheet, SheetValue, spec_on
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem
from fleetcare.operations.lash_specs import USUAL_VALVES, load_specs
from fleetcare.operations.rows import day, fetch, figure, grouped, known_day
from fleetcare.rules.explain_lash import LastValue
from fleetcare.rules.lash_points import Stop, banks, lash_points, lash_walk
from fleetcare.rules.nameplate import check_firing_order

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class LashForm:
    """All that a lash sheet of one engine on one day is drawn, walked and judged by.

    `points` and `banks` are as the engine stands, `stops` as the crank is turned. `last` is what each point showed last
    before, `shims` the shims (mm) fitted as far as a sheet said. `notes` is what had to be assumed.
    """

    tag: str
    on: date
    train: ValveTrain
    points: tuple[LashPoint, ...]
    banks: tuple[tuple[int, ...], ...]
    stops: tuple[Stop, ...]
    spec: LashSpec | None
    last: Mapping[str, LastValue] = field(default_factory=dict)
    shims: Mapping[str, Decimal] = field(default_factory=dict)
    notes: tuple[str, ...] = ()


def lash_form(connection: "Connection", item: FoundItem, on: date, *, but_from: int | None = None) -> LashForm:
    """Load the form of an engine's lash sheet on a day.

    What was last is that of the sheets up to that day; of that day itself only those of entries before `but_from`,
    where that is given. Refuses a machine, and an engine whose cylinders nobody stated.
    """
    train, notes = load_train(connection, item)
    sheets = load_sheets(connection, item.id, on)
    if but_from is not None:
        sheets = [sheet for sheet in sheets if (sheet.on, sheet.entry) < (on, but_from)]
    return LashForm(
        tag=item.tag,
        on=on,
        train=train,
        points=lash_points(train),
        banks=banks(train),
        stops=lash_walk(train),
        spec=spec_on(load_specs(connection, item.id), on),
        last=last_values(sheets, LASH),
        shims={point: last.value.ends[1] for point, last in last_values(sheets, SHIM).items()},
        notes=notes,
    )


def open_form(connection: "Connection", item: FoundItem, on: date) -> LashForm:
    """Load the form for a new sheet as `lash_form` does; refuses an engine whose adjusters leave no gap."""
    form = lash_form(connection, item, on)
    if form.train.adjuster.kind == "hydraulic":
        raise Refused(
            f"the hydraulic adjusters of {item.tag} leave no gap to measure",
            f"if it has others, say so with fleetcare engine edit {item.tag} --adjuster",
        )
    return form


def load_train(connection: "Connection", item: FoundItem) -> tuple[ValveTrain, tuple[str, ...]]:
    """Load an engine's valve train, and what had to be assumed of it. Refuses what has no valves known."""
    rows = fetch(
        connection,
        "select cylinders, valves_per_cylinder, bridged, layout, numbering, firing_order, adjuster, screw_pitch_mm,"
        " screw_at, rocker_ratio, shim_step_mm from engine where item_id = :id",
        id=item.id,
    )
    if not rows:
        raise Refused(f"{item.tag} is a machine and has no valves", "name one of its engines")
    cylinders, valves, bridged, layout, numbering, order, adjuster, pitch, screw_at, ratio, step = rows[0]
    if cylinders is None:
        raise Refused(
            f"the number of cylinders of {item.tag} is not known",
            f"give it with fleetcare engine edit {item.tag} --cylinders N",
        )
    train = ValveTrain(
        cylinders=cylinders,
        valves_per_cylinder=valves or USUAL_VALVES,
        bridged=Bridged(bridged or Bridged.NONE),
        layout=Layout(layout) if layout else None,
        numbering=numbering,
        firing_order=check_firing_order(order, cylinders) if order else (),
        adjuster=Adjuster(adjuster, figure(pitch), screw_at, figure(ratio), figure(step)),
    )
    assumed = f"{item.tag} is taken to have {USUAL_VALVES} valves per cylinder, as nobody stated how many"
    return train, () if valves else (assumed,)


def load_sheets(connection: "Connection", item_id: int, on: date, kind: str = LASH) -> list[Sheet]:
    """Load the sheets of an engine up to a day, oldest first; those of superseded or voided entries count no more."""
    rows = fetch(
        connection,
        "select sheet.id, sheet.entry_id, sheet.taken_on, sheet.conditions, sheet.gauge, coalesce(person.name, ''),"
        " entry.note, sheet.lab_number, sheet.received_on from sheet join log_entry entry on entry.id = sheet.entry_id"
        " left join person on person.id = entry.person_id"
        " where sheet.item_id = :id and sheet.kind = :kind and sheet.taken_on <= :on and not entry.is_void"
        " and not exists (select 1 from log_entry later where later.supersedes_id = entry.id)"
        " order by sheet.taken_on, sheet.entry_id, sheet.id",
        id=item_id,
        kind=kind,
        on=on.isoformat(),
    )
    values = load_values(connection, [row[0] for row in rows])
    return [
        Sheet(entry, kind, known_day(taken_on), values.get(sheet, ()), condition, gauge, by, note, lab, day(received))
        for sheet, entry, taken_on, condition, gauge, by, note, lab, received in rows
    ]


def load_values(connection: "Connection", sheet_ids: Sequence[int]) -> dict[int, tuple[SheetValue, ...]]:
    """Load the values of some sheets as they were entered, by sheet."""
    rows = fetch(
        connection,
        "select sheet_id, quantity, point, phase, value, low, high, unit, qualifier from sheet_value"
        " where sheet_id in :ids order by id",
        ids=list(sheet_ids),
    )
    return {
        sheet: tuple(
            SheetValue(quantity, point, Phase(phase), figure(value), figure(low), figure(high), unit, qualifier)
            for _, quantity, point, phase, value, low, high, unit, qualifier in found
        )
        for sheet, found in grouped(rows).items()
    }


def last_values(sheets: Sequence[Sheet], quantity: str) -> dict[str, LastValue]:
    """Give what each point showed last: the value left, or found where it was left alone. Sheets are oldest first."""
    last: dict[str, LastValue] = {}
    for sheet in sheets:
        for phase in (Phase.FOUND, Phase.LEFT):
            for value in sheet.values:
                if (value.quantity, value.phase) == (quantity, phase):
                    last[value.point] = LastValue(value, sheet.on)
    return last
