"""What is shipped, and what the checks run with."""

import re
import tomllib
from importlib.metadata import entry_points
from pathlib import Path

import fleetcare
from fleetcare.__main__ import main

ROOT = Path(__file__).parents[2]
PROJECT = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))
LOCK = (ROOT / ".ci" / "constraints.txt").read_text(encoding="utf-8").splitlines()


def test_the_command_starts_the_program() -> None:
    (command,) = entry_points(group="console_scripts", name="fleetcare")
    assert command.load() is main


def test_the_version_is_written_once() -> None:
    assert PROJECT["tool"]["hatch"]["version"]["path"] == "fleetcare/__init__.py"
    assert re.fullmatch(r"[0-9]+\.[0-9]+\.[0-9]+", fleetcare.__version__)


def test_the_migrations_travel_inside_the_package() -> None:
    assert PROJECT["tool"]["hatch"]["build"]["targets"]["wheel"]["force-include"] == {
        "migrations": "fleetcare/_migrations"
    }


def test_every_dependency_has_one_exact_version_in_the_lock_and_no_address() -> None:
    pins = [line for line in LOCK if not line.startswith("#")]
    assert all(re.fullmatch(r"[A-Za-z0-9._-]+==[A-Za-z0-9.]+", pin) for pin in pins)
    locked = {_normal(pin.partition("==")[0]) for pin in pins}
    project = PROJECT["project"]
    asked = [*project["dependencies"], *project["optional-dependencies"]["dev"], *PROJECT["build-system"]["requires"]]
    assert {_normal(re.split(r"[<>=]", name)[0]) for name in asked} <= locked


def _normal(name: str) -> str:
    return re.sub(r"[-_.]+", "-", name).lower()
