"""A lash sheet held against its spec: verdicts, margins, what is not judged and why, and what it says of the engine."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.domain.engines import Side, ValveTrain
from fleetcare.domain.sheets import (
    Judgement,
    LashSpec,
    LashStand,
    Phase,
    Place,
    SheetValue,
    Unjudged,
    Verdict,
    spec_on,
)
from fleetcare.rules.judge_lash import judge_sheet, judge_value, stand_of
from fleetcare.rules.lash_points import lash_points

ALWAYS = date.min
POINTS = lash_points(ValveTrain(1, 2))


def a_spec(**changes: object) -> LashSpec:
    """Intake 0.20 to 0.30, exhaust 0.40 to 0.50 mm, cold."""
    ranges = {
        Side.INTAKE: (Decimal("0.20"), Decimal("0.30")),
        Side.EXHAUST: (Decimal("0.40"), Decimal("0.50")),
    }
    facts: dict[str, object] = {"from_on": ALWAYS, "unit": "mm", "condition": "cold", "ranges": ranges} | changes
    return LashSpec(**facts)  # type: ignore[arg-type]


def a_value(
    text: str, point: str = "1I", phase: Phase = Phase.FOUND, unit: str = "mm", quantity: str = "lash"
) -> SheetValue:
    """A value as a sheet file has it: "0.25", "0.25..0.30", "<0.05"."""
    low, mark, high = text.partition("..")
    if mark:
        return SheetValue(quantity, point, phase, None, Decimal(low), Decimal(high), unit)
    return SheetValue(
        quantity, point, phase, Decimal(text.lstrip("<")), None, None, unit, "<" if text[0] == "<" else ""
    )


def judged(text: str, phase: Phase = Phase.FOUND) -> Judgement:
    """What the spec says of an intake valve."""
    return judge_value(a_value(text, phase=phase), Side.INTAKE, a_spec(), "cold")


@pytest.mark.parametrize(
    ("text", "phase", "verdict", "margin", "limit"),
    [
        ("0.20", Phase.FOUND, Verdict.IN, "0", "0.20"),
        ("0.24", Phase.FOUND, Verdict.IN, "0.04", "0.20"),
        ("0.27", Phase.LEFT, Verdict.IN, "0.03", "0.30"),
        ("0.30", Phase.LEFT, Verdict.IN, "0", "0.30"),
        ("0.19", Phase.FOUND, Verdict.ALERT, "-0.01", "0.20"),
        ("0.19", Phase.LEFT, Verdict.ALARM, "-0.01", "0.20"),
        ("0.31", Phase.FOUND, Verdict.ALERT, "-0.01", "0.30"),
        ("0.31", Phase.LEFT, Verdict.ALARM, "-0.01", "0.30"),
        ("0", Phase.FOUND, Verdict.ALARM, "-0.20", "0.20"),
        ("<0.05", Phase.FOUND, Verdict.ALARM, "-0.20", "0.20"),
        ("0.05..0.10", Phase.FOUND, Verdict.ALERT, "-0.15", "0.20"),
        ("0.20..0.25", Phase.FOUND, Verdict.IN, "0", "0.20"),
        ("0.25..0.30", Phase.LEFT, Verdict.IN, "0", "0.30"),
        ("0.35..0.40", Phase.LEFT, Verdict.ALARM, "-0.10", "0.30"),
    ],
)
def test_a_value_left_out_weighs_more_than_one_found_out_and_no_gap_at_all_always(
    text: str, phase: Phase, verdict: Verdict, margin: str, limit: str
) -> None:
    one = judged(text, phase)
    assert (one.verdict, one.margin, one.limit) == (verdict, Decimal(margin), Decimal(limit))
    assert one.is_out is (verdict in {Verdict.ALERT, Verdict.ALARM})
    assert one.unjudged is None


def test_an_interval_says_how_far_out_it_is_at_least() -> None:
    one = judged("0.05..0.10")
    assert (one.place, one.off_least, one.margin) == (Place.BELOW, Decimal("0.10"), Decimal("-0.15"))


@pytest.mark.parametrize(
    ("text", "limit"), [("0.15..0.25", "0.20"), ("0.28..0.33", "0.30"), ("0.30..0.35", "0.30"), ("0.05..0.40", "0.20")]
)
@pytest.mark.parametrize("phase", [Phase.FOUND, Phase.LEFT])
def test_blades_that_straddle_a_limit_decide_nothing(text: str, limit: str, phase: Phase) -> None:
    one = judged(text, phase)
    assert (one.verdict, one.place, one.unjudged) == (Verdict.NOT_JUDGED, Place.UNDECIDED, Unjudged.UNDECIDED)
    assert one.limit == Decimal(limit)


@pytest.mark.parametrize(
    ("asked", "taken", "is_judged"),
    [
        ("cold", "cold", True),
        ("hot", "hot", True),
        ("cold", "hot", False),
        ("hot", "cold", False),
        ("any", "hot", True),
        ("any", "cold", True),
        ("any", "", True),
        ("cold", "", True),  # nobody said: taken as the spec asks
    ],
)
def test_a_cold_reading_is_never_held_against_hot_limits(asked: str, taken: str, is_judged: bool) -> None:
    one = judge_value(a_value("0.10"), Side.INTAKE, a_spec(condition=asked), taken)
    assert one.verdict is (Verdict.ALERT if is_judged else Verdict.NOT_JUDGED)
    assert one.unjudged is (None if is_judged else Unjudged.OTHER_CONDITION)


def test_without_a_spec_or_a_range_nothing_is_judged_and_it_says_which() -> None:
    value = a_value("0.10")
    assert judge_value(value, Side.INTAKE, None, "").unjudged is Unjudged.NO_SPEC
    only_set = a_spec(ranges={}, settings={Side.INTAKE: Decimal("0.25")})
    assert judge_value(value, Side.INTAKE, only_set, "cold").unjudged is Unjudged.NO_RANGE


def test_the_thickness_of_a_shim_has_no_limit() -> None:
    shim = a_value("2.75", quantity="shim")
    assert judge_value(shim, Side.INTAKE, a_spec(), "cold").unjudged is Unjudged.NO_LIMIT_OF_ITS_OWN


def test_inches_are_held_against_limits_in_millimetres_in_millimetres() -> None:
    one = judge_value(a_value("0.007", unit="in"), Side.INTAKE, a_spec(), "cold")  # 0.1778 mm
    assert (one.verdict, one.margin, one.unit) == (Verdict.ALERT, Decimal("-0.0222"), "mm")
    both = a_spec(unit="in", ranges={Side.INTAKE: (Decimal("0.008"), Decimal("0.012"))})
    one = judge_value(a_value("0.007", unit="in"), Side.INTAKE, both, "cold")
    assert (one.margin, one.unit, one.limits) == (Decimal("-0.001"), "in", (Decimal("0.008"), Decimal("0.012")))


def test_a_sheet_is_judged_in_the_order_of_the_points_found_before_left() -> None:
    values = [
        a_value("0.45", "1E", Phase.LEFT),
        a_value("0.25", "1I"),
        a_value("0.39", "1E"),
        a_value("2.75", "1E", quantity="shim"),
    ]
    order = [(one.value.point, one.value.quantity, str(one.value.phase)) for one in _sheet(values)]
    assert order == [("1I", "lash", "found"), ("1E", "lash", "found"), ("1E", "lash", "left"), ("1E", "shim", "found")]


def _sheet(values: list[SheetValue], condition: str = "cold") -> tuple[Judgement, ...]:
    return judge_sheet(values, POINTS, a_spec(), condition)


@pytest.mark.parametrize(
    ("values", "stand"),
    [
        ([], LashStand(missing=("1I", "1E"))),
        ([a_value("0.25"), a_value("0.45", "1E")], LashStand()),
        ([a_value("0.25")], LashStand(missing=("1E",))),
        ([a_value("0.25"), a_value("2.75", "1E", quantity="shim")], LashStand(missing=("1E",))),
        (
            [a_value("0.25"), a_value("0.39", "1E")],
            LashStand(found_out=("1E",), unset=("1E",), left_out=("1E",)),
        ),
        (
            [a_value("0.25"), a_value("0.39", "1E"), a_value("0.45", "1E", Phase.LEFT)],
            LashStand(found_out=("1E",)),
        ),
        (
            [a_value("0.25"), a_value("0.39", "1E"), a_value("0.51", "1E", Phase.LEFT)],
            LashStand(found_out=("1E",), left_out=("1E",)),
        ),
        ([a_value("0.25"), a_value("0.45", "1E", Phase.LEFT)], LashStand()),
        ([a_value("0.25"), a_value("0.35..0.45", "1E")], LashStand(unset=("1E",), untold=("1E",))),
        ([a_value("0.25"), a_value("0.35..0.45", "1E", Phase.LEFT)], LashStand(untold=("1E",))),
    ],
)
def test_a_sheet_says_what_is_missing_what_was_out_and_what_is_left_out(
    values: list[SheetValue], stand: LashStand
) -> None:
    assert stand_of(_sheet(values), POINTS) == stand
    assert stand.is_complete is not bool(stand.missing or stand.unset)


def test_a_sheet_taken_in_another_condition_is_complete_and_untold() -> None:
    stand = stand_of(_sheet([a_value("0.10"), a_value("0.45", "1E")], condition="hot"), POINTS)
    assert stand == LashStand(untold=("1I", "1E"))
    assert stand.is_complete


def test_the_spec_of_a_day_is_the_newest_begun_by_then() -> None:
    old, new = a_spec(), a_spec(from_on=date(2026, 5, 1), condition="hot")
    assert spec_on((old, new), date(2026, 4, 30)) is old
    assert spec_on((old, new), date(2026, 5, 1)) is new
    assert spec_on((), date(2026, 5, 1)) is None
    assert spec_on((new,), date(2026, 4, 30)) is None


@pytest.mark.parametrize(
    ("text", "ends"),
    [("0.25", ("0.25", "0.25")), ("0.25..0.30", ("0.25", "0.30")), ("<0.05", ("0", "0.05"))],
)
def test_a_value_reads_as_its_file_has_it_and_knows_its_ends(text: str, ends: tuple[str, str]) -> None:
    value = a_value(text)
    assert str(value) == text
    assert value.ends == tuple(map(Decimal, ends))


def test_nothing_detected_is_nothing() -> None:
    value = SheetValue("water", "", Phase.NONE, None, None, None, "%", "ND")
    assert (str(value), value.ends) == ("ND", (Decimal(0), Decimal(0)))
