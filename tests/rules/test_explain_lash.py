"""Judgements, what mends a gap and doubts in words, and the flat row they are shown by."""

from datetime import date
from decimal import Decimal

import pytest

from fleetcare.domain.engines import Adjuster, Side
from fleetcare.domain.sheets import LashSpec, Phase
from fleetcare.rules.explain_lash import (
    LastValue,
    judged_row,
    say_doubt,
    say_judgement,
    say_mending,
    say_spec,
)
from fleetcare.rules.judge_lash import judge_value
from fleetcare.rules.lash_doubts import doubt
from fleetcare.rules.lash_mending import Mending, mend
from tests.rules.test_judge_lash import a_spec, a_value

SET = {"settings": {Side.INTAKE: Decimal("0.25")}}
SCREW = Adjuster("screw", screw_pitch=Decimal(1), rocker_ratio=Decimal("1.5"))
SHIM = Adjuster("shim", shim_step=Decimal("0.05"))


def say(text: str, spec: LashSpec | None, condition: str = "cold", unit: str = "mm") -> str:
    """What is said of an intake valve found so."""
    return say_judgement(judge_value(a_value(text, unit=unit), Side.INTAKE, spec, condition), spec)


@pytest.mark.parametrize(
    ("text", "wanted"),
    [
        ("0.25", "in 0.20 to 0.30 mm"),
        ("0.17", "0.03 mm below 0.20 to 0.30 mm"),
        ("0.345", "0.045 mm above 0.20 to 0.30 mm"),
        ("0.05..0.10", "0.1 to 0.15 mm below 0.20 to 0.30 mm"),
        ("0", "0.2 mm below 0.20 to 0.30 mm, no gap is left: the valve may not close"),
        ("0.28..0.33", "the blades straddle 0.3 mm, the end of 0.20 to 0.30 mm: use finer ones"),
    ],
)
def test_a_judgement_says_by_how_much(text: str, wanted: str) -> None:
    assert say(text, a_spec()) == wanted


def test_what_is_not_judged_says_why() -> None:
    assert say("0.25", None) == "no lash limits of this engine are known"
    assert say("0.25", a_spec(ranges={})) == "no check range is known for this side"
    assert say("0.25", a_spec(), "hot") == "the limits are for a cold engine"
    assert say("0.25", a_spec(condition="hot"), "cold") == "the limits are for a hot engine"
    shim = judge_value(a_value("2.75", quantity="shim"), Side.INTAKE, a_spec(), "cold")
    assert say_judgement(shim, a_spec()) == ""


def test_a_range_converted_from_inches_is_said_in_full() -> None:
    inches = a_spec(unit="in", ranges={Side.INTAKE: (Decimal("0.008"), Decimal("0.012"))})
    assert say("0.20", inches) == "0.0032 mm below 0.2032 to 0.3048 mm"
    assert say("0.007", inches, unit="in") == "0.001 in below 0.008 to 0.012 in"


def mended(text: str, adjuster: Adjuster, fitted: str | None = None, **changes: object) -> str | None:
    """What is said to mend an intake valve found so."""
    spec = a_spec(**(SET | changes))
    judged = judge_value(a_value(text), Side.INTAKE, spec, "cold")
    mending = mend(judged, Side.INTAKE, spec, adjuster, Decimal(fitted) if fitted else None)
    return say_mending(mending) if mending else None


@pytest.mark.parametrize(
    ("text", "wanted"),
    [
        ("0.35", "turn the screw 24° tighter"),  # 0.10 / (1 × 1.5) of a turn
        ("0.15", "turn the screw 24° looser"),
        ("0.30..0.40", None),  # not told to be out
        ("0.35..0.45", "turn the screw 36° tighter"),
        ("0.25", None),
    ],
)
def test_a_screw_is_turned_from_the_best_estimate_to_the_setting(text: str, wanted: str | None) -> None:
    assert mended(text, SCREW) == wanted


def test_a_screw_nobody_described_further_sits_at_the_pushrod_with_equal_arms() -> None:
    assert mended("0.35", Adjuster("screw", screw_pitch=Decimal(1))) == "turn the screw 36° tighter"
    assert mended("0.35", Adjuster("screw", screw_pitch=Decimal(1), screw_at="valve", rocker_ratio=Decimal(2))) == (
        "turn the screw 36° tighter"
    )


