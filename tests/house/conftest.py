"""What the tests of the house share: where things stand, and a command line run in this process."""

from pathlib import Path

from tests.cli.conftest import fleetcare as fleetcare  # the fixture

ROOT = Path(__file__).parents[2]


def read(name: str) -> str:
    """Give the text of a file of the checkout."""
    return (ROOT / name).read_text(encoding="utf-8")
