"""A lash point's past in words and figures, and what of it is drawn."""

from decimal import Decimal

import pytest

from fleetcare.domain.engines import Side
from fleetcare.domain.sheets import LashSpec, Sheet
from fleetcare.rules.explain_lash_past import trend_row
from fleetcare.rules.projection import project_on
from fleetcare.rules.trend_row import Dot, TrendRow
from tests.builders import day
from tests.rules.test_judge_lash import a_spec, a_value
from tests.rules.test_lash_past import a_sheet, found, left, past_of
from tests.rules.wearing import a_wear

SPEC = a_spec(settings={Side.EXHAUST: Decimal("0.45")})


def row(*sheets: Sheet, spec: LashSpec | None = SPEC, counts_hours: bool = True, point: str = "1E") -> TrendRow:
    past = past_of(*sheets, specs=(spec,) if spec is not None else (), point=point)
    return trend_row(past, spec, "PS-1", counts_hours=counts_hours)


CLOSING = (
    a_sheet("2024-01-01", found("0.45")),
    a_sheet("2025-01-01", found("0.39"), left("0.46"), entry=2),
    a_sheet("2026-01-01", found("0.43"), entry=3),
)


def test_a_row_says_the_last_value_where_it_lies_and_how_it_changed_since_it_was_set() -> None:
    closing = row(*CLOSING)
    assert (closing.name, closing.last, closing.stands, closing.verdict) == ("1E", "0.43 mm", "in", "in")
    assert (closing.on, closing.change) == ("2026-01-01", "-0.03 over 1000 h")
    assert closing.said == (
        "1E, exhaust valve: found 0.43 mm on 2026-01-01 at 3000 h, in 0.40 to 0.50 mm."
        " Last set: left 0.46 mm on 2025-01-01 at 2000 h, since then -0.03 over 1000 h."
    )


def test_a_row_draws_every_segment_with_the_range_and_the_setting_in_force() -> None:
    closing = row(*CLOSING)
    assert closing.segments == (
        (Dot(1000, 0.45), Dot(2000, 0.39)),
        (Dot(2000, 0.46, is_left=True), Dot(3000, 0.43)),
    )
    assert closing.limits == ((0.40, "least 0.40"), (0.50, "most 0.50"))
    assert closing.setting == (0.45, "set 0.45")
    assert row(*CLOSING, spec=a_spec()).setting is None


@pytest.mark.parametrize(
    ("gap", "stands", "verdict"),
    [
        ("0.36", "0.04 below", "alert"),
        ("0.53", "0.03 above", "alert"),
        ("0.36..0.38", "0.02 to 0.04 below", "alert"),
        ("0.38..0.42", "undecided", "not judged"),
        ("0", "0.4 below", "alarm"),
    ],
)
def test_a_gap_out_of_its_range_says_by_how_much(gap: str, stands: str, verdict: str) -> None:
    out = row(a_sheet("2026-01-01", found(gap)))
    assert (out.stands, out.verdict) == (stands, verdict)


def test_a_point_never_measured_says_what_to_do() -> None:
    never = row()
    assert (never.last, never.stands, never.on, never.change, never.verdict) == ("", "never measured", "", "", "")
    assert never.said == (
        "1E, exhaust valve: never measured. Measure it: x and v on this page, or fleetcare measure lash PS-1 FILE."
    )
    assert never.segments == ()


def test_one_sheet_makes_no_line_yet() -> None:
    once = row(a_sheet("2026-01-01", found("0.45")))
    assert once.said.endswith("Nothing to draw a line between yet: the next sheet makes one.")
    assert once.change == ""


def test_a_valve_just_set_has_not_changed() -> None:
    just = row(a_sheet("2025-01-01", found("0.45")), a_sheet("2026-01-01", found("0.38"), left("0.45"), entry=2))
    assert just.change == "set then"
    assert just.said == "1E, exhaust valve: left 0.45 mm on 2026-01-01 at 2000 h, in 0.40 to 0.50 mm."


def test_a_valve_never_set_is_held_against_its_first_value() -> None:
    never = row(a_sheet("2025-01-01", found("0.43")), a_sheet("2026-01-01", found("0.45"), entry=2))
    assert never.said.endswith("Never set on record; since first measured +0.02 over 1000 h.")


def test_values_not_drawn_are_named_the_newest_first_with_why() -> None:
    sheets = [a_sheet(f"2026-01-0{n}", found("0.45"), entry=n, condition="hot") for n in range(1, 5)]
    assert row(*sheets).left_out == 4
    assert row(*sheets).change == ""
    assert row(*sheets).said.endswith(
        "Not drawn: 2026-01-04 0.45 mm, taken hot; 2026-01-03 0.45 mm, taken hot; and 2 older."
    )
    assert row(*sheets).stands == "not judged"


