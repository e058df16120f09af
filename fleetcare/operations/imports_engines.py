"""Engines out of a file, one a row, with any option of `engine add`."""

from collections.abc import Sequence
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.quantities import Figure, to_base
from fleetcare.drafts.items import EngineDraft
from fleetcare.errors import FleetError
from fleetcare.exchange.csv_in import RowRefused
from fleetcare.operations.find import FoundItem, find_machine
from fleetcare.operations.imports_rows import Imported, Row, in_columns
from fleetcare.operations.items import add_item, stored_draft
from fleetcare.operations.rows import fetch
from fleetcare.operations.stored_items import stored_lash, stored_meters, stored_place

if TYPE_CHECKING:
    from sqlalchemy.orm import Session


def store_engines(
    session: "Session", rows: Sequence[Row[EngineDraft]], today: date, faults: list[RowRefused]
) -> Imported:
    """Add the engines that are not there yet; what is wrong with a row goes to `faults`.

    A row for an engine that is there must not contradict what is stored: an import adds, and changes nothing.
    """
    imported = Imported()
    first: dict[str, int] = {}
    for row in rows:
        tag = row.draft.tag
        before = first.setdefault(tag.casefold(), row.number)
        try:
            if before != row.number:
                raise RowRefused(row.number, "tag", f"{tag} stands in row {before} too", "keep one row for each engine")
            if _is_there(session, row, imported):
                imported.known += 1
            else:
                _add(session, row, today)
                imported.stored.append(tag)
        except RowRefused as fault:
            faults.append(fault)
    return imported


def _add(session: "Session", row: Row[EngineDraft], today: date) -> None:
    """Add one engine. Raises RowRefused."""
    try:
        if row.draft.machine is not None:
            find_machine(session.connection(), row.draft.machine)
    except FleetError as error:
        raise RowRefused(row.number, "machine", error.detail, error.remedy) from None
    try:
        add_item(session, row.draft, today)
    except FleetError as error:
        # What names no option is about the figures it starts from, where there are any.
        raise in_columns(
            row.number, error, EngineDraft, otherwise="start_at" if row.draft.start_at else "tag"
        ) from None


def _is_there(session: "Session", row: Row[EngineDraft], imported: Imported) -> bool:
    """Tell whether the engine of a row is there already. Raises RowRefused where it is there otherwise.

    One that was withdrawn since counts as there, which is noted: an import brings nothing back.
    """
    found = fetch(
        session.connection(),
        "select id, tag, is_engine, withdrawn_on from item where tag_key = :key"
        " order by withdrawn_on is not null, withdrawn_on desc",
        key=row.draft.tag.casefold(),
    )
    for item_id, tag, is_engine, withdrawn_on in found:
        if not is_engine and withdrawn_on is None:
            raise RowRefused(row.number, "tag", f"{tag} is a machine", "choose another tag")
        other = _differences(session, FoundItem(item_id, tag, bool(is_engine)), row.draft)
        if withdrawn_on is None and other:
            detail = f"{tag} is there already, with another {', '.join(column.replace('_', ' ') for column in other)}"
            remedy = f"leave the row out, or change the engine with fleetcare engine edit {tag}"
            raise RowRefused(row.number, other[0], detail, remedy)
        if withdrawn_on is None:
            return True
        if is_engine and not set(other) - {"machine", "position"}:
            imported.notes.append(
                f"row {row.number}: {tag} was withdrawn on {withdrawn_on}; add it anew with fleetcare engine add"
            )
            return True
    return False


def _differences(session: "Session", item: FoundItem, draft: EngineDraft) -> list[str]:
    """Give the columns whose cell says otherwise than what is stored; empty cells say nothing."""
    stored = {
        **stored_draft(session, item),
        **stored_place(session.connection(), item.id),
        **stored_lash(session.connection(), item.id),
    }
    given = [column for column in EngineDraft.model_fields if column in draft.model_fields_set - {"tag"}]
    lists = {column: said for column, said in stored_meters(session.connection(), item.id).items() if column in given}
    return [
        column
        for column in given
        if not (
            all(any(_says_same(one, other) for other in lists[column]) for one in getattr(draft, column))
            if column in lists
            else _says_same(getattr(draft, column), stored.get(column))
        )
    ]


def _says_same(given: object, stored: object) -> bool:
    """Compare a cell with what is stored: words whatever their case, and a part that is left open with anything."""
    match given, stored:
        case Figure(unit=None), Figure():
            return given.value == stored.value
        case Figure(unit=str(unit)), Figure(unit=str(other)):
            return (given.kind, to_base(given.value, unit)) == (stored.kind, to_base(stored.value, other))
        case (None, *said), (_, *kept):  # digits of a dial whose kind goes without saying
            return said == kept
        case str(), str():
            return given.casefold() == stored.casefold()
    return given == stored
