"""Forms on how an engine stands: laid up, returned, stood down, withdrawn, moved, in hard use."""

from collections.abc import Callable, Sequence
from dataclasses import replace
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.domain.engines import Status
from fleetcare.tui.forms.base import BY, ON, WHY, Field, Form, Said, Subject

if TYPE_CHECKING:
    from sqlalchemy.orm import Session

    from fleetcare.drafts.items import FactorDraft, FitDraft, StatusDraft
    from fleetcare.drafts.reading_in import Draft
    from fleetcare.operations.entering import Entered
    from fleetcare.operations.form_facts import FormFacts


def _status_draft() -> "type[Draft]":
    from fleetcare.drafts.items import StatusDraft

    return StatusDraft


def _return_draft() -> "type[Draft]":
    from fleetcare.drafts.items import ReturnDraft

    return ReturnDraft


def _becomes(status: Status) -> "Callable[[Session, Subject, StatusDraft, date, Said], Entered]":
    def store(session: "Session", subject: Subject, draft: "StatusDraft", today: date, said: Said) -> "Entered":
        from fleetcare.operations.entering import enter_status

        return enter_status(session, draft, status, today)

    return store


def _waiting(facts: "FormFacts") -> tuple[str, Sequence[str]]:
    return f"BEFORE RETURN  {len(facts.waiting)}", facts.waiting or ("nothing waits",)


def _fit_draft() -> "type[Draft]":
    from fleetcare.drafts.items import FitDraft

    return FitDraft


def _move(session: "Session", subject: Subject, draft: "FitDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.entering import enter_move

    return enter_move(session, draft, today)


def _factor_draft() -> "type[Draft]":
    from fleetcare.drafts.items import FactorDraft

    return FactorDraft


def _factor(session: "Session", subject: Subject, draft: "FactorDraft", today: date, said: Said) -> "Entered":
    from fleetcare.operations.entering import enter_factor

    return enter_factor(session, draft, today)


_FIELDS = (ON, WHY, BY)

LAY_UP = Form("lay-up", "Lay up {tag}", _FIELDS, _status_draft, _becomes(Status.LAID_UP))
RETURN = Form("return", "Return {tag} to service", _FIELDS, _return_draft, _becomes(Status.IN_SERVICE), above=_waiting)
STAND_DOWN = Form("stand-down", "Stand down {tag}: not to be run", _FIELDS, _status_draft, _becomes(Status.STOOD_DOWN))
WITHDRAW = Form(
    "withdraw",
    "Withdraw {tag}: no lines any more, its history stays",
    _FIELDS,
    _status_draft,
    _becomes(Status.WITHDRAWN),
)
MOVE = Form(
    "move",
    "Move {tag}",
    (
        Field("machine", "Into", "tag of the machine it goes into", "machines"),
        Field("position", "Where in it", "such as port"),
        Field("out", "Take it out", "take it out of the machine it is in", is_yes_no=True),
        ON,
    ),
    _fit_draft,
    _move,
)
FACTOR = Form(
    "factor",
    "Hard use of {tag}: intervals shortened",
    (
        Field("kind", "Intervals", "of which kind", choices=("hours", "distance", "fuel", "starts", "calendar")),
        Field("factor", "Times", "above 0, up to 1; 1 ends an earlier one"),
        ON,
        replace(WHY, tells="such as dust, short trips, salt"),
    ),
    _factor_draft,
    _factor,
)
