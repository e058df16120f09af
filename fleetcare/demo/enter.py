"""Enter one step of the history of the demo fleet, through the operation anybody's entry goes through."""

from collections.abc import Callable, Mapping
from decimal import Decimal
from typing import TYPE_CHECKING

from fleetcare.demo.steps import Step, Verb
from fleetcare.domain.engines import Status
from fleetcare.drafts.fields import parse_kind
from fleetcare.drafts.findings import AnswerDraft, RulesDraft
from fleetcare.drafts.items import EngineDraft, MachineDraft
from fleetcare.drafts.reading_in import read_draft
from fleetcare.drafts.schedules import StartDraft
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.drafts.work import CorrectionDraft, DeferralDraft, LogDraft, ReadingDraft
from fleetcare.operations.answer import enter_answer
from fleetcare.operations.correct import correct_entry
from fleetcare.operations.deferrals import defer
from fleetcare.operations.find import find_engine, find_item
from fleetcare.operations.finding_rows import found_findings
from fleetcare.operations.items import add_item, fit_engine
from fleetcare.operations.judged import refresh
from fleetcare.operations.log import record_work
from fleetcare.operations.readings import record_reading, void_reading
from fleetcare.operations.schedules import apply_schedule
from fleetcare.operations.settings import change_setting
from fleetcare.operations.shop_rules import Rejudged, store_rules
from fleetcare.operations.spells import change_status, set_factor
from fleetcare.operations.tasks import add_task, edit_task
from fleetcare.rulebook.rules import read_shop_text
from fleetcare.rulebook.schedules import find_schedule

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

Stored = Mapping[str, int]
"""The ids of what steps with a name stored, by that name."""


def enter(session: "Session", step: Step, stored: Stored) -> int | None:
    """Enter a step, and give the id of the reading or entry it stored, None where it stored neither."""
    return _VERBS[step.verb](session, step, stored)


def sheet_draft(step: Step) -> LogDraft:
    """Give the sheet of a step as typed; sheets of one day are stored together."""
    return read_draft(LogDraft, {"tag": step.tag, "on": step.on, **step.values})


def _setting(session: "Session", step: Step, stored: Stored) -> None:
    change_setting(session, str(step.values["name"]), str(step.values["value"]))


def _rules(session: "Session", step: Step, stored: Stored) -> None:
    """Put rules of the shop in force, as nothing is measured yet without judging anything."""
    name, text = str(step.values["name"]), str(step.values["text"])
    read_shop_text(text, name)
    said = {"why": step.values["why"], "by": step.values["by"], "on": step.on}
    store_rules(session, Rejudged(name, text, (), (), ()), read_draft(RulesDraft, said))


def _machine(session: "Session", step: Step, stored: Stored) -> None:
    add_item(session, read_draft(MachineDraft, step.values), step.entered)


def _engine(session: "Session", step: Step, stored: Stored) -> None:
    add_item(session, read_draft(EngineDraft, step.values), step.entered)


def _schedule(session: "Session", step: Step, stored: Stored) -> None:
    schedule = find_schedule(str(step.values["schedule"]))
    begins = read_draft(StartDraft, {"counts_from": [step.values["from"]]})
    apply_schedule(session, schedule, [step.tag], begins, step.entered)


def _task(session: "Session", step: Step, stored: Stored) -> None:
    add_task(session, find_item(session.connection(), step.tag), read_draft(TaskDraft, step.values), step.entered)


def _fit(session: "Session", step: Step, stored: Stored) -> None:
    fit_engine(session, find_engine(session.connection(), step.tag), str(step.values["machine"]), step.on)


def _status(session: "Session", step: Step, stored: Stored) -> None:
    engine = find_engine(session.connection(), step.tag)
    why, by = str(step.values["why"]), str(step.values["by"])
    change_status(session, engine, Status(str(step.values["status"])), step.on, why=why, by=by)


def _factor(session: "Session", step: Step, stored: Stored) -> None:
    item = find_item(session.connection(), step.tag)
    kind, factor = parse_kind(str(step.values["kind"])), Decimal(str(step.values["factor"]))
    set_factor(session, item, kind, factor, step.on, str(step.values["why"]))


def _reading(session: "Session", step: Step, stored: Stored) -> int:
    return record_reading(session, read_draft(ReadingDraft, {"tag": step.tag, "on": step.on, **step.values})).id


def _edit(session: "Session", step: Step, stored: Stored) -> None:
    item = find_item(session.connection(), step.tag)
    changes = {name: value for name, value in step.values.items() if name != "task"}
    edit_task(session, item, str(step.values["task"]), changes, (), step.on, step.entered)


def _log(session: "Session", step: Step, stored: Stored) -> int:
    draft = read_draft(LogDraft, {"tag": step.tag, "on": step.on, **step.values})
    return record_work(session, draft, step.entered).entries[0][0]


def _correct(session: "Session", step: Step, stored: Stored) -> None:
    draft = read_draft(CorrectionDraft, {"entry": stored[step.about], **step.values})
    correct_entry(session, draft, step.entered)


def _defer(session: "Session", step: Step, stored: Stored) -> None:
    defer(session, read_draft(DeferralDraft, {"tag": step.tag, "on": step.on, **step.values}))


def _void_reading(session: "Session", step: Step, stored: Stored) -> None:
    void_reading(session, stored[step.about], str(step.values["why"]), step.on)


def _answer(session: "Session", step: Step, stored: Stored) -> None:
    """Answer the finding of a cause on an engine."""
    refresh(session.connection())
    values = {name: value for name, value in step.values.items() if name != "cause"}
    (finding,) = (
        found.lived.life.id
        for found in found_findings(session.connection(), step.on)
        if (found.tag, found.lived.life.cause) == (step.tag, step.values["cause"])
    )
    enter_answer(session, read_draft(AnswerDraft, {"finding": finding, "on": step.on, **values}), step.entered)


_VERBS: Mapping[Verb, Callable[["Session", Step, Stored], int | None]] = {
    Verb.SETTING: _setting,
    Verb.RULES: _rules,
    Verb.MACHINE: _machine,
    Verb.ENGINE: _engine,
    Verb.SCHEDULE: _schedule,
    Verb.TASK: _task,
    Verb.ROUND: _reading,
    Verb.READING: _reading,
    Verb.FIT: _fit,
    Verb.STATUS: _status,
    Verb.FACTOR: _factor,
    Verb.EDIT: _edit,
    Verb.LOG: _log,
    Verb.CORRECT: _correct,
    Verb.DEFER: _defer,
    Verb.VOID_READING: _void_reading,
    Verb.ANSWER: _answer,
}
