"""What a form is made of: fields, a draft to read them into, an operation to store it, and what may be asked back."""

import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass, field
from typing import TYPE_CHECKING, Any, TypeAlias

from fleetcare.errors import Doubted, FleetError
from fleetcare.tui.forms.words import on_screen, options_in

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection
    from sqlalchemy.orm import Session

    from fleetcare.drafts.reading_in import Draft
    from fleetcare.operations.entering import Entered
    from fleetcare.operations.form_facts import FormFacts

METERS = "meters"
"""What a field of dial figures names as known: what its meters showed last."""

_FIGURE = re.compile(r"^([0-9][0-9.]*) ?[A-Za-z]+$")


Said = Mapping[str, Mapping[str, bool]]
"""What was answered about doubtful fields, by their names."""


@dataclass(frozen=True, slots=True)
class Subject:
    """What a form is about: an engine or machine, and a task, an entry or a reading of it.

    `preset` are fields filled in ahead.
    """

    tag: str
    task: str = ""
    entry: int | None = None
    reading: int | None = None
    preset: Mapping[str, str] = field(default_factory=dict)


Preview: TypeAlias = "Callable[[Connection, Subject, Mapping[str, str], date], tuple[str, Sequence[str]]]"
"""Tells what the values typed on a subject would bring: a heading and lines."""


@dataclass(frozen=True, slots=True)
class Field:
    """One labelled line of a form, by the name it has in the draft.

    `known` names what is suggested for it (see FormFacts.known), `choices` are all there are. A yes or no is one key.
    One that is `kept_for_shift` is filled in again on the next form. `several` values stand between semicolons. On a
    form about several engines or machines `tag` is whose field it is. `option` is what errors call it, where not by
    its name. `group` is a heading above it; one `of_engines` is hidden for a machine. A yes to one that `fills` another
    field puts there what is known for that; where nothing is, it is hidden.
    """

    name: str
    label: str
    tells: str
    known: str = ""
    is_yes_no: bool = False
    several: bool = False
    kept_for_shift: bool = False
    tag: str = ""
    choices: tuple[str, ...] = ()
    option: str = ""
    group: str = ""
    of_engines: bool = False
    fills: str = ""

    @property
    def called(self) -> str:
        """What errors call it, with underscores."""
        return self.option or self.name


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

    `store` runs the operation on subject and draft, with what was answered. `typed` loads what is stored already, as
    one would type it, `start` gives the values a form opens with, `preview` what it would bring, as a heading and lines.
    One `is_on_task` is about the task of its subject, any other about the whole engine or machine, or an entry.
    With `only_changes` a field left as it was is not sent, and one that was filled cannot be emptied. One that
    `is_edit` may empty the fields it `clears`, and sends fields that hold `together` all when one of them changed.
    What is typed in one that `is_entry` goes under an import key, so that it is stored once however often it is sent.
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
    typed: "Callable[[Connection, Subject, date], Mapping[str, str]]" = lambda connection, subject, on: {}
    preview: "Preview | None" = None
    is_edit: bool = False
    is_entry: bool = False
    clears: frozenset[str] = frozenset()
    together: frozenset[str] = frozenset()

    def names(self, subject: Subject) -> str:
        """Name what a form is about, so that each has a draft of its own."""
        words = (subject.tag, subject.task if self.is_on_task else "", str(subject.entry or subject.reading or ""))
        return " ".join(word for word in words if word)

    def heading(self, subject: Subject) -> str:
        """Say what is being written down about what."""
        told = {"task": subject.task, "entry": subject.entry, "reading": subject.reading}
        return self.title.format(tag=subject.tag, **told)

    def field_of(self, error: FleetError, values: Mapping[str, str]) -> str:
        """Name the field an error is about: the option or tag it names, else what it says first of what was typed.

        A doubt, and what is said of meters, is about the first field of figures. "" where the words do not tell.
        """
        detail = error.detail
        said = options_in(f"{detail}; {error.remedy}")
        options = {one.called.replace("_", "-"): one.name for one in self.fields}
        named = [options[option] for option in said if option in options]
        named += [one.name for one in self.fields if one.tag and _place_of(one.tag, detail) is not None]
        named += [one.name for one in self.fields if detail.startswith(f"{one.called.replace('_', ' ')} ")]
        typed = {one.name: _place_of(values.get(one.name, ""), detail) for one in self.fields if not one.is_yes_no}
        places = {name: place for name, place in typed.items() if place is not None}
        is_of_figures = isinstance(error, Doubted) or "meter" in detail
        figures = [one.name for one in self.fields if one.known == METERS and is_of_figures]
        asked = [self.fields[0].name] if isinstance(error, Doubted) and self.answers else []
        return next(iter(named or sorted(places, key=places.__getitem__) or figures or asked), "")

    def in_own_words(self, text: str) -> str:
        """Say fields by their labels where an error names options, and keys where it names commands."""
        return on_screen(text, {one.called.replace("_", "-"): one.label for one in self.fields})


def _place_of(value: str, detail: str) -> int | None:
    """Tell where an error says a value, or one of several; of a figure its number will do."""
    words = [_FIGURE.sub(r"\1", part.strip()) for part in value.split(";") if part.strip()]
    found = (re.search(rf"(?<![\w.]){re.escape(word)}(?![\w.])", detail, re.IGNORECASE) for word in words)
    return min((match.start() for match in found if match), default=None)


BY = Field("by", "By", "who did it or says so; filled in again until you leave", "people", kept_for_shift=True)
ON = Field("on", "Day", "year-month-day, such as 2026-05-01")
NOTE = Field("note", "Note", "anything worth keeping")
WHY = Field("why", "Why", "the reason, in a few words")
