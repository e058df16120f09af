"""What compression and oil did over time: which values are one line, where each lies, and which are fitted."""

from decimal import Decimal

import pytest

from fleetcare.domain.measured import MeasuredSheet, TopUp
from fleetcare.domain.sheet_kinds import KINDS, Column
from fleetcare.rules.measured_past import (
    OIL_ORDER,
    Aside,
    Break,
    compression_pasts,
)
from fleetcare.rules.oil_fills import seen_until, top_up, with_logged
from tests.rules.measured import a_sheet, value
from tests.rules.pasts import BANKS, a_test, cylinder, fitted, iron, oil, sampled


def test_all_that_a_laboratory_reports_has_its_place_in_the_order() -> None:
    reported = {column.quantity for column in KINDS["oil"].columns if isinstance(column, Column) and column.is_lab}
    assert set(OIL_ORDER) == reported
    assert len(OIL_ORDER) == len(reported)


def test_cylinders_stand_as_the_engine_does_and_unknown_ones_last() -> None:
    pasts = compression_pasts([a_test(0, "10", "25", "", "24", "23")], ((4, 2, 1),), counts_hours=True)
    assert [past.point for past in pasts] == ["4", "1", "3"]


def test_wet_values_are_no_part_of_it() -> None:
    sheet = a_sheet(value("pressure", "27", "bar", "1", "wet"), kind="compression")
    assert compression_pasts([sheet], BANKS, counts_hours=True) == []


def test_figures_stand_exactly_in_the_unit_of_the_newest_sheet() -> None:
    past = cylinder(a_test(9, "10", "2.5", unit="MPa"), a_test(0, "20", "24"))
    assert (past.unit, fitted(past)) == ("bar", [[("10", "25"), ("20", "24")]])


def test_a_figure_in_a_unit_of_another_kind_is_left_out() -> None:
    assert len(cylinder(a_test(9, "10", "25", unit="ppm"), a_test(0, "20", "24")).values) == 1


def test_another_gauge_begins_a_line_and_the_old_one_goes_on_with_its_own() -> None:
    sheets = [a_test(9, "10", "25", gauge="A"), a_test(8, "20", "22", gauge="B"), a_test(7, "30", "24", gauge="A")]
    past = cylinder(*sheets)
    assert fitted(past) == [[("20", "22")], [("10", "25"), ("30", "24")]]
    assert past.before is past.values[0]
    assert cylinder(*sheets[:2]).before is Break.OTHER_GAUGE


def test_one_value_is_the_first() -> None:
    past = cylinder(a_test(0, "20", "24"))
    assert (past.before, past.usual_gap) == (Break.FIRST, None)


def test_the_usual_gap_is_the_median_within_lines() -> None:
    past = cylinder(*(a_test(9 - place, str(hours), "25") for place, hours in enumerate((0, 400, 500, 1100))))
    assert past.usual_gap == 400


def test_without_hours_it_is_drawn_over_days_and_not_fitted() -> None:
    past = cylinder(a_test(0, None, "24"), counts_hours=False)
    assert (past.last.at, past.last.aside) == (Decimal(past.last.sheet.on.toordinal()), Aside.NO_HOURS)
    before_the_first_reading = cylinder(a_test(0, None, "24"))
    assert (before_the_first_reading.last.at, before_the_first_reading.last.aside) == (None, Aside.NO_HOURS)


def test_a_bound_stands_at_its_figure_and_is_not_fitted() -> None:
    for text, figure in (("<5", 5), ("ND", 0)):
        past = iron(sampled(0, "100", text))
        assert (past.last.is_bound, past.last.figure, past.last.aside) == (True, Decimal(figure), Aside.BOUND)
        assert fitted(past) == [[]]
    assert cylinder(a_test(0, "10", "<5")).last.aside is Aside.BOUND


def test_oil_is_fitted_over_its_own_hours_and_drawn_fill_after_fill() -> None:
    past = iron(
        *(sampled(9 - n, hours, text) for n, (hours, text) in enumerate([("100", "9"), ("240", "20"), ("50", "6")]))
    )
    assert fitted(past) == [[("100", "9"), ("240", "20")], [("50", "6")]]
    assert [one.at for one in past.values] == [100, 240, 290]
    assert past.before is Break.OTHER_FILL


def test_an_oil_that_ran_less_than_its_engine_is_another() -> None:
    past = iron(sampled(9, "100", "9", life="1000"), sampled(0, "150", "12", life="1200"))
    assert len(past.segments) == 2
    assert len(iron(sampled(9, "100", "9", life="1000"), sampled(0, "150", "12", life="1050")).segments) == 1


def test_another_laboratory_begins_a_line_in_the_same_fill() -> None:
    past = iron(sampled(9, "100", "9", lab="A"), sampled(0, "150", "12", lab="B"))
    assert (len(past.segments), past.before) == (2, Break.OTHER_GAUGE)
    assert [one.at for one in past.values] == [100, 150]


def test_where_a_sample_does_not_state_its_hours_all_are_drawn_over_life_or_days() -> None:
    samples = [sampled(9, "100", "9", life="1000"), sampled(1, "", "12", life="1200"), sampled(0, "", "12")]
    assert [one.at for one in iron(*samples).values] == [1000, 1200, None]
    days = iron(*samples, counts_hours=False)
    assert [one.at for one in days.values] == [one.sheet.on.toordinal() for one in days.values]


