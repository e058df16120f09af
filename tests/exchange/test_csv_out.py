"""CSV handed out: lawful, safe for the spreadsheet, and never over a file that is there."""

import csv
import io
from datetime import date
from decimal import Decimal
from pathlib import Path

import pytest

from fleetcare.errors import Refused
from fleetcare.exchange.csv_out import csv_text, write_new


def test_csv_follows_rfc_4180_and_reads_back() -> None:
    rows = [["P-01", 'the "big" one, left', Decimal("1234.50"), date(2026, 5, 1), None, "line\nbreak"]]
    text = csv_text(["engine", "note", "at", "on", "by", "more"], rows)
    assert text.startswith('engine,note,at,on,by,more\r\nP-01,"the ""big"" one, left",1234.5,2026-05-01,,')
    assert list(csv.reader(io.StringIO(text, newline="")))[1] == [
        "P-01", 'the "big" one, left', "1234.5", "2026-05-01", "", "line\nbreak",
    ]  # fmt: skip


@pytest.mark.parametrize("typed", ["=1+1", "+44 1", "-oil", "@SUM(A1)", "\t=1", "\r=1", "\uff1d1"])
def test_text_a_spreadsheet_could_run_gets_an_apostrophe(typed: str) -> None:
    assert csv_text(["note"], [[typed]]).split("\r\n")[1].lstrip('"').startswith("'")


@pytest.mark.parametrize("figure", [Decimal("-12.5"), -3, "-12.5", "+7"])
def test_a_number_in_csv_stays_a_number(figure: Decimal | int | str) -> None:
    assert csv_text(["remaining"], [[figure]]) == f"remaining\r\n{figure}\r\n"


def test_csv_shows_control_characters_instead_of_sending_them() -> None:
    assert csv_text(["note"], [["\x1b[2J"]]) == "note\r\n\\x1b[2J\r\n"


def test_a_name_that_is_taken_gets_a_number_and_nothing_is_written_over(tmp_path: Path) -> None:
    paths = [write_new(tmp_path, "due.csv", text) for text in ("one", "two", "three")]
    assert [path.name for path in paths] == ["due.csv", "due-2.csv", "due-3.csv"]
    assert [path.read_text() for path in paths] == ["one", "two", "three"]


def test_a_file_is_written_as_utf_8_with_its_own_line_ends(tmp_path: Path) -> None:
    assert write_new(tmp_path, "due.csv", "Schöpf\r\n").read_bytes() == "Schöpf\r\n".encode()


def test_a_folder_that_is_not_there_is_refused_with_the_path(tmp_path: Path) -> None:
    with pytest.raises(Refused, match=r"cannot write .*gone/due\.csv") as refused:
        write_new(tmp_path / "gone", "due.csv", "")
    assert refused.value.remedy


def test_nothing_half_written_is_left_behind(tmp_path: Path) -> None:
    with pytest.raises(UnicodeEncodeError):
        write_new(tmp_path, "due.csv", "\ud800")
    assert list(tmp_path.iterdir()) == []
