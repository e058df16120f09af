"""Run a command line in this process and look at what it printed, on a yard that is set up once and copied."""

import contextlib
import io
import shlex
import shutil
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

import pytest

from fleetcare.cli.main import run
from fleetcare.context import Context


@dataclass(frozen=True)
class Ran:
    """What one command line did."""

    status: int
    out: str
    err: str


def no_screens(context: Context) -> int:
    """No command line of a test takes over the terminal."""
    raise AssertionError(f"the screens were opened on {context.path}")


Runner = Callable[..., Ran]


@pytest.fixture
def fleetcare(capsys: pytest.CaptureFixture[str]) -> Runner:
    """A function that runs `fleetcare` with the given words; a fault of ours fails the test with its traceback."""

    def run_words(*words: str) -> Ran:
        capsys.readouterr()
        status = run(words, no_screens)
        printed = capsys.readouterr()
        return Ran(status, printed.out, printed.err)

    return run_words


TODAY = "2026-05-01"
"""The day the commands of a yard work on, unless a test says another."""


@pytest.fixture(scope="session")
def made_yards() -> dict[str, Path]:
    """The database of each yard set up so far, by the command lines that made it; never written to again."""
    return {}


@pytest.fixture
def open_yard(
    fleetcare: Runner,
    made_yards: dict[str, Path],
    new_database: Path,
    tmp_path: Path,
    tmp_path_factory: pytest.TempPathFactory,
) -> Callable[[str], Runner]:
    """A function that sets a yard up with command lines, one a line, and gives a runner on a copy of it."""

    def opened(lines: str) -> Runner:
        if lines not in made_yards:
            made_yards[lines] = set_up(Path(shutil.copy(new_database, tmp_path_factory.mktemp("yard"))), lines)
        path = Path(shutil.copy(made_yards[lines], tmp_path / "opened.db"))

        def run_words(*words: str) -> Ran:
            return fleetcare("--db", str(path), "--as-of", TODAY, *words)

        return run_words

    return opened


def set_up(path: Path, lines: str) -> Path:
    """Run command lines, one a line, on a database, and give its path; all of them must do."""
    for line in filter(None, map(str.strip, lines.splitlines())):
        printed = io.StringIO()
        with contextlib.redirect_stdout(printed), contextlib.redirect_stderr(printed):
            status = run(["--db", str(path), "--as-of", TODAY, *shlex.split(line)], no_screens)
        assert status == 0, f"{line}: {printed.getvalue()}"
    return path
