"""What is refused says on the screens what to do there: fields by their labels, other commands by their keys."""

import ast
from collections.abc import Iterator
from pathlib import Path

import pytest

from fleetcare.tui.forms.all import FORMS
from fleetcare.tui.forms.words import on_screen, options_in

ROOT = Path(__file__).parents[2] / "fleetcare"
ELSEWHERE = ("answer", "findings", "rule_", "imports", "sheets", "entry", "measure", "settings", "upkeep", "csv_")
"""Modules, by how they begin, that no form leads to."""

ANSWERED = {"sure", "rolled-over", "replaced"}
"""Options that a form gives by the answer to a question."""

NOT_ASKED = {"void", "without"}
"""Options that no form has, so that nothing can be wrong with them: it is another form, or a list typed anew."""

MODULES = [
    path
    for room in ("drafts", "operations", "rulebook", "rules/due", "rules/nameplate.py", "rules/lash_points.py")
    for path in ([ROOT / room] if room.endswith(".py") else sorted((ROOT / room).glob("*.py")))
    if not path.name.startswith(ELSEWHERE)
]


def _texts(node: ast.expr, constants: dict[str, ast.expr]) -> Iterator[str]:
    """Give what an expression may say; what is filled in stands as a word."""
    match node:
        case ast.Constant(value=str(text)):
            yield text
        case ast.JoinedStr(values=parts):
            yield "".join(map(_filled, parts))
        case ast.IfExp(body=one, orelse=other):
            yield from _texts(one, constants)
            yield from _texts(other, constants)
        case ast.Name(id=name) if name in constants:
            yield from _texts(constants[name], constants)


def _filled(part: ast.expr) -> str:
    """Give a part of a text, what stands for one of two words as the first of them."""
    match part:
        case ast.Constant(value=text):
            return str(text)
        case ast.FormattedValue(value=ast.IfExp(body=ast.Constant(value=text))):
            return str(text)
    return "X-1"


def _errors() -> Iterator[tuple[str, str]]:
    """Give where something is refused, and each remedy it may have."""
    for path in MODULES:
        tree = ast.parse(path.read_text(encoding="utf-8"))
        named = {
            target.id: node.value
            for node in ast.walk(tree)
            if isinstance(node, ast.Assign)
            for target in node.targets
            if isinstance(target, ast.Name)
        }
        for node in ast.walk(tree):
            match node:
                case ast.Call(func=ast.Name(id="Refused" | "Misread" | "Doubted"), args=[_, remedy]):
                    yield from ((f"{path.name}, line {node.lineno}", text) for text in _texts(remedy, named))


ERRORS = list(_errors())
OPTIONS = {field.called.replace("_", "-") for form in FORMS.values() for field in form.fields}


def test_no_remedy_names_a_command_on_the_screens() -> None:
    assert len(ERRORS) > 100
    assert [(where, on_screen(text)) for where, text in ERRORS if "fleetcare " in on_screen(text)] == []


def test_every_option_a_remedy_names_is_a_field_of_a_form_or_the_answer_to_a_question() -> None:
    strange = [(where, text) for where, text in ERRORS if set(options_in(text)) - OPTIONS - ANSWERED - NOT_ASKED]
    assert strange == []


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("give --as-new", "give “As new”"),
        ("first --grid-origin DATE|VALUE", "first “grid origin”"),
        ("Reading 3 is suspect now; --restore 3 brings it back.", "Reading 3 is suspect now; b on its page brings it back."),
        (
            "no meter counts fuel, so Oil cannot fall due by fuel; add one with fleetcare engine edit P-01 --meter fuel",
            "no meter counts fuel, so Oil cannot fall due by fuel; add one to P-01: x, then e",
        ),
        ("P-01 - spare -- kept", "P-01 - spare -- kept"),
    ],
    ids=str,
)  # fmt: skip
def test_an_option_is_said_by_its_label_and_a_command_by_its_keys(text: str, said: str) -> None:
    assert on_screen(text, {"as-new": "As new"}) == said
