"""Compression tests and oil samples give the trends that were worked from the same figures with another library.

The invented examples and their figures are those of test_trends_published and test_wear_rate_published: least squares and
prediction ranges by statsmodels 0.15.0, the mass balance of topped-up oil by hand, worked before this code was written.
"""

from decimal import Decimal

from fleetcare.domain.rule_book import End, Severity
from fleetcare.domain.trends import Obstacle, Projection
from fleetcare.rules.judging.levels import Level
from fleetcare.rules.measured_ahead import ahead_of, rate_of
from fleetcare.rules.measured_past import MeasuredPast, compression_pasts, oil_pasts
from tests.rules.measured import a_rule, a_sheet, value

COMPRESSION = (("0", "31.0"), ("2000", "30.1"), ("4000", "29.6"), ("6000", "28.4"), ("8000", "27.9"))
IRON = (("50", "12"), ("100", "19"), ("150", "30"), ("200", "37"))


def cylinder(unit: str = "bar", times: int = 1) -> MeasuredPast:
    sheets = [
        a_sheet(
            value("pressure", f"{Decimal(figure) * times:f}", unit, "1", "dry"),
            kind="compression",
            days=9 - place,
            engine_hours=Decimal(hours),
        )
        for place, (hours, figure) in enumerate(COMPRESSION)
    ]
    return compression_pasts(sheets, [[1]], counts_hours=True)[0]


def iron(*before: tuple[str, str]) -> MeasuredPast:
    sheets = [
        a_sheet(value("hours_on_oil", hours), value("top_up", "0"), value("Fe", figure), days=20 - place)
        for place, (hours, figure) in enumerate((*before, *IRON))
    ]
    return oil_pasts(sheets, None, ())[0]


def ahead(past: MeasuredPast, limit: str, end: End) -> Projection:
    told = ahead_of(past, [Level(end, Severity.ALARM, Decimal(limit), a_rule())], life=None, interval=None)
    assert told is not None
    assert told.trend is not None
    return told


def test_a_cylinder_22734_h_from_22_bar_is_only_said_not_to_be_low_before_16000_h() -> None:
    told = ahead(cylinder(), "22", End.LOW)
    assert told.trend is not None
    assert (told.trend.slope, f"{told.trend.scatter:.6f}", told.trend.df) == (Decimal("-0.000395"), "0.181659", 3)
    (hindrance,) = told.hindrances
    assert hindrance.obstacle is Obstacle.TOO_FAR
    assert round(hindrance.figure or 0) == 22734
    assert told.not_before == 16000


def test_the_unit_of_the_sheets_changes_nothing() -> None:
    bar, kilopascal = ahead(cylinder(), "22", End.LOW), ahead(cylinder("kPa", 100), "2200", End.LOW)
    assert bar.hindrances == kilopascal.hindrances


def test_iron_of_one_fill_reaches_100_ppm_at_564_h_which_is_further_than_was_watched() -> None:
    """b = 0.172 ppm/h, a = 3.00, s = 1.265, se(b) = 0.01131; 100 ppm at 563.95 h; seen from 50 to 200 h."""
    told = ahead(iron(), "100", End.HIGH)
    assert told.trend is not None
    assert (told.trend.slope, told.trend.value_at(Decimal(0))) == (Decimal("0.172"), Decimal(3))
    assert (f"{told.trend.scatter:.3f}", f"{told.trend.slope_error:.5f}") == ("1.265", "0.01131")
    (hindrance,) = told.hindrances
    assert hindrance.obstacle is Obstacle.TOO_FAR
    assert f"{hindrance.figure:.2f}" == "563.95"
    assert told.not_before == 350


def test_a_fill_of_one_sample_before_changes_neither_slope_nor_level_of_the_one_that_now_runs() -> None:
    assert ahead(iron(("240", "55")), "100", End.HIGH).trend == ahead(iron(), "100", End.HIGH).trend


def test_topped_up_iron_comes_at_the_compensated_rate() -> None:
    """33 ppm at 200 h, 1.2 L into 8 L, new oil 3 ppm: compensated 0.1615 ppm/h, raw 0.1500."""
    fresh = (value("Fe", "3", phase="new"),)
    sheet = a_sheet(value("hours_on_oil", "200"), value("top_up", "1.2"), value("Fe", "33"))
    (past,) = oil_pasts([sheet], Decimal(8), fresh)
    rate = rate_of(past)
    assert rate is not None
    assert f"{rate.per_100h / 100:.4f}" == "0.1615"
    (unstated,) = oil_pasts([a_sheet(value("hours_on_oil", "200"), value("Fe", "33"))], Decimal(8), fresh)
    raw = rate_of(unstated)
    assert raw is not None
    assert f"{raw.per_100h / 100:.4f}" == "0.1500"
