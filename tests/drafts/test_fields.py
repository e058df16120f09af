"""Fields of drafts: text becomes a typed value, or an error that says how to write it."""

from collections.abc import Callable
from decimal import Decimal
from typing import Any

import pytest

from fleetcare.domain.quantities import Amount, Figure, Kind, Span
from fleetcare.drafts import fields
from fleetcare.drafts.items import EngineDraft
from fleetcare.drafts.reading_in import Draft, read_draft
from fleetcare.drafts.tasks import TaskDraft
from fleetcare.drafts.work import DeferralDraft, LogDraft, ReadingDraft
from fleetcare.errors import Misread, Refusals, Refused


@pytest.mark.parametrize("text", ["6.5", "six", "\u0666", "1_0", "1e1", "", "9999999999999999"])
def test_a_count_is_written_with_the_digits_0_to_9_alone(text: str) -> None:
    with pytest.raises(Misread, match=r"cylinders: .* is not a whole number|cylinders is missing"):
        read_draft(EngineDraft, {"tag": "P-01", "cylinders": text or "x"})


@pytest.mark.parametrize("text", ["nan", "inf", "1e2", "1_0", "\u0666", "1,5", "0x10"])
def test_a_number_has_no_exponent_and_no_digits_but_0_to_9(text: str) -> None:
    with pytest.raises(Misread, match=r"bore: .* is not a number"):
        read_draft(EngineDraft, {"tag": "P-01", "bore": text})


@pytest.mark.parametrize("field", ["cylinders", "bore"])
@pytest.mark.parametrize("text", ["0", "-3"])
def test_what_must_be_above_nothing_is_refused_at_nothing(field: str, text: str) -> None:
    with pytest.raises(Refused, match=f"{field}: {text} cannot be right"):
        read_draft(EngineDraft, {"tag": "P-01", field: text})


def test_a_number_may_be_given_as_one() -> None:
    plate = read_draft(EngineDraft, {"tag": "P-01", "cylinders": 6, "bore": Decimal("102.5"), "altitude": "-3"})
    assert (plate.cylinders, plate.bore, plate.altitude) == (6, Decimal("102.5"), Decimal(-3))


@pytest.mark.parametrize(
    ("text", "meter"),
    [
        ("hours", (Kind.HOURS, "h")),
        (" Distance ", (Kind.DISTANCE, "km")),
        ("distance:MI", (Kind.DISTANCE, "mi")),
        ("fuel:galimp", (Kind.FUEL, "galimp")),
        ("starts:starts", (Kind.STARTS, "starts")),
    ],
)
def test_a_meter_counts_in_its_base_unit_unless_another_is_named(text: str, meter: tuple[Kind, str]) -> None:
    assert fields.parse_meter(text) == meter


@pytest.mark.parametrize(
    ("text", "wrong", "remedy"),
    [
        ("weeks", "no meter counts 'weeks'", "use one of hours, distance, fuel, starts"),
        ("hours:km", "'km' is no unit of hours", "use one of h"),
        ("fuel:gal", "'gal' is no unit of fuel", "use one of L, galus, galimp"),
        ("distance:furlong", "'furlong' is no unit of distance", "use one of km, mi"),
    ],
)
def test_a_meter_nobody_has_is_misread_with_those_there_are(text: str, wrong: str, remedy: str) -> None:
    with pytest.raises(Misread) as caught:
        fields.parse_meter(text)
    assert caught.value.lines() == [f"{wrong}; {remedy}"]


@pytest.mark.parametrize(
    ("text", "digits"),
    [("5.1", (None, 5, 1)), ("6", (None, 6, 0)), ("distance:6.0", (Kind.DISTANCE, 6, 0))],
)
def test_digits_of_a_dial_are_those_before_and_after_the_point(text: str, digits: tuple[Kind | None, int, int]) -> None:
    assert fields.parse_digits(text) == digits


@pytest.mark.parametrize("text", ["0.1", "10.0", "\u0665.1", "\u00b2.1", "5.", ".1", "5.1.1", "-5.1", "abc", ""])
def test_digits_no_dial_has_are_misread(text: str) -> None:
    with pytest.raises(Misread, match="is not digits of a dial; write 1 to 9 digits before the point"):
        fields.parse_digits(text)


@pytest.mark.parametrize(
    ("text", "part"),
    [
        ("Oil filter", ("Oil filter", "1")),
        ("Oil filter:2", ("Oil filter", "2")),
        ("Ring: 8x6 :1.5", ("Ring: 8x6", "1.5")),
    ],
)
def test_a_part_is_one_unless_its_number_stands_behind_the_last_colon(text: str, part: tuple[str, str]) -> None:
    assert fields.parse_part(text) == (part[0], Decimal(part[1]))


