"""Sheets of a valve, set twice, give the wear that was worked from the same gaps with another library.

The invented example and its figure, -4.855274e-05 mm/h, are those of test_trends_published: statsmodels 0.15.0, least
squares with one level for each segment, worked before this code was written.
"""

from decimal import Decimal

from fleetcare.domain.engines import Side, ValveTrain
from fleetcare.domain.sheets import LashSpec, Phase, Sheet, SheetValue
from fleetcare.rules.lash_past import lash_past
from fleetcare.rules.lash_points import lash_points
from fleetcare.rules.trends import cut_at_adjustments, fit_trend
from tests.builders import day

# Hours of life, found, and left where it was set.
GAUGED = """
0 .400
500 .372
1000 .353
1500 .322 .400
2000 .378
2600 .347
3000 .331 .400
3500 .377
4000 .352
"""
SPEC = LashSpec(day("2020-01-01"), "mm", "cold", {Side.EXHAUST: (Decimal("0.25"), Decimal("0.45"))})


def test_the_wear_of_a_valve_set_twice_is_that_of_its_segments_together() -> None:
    sheets, at = [], {}
    for entry, line in enumerate(GAUGED.split("\n")[1:-1], start=1):
        hours, *gaps = (Decimal(figure) for figure in line.split())
        at[entry] = hours
        values = tuple(
            SheetValue("lash", "1E", phase, gap, None, None, "mm")
            for phase, gap in zip((Phase.FOUND, Phase.LEFT), gaps, strict=False)
        )
        sheets.append(Sheet(entry, "lash", day("2025-01-01"), values, "cold"))
    (_, past) = lash_past(lash_points(ValveTrain(1, 2)), sheets, (SPEC,), at, day("2026-05-01"))
    trend = fit_trend(cut_at_adjustments(past.checks))
    assert trend is not None
    assert f"{trend.slope:.6e}" == "-4.855274e-5"
    assert trend.df == 7
