"""Nameplate figures: the impossible is refused, the unusual is not."""

from decimal import Decimal

import pytest

from fleetcare.domain.engines import Layout
from fleetcare.errors import Misread, Refused
from fleetcare.rules.nameplate import (
    check_firing_order,
    check_layout,
    check_positive,
    parse_lash_range,
    parse_lash_setting,
    says_marine,
)


@pytest.mark.parametrize(
    ("order", "cylinders", "fired"),
    [("1-5-3-6-2-4", 6, (1, 5, 3, 6, 2, 4)), ("1", 1, (1,)), (" 1-3-2 ", 3, (1, 3, 2))],
)
def test_a_firing_order_that_names_each_cylinder_once_is_read(
    order: str, cylinders: int, fired: tuple[int, ...]
) -> None:
    assert check_firing_order(order, cylinders) == fired


@pytest.mark.parametrize(
    ("order", "cylinders", "wrong"),
    [
        ("1-3-4", 4, "leaves out cylinder 2"),
        ("1-3-4", 6, "leaves out cylinders 2, 5, 6"),
        ("1-3-4-3", 4, "leaves out cylinder 2 and names more than once cylinder 3"),
        ("1-3-4-2-5", 4, "goes beyond the engine with cylinder 5"),
        ("0-1", 1, "goes beyond the engine with cylinder 0"),
    ],
)
def test_a_wrong_firing_order_is_refused_with_the_cylinders_named(order: str, cylinders: int, wrong: str) -> None:
    with pytest.raises(Refused) as refused:
        check_firing_order(order, cylinders)
    assert refused.value.detail == f"firing order {order} {wrong}"


@pytest.mark.parametrize(
    ("duty", "is_marine"),
    [
        ("marine propulsion", True),
        ("Marine emergency", True),
        ("workboat", True),
        ("ship's pump", True),
        ("two vessels", True),
        ("land drainage pump", False),
        ("non-marine standby", False),
        ("not marine", False),
        ("shipyard crane", False),
        ("submarine cable winch", False),
        ("", None),
        ("  ", None),
    ],
)
def test_a_duty_says_that_it_is_marine_that_it_is_not_or_nothing(duty: str, is_marine: bool | None) -> None:
    assert says_marine(duty) is is_marine


@pytest.mark.parametrize("order", ["", "1-", "1,3,4,2", "1-x", "1--2", "-1", "1-²"])
def test_what_is_no_row_of_cylinder_numbers_is_misread(order: str) -> None:
    with pytest.raises(Misread, match="is not a firing order"):
        check_firing_order(order, 4)


@pytest.mark.parametrize(
    ("layout", "cylinders"),
    [(Layout.SINGLE, 1), (Layout.INLINE, 1), (Layout.INLINE, 5), (Layout.V, 2), (Layout.V, 12), (Layout.OPPOSED, 4)],
)
def test_a_layout_its_cylinders_can_stand_in_is_accepted(layout: Layout, cylinders: int) -> None:
    check_layout(layout, cylinders)


@pytest.mark.parametrize(
    ("layout", "cylinders", "wrong"),
    [
        (Layout.SINGLE, 2, "a single has 1 cylinder, not 2"),
        (Layout.V, 1, "layout v with 1 cylinder leaves one without a partner"),
        (Layout.OPPOSED, 3, "layout opposed with 3 cylinders"),
        (Layout.INLINE, 0, "number of cylinders 0 cannot be right"),
    ],
)
def test_a_layout_its_cylinders_cannot_stand_in_is_refused(layout: Layout, cylinders: int, wrong: str) -> None:
    with pytest.raises(Refused, match=wrong):
        check_layout(layout, cylinders)


@pytest.mark.parametrize("value", [Decimal(0), Decimal("-0.1"), 0])
def test_nothing_and_less_than_nothing_is_refused(value: Decimal | int) -> None:
    with pytest.raises(Refused, match=r"bore .* mm cannot be right"):
        check_positive("bore", value, "mm")


def test_any_figure_above_nothing_is_accepted() -> None:
    check_positive("bore", Decimal("0.001"), "mm")


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("0.20-0.30", (Decimal("0.20"), Decimal("0.30"), "mm")),
        ("0.20 - 0.30 mm", (Decimal("0.20"), Decimal("0.30"), "mm")),
        (".008-.012in", (Decimal("0.008"), Decimal("0.012"), "in")),
        ("0.3-0.3", (Decimal("0.3"), Decimal("0.3"), "mm")),
    ],
)
def test_a_lash_range_is_read_with_its_unit_mm_where_none_stands(
    text: str, found: tuple[Decimal, Decimal, str]
) -> None:
    assert parse_lash_range(text) == found


@pytest.mark.parametrize("text", ["", "0.20", "0.20-0.30cm", "0.20-0.30-0.40", "a-b", "0,20-0,30"])
def test_what_is_no_range_is_misread(text: str) -> None:
    with pytest.raises(Misread, match="is not a lash range"):
        parse_lash_range(text)


@pytest.mark.parametrize(("text", "wrong"), [("0.30-0.20", "runs backwards"), ("0-0.20", "lash 0 cannot be right")])
def test_a_range_no_gap_can_have_is_refused(text: str, wrong: str) -> None:
    with pytest.raises(Refused, match=wrong):
        parse_lash_range(text)


@pytest.mark.parametrize(
    ("text", "setting", "unit"), [("0.25", "0.25", "mm"), (" .30 mm ", "0.30", "mm"), ("0.010in", "0.010", "in")]
)
def test_a_lash_to_set_is_one_figure_in_mm_unless_inches_are_named(text: str, setting: str, unit: str) -> None:
    assert parse_lash_setting(text) == (Decimal(setting), unit)


@pytest.mark.parametrize(("text", "error"), [("abc", Misread), ("0.2-0.3", Misread), ("1e-1", Misread), ("0", Refused)])
def test_a_lash_to_set_that_is_no_figure_above_nothing_is_not_taken(text: str, error: type[Exception]) -> None:
    with pytest.raises(error):
        parse_lash_setting(text)
