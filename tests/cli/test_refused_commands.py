"""A command that is refused changes nothing: the database is byte for byte as it was, every row of it."""

import shlex
import shutil
from pathlib import Path

import pytest

from tests.cli.conftest import Runner, set_up
from tests.cli.yards import LORRY, PUMP

YARD = (
    PUMP
    + LORRY
    + """
    task add P-01 Cert --every 12mo --law --last-done 2025-06-01
    task add P-01 Big --every 2000h --covers "Oil and filter" "Valve lash"
    log P-01 "Oil and filter" --at 1010 --on 2026-04-10
    log P-01 --defect Leak --follow-up
    reading P-01 1020 --on 2026-04-20
    engine add P-09 --meter hours
    engine withdraw P-09
"""
)

REFUSED = """
    engine add P-01
    engine add LR-1
    engine add P-02 --cylinders 6 --firing-order 1-2-3
    engine add P-02 --site "New site" --machine NOPE
    engine add P-02 --site "New site" --meter hours --in-service 2026-01-01 --as-new
    engine add P-02 --site "New site" --meter hours --meter starts --in-service 2026-01-01 --start-at 5
    engine add P-02 --site "New site" --meter hours --in-service 2026-01-01 --start-at 5 --start-at 6
    engine add P-02 --site "New site" --meter hours --meter-digits distance:6.0
    engine add P-02 --site "New site" --meter hours --meter-digits 2.0 --in-service 2026-01-01 --start-at 100
    engine edit P-01 --site "New site" --meter hours
    engine edit P-01 --site "New site" --in-service 2026-04-02 --start-at 1000
    engine edit P-01 --name New --meter-digits 3.0
    engine edit NOPE --name New
    engine edit LR-1 --name New
    engine fit E-1 --machine LR-2 --on 2024-01-01
    engine fit E-1 --machine NOPE
    engine fit P-01 --out
    engine lay-up P-01 --on 2026-05-02 --by "New person"
    engine lay-up NOPE --by "New person"
    engine return P-01 --by "New person"
    engine return P-01
    engine withdraw P-09 --by "New person"
    engine factor P-01 hours 2 --on 2026-05-01 --why dust
    engine factor P-01 hours 0.5 --on 2026-05-01 --why " "
    machine add P-01
    machine add M-1 --site "New site" --start-at 5
    machine edit E-1 --name New
    task add P-01 "oil and FILTER" --every 100h
    task add P-01 New --every 100h --first 5km
    task add P-01 New --every 100h --covers Nope
    task add P-01 New --every 100h --covers New
    task add P-01 New --every 100h --last-done 2026-05-02
    task add P-01 New --every 100h --last-done 99999
    task add NOPE New --every 100h
    task edit P-01 "Oil and filter"
    task edit P-01 "Oil and filter" --covers Big
    task edit P-01 "Oil and filter" --every 100h --without fuel
    task edit P-01 "Oil and filter" --every 100h --last-done 2026-05-02
    task remove P-01 Nope
    task remove P-01 Cert --on 2026-05-02
    reading P-01 1000
    reading P-01 99999 --by "New person"
    reading P-01 1030 --on 2026-05-02
    reading P-01 5 --rolled-over
    reading P-01 5 --replaced 1025 10
    reading P-01 5 --replaced 1000 0
    reading P-01 5 --replaced 1000 0 --on 2026-04-15
    reading P-09 5
    reading E-1 500
    reading --void 999 --why x
    reading --restore 1
    log P-01
    log P-01 Nope
    log P-01 "Valve lash" --at 1030 --by "New person"
    log P-01 "Oil and filter" "Valve lash" --at 1030 --by "New person"
    log P-01 "Oil and filter" --at 1000 --by "New person"
    log P-01 "Oil and filter" --at 1030 --at 1031 --by "New person"
    log P-01 "Oil and filter" --at 1030 --on 2026-05-02
    log P-01 --defect x --until 2026-05-20
    log P-01 --note x --by " "
    log E-1 Oil --at 62000
    correct 1
    correct 1 --void
    correct 1 --at 1021
    correct 1 --task "Valve lash" --by "New person"
    correct 1 --on 2026-05-02
    correct 999 --by "New person"
    correct 2 --repair x --by "New person"
    defer P-01 Cert --until 2026-08-01 --why x --by "New person"
    defer P-01 "Oil and filter" --until 1100 --why x --by "New person"
    defer P-01 "Oil and filter" --until 1300 --until 2026-05-02 --why x --by "New person"
    defer P-01 Nope --until 2026-08-01 --why x --by "New person"
    defer P-01 Leak --until 1100 --why x --by "New person"
"""


@pytest.fixture(scope="module")
def refusing(new_database: Path, tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, bytes]:
    """The one database all refused commands are tried on, and all it holds: none of them may change it."""
    path = set_up(Path(shutil.copy(new_database, tmp_path_factory.mktemp("refusing"))), YARD)
    return path, path.read_bytes()


@pytest.mark.parametrize("line", [line.strip() for line in REFUSED.splitlines() if line.strip()])
def test_a_refused_command_says_why_in_one_line_and_changes_no_row(
    fleetcare: Runner, refusing: tuple[Path, bytes], line: str
) -> None:
    path, before = refusing
    ran = fleetcare("--db", str(path), "--as-of", "2026-05-01", *shlex.split(line))
    assert ran.status in {1, 2}
    assert (ran.out, ran.err.count("\n")) == ("", 1)
    assert "; " in ran.err
    assert path.read_bytes() == before


def test_a_command_that_reads_changes_no_row(fleetcare: Runner, refusing: tuple[Path, bytes]) -> None:
    path, before = refusing
    for line in ("due", "show P-01", 'show P-01 "Oil and filter"', "engine list", "machine list", "task list P-01"):
        assert fleetcare("--db", str(path), "--as-of", "2026-05-01", *shlex.split(line)).status == 0
    assert path.read_bytes() == before
