"""What the feeler gauge says, and where it lies; shims and screws."""

from decimal import Decimal

import pytest

from fleetcare.domain.sheets import Place
from fleetcare.errors import Misread, Refused
from fleetcare.rules.lash import Gap, Standing, judge, read_gap
from fleetcare.rules.lash_setting import Direction, LashAt, ScrewAt, ScrewTurn, ShimChoice, choose_shim, screw_turn
from fleetcare.rules.nameplate import LashUnit

LEAST, MOST = Decimal("0.20"), Decimal("0.30")


def _plain(figure: str) -> Gap:
    return Gap(Decimal(figure), Decimal(figure))


def _shim(
    measured: str = "0.20", target: str = "0.20", fitted: str = "2.75", step: str = "0.05", **ends: str | None
) -> ShimChoice:
    stock = [None if (end := ends.get(name)) is None else Decimal(end) for name in ("thinnest", "thickest")]
    return choose_shim(Decimal(measured), Decimal(target), Decimal(fitted), Decimal(step), stock=(stock[0], stock[1]))


def _turn(measured: str = "0.30", target: str = "0.20", pitch: str = "1", ratio: str = "1") -> ScrewTurn:
    return screw_turn(Decimal(measured), Decimal(target), Decimal(pitch), rocker_ratio=Decimal(ratio))


@pytest.mark.parametrize(
    ("typed", "unit", "figure"),
    [
        ("5", "mm", "0.05"),
        ("05", "mm", "0.05"),
        ("30", "mm", "0.30"),
        ("152", "mm", "0.152"),
        ("8", "in", "0.008"),
        ("15", "in", "0.015"),
        ("125", "in", "0.125"),
        ("0", "mm", "0"),
        ("0.25", "mm", "0.25"),
        ("0,25", "mm", "0.25"),
        (".25", "mm", "0.25"),
        (" 1.0 ", "mm", "1"),
        ("0.008", "in", "0.008"),
    ],
)
def test_a_plain_figure_is_read_in_the_unit_of_the_gauge(typed: str, unit: LashUnit, figure: str) -> None:
    gap = read_gap(typed, unit)
    assert (gap.goes, gap.stops, gap.best) == (Decimal(figure),) * 3
    assert not gap.is_interval


@pytest.mark.parametrize(
    ("typed", "unit", "goes", "stops"),
    [
        ("0.25..0.30", "mm", "0.25", "0.30"),
        ("25..30", "mm", "0.25", "0.30"),
        ("0,25 .. 0,30", "mm", "0.25", "0.30"),
        (".25...30", "mm", "0.25", "0.30"),
        ("0..5", "mm", "0", "0.05"),
        ("11..13", "in", "0.011", "0.013"),
    ],
)
def test_a_range_is_the_blade_that_goes_and_the_one_that_does_not(
    typed: str, unit: LashUnit, goes: str, stops: str
) -> None:
    gap = read_gap(typed, unit)
    assert (gap.goes, gap.stops) == (Decimal(goes), Decimal(stops))
    assert gap.is_interval


@pytest.mark.parametrize("typed", ["", "wide", "1525", "-0.25", "0.25 mm", "25.", "0.25-0.30", "0.25..", "..0.30", "٣"])
def test_what_is_no_gap_is_misread(typed: str) -> None:
    with pytest.raises(Misread, match="is not a gap; write it like"):
        read_gap(typed, "mm")


@pytest.mark.parametrize("typed", ["0.30..0.25", "0.25..0.25", "30..5"])
def test_a_range_whose_second_blade_is_not_thicker_is_refused(typed: str) -> None:
    with pytest.raises(Refused, match="runs backwards"):
        read_gap(typed, "mm")


@pytest.mark.parametrize(
    ("figure", "place", "off"),
    [
        ("0.19", Place.BELOW, "0.01"),
        ("0.199", Place.BELOW, "0.001"),
        ("0.20", Place.IN, "0"),
        ("0.25", Place.IN, "0"),
        ("0.30", Place.IN, "0"),
        ("0.301", Place.ABOVE, "0.001"),
    ],
)
def test_a_plain_figure_is_in_up_to_and_including_its_limits(figure: str, place: Place, off: str) -> None:
    assert judge(_plain(figure), LEAST, MOST) == Standing(place, Decimal(off), Decimal(off))


@pytest.mark.parametrize(
    ("goes", "stops", "place", "off_least", "off_most"),
    [
        ("0.05", "0.10", Place.BELOW, "0.10", "0.15"),
        ("0.15", "0.20", Place.BELOW, "0", "0.05"),  # the 0.20 does not go, so the gap is less
        ("0.15", "0.25", Place.UNDECIDED, "0", "0.05"),
        ("0.20", "0.25", Place.IN, "0", "0"),
        ("0.20", "0.30", Place.IN, "0", "0"),
        ("0.25", "0.35", Place.UNDECIDED, "0", "0.05"),
        ("0.30", "0.35", Place.UNDECIDED, "0", "0.05"),  # just 0.30 would be in
        ("0.35", "0.40", Place.ABOVE, "0.05", "0.10"),
        ("0.10", "0.40", Place.UNDECIDED, "0", "0.10"),
    ],
)
def test_an_interval_that_straddles_a_limit_is_an_answer_of_its_own(
    goes: str, stops: str, place: Place, off_least: str, off_most: str
) -> None:
    assert judge(Gap(Decimal(goes), Decimal(stops)), LEAST, MOST) == Standing(
        place, Decimal(off_least), Decimal(off_most)
    )


def test_a_plain_figure_on_a_range_of_one_figure_is_in() -> None:
    assert judge(_plain("0.20"), LEAST, LEAST).place is Place.IN


