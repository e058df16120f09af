"""`measure lash`: what is printed of a sheet, as text and as JSON, and what is refused."""

import io
import json
import sys
from collections.abc import Callable
from pathlib import Path

import pytest

from fleetcare.domain.cautions import GENERAL
from tests.cli.conftest import Runner

Opener = Callable[[str], Runner]

YARD = """
    engine add P-01 --cylinders 2 --valves-per-cylinder 2 --firing-order 1-2 --meter hours --in-service 2024-01-10 \
    --start-at 0 --as-new --lash-intake 0.20-0.30 --lash-exhaust 0.40-0.50 --lash-set-intake 0.25 \
    --lash-set-exhaust 0.45 --lash-when cold --adjuster screw --screw-pitch 1
    reading P-01 1000 --on 2026-04-01
    task add P-01 "Valve lash" --every 1000h --needs-sheet lash
    task add P-01 "Oil" --every 250h
"""
SHEET = """quantity,point,phase,value,unit
lash,1I,found,25,mm
lash,1E,found,0.45..0.50,mm
lash,2I,,0.17,
lash,2I,left,0.25,
lash,2E,found,0.36,
lash,2E,left,0.38,
"""
CAUTIONS = [
    "Caution: Shut the engine down and isolate it: battery off, key out, tag hung. Nothing may start it while it is turned by hand.",
    "Caution: Fuel and ignition off before the crank is turned; an engine turned by hand can fire.",
    "Caution: Turn the crank only in its normal direction and with the tool meant for it; hands clear of belts, fan and gears.",
    "Caution: Hot parts burn, hot oil too. Measure again when the locknut is tight: it can pull the setting.",
    "Caution: The engine maker's manual comes before these limits and this order of setting.",
    f"Caution: {GENERAL}",
]
_TIGHT = (
    "the gap is below its check range: seat recession, a worn valve face or a stretched stem; too small a gap loses"
    " compression and burns the valve"
)
_UNDER_A_FINDING = [
    "  source      the engine's own check range; effects: TM 5-3820-245-14&P p. 169, TM 10-3930-644-14&P; repeated closing"
    " points at the seats: TM 5-3895-382-24, TM 5-3825-226-24; stem stretch: common practice",
    "  next step   set the valve; where it closes again soon, look for a failing seat: injector, air filter, overload",
    "  caution     Engine isolated: battery off, key out, tag hung, fuel off. Turn the crank in its normal direction only,"
    " hands clear of belts and fan.",
]
FOUND = [
    f"Alarm 1-lash-tight-2E: closing valve at 2E: {_TIGHT}; valve lash at 2E 0.38 mm, 0.02 mm below the alarm limit of"
    " 0.4 mm; valve lash at 2E 0.36 mm, 0.04 mm below the alert limit of 0.4 mm; since 2026-05-01",
    "  worked out  valve lash 0.38 mm (lash-tight) from check range from 0.4 mm, to 0.5 mm",
    "  worked out  valve lash 0.36 mm (lash-tight) from check range from 0.4 mm, to 0.5 mm",
    *_UNDER_A_FINDING,
    "Alert 1-lash-set: valves found out and set: gaps found out of their check range were set and left inside it; valve"
    " lash at 2I 0.17 mm, 0.03 mm below the alert limit of 0.2 mm; since 2026-05-01",
    "  worked out  valve lash at 2I 0.17 mm (lash-set) from check range from 0.2 mm, to 0.3 mm, out by 0.03 mm, left 0.25 mm",
    "  source      the engine's own check range; what has to be set again and again in a short time points to another part"
    " that wears: TM 5-3825-226-24, TM 5-3805-260-24; that what was set is one finding of the engine: common practice",
    "  next step   nothing is to be done today: the next lash check shows whether they hold; where one has to be set again"
    " and again, look for the part that wears",
    _UNDER_A_FINDING[-1],
]
JUDGED = [
    "Valve lash of P-01 on 2026-05-01, cold, gauge F2.",
    "Limits: intake 0.20 to 0.30 mm, exhaust 0.40 to 0.50 mm, cold.",
    "point  phase  value          verdict  why                            to mend",
    "-----  -----  -------------  -------  -----------------------------  -------------------------",
    "1I     found  0.25 mm        in       in 0.20 to 0.30 mm",
    "1E     found  0.45..0.50 mm  in       in 0.40 to 0.50 mm",
    "2I     found  0.17 mm        alert    0.03 mm below 0.20 to 0.30 mm",
    "2I     left   0.25 mm        in       in 0.20 to 0.30 mm",
    "2E     found  0.36 mm        alert    0.04 mm below 0.40 to 0.50 mm",
    "2E     left   0.38 mm        alarm    0.02 mm below 0.40 to 0.50 mm  turn the screw 25° looser",
    "6 values: 3 in, 2 alert, 1 alarm; found out of limits: 2I, 2E; now out of limits: 2E.",
    "Valve lash left out of limits: 2E 0.38 mm. To raise it: fleetcare log P-01 --on 2026-05-01"
    " --defect 'Valve lash left out of limits: 2E 0.38 mm' --follow-up",
    *FOUND,
    *CAUTIONS,
]
TAKEN = ("--at", "1200h", "--by", "Fenn", "--when", "cold", "--gauge", "F2")


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """P-01 of two cylinders."""
    return open_yard(YARD)


