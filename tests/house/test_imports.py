"""What a quick command must not pay for. A child process looks, as the static contracts cannot tell late imports."""

import subprocess
import sys

import pytest

HEAVY = ("textual", "rich", "sqlmodel", "sqlalchemy", "alembic", "pydantic", "dateutil")

PROBE = """
import sys
from fleetcare.__main__ import main
status = main(sys.argv[1:])
print(status, *sorted({name.partition(".")[0] for name in sys.modules}), file=sys.stderr)
"""


@pytest.mark.parametrize(
    "words",
    [("--help",), ("--version",), ("due", "--help"), ("calc", "piston-speed", "--stroke", "90", "--rpm", "3000")],
    ids=" ".join,
)
def test_help_and_bench_sums_load_no_database_no_forms_and_no_screen(words: tuple[str, ...]) -> None:
    ran = subprocess.run([sys.executable, "-c", PROBE, *words], capture_output=True, text=True, check=True)
    status, *loaded = ran.stderr.split()
    assert status == "0"
    assert not set(loaded) & set(HEAVY)


def test_the_package_itself_imports_nothing() -> None:
    look = "import sys; before = set(sys.modules); import fleetcare; print(*(set(sys.modules) - before))"
    ran = subprocess.run([sys.executable, "-c", look], capture_output=True, text=True, check=True)
    assert ran.stdout.split() == ["fleetcare"]
