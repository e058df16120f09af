"""The shipped rules on gaps that come to an end of their range, against sums worked with another library.

The example of valve lash, reset twice, is invented; its figures were worked with statsmodels 0.15.0 (least squares with one
level for each segment), the range as the roots of the prediction interval, before this code was written. That 250 h call
for a look is common practice.
"""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.findings import Signal
from fleetcare.domain.rule_book import Limit, Limits
from fleetcare.rules.judging.judge import judge
from tests.rules.measured import rules_named
from tests.rules.test_judging_approach import SPEC, Told, gauged

RULES = {rule.id: rule for rule in rules_named()}
RESET_TWICE: tuple[Told, ...] = (
    (0, "|.400"), (500, ".372"), (1000, ".353"), (1500, ".322|.400"), (2000, ".378"), (2600, ".347"),
    (3000, ".331|.400"), (3500, ".377"), (4000, ".352"),
)  # fmt: skip


def told(low: str, within: str, *sheets: Told) -> Signal | None:
    """What the rule on closing gaps says of 1E with this least gap, when so many hours call for a look."""
    side = next(iter(SPEC.ranges))
    rule = replace(RULES["lash-closing"], low=Limits(Limit(Decimal(within))))
    spec = replace(SPEC, ranges={side: (Decimal(low), Decimal("0.45"))})
    return next(iter(judge([rule], gauged(*(sheets or RESET_TWICE), spec=spec))), None)


def test_the_worked_example_comes_to_its_limit_when_the_other_library_says_and_at_the_earliest_at_the_end_of_its_range() -> (
    None
):
    """0.25 mm at 6102.0 h, 80 % range from 5975.1 h; slope -0.0486 mm per 1000 h, its standard error 0.001363."""
    signal = told("0.25", "2103")
    assert signal is not None
    assert signal.measured == Decimal("2101.9")  # 2101.98, as hours are rounded down to a tenth
    numbers = {one.label: one.value for one in signal.steps}
    assert f"{numbers['slope']:.8f}" == "-0.04855274"
    assert f"{numbers['its standard error']:.9f}" == "0.001363028"
    assert (numbers["values"], numbers["at the earliest in"]) == (Decimal(11), Decimal("1975.1"))
    assert told("0.25", "2101") is None


def test_as_shipped_the_worked_example_is_no_finding_until_250_h_before() -> None:
    for rule in ("lash-closing", "lash-opening"):
        assert RULES[rule].low.alert == Limit(Decimal(250))
    assert told("0.25", "250") is None
    # 0.036333 mm below their mean at 3500 h: b d 1.76406e-6, half 2.01487e-7, A 2.35366e-9, so early at 3500 + 663.9 h,
    # and likely at 3500 + 0.036333 / 0.0000485527 h.
    signal = told("0.34", "250")
    assert signal is not None
    assert (signal.measured, signal.steps[-1].value) == (Decimal("248.3"), Decimal("163.9"))


@pytest.mark.parametrize(
    "gaps",
    [
        pytest.param((".40", ".39", ".41", ".395"), id="gq 309, no slope told apart from none"),
        pytest.param((".331", ".322", ".311", ".302"), id="already past"),
    ],
)
def test_the_published_refusals_are_no_finding(gaps: tuple[str, ...]) -> None:
    """0 500 1000 1500 = .40 .39 .41 .395: gq = 309, no projection; what is past its limit is an alarm of another rule."""
    assert told("0.38", "2000", *((500 * number, gap) for number, gap in enumerate(gaps))) is None
