"""The documents name what the program has, and nothing it has not."""

import argparse
import re
from collections.abc import Iterator
from pathlib import Path

import pytest

from fleetcare import __version__, errors
from fleetcare.cli.main import build_parser
from fleetcare.db.tables import metadata
from fleetcare.operations.settings import SETTINGS
from fleetcare.rules.due.row import COLUMNS
from fleetcare.tui.actions import ACTIONS
from tests.house.conftest import ROOT, read

README, DEVELOPERS, CHANGELOG = read("README.md"), read("DEVELOPERS.md"), read("CHANGELOG.md")
DOCUMENTS = {"README.md": README, "DEVELOPERS.md": DEVELOPERS, "CHANGELOG.md": CHANGELOG}
LONGEST_FOR_DEVELOPERS = 250
CALLED = {"item": "engine's page", "entry": "entry line"}
"""What the README calls a place of the screens, where not by its own name."""
KINDS = [kind for kind in vars(errors).values() if isinstance(kind, type) and issubclass(kind, errors.FleetError)]


def _commands(parser: argparse.ArgumentParser, words: str = "") -> Iterator[tuple[str, argparse.ArgumentParser]]:
    """Give every command that can be run, "engine add", with its parser."""
    groups = [action for action in parser._actions if isinstance(action, argparse._SubParsersAction)]
    for group in groups:
        for name, child in group.choices.items():
            yield from _commands(child, f"{words} {name}".strip())
    if not groups:
        yield words, parser


COMMANDS = dict(_commands(build_parser()))


def _named_in_the_table() -> set[str]:
    """Give the commands of the README's table: a row of `engine add\\|edit` names "engine add" and "engine edit"."""
    table = README.partition("## Commands")[2].partition("\n## ")[0]
    named = set()
    for cell in re.findall(r"^\| (`.+?`) \|", table, re.MULTILINE):
        for span in re.findall(r"`([^`]+)`", cell):
            command, *rest = span.replace("\\|", "|").split()
            actions = rest[0].split("|") if rest and re.fullmatch(r"[a-z0-9|-]+", rest[0]) and rest[0][0] != "-" else []
            named |= {f"{command} {action}" for action in actions} or {command}
    return named


def test_the_readme_lists_every_command_and_no_other() -> None:
    assert _named_in_the_table() == set(COMMANDS)


@pytest.mark.parametrize("command", COMMANDS)
def test_every_option_of_a_command_says_what_it_is_for(command: str) -> None:
    silent = [
        action.option_strings for action in COMMANDS[command]._actions if action.option_strings and not action.help
    ]
    assert silent == []


def test_the_readme_says_what_every_key_does_and_names_no_other() -> None:
    table = README.partition("## The screens")[2].partition("\n## ")[0]
    places = dict(re.findall(r"^\| (.+?) \| (`.+) \|$", table, re.MULTILINE))
    said = {place: set(cell.split(", ")) for place, cell in places.items()}
    wanted: dict[str, set[str]] = {}
    for action in ACTIONS:
        keys = " ".join(f"`{key}`" for key in action.keys_said)
        wanted.setdefault(CALLED.get(action.place, action.place), set()).add(f"{keys} {action.word}")
    assert said == wanted


def test_the_readme_says_every_option_of_the_due_list() -> None:
    options = [option for action in COMMANDS["due"]._actions for option in action.option_strings]
    assert [option for option in options if option.startswith("--") and f"`{option}" not in README] == ["--help"]


def test_the_readme_names_every_setting() -> None:
    assert [spec.name for spec in SETTINGS if f"`{spec.name}`" not in README] == []


def test_the_readme_gives_the_columns_of_the_due_csv_in_their_order() -> None:
    assert ",".join(COLUMNS) in re.sub(r"\s", "", README)


def test_the_documents_explain_every_exit_status() -> None:
    statuses = {kind.exit_code for kind in KINDS}
    section = README.partition("Exit status: ")[2].partition("\n\n")[0]
    assert {0, 130, *statuses} == {int(number) for number in re.findall(r"(?:^|; )([0-9]+) ", section)}


def test_every_table_is_named_for_developers() -> None:
    assert [name for name in sorted(metadata.tables) if f"`{name}`" not in DEVELOPERS] == []


def test_every_room_and_every_file_of_the_due_rules_is_named_for_developers() -> None:
    rooms = [
        path.stem for path in (ROOT / "fleetcare").iterdir() if path.suffix in {"", ".py"} and path.name[:2] != "__"
    ]
    files = [path.stem for path in (ROOT / "fleetcare/rules/due").glob("*.py") if path.name != "__init__.py"]
    tests = [path.name for path in (ROOT / "tests").iterdir() if any(path.glob("*.py"))]
    wanted = [*rooms, *files, *(f"tests/{name}" for name in tests)]
    assert [name for name in wanted if f"`{name}`" not in DEVELOPERS and f"`{name}/`" not in DEVELOPERS] == []


def test_what_developers_are_told_of_is_there() -> None:
    spans = set(re.findall(r"`([^`\s]+)`", DEVELOPERS))
    paths = {span for span in spans if re.match(r"(fleetcare|tests|migrations|\.ci)/", span) and "*" not in span}
    assert [path for path in sorted(paths) if not (ROOT / path.partition("::")[0]).exists()] == []
    defined = "\n".join(path.read_text(encoding="utf-8") for path in (ROOT / "tests").rglob("test_*.py"))
    tests = {span.rpartition("::")[2] for span in spans if span.rpartition("::")[2].startswith("test_")}
    tests = {name for name in tests if not name.endswith(".py")}
    assert tests
    assert [name for name in sorted(tests) if f"def {name}(" not in defined] == []


def test_the_page_for_developers_can_be_read_in_one_go() -> None:
    assert len(DEVELOPERS.splitlines()) <= LONGEST_FOR_DEVELOPERS


@pytest.mark.parametrize("name", DOCUMENTS)
def test_every_link_between_the_documents_leads_somewhere(name: str) -> None:
    for target in re.findall(r"\]\((?!https:)([^)\s]+)\)", DOCUMENTS[name]):
        path, _, anchor = target.partition("#")
        page = Path(path or name)
        assert (ROOT / page).exists(), target
        if anchor:
            titles = re.findall(r"^#+ (.+)$", read(page.as_posix()), re.MULTILINE)
            assert anchor in {re.sub(r"[^a-z0-9 -]", "", title.lower()).replace(" ", "-") for title in titles}, target


def test_every_kind_of_error_stands_in_the_tree_at_the_top_of_its_module() -> None:
    tree = re.findall(r"^ *([A-Z]\w+)(?:  |$)", errors.__doc__ or "", re.MULTILINE)
    assert {kind.__name__ for kind in KINDS} == set(tree)


def test_the_changelog_tells_of_the_version_that_is_here() -> None:
    assert "## [Unreleased]" in CHANGELOG
    assert __version__ in CHANGELOG