def test_a_sample_without_hours_on_the_oil_is_not_fitted() -> None:
    past = iron(sampled(9, "100", "9"), sampled(8, "", "12"), sampled(0, "150", "14"))
    assert past.values[1].aside is Aside.NO_HOURS_ON_OIL
    assert [segment for segment in fitted(past) if segment] == [[("100", "9"), ("150", "14")]]
    assert iron(sampled(0, "0", "12")).last.aside is Aside.NO_HOURS_ON_OIL
    twice = sampled(0, "100", "12", value("hours_on_oil", "110"))
    assert iron(twice).last.aside is Aside.NO_HOURS_ON_OIL


def test_a_sample_that_does_not_state_its_top_up_is_drawn_and_not_fitted() -> None:
    past = iron(sampled(0, "100", "9", added=""))
    assert (past.last.at, past.last.aside, past.last.y) == (Decimal(100), Aside.NO_TOP_UP, None)
    odd = a_sheet(value("hours_on_oil", "100"), value("top_up", "<1"), value("Fe", "9"))
    assert iron(odd).last.aside is Aside.NO_TOP_UP
    no_litres = a_sheet(value("hours_on_oil", "100"), value("top_up", "1", "h"), value("Fe", "9"))
    assert iron(no_litres).last.aside is Aside.NO_TOP_UP


def test_what_the_log_has_since_the_oil_was_filled_in_stands_in_for_a_top_up_not_stated() -> None:
    """Filled in at 1200 h of life, sampled at 1400 h: what went in at 1200 h belongs to the oil before."""
    top_ups = [
        TopUp(Decimal(life), Decimal(litres)) for life, litres in ((1200, 9), (1250, 1), (1400, "0.2"), (1401, 7))
    ]
    told = with_logged(sampled(0, "200", "33", life="1400", added=""), top_ups)
    assert (told.logged_top_up, top_up(told)) == (Decimal("1.2"), Decimal("1.2"))
    past = iron(told, fresh=(value("Fe", "3", phase="new"),))
    assert (past.last.aside, round(past.last.y or 0, 2)) == (None, Decimal("35.31"))  # as for 1.2 L stated, below


@pytest.mark.parametrize(
    "sheet",
    [
        sampled(0, "200", "33", life="1400", added="0"),
        sampled(0, "200", "33", life="1400", added="<1"),
        sampled(0, "200", "33", added=""),
        sampled(0, "", "33", life="1400", added=""),
        sampled(0, "100", "33", life="1400", added=""),
        a_sheet(value("pressure", "26", point="1"), kind="compression", engine_hours=Decimal(1400)),
    ],
    ids=["stated", "stated badly", "life not known", "hours not known", "none logged since", "no sample"],
)
def test_the_log_says_nothing_of_any_other_sheet_and_a_silent_log_never_that_there_was_none(
    sheet: MeasuredSheet,
) -> None:
    assert with_logged(sheet, [TopUp(Decimal(1250), Decimal(1))]) is sheet


def test_topped_up_iron_is_brought_to_what_it_would_be_without() -> None:
    """Reference: 33 ppm after 1.2 L into a sump of 8 L, new oil 3 ppm, would have read 35.31 ppm (mass balance)."""
    past = iron(sampled(0, "200", "33", added="1.2"), fresh=(value("Fe", "3", phase="new"),))
    assert past.last.y is not None
    assert round(past.last.y, 2) == Decimal("35.31")
    assert past.last.fresh == 3


@pytest.mark.parametrize(
    ("quantity", "sump", "added", "aside"),
    [
        ("Fe", None, "1", Aside.NO_SUMP),
        ("Fe", "8", "8.1", Aside.TOPPED_UP),
        ("Fe", "8", "8", None),
        ("kv100", "8", "1", Aside.TOPPED_UP),
        ("kv100", "8", "0", None),
        ("Zn", "8", "1", Aside.NO_FRESH),
        ("tbn", "8", "1", Aside.NO_FRESH),
    ],
)
def test_what_cannot_be_corrected_for_a_top_up_is_not_fitted(
    quantity: str, sump: str | None, added: str, aside: Aside | None
) -> None:
    sheet = sampled(0, "100", "", value(quantity, "9"), added=added)
    (past,) = oil(sheet, sump=sump)
    assert past.last.aside is aside


def test_new_oil_known_only_as_a_bound_is_not_known() -> None:
    assert iron(sampled(0, "100", "9"), fresh=(value("Fe", "<1", phase="new"),)).last.fresh is None
    assert iron(sampled(0, "100", "9"), fresh=(value("Fe", "1", "kPa", phase="new"),)).last.fresh is None


def test_the_oil_now_is_its_newest_sample_and_what_the_engine_ran_since() -> None:
    samples = [
        sampled(9, "200", "9", life="1000"),
        sampled(2, "50", "3", life="1100"),
        sampled(0, "", "4", life="1110"),
    ]
    assert seen_until(samples, Decimal(1130)) == 200 + 50 + 30
    assert seen_until(samples, None) == 250
    assert seen_until(samples[2:], Decimal(1130)) == 0
