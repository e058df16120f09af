"""Engines out of a file: added as `engine add` would, all or none, and nothing a second time."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.context import Context
from fleetcare.domain.engines import Status
from fleetcare.operations.find import find_engine, find_item
from fleetcare.operations.items import fit_engine, stored_draft
from fleetcare.operations.load import load_counters, load_items
from fleetcare.operations.rows import fetch
from fleetcare.operations.spells import change_status
from fleetcare.operations.upkeep import check
from tests.operations.importing import TODAY, beginnings, engine, machine, refusals, take_in

HEADER = "tag,site,cylinders,firing_order,meter,in_service,start_at,as_new"
P_01 = "P-01,North Sluice,6,1-5-3-6-2-4,hours,2024-01-10,0,yes"
L_01 = 'L-01,Board Yard,4,1-3-4-2,"hours;distance:mi",2024-01-10,120h;5600mi,no'


def tags(ctx: Context) -> list[str]:
    """The tags of all engines and machines in use."""
    with ctx.read() as connection:
        return [item.tag for item in load_items(connection, TODAY)]


def test_a_row_is_an_engine_with_its_plate_place_meters_and_start(ctx: Context) -> None:
    imported = take_in(ctx, "engines", HEADER, P_01, L_01)
    assert (imported.stored, imported.known) == (["P-01", "L-01"], 0)
    with ctx.write() as session:
        connection = session.connection()
        plate = stored_draft(session, find_item(connection, "P-01"))
        first, second = load_items(connection, TODAY)[::-1]
        counters = load_counters(connection, [second.id], TODAY)[second.id]
    assert (plate["cylinders"], plate["firing_order"]) == (6, "1-5-3-6-2-4")
    assert (first.site, first.in_service_on, first.as_new) == ("North Sluice", date(2024, 1, 10), True)
    assert (second.site, second.as_new) == ("Board Yard", False)
    latest = {counter.unit: counter.latest.reading.value for counter in counters.values() if counter.latest}
    assert latest == {"h": 120, "mi": 5600}
    assert check(ctx).problems == ()


def test_any_option_of_engine_add_is_a_column(ctx: Context) -> None:
    machine(ctx, "PH-1", site="North Sluice")
    header = (
        "tag,name,machine,position,lash_intake,lash_set_intake,lash_when,meter,meter_digits,oil_grade,sump,altitude"
    )
    take_in(ctx, "engines", header, "P-01,'=Pump [/b],ph-1,port,0.20-0.30,0.25,cold,hours,5.1,15W-40,12.5,-2")
    with ctx.read() as connection:
        (item,) = [item for item in load_items(connection, TODAY) if item.is_engine]
        lash = fetch(connection, "select intake_low, intake_high, set_intake, condition from lash_spec")
        position = fetch(connection, "select position from fitting")
    assert (item.name, item.machine, item.site) == ("=Pump [/b]", "PH-1", "North Sluice")
    assert [tuple(row) for row in lash] == [("0.20", "0.30", "0.25", "cold")]
    assert position[0][0] == "port"


# A second time

FULL = (
    "tag,name,site,machine,position,duty,cylinders,layout,meter,meter_digits,in_service,start_at,as_new,bore,"
    "lash_intake,lash_exhaust,lash_set_intake,lash_set_exhaust,lash_when"
)
ALL = (
    "P-01,Pump,North Sluice,PH-1,port,drainage,6,inline,hours,hours:5.1,2024-01-10,100h,yes,110,"
    "0.20-0.30,0.40-0.50,0.25,0.45,cold"
)


@pytest.fixture
def yard(ctx: Context) -> Context:
    """P-01 in the pump house PH-1, imported with every kind of column."""
    machine(ctx, "PH-1")
    take_in(ctx, "engines", FULL, ALL)
    return ctx


@pytest.mark.parametrize(
    ("header", "row"),
    [
        (FULL, ALL),
        ("tag", "p-01"),
        ("tag,site,machine,duty", "P-01,NORTH SLUICE,ph-1,Drainage"),
        ("tag,bore,meter_digits,in_service,start_at", "P-01,110.0,5.1,2024-01-10,100"),
        ("tag,start_at,in_service,as_new", "P-01,100.0h,2024-01-10,"),
        ("tag,meter,site", "P-01,,"),
    ],
)
def test_an_engine_that_is_there_and_not_otherwise_is_not_added_again(yard: Context, header: str, row: str) -> None:
    before = check(yard)
    imported = take_in(yard, "engines", header, row)
    assert (imported.stored, imported.known) == ([], 1)
    assert check(yard) == before


@pytest.mark.parametrize(
    ("header", "row", "column"),
    [
        ("tag,site", "P-01,West Sluice", "site"),
        ("tag,name", "P-01,Other", "name"),
        ("tag,machine", "P-01,PH-2", "machine"),
        ("tag,cylinders", "P-01,4", "cylinders"),
        ("tag,fuel", "P-01,diesel", "fuel"),
        ("tag,layout,cylinders", "P-01,v,6", "layout"),
        ("tag,in_service", "P-01,2024-01-11", "in_service"),
        ("tag,in_service,start_at", "P-01,2024-01-10,101", "start_at"),
        ("tag,in_service,start_at", "P-01,2024-01-10,100km", "start_at"),
        ("tag,meter", "P-01,hours;starts", "meter"),
        ("tag,meter_digits", "P-01,6.1", "meter_digits"),
        ("tag,meter_digits", "P-01,distance:5.1", "meter_digits"),
        ("tag,as_new", "P-01,no", "as_new"),
        ("tag,lash_intake", "P-01,0.20-0.31", "lash_intake"),
        ("tag,lash_exhaust", "P-01,0.40-0.50in", "lash_exhaust"),
        ("tag,lash_when", "P-01,hot", "lash_when"),
    ],
)
def test_a_row_that_contradicts_what_is_stored_is_refused_with_its_column(
    yard: Context, header: str, row: str, column: str
) -> None:
    (line,) = refusals(yard, "engines", header, row)
    assert line == (
        f"row 2, column {column}: P-01 is there already, with another {column.replace('_', ' ')};"
        " leave the row out, or change the engine with fleetcare engine edit P-01"
    )


def test_an_engine_without_a_lash_spec_has_none_to_compare_with(ctx: Context) -> None:
    engine(ctx, "P-02")
    (line,) = refusals(ctx, "engines", "tag,lash_when", "P-02,cold")
    assert line.startswith("row 2, column lash_when: P-02 is there already, with another lash when")


def test_every_column_that_differs_is_said_in_one_line(yard: Context) -> None:
    (line,) = refusals(yard, "engines", "tag,site,bore", "P-01,West,90")
    assert "with another site, bore;" in line


def test_an_engine_withdrawn_since_is_not_brought_back(yard: Context) -> None:
    with yard.write() as session:
        change_status(session, find_engine(session.connection(), "P-01"), Status.WITHDRAWN, TODAY)
    before = check(yard)
    imported = take_in(yard, "engines", FULL, ALL)
    assert (imported.stored, imported.known) == ([], 1)
    assert imported.notes == ["row 2: P-01 was withdrawn on 2026-05-01; add it anew with fleetcare engine add"]
    assert check(yard) == before


def test_another_engine_under_a_freed_tag_is_added(yard: Context) -> None:
    with yard.write() as session:
        change_status(session, find_engine(session.connection(), "P-01"), Status.WITHDRAWN, TODAY)
    assert take_in(yard, "engines", "tag,cylinders", "P-01,4").stored == ["P-01"]
    assert take_in(yard, "engines", "tag,cylinders", "P-01,4").known == 1


def test_an_engine_moved_since_contradicts_the_file(yard: Context) -> None:
    machine(yard, "PH-2")
    with yard.write() as session:
        fit_engine(session, find_engine(session.connection(), "P-01"), "PH-2", TODAY)
    (line,) = refusals(yard, "engines", "tag,machine", "P-01,PH-1")
    assert line.startswith("row 2, column machine: P-01 is there already, with another machine")


# Refused by row


def test_a_tag_twice_is_refused_by_row_even_if_both_say_the_same(ctx: Context) -> None:
    assert refusals(ctx, "engines", "tag,site", "P-01,North", "P-02,", "p-01,North", "P-01,South") == [
        "row 4, column tag: p-01 stands in row 2 too; keep one row for each engine",
        "row 5, column tag: P-01 stands in row 2 too; keep one row for each engine",
    ]


def test_a_machines_tag_is_taken(ctx: Context) -> None:
    machine(ctx, "PH-1")
    assert refusals(ctx, "engines", "tag", "ph-1") == [
        "row 2, column tag: PH-1 is a machine; choose another tag",
    ]


def test_one_bad_row_keeps_the_good_ones_out_too(ctx: Context) -> None:
    refusals(ctx, "engines", HEADER, P_01, "P-02,North,six,,,,,")
    assert tags(ctx) == []


def test_every_bad_cell_has_a_line_in_the_words_of_the_file(ctx: Context) -> None:
    engine(ctx, "E-1")
    lines = refusals(
        ctx,
        "engines",
        "tag,machine,cylinders,firing_order,meter,meter_digits,in_service,start_at,as_new,layout,lash_intake",
        ",,,,,,,,,,",
        "P-02,,six,1-2-3-4,miles,x,2024-13-01,5,perhaps,round,wide",
        "P-03,,4,1-2-3-5,,,,,,,",
        "P-04,,,1-3-4-2,,,,,,,",
        "P-05,,,,hours,,,5h,,,",
        "P-06,,,,hours,,,,yes,,",
        "P-07,,,,hours;hours,,,,,,",
        "P-08,PH-9,,,,,,,,,",
        "P-09,E-1,,,,,,,,,",
        "P-10,,,,hours;starts,5.1,,,,,",
        "P-11,,,,hours;starts,,2024-01-10,5,,,",
        "P-12,,5,,,,,,,v,",
        "P-13,,,,hours,,2024-01-10,5h;6h,,,",
        "P-14,,,,,,,,,,0.30-0.20",
    )
    wanted = [
        "row 3, column cylinders: 'six' is not a whole number",
        "row 3, column layout: 'round' is not known",
        "row 3, column meter: ",
        "row 3, column meter_digits: 'x' is not digits of a dial",
        "row 3, column in_service: there is no day 2024-13-01",
        "row 3, column as_new: 'perhaps' is neither yes nor no; write yes or no",
        "row 3, column lash_intake: 'wide' is not a lash range",
        "row 4, column firing_order: firing order 1-2-3-5 leaves out cylinder 4",
        "row 5, column cylinders: a firing order needs the number of cylinders; give column cylinders as well",
        "row 6, column in_service: a start figure needs its day; give column in_service as well",
        "row 7, column in_service: an item counted as new needs the day and the figure it starts from;"
        " give column in_service DATE and column start_at VALUE",
        "row 8, column meter: it names one kind twice; an item has one meter of each kind",
        "row 9, column machine: no engine or machine has the tag 'PH-9'",
        "row 10, column machine: E-1 is an engine, not a machine",
        "row 11, column meter_digits: 5.1 binds to more than one meter of P-10; name the kind, such as distance:6.0",
        "row 12, column start_at: 5 could be hours and starts of P-11; write its unit behind it",
        "row 13, column layout: layout v with 5 cylinders leaves one without a partner",
        "row 14, column start_at: it names hours twice; give one figure of each kind",
        "row 15, column lash_intake: lash range 0.30-0.20 runs backwards",
    ]
    rest = [line for line in lines if not line.startswith("row 3, ")]
    assert beginnings(rest, wanted[7:]) == wanted[7:]
    third = sorted(line for line in lines if line.startswith("row 3, "))
    assert beginnings(third, sorted(wanted[:7])) == sorted(wanted[:7])
    assert tags(ctx) == ["E-1"]


def test_exact_figures_of_a_plate_are_kept(ctx: Context) -> None:
    take_in(ctx, "engines", "tag,bore,stroke,sump", "P-01,110.50,125,12.50")
    with ctx.write() as session:
        plate = stored_draft(session, find_item(session.connection(), "P-01"))
    assert [str(plate[name]) for name in ("bore", "stroke", "sump")] == ["110.50", "125", "12.50"]
    assert all(isinstance(plate[name], Decimal) for name in ("bore", "stroke", "sump"))