@pytest.fixture
def lash(tmp_path: Path) -> str:
    """The sheet in a file."""
    path = tmp_path / "lash.csv"
    path.write_text(SHEET, encoding="utf-8")
    return str(path)


def write(tmp_path: Path, *rows: str) -> str:
    """A sheet of some rows in a file."""
    path = tmp_path / "other.csv"
    path.write_text("\n".join([SHEET.splitlines()[0], *rows]), encoding="utf-8")
    return str(path)


def test_a_measured_sheet_to_the_byte(pump: Runner, lash: str) -> None:
    ran = pump("measure", "lash", "P-01", lash, *TAKEN)
    assert (ran.status, ran.err) == (0, "")
    assert ran.out.splitlines() == [
        *JUDGED,
        "Note: Valve lash stays open; to close it with this sheet give fleetcare correct 1 --task 'Valve lash'.",
        "Kept as entry 1 of P-01.",
    ]
    assert pump("check").status == 0


def test_the_same_file_again_says_that_nothing_is_new(pump: Runner, lash: str) -> None:
    pump("measure", "lash", "P-01", lash, *TAKEN)
    ran = pump("measure", "lash", "P-01", lash)
    assert (ran.status, ran.out.splitlines()[: len(JUDGED)]) == (0, JUDGED)
    assert ran.out.splitlines()[-1] == (
        "Nothing new: entry 1 of P-01 has this sheet already; what is wrong in it is put right with correct."
    )


def test_a_dry_run_judges_and_stores_nothing(pump: Runner, lash: str, tmp_path: Path) -> None:
    before = (tmp_path / "opened.db").read_bytes()
    ran = pump("measure", "lash", "P-01", lash, *TAKEN, "--dry-run")
    assert ran.out.splitlines()[: len(JUDGED)] == JUDGED
    assert ran.out.splitlines()[-1] == "This was a dry run, nothing is stored."
    assert (tmp_path / "opened.db").read_bytes() == before


def test_a_sheet_is_read_from_standard_input(pump: Runner, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "stdin", io.TextIOWrapper(io.BytesIO(SHEET.encode())))
    assert pump("measure", "lash", "P-01", "-").out.splitlines()[-1] == "Kept as entry 1 of P-01."


def test_without_a_standard_input_it_is_refused(pump: Runner, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "stdin", None)
    ran = pump("measure", "lash", "P-01", "-")
    assert (ran.status, ran.err) == (1, "there is no standard input to read; name a CSV file\n")


