"""The past of compression and oil in words and flat rows: what stands in the list, what is said, what is drawn."""

from dataclasses import replace
from decimal import Decimal

from fleetcare.domain.rule_book import End, Severity
from fleetcare.domain.sheets import Verdict
from fleetcare.rules.explain_measured import MeasuredRow
from fleetcare.rules.explain_measured_past import measured_row, name_of
from fleetcare.rules.judging.levels import Level
from fleetcare.rules.measured_ahead import ahead_of, rate_of
from fleetcare.rules.measured_past import MeasuredPast, compression_pasts
from fleetcare.rules.trend_row import Dot, TrendRow
from tests.rules.measured import a_rule, a_sheet, value
from tests.rules.pasts import BANKS, a_test, cylinder, iron, oil, sampled

ALERT = Level(End.HIGH, Severity.ALERT, Decimal(100), a_rule())
ALARM = Level(End.HIGH, Severity.ALARM, Decimal(200), a_rule())
NEAR = Level(End.HIGH, Severity.ALERT, Decimal(40), a_rule())
LEAST = Level(End.LOW, Severity.ALARM, Decimal(20), a_rule(id="least"))
IN = MeasuredRow("Fe", "iron", "", "", "37", "ppm", Verdict.IN, "iron up to 100 ppm")


def row(
    past: MeasuredPast,
    *levels: Level,
    judged: MeasuredRow | None = IN,
    counts_hours: bool = True,
    life: str | None = None,
) -> TrendRow:
    told = ahead_of(past, levels, life=Decimal(life) if life else None, interval=None)
    return measured_row(past, judged, levels, told, rate_of(past), counts_hours=counts_hours)


def rising(*figures: str, **more: str) -> MeasuredPast:
    return iron(*(sampled(9 - n, str(50 * n + 50), text, **more) for n, text in enumerate(figures)))


def test_a_row_says_value_place_day_change_and_rate() -> None:
    told = row(rising("12", "19", "30", "37"), ALERT, ALARM)
    assert (told.name, told.last, told.stands, told.verdict) == ("Fe iron", "37 ppm", "in", "in")
    assert (told.on, told.change, told.rate) == ("2026-04-11", "+7 in 1 d", "+18.5")
    assert (told.unit, told.places) == ("ppm", 0)
    assert [*told.limits] == [(100, "alert 100"), (200, "alarm 200")]


def test_what_is_said_begins_with_the_value_and_what_is_ahead() -> None:
    said = row(rising("12", "19", "30", "37"), ALERT, ALARM).said
    assert said.startswith(
        "Iron, 37 ppm on 2026-04-11, 200 h on the oil: in, iron up to 100 ppm. Rises 170 ppm in 1000 h; "
    )
    assert "100 ppm not before about 350 h on the oil. Since the oil change +18.5 ppm per 100 h, top-up" in said
    assert said.endswith("Limits: high alert 100 ppm, high alarm 200 ppm (iron).")


def test_a_limit_that_is_reached_is_drawn_ahead_on_the_fill_it_belongs_to() -> None:
    before = sampled(20, "120", "22")
    samples = [sampled(9 - n, str(50 * n + 50), text) for n, text in enumerate(("12", "19", "30", "37"))]
    told = row(iron(before, *samples), NEAR)
    assert told.ahead is not None
    assert (told.ahead.start.x, told.ahead.limit) == (320, 40)
    assert round(told.ahead.likely - 120, 1) == 215.1  # (40 - 3) / 0.172, reference
    assert "likely 215 h on the oil" in told.said


def test_over_days_or_where_it_is_not_drawn_what_is_ahead_is_only_said() -> None:
    samples = [sampled(9 - n, str(50 * n + 50), text) for n, text in enumerate(("12", "19", "30", "37"))]
    for counts_hours in (True, False):
        told = row(iron(sampled(20, "", "22"), *samples, counts_hours=counts_hours), NEAR)
        assert "likely 215 h on the oil" in told.said
        assert told.ahead is None


def test_new_oil_is_drawn_where_each_fill_begins_as_it_was_then() -> None:
    new, other = (value("Fe", text, phase="new") for text in ("2", "3"))
    samples = [sampled(9, "100", "9", new), sampled(8, "240", "20", new), sampled(0, "50", "6")]
    assert row(iron(*samples[:2])).fresh == (Dot(0, 2),)
    assert row(iron(*samples, fresh=(other,))).fresh == (Dot(0, 2), Dot(240, 3))
    assert row(iron(*samples[2:])).fresh == ()
    over_life = sampled(9, "100", "9", new, life="1000"), sampled(0, "", "12", life="1200")
    assert row(iron(*over_life)).fresh == (Dot(900, 2),)
    read_late = sampled(5, "150", "9", new, life="1052")
    assert row(iron(over_life[0], read_late, over_life[1])).fresh == (Dot(900, 2),)
    assert row(iron(*over_life, counts_hours=False)).fresh == ()


