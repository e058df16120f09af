"""Sheets of measurements that are refused: every bad cell by row and column, slips asked about, nothing stored."""

import pytest

from fleetcare.context import Context
from fleetcare.domain.sheets import CellKey, Phase
from fleetcare.operations.find import find_item
from fleetcare.operations.measures_typed import open_measures, read_typed
from tests.operations.importing import TODAY
from tests.operations.measure_yard import OIL, PRESSURES, take, yard_of_four
from tests.operations.sheet_yard import refused


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 of four cylinders, nothing measured yet."""
    return yard_of_four(ctx)


LEFT_OUT = "leave the row out, or write ND for not detected"


@pytest.mark.parametrize(
    ("kind", "row", "lines"),
    [
        ("compression", "pressure,5,,27,bar", ["point: P-01 has no cylinder '5'; write its number, 1 to 4"]),
        ("compression", "pressure,0,,27,bar", ["point: P-01 has no cylinder '0'; write its number, 1 to 4"]),
        ("compression", "pressure,1E,,27,bar", ["point: P-01 has no cylinder '1E'; write its number, 1 to 4"]),
        ("compression", "pressure,²,,27,bar", ["point: P-01 has no cylinder '²'; write its number, 1 to 4"]),
        ("compression", "pressure,,,27,bar", ["point: it is missing; give the number of the cylinder"]),
        ("compression", "pressure,1,found,27,bar", ["phase: pressure has no phase 'found'; write dry or wet, or leave it empty"]),
        ("compression", "pressure,1,,27,mm", ["unit: 'mm' is no unit of pressure; write kPa, Pa, mbar, bar, MPa, psi, kgf/cm2, or leave it empty"]),
        ("compression", "pressure,1,,,bar", ["value: it is missing; give it"]),
        ("compression", "pressure,1,,high,bar", ["value: 'high' is not a number; write digits, with a point for decimals"]),
        ("compression", "pressure,1,,27 5,bar", ["value: '27 5' is not a number; write digits, with a point for decimals"]),
        ("compression", "pressure,1,,\"2,700\",kPa", ["value: '2,700' can be read in two ways; write a point for decimals, and nothing between thousands"]),
        ("compression", "pressure,1,,26..27,bar", ["value: '26..27' is a range; write one figure; only a gap lies between two blades"]),
        ("compression", "pressure,1,,<1,bar", ["value: '<1' is for what a laboratory did not detect; write the figure, or leave the row out"]),
        ("compression", "lash,1E,found,0.45,mm", ["quantity: 'lash' does not belong on a sheet of compression; use pressure, cranking_speed, oil_temperature or throttle"]),
        ("compression", "coolant,,,85,", ["quantity: 'coolant' does not belong on a sheet of compression; it belongs on a sheet of spot or run"]),
        ("compression", "cranking_speed,1,,220,", ["point: cranking_speed is of the whole engine, not of '1'; leave the point empty"]),
        ("compression", "throttle,,,half,", ["value: 'half' is no word of throttle; use open or closed"]),
        ("compression", "throttle,,dry,open,", ["phase: throttle is said in a word; leave phase and unit empty"]),
        ("compression", "throttle,,,open,bar", ["unit: throttle is said in a word; leave phase and unit empty"]),
        ("compression", "pressure,9,hot,x,mm", [
            "point: P-01 has no cylinder '9'; write its number, 1 to 4",
            "phase: pressure has no phase 'hot'; write dry or wet, or leave it empty",
            "unit: 'mm' is no unit of pressure; write kPa, Pa, mbar, bar, MPa, psi, kgf/cm2, or leave it empty",
            "value: 'x' is not a number; write digits, with a point for decimals",
        ]),
        ("leakdown", "leak,1,wet,8,", ["phase: leak has no phase 'wet'; leave it empty"]),
        ("leakdown", "leak,1,,120,", ["value: leak 120 % at 1: more than 100 % is not possible; 12 % is likely meant; correct it, or its unit"]),
        ("leakdown", "heard,1,,ear,", ["value: 'ear' is no word of heard; use intake, exhaust, crankcase, coolant or next"]),
        ("leakdown", "held,1,,75,psi", ["quantity: nothing says what cylinder 1 was supplied with; add a row of supply for it, or one without a point"]),
        ("run", "minutes,0,,30,", ["point: a run has no stage '0'; write its number, 1 to 9"]),
        ("run", "purpose,,,fun,", ["value: 'fun' is no word of purpose; use emergency, test, supplemental, 36-month or other"]),
        ("oil", "Fe,,dry,45,", ["phase: Fe has no phase 'dry'; write new, or leave it empty"]),
        ("oil", "Fe,,,-,", [f"value: '-' is not a figure; {LEFT_OUT}"]),
        ("oil", "Fe,,,n/a,", [f"value: 'n/a' is not a figure; {LEFT_OUT}"]),
        ("oil", "Fe,,,<0,", ["value: '<0' is not a bound; write < and a figure above 0, or ND"]),
        ("oil", "kv100,,,ND,", ["value: no oil is without viscosity at 100 °C; leave the row out where it was not told"]),
        ("oil", "Fe,,,<ND,", ["value: 'ND' is not a number; write digits, with a point for decimals"]),
        ("oil", "iso4406,,,18/16,", ["value: '18/16' is no ISO 4406 code; write three scale numbers as the lab has them, such as 18/16/13 or 14/12/>=7"]),
        ("oil", "iso4406,,,13/16/18,", ["value: 13/16/18 rises from 13 to 16, and counts of larger particles are part of those of smaller ones; check the order: 4, 6, then 14 um(c)"]),
        ("oil", f"grade,,,{'x' * 61},", ["value: grade is longer than 60 characters; shorten it"]),
        ("oil", "Xx,,,4,", ["quantity: 'Xx' does not belong on a sheet of oil; use hours_on_oil, top_up, "]),
    ],
)  # fmt: skip
def test_a_bad_cell_is_one_line_with_its_row_and_column(yard: Context, kind: str, row: str, lines: list[str]) -> None:
    found = refused(yard, lambda ctx: take(ctx, kind, row))
    assert len(found) == len(lines)
    for said, line in zip(found, lines, strict=True):
        assert said.startswith(f"row 2, column {line}")


@pytest.mark.parametrize(
    ("kind", "rows", "text"),
    [
        ("compression", [*PRESSURES, "pressure,2,dry,26,bar"], "row 6, column point: pressure dry at 2 stands in row 3 already; keep one of them"),
        ("compression", ["pressure,1,,27,bar", "pressure,01,dry,27,bar"], "row 3, column point: pressure dry at 1 stands in row 2 already; keep one of them"),
        ("oil", ["Fe,,,45,", "fe,,,46,"], "row 3, column point: Fe stands in row 2 already; keep one of them"),
        ("run", ["purpose,,,test,", "purpose,,,other,"], "row 3, column point: purpose stands in row 2 already; keep one of them"),
        ("leakdown", ["heard,1,,next,", "heard,1,,Next,"], "row 3, column point: heard at 1 stands in row 2 already; keep one of them"),
        ("leakdown", ["supply,1,,80,psi", "held,1,,6,bar"], "row 3, column value: cylinder 1 cannot hold 6 bar of 80 psi; check supply and held"),
    ],
)  # fmt: skip
def test_rows_that_contradict_each_other_are_refused(yard: Context, kind: str, rows: list[str], text: str) -> None:
    assert refused(yard, lambda ctx: take(ctx, kind, *rows)) == [text]


@pytest.mark.parametrize(
    ("kind", "row", "asked"),
    [
        ("compression", "pressure,1,,17,psi", "pressure 17 psi at 1: less than 300 kPa is not usual on any engine; 17 bar or 170 psi is likely meant"),
        ("oil", "tbn,,,105,", "tbn 105 mg KOH/g: more than 80 mg KOH/g is not usual on any engine; 10.5 mg KOH/g is likely meant"),
        ("spot", "coolant,,,190,", "coolant 190 °C: more than 125 °C is not usual on any engine; 190 °F or 19 °C is likely meant"),
        ("run", "load,,,450,kW", "load 450 kW: more than 135 kW is not possible; 45 kW is likely meant"),
    ],
)  # fmt: skip
def test_a_likely_slip_is_asked_about_and_stands_only_if_somebody_is_sure(
    yard: Context, kind: str, row: str, asked: str
) -> None:
    (line,) = refused(yard, lambda ctx: take(ctx, kind, row))
    assert line.startswith(f"row 2, column value: {asked}; correct it")
    if "not possible" in line:
        assert refused(yard, lambda ctx: take(ctx, kind, row, sure=True)) == [line]
    else:
        assert take(yard, kind, row, sure=True).is_new


def test_everything_wrong_is_said_at_once_in_the_order_of_rows(yard: Context) -> None:
    rows = [*OIL[:2], "kv100,,,1450,", "Fe,,,iron,", "kv40,,,100"]
    lines = refused(yard, lambda ctx: take(ctx, "oil", *rows))
    assert [line.partition(":")[0] for line in lines] == ["row 4, column value", "row 5, column value", "row 6"]


def test_comma_and_point_are_alike_and_case_does_not_matter(yard: Context) -> None:
    report = take(yard, "oil", 'TBN,,,"7,5",MG KOH/G', "FE,,NEW,nd,PPM", "kv100,,,< 14.5,cst").report
    told = [(value.quantity, value.phase.value, str(value), value.unit) for value in report.sheet.values]
    assert told == [
        ("tbn", "", "7.5", "mg KOH/g"),
        ("Fe", "new", "ND", "ppm"),
        ("kv100", "", "<14.5", "cSt"),
    ]


def test_a_grade_nobody_knows_is_asked_about_once(yard: Context) -> None:
    said = refused(yard, lambda ctx: take(ctx, "oil", "grade,,,bacon,", "Fe,,,45,"))
    assert said == [
        "row 2, column value: grade bacon: it is no grade of SAE J300 such as 15W-40, nor one known here;"
        " correct it, or give --sure if it is right"
    ]
    take(yard, "oil", "grade,,,Fen 3,", "Fe,,,45,", sure=True)
    assert take(yard, "oil", "grade,,,fen-3,", "Fe,,,46,").report.sheet


def test_a_grade_of_a_nameplate_is_known(ctx: Context) -> None:
    yard_of_four(ctx, oil_grade="Fen 3")
    assert take(ctx, "oil", "grade,,,FEN-3,", "Fe,,,45,").report.sheet


def test_a_grade_nobody_knows_is_asked_about_as_it_is_typed_too(yard: Context) -> None:
    grade = CellKey("grade", "", Phase.NONE)
    with yard.read() as connection:
        opened = open_measures(connection, find_item(connection, "P-01"), "oil", TODAY, TODAY)
    assert read_typed(opened, {grade: "SAE 30"}).doubts == {}
    doubt = read_typed(opened, {grade: "bacon"}).doubts[grade]
    assert (doubt.text.partition(":")[0], doubt.is_possible, doubt.meant) == ("grade bacon", True, ())
