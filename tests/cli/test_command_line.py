"""What holds for every command: options in any place, one-line errors, exit statuses."""

import argparse
import os
import subprocess
import sys
from collections.abc import Iterator
from datetime import date
from typing import Any, cast

import pytest

from fleetcare import __version__
from fleetcare.__main__ import main
from fleetcare.cli.main import build_parser
from tests.cli.conftest import Runner

SUM = ("piston-speed", "--stroke", "90", "--rpm", "3000")


@pytest.mark.parametrize(
    "words",
    [
        ("--db", "yard.db", "--as-of", "2026-05-01", "calc", *SUM),
        ("calc", "--db", "yard.db", "--as-of", "2026-05-01", *SUM),
        ("calc", *SUM, "--db", "yard.db", "--as-of", "2026-05-01"),
        ("--db", "yard.db", "calc", *SUM, "--as-of", "2026-05-01"),
    ],
)
def test_the_database_and_the_day_may_stand_before_or_after_any_command(words: tuple[str, ...]) -> None:
    parsed = build_parser().parse_args(words)
    assert (parsed.db, parsed.as_of) == ("yard.db", date(2026, 5, 1))


def test_the_database_and_the_day_are_absent_where_nobody_gave_them() -> None:
    parsed = build_parser().parse_args(["calc", *SUM])
    assert "db" not in parsed
    assert "as_of" not in parsed


def commands_of(parser: argparse.ArgumentParser) -> dict[str, argparse.ArgumentParser]:
    """Give the commands a parser knows."""
    (group,) = (action for action in parser._actions if isinstance(action, argparse._SubParsersAction))
    return dict(group.choices)


@pytest.mark.parametrize("command", commands_of(build_parser()))
def test_the_parser_of_one_command_reads_it_as_the_parser_of_all_does(command: str) -> None:
    alone, all_of_them = commands_of(build_parser(command)), commands_of(build_parser())
    assert len(alone) < 4
    assert alone[command].format_help() == all_of_them[command].format_help()


def test_what_is_no_command_is_held_against_all_of_them(fleetcare: Runner) -> None:
    ran = fleetcare("dew")
    assert ran.status == 2
    assert all(repr(command) in ran.err for command in commands_of(build_parser()))


@pytest.mark.parametrize("words", [(), ("demo",), ("--as-of", "2026-05-01")], ids=" ".join)
def test_what_opens_the_screens_is_refused_in_one_line_where_there_is_no_terminal(
    fleetcare: Runner, words: tuple[str, ...]
) -> None:
    ran = fleetcare(*words)
    assert (ran.status, ran.out) == (2, "")
    assert ran.err == (
        "the screens need a terminal for input, output and errors; name a command, see fleetcare --help\n"
    )


def test_help_is_an_answer_with_status_0(fleetcare: Runner) -> None:
    ran = fleetcare("--help")
    assert (ran.status, ran.err) == (0, "")
    assert "Exit status" in ran.out


def test_the_version_is_that_of_the_package(fleetcare: Runner) -> None:
    assert fleetcare("--version").out == f"fleetcare {__version__}\n"


@pytest.mark.parametrize(
    ("words", "wrong", "remedy"),
    [
        (("mend",), "invalid choice: 'mend'", "see fleetcare --help"),
        (("calc",), "SUM", "see fleetcare calc --help"),
        (("calc", *SUM, "--colour"), "unrecognized arguments: --colour", "see fleetcare --help"),
        (("calc", "piston-speed", "--stroke", "90"), "--rpm", "see fleetcare calc piston-speed --help"),
        (("calc", "piston-speed", "--strok", "90", "--rpm", "1"), "--stroke", "see fleetcare calc piston-speed --help"),
        (("calc", *SUM, "--as-of", "2026-02-30"), "no day 2026-02-30", "check month and day against a calendar"),
        (("--as-of", "1 May", "calc", *SUM), "'1 May' is not a date", "such as 2026-05-01"),
    ],
)
def test_a_wrong_command_line_is_told_in_one_line_with_a_remedy_and_status_2(
    fleetcare: Runner, words: tuple[str, ...], wrong: str, remedy: str
) -> None:
    ran = fleetcare(*words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (2, "", 1)
    assert wrong in ran.err
    assert remedy in ran.err


def test_an_error_stays_one_line_whatever_was_typed(fleetcare: Runner) -> None:
    ran = fleetcare("calc", *SUM, "--note\n\x1b[31m")
    assert ran.err.count("\n") == 1
    assert "\\n\\x1b[31m" in ran.err


def test_an_interrupt_ends_quietly_with_status_130(capsys: pytest.CaptureFixture[str]) -> None:
    class Interrupted(list[str]):
        def __iter__(self) -> Iterator[str]:
            raise KeyboardInterrupt

    assert main(Interrupted()) == 130
    assert capsys.readouterr() == ("", "")


def test_a_fault_of_ours_is_one_line_that_asks_for_a_report_and_never_a_traceback(
    capsys: pytest.CaptureFixture[str],
) -> None:
    assert main(cast(Any, [5])) == 1
    assert capsys.readouterr().err.startswith("a fault in fleetcare itself (TypeError: ")


def test_the_entry_point_gives_the_status_of_the_command(capsys: pytest.CaptureFixture[str]) -> None:
    assert main(["calc", *SUM]) == 0
    assert "9 m/s" in capsys.readouterr().out


def test_a_reader_that_closes_the_pipe_early_is_no_error() -> None:
    reading, writing = os.pipe()
    os.close(reading)
    with open(writing, "wb") as closed:
        ran = _fleetcare_process("--help", stdout=closed)
    assert (ran.returncode, ran.stderr) == (0, b"")


@pytest.mark.skipif(not os.path.exists("/dev/full"), reason="only Linux has a device that is always full")
@pytest.mark.parametrize("words", [("--help",), ("calc", *SUM, "--json")])
def test_an_answer_that_cannot_be_written_is_told_in_one_line_with_status_1(words: tuple[str, ...]) -> None:
    with open("/dev/full", "wb") as full:
        ran = _fleetcare_process(*words, stdout=full)
    assert (ran.returncode, ran.stderr.count(b"\n")) == (1, 1)
    assert b"No space left" in ran.stderr


def _fleetcare_process(*words: str, stdout: Any) -> subprocess.CompletedProcess[bytes]:
    return subprocess.run(
        [sys.executable, "-m", "fleetcare", *words], stdout=stdout, stderr=subprocess.PIPE, check=False
    )


@pytest.mark.parametrize(
    "words", [("show", "a\udcff"), ("log", "P-01", "--note", "a\udcff"), ("--db", "a\udcff", "due")]
)
def test_bytes_that_are_no_text_are_refused_in_one_line(fleetcare: Runner, words: tuple[str, ...]) -> None:
    ran = fleetcare(*words)
    assert (ran.status, ran.out) == (2, "")
    assert ran.err == "'a\\udcff' holds bytes that are not UTF-8 text; type it in a terminal set to UTF-8\n"
