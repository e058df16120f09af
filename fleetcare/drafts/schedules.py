"""The tasks of a schedule as drafts, and where their counting begins on an item."""

from collections.abc import Iterator
from datetime import date
from typing import Annotated, Literal, Self

from pydantic import AfterValidator, BeforeValidator, model_validator

from fleetcare.domain.quantities import Figure
from fleetcare.drafts.fields import Text, parse_day_or_dial
from fleetcare.drafts.reading_in import Draft, read_draft
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.errors import FleetError, Misread, Refusals, Refused
from fleetcare.rulebook.schedules import Schedule

Start = Literal["start", "unset"]


def read_tasks(schedule: Schedule) -> tuple[TaskDraft, ...]:
    """Give the tasks of a schedule as `task add` would take them.

    Everything that cannot be is refused together, each with file, task and field: what a file says is no typing
    error on the command line.
    """
    drafts: list[TaskDraft] = []
    wrong: list[FleetError] = []
    for task in schedule.tasks:
        try:
            drafts.append(read_draft(TaskDraft, task))
        except FleetError as error:
            where = f"{schedule.id}, task {task['name']!r}: "
            wrong.extend(Refused(where + one.detail, one.remedy) for one in _each(error))
    if wrong:
        raise wrong[0] if len(wrong) == 1 else Refusals(wrong)
    return tuple(drafts)


def _each(error: FleetError) -> Iterator[FleetError]:
    yield from error.errors if isinstance(error, Refusals) else (error,)


def _start(text: str) -> Start | date | Figure:
    if text in ("start", "unset"):
        return "start" if text == "start" else "unset"
    try:
        return parse_day_or_dial(text)
    except Misread as error:
        raise Misread(error.detail, f"write start, unset, a day or a dial figure; {error.remedy}") from None


def _starts(texts: list[str] | str) -> tuple[Start | date | Figure, ...]:
    """Read a list of starts, or one text that joins them with semicolons."""
    several = texts.split(";") if isinstance(texts, str) else texts
    return tuple(_start(text.strip()) for text in several if text.strip())


class StartDraft(Draft):
    """What the tasks of a schedule count from: the item's start, nothing yet, or when they were last done."""

    counts_from: Annotated[tuple[Start | date | Figure, ...], BeforeValidator(_starts)] = ()

    @model_validator(mode="after")
    def _check(self) -> Self:
        words = [given for given in self.counts_from if isinstance(given, str)]
        if words and len(self.counts_from) > 1:
            raise Refused(f"--from {words[0]} stands alone", "leave out the other --from")
        return self

    @property
    def word(self) -> Start | None:
        """`start` or `unset`, where one was given."""
        return next((given for given in self.counts_from if isinstance(given, str)), None)

    @property
    def last_done(self) -> tuple[date | Figure, ...]:
        """The day and the dial figures given, else nothing."""
        return tuple(given for given in self.counts_from if not isinstance(given, str))


class ApplyDraft(StartDraft):
    """A schedule by its name or file, and what its tasks count from."""

    name: Text


def _toml(text: str) -> str:
    if not text.lower().endswith(".toml"):
        raise Misread(f"{text!r} does not end in .toml", "name a file such as our-pumps.toml")
    return text


class ScheduleOut(Draft):
    """The tasks of an engine or machine to be written down as a schedule: its name, where its intervals come from, its file."""

    tag: Text
    name: Text
    source: Text
    file: Annotated[Text, AfterValidator(_toml)]
