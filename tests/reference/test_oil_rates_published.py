"""Rates between two oil samples and the levelling off of topped-up oil: published forms, and sums worked by hand."""

from decimal import Decimal

import pytest

from fleetcare.domain.trends import Hindrance, Obstacle
from fleetcare.rules.oil import before_top_up, steady_ppm, wear_rate
from fleetcare.rules.oil_rates import OilRate, OilSample, rate_between


def asked(hours: str, first: str, second: str, *, added: str = "0", fresh: str = "0") -> OilRate | Hindrance:
    filled = Decimal(1000)
    return rate_between(
        OilSample(filled, filled, Decimal(first)),
        OilSample(filled, filled + Decimal(hours), Decimal(second), Decimal(added)),
        per_hours=10,
        most_make_up=Decimal(1),
        sump=Decimal(8),
        fresh=Decimal(fresh),
    )


def test_the_trend_per_10_hours_is_held_against_an_abnormal_43() -> None:
    """JOAP volume IV, one two-stroke diesel: an abnormal trend of iron is 43 ppm in 10 h. T10 = 10 (C2 - C1) / (h2 - h1)."""
    rate = asked("20", "40", "126")
    assert isinstance(rate, OilRate)
    assert rate.as_read == 43


def test_five_hours_apart_the_tolerance_of_the_instrument_alone_makes_2_8_ppm_in_10_hours() -> None:
    """10 sqrt(2) u / dt, u = 1 ppm, dt = 5 h, worked by hand; under 5 h unreliable: TM 38-301-3, page of the TF30."""
    rate = asked("5", "20", "21")
    assert isinstance(rate, OilRate)
    assert f"{rate.error:.1f}" == "2.8"
    under = asked("4", "20", "21")
    assert isinstance(under, Hindrance)
    assert under.obstacle is Obstacle.TOO_CLOSE


def test_from_the_fresh_fill_on_the_rate_is_that_of_the_whole_fill() -> None:
    """Worked by hand: 8 L, 200 h, 1.2 L added, fresh oil 3, iron 33 mg/kg: raw 0.1500, compensated 0.1615 mg/kg an hour."""
    rate = asked("200", "3", "33", added="1.2", fresh="3")
    assert isinstance(rate, OilRate)
    assert (rate.as_read, f"{rate.corrected:.3f}") == (Decimal("1.5"), "1.615")
    whole = wear_rate(Decimal(33), Decimal(200), make_up=(Decimal("1.2"), Decimal(8)), fresh=Decimal(3))
    assert 10 * rate.corrected == pytest.approx(whole.ppm_per_100h)


@pytest.mark.parametrize("make_up", [0.1, 0.5, 1.0])
def test_the_correction_undoes_a_sump_topped_up_in_small_steps_from_any_level(make_up: float) -> None:
    """A sump walked step by step: metal is shed, a little oil is burnt with what it carries, as much fresh is added."""
    steps, shed, fresh, first = 100_000, 40.0, 3.0, 60.0
    reading = first
    for _ in range(steps):
        reading += shed / steps
        reading += (fresh - reading) * make_up / steps
    rate = asked("200", str(first), str(reading), added=str(make_up * 8), fresh=str(fresh))
    assert isinstance(rate, OilRate)
    assert float(rate.corrected) == pytest.approx(shed / 20, rel=1e-4)


def test_iron_topped_up_for_ever_comes_to_218() -> None:
    """Worked by hand, same sump of 7.04 kg: w = 1.137 mg/h, C_inf = c_f + w / q = 218 mg/kg."""
    rate = wear_rate(Decimal(33), Decimal(200), make_up=(Decimal("1.2"), Decimal(8)), fresh=Decimal(3))
    level = steady_ppm(rate, fresh=Decimal(3))
    assert level
    assert round(level) == 218
    assert f"{rate.ppm_per_100h / 100 * Decimal('7.04'):.3f}" == "1.137"


def test_a_lump_of_top_up_just_before_the_sample_is_taken_out_again() -> None:
    """C_before = (C_after V - c_f A) / (V - A), worked by hand: 8 L, 2 L of them fresh with 3 ppm, 25.5 ppm read."""
    assert before_top_up(Decimal("25.5"), added=Decimal(2), sump=Decimal(8), fresh=Decimal(3)) == 33
