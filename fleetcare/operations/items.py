"""Add, edit, fit and follow engines and machines."""

from datetime import date
from decimal import Decimal
from typing import TYPE_CHECKING, Any

from sqlalchemy import select
from sqlmodel import col

from fleetcare.db.tables import Engine, Fitting, Item, LashSpec, StartFigure
from fleetcare.domain.quantities import plain
from fleetcare.drafts.items import EngineDraft, ItemDraft
from fleetcare.drafts.reading_in import as_option
from fleetcare.errors import Refused
from fleetcare.operations.find import FoundItem, find_machine
from fleetcare.operations.fit_meters import add_meters, count_with_machine, restate_start, set_digits, stop_counting
from fleetcare.operations.names import site_id
from fleetcare.operations.rows import fetch
from fleetcare.operations.stored_items import NAMEPLATE
from fleetcare.rules.nameplate import UNIT_WORDS

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def add_item(session: "Session", draft: ItemDraft, today: date) -> FoundItem:
    """Add an engine or machine with its meters, start figures and place. Refuses a tag in use."""
    _refuse_taken(session, draft.tag)
    is_engine = isinstance(draft, EngineDraft)
    if isinstance(draft, EngineDraft) and draft.machine is not None:
        find_machine(session.connection(), draft.machine)  # before this item's own tag could be taken for it
    row = Item(
        tag=draft.tag,
        tag_key=draft.tag.casefold(),
        is_engine=is_engine,
        name=draft.name or "",
        site_id=site_id(session, draft.site),
        in_service_on=draft.in_service,
        as_new=draft.as_new,
    )
    session.add(row)
    session.flush()
    item = FoundItem(row.id, row.tag, is_engine)
    if isinstance(draft, EngineDraft):
        session.add(Engine(item_id=item.id, **_nameplate(draft)))
        _add_lash_spec(session, item.id, draft, today)
    add_meters(session, item, draft, draft.in_service)
    set_digits(session, item, draft)
    if isinstance(draft, EngineDraft) and draft.machine is not None:
        fit_engine(session, item, draft.machine, draft.in_service or today, draft.position or "")
    restate_start(session, item, draft, is_new=True)
    session.flush()
    return item


def stored_draft(session: "Session", item: FoundItem) -> dict[str, object]:
    """Give the nameplate an engine has, under the names a draft knows, to lay an edit over."""
    engine = session.scalars(select(Engine).where(col(Engine.item_id) == item.id)).one_or_none()
    if engine is None:
        return {}
    return {field: value for field, column in NAMEPLATE.items() if (value := getattr(engine, column)) not in (None, "")}


def edit_item(session: "Session", item: FoundItem, draft: ItemDraft, today: date) -> None:
    """Change what a draft gives; what it leaves out stays. A new lash spec holds from `today` on, the first always."""
    row = session.get_one(Item, item.id)
    if draft.name is not None:
        row.name = draft.name
    if draft.site is not None:
        row.site_id = site_id(session, draft.site)
    if draft.in_service is not None:
        _refuse_start_of_another_day(session, row, draft)
        row.in_service_on = draft.in_service
    row.as_new = row.as_new or draft.as_new
    if isinstance(draft, EngineDraft):
        engine = session.scalars(select(Engine).where(col(Engine.item_id) == item.id)).one()
        for column, value in _nameplate(draft).items():
            setattr(engine, column, value)
        _add_lash_spec(session, item.id, draft, today)
    add_meters(session, item, draft, today)
    set_digits(session, item, draft)
    restate_start(session, item, draft, is_new=False)
    session.flush()


def fit_engine(session: "Session", engine: FoundItem, machine_tag: str | None, on: date, position: str = "") -> None:
    """Fit an engine in a machine from a day on, or take it out of its machine where no machine is named.

    What the old machine's meters counted for it ends that day; what the new one's count begins.
    """
    connection = session.connection()
    machine = find_machine(connection, machine_tag) if machine_tag is not None else None
    current = session.scalars(
        select(Fitting).where(col(Fitting.engine_id) == engine.id, col(Fitting.to_on).is_(None))
    ).one_or_none()
    if current is None and machine is None:
        raise Refused(f"{engine.tag} is in no machine", "nothing needs to be done")
    if current is None:
        _refuse_overlap(session, engine, on)
    if current is not None:
        if machine is not None and current.machine_id == machine.id and current.position == position:
            raise Refused(f"{engine.tag} is in {machine.tag} since {current.from_on}", "name another machine")
        if on < current.from_on:
            raise Refused(f"{engine.tag} is in its machine since {current.from_on}, after {on}", "give a later --on")
        current.to_on = on
        stop_counting(session, engine, current.machine_id, on)
    if machine is not None:
        session.add(Fitting(engine_id=engine.id, machine_id=machine.id, position=position, from_on=on))
        count_with_machine(session, engine, machine, on)
    session.flush()