@pytest.mark.parametrize(
    ("text", "fitted", "wanted"),
    [
        ("0.19", "2.75", "fit a 2.7 mm shim, which leaves 0.24 mm"),
        ("0.36", "2.75", "fit a 2.85 mm shim, which leaves 0.26 mm"),
        ("0.36", None, None),
    ],
)
def test_a_shim_is_chosen_where_the_fitted_one_is_known(text: str, fitted: str | None, wanted: str | None) -> None:
    assert mended(text, SHIM, fitted) == wanted


def test_where_no_stocked_shim_fits_that_is_said() -> None:
    coarse = Adjuster("shim", shim_step=Decimal("0.5"))
    said = mended("0.36", coarse, "2.75")
    assert said is not None
    assert said.startswith("no stocked shim fits: 2.86 mm is wanted, and the nearest, 3 mm")


@pytest.mark.parametrize("adjuster", [Adjuster(), Adjuster("screw"), Adjuster("shim"), Adjuster("hydraulic")])
def test_too_little_known_of_the_adjuster_mends_nothing(adjuster: Adjuster) -> None:
    assert mended("0.36", adjuster, "2.75") is None


def test_without_a_setting_or_a_judgement_nothing_is_mended() -> None:
    assert mended("0.36", SCREW, settings={}) is None
    judged = judge_value(a_value("0.36"), Side.INTAKE, None, "cold")
    assert mend(judged, Side.INTAKE, None, SCREW, None) is None


def test_a_setting_in_inches_is_reached_in_millimetres() -> None:
    ranges, settings = {Side.INTAKE: (Decimal("0.008"), Decimal("0.012"))}, {Side.INTAKE: Decimal("0.010")}
    # 0.010 in is 0.254 mm; 0.354 mm is 0.1 mm too wide.
    assert mended("0.354", SCREW, unit="in", ranges=ranges, settings=settings) == "turn the screw 24° tighter"


def test_nothing_known_mends_nothing() -> None:
    assert say_mending(Mending()) == ""


@pytest.mark.parametrize(
    ("text", "wanted"),
    [
        ("3.0", "3.0 mm at 1I: it is 3 times the 0.3 mm where its check range ends, or more; 0.3 mm is likely meant"),
        ("0.9", "0.9 mm at 1I: it is 3 times the 0.3 mm where its check range ends, or more"),
    ],
)
def test_a_doubt_names_the_point_and_what_was_likely_meant(text: str, wanted: str) -> None:
    value = a_value(text)
    found = doubt(value, a_spec().ranges[Side.INTAKE], "mm")
    assert found is not None
    assert say_doubt(value, found) == wanted


def test_the_limits_of_a_sheet_are_said_side_by_side() -> None:
    assert say_spec(a_spec()) == "intake 0.20 to 0.30 mm, exhaust 0.40 to 0.50 mm, cold"
    assert say_spec(a_spec(condition="any")) == "intake 0.20 to 0.30 mm, exhaust 0.40 to 0.50 mm"
    assert say_spec(None) == say_spec(a_spec(ranges={})) == "no check range is known"


def test_a_row_holds_the_judgement_flat_with_what_was_last() -> None:
    spec = a_spec(**SET)
    judged = judge_value(a_value("0.350", phase=Phase.LEFT), Side.INTAKE, spec, "cold")
    mending = mend(judged, Side.INTAKE, spec, SCREW, None)
    row = judged_row(judged, spec, mending, LastValue(a_value("0.25"), date(2025, 4, 3)))
    assert (row.quantity, row.point, row.phase, row.value, row.unit) == ("lash", "1I", "left", "0.350", "mm")
    assert (row.verdict, row.place, row.margin, row.limit_unit) == ("alarm", "above", Decimal("-0.05"), "mm")
    assert (row.limit_low, row.limit_high) == (Decimal("0.20"), Decimal("0.30"))
    assert (row.note, row.mending) == ("0.05 mm above 0.20 to 0.30 mm", "turn the screw 24° tighter")
    assert row.last == "0.25 mm on 2025-04-03"


def test_a_row_of_what_is_not_judged_leaves_the_limits_empty() -> None:
    row = judged_row(judge_value(a_value("0.25"), Side.INTAKE, None, ""), None)
    assert (row.limit_low, row.limit_high, row.margin, row.place, row.mending, row.last) == (
        None,
        None,
        None,
        "",
        "",
        "",
    )
