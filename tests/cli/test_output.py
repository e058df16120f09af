"""What is printed: safe for the terminal, the spreadsheet and the program that reads it."""

import io
import json
import os
import sys
from datetime import date
from decimal import Decimal
from enum import StrEnum
from pathlib import Path

import pytest

from fleetcare.cli import output
from fleetcare.domain.printable import clean
from fleetcare.errors import Refused


class Word(StrEnum):
    DUE = "due"


@pytest.mark.parametrize(
    ("typed", "shown"),
    [
        ("\x1b[2J", "\\x1b[2J"),  # clears the screen
        ("\x9b31m", "\\x9b31m"),  # the same in one C1 character
        ("a\u202eb", "a\\u202eb"),  # turns the writing direction
        ("a\nb\tc\r", "a\\nb\\tc\\r"),
        ("\udc80", "\\udc80"),  # what a byte that is no UTF-8 becomes
        ("\U000e0041", "\\U000e0041"),  # an invisible tag
        ("Sluice [/b] – 20 °C 水", "Sluice [/b] – 20 °C 水"),
    ],
)
def test_only_what_could_drive_a_terminal_is_shown_as_an_escape(typed: str, shown: str) -> None:
    assert clean(typed) == shown
    assert clean(shown) == shown


def test_an_answer_may_have_lines_but_talk_stays_one_line_each(capsys: pytest.CaptureFixture[str]) -> None:
    output.say("one\ntwo\x1b")
    output.complain("three\nfour", "five")
    assert capsys.readouterr() == ("one\ntwo\\x1b\n", "three\\nfour\nfive\n")


class _Terminal(io.StringIO):
    def isatty(self) -> bool:
        return True