def test_no_meter_counts_the_calendar() -> None:
    with pytest.raises(Refused, match="no meter counts the calendar; use one of hours"):
        fields.parse_meter("calendar")


@pytest.mark.parametrize(("text", "error"), [("Ring:0", Refused), ("Ring:two", Misread), (":2", Refused)])
def test_a_part_without_a_name_or_a_number_above_nothing_is_not_taken(text: str, error: type[Exception]) -> None:
    with pytest.raises(error):
        fields.parse_part(text)


@pytest.mark.parametrize("text", ["8", "8h", "8km"])
def test_a_top_up_needs_a_unit_of_volume(text: str) -> None:
    with pytest.raises(Misread, match=r"top_up: .* is not a volume; write it like 8L, 2galus or 2galimp"):
        read_draft(LogDraft, {"tag": "P-01", "on": "2026-05-01", "top_up": text})


def test_a_top_up_of_nothing_is_refused() -> None:
    with pytest.raises(Refused, match="give a volume above 0"):
        fields.parse_litres("0L")


@pytest.mark.parametrize("text", ["90min", "2d", "3km"])
def test_working_time_is_in_hours(text: str) -> None:
    with pytest.raises(Misread):
        fields.parse_hours(text)
    assert fields.parse_hours("1.5h") == fields.parse_hours("1.5") == Decimal("1.5")


def test_a_day_or_a_dial_figure_is_told_by_its_hyphens() -> None:
    draft = read_draft(
        DeferralDraft,
        {"tag": "P-01", "task": "Oil", "until": ["2026-05-20", "1500h"], "why": "x", "by": "Fenn", "on": "2026-05-01"},
    )
    assert [str(end) for end in draft.until] == ["2026-05-20", "1500 h"]


def test_a_cell_joins_several_values_with_semicolons() -> None:
    draft = read_draft(TaskDraft, {"name": "Oil", "every": "250h; 12mo", "part": "Filter:2;Gasket;"})
    assert draft.every == (Amount(Decimal(250), "h"), Span(12, "mo"))
    assert draft.part == (("Filter", Decimal(2)), ("Gasket", Decimal(1)))


def test_white_space_in_a_name_is_one_space_and_a_line_break_none() -> None:
    assert read_draft(EngineDraft, {"tag": "  P\t01\n x "}).tag == "P 01 x"


def test_a_name_of_nothing_but_white_space_is_refused() -> None:
    with pytest.raises(Refused, match="tag: it is empty; write at least one letter"):
        read_draft(EngineDraft, {"tag": " \n "})


def test_a_pair_of_figures_may_be_given_as_figures() -> None:
    pair = (Figure(Decimal(4980), "h"), Figure(Decimal(0)))
    draft = read_draft(ReadingDraft, {"tag": "P-01", "value": Figure(Decimal(0)), "on": "2026-05-01", "replaced": pair})
    assert draft.replaced == pair


def test_every_field_that_is_wrong_is_named_and_the_worst_decides_the_status() -> None:
    with pytest.raises(Refusals) as caught:
        read_draft(EngineDraft, {"cylinders": "0", "bore": "wide", "layout": "w", "colour": "red"}, str.upper)
    assert caught.value.exit_code == 2
    assert caught.value.lines() == [
        "TAG is missing; give it",
        "CYLINDERS: 0 cannot be right; give a whole number above 0",
        "LAYOUT: 'w' is not known; use 'inline', 'v', 'opposed' or 'single'",
        "BORE: 'wide' is not a number; write digits, with a point for decimals",
        "COLOUR is not known here; leave it out, or check its spelling",
    ]


def test_a_value_of_a_kind_no_text_has_is_named_all_the_same() -> None:
    with pytest.raises(Misread, match="sure: Input should be a valid boolean"):
        read_draft(ReadingDraft, {"tag": "P-01", "value": "5", "on": "2026-05-01", "sure": "perhaps"})


@pytest.mark.parametrize(
    "parse", [fields.parse_litres, fields.parse_hours, fields.parse_meter, fields.parse_digits, fields.parse_kind]
)
def test_no_field_takes_nothing(parse: Callable[[str], Any]) -> None:
    with pytest.raises(Misread):
        parse("")


def test_a_draft_cannot_be_changed_once_it_is_checked() -> None:
    class Named(Draft):
        name: fields.Text

    with pytest.raises(ValueError, match="frozen"):
        Named(name="x").name = "y"
