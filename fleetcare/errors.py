"""Everything that can go wrong, in one tree.

FleetError
  Refused        understood, but it may not be done         exit status 1
    Doubted      likely a slip, unless somebody is sure     exit status 1
    SheetWanted  not without a sheet of measurements        exit status 1
    AlreadyStored  sent before, and stored then             exit status 1
    Refusals     several at once: an import, a form         exit status 1
  Misread        a value that cannot be read as its kind     exit status 2
  NoDatabase     the database cannot be opened or written   exit status 3

Every error says what is wrong and how to mend it, in one line each.
"""

from collections.abc import Sequence


class FleetError(ValueError):
    """A failure a person can act on: `detail` says what and where, `remedy` how to mend it.

    A ValueError, so that the validation of drafts gathers every field's error before reporting.
    """

    exit_code = 1

    def __init__(self, detail: str, remedy: str) -> None:
        super().__init__(detail, remedy)
        self.detail = detail
        self.remedy = remedy

    def lines(self) -> list[str]:
        """One printable line for each thing that is wrong."""
        return [f"{self.detail}; {self.remedy}"]

    def __str__(self) -> str:
        return "\n".join(self.lines())


class Refused(FleetError):
    """The request was understood and may not be done."""


class Doubted(Refused):
    """The request is likely a slip: it is done only if somebody says that it is right, or explains it."""


class SheetWanted(Refused):
    """The request needs a sheet of a kind, which did not come with it, for a task, or for none."""

    def __init__(self, detail: str, remedy: str, kind: str, task: str = "") -> None:
        super().__init__(detail, remedy)
        self.kind, self.task = kind, task


class AlreadyStored(Refused):
    """What was sent under a key was stored under it before, as an entry."""

    def __init__(self, detail: str, remedy: str, import_key: str) -> None:
        super().__init__(detail, remedy)
        self.import_key = import_key


class Refusals(Refused):
    """Several refusals found in one go; nothing of the request was done."""

    def __init__(self, errors: Sequence[FleetError]) -> None:
        super().__init__(errors[0].detail, errors[0].remedy)
        self.errors = tuple(errors)
        self.exit_code = max(error.exit_code for error in errors)

    def lines(self) -> list[str]:
        """One printable line for each refusal, in the order found."""
        return [line for error in self.errors for line in error.lines()]


class Misread(FleetError):
    """A typed value cannot be read as what it should be: a date, a figure, a unit."""

    exit_code = 2


class NoDatabase(FleetError):
    """The database cannot be opened, read or written."""

    exit_code = 3
