"""Sheets of every kind: stored once, carried over, closing what needs them, and loaded as the rules see them."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.context import Context
from fleetcare.domain.measured import SheetWord
from fleetcare.errors import Refused
from fleetcare.operations.find import find_item
from fleetcare.operations.measured import load_engine_sheets
from fleetcare.operations.rows import fetch
from fleetcare.operations.sheet_report import report_sheet
from fleetcare.operations.upkeep import check
from tests.operations.importing import TODAY, correct, engine, log, machine
from tests.operations.measure_yard import (
    LEAKS,
    OIL,
    PRESSURES,
    RUN,
    SHEETS,
    SPOT,
    do,
    loaded,
    take,
    with_tasks,
    yard_of_four,
)
from tests.operations.sheet_yard import FOUND_IN, LASH, refused, sheet
from tests.operations.sheet_yard import take as take_lash


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 of four cylinders, nothing measured yet."""
    return yard_of_four(ctx)


@pytest.mark.parametrize("kind", SHEETS)
def test_a_sheet_is_stored_with_an_entry_of_its_own_and_once_only(yard: Context, kind: str) -> None:
    first = take(yard, kind)
    assert (first.is_new, first.report.sheet.kind, first.report.incomplete) == (True, kind, "")
    before = check(yard)
    again = take(yard, kind)
    assert (again.is_new, again.report.sheet.entry) == (False, first.report.sheet.entry)
    assert check(yard) == before


def test_the_same_figures_in_another_unit_and_order_are_the_same_sheet(yard: Context) -> None:
    take(yard, "compression", *PRESSURES)
    in_kpa = [f"pressure,{cylinder},,27{cylinder}0,kPa" for cylinder in (4, 3, 2, 1)]
    assert not take(yard, "compression", *in_kpa).is_new


def test_another_word_makes_another_sheet(yard: Context) -> None:
    take(yard, "run", *RUN)
    assert take(yard, "run", *RUN[:2], "purpose,,,emergency,").is_new


def test_words_stand_beside_the_values_without_a_figure(yard: Context) -> None:
    take(yard, "leakdown", *LEAKS, "heard,3,,Exhaust,", "heard,3,,next,")
    with yard.read() as connection:
        rows = fetch(
            connection, "select quantity, point, value, unit, qualifier from sheet_value where quantity = 'heard'"
        )
    assert rows == [("heard", "3", None, "", "exhaust"), ("heard", "3", None, "", "next")]
    assert loaded(yard).sheets[0].words == (SheetWord("heard", "exhaust", "3"), SheetWord("heard", "next", "3"))


def test_a_sheet_is_loaded_with_the_hours_of_the_engine_on_its_day(yard: Context) -> None:
    take(yard, "oil", on="2026-04-11", gauge="Fen Lab", received="2026-04-20", lab_no="4711")
    (found,) = loaded(yard).sheets
    assert (found.kind, found.on, found.gauge, found.received_on) == (
        "oil",
        date(2026, 4, 11),
        "Fen Lab",
        date(2026, 4, 20),
    )
    assert found.engine_hours == 1100  # a third of the way from 1000 h on 1 April to 1300 h on 1 May
    assert [str(value) for value in found.values] == ["240", "45", "7.5", "ND", "<0.05"]


def test_the_dial_figure_that_came_along_is_the_hours_of_the_engine(yard: Context) -> None:
    take(yard, "spot", on="2026-04-11", at=["1150h"])
    assert loaded(yard).sheets[0].engine_hours == 1150


def test_engines_with_sheets_are_loaded_together_in_the_order_of_their_tags(yard: Context) -> None:
    engine(yard, "A-01", cylinders=2)
    engine(yard, "Z-01")
    take(yard, "compression", on="2026-04-20")
    take(yard, "compression", "pressure,1,,27,bar", "pressure,2,,27,bar", tag="A-01")
    take(yard, "spot", on="2026-04-10")
    with yard.read() as connection:
        found = load_engine_sheets(connection, TODAY)
        early = load_engine_sheets(connection, date(2026, 4, 15))
    assert [(one.engine.tag, [kept.kind for kept in one.sheets]) for one in found] == [
        ("A-01", ["compression"]),
        ("P-01", ["spot", "compression"]),
    ]
    assert [(one.engine.tag, [kept.kind for kept in one.sheets]) for one in early] == [("P-01", ["spot"])]


def test_a_voided_sheet_counts_no_more_and_may_come_again(yard: Context) -> None:
    take(yard, "spot")
    correct(yard, 1, void=True, why="wrong engine")
    assert loaded(yard).sheets == ()
    assert take(yard, "spot").is_new


def test_a_correction_carries_the_sheet_over_with_what_is_restated_of_it(yard: Context) -> None:
    take(yard, "oil", gauge="Fen Lab", lab_no="4711", on="2026-04-20")
    correct(yard, 1, received="2026-04-28", gauge="Moor Lab")
    (found,) = loaded(yard).sheets
    assert (found.entry, found.gauge, found.received_on) == (2, "Moor Lab", date(2026, 4, 28))
    assert len(found.values) == 5
    assert take(yard, "oil", on="2026-04-20").report.sheet.lab_number == "4711"