def test_a_valve_set_hot_since_has_no_change_to_tell() -> None:
    said = row(
        a_sheet("2025-01-01", found("0.38"), left("0.45")),
        a_sheet("2026-01-01", found("0.46"), entry=2, condition="hot"),
    ).said
    assert "Last set: left 0.45 mm on 2025-01-01 at 1000 h. Nothing to draw a line between yet" in said


def test_without_a_check_range_it_says_how_to_give_one() -> None:
    bare = row(a_sheet("2026-01-01", found("0.45")), spec=None)
    assert bare.said.endswith(
        "Not drawn: 2026-01-01 0.45 mm, no check range was known."
        " Give the check range of the maker's manual with fleetcare engine edit PS-1 --lash-exhaust."
    )
    only_intake = a_spec(ranges={Side.INTAKE: (Decimal("0.20"), Decimal("0.30"))})
    assert row(a_sheet("2026-01-01", found("0.45")), spec=only_intake).said.endswith("--lash-exhaust.")


def test_what_was_taken_under_other_limits_or_before_the_first_reading_says_so() -> None:
    specs = (a_spec(condition="hot"), a_spec(from_on=day("2025-06-01")))
    sheets = (a_sheet("2025-01-01", found("0.45"), condition=""), a_sheet("2026-01-01", found("0.43"), entry=2))
    past = past_of(*sheets, specs=specs)
    assert (
        "0.45 mm, the limits of its day were for another condition."
        in trend_row(past, specs[1], "PS-1", counts_hours=True).said
    )
    early = past_of(a_sheet("2025-01-01", found("0.45")), at={})
    said = trend_row(early, SPEC, "PS-1", counts_hours=True).said
    assert "found 0.45 mm on 2025-01-01, in 0.40" in said
    assert said.endswith("Not drawn: 2025-01-01 0.45 mm, before the first reading of the hours.")


def test_over_days_no_hours_are_told() -> None:
    said = row(*CLOSING, counts_hours=False)
    assert said.change == "-0.03 over 1000 d"
    assert " h" not in said.said


def test_a_spec_in_inches_is_drawn_in_inches() -> None:
    spec = a_spec(
        unit="in",
        ranges={Side.EXHAUST: (Decimal("0.016"), Decimal("0.020"))},
        settings={Side.EXHAUST: Decimal("0.018")},
    )
    sheets = (
        a_sheet("2025-01-01", a_value("0.018", "1E", unit="in")),
        a_sheet("2026-01-01", a_value("0.017", "1E", unit="in"), entry=2),
    )
    inches = row(*sheets, spec=spec)
    assert inches.segments == ((Dot(1000, 0.018), Dot(2000, 0.017)),)
    assert (inches.last, inches.change) == ("0.017 in", "-0.001 over 1000 h")
    assert inches.limits == ((0.016, "least 0.016"), (0.020, "most 0.020"))


def test_a_point_the_nameplate_no_longer_has_says_so() -> None:
    stranger = row(a_sheet("2026-01-01", found("0.45", "9E")), point="9E")
    assert "By its nameplate the engine has no such point." in stranger.said


def projected(limit: str = "0.40") -> TrendRow:
    past = past_of(*CLOSING, specs=(SPEC,))
    wear = a_wear(("0 500 1000 1500", ".45 .44 .432 .42", None), low=limit)
    projection = project_on(wear.segments, wear.limits, now=Decimal(1500), interval=Decimal(500))
    return trend_row(past, SPEC, "PS-1", counts_hours=True, projection=projection, why_not="not asked")


def test_a_row_says_how_fast_and_when_it_comes_to_its_limit_and_draws_it_from_the_last_value() -> None:
    row = projected()
    assert row.said.startswith(
        "1E, exhaust valve: found 0.43 mm on 2026-01-01 at 3000 h, in 0.40 to 0.50 mm."
        " Falls 0.02 mm in 1000 h: reaches 0.40 mm by "
    )
    assert row.ahead is not None
    assert (row.ahead.start.x, row.ahead.limit) == (3000, 0.40)
    assert row.ahead.early < row.ahead.likely < row.ahead.late


def test_a_row_that_is_not_projected_says_why_and_draws_nothing_ahead() -> None:
    row = projected("0.20")
    assert "Falls 0.02 mm in 1000 h; 0.20 mm not before about 3000 h." in row.said
    assert row.ahead is None


def test_a_row_says_why_no_point_is_projected_where_there_is_a_line_to_speak_of() -> None:
    past = past_of(*CLOSING, specs=(SPEC,))
    assert (
        "Not projected: nobody asks."
        in trend_row(past, SPEC, "PS-1", counts_hours=True, why_not="not projected: nobody asks").said
    )
    never = trend_row(past_of(), SPEC, "PS-1", counts_hours=True, why_not="not projected: nobody asks")
    assert "projected" not in never.said
