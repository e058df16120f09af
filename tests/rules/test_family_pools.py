"""What samples of engines alike say is usual: those of the others, taken before, the newest of them."""

from datetime import timedelta
from decimal import Decimal

import pytest

from fleetcare.domain.measured import Pools
from fleetcare.domain.rule_book import Limits, Method, Pool, Rule, Severity, Statistical
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judge_history import judge_history
from fleetcare.rules.judging.judge import judge
from fleetcare.rules.judging.pools import MOST_OF_FAMILY, NO_FAMILY, Family, Sample, pools_for
from fleetcare.rules.judging.screen import screened
from tests.rules.measured import ENGINE, ON, a_rule, a_sheet, beyond, facts, value

OWN, OTHER = 1, 2
HIGH = Limits(beyond("95"), beyond("98"))


def percentile(high: Limits = HIGH, low: Limits | None = None, unit: str = "ppm") -> Rule:
    shape = Statistical(Pool.FAMILY, Method.PERCENTILE, 3)
    return a_rule(shape=shape, high=high, low=low or Limits(), unit=unit)


def sample(engine: int, days: int, iron: int) -> Sample:
    return Sample(engine, ON - timedelta(days=days), {"Fe": Decimal(iron)})


def test_the_pool_of_a_family_holds_samples_of_the_others_taken_before_the_day() -> None:
    family = Family((sample(OTHER, 9, 10), sample(OWN, 8, 99), sample(3, 7, 11), sample(OTHER, 0, 12)), OWN)
    assert family.before(ON) == {"Fe": (Decimal(10), Decimal(11))}
    assert family.before(ON + timedelta(days=1)) == {"Fe": (Decimal(10), Decimal(11), Decimal(12))}


def test_of_a_large_family_only_the_newest_samples_count() -> None:
    family = Family([sample(OTHER, 900 - n, n) for n in range(MOST_OF_FAMILY + 3)], OWN)
    assert family.before(ON)["Fe"] == tuple(Decimal(n) for n in range(3, MOST_OF_FAMILY + 3))


def test_only_oil_is_held_against_the_family() -> None:
    family = Family((sample(OTHER, 9, 10),), OWN)
    assert pools_for(a_sheet(value("Fe", "5")), {}, family).family
    assert not pools_for(a_sheet(value("coolant", "80"), kind="spot"), {}, family).family
    assert not pools_for(a_sheet(value("Fe", "5")), {}, NO_FAMILY).family


def test_each_sample_of_a_history_is_held_against_the_relatives_before_it_alone() -> None:
    family = Family(tuple(sample(OTHER, 100 - n, 10 + n) for n in range(3)), OWN)
    sheets = tuple(a_sheet(value("Fe", "50"), days=days) for days in (99, 50))
    history = judge_history(sheets, ENGINE, (percentile(),), Background(family=family))
    assert [len(standing.findings) for standing in history] == [0, 1]
    assert history[1].findings[0].severity is Severity.ALARM


@pytest.mark.parametrize("samples", [3, 19, 20, 50, 63])
@pytest.mark.parametrize("figure", ["1", "18", "19", "47", "48", "49", "60", "62", "63", "64"])
def test_a_glance_at_a_percentile_never_passes_what_judging_flags(samples: int, figure: str) -> None:
    about = facts(a_sheet(value("Fe", figure)), pools=Pools({}, {"Fe": tuple(map(Decimal, range(1, samples + 1)))}))
    assert not (screened(percentile()).is_clear(about) and judge([percentile()], about))


def test_a_glance_is_enough_for_a_figure_many_relatives_reach() -> None:
    pool = {"Fe": (Decimal(20),) * 50}
    for text, is_clear in (("20", True), ("20.1", False), ("<30", False)):
        about = facts(a_sheet(value("Fe", text)), pools=Pools({}, pool))
        assert screened(percentile()).is_clear(about) is is_clear
    usual = facts(a_sheet(value("Fe", "20")), pools=Pools({}, pool))
    for rule in (percentile(low=Limits(beyond("5"))), percentile(Limits()), percentile(unit="%")):
        assert not screened(rule).is_clear(usual)