@pytest.mark.parametrize(
    ("measured", "shim", "lash"),
    [
        ("0.20", "2.75", "0.20"),
        ("0.224", "2.75", "0.224"),
        ("0.225", "2.75", "0.225"),  # a tie takes the thinner
        ("0.226", "2.80", "0.176"),
        ("0.00", "2.55", "0.20"),
    ],
)
def test_the_nearest_whole_step_is_chosen(measured: str, shim: str, lash: str) -> None:
    choice = _shim(measured)
    assert (choice.shim, choice.lash) == (Decimal(shim), Decimal(lash))


def test_thirds_of_a_hundredth_stay_exact() -> None:
    choice = _shim(measured="0.215", target="0.2", fitted="2.7", step="0.03")
    assert (choice.ideal, choice.shim, choice.lash) == (Decimal("2.715"), Decimal("2.70"), Decimal("0.215"))


@pytest.mark.parametrize(
    ("fitted", "ends", "shim"),
    [
        ("2.475", {"thinnest": "2.50"}, "2.50"),  # 2.45, the thinner of the tie, is not stocked
        ("2.49", {"thinnest": "2.46"}, "2.50"),  # stock begins at the first whole step
        ("3.325", {"thickest": "3.30"}, "3.30"),
        ("3.31", {"thickest": "3.34"}, "3.30"),
        ("2.75", {"thinnest": "2.75", "thickest": "2.75"}, "2.75"),
    ],
)
def test_the_shim_is_one_of_the_stocked_sizes(fitted: str, ends: dict[str, str], shim: str) -> None:
    assert _shim(fitted=fitted, **ends).shim == Decimal(shim)


@pytest.mark.parametrize(
    ("fitted", "ends", "nearest", "left"),
    [
        ("2.4", {"thinnest": "2.50"}, "2.5", "0.1"),
        ("3.4", {"thickest": "3.30"}, "3.3", "0.3"),
        ("0.02", {}, "0.05", "0.17"),
        ("55", {}, None, None),
    ],
)
def test_where_no_stocked_size_comes_within_half_a_step_the_nearest_is_named(
    fitted: str, ends: dict[str, str], nearest: str | None, left: str | None
) -> None:
    wanted = "no stocked shim fits" if nearest else "fitted shim 55 mm cannot be right"
    with pytest.raises(Refused, match=wanted) as refused:
        _shim(fitted=fitted, **ends)
    assert nearest is None or f"the nearest, {nearest} mm, would leave {left} mm of lash" in str(refused.value)


def test_stock_between_two_steps_is_refused() -> None:
    with pytest.raises(Refused, match=r"no shim in steps of 0.05 mm lies from 2.71 to 2.74 mm"):
        _shim(thinnest="2.71", thickest="2.74")


def test_a_tie_takes_the_thicker_where_the_thinner_leaves_the_check_range() -> None:
    figures = Decimal("0.125"), Decimal("0.15"), Decimal("2.75"), Decimal("0.05")
    assert choose_shim(*figures, check_range=(Decimal("0.12"), Decimal("0.18"))).shim == Decimal("2.70")
    assert choose_shim(*figures, check_range=(Decimal("0.12"), Decimal("0.17"))).shim == Decimal("2.75")
    with pytest.raises(Refused, match="no stocked shim fits"):
        choose_shim(*figures, check_range=(Decimal("0.14"), Decimal("0.16")))


@pytest.mark.parametrize(
    ("figures", "wrong"),
    [
        ({"measured": "-0.01"}, "measured lash -0.01 mm"),
        ({"measured": "5.1"}, "measured lash 5.1 mm"),
        ({"target": "0"}, "target lash 0 mm"),
        ({"fitted": "0"}, "fitted shim 0 mm"),
        ({"step": "0"}, "step 0 mm"),
        ({"thinnest": "0"}, "thinnest stocked shim 0 mm"),
        ({"thickest": "51"}, "thickest stocked shim 51 mm"),
    ],
)
def test_a_figure_of_a_shim_that_cannot_be_right_is_refused_by_name(figures: dict[str, str], wrong: str) -> None:
    with pytest.raises(Refused, match=f"{wrong} cannot be right"):
        _shim(**figures)


@pytest.mark.parametrize(
    ("measured", "direction"),
    [("0.19", Direction.LOOSER), ("0.20", Direction.NONE), ("0.21", Direction.TIGHTER)],
)
def test_the_screw_goes_the_way_the_lash_must(measured: str, direction: Direction) -> None:
    turn = _turn(measured)
    assert turn.direction is direction
    assert turn.turns == turn.degrees / 360 == Decimal("0.20") - Decimal(measured)


def test_a_screw_at_the_valve_with_lash_at_the_cam_turns_more_by_the_ratio() -> None:
    at_cam = screw_turn(
        Decimal("0.30"),
        Decimal("0.20"),
        Decimal(1),
        rocker_ratio=Decimal("1.3"),
        screw_at=ScrewAt.VALVE,
        lash_at=LashAt.CAM,
    )
    assert at_cam.turns == Decimal("-0.13")


@pytest.mark.parametrize(
    ("figures", "wrong"),
    [
        ({"measured": "-0.01"}, "measured lash -0.01 mm"),
        ({"target": "6"}, "target lash 6 mm"),
        ({"pitch": "0"}, "thread pitch 0 mm"),
        ({"ratio": "11"}, "rocker ratio 11"),
    ],
)
def test_a_figure_of_a_screw_that_cannot_be_right_is_refused_by_name(figures: dict[str, str], wrong: str) -> None:
    with pytest.raises(Refused, match=f"{wrong} cannot be right"):
        _turn(**figures)