def _refuse_overlap(session: "Session", engine: FoundItem, on: date) -> None:
    """Refuse a day on which the engine was in another machine, though it is in none any more."""
    ended = session.scalars(
        select(Fitting).where(col(Fitting.engine_id) == engine.id).order_by(col(Fitting.to_on).desc())
    ).first()
    if ended is not None and ended.to_on is not None and on < ended.to_on:
        raise Refused(f"{engine.tag} was in a machine until {ended.to_on}, after {on}", "give a later --on")


def _refuse_start_of_another_day(session: "Session", row: Item, draft: ItemDraft) -> None:
    """Refuse to move the first day away from under the figures that were read on it."""
    figures = session.scalars(select(StartFigure).where(col(StartFigure.item_id) == row.id)).all()
    if figures and not draft.start_at and draft.in_service != row.in_service_on:
        shown = ", ".join(f"{plain(figure.value)} {figure.unit}" for figure in figures)
        raise Refused(f"{row.tag} started at {shown} on {row.in_service_on}", "give --start-at for the new day as well")


def _nameplate(draft: EngineDraft) -> dict[str, Any]:
    return {column: value for field, column in NAMEPLATE.items() if (value := getattr(draft, field)) is not None}


def _refuse_taken(session: "Session", tag: str) -> None:
    rows = fetch(
        session.connection(),
        "select tag, is_engine from item where tag_key = :key and withdrawn_on is null",
        key=tag.casefold(),
    )
    if rows:
        what = "an engine" if rows[0][1] else "a machine"
        raise Refused(f"the tag {rows[0][0]!r} belongs to {what} in use", "choose another tag")


def _add_lash_spec(session: "Session", item_id: int, draft: EngineDraft, from_on: date) -> None:
    """Add a lash spec from what a draft gives, over the one in force. Refuses to mix mm and inches.

    The first one holds on every day, as the limits were what they are before somebody typed them.
    """
    if draft.lash_unit is None and draft.lash_when is None:
        return
    newest = session.scalars(
        select(LashSpec).where(col(LashSpec.item_id) == item_id).order_by(col(LashSpec.from_on), col(LashSpec.id))
    ).all()
    old = newest[-1] if newest else None
    intake_low, intake_high, _ = draft.lash_intake or (None, None, None)
    exhaust_low, exhaust_high, _ = draft.lash_exhaust or (None, None, None)
    given = {
        "intake_low": intake_low,
        "intake_high": intake_high,
        "exhaust_low": exhaust_low,
        "exhaust_high": exhaust_high,
        "set_intake": draft.lash_set_intake[0] if draft.lash_set_intake else None,
        "set_exhaust": draft.lash_set_exhaust[0] if draft.lash_set_exhaust else None,
    }
    kept = {name: getattr(old, name) for name, value in given.items() if value is None and old is not None}
    kept = {name: value for name, value in kept.items() if value is not None}
    if old is not None and kept and draft.lash_unit not in {None, old.unit}:
        first = as_option(next(iter(draft.lash_figures())))
        units = f"{UNIT_WORDS[str(draft.lash_unit)]}, the lash figures that stay are in {UNIT_WORDS[old.unit]}"
        raise Refused(f"{first} is in {units}", "give it in the same unit, or all of them anew")
    figures = given | kept
    for side in ("intake", "exhaust"):
        _refuse_setting_out_of_range(side, figures[f"{side}_low"], figures[f"{side}_high"], figures[f"set_{side}"])
    session.add(
        LashSpec(
            item_id=item_id,
            from_on=from_on if old is not None else date.min,
            unit=draft.lash_unit or (old.unit if old is not None else "mm"),
            condition=draft.lash_when or (old.condition if old is not None else "any"),
            **figures,
        )
    )


def _refuse_setting_out_of_range(side: str, low: Decimal | None, high: Decimal | None, setting: Decimal | None) -> None:
    """Refuse to set a valve to where its check would find it out."""
    if low is not None and high is not None and setting is not None and not low <= setting <= high:
        raise Refused(
            f"--lash-set-{side} {setting} lies outside the check range {low} to {high}", "mend it, or the range"
        )
