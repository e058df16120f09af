"""Gaps inside their range that come to an end of it: when that is told, with what numbers, and when it is not."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.engines import Side
from fleetcare.domain.findings import Signal
from fleetcare.domain.measured import MeasuredSheet
from fleetcare.domain.rule_book import Approach, Basis, Bounds, End, Limits
from fleetcare.domain.sheets import LashSpec, SheetValue
from fleetcare.rules.explain_finding import say_signal, say_working
from fleetcare.rules.explain_rule import say_judged, say_limits
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judge_history import judge_history
from fleetcare.rules.judge_lash import judge_value
from fleetcare.rules.judging.facts import MeasuredFacts
from fleetcare.rules.judging.judge import judge, judge_sheet
from fleetcare.rules.judging.screen import screened
from tests.builders import START
from tests.rules.measured import ENGINE, a_rule, a_sheet, beyond, facts, value

SPEC = LashSpec(START, "mm", "any", {Side.EXHAUST: (Decimal("0.40"), Decimal("0.50"))})
CLOSING = a_rule(
    id="closing",
    kinds=("lash",),
    quantity="lash",
    unit="h",
    shape=Approach(End.LOW),
    low=Limits(beyond("500")),
    high=Limits(),
    cause="closing valve",
)
OPENING = replace(CLOSING, id="opening", shape=Approach(End.HIGH), cause="worn or loose valve gear")
TIGHT = replace(CLOSING, id="tight", unit="", shape=Bounds(Basis.SPEC, End.LOW), low=Limits())

Told = tuple[int | None, str]


def gauged(*told: Told, spec: LashSpec = SPEC, taken: dict[int, str] | None = None) -> MeasuredFacts:
    """1E over hours, oldest first: what it was found at, and behind a bar what it was left at."""
    sheets, lash = [], {}
    for number, (hours, text) in enumerate(told):
        found, _, left = text.partition("|")
        values = [
            value("lash", one, point="1E", phase=phase) for one, phase in ((found, "found"), (left, "left")) if one
        ]
        life = Decimal(hours) if hours is not None else None
        sheet = a_sheet(*values, kind="lash", days=10 * (len(told) - number), engine_hours=life)
        sheets.append(sheet)
        condition = (taken or {}).get(number, "")
        lash[sheet.entry] = tuple(judge_value(one, Side.EXHAUST, spec, condition) for one in values)
    return facts(sheets[-1], earlier=tuple(sheets[:-1]), lash=lash)


STEADY = ((0, "0.47"), (1000, "0.45"), (2000, "0.43"), (3000, "0.41"))
"""2 hundredths in 1000 h, on one straight line: 0.40 mm after another 500 h."""


def hours_told(about: MeasuredFacts, rule: object = CLOSING) -> list[Decimal | None]:
    """The hours to the limit that are flagged."""
    return [one.measured for one in judge([rule], about)]  # type: ignore[list-item]


def the_signal(about: MeasuredFacts) -> Signal:
    (signal,) = judge([CLOSING], about)
    return signal


def test_a_gap_on_a_straight_line_comes_to_its_limit_where_that_cuts_it() -> None:
    at_limit = gauged(*STEADY)
    assert hours_told(at_limit) == []
    assert hours_told(at_limit, replace(CLOSING, low=Limits(beyond("500.1")))) == [500]
    assert hours_told(gauged(*STEADY[:3], (3000, "0.41"), (3250, "0.405"))) == [250]


def test_a_gap_that_opens_is_for_the_other_end_alone() -> None:
    about = gauged((0, "0.43"), (1000, "0.45"), (2000, "0.47"), (3000, "0.495"))
    assert hours_told(about) == []
    assert len(hours_told(about, OPENING)) == 1


def test_the_working_has_the_slope_with_its_error_the_values_and_the_earliest_hours() -> None:
    signal = the_signal(gauged((0, "0.47"), (1000, "0.46"), (2000, "0.43"), (3000, "0.41"), (3200, "0.41")))
    assert [one.label for one in signal.steps] == [
        "gap",
        "by the slope now",
        "limit",
        "slope",
        "its standard error",
        "values",
        "watched for",
        "at the earliest in",
    ]
    assert [one.unit for one in signal.steps] == ["mm", "mm", "mm", "mm per 1000 h", "mm per 1000 h", "", "h", "h"]
    assert (signal.steps[0].value, signal.steps[2].value, signal.steps[5].value) == (
        Decimal("0.41"),
        Decimal("0.4"),
        Decimal(5),
    )
    assert [one.value for one in signal.flagged] == ["0.41"]
    assert [one.value for one in signal.used] == ["0.47", "0.46", "0.43", "0.41"]
    assert (str(signal.severity), signal.end, signal.limit) == ("alert", End.LOW, Decimal(500))
    assert say_signal(signal).startswith("likely hours of valve lash to the low end of its check range at 1E ")
    # Sxy -149.2, Sxx 7,312,000 about 1840 h and 0.436 mm.
    assert "slope -0.0204 mm per 1000 h" in say_working(signal, "1E")


def test_the_hours_told_follow_from_where_the_slope_is_now_its_limit_and_itself() -> None:
    signal = the_signal(gauged((0, "0.47"), (1000, "0.46"), (2000, "0.43"), (3000, "0.41"), (3200, "0.41")))
    now, limit, slope = (one.value for one in signal.steps[1:4])
    # 1360 h past the mean, the line is at 0.436 - 1360 x 149.2 / 7,312,000 = 0.40825 mm.
    assert f"{now:.5f}" == "0.40825"
    assert signal.measured is not None
    assert abs((limit - now) / slope * 1000 - signal.measured) <= Decimal("0.1")


def test_in_inches_the_working_is_in_inches_and_the_hours_are_the_same() -> None:
    inches = LashSpec(START, "in", "any", {Side.EXHAUST: (Decimal("0.016"), Decimal("0.020"))})
    about = gauged((0, "0.0188"), (1000, "0.018"), (2000, "0.0172"), (3000, "0.0164"), spec=inches)
    as_inches = replace(
        about,
        sheet=in_inches(about.sheet),
        earlier=tuple(map(in_inches, about.earlier)),
        lash={
            sheet.entry: tuple(judge_value(one, Side.EXHAUST, inches, "") for one in in_inches(sheet).values)
            for sheet in (*about.earlier, about.sheet)
        },
    )
    (signal,) = judge([replace(CLOSING, low=Limits(beyond("501")))], as_inches)
    assert signal.measured == 500
    assert [(one.value, one.unit) for one in signal.steps[:4]] == [
        (Decimal("0.0164"), "in"),
        (Decimal("0.0164"), "in"),
        (Decimal("0.016"), "in"),
        (Decimal("-0.0008"), "in per 1000 h"),
    ]


def in_inches(sheet: MeasuredSheet) -> MeasuredSheet:
    return replace(sheet, values=tuple(replace(one, unit="in") for one in sheet.values))


def test_a_setting_is_no_wear_and_what_was_left_is_the_gap_that_counts() -> None:
    about = gauged((0, "0.46"), (1000, "0.44"), (2000, "0.42|0.46"), (3000, "0.44"), (4000, "0.42|0.41"))
    assert hours_told(about) == []  # 500 h, at 2 hundredths in 1000 h
    (signal,) = judge([replace(CLOSING, low=Limits(beyond("501")))], about)
    assert (signal.measured, str(signal.flagged[0].phase)) == (Decimal(500), "left")
    same = gauged(*STEADY[:3], (3250, "0.405|0.405"))
    assert [one.flagged[0].phase for one in judge([CLOSING], same)] == ["left"]


@pytest.mark.parametrize(
    ("told", "why"),
    [
        (STEADY[1:], "no projection: too few values"),
        (
            ((0, "0.44"), (1000, "0.43"), (2000, "0.42"), (3000, "0.41"), (None, "0.41")),
            "the engine hours are not known",
        ),
        (((0, "0.40..0.44"), (1000, "0.41"), (2000, "0.44"), (3000, "0.39..0.42")), "lash: undecided"),
    ],
    ids=["few", "no hours", "undecided, no slope"],
)
def test_where_too_little_is_known_nothing_is_told_and_why(told: tuple[Told, ...], why: str) -> None:
    judged = judge_sheet([CLOSING], gauged(*told))
    assert (judged.signals, [(one.subject, one.why) for one in judged.not_judged]) == ((), [("1E", why)])
    assert [str(verdict) for _, verdict in judged.verdicts] == ["not judged"]


@pytest.mark.parametrize(
    "told",
    [
        ((0, "0.42"), (1000, "0.41"), (2000, "0.43"), (3000, "0.415")),
        ((0, "0.41"), (1000, "0.42"), (2000, "0.43"), (3000, "0.44")),
        ((0, "0.44"), (1000, "0.44"), (2000, "0.44"), (3000, "0.44")),
        ((0, "0.48"), (100, "0.479"), (200, "0.478"), (300, "0.477")),
        ((0, "0.47"), (0, "0.45"), (0, "0.43"), (0, "0.41")),
    ],
    ids=["no slope", "away", "level", "further than watched", "at one hour"],
)
def test_a_gap_whose_past_leads_to_no_limit_stands_within(told: tuple[Told, ...]) -> None:
    about = gauged(*told)
    assert hours_told(about) == []
    assert {str(verdict) for _, verdict in judge_sheet([CLOSING], about).verdicts} <= {"in", "not judged"}


def test_what_moved_by_less_than_gauges_tell_does_not_move() -> None:
    step = gauged((0, "0.42"), (100, "0.42"), (200, "0.41"), (300, "0.41"))
    assert len(hours_told(step)) == 1
    assert hours_told(step, replace(CLOSING, shape=Approach(End.LOW, Decimal("0.02")))) == []
    assert (
        len(hours_told(gauged(*STEADY, (3300, "0.405")), replace(CLOSING, shape=Approach(End.LOW, Decimal("0.06")))))
        == 1
    )


def test_blades_around_the_limit_of_a_gap_that_closes_are_there_already() -> None:
    about = gauged(*STEADY, (3600, "0.37..0.41"))
    (signal,) = judge([CLOSING], about)
    assert (signal.measured, [one.label for one in signal.steps][-1]) == (Decimal(0), "watched for")


def test_a_gap_that_is_out_is_for_the_rule_on_its_range_and_takes_the_place_of_what_stood() -> None:
    about = gauged(*STEADY, (3300, "0.405"), (3600, "0.39"))
    sheets = (*about.earlier, about.sheet)
    standings = judge_history(sheets, ENGINE, [CLOSING, TIGHT], Background(lash=about.lash))
    told = [[[one.rule.id for one in finding.signals] for finding in standing.findings] for standing in standings]
    assert told[-3:] == [[], [["closing"]], [["tight"]]]


def test_a_gap_that_was_set_away_from_its_limit_clears_what_stood() -> None:
    about = gauged(*STEADY, (3300, "0.405"), (3600, "0.40|0.46"))
    standings = judge_history((*about.earlier, about.sheet), ENGINE, [CLOSING, TIGHT], Background(lash=about.lash))
    assert [len(standing.findings) for standing in standings][-2:] == [1, 0]


def test_what_was_taken_hot_does_not_count_where_the_limits_ask_cold() -> None:
    cold = replace(SPEC, condition="cold")
    assert len(hours_told(gauged(*STEADY, (3300, "0.405"), spec=cold))) == 1
    hot = gauged(*STEADY, (3300, "0.405"), spec=cold, taken={1: "hot", 2: "hot"})
    assert [one.why for one in judge_sheet([CLOSING], hot).not_judged] == ["no projection: too few values"]


def test_values_of_limits_that_asked_hot_do_not_count_once_they_ask_cold() -> None:
    about = gauged(*STEADY, (3300, "0.405"), spec=replace(SPEC, condition="cold"))
    first, second, *_ = about.earlier
    hot = replace(SPEC, condition="hot")
    before = {one.entry: tuple(judge_value(v, Side.EXHAUST, hot, "") for v in one.values) for one in (first, second)}
    assert len(hours_told(about)) == 1
    changed = replace(about, lash={**about.lash, **before})
    assert [one.why for one in judge_sheet([CLOSING], changed).not_judged] == ["no projection: too few values"]


def test_a_setting_of_which_nothing_comparable_says_what_it_left_ends_the_line() -> None:
    cold = replace(SPEC, condition="cold")
    about = gauged(*STEADY, (3200, "0.41|0.45"), (3300, "0.405"), spec=cold, taken={4: "hot"})
    assert [one.why for one in judge_sheet([CLOSING], about).not_judged] == [
        "no projection: not known what the last adjustment left"
    ]


def test_shims_and_gaps_without_a_range_are_no_gap_to_project() -> None:
    about = gauged(*STEADY)
    shim = SheetValue("shim", "1E", about.sheet.values[0].phase, Decimal("2.7"), None, None, "mm")
    with_shim = (*about.lash[about.sheet.entry], judge_value(shim, Side.EXHAUST, SPEC, ""))
    bare = tuple(judge_value(one, Side.INTAKE, SPEC, "") for one in about.sheet.values)
    for judged, count in ((with_shim, 1), (bare, 0)):
        changed = replace(about, lash={**about.lash, about.sheet.entry: judged})
        assert len(judge([replace(CLOSING, low=Limits(beyond("501")))], changed)) == count


def test_a_sheet_before_the_first_hours_lies_nowhere() -> None:
    assert hours_told(gauged((None, "0.30|0.47"), *STEADY, (3300, "0.405"))) == hours_told(
        gauged(*STEADY, (3300, "0.405"))
    )


@pytest.mark.parametrize(
    ("told", "is_clear"),
    [
        (STEADY[1:], True),
        ((*STEADY[:3], (3000, "0.41|0.47")), True),
        (((0, "0.41"), (1000, "0.42"), (2000, "0.43"), (3000, "0.44")), True),
        (((0, "0.47"), (0, "0.45"), (0, "0.43"), (0, "0.41")), True),
        (((0, "0.48"), (100, "0.479"), (200, "0.478"), (300, "0.477")), True),
        ((*STEADY[:3], (3000, "0.39")), True),
        (STEADY, False),
    ],
    ids=["few", "set anew", "away", "at one hour", "further than watched", "out", "near"],
)
def test_a_glance_tells_gaps_that_come_to_no_limit(told: tuple[Told, ...], is_clear: bool) -> None:
    assert screened(CLOSING).is_clear(gauged(*told)) is is_clear


def test_a_glance_sees_that_nothing_says_what_a_setting_left() -> None:
    cold = replace(SPEC, condition="cold")
    about = gauged(*STEADY, (3200, "0.41|0.45"), spec=cold, taken={4: "hot"})
    before = replace(about, sheet=about.earlier[-1], earlier=(*about.earlier[:-1], about.sheet))
    assert screened(CLOSING).is_clear(before)


def test_the_rule_reads_as_what_it_works_out_and_its_hours() -> None:
    assert say_judged(CLOSING) == "likely hours of valve lash to the low end of its check range"
    assert say_limits(CLOSING) == "alert below 500 h"
    least = replace(CLOSING, shape=Approach(End.LOW, Decimal("0.02")))
    assert say_judged(least).endswith(" check range where it moved by 0.02 mm or more")
