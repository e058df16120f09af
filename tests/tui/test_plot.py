"""A plot in characters: what is in sight, what stands over what, and what lies along."""

from fleetcare.tui.widgets.plot import Line, Mark, Plot, draw, say_day


def drawn(plot: Plot, width: int = 60, height: int = 12) -> list[str]:
    return ["".join(text for text, _ in parts) for parts in draw(plot, width, height)]


def a_plot(**changes: object) -> Plot:
    """A line that falls from 0.45 at 1000 h to 0.42 at 2000 h."""
    facts: dict[str, object] = {
        "lines": [Line([(1000, 0.45), (2000, 0.42)])],
        "levels": [],
        "legend": "a gap",
        "unit": "mm",
        "say": lambda along: f"{along:.0f} h",
        "places": 2,
    }
    return Plot(**(facts | changes))  # type: ignore[arg-type]


def test_limits_and_settings_are_in_sight_wherever_the_points_are() -> None:
    lines = drawn(a_plot(limits=[(0.40, "least 0.40"), (0.50, "most 0.50")], settings=[(0.46, "set 0.46")]))
    assert lines[0].startswith(" 0.50 mm┤╌╌╌")
    assert lines[0].rstrip().endswith("most 0.50")
    assert lines[9].startswith(" 0.40 mm┤╌╌╌")
    assert lines[9].rstrip().endswith("least 0.40")
    (at,) = [line for line in lines if line.rstrip().endswith("◂ set 0.46")]
    assert "╌" not in at


def test_a_level_shows_only_where_the_points_reach() -> None:
    assert not [line for line in drawn(a_plot(levels=[(0.60, "far")])) if "far" in line]
    assert [line for line in drawn(a_plot(levels=[(0.43, "near")])) if "near ╌" in line]


def test_a_bar_leads_from_a_mark_to_the_value_before_it() -> None:
    lines = drawn(a_plot(lines=[], marks=[Mark(1000, 0.40, "○"), Mark(1000, 0.50, "●", since=0.40)]))
    column = lines[0].index("●")
    assert lines[9][column] == "○"
    assert {line[column] for line in lines[1:9]} == {"│"}


def test_of_two_marks_in_one_place_the_later_stands() -> None:
    marks = [Mark(1000, 0.45, "○"), Mark(1000, 0.45, "●", since=0.45)]
    lines = drawn(a_plot(lines=[], marks=marks, limits=[(0.40, "least")]))
    assert sum(line.count("●") for line in lines) == 1
    assert not any("○" in line for line in lines)


def test_what_lies_along_is_said_at_both_ends_and_reaches_as_far_as_is_asked() -> None:
    assert drawn(a_plot())[10].split() == ["1000", "h", "2000", "h"]
    assert drawn(a_plot(until=3000))[10].split() == ["1000", "h", "3000", "h"]
    assert drawn(a_plot(until=1500))[10].split() == ["1000", "h", "2000", "h"]


def test_a_place_along_is_marked_and_said_where_there_is_room() -> None:
    lines = drawn(a_plot(here=1500))
    assert lines[10].split() == ["1000", "h", "1500", "h", "2000", "h"]
    assert any("┊" in line for line in lines)
    assert "1010" not in drawn(a_plot(here=1010))[10]


def test_days_are_said_as_days() -> None:
    assert say_day(739737) == "2026-05-01"  # date(2026, 5, 1).toordinal()


def test_a_single_value_has_a_place_and_no_room_is_said() -> None:
    assert any("○" in line for line in drawn(a_plot(lines=[], marks=[Mark(1000, 0.45, "○")])))
    assert drawn(a_plot(), width=29)[0].startswith(" no room for the plot")
    assert drawn(a_plot(lines=[]))[0].startswith(" nothing read yet")
