"""How the code is kept: small modules, one clock, one place that prints."""

import ast
from collections.abc import Iterator
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[2]
MODULES = sorted(
    path
    for room in ("fleetcare", "migrations", "tests")
    for path in (ROOT / room).rglob("*.py")
    if "__pycache__" not in path.parts
)
CODE = [path for path in MODULES if path.is_relative_to(ROOT / "fleetcare")]

LONGEST = 300
LONGER = {
    "migrations/versions/20261201_first_tables.py": "all tables of the first release in one revision",
}

CLOCKS = {
    ("date", "today"),
    ("datetime", "today"),
    ("datetime", "now"),
    ("datetime", "utcnow"),
    ("time", "time"),
    ("time", "time_ns"),
    ("func", "now"),
}


def _name(path: Path) -> str:
    return path.relative_to(ROOT).as_posix()


def _calls(path: Path) -> Iterator[tuple[str, str]]:
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Attribute):
            owner = node.value
            yield owner.attr if isinstance(owner, ast.Attribute) else getattr(owner, "id", ""), node.attr


@pytest.mark.parametrize("path", MODULES, ids=_name)
def test_a_module_stays_short_enough_to_be_read_in_one_go(path: Path) -> None:
    lines = len(path.read_text(encoding="utf-8").splitlines())
    assert (lines > LONGEST) == (_name(path) in LONGER), f"{lines} lines"


def test_only_the_context_reads_the_clock() -> None:
    readers = {_name(path) for path in CODE if CLOCKS & set(_calls(path))}
    assert readers == {"fleetcare/context.py"}


def test_only_the_output_module_prints() -> None:
    printers = {
        _name(path)
        for path in CODE
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8")))
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and node.func.id == "print"
    }
    assert printers == {"fleetcare/cli/output.py"}


ERRORS = {"Refused", "Misread", "NoDatabase"}


def test_every_error_is_raised_with_a_remedy() -> None:
    raised = [
        (_name(path), node)
        for path in CODE
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8")))
        if isinstance(node, ast.Call) and isinstance(node.func, ast.Name) and node.func.id in ERRORS
    ]
    assert len(raised) > 100
    for name, call in raised:
        detail, remedy = call.args
        assert not any(isinstance(part, ast.Constant) and not part.value for part in (detail, remedy)), (
            f"{name}, line {call.lineno}: say what is wrong, and how to mend it"
        )


@pytest.mark.parametrize("path", CODE, ids=_name)
def test_every_module_and_every_public_name_says_what_it_gives(path: Path) -> None:
    tree = ast.parse(path.read_text(encoding="utf-8"))
    assert ast.get_docstring(tree), "no module docstring"
    assert [node.name for node in _public(tree) if not ast.get_docstring(node)] == []


def _public(tree: ast.Module | ast.ClassDef) -> Iterator[ast.FunctionDef | ast.ClassDef]:
    """Give the public functions and classes of a module, and the public methods of those classes."""
    for node in tree.body:
        if isinstance(node, ast.FunctionDef | ast.ClassDef) and not node.name.startswith("_"):
            yield node
            if isinstance(node, ast.ClassDef):
                yield from _public(node)
