"""Looking after the file: a copy of it, whether it is sound, and bringing it up to this program."""

from dataclasses import dataclass
from itertools import chain, count
from pathlib import Path
from typing import TYPE_CHECKING

from fleetcare.errors import Refused

if TYPE_CHECKING:
    from fleetcare.context import Context


@dataclass(frozen=True, slots=True)
class Soundness:
    """What a check found: one sentence for each thing wrong, and SEQ:HASH of the ledger's newest entry."""

    problems: tuple[str, ...]
    head: str


def backup(context: "Context", out: Path | None = None) -> Path:
    """Copy the database, as of one moment, to the new file `out`, and give its path.

    Without `out` the copy lies beside the database, named after it and the day. Raises Refused where the
    file is there already, NoDatabase where either file cannot be used.
    """
    from fleetcare.db.reading import copy, require

    require(context.path)
    out = out or _free_name(context)
    refuse_taken(out)
    copy(context.path, out)
    return out


def refuse_taken(out: Path) -> None:
    """Refuse to write over a file that is there already."""
    if out.exists():
        raise Refused(f"{out} is already there", "name a file that is not, or remove that one first")


def check(context: "Context", head: str | None = None) -> Soundness:
    """Tell whether the database is sound, and its ledger reaches back to a `head` once printed.

    The file is taken as it is: an older one is not upgraded. Raises Misread for an unreadable head.
    """
    from fleetcare.db.chain import last_entry
    from fleetcare.db.check import check as problems
    from fleetcare.db.reading import reading

    with reading(context.path, as_is=True) as connection:
        return Soundness(tuple(problems(connection, head)), last_entry(connection).head)


def upgrade(context: "Context") -> Path | None:
    """Bring an older database up to this program, and give the copy made before; None if it is current."""
    from fleetcare.db.reading import current

    return current(context.path)


def _free_name(context: "Context") -> Path:
    """Give a name beside the database for a copy of the day, numbered where there is one already."""
    path = context.path
    name = f"{path.stem}-{context.today().isoformat()}"
    names = (path.with_name(f"{name}{number}{path.suffix}") for number in chain([""], (f"-{n}" for n in count(2))))
    return next(free for free in names if not free.exists())
