"""What every test is given: no home, one time zone, and a database made once by the migrations and copied."""

import gc
import itertools
import os
import shutil
import time
from collections.abc import Callable, Iterator
from datetime import UTC, date, datetime
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.db import reading

TODAY = date(2026, 5, 1)
AS_SHIPPED = reading.SYNCHRONOUS
NOW = datetime(2026, 5, 1, 8, 30, tzinfo=UTC)

# Child processes and this one keep the same time, away from UTC for half the year.
os.environ["TZ"] = "Europe/London"
time.tzset()


def pytest_collection_finish() -> None:
    """Leave what was loaded by now, thousands of tests among it, out of every later search for garbage."""
    gc.collect()
    gc.freeze()


@pytest.fixture(scope="session", autouse=True)
def no_power_cuts() -> Iterator[None]:
    """Nothing waits for the disk, which is most of what a small write takes: no test outlives the machine it runs on."""
    with pytest.MonkeyPatch.context() as patched:
        patched.setattr(reading, "SYNCHRONOUS", "OFF")
        yield


@pytest.fixture(autouse=True)
def no_home(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """No test reads or writes what belongs to the person who runs it."""
    monkeypatch.delenv("FLEETCARE_DB", raising=False)
    monkeypatch.delenv("XDG_DATA_HOME", raising=False)
    monkeypatch.setenv("HOME", str(tmp_path / "home"))


@pytest.fixture(scope="session")
def new_database(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A database with nothing in it, made by the migrations once a worker; never written to."""
    path = tmp_path_factory.mktemp("made") / "new.db"
    with Context(str(path)).write():
        pass
    return path


@pytest.fixture
def db(new_database: Path, tmp_path: Path) -> Path:
    """A database of the test's own, with nothing in it."""
    return Path(shutil.copy(new_database, tmp_path / "yard.db"))


@pytest.fixture
def ctx(db: Path) -> Context:
    """The test's own database on 1 May 2026, with a clock that stands still and uids that count."""
    return Context(str(db), clock=lambda: NOW, uids=counted_uids())


def counted_uids() -> Callable[[], str]:
    """Give uids u1, u2, ..."""
    numbers = itertools.count(1)
    return lambda: f"u{next(numbers)}"
