"""How a draft is read: every field's error gathered, each said in the words of errors.py."""

from collections.abc import Callable, Mapping
from typing import TypeVar

from pydantic import BaseModel, ConfigDict, ValidationError

from fleetcare.errors import FleetError, Misread, Refusals


class Draft(BaseModel):
    """What somebody wants written down, read and checked as far as it can be without the database."""

    model_config = ConfigDict(frozen=True, extra="forbid", arbitrary_types_allowed=True)


DraftT = TypeVar("DraftT", bound=Draft)


def read_draft(
    draft: type[DraftT], values: Mapping[str, object], label: Callable[[str], str] = lambda field: field
) -> DraftT:
    """Read a draft from named values; None and empty text stand for what was not given.

    `label` turns a field's name into what the person knows it by: an option, a column. Raises the
    one error, or Refusals with all of them.
    """
    try:
        return draft.model_validate(_given(values))
    except ValidationError as caught:
        errors = [_error(detail, label) for detail in caught.errors()]
        raise errors[0] if len(errors) == 1 else Refusals(errors) from None


def try_draft(draft: type[DraftT], values: Mapping[str, object]) -> tuple[DraftT | None, list[tuple[str, FleetError]]]:
    """Read a draft as `read_draft` does; give it, or None and each error beside the name of its field.

    The errors do not name their field; one about several fields together stands beside "".
    """
    try:
        return draft.model_validate(_given(values)), []
    except ValidationError as caught:
        return None, [
            (str(detail["loc"][0]) if detail["loc"] else "", _error(detail, lambda _: "")) for detail in caught.errors()
        ]


def as_option(field: str) -> str:
    """Name a field as the option it is given with."""
    return "--" + field.replace("_", "-")


def _given(values: Mapping[str, object]) -> dict[str, object]:
    return {name: value for name, value in values.items() if value not in (None, "", [], ())}


def _error(detail: Mapping[str, object], label: Callable[[str], str]) -> FleetError:
    """Turn one of pydantic's findings into an error that names its field, where the field has a label."""
    location = detail["loc"]
    field = label(str(location[0])) if isinstance(location, tuple) and location else ""
    before = f"{field}: " if field else ""
    context = detail.get("ctx")
    inner = context.get("error") if isinstance(context, Mapping) else None
    if isinstance(inner, FleetError):
        return type(inner)(f"{before}{inner.detail}", inner.remedy)
    if detail["type"] == "missing":
        return Misread(f"{field or 'this'} is missing", "give it")
    if detail["type"] == "extra_forbidden":
        return Misread(f"{field or 'this'} is not known here", "leave it out, or check its spelling")
    if isinstance(context, Mapping) and "expected" in context:  # a word out of a fixed list
        return Misread(f"{before}{detail['input']!r} is not known", f"use {context['expected']}")
    return Misread(f"{before}{detail['msg']}", "correct it")
