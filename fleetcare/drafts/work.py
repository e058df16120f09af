"""Work, readings, deferrals and corrections as somebody states them."""

from collections.abc import Sequence
from datetime import date
from typing import Annotated, Any, Self

from pydantic import BeforeValidator, Field, ValidationInfo, create_model, field_validator, model_validator

from fleetcare.domain.quantities import Figure, parse_dial
from fleetcare.drafts.fields import Day, DaysOrDials, Dial, Dials, Hours, Litres, MeterKind, Note, Parts, Text, Texts
from fleetcare.drafts.reading_in import Draft
from fleetcare.drafts.sheets import SheetOptions, TakenSheet
from fleetcare.errors import Misread, Refused


def _pair(value: object) -> tuple[Figure, Figure]:
    assert isinstance(value, list | tuple)
    old, new = (part if isinstance(part, Figure) else parse_dial(str(part)) for part in value)
    return old, new


Replaced = Annotated[tuple[Figure, Figure], BeforeValidator(_pair)]


class ReadingDraft(Draft):
    """A dial figure of a day, and what explains it where it breaks with the past."""

    tag: Text
    value: Dial
    on: Day
    meter: MeterKind | None = None
    replaced: Replaced | None = None
    unmetered: Dial | None = None
    rolled_over: bool = False
    sure: bool = False
    note: Note = ""
    by: Text | None = None
    import_key: str | None = None

    @model_validator(mode="after")
    def _check_explanations(self) -> Self:
        given = [self.replaced is not None, self.rolled_over, self.sure]
        if sum(given) > 1:
            raise Refused("one explanation is enough", "give only one of --replaced, --rolled-over and --sure")
        if self.unmetered is not None and self.replaced is None:
            raise Refused("--unmetered belongs to a replaced meter", "give --replaced OLD_LAST NEW_FIRST as well")
        return self


class RoundDraft(Draft):
    """Readings of several meters on one day; those of each are a field of `round_draft`."""

    on: Day
    by: Text | None = None

    @model_validator(mode="after")
    def _check_any(self) -> Self:
        if not self.model_fields_set - {"on", "by"}:
            raise Refused("nothing was read", "give at least one figure")
        return self


def round_draft(names: Sequence[str]) -> type[RoundDraft]:
    """Make the draft of a round with a field of that name for the meters of each engine or machine."""
    figures: dict[str, Any] = dict.fromkeys(names, (Dials, ()))
    return create_model("Round", __base__=RoundDraft, **figures)


class VoidDraft(Draft):
    """A reading that counts for nothing, and why."""

    reading: int
    why: Text


class RestoreDraft(Draft):
    """A suspect or voided reading that counts again."""

    reading: int
    why: Note = ""
    sure: bool = False


class SwapDraft(Draft):
    """A new meter in the place of an old one; without `value` the new one still shows its first figure."""

    tag: Text
    old_last: Dial
    new_first: Dial
    value: Dial | None = None
    unmetered: Dial | None = None
    on: Day
    by: Text | None = None
    note: Note = ""

    def reading(self) -> ReadingDraft:
        """Give the reading of the new meter that explains the change."""
        return ReadingDraft(
            tag=self.tag,
            value=self.value or self.new_first,
            on=self.on,
            replaced=(self.old_last, self.new_first),
            unmetered=self.unmetered,
            note=self.note,
            by=self.by,
        )


class LogDraft(TakenSheet):
    """What was done to an engine or machine on a day, and the sheet that came of it.

    `part_done` closes no task; `leave_open` not those their sheet does not close.
    """

    tag: Text
    task: Texts = ()
    on: Day
    at: Dials = ()
    by: Text | None = None
    note: Note = ""
    top_up: Litres | None = None
    repair: Text | None = None
    defect: Text | None = None
    follow_up: bool = False
    until: Day | None = None
    part_done: bool = False
    leave_open: bool = False
    part: Parts = ()
    component: Note = ""
    downtime: Hours | None = None
    import_key: str | None = None

    @model_validator(mode="after")
    def _check_what(self) -> Self:
        if not (self.task or self.top_up or self.repair or self.defect or self.note or self.sheet):
            raise Refused("nothing to log", "name a task, or give --repair, --defect, --top-up or --note")
        if self.follow_up and self.defect is None:
            raise Refused("a follow-up is raised from a defect", "give --defect TEXT as well")
        if self.until is not None and not self.follow_up:
            raise Refused("--until says by when a follow-up is due", "give --follow-up as well")
        if self.until is not None and self.until < self.on:
            raise Refused(f"a follow-up cannot be due on {self.until}, before {self.on}", "give a later --until")
        if self.part_done and not self.task:
            raise Refused("--part-done says which task was done in part", "name the task")
        return self


class MeasureDraft(LogDraft):
    """Measurements taken without any work; their sheet may follow when the rest is read."""

    @model_validator(mode="after")
    def _check_what(self) -> Self:
        return self


class CorrectionDraft(SheetOptions):
    """What an entry should have said; what is not given stays as it was."""

    entry: int
    on: Day | None = None
    at: Dials = ()
    by: Text | None = None
    note: Text | None = None
    task: Texts = ()
    part_done: bool | None = None
    part: Parts = ()
    component: Text | None = None
    downtime: Hours | None = None
    top_up: Litres | None = None
    repair: Text | None = None
    defect: Text | None = None
    void: bool = False
    why: Note = ""

    @model_validator(mode="after")
    def _check_why(self) -> Self:
        if self.void and not self.why:
            raise Misread("voiding an entry needs a reason", "give --why TEXT")
        given = self.model_fields_set - {"entry", "void", "why", "sure"}
        if self.void and given - {"by"}:
            raise Refused("a voided entry says nothing any more", "give only --void, --why and --by")
        if not self.void and not given:
            raise Refused("nothing to correct", "give what should stand instead, or --void --why TEXT")
        return self


class DeferralDraft(Draft):
    """One due point to be moved: until a day, a dial figure, or the first of both; or until the figure that is advised.

    `until` beside `as_advised` is the figure somebody was told.
    """

    tag: Text
    task: Text
    as_advised: bool = False
    until: DaysOrDials = Field((), validate_default=True)
    why: Text
    by: Text
    on: Day

    @field_validator("until")
    @classmethod
    def _check_ends(cls, until: tuple[date | Figure, ...], told: ValidationInfo) -> tuple[date | Figure, ...]:
        days = [end for end in until if isinstance(end, date)]
        if told.data.get("as_advised"):
            if days or len(until) > 1:
                raise Refused(
                    "an advice ends at one dial figure", "leave it empty, or put the line off without the advice"
                )
        elif not until:
            raise Misread("it is missing", "give a day, a dial figure or both")
        if len(until) > 2 or len(days) > 1 or len(until) - len(days) > 1:
            raise Refused(
                "a deferral ends on one day, at one dial figure, or at the first of both", "give --until once for each"
            )
        return until
