"""Laws of forecasts and chains.

A forecast: early <= likely <= late, and nothing before the last reading; a higher target is never likely earlier;
neither the order of readings nor their unit changes a date. A chain: neighbours keep the hard rule; a held
reading stays; a clean history is kept whole; no longer chain exists.
"""

from datetime import date, timedelta
from decimal import Decimal
from itertools import pairwise

import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from fleetcare.rules.forecast import History
from fleetcare.rules.readings import Figure, breaks_rule, plausible_chain

FIRST = date(2022, 5, 9)
MILE = Decimal("1.609344")
CAP = Decimal(24)

tenths = st.integers(0, 2400).map(lambda n: Decimal(n) / 10)
amounts = st.integers(1, 40_000).map(lambda n: Decimal(n) / 10)


@st.composite
def histories(draw: st.DrawFn) -> list[Figure]:
    """Readings days or months apart, over days or years, idle in long stretches now and then."""
    gaps = draw(st.lists(st.tuples(st.integers(0, 60), st.just(Decimal(0)) | tenths), max_size=60))
    on, total, figures = FIRST, draw(tenths), []
    for days, gained in gaps:
        on, total = on + timedelta(days=days), total + gained
        figures.append((on, total))
    return figures


@given(histories(), amounts)
def test_early_is_never_after_likely_nor_likely_after_late(figures: list[Figure], amount: Decimal) -> None:
    answer = History(figures).reach((figures[-1][1] if figures else 0) + amount)
    if answer.likely is None:
        assert (answer.early, answer.late) == (None, None)
        assert answer.reason
    else:
        assert answer.early is not None
        assert figures[-1][0] <= answer.early <= answer.likely <= (answer.late or date.max)
        assert answer.reason is None


@given(histories(), amounts, amounts)
def test_a_higher_target_is_never_likely_earlier(figures: list[Figure], amount: Decimal, more: Decimal) -> None:
    history = History(figures)
    last = figures[-1][1] if figures else Decimal(0)
    sooner, later = history.reach(last + amount), history.reach(last + amount + more)
    assert (sooner.likely or date.max) <= (later.likely or date.max)


@given(histories(), st.integers(0, 900), st.integers(1, 900))
def test_the_likely_value_never_falls_as_days_go_by(figures: list[Figure], days: int, more: int) -> None:
    history = History(figures)
    on = (figures[-1][0] if figures else FIRST) + timedelta(days=days)
    value, later = history.likely_value(on), history.likely_value(on + timedelta(days=more))
    assert (value is None) is (later is None)
    if value is not None and later is not None:
        assert float(figures[-1][1]) <= value
        assert value <= later or value == pytest.approx(later)  # in an idle season it stands still


@given(histories(), amounts, st.randoms())
def test_the_order_of_readings_changes_nothing(figures: list[Figure], amount: Decimal, random: object) -> None:
    target = (figures[-1][1] if figures else 0) + amount
    shuffled = list(figures)
    random.shuffle(shuffled)  # type: ignore[attr-defined]
    assert History(shuffled).reach(target) == History(figures).reach(target)


@given(histories(), amounts)
def test_the_unit_of_the_meter_changes_no_date(figures: list[Figure], amount: Decimal) -> None:
    target = (figures[-1][1] if figures else 0) + amount
    plain = History(figures).reach(target)
    scaled = History([(on, total * MILE) for on, total in figures]).reach(target * MILE)
    assert (plain.early, plain.likely, plain.late) == (scaled.early, scaled.likely, scaled.late)
    assert plain.reason == scaled.reason


@st.composite
def typed(draw: st.DrawFn) -> list[Figure]:
    """Readings as typed: any figure on any day, many of them wrong."""
    pairs = draw(st.lists(st.tuples(st.integers(0, 30), st.integers(0, 400)), min_size=1, max_size=14))
    return [(FIRST + timedelta(days=days), Decimal(total)) for days, total in pairs]


def keeps_rule(chain: list[Figure]) -> bool:
    return all(breaks_rule(earlier, later, CAP, "h") is None for earlier, later in pairwise(sorted(chain)))


@given(typed(), st.data())
def test_neighbours_on_a_chain_keep_the_rule_and_the_held_reading_is_among_them(
    figures: list[Figure], data: st.DataObject
) -> None:
    holding = data.draw(st.none() | st.integers(0, len(figures) - 1))
    kept = plausible_chain(figures, CAP, holding)
    assert keeps_rule([figures[i] for i in kept])
    assert kept
    assert holding is None or holding in kept


@given(st.lists(st.tuples(st.integers(0, 9), st.integers(0, 150)), min_size=1, max_size=9), st.data())
@example([(0, 0)], None)
def test_no_longer_chain_exists(pairs: list[tuple[int, int]], data: st.DataObject | None) -> None:
    figures = [(FIRST + timedelta(days=days), Decimal(total)) for days, total in pairs]
    holding = data.draw(st.none() | st.integers(0, len(figures) - 1)) if data else None
    choices = ([i for i in range(len(figures)) if mask >> i & 1] for mask in range(1, 2 ** len(figures)))
    possible = [c for c in choices if (holding is None or holding in c) and keeps_rule([figures[i] for i in c])]
    assert len(plausible_chain(figures, CAP, holding)) == max(map(len, possible))


@given(st.lists(st.tuples(st.integers(0, 40), st.integers(0, 24)), min_size=1, max_size=40))
def test_a_clean_history_is_kept_whole(steps: list[tuple[int, int]]) -> None:
    figures, on, total = [], FIRST, Decimal(0)
    for days, gained in steps:
        on, total = on + timedelta(days=days), total + gained
        figures.append((on, total))
    assert plausible_chain(figures, CAP) == frozenset(range(len(figures)))
