"""Enter the history of the demo fleet into a database of its own."""

from collections.abc import Callable, Mapping
from datetime import UTC, date, datetime, time
from decimal import Decimal
from itertools import count
from pathlib import Path
from tempfile import TemporaryDirectory
from typing import TYPE_CHECKING

from fleetcare.db.session import copy, writing
from fleetcare.demo.history import history
from fleetcare.demo.steps import Step, Verb
from fleetcare.domain.engines import Status
from fleetcare.drafts.fields import parse_kind
from fleetcare.drafts.items import EngineDraft, MachineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.drafts.work import CorrectionDraft, DeferralDraft, LogDraft, ReadingDraft
from fleetcare.operations.correct import correct_entry
from fleetcare.operations.deferrals import defer
from fleetcare.operations.find import find_engine, find_item
from fleetcare.operations.items import add_item, fit_engine
from fleetcare.operations.log import record_work
from fleetcare.operations.readings import record_reading, void_reading
from fleetcare.operations.settings import change_setting
from fleetcare.operations.spells import change_status, set_factor
from fleetcare.operations.tasks import add_task
from fleetcare.operations.upkeep import refuse_taken

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

_EVENING = time(16, 30, tzinfo=UTC)


class Stamps:
    """Moments and uids for the rows of a build: each entry of the evening of its day, uids counted from 1.

    With them the same history always makes the same rows.
    """

    def __init__(self) -> None:
        self.day = date.min
        self._numbers = count(1)

    def moment(self) -> datetime:
        """Give the evening of the day now being entered."""
        return datetime.combine(self.day, _EVENING)

    def uid(self) -> str:
        """Give the next uid."""
        return f"{next(self._numbers):032x}"


def build(out: Path, anchor: date) -> None:
    """Write the demo fleet as it stands on the anchor day to the new file `out`; the same day gives the same rows.

    It is built in a place of its own and copied when whole, so that no half of one ever carries the name. Raises
    Refused where `out` is there already or the day leaves no room for a history, NoDatabase where it cannot be written.
    """
    refuse_taken(out)
    steps, stamps = history(anchor), Stamps()
    with TemporaryDirectory() as folder:
        path = Path(folder, "demo.db")
        with writing(path, stamps.moment, stamps.uid) as session:
            _enter(session, steps, stamps)
        copy(path, out)


def _enter(session: "Session", steps: list[Step], stamps: Stamps) -> None:
    stored: dict[str, int] = {}
    for step in steps:
        stamps.day = step.on
        number = _VERBS[step.verb](session, step, stored)
        if step.name and number is not None:
            stored[step.name] = number


def _setting(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    change_setting(session, str(step.values["name"]), str(step.values["value"]))


def _machine(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    add_item(session, read_draft(MachineDraft, step.values), step.on)


def _engine(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    add_item(session, read_draft(EngineDraft, step.values), step.on)


def _task(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    add_task(session, find_item(session.connection(), step.tag), read_draft(TaskDraft, step.values), step.on)


def _fit(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    fit_engine(session, find_engine(session.connection(), step.tag), str(step.values["machine"]), step.on)


def _status(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    engine = find_engine(session.connection(), step.tag)
    why, by = str(step.values["why"]), str(step.values["by"])
    change_status(session, engine, Status(str(step.values["status"])), step.on, why=why, by=by)


def _factor(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    item = find_item(session.connection(), step.tag)
    kind, factor = parse_kind(str(step.values["kind"])), Decimal(str(step.values["factor"]))
    set_factor(session, item, kind, factor, step.on, str(step.values["why"]))


def _reading(session: "Session", step: Step, stored: Mapping[str, int]) -> int:
    return record_reading(session, read_draft(ReadingDraft, {"tag": step.tag, "on": step.on, **step.values})).id


def _log(session: "Session", step: Step, stored: Mapping[str, int]) -> int:
    draft = read_draft(LogDraft, {"tag": step.tag, "on": step.on, **step.values})
    return record_work(session, draft, step.on).entries[0][0]


def _correct(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    draft = read_draft(CorrectionDraft, {"entry": stored[step.about], **step.values})
    correct_entry(session, draft, step.on)


def _defer(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    defer(session, read_draft(DeferralDraft, {"tag": step.tag, "on": step.on, **step.values}))


def _void_reading(session: "Session", step: Step, stored: Mapping[str, int]) -> None:
    void_reading(session, stored[step.about], str(step.values["why"]), step.on)


_VERBS: Mapping[Verb, Callable[["Session", Step, Mapping[str, int]], int | None]] = {
    Verb.SETTING: _setting,
    Verb.MACHINE: _machine,
    Verb.ENGINE: _engine,
    Verb.TASK: _task,
    Verb.FIT: _fit,
    Verb.STATUS: _status,
    Verb.FACTOR: _factor,
    Verb.READING: _reading,
    Verb.LOG: _log,
    Verb.CORRECT: _correct,
    Verb.DEFER: _defer,
    Verb.VOID_READING: _void_reading,
}
