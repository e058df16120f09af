"""What is shipped, and what the checks run with."""

import os
import re
import subprocess
import sys
import tomllib
import zipfile
from importlib.metadata import entry_points
from pathlib import Path

import pytest
from hatchling.builders.wheel import WheelBuilder

import fleetcare
from fleetcare.__main__ import main
from tests.house.conftest import ROOT, read

PROJECT = tomllib.loads(read("pyproject.toml"))
LOCK = read(".ci/constraints.txt").splitlines()


@pytest.fixture(scope="module")
def shipped(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The content of the wheel, as an installation unpacks it."""
    folder = tmp_path_factory.mktemp("wheel")
    (wheel,) = WheelBuilder(str(ROOT)).build(directory=str(folder), versions=["standard"])
    with zipfile.ZipFile(wheel) as content:
        content.extractall(folder / "site")
    return folder / "site"


def _files(folder: Path, *but: str) -> set[str]:
    return {
        path.relative_to(folder).as_posix()
        for path in folder.rglob("*")
        if path.is_file() and "__pycache__" not in path.parts and path.relative_to(folder).parts[0] not in but
    }


def test_the_wheel_holds_the_whole_package_with_its_data_and_its_migrations_and_nothing_else(shipped: Path) -> None:
    assert _files(shipped / "fleetcare", "_migrations") == _files(ROOT / "fleetcare")
    assert _files(shipped / "fleetcare" / "_migrations") == _files(ROOT / "migrations")
    assert {path.name for path in shipped.iterdir()} == {"fleetcare", f"fleetcare-{fleetcare.__version__}.dist-info"}


def test_what_is_shipped_makes_a_database_and_knows_its_schedules_far_from_the_checkout(
    shipped: Path, tmp_path: Path
) -> None:
    say = f"import fleetcare; assert fleetcare.__file__.startswith({str(shipped)!r}); import runpy, sys; "
    run = say + "runpy.run_module('fleetcare', run_name='__main__')"
    for words in (("engine", "add", "P-01"), ("schedule", "apply", "diesel-genset", "P-01", "--from", "unset")):
        ran = subprocess.run(
            [sys.executable, "-c", run, "--db", "new.db", *words],
            cwd=tmp_path,
            env={**os.environ, "PYTHONPATH": str(shipped)},
            capture_output=True,
            text=True,
            check=False,
        )
        assert (ran.returncode, ran.stderr) == (0, "")


def test_the_command_starts_the_program() -> None:
    (command,) = entry_points(group="console_scripts", name="fleetcare")
    assert command.load() is main


def test_the_version_is_written_once() -> None:
    assert PROJECT["tool"]["hatch"]["version"]["path"] == "fleetcare/__init__.py"
    assert re.fullmatch(r"[0-9]+\.[0-9]+\.[0-9]+", fleetcare.__version__)


def test_every_dependency_has_one_exact_version_in_the_lock_and_no_address() -> None:
    pins = [line for line in LOCK if not line.startswith("#")]
    assert all(re.fullmatch(r"[A-Za-z0-9._-]+==[A-Za-z0-9.]+", pin) for pin in pins)
    locked = {_normal(pin.partition("==")[0]) for pin in pins}
    assert len(locked) == len(pins)
    project = PROJECT["project"]
    asked = [*project["dependencies"], *project["optional-dependencies"]["dev"], *PROJECT["build-system"]["requires"]]
    assert {_normal(re.split(r"[<>=]", name)[0]) for name in asked} <= locked


def _normal(name: str) -> str:
    return re.sub(r"[-_.]+", "-", name).lower()
