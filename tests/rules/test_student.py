"""Quantiles of Student's t that have a closed form, and what has none."""

from math import pi, sqrt, tan

import pytest

from fleetcare.errors import Refused
from fleetcare.rules.student import t_quantile


@pytest.mark.parametrize("coverage", [0.1, 0.5, 0.8, 0.95, 0.999])
def test_one_and_two_degrees_of_freedom_have_closed_forms(coverage: float) -> None:
    """Solved by hand from A&S 26.7.3 (a Cauchy variable) and 26.7.4 (the sine of the angle)."""
    assert t_quantile(coverage, 1) == pytest.approx(tan(pi * coverage / 2), rel=1e-12)
    assert t_quantile(coverage, 2) == pytest.approx(sqrt(2) * coverage / sqrt(1 - coverage**2), rel=1e-12)


def test_no_degree_of_freedom_is_refused() -> None:
    with pytest.raises(Refused, match="0 degrees of freedom cannot be right"):
        t_quantile(0.8, 0)