def test_flagged_values_say_on_which_side() -> None:
    past = rising("120")
    flagged = replace(IN, verdict=Verdict.ALERT, measured=Decimal(120), limit=Decimal(100), margin=Decimal(-20))
    assert row(past, judged=flagged).stands == "alert, high"
    assert row(past, judged=replace(flagged, measured=Decimal(80))).stands == "alert, low"
    assert row(past, judged=replace(flagged, measured=Decimal(100))).stands == "alert"
    assert row(past, judged=None).stands == "not judged"
    assert "on the oil: not judged." in row(past, judged=None).said


def test_bounds_are_drawn_apart_counted_and_not_compared() -> None:
    told = row(rising("12", "<5"), ALERT)
    assert [(dot.x, dot.y) for dot in told.bounds] == [(100, 5)]
    assert told.segments == ((told.segments[0][0],),)
    assert (told.last, told.change, told.rate) == ("<5 ppm", "a bound", "")
    assert "Not projected: the last value is only a bound." in told.said
    assert told.said.endswith("1 below what could be detected, drawn at that and not fitted.")
    assert row(rising("<5", "12")).change == "a bound"


def test_another_gauge_is_told_and_drawn_as_a_line_of_its_own() -> None:
    told = row(cylinder(a_test(9, "10", "25", gauge="A"), a_test(0, "20", "24")), LEAST)
    assert (told.change, len(told.segments)) == ("another gauge", 2)
    assert "No slope yet: 3 more values needed." in told.said
    assert "Of 2 gauges, each a line of its own (A, none named): another is not a trend." in told.said
    laboratories = row(iron(sampled(9, "50", "12", lab="A"), sampled(0, "100", "15", lab="B")))
    assert "Of 2 laboratories" in laboratories.said


def test_another_fill_and_a_first_value_have_no_change() -> None:
    assert row(iron(sampled(9, "200", "30"), sampled(0, "50", "8"))).change == "another fill"
    assert row(iron(sampled(9, "200", "30"), sampled(0, "", "8"))).change == "fill not known"
    assert row(rising("12")).change == ""


def test_samples_that_are_not_normalised_say_what_to_state() -> None:
    untold = row(iron(sampled(9, "50", "12", life="1000"), sampled(0, "", "14", life="1040")), ALERT)
    assert "Not projected: the sheet does not state the hours on the oil." in untold.said
    assert [[dot.x for dot in segment] for segment in untold.segments] == [[1000], [1040]]
    assert untold.left_out == 0
    as_read = row(rising("12", "19", added=""), ALERT)
    assert (
        "Not projected: neither sheet nor log say what was topped up; write 0 on the sheet where nothing was."
        in as_read.said
    )
    assert "per 100 h, as read, top-up not counted in." in as_read.said
    sheets = [replace(one.sheet, logged_top_up=Decimal("1.20")) for one in rising("12", "19", added="").values]
    assert "per 100 h, the 1.2 L topped up by the log counted in." in row(iron(*sheets), ALERT).said


def test_compression_stands_over_hours_of_life_or_days() -> None:
    told = row(cylinder(a_test(9, "1000", "25.5"), a_test(0, "1500", "25.1")), LEAST)
    assert (told.name, told.change, told.unit, told.places) == ("1", "-0.4 in 500 h", "bar", 1)
    assert told.said.startswith("Cylinder 1, 25.1 bar on 2026-04-17 at 1500 h: in, ")
    assert [*told.limits] == [(20, "alarm 20")]
    days = row(cylinder(a_test(9, None, "25.5"), a_test(0, None, "25.5"), counts_hours=False), counts_hours=False)
    assert days.change == "0 in 9 d"
    assert "Not projected: the hours of life it was taken at are not known." in days.said


def test_sheets_before_the_first_reading_are_not_drawn() -> None:
    told = row(cylinder(a_test(9, None, "25.5"), a_test(0, "10", "25")))
    assert told.said.endswith("Not drawn: sheets before the first reading of the hours.")
    assert "Not projected: no rule has a limit for it." in told.said


def test_levels_worked_out_stand_to_one_decimal_more_than_is_measured() -> None:
    low = Level(End.LOW, Severity.ALARM, Decimal("22.0631525"), a_rule())
    figures = [a_test(9 - n, str(1000 * n), text) for n, text in enumerate(("31", "30.2", "29.5", "28.4"))]
    told = row(cylinder(*figures), low)
    assert told.limits[0][1] == "alarm 22.06"
    assert "22.06 bar not before about 6000 h." in told.said


def test_where_little_lies_in_sight_a_decimal_more_stands_beside_the_plot() -> None:
    assert row(rising("1", "4"), ALERT).places == 0
    assert row(rising("1", "4")).places == 1


def test_names_are_short_enough_for_the_list() -> None:
    sheet = a_sheet(*(value(one, "1") for one in ("kv100", "tbn", "fuel", "Mo", "water", "ph")))
    assert [name_of(past) for past in oil(sheet)] == [
        "water",
        "fuel",
        "visc. 100 °C",
        "base number",
        "pH",
        "Mo molybdenum",
    ]
    (past,) = compression_pasts([a_test(0, "1", "25")], BANKS, counts_hours=True)
    assert name_of(past) == "1"
