"""An engine with a sheet that is not stored yet, loaded and judged as it will be once it is.

What is said while a sheet is typed is then what is said after it was stored: the same loading, on a trial that has the
dial figures of its entry, and the same rules of the same day.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass, field, replace
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.measured import OIL, TopUp
from fleetcare.domain.meters import LifeFigure, Reading
from fleetcare.domain.quantities import Amount, Figure, to_base
from fleetcare.domain.rule_book import RuleBook
from fleetcare.domain.sheets import Judgement, Phase, Sheet, SheetValue
from fleetcare.operations.against_past import NewReading, dial_of, hold_against_past, what_falls_off
from fleetcare.operations.entries import NOT_YET
from fleetcare.operations.families import Families
from fleetcare.operations.find import FoundItem, find_meters, pick_meter
from fleetcare.operations.findings import EngineFinding, engine_findings, judge_sheets
from fleetcare.operations.load import Trial
from fleetcare.operations.measured import (
    EngineSheets,
    grade_in,
    load_engine_sheets,
    load_fresh,
    load_hours,
    measured_sheet,
)
from fleetcare.operations.shop_book import usable_book
from fleetcare.operations.top_ups import load_top_ups
from fleetcare.rules.judge_engine import JudgedEngine
from fleetcare.rules.oil_fills import with_logged

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class EntryAhead:
    """The entry a sheet will come with: its dial figures, what explains those that break with their meter's past, and the
    oil topped up along with it.

    With a `number` it is stored already, and its sheet is to be mended.
    """

    figures: Sequence[Figure] = ()
    explained: Mapping[str, bool] = field(default_factory=dict)
    topped_up: Amount | None = None
    number: int | None = None


NEW_ENTRY = EntryAhead()
"""One without a dial figure."""


@dataclass(frozen=True, slots=True)
class SheetAhead:
    """What a sheet of a day will be judged by: those before it, its hours (life total), the rules, new oil by grade.

    `top_ups` are those in the log up to its day, that of its own entry among them.
    """

    found: EngineSheets
    hours: LifeFigure | None
    book: RuleBook
    fresh: Mapping[str, tuple[SheetValue, ...]]
    top_ups: Sequence[TopUp]

    def judge(self, sheet: Sheet, lash: tuple[Judgement, ...] = ()) -> JudgedEngine:
        """Judge the engine as if the sheet were stored; `lash` is how its gaps stand."""
        hours = self.hours.value if self.hours is not None else None
        new = with_logged(measured_sheet(replace(sheet, entry=NOT_YET), hours), self.top_ups)
        sheets = (*self.found.sheets, new)
        grade, behind = grade_in(sheets, self.found.engine), self.found.background
        told = [value for value in sheet.values if value.phase is Phase.NEW and grade]
        fresh = {value.quantity: value for value in (*self.fresh.get(grade, ()), *told)}
        background = replace(behind, fresh=tuple(fresh.values()), lash={**behind.lash, NOT_YET: lash})
        return judge_sheets(replace(self.found, sheets=sheets, background=background), self.book)


def resting_on_it(judged: JudgedEngine) -> tuple[EngineFinding, ...]:
    """Give the findings that rest on a value of the sheet not stored yet."""
    return tuple(one for one in engine_findings(judged) if NOT_YET in one.sheets)


def sheet_ahead(
    connection: "Connection", item: FoundItem, kind: str, on: date, today: date, entry: EntryAhead
) -> SheetAhead:
    """Load what a sheet of an engine on a day will be judged by, meters and rules as seen today."""
    trial = _trial(connection, item, on, entry)
    (found,) = load_engine_sheets(connection, today, [item.id], newest=(on, entry.number or NOT_YET), trial=trial)
    kept = tuple(sheet for sheet in found.sheets if sheet.entry != entry.number)
    hours = load_hours(connection, item.id, entry.number or NOT_YET, on, today, trial)
    family = Families(connection, today).of(item.id, on) if kind == OIL else found.background.family
    return SheetAhead(
        found=replace(found, sheets=kept, background=replace(found.background, family=family)),
        hours=hours,
        book=usable_book(connection, today)[0],
        fresh=load_fresh(connection, on),
        top_ups=[
            *load_top_ups(connection, [item.id], on, today, trial).get(item.id, ()),
            *(
                [TopUp(hours.value, to_base(entry.topped_up.value, entry.topped_up.unit))]
                if hours is not None and entry.topped_up
                else []
            ),
        ],
    )


def _trial(connection: "Connection", item: FoundItem, on: date, entry: EntryAhead) -> Trial:
    """Give the readings the entry will come with, and those that will count no more, as storing it does."""
    readings: list[Reading] = []
    suspects: set[int] = set()
    for figure in entry.figures:
        meter = pick_meter(find_meters(connection, item.id, on), figure, item.tag)
        own = Reading(0, meter.id, on, dial_of(figure, meter), entry_id=NOT_YET)
        if hold_against_past(connection, item, meter, [NewReading(on, figure)])[1]:
            has_turned = entry.explained.get("rolled_over", False)
            trial, collisions = hold_against_past(connection, item, meter, [NewReading(on, figure, has_turned)])
            readings.append(replace(own, rolled_over=has_turned, entry_id=None))
            suspects |= set(what_falls_off(connection, meter, trial)) if collisions else set()
        readings.append(own)
    return Trial(tuple(replace(one, id=-1 - place) for place, one in enumerate(readings)), frozenset(suspects))
