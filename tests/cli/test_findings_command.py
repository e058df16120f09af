"""`findings` and `answer`: what is printed, and what an answer does to the due list."""

import csv
import io
import json
from collections.abc import Callable
from decimal import Decimal
from pathlib import Path

import pytest

from fleetcare.domain.cautions import GENERAL
from tests.cli.conftest import Runner

YARD = """
    engine add P-01 --site "North Sluice" --cylinders 3 --fuel diesel --meter hours --start-at 0 --in-service 2026-01-01
    engine add G-01 --cylinders 1 --fuel diesel --duty emergency --meter hours
    reading P-01 100
    measure compression P-01 low.csv --on 2026-04-01 --by Fenn
    measure spot P-01 hot.csv --on 2026-04-02
"""
LOW = "1-compression-r75-2"
HOT = "2-spot-coolant"

SHEETS = {
    "low": ("pressure,1,dry,27,bar", "pressure,2,dry,19,bar", "pressure,3,dry,27,bar"),
    "fine": ("pressure,1,dry,27,bar", "pressure,2,dry,26,bar", "pressure,3,dry,27,bar"),
    "hot": ("coolant,,,104,",),
    "hotter": ("coolant,,,112,",),
}


@pytest.fixture(autouse=True)
def files(tmp_path_factory: pytest.TempPathFactory, monkeypatch: pytest.MonkeyPatch) -> None:
    """The sheets as files of the folder one works in."""
    monkeypatch.chdir(tmp_path_factory.mktemp("sheets"))
    for name, rows in SHEETS.items():
        Path(f"{name}.csv").write_text("\n".join(["quantity,point,phase,value,unit", *rows]))


@pytest.fixture
def yard(open_yard: Callable[[str], Runner]) -> Runner:
    """P-01 with a low cylinder and a hot engine."""
    return open_yard(YARD)


def states(yard: Runner) -> dict[str, str]:
    """The state of each finding, by id."""
    return {row["id"]: row["state"] for row in json.loads(yard("findings", "--format", "json").out)}


def test_a_finding_is_printed_with_its_whole_working(yard: Runner) -> None:
    ran = yard("findings", "--engine", "p-01")
    assert (ran.status, ran.err) == (0, "")
    low, hot, general = ran.out.rstrip("\n").split("\n\n")
    assert general == GENERAL
    assert low.splitlines() == [
        f"{LOW}  P-01, cylinder 2: low compression (alarm, open)",
        "  measured     70.37 %, limit 75 %, margin -4.63 %",
        "  explanation  low compression at cylinder 2: the cylinder is low: valves, rings, bore or head gasket; compression"
        " as a share of the highest at cylinder 2 70.37 %, 4.63 % below the alarm limit of 75 %; since 2026-04-01",
        "  working      compression as a share of the highest 70.37 % (compression-r75) from compression 19 bar, highest 27 bar",
        "  evidence     compression at cylinder 2 19 bar, dry on 2026-04-01",
        "  since        2026-04-01",
        "  rule         compression-r75",
        "  source       lowest at least 75 % of highest: TM 5-4210-230-14&P-1 addendum 2; car makers' service texts of 2012"
        " and of 1992 to 2010",
        "  next step    wet-test it with about 15 ml of oil (not much more in a diesel), check its lash first, then leak-down",
        "  caution      Ignition and fuel off before cranking; crank with a remote starter, not the key; stand clear of plug"
        " holes. No large quantities of oil into a diesel: it can lock.",
    ]
    assert hot.startswith(f"{HOT}  P-01, the engine: hot engine (alert, open)\n")


def test_csv_json_and_table_agree_cell_for_cell(yard: Runner) -> None:
    yard("answer", HOT, "--accept", "--why", "hill climb", "--by", "Fenn")
    table = list(csv.DictReader(io.StringIO(yard("findings", "--format", "csv").out, newline="")))
    objects = json.loads(yard("findings", "--format", "json").out)
    blocks = yard("findings").out.split("\n\n")
    assert len(table) == len(objects) == 2
    for cells, values, block in zip(table, objects, blocks, strict=False):
        assert list(cells) == list(values)
        for name, value in values.items():
            same = float(cells[name]) == value if isinstance(value, int | float) else cells[name] == (value or "")
            assert same, name
        for name in ("id", "engine", "subject", "severity", "state", "cause", "rule", "source", "next_step", "because"):
            assert cells[name] in block
        for name in ("explanation", "working", "evidence", "since", "due_by"):
            assert cells[name] in block
        assert cells["caution"].removesuffix(GENERAL).rstrip() in block
        assert f"{round(Decimal(cells['measured']), 2).normalize():f} {cells['unit']}" in block


def test_the_columns_come_in_the_order_scripts_rely_on(yard: Runner) -> None:
    assert yard("findings", "--format", "csv").out.splitlines()[0] == (
        "id,engine,rule,severity,subject,measured,unit,limit,margin,since,source,explanation,next_step,state,because,cause,"
        "working,evidence,caution,due_by"
    )


