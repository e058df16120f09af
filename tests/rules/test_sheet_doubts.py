"""Measured figures that are more likely a slip, what was likely meant, and what is never doubted."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.measures import QUANTITIES
from fleetcare.domain.sheet_kinds import KINDS
from fleetcare.domain.sheets import Phase, SheetValue
from fleetcare.rules.sheet_doubts import SENSE, MeasureDoubt, doubt_grade, doubt_measure, say_measure_doubt
from tests.rules.measured import ENGINE


def a_figure(quantity: str, text: str, unit: str = "", point: str = "") -> SheetValue:
    """A figure of a quantity, in its own unit unless another is named."""
    qualifier, figure = ("<", text[1:]) if text.startswith("<") else ("", text)
    return SheetValue(
        quantity, point, Phase.NONE, Decimal(figure), None, None, unit or QUANTITIES[quantity].unit, qualifier
    )


def meant(doubt: MeasureDoubt | None) -> str | None:
    """What was likely meant, "-" for a doubt without it, None without a doubt; impossible ones with an asterisk."""
    if doubt is None:
        return None
    told = " or ".join(f"{figure.normalize():f} {unit}".strip() for figure, unit in doubt.meant) or "-"
    return told if doubt.is_possible else f"{told} *"


@pytest.mark.parametrize(
    ("quantity", "text", "unit", "wanted"),
    [
        ("pressure", "17", "psi", "17 bar or 170 psi"),
        ("pressure", "17", "bar", None),
        ("pressure", "17", "", "17 bar or 1700 kPa"),
        ("pressure", "170", "bar", "170 psi or 17 bar"),
        ("pressure", "1700", "bar", "1700 kPa or 17 bar *"),
        ("pressure", "300", "", None),
        ("pressure", "0", "bar", None),  # a dead cylinder
        ("pressure", "1", "kPa", None),  # low, and nothing usual has these figures
        ("leak", "8.5", "", None),
        ("leak", "100", "", None),
        ("leak", "101", "", "10.1 % *"),
        ("supply", "5.5", "psi", "5.5 bar or 55 psi"),
        ("minutes", "30", "h", "30 min or 3 h"),
        ("coolant", "190", "°C", "190 °F or 19 °C"),
        ("coolant", "87", "°C", None),
        ("exhaust", "1100", "°C", "1100 °F or 110 °C"),
        ("cranking_volts", "98", "", "9.8 V *"),
        ("kv100", "1450", "", "14.5 mm2/s *"),
        ("kv100", "145", "", "14.5 mm2/s"),
        ("kv40", "10.4", "", "104 mm2/s"),
        ("tbn", "105", "", "10.5 mg KOH/g"),
        ("tbn", "80", "", None),
        ("ph", "49", "", "4.9 *"),
        ("water", "2000", "", "2000 ppm *"),
        ("Fe", "25", "%", "25 ppm"),
        ("Ca", "3200", "", None),
        ("Fe", "<2000", "", "200 ppm"),
        ("hours_on_oil", "-5", "", "- *"),
        ("top_up", "600", "", "60 L"),
    ],
)
def test_a_figure_is_doubted_where_no_engine_shows_it(quantity: str, text: str, unit: str, wanted: str | None) -> None:
    assert meant(doubt_measure(a_figure(quantity, text, unit), ENGINE)) == wanted


@pytest.mark.parametrize(
    ("text", "unit", "wanted"),
    [
        ("110", "%", None),
        ("111", "%", "11.1 %"),
        ("550", "kW", None),
        ("600", "kW", "600 hp or 60 kW"),
        ("800", "kW", "80 kW *"),
        ("700", "hp", None),  # 522 kW
    ],
)
def test_a_load_in_kilowatts_is_held_against_the_nameplate(text: str, unit: str, wanted: str | None) -> None:
    assert meant(doubt_measure(a_figure("load", text, unit), ENGINE)) == wanted


def test_without_a_nameplate_a_load_is_held_against_the_largest_engines() -> None:
    unknown = replace(ENGINE, rated_kw=None)
    assert doubt_measure(a_figure("load", "800", "kW"), unknown) is None
    assert meant(doubt_measure(a_figure("load", "9000", "kW"), unknown)) == "900 kW *"


def test_nothing_detected_is_no_slip() -> None:
    assert doubt_measure(SheetValue("glycol", "", Phase.NONE, None, None, None, "ppm", "ND"), ENGINE) is None


def a_grade(text: str) -> SheetValue:
    """The grade of an oil, said in a word."""
    return SheetValue("grade", "", Phase.NONE, None, None, None, "", text)


@pytest.mark.parametrize(
    "text", ["15W-40", "15w40", "SAE 15W-40", "SAE 10W/30", "sae 30", "30", "10W", "0W-8", "Fen oil 3", "fen OIL-3"]
)
def test_a_grade_of_j300_or_one_known_is_no_slip(text: str) -> None:
    assert doubt_grade(a_grade(text), frozenset({"fenoil3"})) is None


@pytest.mark.parametrize("text", ["bacon", "15W-4", "15W-400", "17W-40", "40W", "15", "15-40", "SAE", "Fen oil 4"])
def test_any_other_grade_is_likely_a_slip_that_can_be_right(text: str) -> None:
    doubt = doubt_grade(a_grade(text), frozenset({"fenoil3"}))
    assert doubt is not None
    assert doubt.is_possible
    assert say_measure_doubt(a_grade(text), doubt) == (
        f"grade {text}: it is no grade of SAE J300 such as 15W-40, nor one known here"
    )


def test_a_doubt_says_the_value_where_it_is_why_and_what_was_meant() -> None:
    value = a_figure("pressure", "17", "psi", "3")
    doubt = doubt_measure(value, ENGINE)
    assert doubt is not None
    assert say_measure_doubt(value, doubt) == (
        "pressure 17 psi at 3: less than 300 kPa is not usual on any engine; 17 bar or 170 psi is likely meant"
    )
    value = a_figure("hours_on_oil", "-5")
    doubt = doubt_measure(value, ENGINE)
    assert doubt is not None
    assert say_measure_doubt(value, doubt) == "hours_on_oil -5 h: less than 0 h is not possible"


def test_every_quantity_on_a_sheet_has_what_makes_sense_of_it() -> None:
    on_sheets = {column.quantity for kind in KINDS.values() for column in kind.columns}
    assert on_sheets == set(SENSE)
    for sense in SENSE.values():
        assert sense.possible[0] <= sense.usual[0] < sense.usual[1] <= sense.possible[1]
