"""Gaps that are more likely a slip, what was likely meant, and what is never doubted."""

from decimal import Decimal

import pytest

from fleetcare.domain.sheets import Phase
from fleetcare.rules.lash_doubts import doubt
from tests.rules.test_judge_lash import a_value

MM = (Decimal("0.20"), Decimal("0.30")), "mm"
INCH = (Decimal("0.008"), Decimal("0.012")), "in"


def meant(text: str, unit: str = "mm", phase: Phase = Phase.FOUND, limits: tuple[object, str] = MM) -> str | None:
    """What was likely meant, "-" for a doubt without it, None without a doubt."""
    found = doubt(a_value(text, unit=unit, phase=phase), *limits)  # type: ignore[arg-type]
    if found is None:
        return None
    return " or ".join(f"{figure.normalize():f} {of}" for figure, of in found.meant) or "-"


@pytest.mark.parametrize(
    ("text", "wanted"),
    [
        ("3.0", "0.3 mm"),
        ("2.5", "0.25 mm"),
        ("0.90", "-"),  # three times the range, but nothing near it has these figures
        ("0.89", None),
        ("0.35", None),
        ("0", None),  # a valve can close altogether
        ("0.02", None),
        ("0.012", "0.012 in or 0.12 mm"),
        ("0.008", "0.008 in"),
        ("2.5..3.0", "0.25 mm"),
        ("<0.05", None),
    ],
)
def test_a_gap_found_is_doubted_where_it_is_far_too_wide_or_thinner_than_a_blade(text: str, wanted: str | None) -> None:
    assert meant(text) == wanted


@pytest.mark.parametrize(
    ("text", "wanted"),
    [("0.03", "0.3 mm"), ("0.025", "0.25 mm"), ("0.066", "-"), ("0.067", None), ("0", "-"), ("<0.05", "-")],
)
def test_a_gap_left_is_doubted_where_it_is_far_too_tight_too(text: str, wanted: str | None) -> None:
    assert meant(text, phase=Phase.LEFT) == wanted


@pytest.mark.parametrize(
    ("text", "unit", "limits", "wanted"),
    [
        ("0.30", "in", MM, "0.3 mm"),
        ("0.25", "in", INCH, "0.25 mm"),
        ("0.10", "in", INCH, "0.01 in"),
        ("0.010", "mm", INCH, "0.01 in"),
        ("0.010", "in", INCH, None),
        ("0.010", "in", MM, None),
    ],
)
def test_millimetres_for_inches_and_the_other_way_round_are_noticed(
    text: str, unit: str, limits: tuple[object, str], wanted: str | None
) -> None:
    assert meant(text, unit, limits=limits) == wanted


@pytest.mark.parametrize(
    ("text", "wanted"), [("3.0", "0.3 mm"), ("1.524", "0.1524 mm"), ("1.523", None), ("0.05", None)]
)
def test_without_a_check_range_the_published_clearances_of_other_engines_stand_in(
    text: str, wanted: str | None
) -> None:
    assert meant(text, limits=(None, "mm")) == wanted


@pytest.mark.parametrize(
    ("text", "unit", "phase", "limits", "why", "is_possible"),
    [
        ("5.1", "mm", Phase.FOUND, MM, "no valve lash is wider than 5 mm", False),
        ("0.30", "in", Phase.FOUND, MM, "no valve lash is wider than 5 mm", False),
        ("5", "mm", Phase.FOUND, MM, "it is 3 times the 0.3 mm where its check range ends, or more", True),
        ("1.6", "mm", Phase.FOUND, (None, "mm"), "it is 2 times the 0.762 mm where what is known of other engines ends, or more", True),
        ("0.01", "mm", Phase.LEFT, MM, "nobody leaves a valve 3 times as tight as the 0.2 mm where its check range begins", True),
        ("0.01", "mm", Phase.FOUND, MM, "no blade is thinner than 0.02 mm", True),
        ("0.1", "in", Phase.FOUND, INCH, "it is 3 times the 0.012 in where its check range ends, or more", True),
    ],
)  # fmt: skip
def test_a_doubt_says_why_and_whether_the_gap_can_be_at_all(
    text: str, unit: str, phase: Phase, limits: tuple[object, str], why: str, is_possible: bool
) -> None:
    found = doubt(a_value(text, unit=unit, phase=phase), *limits)  # type: ignore[arg-type]
    assert found is not None
    assert (found.why, found.is_possible) == (why, is_possible)