def test_only_open_ones_of_one_engine_may_be_asked_for(yard: Runner) -> None:
    yard("answer", HOT, "--accept", "--why", "hill climb", "--by", "Fenn")
    ids = [row["id"] for row in json.loads(yard("findings", "--open", "--format", "json").out)]
    assert ids == [LOW]
    assert yard("findings", "--engine", "G-01").out == f"No findings.\n\n{GENERAL}\n"
    unknown = yard("findings", "--engine", "P-1")
    assert (unknown.status, unknown.err) == (
        1,
        "no engine or machine has the tag 'P-1'; did you mean P-01?\n",
    )


def test_findings_may_be_written_to_a_file(yard: Runner, tmp_path: Path) -> None:
    ran = yard("findings", "--format", "csv", "--out", str(tmp_path / "f.csv"))
    assert ran.out == f"2 findings written to {tmp_path / 'f.csv'}\n"
    assert (tmp_path / "f.csv").read_text().startswith("id,engine,")
    yard("findings", "--engine", "G-01", "--out", str(tmp_path / "t.txt"))
    assert (tmp_path / "t.txt").read_text().startswith("No findings.")


def test_a_later_sheet_clears_a_finding_and_says_so(yard: Runner) -> None:
    yard("measure", "compression", "P-01", "fine.csv", "--on", "2026-04-20")
    assert states(yard) == {HOT: "open", LOW: "cleared"}
    assert "  because      cleared by entry 3 on 2026-04-20\n" in yard("findings").out
    refused = yard("answer", LOW, "--accept", "--why", "x", "--by", "Fenn")
    assert refused.err == f"finding {LOW} is cleared by entry 3 on 2026-04-20; there is nothing left to answer\n"


def test_an_accepted_finding_opens_again_when_it_is_graver(yard: Runner) -> None:
    ran = yard("answer", HOT, "--accept", "--why", "hill climb", "--by", "Fenn")
    assert ran.out == (
        f"Finding {HOT} of P-01 accepted as alert by Fenn: hill climb\n"
        "It opens again should a later sheet find it graver than alert.\n"
    )
    assert states(yard)[HOT] == "accepted"
    yard("measure", "spot", "P-01", "hotter.csv", "--on", "2026-04-20")
    assert states(yard)[HOT] == "open"
    assert "graver than when it was accepted as alert by Fenn on 2026-05-01: hill climb" in yard("findings").out


def test_a_follow_up_is_a_line_of_the_due_list_and_a_sheet_after_it_opens_the_finding_again(yard: Runner) -> None:
    ran = yard("answer", LOW, "--follow-up", "--why", "look at the head", "--by", "Fenn")
    assert (ran.status, ran.err) == (0, "")
    assert ran.out.startswith(
        f"Follow-up of finding {LOW} of P-01 raised: Low compression, cylinder 2, due 2026-05-01.\n"
    )
    (line,) = csv.DictReader(io.StringIO(yard("due", "--format", "csv").out, newline=""))
    assert (line["engine"], line["task"], line["state"]) == ("P-01", "Low compression, cylinder 2", "due")
    assert states(yard)[LOW] == "follow-up raised"
    again = yard("answer", LOW, "--follow-up", "--why", "look", "--by", "Fenn")
    assert (again.status, again.err.startswith(f"finding {LOW} has a follow-up: ")) == (1, True)
    yard("log", "P-01", "Low compression, cylinder 2", "--at", "110h")
    assert states(yard)[LOW] == "follow-up raised"
    ran = yard("--as-of", "2026-05-09", "measure", "compression", "P-01", "low.csv", "--on", "2026-05-08")
    assert ran.status == 0
    later = yard("--as-of", "2026-05-09", "findings", "--format", "json")
    (low,) = [row for row in json.loads(later.out) if row["id"] == LOW]
    assert (low["state"], low["because"]) == (
        "open",
        "still there on 2026-05-08, after its follow-up was done on 2026-05-01",
    )
    assert states(yard)[LOW] == "follow-up raised"


def test_a_follow_up_taken_back_leaves_the_finding_open(yard: Runner) -> None:
    yard("answer", LOW, "--follow-up", "--why", "look", "--by", "Fenn")
    assert yard("correct", "3", "--void", "--why", "slip").status == 0
    assert states(yard)[LOW] == "open"


def test_the_last_day_a_law_sets_is_that_of_the_follow_up(yard: Runner) -> None:
    Path("ci.toml").write_text('[[preset]]\nname = "zzzz-ci"\nengines = "G-01"\n')
    Path("tbn.csv").write_text("quantity,point,phase,value,unit\ntbn,,,2.9,\ntbn,,new,10,\n")
    assert yard("rules", "--use", "ci.toml", "--why", "40 CFR 63", "--by", "Fenn").status == 0
    yard("measure", "oil", "G-01", "tbn.csv", "--on", "2026-04-20", "--received", "2026-04-30")
    (law,) = [row for row in json.loads(yard("findings", "--format", "json").out) if row["due_by"]]
    assert law["due_by"] == "2026-05-04"
    ran = yard("answer", law["id"], "--follow-up", "--why", "change it", "--by", "Fenn")
    assert ", due 2026-05-04.\n" in ran.out
    assert ran.out.endswith("Its rule sets 2026-05-04 as the last day.\n")


