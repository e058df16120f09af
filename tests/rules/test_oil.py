"""Wear shown by the oil."""

from decimal import Decimal

import pytest

from fleetcare.errors import Refused
from fleetcare.rules.oil import WearRate, before_top_up, steady_ppm, wear_rate


def _rate(ppm: str = "33", hours: str = "200", added: str = "0", sump: str = "8", fresh: str = "0") -> WearRate:
    return wear_rate(Decimal(ppm), Decimal(hours), make_up=(Decimal(added), Decimal(sump)), fresh=Decimal(fresh))


def test_without_top_up_the_sample_counts_as_it_reads() -> None:
    expected = WearRate(Decimal(33), Decimal("16.5"), Decimal(0), Decimal(1))
    assert _rate(added="0") == wear_rate(Decimal(33), Decimal(200)) == expected


def test_the_metal_of_fresh_oil_is_no_wear() -> None:
    assert _rate(ppm="13", hours="100", fresh="3").ppm_per_100h == 10


def test_no_metal_is_no_wear_whatever_was_added() -> None:
    assert _rate(ppm="0", added="4").ppm_per_100h == 0


def test_a_drop_of_top_up_changes_next_to_nothing() -> None:
    assert float(_rate(added="0.0000000001").corrected_ppm) == pytest.approx(33, rel=1e-10)


@pytest.mark.parametrize(
    ("figures", "wrong"),
    [
        ({"ppm": "-1"}, "metal -1 ppm"),
        ({"ppm": "1000001"}, "metal 1000001 ppm"),
        ({"fresh": "-1"}, "metal in fresh oil -1 ppm"),
        ({"hours": "0"}, "hours on the oil 0 h"),
        ({"added": "-0.1"}, "top-up -0.1 L"),
        ({"sump": "0"}, "sump 0 L"),
    ],
)
def test_a_figure_that_cannot_be_right_is_refused_by_name(figures: dict[str, str], wrong: str) -> None:
    with pytest.raises(Refused, match=f"{wrong} cannot be right"):
        _rate(**figures)


def test_a_lump_of_fresh_oil_is_taken_out_of_the_sample_again() -> None:
    diluted = (Decimal(33) * 6 + Decimal(3) * 2) / 8  # 6 L that read 33 and 2 L fresh ones
    assert before_top_up(diluted, added=Decimal(2), sump=Decimal(8), fresh=Decimal(3)) == 33
    assert before_top_up(Decimal(33), added=Decimal(0), sump=Decimal(8)) == 33


def test_a_top_up_of_the_whole_sump_is_an_oil_change() -> None:
    with pytest.raises(Refused, match="top-up 8 L cannot be right, the sump holds 8 L"):
        before_top_up(Decimal(10), added=Decimal(8), sump=Decimal(8))


def test_the_level_metal_tends_to_is_where_the_burnt_oil_takes_along_what_is_shed() -> None:
    rate = _rate(added="4", fresh="3")
    level = steady_ppm(rate, fresh=Decimal(3))
    assert level
    assert (level - 3) * rate.make_up == pytest.approx(rate.corrected_ppm - 3)
    assert steady_ppm(_rate()) is None
