"""A generated yard: as many engines as asked for, ten lines each, the same again, sound, and worth looking at."""

from datetime import date
from pathlib import Path

import pytest

from fleetcare.context import Context
from fleetcare.demo.build import build
from fleetcare.demo.yard_of import MOST_ENGINES, yard_of
from fleetcare.domain.lines import State
from fleetcare.operations.due import due_rows
from fleetcare.operations.rows import fetch
from fleetcare.operations.upkeep import check
from tests.cli.conftest import Runner
from tests.cli.conftest import fleetcare as fleetcare  # the fixture
from tests.demo.test_demo_fleet import content

ON = date(2026, 5, 4)
ENGINES = 12


@pytest.fixture(scope="module")
def generated(tmp_path_factory: pytest.TempPathFactory) -> Context:
    """A yard of twelve engines on a Monday, when a round is due."""
    path = tmp_path_factory.mktemp("generated") / "yard.db"
    build(path, ON, ENGINES)
    return Context(str(path), ON)


def test_a_generated_yard_has_so_many_engines_with_ten_lines_each(generated: Context) -> None:
    with generated.read() as connection:
        lines = due_rows(connection, ON)
    assert len(lines) == 10 * ENGINES
    assert len({line.engine for line in lines}) == ENGINES


def test_a_generated_yard_has_lines_of_every_usual_state_and_several_sites(generated: Context) -> None:
    with generated.read() as connection:
        lines = due_rows(connection, ON)
    assert {line.state for line in lines} >= {State.OVERDUE, State.NEAR, State.UNSET, State.CLEAR}
    assert len({line.site for line in lines}) > 3


def test_a_generated_yard_is_sound(generated: Context) -> None:
    assert check(generated).problems == ()


def test_a_generated_yard_has_its_history_from_files_of_cards(generated: Context) -> None:
    with generated.read() as connection:
        readings, work = (
            fetch(connection, f"select count(*) from {table} where import_key is not null")[0][0]
            for table in ("reading", "log_entry")
        )
    assert readings > 10 * ENGINES
    assert work > 5 * ENGINES


def test_the_same_size_and_day_give_the_same_yard(generated: Context, tmp_path: Path) -> None:
    again = tmp_path / "again.db"
    build(again, ON, ENGINES)
    assert content(again) == content(generated.path)


def test_a_larger_yard_begins_with_the_engines_of_a_smaller_one() -> None:
    assert yard_of(20)[:12] == yard_of(12)


def test_the_tags_of_the_largest_yard_are_all_different() -> None:
    assert len({item.tag for item in yard_of(MOST_ENGINES)}) == MOST_ENGINES


def test_the_demo_command_writes_a_generated_yard(fleetcare: Runner, tmp_path: Path) -> None:
    out = tmp_path / "long.db"
    ran = fleetcare("--as-of", "2026-05-04", "demo", "--engines", "2", "--keep", str(out))
    assert (ran.status, ran.err) == (0, "")
    assert f"A generated yard of 2 as it stands on 2026-05-04 is in {out}." in ran.out
    with Context(str(out)).read() as connection:
        assert fetch(connection, "select count(*) from item where is_engine") == [(2,)]


@pytest.mark.parametrize("engines", ["0", "2001"])
def test_a_yard_of_no_engine_or_of_too_many_is_refused(fleetcare: Runner, tmp_path: Path, engines: str) -> None:
    ran = fleetcare("demo", "--engines", engines, "--keep", str(tmp_path / "yard.db"))
    assert ran.status == 1
    assert ran.err == (f"a yard of {engines} engines cannot be made up; give a number from 1 to {MOST_ENGINES}\n")
    assert list(tmp_path.iterdir()) == []


def test_a_size_that_is_no_whole_number_is_misread(fleetcare: Runner, tmp_path: Path) -> None:
    ran = fleetcare("demo", "--engines", "many", "--keep", str(tmp_path / "yard.db"))
    assert ran.status == 2
    assert "argument --engines" in ran.err
