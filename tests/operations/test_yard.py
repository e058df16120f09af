"""All engines and machines at a glance."""

from datetime import date

import pytest

from fleetcare.cli.main import run
from fleetcare.context import Context
from fleetcare.domain.engines import Status
from fleetcare.operations.due_words import Group
from fleetcare.operations.yard import YardRow, find_in, yard
from tests.cli.conftest import no_screens

NEW = ("--in-service", "2024-01-10", "--as-new", "--start-at", "0h")


@pytest.fixture
def rows(ctx: Context) -> dict[str, YardRow]:
    """A machine with an engine, one laid up, one withdrawn; by tag."""
    for words in (
        ("machine", "add", "PH-1", "--name", "Pump house", "--site", "North Sluice"),
        ("engine", "add", "P-01", "--machine", "PH-1", "--meter", "hours", "--meter", "fuel", *NEW, "--start-at", "0L"),
        ("engine", "add", "P-02", "--site", "Alder Bank", "--meter", "hours", *NEW),
        ("engine", "add", "P-03", "--site", "Alder Bank", "--in-service", "2024-01-10"),
        ("task", "add", "P-01", "Oil", "--every", "250h"),
        ("task", "add", "P-01", "Coolant", "--every", "10y"),
        ("task", "add", "P-02", "Oil", "--every", "1y"),
        ("reading", "P-01", "262h", "--on", "2026-04-30"),
        ("reading", "P-01", "800L", "--on", "2026-04-20"),
        ("engine", "lay-up", "P-02", "--on", "2026-04-01", "--why", "dry", "--by", "Fenn"),
        ("engine", "withdraw", "P-03", "--on", "2026-04-01", "--why", "worn out"),
    ):
        assert run(("--db", str(ctx.path), "--as-of", "2026-05-01", *words), no_screens) == 0, words
    with ctx.read() as connection:
        return {row.tag: row for row in yard(connection, ctx.today())}


def test_they_stand_by_site_and_tag_and_what_was_withdrawn_comes_last(rows: dict[str, YardRow]) -> None:
    assert list(rows) == ["P-02", "P-01", "PH-1", "P-03"]


def test_a_row_says_where_it_is_what_its_meters_showed_and_when(rows: dict[str, YardRow]) -> None:
    row = rows["P-01"]
    assert (row.site, row.machine, row.shown, row.read_on) == (
        "North Sluice",
        "PH-1",
        "262 h, 800 L",
        date(2026, 4, 30),
    )


def test_a_row_counts_its_lines_by_group_and_names_the_worst(rows: dict[str, YardRow]) -> None:
    assert rows["P-01"].groups == {Group.OVERDUE: 1, Group.CLEAR: 1}
    assert rows["P-01"].worst is Group.OVERDUE
    assert rows["P-02"].worst is Group.BEFORE_RETURN
    assert rows["PH-1"].worst is None


def test_a_row_has_its_status_and_a_machine_none_but_in_service(rows: dict[str, YardRow]) -> None:
    assert [rows[tag].status for tag in ("P-02", "P-03", "PH-1")] == [
        Status.LAID_UP,
        Status.WITHDRAWN,
        Status.IN_SERVICE,
    ]


@pytest.mark.parametrize(
    ("text", "tags"),
    [("", ["P-02", "P-01", "PH-1", "P-03"]), ("ph-1", ["P-01", "PH-1"]), ("LAID alder", ["P-02"]), ("zzz", [])],
)
def test_rows_are_found_by_all_their_words(rows: dict[str, YardRow], text: str, tags: list[str]) -> None:
    assert [row.tag for row in find_in(rows.values(), text)] == tags
