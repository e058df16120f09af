"""`measure compression`, `leakdown`, `run`, `spot`, `oil`: what is printed, as text and as JSON, and `log --sheet`."""

import io
import json
import re
import sys
from collections.abc import Callable
from pathlib import Path

import pytest

from fleetcare.domain.cautions import GENERAL, OF_SHEETS
from tests.cli.conftest import Runner
from tests.cli.test_show_command import section

Opener = Callable[[str], Runner]

YARD = """
    engine add P-01 --cylinders 6 --firing-order 1-5-3-6-2-4 --fuel diesel --meter hours --in-service 2024-01-10 \
    --start-at 0 --as-new --oil-grade 15W-40 --sump 12 --rated-kw 100 --duty standby
    reading P-01 1000 --on 2026-04-01
    reading P-01 1300 --on 2026-05-01
    task add P-01 "Compression" --every 1000h --needs-sheet compression
"""
TWELVE = (
    ("27.0", "27.5", "19.0", "27.0", "26.5", "27"),
    ("28.0", "28.5", "19.2", "28.0", "27.5", "28"),
)
SHARES = {1: "98.18", 2: "100", 4: "98.18", 5: "96.36", 6: "98.18"}  # of 27.5 bar, by hand
COMPRESSION = [
    f"pressure,{cylinder},{phase},{figure},bar"
    for phase, figures in zip(("dry", "wet"), TWELVE, strict=True)
    for cylinder, figure in enumerate(figures, start=1)
]
OIL = """hours_on_oil,,,240,h
top_up,,,2,L
grade,,,SAE 15W-40,
iso4406,,,18/16/>=13,
kv100,,,14.2,mm2/s
kv100,,new,14.5,mm2/s
kv40,,,104,
tbn,,,5.1,
tbn,,new,10.5,
tan,,,3.1,
water,,,<0.05,%
fuel,,,5.5,%
soot,,,1.0,%
glycol,,,ND,
oxidation,,,14,A/cm
nitration,,,9,A/cm
Fe,,,45,ppm
Cu,,,12,ppm
Pb,,,6,ppm
Al,,,8,ppm
Cr,,,2,
Sn,,,<1,
Si,,,12,
Na,,,10,
K,,,3,
Ca,,,3100,
Zn,,,1200,""".splitlines()


@pytest.fixture
def pump(open_yard: Opener) -> Runner:
    """P-01 of six cylinders."""
    return open_yard(YARD)


@pytest.fixture
def write(tmp_path: Path) -> Callable[..., str]:
    """A function that puts rows in a sheet file and gives its name."""

    def written(*rows: str) -> str:
        path = tmp_path / "sheet.csv"
        path.write_text("\n".join(["quantity,point,phase,value,unit", *rows]), encoding="utf-8")
        return str(path)

    return written


Writer = Callable[..., str]


def test_a_compression_sheet_of_twelve_values_to_the_byte(pump: Runner, write: Writer) -> None:
    ran = pump(
        "measure", "compression", "P-01", write(*COMPRESSION, "throttle,,,open,"), "--gauge", "G1", "--by", "Fenn"
    )
    assert (ran.status, ran.err) == (0, "")
    share = "compression as a share of the highest"
    low = f"{share} 69.09 %, 5.909 % below the alarm limit of 75 %"
    assert [line.rstrip() for line in ran.out.splitlines()[:18]] == [
        "Compression of P-01 on 2026-05-01, gauge G1, 1300 h of life.",
        "Throttle: open.",
        f"what         point  phase  value     verdict     why{' ' * 83}rule",
        f"-----------  -----  -----  --------  ----------  {'-' * 84}  ---------------",
        *(
            line
            for cylinder, (dry, wet) in enumerate(zip(*TWELVE, strict=True), start=1)
            for line in (
                f"compression  {cylinder}      dry    {f'{dry} bar':8}  "
                + (
                    f"alarm       {low}"
                    if cylinder == 3
                    else f"in          {f'{share} {SHARES[cylinder]} %, from 75 %':84}"
                )
                + "  compression-r75",
                f"compression  {cylinder}      wet    {f'{wet} bar':8}  not judged  of the wet test, to compare with",
            )
        ),
        "12 values: 5 in, 6 not judged, 1 alarm.",
        ran.out.splitlines()[17],
    ]
    said = ran.out.splitlines()[17:]
    assert said[0].startswith(
        "Alarm 1-pattern-valves-3: leaking valves at cylinder 3: the cylinder is low and oil does not raise it"
    )
    told = [re.split(r":|  +(?=\w)", line.strip())[0] for line in said[1:]]
    assert told[-9:] == [
        "caution",
        *["Caution"] * len(OF_SHEETS["compression"]),
        "Caution",
        "Note",
        "Kept as entry 1 of P-01.",
    ]
    assert {"worked out", "source", "next step"} <= set(told)
    assert said[-2] == (
        "Note: Compression stays open; to close it with this sheet give fleetcare correct 1 --task Compression."
    )


