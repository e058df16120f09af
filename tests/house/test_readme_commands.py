"""Everything the README tells to type, typed in order, with the answers it shows.

A block marked `sh` is run as it stands in a folder that holds a copy of the demo fleet. A line that ends in
`# refused` is refused with status 1, every other line is done. A block marked `text` is what the last command
before it prints: its lines stand in the output in that order, `...` for lines left out. A block marked with a
file's name, as in `csv round.csv`, is saved under that name.
"""

import re
import shlex
import shutil
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path

import pytest

from tests.cli.conftest import Ran, Runner
from tests.house.conftest import ROOT, read

BLOCK = re.compile(r"^```(\S+)(?: (\S+))?\n(.*?)^```$", re.MULTILINE | re.DOTALL)
REFUSED = "# refused"
AFTER_INSTALLATION = "\n## A first engine\n"
"""Where the README begins to use the program; the installation before it is typed by `.ci/run`, on a new copy."""


@dataclass(frozen=True)
class Block:
    """One fenced block: its language, the file it is saved as (or None), and what is in it."""

    language: str
    file: str | None
    text: str


def _blocks() -> Iterator[Block]:
    """Give every block from the first after the installation on."""
    typed = read("README.md").partition(AFTER_INSTALLATION)[2]
    for found in BLOCK.finditer(typed):
        yield Block(*found.groups())


def _lines(text: str) -> Iterator[str]:
    """Give the commands of a block, each on one line."""
    for line in text.replace("\\\n", " ").splitlines():
        if line.strip() and not line.startswith("#"):
            yield line


def _assert_shown(shown: str, ran: Ran) -> None:
    """Every line shown stands in what was printed, after the one shown before it."""
    printed = iter([*ran.out.splitlines(), *ran.err.splitlines()])
    for line in shown.splitlines():
        if line.strip() not in {"", "..."}:
            assert any(line.rstrip() == found.rstrip() for found in printed), f"{line!r} is not in\n{ran.out}{ran.err}"


def test_what_the_readme_tells_to_type_does_what_it_shows(
    fleetcare: Runner, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    shutil.copy(ROOT / "demo_fleet.db", tmp_path)
    monkeypatch.chdir(tmp_path)
    ran: Ran | None = None
    for block in _blocks():
        if block.file is not None:
            Path(block.file).write_text(block.text, encoding="utf-8")
        elif block.language == "text":
            assert ran is not None
            _assert_shown(block.text, ran)
        elif block.language == "sh":
            for line in _lines(block.text):
                ran = _type(line, fleetcare, monkeypatch) or ran
    assert ran is not None, "nothing was typed"


def _type(line: str, fleetcare: Runner, monkeypatch: pytest.MonkeyPatch) -> Ran | None:
    """Do what a line says, as a shell would."""
    match shlex.split(line, comments=True):
        case ["fleetcare", *words]:
            ran = fleetcare(*words)
            assert ran.status == (1 if line.rstrip().endswith(REFUSED) else 0), f"{line}\n{ran.out}{ran.err}"
            return ran
        case ["cp", source, target]:
            shutil.copy(source, target)
        case ["export", assignment]:
            monkeypatch.setenv(*assignment.split("=", 1))
        case words:
            pytest.fail(f"this test cannot type {words}")
    return None
