"""Engines alike are one family, and what is kept of them is looked at again when a sample of a relative changes."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.context import Context
from fleetcare.db.chain import last_entry
from fleetcare.operations.families import Families
from fleetcare.operations.find import find_item
from fleetcare.operations.judged import finding_lives_on, judge_anew
from fleetcare.operations.judged_touched import touched
from fleetcare.operations.kin import Kin
from fleetcare.operations.measured import load_engine_sheets
from fleetcare.operations.measures_typed import open_measures
from fleetcare.operations.shop_book import shop_texts
from tests.cli.conftest import set_up
from tests.operations.importing import TODAY, engine
from tests.operations.measure_yard import take

PLATE = {"cylinders": 4, "fuel": "diesel", "bore": "104", "stroke": "132", "oil_grade": "15W-40"}
ALIKE = {"A-1": PLATE, "A-2": {**PLATE, "bore": "104.0", "fuel": "Diesel", "oil_grade": "SAE 15w40"}}
OTHERS = {
    "B-1": {**PLATE, "stroke": "133"},
    "B-2": {**PLATE, "cylinders": 6},
    "B-3": {**PLATE, "fuel": "petrol"},
    "B-4": {**PLATE, "oil_grade": "10W-40"},
    "C-1": {name: text for name, text in PLATE.items() if name != "bore"},
    "C-2": {name: text for name, text in PLATE.items() if name != "bore"},
}


@pytest.fixture
def yard(ctx: Context) -> Context:
    """Two engines alike, and six that are not."""
    for tag, plate in (ALIKE | OTHERS).items():
        engine(ctx, tag, **plate)
    return ctx


def sampled(ctx: Context, tag: str, on: str, iron: str = "30") -> None:
    take(ctx, "oil", f"Fe,,,{iron},ppm", "Si,,,ND,", tag=tag, on=on)


def numbers(ctx: Context, *tags: str) -> dict[str, int]:
    with ctx.read() as connection:
        return {tag: find_item(connection, tag).id for tag in tags or (ALIKE | OTHERS)}


def pool(ctx: Context, tag: str, on: date = TODAY) -> object:
    """What the family of an engine gives a sample of it taken on a day."""
    with ctx.read() as connection:
        return Families(connection, TODAY).of(numbers(ctx, tag)[tag], on).before(on)


def touched_since(ctx: Context, seq: int) -> set[str]:
    with ctx.read() as connection:
        is_touched = touched(connection, seq)
    return {tag for tag, item in numbers(ctx).items() if is_touched(item, seq)}


def head(ctx: Context) -> int:
    with ctx.read() as connection:
        return last_entry(connection).seq


def test_engines_of_one_fuel_cylinders_bore_stroke_and_grade_are_a_family(yard: Context) -> None:
    ids = numbers(yard)
    with yard.read() as connection:
        kin = Kin(connection)
        assert kin.of(ids["A-1"]) == kin.of(ids["A-2"]) == (ids["A-1"], ids["A-2"])
        assert all(kin.of(ids[tag]) == (ids[tag],) for tag in OTHERS)


def test_the_pool_is_of_the_samples_of_relatives_that_count(yard: Context) -> None:
    sampled(yard, "A-1", "2026-04-01", "31")
    sampled(yard, "A-2", "2026-04-02", "32")
    sampled(yard, "B-1", "2026-04-03", "99")
    sampled(yard, "A-2", "2026-04-04", "34")
    assert pool(yard, "A-1") == {"Fe": (Decimal(32), Decimal(34))}
    assert pool(yard, "A-2") == {"Fe": (Decimal(31),)}
    assert pool(yard, "A-1", date(2026, 4, 4)) == {"Fe": (Decimal(32),)}
    assert pool(yard, "A-1", date(2026, 4, 2)) == pool(yard, "C-1") == {}
    set_up(yard.path, "correct 4 --void --why other-engine")
    assert pool(yard, "A-1") == {"Fe": (Decimal(32),)}


def test_an_engine_without_oil_samples_asks_for_no_family(yard: Context) -> None:
    sampled(yard, "A-2", "2026-04-02")
    with yard.read() as connection:
        (found,) = load_engine_sheets(connection, TODAY, [numbers(yard)["A-1"]])
    assert not found.background.family.samples


def test_a_first_sample_is_held_against_the_family_while_it_is_typed(yard: Context) -> None:
    sampled(yard, "A-2", "2026-04-02")
    with yard.read() as connection:
        item = find_item(connection, "A-1")
        for kind, samples in (("oil", 1), ("spot", 0)):
            assert (
                len(open_measures(connection, item, kind, TODAY, TODAY).ahead.found.background.family.samples)
                == samples
            )


@pytest.mark.parametrize(
    ("line", "who"),
    [
        ("measure oil A-2 oil.csv --on 2026-04-03", {"A-1", "A-2"}),
        ("measure spot A-2 spot.csv --on 2026-04-03", {"A-2"}),
        ("correct 1 --void --why other-engine", {"A-1", "A-2"}),
        ("correct 1 --on 2026-04-04", {"A-1", "A-2"}),
        ("correct 2 --void --why other-engine", {"A-2"}),
        ("engine edit A-1 --bore 105", {*ALIKE, *OTHERS}),
        ("engine edit A-2 --oil-grade 10W-40", {"A-2"}),
    ],
)
def test_a_sample_and_a_nameplate_touch_every_relative(
    yard: Context, line: str, who: set[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.chdir(yard.path.parent)
    for name, row in {"oil": "Fe,,,40,ppm", "spot": "coolant,,,80,"}.items():
        (yard.path.parent / f"{name}.csv").write_text(f"quantity,point,phase,value,unit\n{row}\n")
    sampled(yard, "A-1", "2026-04-01")
    take(yard, "spot", "coolant,,,80,", tag="A-2", on="2026-04-01")
    before = head(yard)
    set_up(yard.path, line)
    assert touched_since(yard, before) == who


@pytest.fixture
def large(yard: Context) -> Context:
    """A-2 has fifty samples, and A-1 one above all of them."""
    for number in range(50):
        sampled(yard, "A-2", date.fromordinal(date(2026, 2, 1).toordinal() + number).isoformat(), str(20 + number % 5))
    sampled(yard, "A-1", "2026-04-20", "40")
    return yard


def causes(ctx: Context, tag: str) -> list[str]:
    """What is found on an engine, kept and judged anew alike."""
    with ctx.read() as connection:
        found = finding_lives_on(connection, TODAY)
        assert found == judge_anew(connection, TODAY, shop_texts(connection, TODAY))
    return [life.cause for life in found[numbers(ctx, tag)[tag]]]


def test_a_sample_above_those_of_its_family_is_found_and_a_relative_s_voided_one_takes_that_back(
    large: Context,
) -> None:
    assert causes(large, "A-1") == ["iron wear"]
    set_up(large.path, "correct 3 --void --why other-engine")
    assert causes(large, "A-1") == []


def test_a_later_sample_of_a_relative_leaves_what_was_found(large: Context) -> None:
    assert causes(large, "A-1") == ["iron wear"]
    sampled(large, "A-2", "2026-04-25", "90")
    assert causes(large, "A-1") == ["iron wear"]
