"""What a form is made of: fields, a draft to read them into, an operation to store it, and what may be asked back."""

import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any

from fleetcare.errors import Doubted, FleetError

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy.orm import Session

    from fleetcare.drafts.reading_in import Draft
    from fleetcare.operations.entering import Entered
    from fleetcare.operations.form_facts import FormFacts

METERS = "meters"
"""What a field of dial figures names as known: what its meters showed last."""

_OPTION = re.compile(r"--([a-z][a-z-]+)(?: [A-Z][A-Z_|:]*)?")
_FIGURE = re.compile(r"^([0-9][0-9.]*) ?[A-Za-z]+$")


Said = Mapping[str, Mapping[str, bool]]
"""What was answered about doubtful fields, by their names."""


@dataclass(frozen=True, slots=True)
class Subject:
    """What a form is about: an engine or machine, and a task or an entry of it. `preset` are fields filled in ahead."""

    tag: str
    task: str = ""
    entry: int | None = None
    preset: Mapping[str, str] = field(default_factory=dict)


@dataclass(frozen=True, slots=True)
class Field:
    """One labelled line of a form, by the name it has in the draft.

    `known` names what is suggested for it (see FormFacts.known). A yes or no is one key. One that is
    `kept_for_shift` is filled in again on the next form. `several` values stand between semicolons. On a form about
    several engines or machines `tag` is whose field it is.
    """

    name: str
    label: str
    tells: str
    known: str = ""
    is_yes_no: bool = False
    several: bool = False
    kept_for_shift: bool = False
    tag: str = ""


@dataclass(frozen=True, slots=True)
class Answer:
    """One answer to a doubt: its key, its words, and what it says to the operation; or the form it leads to.

    That form is stored first, or with `is_instead` in the place of this one.
    """

    key: str
    words: str
    says: Mapping[str, bool] = field(default_factory=dict)
    leads_to: str = ""
    is_instead: bool = False


@dataclass(frozen=True, slots=True)
class Form:
    """A form by its name. `draft` gives the draft's class, `fixed` what it holds that is not asked.

    `store` runs the operation on subject and draft, with what was answered. `start` gives the values a form opens with.
    One `is_on_task` is about the task of its subject, any other about the whole engine or machine, or an entry.
    With `only_changes` a field left as it was is not sent, and one that was filled cannot be emptied.
    """

    name: str
    title: str
    fields: tuple[Field, ...]
    draft: "Callable[[], type[Draft]]"
    store: "Callable[[Session, Subject, Any, date, Said], Entered]"
    fixed: "Callable[[Subject, date], Mapping[str, object]]" = lambda subject, on: {"tag": subject.tag}
    start: "Callable[[FormFacts, Subject, date], Mapping[str, str]]" = lambda facts, subject, on: {"on": on.isoformat()}
    above: "Callable[[FormFacts], tuple[str, Sequence[str]]]" = lambda facts: ("", ())
    answers: tuple[Answer, ...] = ()
    only_changes: bool = False
    is_on_task: bool = False

    def names(self, subject: Subject) -> str:
        """Name what a form is about, so that each has a draft of its own."""
        words = (subject.tag, subject.task if self.is_on_task else "", str(subject.entry or ""))
        return " ".join(word for word in words if word)

    def heading(self, subject: Subject) -> str:
        """Say what is being written down about what."""
        return self.title.format(tag=subject.tag, task=subject.task, entry=subject.entry)

    def field_of(self, error: FleetError, values: Mapping[str, str]) -> str:
        """Name the field an error is about: the option or tag it names, else what it says first of what was typed.

        A doubt, and what is said of meters, is about the first field of figures. "" where the words do not tell.
        """
        said = f"{error.detail} {error.remedy}"
        named = [match.replace("-", "_") for match in _OPTION.findall(said)]
        named += [one.name for one in self.fields if one.tag and _place_of(one.tag, error.detail) is not None]
        own = [one.name for one in self.fields]
        typed = {
            one.name: _place_of(values.get(one.name, ""), error.detail) for one in self.fields if not one.is_yes_no
        }
        places = {name: place for name, place in typed.items() if place is not None}
        is_of_figures = isinstance(error, Doubted) or "meter" in error.detail
        figures = [one.name for one in self.fields if one.known == METERS and is_of_figures]
        return next(
            iter([name for name in named if name in own] or sorted(places, key=places.__getitem__) or figures), ""
        )

    def in_own_words(self, text: str) -> str:
        """Say fields by their labels where an error names options."""
        labels = {one.name: f"“{one.label}”" for one in self.fields}
        return _OPTION.sub(lambda match: labels.get(match[1].replace("-", "_"), match[0]), text)


def _place_of(value: str, detail: str) -> int | None:
    """Tell where an error says a value, or one of several; of a figure its number will do."""
    words = [_FIGURE.sub(r"\1", part.strip()) for part in value.split(";") if part.strip()]
    found = (re.search(rf"(?<![\w.]){re.escape(word)}(?![\w.])", detail) for word in words)
    return min((match.start() for match in found if match), default=None)


BY = Field("by", "By", "who did it or says so; filled in again until you leave", "people", kept_for_shift=True)
ON = Field("on", "Day", "year-month-day, such as 2026-05-01")
NOTE = Field("note", "Note", "anything worth keeping")
WHY = Field("why", "Why", "the reason, in a few words")