def test_an_endless_standard_input_is_refused(pump: Runner, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "stdin", io.TextIOWrapper(io.BytesIO(b"x" * (32 * 1024 * 1024 + 1))))
    assert pump("measure", "lash", "P-01", "-").err == "standard input is longer than 32 MB; give a smaller file\n"


def test_json_is_one_object_of_sheet_judgements_and_findings(pump: Runner, lash: str) -> None:
    ran = pump("measure", "lash", "P-01", lash, *TAKEN, "--note", "cooled over night", "--json")
    answer = json.loads(ran.out)
    assert (ran.status, ran.err) == (0, "")
    assert answer["sheet"] == {
        "engine": "P-01",
        "kind": "lash",
        "entry": 1,
        "is_new": True,
        "taken_on": "2026-05-01",
        "by": "Fenn",
        "condition": "cold",
        "gauge": "F2",
        "note": "cooled over night",
        "limits": "intake 0.20 to 0.30 mm, exhaust 0.40 to 0.50 mm, cold",
        "is_complete": True,
        "missing": [],
        "found_out": ["2I", "2E"],
        "left_out": ["2E"],
        "not_judged": [],
    }
    assert [(one["id"], one["severity"], one["state"]) for one in answer["findings"]] == [
        ("1-lash-tight-2E", "alarm", "open"),
        ("1-lash-set", "alert", "open"),
    ]
    assert [list(row.values())[:6] for row in answer["judged"]] == [
        ["lash", "1I", "found", 0.25, "mm", "in"],
        ["lash", "1E", "found", "0.45..0.50", "mm", "in"],
        ["lash", "2I", "found", 0.17, "mm", "alert"],
        ["lash", "2I", "left", 0.25, "mm", "in"],
        ["lash", "2E", "found", 0.36, "mm", "alert"],
        ["lash", "2E", "left", 0.38, "mm", "alarm"],
    ]
    assert list(answer["judged"][0])[:6] == ["quantity", "point", "phase", "value", "unit", "verdict"]
    assert answer["judged"][5] == {
        "quantity": "lash",
        "point": "2E",
        "phase": "left",
        "value": 0.38,
        "unit": "mm",
        "verdict": "alarm",
        "place": "below",
        "limit_low": 0.4,
        "limit_high": 0.5,
        "limit_unit": "mm",
        "margin": -0.02,
        "why": "0.02 mm below 0.40 to 0.50 mm",
        "to_mend": "turn the screw 25° looser",
        "last": None,
    }
    assert answer["notes"] == [
        "Valve lash stays open; to close it with this sheet give fleetcare correct 1 --task 'Valve lash'"
    ]
    assert answer["follow_up"].startswith("fleetcare log P-01 --on 2026-05-01 --defect ")
    assert [f"Caution: {caution}" for caution in answer["cautions"]] == CAUTIONS


def test_json_of_a_dry_run_names_no_entry_and_of_a_known_sheet_the_one_it_has(pump: Runner, lash: str) -> None:
    assert json.loads(pump("measure", "lash", "P-01", lash, "--dry-run", "--json").out)["sheet"]["entry"] is None
    pump("measure", "lash", "P-01", lash, "--by", "Fenn")
    known = json.loads(pump("measure", "lash", "P-01", lash, "--by", "Quill", "--json").out)["sheet"]
    assert (known["entry"], known["is_new"], known["by"]) == (1, False, "Fenn")


def test_the_dial_figure_of_a_sheet_is_a_reading(pump: Runner, lash: str) -> None:
    ran = pump("measure", "lash", "P-01", lash, "--at", "900")
    assert ran.status == 1
    assert "900 h on 2026-05-01 does not fit reading 2" in ran.err
    pump("measure", "lash", "P-01", lash, "--at", "1200")
    assert "1200 h on the dial" in pump("show", "P-01").out


