"""Student's t: how many standard errors hold a stated share of what is drawn with few degrees of freedom.

For whole degrees of freedom the share within t is a finite sum over the angle arctan(t / sqrt(df)): Abramowitz & Stegun
26.7.3 (odd) and 26.7.4 (even); it rises with the angle, which is found by halving. Good to 1e-9 of t up to a coverage of 0.999999.
"""

from functools import cache
from math import cos, pi, sin, sqrt, tan

from fleetcare.errors import Refused

_HALVINGS = 60


@cache
def t_quantile(coverage: float, df: int) -> float:
    """Give the t with P(|T| <= t) = `coverage` for `df` degrees of freedom: for 0.80 that is the 90 % point.

    Raises Refused for a coverage that is not between 0 and 1, or fewer than one degree of freedom.
    """
    if not 0 < coverage < 1:
        raise Refused(f"coverage {coverage} cannot be right", "give a share above 0 and below 1, like 0.80")
    if df < 1:
        raise Refused(f"{df} degrees of freedom cannot be right", "give at least 1")
    low, high = 0.0, pi / 2
    for _ in range(_HALVINGS):
        angle = (low + high) / 2
        low, high = (angle, high) if _share_within(angle, df) < coverage else (low, angle)
    return sqrt(df) * tan(low)


def _share_within(angle: float, df: int) -> float:
    """P(|T| <= sqrt(df) tan(angle)), the sum of A&S 26.7.3 or 26.7.4."""
    is_odd = df % 2
    square = cos(angle) ** 2
    total, term = 0.0, cos(angle) if is_odd else 1.0
    for below in range(2 + is_odd, df + 1, 2):
        total += term
        term *= square * (below - 1) / below
    return 2 / pi * (angle + sin(angle) * total) if is_odd else sin(angle) * total