def test_an_oil_sample_of_twenty_five_values_as_json(pump: Runner, write: Writer) -> None:
    taken = ("--on", "2026-04-11", "--received", "2026-04-20", "--gauge", "Fen Lab", "--lab-no", "4711", "--json")
    ran = pump("measure", "oil", "P-01", write(*OIL), *taken)
    answer = json.loads(ran.out)
    assert (ran.status, ran.err) == (0, "")
    assert answer["sheet"] == {
        "engine": "P-01",
        "kind": "oil",
        "entry": 1,
        "is_new": True,
        "taken_on": "2026-04-11",
        "by": None,
        "condition": None,
        "gauge": "Fen Lab",
        "note": None,
        "lab_number": "4711",
        "received_on": "2026-04-20",
        "engine_hours": 1100,
        "engine_hours_estimated": True,
        "words": [
            {"quantity": "grade", "point": "", "word": "SAE 15W-40"},
            {"quantity": "iso4406", "point": "", "word": "18/16/>=13"},
        ],
        "is_complete": True,
        "incomplete": None,
        "missing": [],
    }
    judged = {(row["quantity"], row["phase"]): row for row in answer["judged"]}
    assert (len(answer["judged"]), len(judged)) == (25, 25)
    assert list(answer["judged"][0])[:6] == ["quantity", "point", "phase", "value", "unit", "verdict"]
    assert [judged[key]["verdict"] for key in (("fuel", ""), ("tbn", ""), ("Fe", ""), ("Ca", ""), ("tbn", "new"))] == [
        "alarm",
        "alert",
        "in",
        "not judged",
        "not judged",
    ]
    assert (judged["Sn", ""]["value"], judged["glycol", ""]["value"], judged["Fe", ""]["value"]) == ("<1", "ND", 45)
    fuel = judged["fuel", ""]
    assert (fuel["rule"], fuel["measured"], fuel["limit"], fuel["margin"], fuel["limit_unit"]) == (
        "oil-fuel",
        5.5,
        5,
        -0.5,
        "%",
    )
    assert [finding["id"] for finding in answer["findings"]] == ["1-oil-fuel", "1-oil-tbn"]
    finding = answer["findings"][0]
    wanted = "id engine rule severity subject measured unit limit margin since source explanation next_step state"
    assert list(finding)[:14] == wanted.split()
    assert (finding["engine"], finding["severity"], finding["state"], finding["since"]) == (
        "P-01",
        "alarm",
        "open",
        "2026-04-11",
    )
    assert answer["cautions"] == [*OF_SHEETS["oil"], GENERAL]


def test_hours_worked_out_between_readings_and_values_not_detected_are_shown_as_such(
    pump: Runner, write: Writer
) -> None:
    ran = pump("measure", "oil", "P-01", write("Na,,,ND,ppm"), "--on", "2026-04-11")
    assert ran.out.startswith("Oil sample of P-01 on 2026-04-11, ~1100 h of life.\n")
    assert "sodium  ND     in " in ran.out


@pytest.mark.parametrize(
    ("kind", "rows", "told"),
    [
        ("leakdown", ["supply,,,80,psi", "held,1,,76,psi", "heard,1,,intake,"], "Air heard at 1: intake."),
        ("leakdown", ["leak,1,,30,"], "30 %, 5 % above the alarm limit of 25 %"),
        (
            "run",
            ["minutes,,,25,", "load,,,28,kW", "purpose,,,test,"],
            "load of the nameplate 28 %, 2 % below the alert",
        ),
        ("run", ["minutes,,,45,", "purpose,,,test,"], "Note: no load."),
        ("spot", ["oil_pressure,,,0.9,bar"], "90 kPa, 10 kPa below the alert limit of 100 kPa"),
        ("spot", ["crankcase,,,12,mbar"], "there is no earlier sheet"),
        ("compression", ["pressure,1,,27,bar"], "Note: cylinders 2, 3, 4, 5, 6 not measured."),
    ],
)
def test_every_kind_says_what_it_found(pump: Runner, write: Writer, kind: str, rows: list[str], told: str) -> None:
    ran = pump("measure", kind, "P-01", write(*rows))
    assert (ran.status, ran.err) == (0, "")
    assert told in ran.out
    assert all(f"Caution: {caution}" in ran.out for caution in OF_SHEETS[kind])
    assert pump("check").status == 0


