"""Wear rates against published examples and the mass balance worked by hand and by small steps."""

from decimal import Decimal

import pytest

from fleetcare.rules.oil import wear_rate


def test_100_ppm_in_100_hours_is_1_ppm_an_hour() -> None:
    """machinerylubrication.com, D. Troyer, "Statistically Derived Rate-of-Change Oil Analysis Limits"."""
    assert wear_rate(Decimal(100), Decimal(100)).ppm_per_100h == 100


@pytest.mark.parametrize(
    ("make_up", "factor"),
    [("0.05", "1.0252"), ("0.10", "1.0508"), ("0.25", "1.1302"), ("0.50", "1.2707"), ("1", "1.5820")],
)
def test_the_factor_is_that_of_the_table_worked_by_hand(make_up: str, factor: str) -> None:
    """F(x) = x / (1 - e^-x), worked from the mass balance, four decimals; about 1 + x/2, far below 1 + x."""
    rate = wear_rate(Decimal(10), Decimal(100), make_up=(Decimal(make_up), Decimal(1)))
    assert round(rate.factor, 4) == Decimal(factor)
    assert rate.factor < 1 + Decimal(make_up)


def test_a_sump_of_8_litres_with_1_2_added_reads_a_thirteenth_too_low() -> None:
    """Worked by hand: 33 ppm after 200 h, fresh oil 3 ppm: x 0.15, F 1.07687, 35.31 ppm, 0.1615 ppm/h against 0.1500."""
    litres = Decimal("1.2"), Decimal(8)
    rate = wear_rate(Decimal(33), Decimal(200), make_up=litres, fresh=Decimal(3))
    raw = wear_rate(Decimal(33), Decimal(200), fresh=Decimal(3))
    assert (rate.make_up, round(rate.factor, 5)) == (Decimal("0.15"), Decimal("1.07687"))
    assert round(rate.corrected_ppm, 2) == Decimal("35.31")
    assert (round(rate.ppm_per_100h, 2), raw.ppm_per_100h) == (Decimal("16.15"), Decimal(15))
    assert (raw.corrected_ppm, raw.factor) == (Decimal(33), Decimal(1))


@pytest.mark.parametrize("make_up", [0.1, 0.5, 1.0])
def test_the_correction_undoes_a_sump_topped_up_in_small_steps(make_up: float) -> None:
    """A sump walked hour by hour: metal is shed, a little oil is burnt with what it carries, and as much fresh is added."""
    steps, shed, fresh = 100_000, 40.0, 3.0
    reading = fresh
    for _ in range(steps):
        reading += shed / steps
        reading += (fresh - reading) * make_up / steps
    rate = wear_rate(Decimal(reading), Decimal(200), make_up=(Decimal(make_up), Decimal(1)), fresh=Decimal(fresh))
    assert float(rate.corrected_ppm) == pytest.approx(fresh + shed, rel=1e-4)
    assert float(rate.ppm_per_100h) == pytest.approx(shed / 2, rel=1e-4)