def test_a_correction_may_restate_the_values(yard: Context) -> None:
    take(yard, "compression")
    correct(yard, 1, sheet=sheet(*PRESSURES[:2]))
    (restated,) = loaded(yard).sheets
    assert (restated.entry, restated.kind, len(restated.values)) == (2, "compression", 2)


def test_values_restated_stay_with_the_gauge_and_days_they_were_taken_with(yard: Context) -> None:
    take(yard, "oil", gauge="Fen Lab", lab_no="4711", received="2026-04-28", on="2026-04-20")
    correct(yard, 1, sheet=sheet("Fe,,,54,ppm"))
    (found,) = loaded(yard).sheets
    assert (found.entry, found.gauge, found.received_on) == (2, "Fen Lab", date(2026, 4, 28))
    with yard.read() as connection:
        kept = fetch(connection, "select lab_number from sheet order by id")
    assert [number for (number,) in kept] == ["4711", "4711"]


def test_values_restated_as_those_of_another_kind_keep_nothing_of_the_gauge(yard: Context) -> None:
    take(yard, "compression", gauge="G1")
    correct(yard, 1, sheet=sheet(*LEAKS), kind="leakdown")
    (found,) = loaded(yard).sheets
    assert (found.kind, found.gauge) == ("leakdown", "")


def test_what_a_sheet_was_taken_with_cannot_be_restated_where_there_is_none(yard: Context) -> None:
    log(yard, "2026-05-01", note="looked at")
    assert refused(yard, lambda ctx: correct(ctx, 1, lab_no="7")) == [
        "entry 1 has no sheet; give one with --sheet FILE"
    ]


@pytest.mark.parametrize("kind", SHEETS)
def test_a_complete_sheet_closes_the_task_that_needs_its_kind(yard: Context, kind: str) -> None:
    with_tasks(yard, kind)
    logged = do(yard, kind.title(), rows=SHEETS[kind])
    assert logged.closed == [kind.title()]
    assert logged.sheet is not None
    assert logged.sheet.kind == kind


@pytest.mark.parametrize(
    ("name", "rows", "lacks"),
    [
        ("Compression", PRESSURES[:3], "compression sheet: cylinder 4 not measured"),
        ("Leakdown", LEAKS[1:], "leakdown sheet: cylinder 1 not measured"),
        ("Run", RUN[:1], "run sheet: no load"),
        ("Oil", OIL[:2], "oil sheet: no value of a laboratory"),
    ],
)
def test_an_incomplete_sheet_closes_only_from_who_is_sure(
    yard: Context, name: str, rows: tuple[str, ...], lacks: str
) -> None:
    with_tasks(yard, name.lower())
    assert refused(yard, lambda ctx: do(ctx, name, rows=rows)) == [
        f"{name} does not close with this {lacks}; add what is wanting, or give --sure to close it as it stands, or"
        " --part-done to keep it open"
    ]
    assert do(yard, name, rows=rows, sure=True).closed == [name]


@pytest.mark.parametrize("kind", SHEETS)
def test_without_a_task_the_kind_of_a_sheet_is_told_by_its_quantities(yard: Context, kind: str) -> None:
    with_tasks(yard, kind)
    logged = do(yard, rows=SHEETS[kind])
    assert logged.sheet is not None
    assert logged.sheet.kind == kind
    assert any(f"{kind.title()} stays open; to close it with this sheet" in note for note in logged.notes)


def test_readings_alone_are_a_run_where_the_task_needs_one(yard: Context) -> None:
    with_tasks(yard, "run")
    logged = do(yard, "Run", rows=SPOT, sure=True)
    assert logged.sheet is not None
    assert logged.sheet.kind == "run"


def test_a_sheet_of_another_kind_closes_nothing(yard: Context) -> None:
    with_tasks(yard, "oil")
    (line,) = refused(yard, lambda ctx: do(ctx, "Oil", rows=PRESSURES))
    assert line.startswith("Oil closes only with its oil sheet")


def test_one_supply_is_that_of_every_pressure_held(yard: Context) -> None:
    rows = ("held,1,,76,psi", "held,2,,75,psi", "supply,,,80,psi", "supply,2,,81,psi")
    values = take(yard, "leakdown", *rows).report.sheet.values
    assert sorted((value.quantity, value.point, str(value)) for value in values) == [
        ("held", "1", "76"),
        ("held", "2", "75"),
        ("supply", "1", "80"),
        ("supply", "2", "81"),
    ]


def test_a_machine_has_nothing_to_measure(ctx: Context) -> None:
    machine(ctx, "P-01")
    assert refused(ctx, lambda ctx: take(ctx, "spot")) == [
        "P-01 is a machine, and only engines are measured; name one of its engines"
    ]


