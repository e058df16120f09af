"""What every command and screen is given: the database, the day, and where moments and uids come from.

The one place that reads the clock. Nothing heavy is loaded before a database is opened.
"""

import os
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from datetime import UTC, date, datetime
from pathlib import Path
from typing import TYPE_CHECKING
from uuid import uuid4

from fleetcare.errors import NoDatabase

if TYPE_CHECKING:
    from sqlalchemy import Connection
    from sqlalchemy.orm import Session


def utc_now() -> datetime:
    """Give the present moment, in UTC."""
    return datetime.now(UTC)


def new_uid() -> str:
    """Give a uid nobody else has."""
    return uuid4().hex


class Context:
    """The shop's database as of a day.

    `database` is a path or a `sqlite:///` address; None takes FLEETCARE_DB, else the person's own file.
    `as_of` None means today. `clock` gives aware moments, `uids` unused uids; half-typed forms
    are kept in the folder `drafts`.
    """

    def __init__(
        self,
        database: str | None = None,
        as_of: date | None = None,
        *,
        clock: Callable[[], datetime] = utc_now,
        uids: Callable[[], str] = new_uid,
        drafts: Path | None = None,
    ) -> None:
        self._database = database or os.environ.get("FLEETCARE_DB")
        self._as_of = as_of
        self._clock = clock
        self._uids = uids
        self._drafts = drafts

    @property
    def path(self) -> Path:
        """Where the database is or will be. Raises NoDatabase for an address that is no file."""
        if not self._database:
            return _own_folder() / "fleetcare.db"
        scheme, colon, rest = self._database.partition("://")
        if not colon:
            return Path(self._database)
        if scheme != "sqlite" or not rest.startswith("/"):
            raise NoDatabase(
                f"{scheme}:// databases are not supported",
                "name a file, or sqlite:/// and a file, with --db or FLEETCARE_DB",
            )
        return Path(rest[1:])

    @property
    def drafts_folder(self) -> Path:
        """Where half-typed forms are kept: the person's own folder, unless another was given."""
        return self._drafts or _own_folder() / "drafts"

    def today(self) -> date:
        """Give the day everything is asked about: as-of, else the local day."""
        return self._as_of or self._local_day()

    def unused_uid(self) -> str:
        """Give a uid for what is about to be stored, so that it is known again if it is sent twice."""
        return self._uids()

    @property
    def is_future(self) -> bool:
        """Whether the day asked about has not come yet."""
        return self._as_of is not None and self._as_of > self._local_day()

    @contextmanager
    def read(self) -> "Iterator[Connection]":
        """Give a connection for plain SQL that cannot write and sees one state. Raises NoDatabase.

        What was worked out on the way and can be worked out again is kept afterwards, if the file can be written then.
        """
        from fleetcare.db.reading import keep_derived, reading

        with reading(self.path) as connection:
            yield connection
            derived = connection.info.pop("derived", None)
        if derived is not None:
            keep_derived(self.path, derived)

    @contextmanager
    def write(self) -> "Iterator[Session]":
        """Give a session whose changes are stored together on a clean exit, none otherwise. Raises NoDatabase.

        A missing file is made, a missing folder only if it is the person's own.
        """
        from fleetcare.db.chain import last_entry
        from fleetcare.db.failures import opening
        from fleetcare.db.session import writing
        from fleetcare.operations.judged_rows import measured_since

        if not self._database:
            with opening(self.path):
                _own_folder().mkdir(parents=True, exist_ok=True)
        with writing(self.path, self._clock, self._uids) as session:
            before = last_entry(session.connection()).seq
            yield session
            session.flush()
            is_dry = not session.in_transaction()  # rolled back: of a new file not even the tables are left
            if not is_dry and (measured := measured_since(session.connection(), before)):
                from fleetcare.operations.judged import refresh_measured  # most writes measure nothing

                refresh_measured(session.connection(), measured)

    def _local_day(self) -> date:
        return self._clock().astimezone().date()


def _own_folder() -> Path:
    from platformdirs import user_data_path

    return user_data_path("fleetcare", appauthor=False)