def test_on_a_terminal_a_long_answer_goes_on_below_between_words_and_a_little_further_in(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    monkeypatch.setattr(sys, "stdout", terminal := _Terminal())
    monkeypatch.setenv("COLUMNS", "30")
    output.say("  Caution: hot oil burns, and used oil goes into a marked tank\nshort")
    assert terminal.getvalue().split("\n") == [
        "  Caution: hot oil burns, and",
        "    used oil goes into a",
        "    marked tank",
        "short",
        "",
    ]


def test_a_terminal_without_the_character_gets_an_escape(monkeypatch: pytest.MonkeyPatch) -> None:
    raw = io.BytesIO()
    monkeypatch.setattr(sys, "stdout", io.TextIOWrapper(raw, encoding="ascii"))
    output.say("2 × 3")
    output.finish()
    assert raw.getvalue() == b"2 \\xd7 3\n"


def test_a_process_without_output_streams_prints_nothing_and_does_not_fail(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "stdout", None)
    output.say("lost")
    output.deliver("lost")
    output.finish()
    output.say(output.table(["tag"], [["P-01"]]))


def test_a_table_lines_up_with_numbers_to_the_right() -> None:
    rows = [["P-01", Decimal("1250.50"), None, Word.DUE], ["水-2", Decimal(9), date(2026, 5, 1), "near"]]
    assert output.table(["engine", "at", "on", "state"], rows).split("\n") == [
        "engine      at  on          state",
        "------  ------  ----------  -----",
        "P-01    1250.5              due",
        "水-2         9  2026-05-01  near",
    ]


def test_a_combining_mark_takes_no_column() -> None:
    assert output.table(["a", "b"], [["e\u0301", "x"], ["f", "y"]]).split("\n")[2:] == ["e\u0301  x", "f  y"]


def test_an_empty_table_shows_its_headers() -> None:
    assert output.table(["engine", "task"], []) == "engine  task\n------  ----"


def test_a_table_too_wide_for_the_terminal_wraps_its_widest_column() -> None:
    text = output.table(["tag", "note"], [["P-01", "injector two leaks back, see card"]], width=24)
    assert text.split("\n")[2:] == ["P-01  injector two leaks", "      back, see card"]


def test_a_table_is_never_narrower_than_a_date_in_each_column() -> None:
    assert "2026-05-01" in output.table(["on", "note"], [[date(2026, 5, 1), "x" * 30]], width=5)


def test_a_table_on_a_terminal_fits_its_width(monkeypatch: pytest.MonkeyPatch) -> None:
    class Terminal(io.StringIO):
        def isatty(self) -> bool:
            return True

    monkeypatch.setattr(sys, "stdout", Terminal())
    monkeypatch.setenv("COLUMNS", "30")
    lines = output.table(["tag", "note"], [["P-01", "word " * 20]]).split("\n")
    assert max(len(line) for line in lines) <= 30


def test_json_keeps_figures_unrounded_and_whole_ones_whole() -> None:
    value = {
        "at": Decimal("1250"),
        "left": Decimal("0.123456789012"),
        "on": date(2026, 5, 1),
        "by": None,
        "s": Word.DUE,
    }
    assert json.loads(output.json_text(value)) == {
        "at": 1250, "left": 0.123456789012, "on": "2026-05-01", "by": None, "s": "due",
    }  # fmt: skip
    assert '"at": 1250,' in output.json_text(value)


def test_json_is_readable_utf8_yet_cannot_drive_a_terminal() -> None:
    text = output.json_text(["Düker\u202e\x9b\udc80"])
    assert text == '[\n  "Düker\\u202e\\u009b\\udc80"\n]\n'
    assert json.loads(text) == ["Düker\u202e\x9b\udc80"]


def test_json_refuses_what_it_has_no_form_for() -> None:
    with pytest.raises(TypeError, match="object has no JSON form"):
        output.json_text(object())


def test_delivered_text_goes_to_stdout_as_utf8_with_its_line_ends(capsysbinary: pytest.CaptureFixture[bytes]) -> None:
    output.deliver("a,ü\r\n")
    assert capsysbinary.readouterr().out == b"a,\xc3\xbc\r\n"


def test_a_stdout_without_bytes_still_gets_the_text(monkeypatch: pytest.MonkeyPatch) -> None:
    stream = io.StringIO()
    monkeypatch.setattr(sys, "stdout", stream)
    output.deliver("a\r\n")
    assert stream.getvalue() == "a\r\n"


def test_an_out_file_replaces_the_old_one_whole_and_leaves_nothing_beside_it(tmp_path: Path) -> None:
    target = tmp_path / "due.csv"
    target.write_text("old and longer")
    output.deliver("new\r\n", str(target))
    assert target.read_bytes() == b"new\r\n"
    assert list(tmp_path.iterdir()) == [target]


def test_an_out_file_behind_a_link_is_written_where_the_link_points(tmp_path: Path) -> None:
    (tmp_path / "link.csv").symlink_to(tmp_path / "real.csv")
    output.deliver("x", str(tmp_path / "link.csv"))
    assert (tmp_path / "link.csv").is_symlink()
    assert (tmp_path / "real.csv").read_text() == "x"


def test_an_out_file_in_a_missing_folder_is_refused(tmp_path: Path) -> None:
    with pytest.raises(Refused, match="there is no folder"):
        output.deliver("x", str(tmp_path / "missing" / "due.csv"))


def test_an_out_file_that_is_a_folder_is_refused(tmp_path: Path) -> None:
    with pytest.raises(Refused, match="cannot write"):
        output.deliver("x", str(tmp_path))


def test_a_device_is_written_to_and_not_replaced() -> None:
    output.deliver("x", os.devnull)
    assert not Path(os.devnull).is_file()


def test_labelled_texts_stand_under_each_other_and_go_on_under_their_own_beginning() -> None:
    told = output.labelled([("a", "one two three four five"), ("longer", "x\ny")], indent="  ", width=32)
    assert told == "  a       one two three four\n          five\n  longer  x\\ny"
    assert output.labelled([("a", "one two three")]) == "a  one two three"
    assert output.labelled([]) == ""