def test_results_come_after_the_sample_and_not_tomorrow(yard: Context) -> None:
    before = "results cannot have come on 2026-04-30, before 2026-05-01; correct --received or --on"
    tomorrow = "results cannot have come on 2026-05-02, today counts as 2026-05-01; correct --received, or give a later --as-of"
    assert refused(yard, lambda ctx: take(ctx, "oil", received="2026-04-30")) == [before]
    assert refused(yard, lambda ctx: take(ctx, "oil", received="2026-05-02")) == [tomorrow]
    take(yard, "oil")
    assert refused(yard, lambda ctx: correct(ctx, 1, received="2026-04-30")) == [before]
    assert refused(yard, lambda ctx: correct(ctx, 1, received="2026-05-02")) == [tomorrow]


def test_where_nobody_stated_the_cylinders_any_can_be_measured_and_it_says_so(ctx: Context) -> None:
    yard_of_four(ctx, cylinders=None)
    report = take(ctx, "compression", "pressure,12,,27,bar").report
    assert report.notes == (
        "nobody stated how many cylinders P-01 has; whether all were measured cannot be told: give it with fleetcare"
        " engine edit P-01 --cylinders N",
    )
    assert take(ctx, "oil").report.notes == ()


def test_new_oil_is_known_by_its_grade_whichever_engine_it_was_sampled_for(yard: Context) -> None:
    engine(yard, "A-01", oil_grade="SAE 15w40")
    take(yard, "oil", "tbn,,new,10.5,", "tbn,,,9,", tag="A-01", on="2026-04-01")
    take(yard, "oil", "tbn,,new,10.0,", tag="A-01", on="2026-04-02")
    assert [(value.quantity, str(value)) for value in loaded(yard).background.fresh] == [("tbn", "10.0")]
    report = take(yard, "oil", "tbn,,,4.9,", "grade,,,15W-40,").report
    (row,) = report.rows
    assert (row.verdict, row.rule, row.measured) == ("alert", "oil-tbn", Decimal(49))
    assert not take(yard, "oil", "tbn,,,4.9,", "grade,,,10W-30,", on="2026-04-30").report.findings


def test_a_sheet_given_anew_is_of_the_kind_it_was_where_it_may_be(yard: Context) -> None:
    take(yard, "run")
    correct(yard, 1, sheet=sheet(*SPOT))
    assert [kept.kind for kept in loaded(yard).sheets] == ["run"]
    correct(yard, 2, sheet=sheet(*PRESSURES))
    assert [kept.kind for kept in loaded(yard).sheets] == ["compression"]


def test_lash_is_judged_by_the_spec_of_its_day_for_the_rules_too(ctx: Context) -> None:
    engine(ctx, "P-01", **{"cylinders": 2, "valves_per_cylinder": 2, **LASH})
    measured = take_lash(ctx, *FOUND_IN[:3], "lash,2E,found,0.36,", when="cold")
    (judged,) = loaded(ctx).background.lash.values()
    assert [(one.value.point, str(one.verdict)) for one in judged][-1] == ("2E", "alert")
    (finding,) = measured.report.findings
    assert (finding.id, finding.state, finding.row.rule) == ("1-lash-tight-2E", "open", "lash-tight")


def test_a_finding_rests_on_the_sheets_up_to_the_one_shown(yard: Context) -> None:
    take(yard, "spot", "coolant,,,104,", on="2026-04-20")
    late = take(yard, "spot", "coolant,,,112,", on="2026-04-25").report
    assert [(one.id, one.row.severity, one.row.since) for one in late.findings] == [
        ("1-spot-coolant", "alarm", date(2026, 4, 20))
    ]
    early = take(yard, "spot", "coolant,,,104,", on="2026-04-20").report
    assert [(one.id, one.row.severity) for one in early.findings] == [("1-spot-coolant", "alert")]


def test_an_entry_without_a_sheet_has_none_to_show(yard: Context) -> None:
    log(yard, "2026-05-01", note="looked at")
    with yard.read() as connection, pytest.raises(Refused, match="entry 1 of P-01 has no sheet"):
        report_sheet(connection, find_item(connection, "P-01"), 1, TODAY)


def test_findings_of_other_sheets_are_not_told_with_this_one(yard: Context) -> None:
    take(yard, "spot", "coolant,,,104,")
    assert take(yard, "compression").report.findings == ()


def test_a_low_cylinder_is_a_finding_that_names_sheet_rule_and_cylinder(yard: Context) -> None:
    report = take(yard, "compression", *PRESSURES[:3], "pressure,4,,19,bar").report
    (finding,) = report.findings
    assert (finding.id, finding.row.severity, finding.row.subject) == ("1-compression-r75-4", "alarm", "cylinder 4")
    assert [row.verdict for row in report.rows] == ["in", "in", "in", "alarm"]