def test_a_sheet_of_words_alone_is_kept_and_says_that_nothing_was_measured(pump: Runner, write: Writer) -> None:
    out = pump("measure", "leakdown", "P-01", write("heard,1,,intake,"), "--when", "hot").out.splitlines()
    assert out[:4] == [
        "Leak-down of P-01 on 2026-05-01, hot, 1300 h of life.",
        "Air heard at 1: intake.",
        "Note: cylinders 1, 2, 3, 4, 5, 6 not measured.",
        "0 values.",
    ]


def test_the_columns_that_are_not_needed_may_be_left_out(pump: Runner, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(sys, "stdin", io.TextIOWrapper(io.BytesIO(b"quantity,value\nFe,45\n")))
    assert pump("measure", "oil", "P-01", "-").out.splitlines()[-1] == "Kept as entry 1 of P-01."


def test_a_dry_run_judges_and_stores_nothing(pump: Runner, write: Writer, tmp_path: Path) -> None:
    before = (tmp_path / "opened.db").read_bytes()
    ran = pump("measure", "oil", "P-01", write(*OIL), "--dry-run", "--json")
    answer = json.loads(ran.out)
    assert (answer["sheet"]["entry"], len(answer["findings"])) == (None, 2)
    assert (tmp_path / "opened.db").read_bytes() == before


def test_what_is_wrong_is_one_line_a_cell_and_nothing_is_stored(pump: Runner, write: Writer, tmp_path: Path) -> None:
    before = (tmp_path / "opened.db").read_bytes()
    ran = pump("measure", "compression", "P-01", write("pressure,1,,17,psi", "pressure,7,,27,bar", "Fe,,,45,ppm"))
    assert (ran.status, ran.out) == (1, "")
    assert ran.err.splitlines() == [
        "row 2, column value: pressure 17 psi at 1: less than 300 kPa is not usual on any engine; 17 bar or 170 psi is"
        " likely meant; correct it, or give --sure if it is right",
        "row 3, column point: P-01 has no cylinder '7'; write its number, 1 to 6",
        "row 4, column quantity: 'Fe' does not belong on a sheet of compression; it belongs on a sheet of oil",
    ]
    assert (tmp_path / "opened.db").read_bytes() == before


def test_words_from_outside_drive_no_terminal_and_no_line_of_ours(pump: Runner, write: Writer) -> None:
    ran = pump(
        "measure", "oil", "P-01", write("grade,,,[b]=cmd()[/b],", "Fe,,,45,"), "--lab-no", "7\n\x1b[2JKept", "--sure"
    )
    assert "Grade: [b]=cmd()[/b]." in ran.out
    assert ran.out.splitlines()[0] == "Oil sample of P-01 on 2026-05-01, report 7 \\x1b[2JKept, 1300 h of life."
    refused = pump("measure", "oil", "P-01", write("grade,,,\x1b[2J,"))
    assert (refused.status, refused.err) == (
        1,
        "row 2, column value: it holds the control character '\\x1b'; remove it\n",
    )


def test_logging_with_a_sheet_closes_the_task_and_prints_the_judgement(pump: Runner, write: Writer) -> None:
    ran = pump("log", "P-01", "Compression", "--sheet", write(*COMPRESSION), "--by", "Fenn")
    assert ran.out.splitlines()[:3] == [
        "Entry 1 (scheduled) of P-01 on 2026-05-01.",
        "Done: Compression.",
        "Compression of P-01 on 2026-05-01, 1300 h of life.",
    ]
    assert "Alarm 1-pattern-valves-3" in ran.out
    assert "low" not in pump("correct", "1", "--note", "x").out
    assert "-pattern-valves-3: leaking valves" in pump("correct", "2", "--on", "2026-04-30").out


def test_a_task_shows_its_last_sheet_value_by_value(pump: Runner, write: Writer) -> None:
    pump("log", "P-01", "Compression", "--sheet", write(*COMPRESSION), "--gauge", "G1")
    last = section(pump("show", "P-01", "Compression").out, "LAST SHEET")
    assert last[0] == "entry 1, 2026-05-01, gauge G1"
    assert len(last) == 15


def test_results_come_after_the_sample(pump: Runner, write: Writer) -> None:
    ran = pump("measure", "oil", "P-01", write(*OIL), "--received", "2026-04-30")
    assert (ran.status, ran.err) == (
        1,
        "results cannot have come on 2026-04-30, before 2026-05-01; correct --received or --on\n",
    )
    assert pump("log", "P-01", "--note", "x", "--lab-no", "7").err == (
        "--lab-no says how a sheet was taken; give the sheet with --sheet FILE as well\n"
    )
