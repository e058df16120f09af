"""A trend and its projection in words."""

from decimal import Decimal

import pytest

from fleetcare.domain.trends import End, Obstacle, Projection
from fleetcare.rules.explain_projection import say_ahead, say_obstacles, say_reached, say_slope
from fleetcare.rules.projection import project, project_on
from tests.rules.wearing import LASH, segments


def ahead(*told: tuple[str, str, str | None], now: int = 4000, interval: int = 500, low: str = "0.25") -> Projection:
    limits = {End.LOW: Decimal(low), End.HIGH: Decimal("0.45")}
    return project_on(segments(*told), limits, now=Decimal(now), interval=Decimal(interval))


def said(*told: tuple[str, str, str | None], now: int = 4000, interval: int = 500, low: str = "0.25") -> str:
    return say_ahead(ahead(*told, now=now, interval=interval, low=low), "mm", "h")


def test_a_projection_says_slope_range_rounded_outwards_and_the_likely_figure() -> None:
    """The worked example: 6102.0 h, four times in five from 5975.1 to 6237.1 h, 0.0486 mm in 1000 h."""
    assert said(*LASH) == "falls 0.049 mm in 1000 h: reaches 0.25 mm by 5975 to 6238 h, likely 6102 h"
    assert say_reached(ahead(*LASH), "mm", "h") == "reaches 0.25 mm by 5975 to 6238 h"


def test_a_gap_that_opens_rises() -> None:
    trend = ahead(("0 500 1000 1500", ".30 .31 .322 .33", None), now=1500).trend
    assert trend is not None
    assert say_slope(trend, "mm", "h") == "rises 0.02 mm in 1000 h"


def test_further_ahead_than_was_watched_says_not_before_about() -> None:
    """The compression of the worked example: 22,734 h lies more than one span ahead, so not before about 16,000 h."""
    told = segments(("0 2000 4000 6000 8000", "31.0 30.1 29.6 28.4 27.9", None))
    far = project(told, Decimal(22), End.LOW, now=Decimal(8000), interval=Decimal(2000))
    assert say_ahead(far, "bar", "h") == "falls 0.4 bar in 1000 h; 22 bar not before about 16000 h"


@pytest.mark.parametrize(("from_hours", "about"), [("0", "990"), ("100000", "100900")])
def test_not_before_is_rounded_down_to_two_digits_or_whole_hundreds(from_hours: str, about: str) -> None:
    start = int(from_hours)
    hours = " ".join(str(start + step) for step in (0, 165, 330, 499))
    told = segments((hours, "31.0 30.8 30.6 30.4", None))
    far = project(told, Decimal(22), End.LOW, now=Decimal(start + 500), interval=Decimal(300))
    assert say_ahead(far, "bar", "h").endswith(f"22 bar not before about {about} h")


@pytest.mark.parametrize(
    ("told", "words"),
    [
        ((("0 500 1000 1500", ".40 .39 .41 .395", None),), "not projected: slope not told apart from none"),
        ((("0 500 1000 1500", ".40 .40 .40 .40", None),), "does not change, nothing to project"),
        ((("0 500", ".40 .39", None),), "no slope yet: 2 more values needed"),
        ((("0 500 1000", ".40 .39 .385", None),), "no slope yet: 1 more value needed"),
        ((("0 500 1000 1500", ".30 .29 .27 .24", None),), "falls 0.04 mm in 1000 h; already past 0.25 mm"),
    ],
)
def test_why_nothing_is_projected_is_said_with_its_figures(told: tuple[tuple[str, str, str]], words: str) -> None:
    assert said(*told, now=1500) == words


def test_watched_too_shortly_or_too_long_ago_says_for_how_long() -> None:
    told = ("0 500 1000 1500", ".40 .38 .35 .33", None)
    assert said(told, now=1500, interval=2000) == (
        "falls 0.048 mm in 1000 h; not projected: watched for 1500 h, less than one inspection interval of 2000 h"
    )
    assert said(told, now=2501).endswith("not projected: 1001 h since the last value, more than two intervals")


def test_watched_too_shortly_says_what_is_likely_no_further_ahead_than_that_and_that_no_check_moves() -> None:
    # By hand: slope -0.12 / 2,500,000 h of .38 .36 .33 .31 about 750 h and 0.345 mm; 750 + 0.095 / 0.000048.
    assert said(("0 500 1000 1500", ".38 .36 .33 .31", None), now=1500, interval=2000) == (
        "falls 0.048 mm in 1000 h; likely 0.25 mm by 2729 h, but moves no check:"
        " watched for 1500 h, less than one inspection interval of 2000 h"
    )


def test_an_adjustment_nobody_wrote_down_says_where() -> None:
    told = (("0 500 1000 1500", ".40 .38 .35 .33", None), ("2000 2500", ".40 .38", "1500"))
    assert said(*told, now=2500).endswith("not projected: not known what the adjustment at 1500 h left")


def test_a_slope_that_does_not_change_says_so() -> None:
    trend = ahead(("0 500 1000 1500", ".40 .40 .40 .40", None), now=1500).trend
    assert trend is not None
    assert say_slope(trend, "mm", "h") == "does not change"


def test_subjects_without_a_projection_stand_together_by_their_first_reason() -> None:
    level = ahead(("0 500 1000 1500", ".40 .40 .40 .40", None), now=1500)
    few = ahead(("0 500", ".40 .39", None), now=1500)
    found = say_obstacles([("1I", level), ("1E", ahead(*LASH)), ("2I", few), ("2E", level)])
    assert found == f"{Obstacle.NO_SLOPE}: 1I, 2E; {Obstacle.TOO_FEW}: 2I"
