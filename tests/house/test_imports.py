"""What a quick command must not pay for. A child process looks, as the static contracts cannot tell late imports."""

import shutil
import subprocess
import sys
from pathlib import Path

import pytest

from tests.house.conftest import ROOT

HEAVY = {"textual", "rich", "sqlmodel", "sqlalchemy", "alembic", "pydantic", "dateutil"}
NOT_FOR_READING = {"textual", "rich", "sqlmodel", "sqlalchemy", "alembic", "pydantic"}

PROBE = """
import sys
from fleetcare.__main__ import main
status = main(sys.argv[1:])
print(status, *sorted({name.partition(".")[0] for name in sys.modules}), file=sys.stderr)
"""


def loaded_by(*words: str) -> set[str]:
    """Run a command line in a process of its own, and give the top-level modules it loaded."""
    ran = subprocess.run([sys.executable, "-c", PROBE, *words], capture_output=True, text=True, check=True)
    status, *loaded = ran.stderr.split()
    assert status == "0"
    return set(loaded)


@pytest.mark.parametrize(
    "words",
    [("--help",), ("--version",), ("due", "--help"), ("calc", "piston-speed", "--stroke", "90", "--rpm", "3000")],
    ids=" ".join,
)
def test_help_and_bench_sums_load_no_database_no_forms_and_no_screen(words: tuple[str, ...]) -> None:
    assert not loaded_by(*words) & HEAVY


@pytest.mark.parametrize("words", [("due", "--format", "csv"), ("engine", "list")], ids=" ".join)
def test_reading_loads_no_tables_nor_their_library_no_migrations_no_forms_and_no_screen(words: tuple[str, ...]) -> None:
    assert not loaded_by("--db", str(ROOT / "demo_fleet.db"), *words) & NOT_FOR_READING


def test_a_due_list_that_says_how_many_findings_want_an_answer_loads_nothing_that_judges(tmp_path: Path) -> None:
    file = str(shutil.copy(ROOT / "demo_fleet.db", tmp_path / "yard.db"))
    modules = PROBE.replace('name.partition(".")[0]', "name")
    for words in (("findings",), ("due",)):  # the first keeps what has to be judged
        command = [sys.executable, "-c", modules, "--db", file, "--as-of", "2026-05-01", *words]
        ran = subprocess.run(command, capture_output=True, text=True, check=True)
    assert "want an answer" in ran.stdout
    assert not {name for name in ran.stderr.split() if name.startswith(("fleetcare.rules.judg", "pydantic"))}


def test_writing_to_a_current_file_loads_no_migrations_and_no_screen(db: Path) -> None:
    assert not loaded_by("--db", str(db), "engine", "add", "P-01") & {"textual", "rich", "alembic"}


def test_the_package_itself_imports_nothing() -> None:
    look = "import sys; before = set(sys.modules); import fleetcare; print(*(set(sys.modules) - before))"
    ran = subprocess.run([sys.executable, "-c", look], capture_output=True, text=True, check=True)
    assert ran.stdout.split() == ["fleetcare"]
