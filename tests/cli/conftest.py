"""Run a command line in this process and look at what it printed."""

from collections.abc import Callable
from dataclasses import dataclass

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