def test_a_holiday_of_the_shop_moves_the_last_day_of_what_was_found_already(yard: Runner) -> None:
    Path("ci.toml").write_text('[[preset]]\nname = "zzzz-ci"\nengines = "G-01"\n')
    Path("tbn.csv").write_text("quantity,point,phase,value,unit\ntbn,,,2.9,\ntbn,,new,10,\n")
    yard("rules", "--use", "ci.toml", "--why", "40 CFR 63", "--by", "Fenn")
    yard("measure", "oil", "G-01", "tbn.csv", "--on", "2026-04-20", "--received", "2026-04-30")
    days = []
    for free in ("", "2026-05-01", "2026-05-04, 2026-05-01, 2026-05-02"):
        yard("setting", "holidays", free)
        days += [row["due_by"] for row in json.loads(yard("findings", "--format", "json").out) if row["due_by"]]
    assert days == ["2026-05-04", "2026-05-05", "2026-05-06"]


def test_a_last_day_that_has_passed_is_said_and_the_follow_up_is_due_at_once(yard: Runner) -> None:
    Path("ci.toml").write_text('[[preset]]\nname = "zzzz-ci"\nengines = "G-01"\n')
    Path("tbn.csv").write_text("quantity,point,phase,value,unit\ntbn,,,2.9,\ntbn,,new,10,\n")
    yard("rules", "--use", "ci.toml", "--why", "40 CFR 63", "--by", "Fenn")
    yard("measure", "oil", "G-01", "tbn.csv", "--on", "2026-04-20")
    (law,) = [row for row in json.loads(yard("findings", "--format", "json").out) if row["due_by"]]
    ran = yard("answer", law["id"], "--follow-up", "--why", "change it", "--by", "Fenn")
    assert ", due 2026-05-01.\n" in ran.out
    assert ran.out.endswith("Its rule sets 2026-04-22 as the last day, which has passed.\n")


@pytest.mark.parametrize(
    ("words", "status", "said"),
    [
        (("1-compression-r75-3", "--accept"), 1, f"there is no finding '1-compression-r75-3'; did you mean {LOW}?\n"),
        (("zz", "--accept"), 1, "there is no finding 'zz'; see fleetcare findings for their ids\n"),
        ((LOW,), 2, "one of the arguments --accept --follow-up is required; see fleetcare answer --help\n"),
        ((LOW, "--accept", "--follow-up"), 2, None),
        ((LOW, "--accept", "--why", " "), 1, "--why: it is empty; write at least one letter\n"),
    ],
)
def test_a_wrong_answer_is_refused_in_one_line_and_changes_nothing(
    yard: Runner, words: tuple[str, ...], status: int, said: str | None
) -> None:
    before = states(yard)
    why = () if "--why" in words else ("--why", "x")
    ran = yard("answer", *words, *why, "--by", "Fenn")
    assert ran.status == status
    assert len(ran.err.splitlines()) == 1
    if said is not None:
        assert ran.err == said
    assert states(yard) == before


def test_the_due_table_of_one_engine_or_site_ends_with_its_own_findings(yard: Runner) -> None:
    yard("engine", "add", "Q-01", "--meter", "hours", "--site", "Moor Road")
    ends = "2 findings want an answer: 1 alarm, 1 alert; see fleetcare findings --open."
    assert yard("due", "--engine", "p-01").out.splitlines()[-1] == ends
    assert yard("due", "--engine", "Q-01").out.splitlines()[-1] == GENERAL
    assert yard("due", "--site", "north sluice").out.splitlines()[-1] == ends
    assert yard("due", "--site", "Moor Road").out.splitlines()[-1] == GENERAL


def test_a_sheet_names_its_finding_as_the_list_does(yard: Runner) -> None:
    told = json.loads(yard("measure", "spot", "P-01", "hotter.csv", "--on", "2026-04-20", "--json").out)
    assert [(one["id"], one["state"]) for one in told["findings"]] == [(HOT, "open")]


def test_findings_of_a_withdrawn_engine_are_left_out(yard: Runner) -> None:
    yard("engine", "withdraw", "P-01", "--why", "sold")
    assert states(yard) == {}


def test_the_due_table_ends_with_the_findings_that_want_an_answer_and_files_do_not(yard: Runner) -> None:
    assert (
        yard("due").out.splitlines()[-1]
        == "2 findings want an answer: 1 alarm, 1 alert; see fleetcare findings --open."
    )
    yard("answer", HOT, "--accept", "--why", "hill climb", "--by", "Fenn")
    assert (
        yard("due", "--site", "North Sluice").out.splitlines()[-1].startswith("1 finding wants an answer: 1 alarm; see")
    )
    yard("answer", LOW, "--follow-up", "--why", "rings", "--by", "Fenn")
    assert yard("due").out.splitlines()[-1] == GENERAL
    assert "finding" not in yard("due", "--format", "csv").out + yard("due", "--format", "json").out
