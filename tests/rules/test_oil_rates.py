"""Metal gained between two samples of one fill, and why it is not told."""

from decimal import Decimal

import pytest

from fleetcare.domain.trends import Hindrance, Obstacle
from fleetcare.errors import Refused
from fleetcare.rules.oil_rates import OilRate, OilSample, rate_between


def a_sample(at: str, ppm: str, added: str = "0", *, filled_at: str = "1000") -> OilSample:
    return OilSample(Decimal(filled_at), Decimal(at), Decimal(ppm), Decimal(added))


def asked(
    first: OilSample, second: OilSample, *, sump: str | None = "8", most: str = "0.1", per_hours: int = 100
) -> OilRate | Hindrance:
    litres = None if sump is None else Decimal(sump)
    return rate_between(first, second, per_hours=per_hours, most_make_up=Decimal(most), sump=litres)


@pytest.mark.parametrize(("per_hours", "gained"), [(10, "0.5"), (100, "5"), (1000, "50")])
def test_ten_ppm_in_200_hours_are_told_for_any_span(per_hours: int, gained: str) -> None:
    rate = asked(a_sample("1100", "20"), a_sample("1300", "30"), per_hours=per_hours)
    assert isinstance(rate, OilRate)
    assert rate.as_read == rate.corrected == Decimal(gained)
    assert (rate.hours, rate.make_up, rate.per_hours) == (Decimal(200), Decimal(0), per_hours)


def test_the_order_of_two_samples_does_not_matter() -> None:
    first, second = a_sample("1100", "20", "0.1"), a_sample("1300", "30", "0.5")
    assert asked(first, second) == asked(second, first)


def test_a_level_reading_kept_so_by_top_up_is_wear_all_the_same() -> None:
    rate = asked(a_sample("1100", "30"), a_sample("1300", "30", "0.8"))
    assert isinstance(rate, OilRate)
    assert rate.as_read == 0
    assert rate.corrected == pytest.approx(Decimal("1.5"))  # by hand: 30 ppm x 0.1 sump of burnt oil in 200 h


def test_without_a_sump_the_rate_is_told_only_where_nothing_was_added() -> None:
    first = a_sample("1100", "20")
    assert isinstance(asked(first, a_sample("1300", "30"), sump=None), OilRate)
    assert asked(first, a_sample("1300", "30", "0.5"), sump=None) == Hindrance(Obstacle.NO_SUMP, Decimal("0.5"))


def test_across_an_oil_change_there_is_no_rate() -> None:
    after = a_sample("1300", "5", filled_at="1250")
    expected = Hindrance(Obstacle.OTHER_FILL, Decimal(1250), Decimal(1000))
    assert asked(a_sample("1100", "20"), after) == expected


def test_samples_just_five_hours_apart_are_far_enough() -> None:
    first = a_sample("1100", "20")
    assert isinstance(asked(first, a_sample("1105", "21")), OilRate)
    assert asked(first, a_sample("1104.9", "21")) == Hindrance(Obstacle.TOO_CLOSE, Decimal("4.9"), Decimal(5))


def test_a_top_up_of_just_the_share_allowed_is_not_large() -> None:
    first = a_sample("1100", "20", "1")
    assert isinstance(asked(first, a_sample("1300", "30", "1.8")), OilRate)
    large = Hindrance(Obstacle.LARGE_TOP_UP, Decimal("0.1025"), Decimal("0.1"))
    assert asked(first, a_sample("1300", "30", "1.82")) == large


def test_less_added_by_the_later_sample_cannot_be_right() -> None:
    with pytest.raises(Refused, match=r"top-up -0\.5 L cannot be right"):
        asked(a_sample("1100", "20", "1"), a_sample("1300", "30", "0.5"))


def test_a_sump_of_nothing_is_refused() -> None:
    with pytest.raises(Refused, match="sump 0 L cannot be right"):
        asked(a_sample("1100", "20"), a_sample("1300", "30"), sump="0")
