"""The next check a wearing measure asks for, and which of two limits it is projected to."""

from dataclasses import replace
from decimal import Decimal

import pytest

from fleetcare.domain.trends import End, Obstacle
from fleetcare.domain.wear import Pull, Wear
from fleetcare.rules.next_checks import foresee, next_check, with_its_chance
from fleetcare.rules.projection import project_on
from tests.rules.wearing import a_wear, segments

NOW, INTERVAL = Decimal(4000), Decimal(500)


def pull(*wears: Wear) -> Pull | None:
    return next_check(foresee(wears, NOW, INTERVAL))


def at(*wears: Wear) -> tuple[str, Decimal]:
    found = pull(*wears)
    assert found is not None
    return found.wear.subject, found.at


def test_a_check_is_asked_for_at_the_early_end_rounded_down_to_the_tenth() -> None:
    assert at(a_wear()) == ("3E", Decimal("5975.1"))


def test_the_earliest_of_several_points_pulls_and_of_two_alike_the_first_by_name() -> None:
    later = a_wear(low="0.24", subject="1E")
    assert at(later, a_wear(), a_wear(subject="2E")) == ("2E", Decimal("5975.1"))


def test_an_early_end_behind_the_last_value_asks_at_that_value_and_says_so() -> None:
    found = pull(a_wear(("2000 2500 3000 3500 4000", ".40 .38 .35 .33 .312", None), low="0.31"))
    assert found is not None
    assert found.at == 4000
    assert found.is_reached


def test_an_early_end_ahead_of_the_last_value_is_not_reached() -> None:
    found = pull(a_wear())
    assert found is not None
    assert not found.is_reached


def test_what_is_not_projected_pulls_nothing() -> None:
    assert pull(a_wear(("0 500 1000 1500", ".40 .39 .41 .395", None))) is None
    assert pull() is None


@pytest.mark.parametrize(
    ("told", "may_pull"),
    [
        ((), True),
        (("0 500 1000 1500", ".40 .39 .41 .395", None), False),
        (("0 500 1000 1500", ".44 .43 .42 .41", None), False),
        (("0 10 20 30", ".30 .29 .28 .27", None), True),
        (("0 500", ".40 .30", None), False),
    ],
    ids=["the example", "no slope", "too far ahead", "watched for 30 h", "two values"],
)
def test_whether_a_subject_may_pull_is_told_by_its_values_alone(
    told: tuple[str, str, str | None] | tuple[()], may_pull: bool
) -> None:
    wear = a_wear(*([told] if told else []))
    assert with_its_chance(wear) == replace(wear, may_pull=may_pull)


def ahead(values: str, **limits: str) -> End:
    told = {End(name): Decimal(value) for name, value in limits.items()}
    hours = " ".join(str(500 * number) for number in range(len(values.split())))
    return project_on(segments((hours, values, None)), told, now=NOW, interval=INTERVAL).end


@pytest.mark.parametrize(
    ("values", "end", "why"),
    [
        (".40 .39 .38 .37", End.LOW, "it closes"),
        (".30 .31 .32 .33", End.HIGH, "it opens"),
        (".40 .40 .40 .40", End.HIGH, "level, nearer to the most"),
        (".30 .30 .30 .30", End.LOW, "level, nearer to the least"),
        (".35 .35 .35 .35", End.LOW, "level, midway: a closing gap does more harm"),
        (".38", End.HIGH, "one value"),
        (".22 .23 .24 .245", End.LOW, "below the least, though it opens"),
        (".52 .51 .49 .47", End.HIGH, "above the most, though it closes"),
    ],
)
def test_a_measure_is_projected_to_the_limit_it_is_past_else_moves_to_else_is_nearer_to(
    values: str, end: End, why: str
) -> None:
    assert ahead(values, low="0.25", high="0.45") is end, why


def test_with_one_limit_it_is_that_one_even_where_it_moves_away() -> None:
    assert ahead(".40 .39 .38 .37", high="0.45") is End.HIGH


def test_a_value_past_a_limit_is_not_projected_to_the_other_one() -> None:
    told = {End.LOW: Decimal("0.25"), End.HIGH: Decimal("0.45")}
    values = segments(("0 500 1000 1500", ".22 .23 .24 .245", None))
    found = project_on(values, told, now=NOW, interval=INTERVAL)
    assert Obstacle.PAST_LIMIT in {one.obstacle for one in found.hindrances}
    assert found.early is None
