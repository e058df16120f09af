"""The demo fleet as it is committed, and as it is built anew for other days."""

from collections.abc import Callable
from datetime import date
from pathlib import Path

import pytest

from fleetcare.demo.build import build

COMMITTED = Path(__file__).parents[2] / "demo_fleet.db"
ANCHOR = date(2026, 5, 1)
"""The day the committed demo fleet stands on."""


@pytest.fixture(scope="session")
def demo_of(tmp_path_factory: pytest.TempPathFactory) -> Callable[[date], Path]:
    """A function that gives the demo fleet of a day, built once a worker; never written to."""
    folder = tmp_path_factory.mktemp("demo")

    def built(anchor: date) -> Path:
        path = folder / f"{anchor}.db"
        if not path.exists():
            build(path, anchor)
        return path

    return built
