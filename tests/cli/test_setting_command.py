"""`setting`: list, show, change."""

from pathlib import Path

import pytest

from tests.cli.conftest import Ran, Runner


@pytest.fixture
def setting(fleetcare: Runner, db: Path) -> Runner:
    """Run `setting` on the test's own database."""

    def run(*words: str) -> Ran:
        return fleetcare("setting", *words, "--db", str(db))

    return run


def test_without_a_name_all_are_listed_with_value_default_and_meaning(setting: Runner) -> None:
    setting("cap-hours", "20")
    head, _, *rows = setting().out.splitlines()
    assert head.split() == ["setting", "value", "default", "meaning"]
    assert [row.split()[:3] for row in rows] == [
        ["cap-hours", "20", "24"],
        ["cap-distance", "1800", "1800"],
        ["cap-fuel", "10000", "10000"],
        ["cap-starts", "200", "200"],
        ["stale-days", "-", "-"],
        ["shop-name", "-", "-"],
        ["supervisors", "-", "-"],
        ["holidays", "-", "-"],
    ]
    assert rows[0].endswith("most hours a meter may gain in a day")


def test_a_name_shows_one_and_a_value_sets_it(setting: Runner) -> None:
    assert setting("shop-name", "Tallow Fen Drainage Board").status == 0
    ran = setting("shop-name")
    assert ran.out.splitlines()[2:] == [
        "shop-name  Tallow Fen Drainage Board  -        the shop's name, for what is printed"
    ]


def test_an_empty_value_goes_back_to_the_default(setting: Runner) -> None:
    setting("cap-starts", "9")
    assert setting("cap-starts", "").out.splitlines()[2].split()[:3] == ["cap-starts", "200", "200"]


def test_a_hostile_name_of_the_shop_is_shown_and_drives_nothing(setting: Runner) -> None:
    ran = setting("shop-name", "[/b]\x1b[2J")
    assert (ran.status, ran.err) == (0, "")
    assert "[/b]\\x1b[2J" in ran.out


@pytest.mark.parametrize(
    ("words", "status", "wrong"),
    [
        (("cap-hour",), 1, "there is no setting 'cap-hour'; did you mean cap-hours"),
        (("cap-hour", "3"), 1, "there is no setting 'cap-hour'; did you mean cap-hours"),
        (("cap-hours", "0"), 1, "cap-hours: it cannot be 0; give a number above 0"),
        (("holidays", "Easter"), 2, "holidays: 'Easter' is no day; give days such as 2026-12-25, 2026-12-26"),
        (("holidays", ","), 1, "holidays: no day stands in ','; give days such as 2026-12-25, 2026-12-26"),
        (("cap-hours", "x"), 2, "cap-hours: 'x' is not a figure"),
        (("cap-hours", "3", "4"), 2, "unrecognized arguments: 4"),
    ],
)
def test_what_cannot_be_is_one_line_and_changes_nothing(
    setting: Runner, db: Path, words: tuple[str, ...], status: int, wrong: str
) -> None:
    before = db.read_bytes()
    ran = setting(*words)
    assert (ran.status, ran.out, ran.err.count("\n")) == (status, "", 1)
    assert ran.err.startswith(wrong)
    assert db.read_bytes() == before


def test_looking_needs_a_database_and_changing_makes_one(fleetcare: Runner, tmp_path: Path) -> None:
    path = tmp_path / "new.db"
    assert fleetcare("setting", "--db", str(path)).status == 3
    assert fleetcare("setting", "cap-hours", "zero", "--db", str(path)).status == 2
    assert not path.exists()
    assert fleetcare("setting", "cap-hours", "20", "--db", str(path)).status == 0
    assert path.exists()