def test_what_is_wrong_is_one_line_a_cell_and_nothing_is_stored(pump: Runner, tmp_path: Path) -> None:
    before = (tmp_path / "opened.db").read_bytes()
    bad = write(tmp_path, "lash,3E,found,0.45,mm", "lash,1I,left,3.0,mm", "lash,1E,found,thick,cm")
    ran = pump("measure", "lash", "P-01", bad)
    assert (ran.status, ran.out) == (1, "")
    assert ran.err.splitlines() == [
        "row 2, column point: P-01 has no lash point '3E'; its points are 1I, 1E to 2I, 2E; name one of them, or mend its"
        " valves with fleetcare engine edit",
        "row 3, column value: 3.0 mm at 1I: it is 3 times the 0.3 mm where its check range ends, or more; 0.3 mm is"
        " likely meant; correct it, or give --sure if it is right",
        "row 4, column unit: 'cm' is no unit of lash; write mm or in; empty takes the unit of the engine's limits",
    ]
    assert (tmp_path / "opened.db").read_bytes() == before


@pytest.mark.parametrize(
    ("words", "status", "err"),
    [
        (("P-02", "SHEET"), 1, "no engine or machine has the tag 'P-02'; did you mean P-01?"),
        (("P-01", "missing.csv"), 1, "cannot read missing.csv: No such file or directory; name a CSV file"),
        (("P-01", "SHEET", "--when", "warm"), 2, "argument --when: invalid choice: 'warm'"),
        (("P-01", "SHEET", "--on", "2026-05-02"), 1, "2026-05-02 has not come yet"),
        (("P-01", "SHEET", "--at", "12mo"), 2, "--at: '12mo' is a span of time"),
        (("P-01",), 2, "the following arguments are required: FILE"),
    ],
)
def test_a_wrong_command_line_is_one_line_with_its_status(
    pump: Runner, lash: str, words: tuple[str, ...], status: int, err: str
) -> None:
    ran = pump("measure", "lash", *(lash if word == "SHEET" else word for word in words))
    assert (ran.status, ran.out) == (status, "")
    assert ran.err.startswith(err)
    assert ran.err.count("\n") == 1


def test_one_value_is_said_in_the_singular(pump: Runner, tmp_path: Path) -> None:
    out = pump("measure", "lash", "P-01", write(tmp_path, "lash,1I,,0.25,"), "--when", "cold").out.splitlines()
    assert "1 value: 1 in." in out
    assert "Note: not measured: 1E, 2I, 2E." in out


def test_a_shim_is_listed_as_one_and_last_time_stands_beside(open_yard: Opener, tmp_path: Path) -> None:
    run = open_yard("engine add P-01 --cylinders 1 --valves-per-cylinder 2 --adjuster shim")
    run("measure", "lash", "P-01", write(tmp_path, "lash,1I,,0.25,"), "--on", "2026-04-01")
    out = run("measure", "lash", "P-01", write(tmp_path, "lash,1I,,0.24,", "shim,1I,,2.75,")).out.splitlines()
    assert out[1:6] == [
        "Limits: no check range is known.",
        "point  phase  value         verdict     why                                      last time",
        "-----  -----  ------------  ----------  ---------------------------------------  ---------------------",
        "1I     found  0.24 mm       not judged  no lash limits of this engine are known  0.25 mm on 2026-04-01",
        "1I     found  2.75 mm shim  not judged",
    ]


def test_help_says_how_a_sheet_is_written(pump: Runner) -> None:
    said = " ".join(pump("measure", "lash", "--help").out.split())
    for part in ("quantity,point,phase,value,unit", "empty means found", "30 is 0.30 mm", "- for standard input"):
        assert part in said


def test_a_gauge_with_control_characters_begins_no_line_of_ours(pump: Runner, lash: str) -> None:
    out = pump("measure", "lash", "P-01", lash, "--when", "cold", "--gauge", "F\nLimits: none\x1b[2J").out
    assert out.splitlines()[0] == "Valve lash of P-01 on 2026-05-01, cold, gauge F Limits: none\\x1b[2J."
