"""The life total as a curve: as read, and as expected."""

from datetime import date, timedelta
from itertools import pairwise

from fleetcare.domain.engines import Status, StatusSpell
from fleetcare.domain.quantities import Kind
from fleetcare.operations.life_plot import life_curves
from fleetcare.rules.due.due_list import item_lines
from tests.builders import a_task, an_item, every, facts, new_at

# An hour a day, read every ten days.
STEADY = [((date(2026, 1, 1) + timedelta(days=10 * n)).isoformat(), 10 * n) for n in range(13)]
OIL = a_task(every("250h"), every("12mo"), origin=new_at(0))


def test_a_curve_begins_with_every_reading() -> None:
    (curve,) = life_curves(facts(OIL, on="2026-05-01", hours=STEADY), [])
    assert (curve.kind, curve.unit) == (Kind.HOURS, "h")
    assert [(day.isoformat(), total) for day, total in curve.read] == STEADY


def test_what_is_expected_goes_on_from_the_last_reading_early_before_likely_before_late() -> None:
    (curve,) = life_curves(facts(OIL, on="2026-05-01", hours=STEADY), [])
    assert curve.why_not == ""
    assert len(curve.ahead) >= 10
    assert curve.ahead[0][0] > STEADY[-1][1]
    for total, early, likely, late in curve.ahead:
        assert early <= likely
        assert late is None or likely <= late
        assert abs((likely - date(2026, 5, 1)).days - (total - 120)) <= 2  # an hour a day
    for (total, _, likely, _), (more, _, later, _) in pairwise(curve.ahead):
        assert total < more
        assert likely <= later


def test_it_looks_ahead_for_at_least_two_months() -> None:
    (curve,) = life_curves(facts(OIL, on="2026-05-01", hours=STEADY), [])
    assert curve.ahead[-1][2] >= date(2026, 6, 29)


def test_without_a_forecast_it_says_why() -> None:
    (curve,) = life_curves(facts(OIL, on="2026-05-01", hours=12), [])
    assert curve.ahead == ()
    assert "three over at least 14 days are needed" in curve.why_not


def test_a_laid_up_engine_has_a_past_but_no_forecast() -> None:
    item = an_item(spells=(StatusSpell(Status.LAID_UP, date(2026, 4, 1)),))
    (curve,) = life_curves(facts(OIL, on="2026-05-01", hours=STEADY, item=item), [])
    assert (len(curve.read), curve.ahead) == (13, ())
    assert curve.why_not.startswith("laid up")


def test_the_points_of_its_lines_are_marked_lowest_first() -> None:
    air = a_task(every("100h"), number=2, name="Air filter", origin=new_at(0))
    known = facts(OIL, air, on="2026-05-01", hours=STEADY)
    (curve,) = life_curves(known, item_lines(known))
    assert curve.marks == ((100.0, "Air filter"), (250.0, "Oil and filter"))


def test_an_item_nobody_has_read_has_no_curve() -> None:
    assert life_curves(facts(OIL, on="2026-05-01"), []) == []
