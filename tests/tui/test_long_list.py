"""The long list: draws what is visible, keeps its place, and shows text as it is."""

from collections.abc import Callable, Sequence

import pytest
from rich.cells import cell_len
from textual.app import App, ComposeResult

from fleetcare.tui.looks import BAY
from fleetcare.tui.widgets.columns import Column, Section, share
from fleetcare.tui.widgets.long_list import LongList
from tests.tui.conftest import press, seen, settle_down

Row = tuple[str, str]


def column(title: str, cell: Callable[[Row], str], least: int, most: int, drop: int = 0) -> Column[Row]:
    """A column of these rows."""
    return Column(title, cell, least, most, drop=drop)


COLUMNS = (
    column("TAG", lambda row: row[0], 4, 12),
    column("TASK", lambda row: row[1], 6, 30),
)


class ListApp(App[None]):
    """Nothing but a list."""

    CSS = """
    LongList { height: 1fr; }
    .long-list--cursor { text-style: reverse; }
    """

    def __init__(self, sections: Sequence[Section[Row]], empty: str = "") -> None:
        super().__init__()
        self.register_theme(BAY)
        self.theme = BAY.name
        self.sections, self.empty = sections, empty
        self.moved = 0

    def compose(self) -> ComposeResult:
        """The list."""
        yield LongList(COLUMNS, lambda row: row[0])

    def on_mount(self) -> None:
        """Fill it."""
        self.rows.show(self.sections, self.empty)

    def on_long_list_moved(self) -> None:
        """Count."""
        self.moved += 1

    @property
    def rows(self) -> "LongList[Row]":
        """The list."""
        return self.query_one(LongList)


def many(count: int, prefix: str = "P") -> list[Row]:
    """Give rows P-0, P-1, ..."""
    return [(f"{prefix}-{n}", f"task {n}") for n in range(count)]


async def test_only_rows_in_sight_and_a_fixed_number_of_samples_are_drawn() -> None:
    drawn: set[str] = set()

    def cell(row: Row) -> str:
        drawn.add(row[0])
        return row[0]

    class Watched(ListApp):
        def compose(self) -> ComposeResult:
            yield LongList((column("TAG", cell, 4, 12),), lambda row: row[0])

    async with Watched([Section("", many(100_000))]).run_test(size=(40, 12)) as pilot:
        await settle_down(pilot)
        assert len(drawn) < 130


async def test_the_heading_of_the_topmost_row_stays_in_sight() -> None:
    app = ListApp([Section("FIRST", many(30)), Section("SECOND", many(30, "Q"))])
    async with app.run_test(size=(40, 10)) as pilot:
        await press(pilot, "pagedown", "pagedown")
        assert seen(pilot)[1].split() == ["FIRST", "30"]
        await press(pilot, "end")
        assert seen(pilot)[1].split() == ["SECOND", "30"]
        assert seen(pilot)[9].split() == ["▌Q-29", "task", "29"]


async def test_keys_move_by_rows_and_pages_and_stop_at_the_ends() -> None:
    app = ListApp([Section("FIRST", many(30)), Section("SECOND", many(30, "Q"))])
    async with app.run_test(size=(40, 10)) as pilot:
        for key, tag in (
            ("up", "P-0"),
            ("down", "P-1"),
            ("pagedown", "P-8"),
            ("pageup", "P-1"),
            ("end", "Q-29"),
            ("down", "Q-29"),
            ("home", "P-0"),
        ):
            await press(pilot, key)
            assert app.rows.current is not None
            assert app.rows.current[0] == tag, key


@pytest.mark.parametrize("keys", [("down",) * 25, ("end", *("up",) * 40)], ids=["down", "up"])
async def test_the_row_under_the_cursor_is_always_in_sight(keys: tuple[str, ...]) -> None:
    app = ListApp([Section("FIRST", many(30)), Section("SECOND", many(30, "Q"))])
    async with app.run_test(size=(40, 8)) as pilot:
        for key in keys:
            await pilot.press(key)
            assert app.rows.current is not None
            assert [line for line in seen(pilot) if line.startswith(f"▌{app.rows.current[0]} ")]


async def test_the_cursor_stays_on_its_row_and_the_row_where_it_is_when_rows_come_anew() -> None:
    app = ListApp([Section("", many(50))])
    async with app.run_test(size=(40, 10)) as pilot:
        await press(pilot, "pagedown", "pagedown", "down")
        assert app.rows.current is not None
        tag = app.rows.current[0]
        (before,) = [n for n, line in enumerate(seen(pilot)) if line.startswith(f"▌{tag} ")]
        app.rows.show([Section("", [*many(7, "NEW"), *many(50)])])
        await settle_down(pilot)
        assert app.rows.current[0] == tag
        assert seen(pilot)[before].startswith(f"▌{tag} ")


async def test_a_list_scrolled_away_from_its_cursor_stays_where_it_was_scrolled_to() -> None:
    app = ListApp([Section("", many(50))])
    async with app.run_test(size=(40, 10)) as pilot:
        await settle_down(pilot)
        app.rows.scroll_to(y=20, animate=False, immediate=True)
        await settle_down(pilot)
        assert seen(pilot)[1].split()[0] == "P-20"
        app.rows.show([Section("", [*many(7, "NEW"), *many(50)])])
        await settle_down(pilot)
        assert seen(pilot)[1].split()[0] == "P-20"
        await press(pilot, "down")
        assert [line for line in seen(pilot) if line.startswith("▌P-1 ")]


async def test_where_its_row_is_gone_the_cursor_stays_at_its_place() -> None:
    app = ListApp([Section("", many(50))])
    async with app.run_test(size=(40, 10)) as pilot:
        await press(pilot, "down", "down")
        app.rows.show([Section("", [row for row in many(50) if row[0] != "P-2"])])
        await settle_down(pilot)
        assert app.rows.current == ("P-3", "task 3")


async def test_the_same_rows_again_change_nothing_and_tell_nothing() -> None:
    app = ListApp([Section("", many(50))])
    async with app.run_test(size=(40, 10)) as pilot:
        await settle_down(pilot)
        told = app.moved
        app.rows.show([Section("", many(50))])
        await settle_down(pilot)
        assert app.moved == told


async def test_a_row_said_in_other_words_is_told_of_without_a_key() -> None:
    app = ListApp([Section("", [("P-1", "oil")])])
    async with app.run_test(size=(40, 10)) as pilot:
        await settle_down(pilot)
        told = app.moved
        app.rows.show([Section("", [("P-1", "oil and filter")])])
        await settle_down(pilot)
        assert app.moved > told
        assert "oil and filter" in seen(pilot)[1]


async def test_a_click_puts_the_cursor_on_a_row_and_on_headings_does_nothing() -> None:
    app = ListApp([Section("FIRST", many(3)), Section("SECOND", many(3, "Q"))])
    async with app.run_test(size=(40, 12)) as pilot:
        await pilot.click(LongList, offset=(5, 4))
        assert app.rows.current == ("P-2", "task 2")
        await pilot.click(LongList, offset=(5, 5))
        assert app.rows.current == ("P-2", "task 2")
        await pilot.click(LongList, offset=(5, 6))
        assert app.rows.current == ("Q-0", "task 0")


async def test_markup_and_control_characters_are_shown_as_they_are() -> None:
    app = ListApp([Section("[b]HEAD[/b]", [("[/b]", "[red]oil\x1b[2J\n\u202e")])])
    async with app.run_test(size=(60, 6)) as pilot:
        await settle_down(pilot)
        assert seen(pilot)[1].strip() == "[b]HEAD[/b]  1"
        assert "[/b]" in seen(pilot)[2]
        assert "[red]oil\\x1b[2J\\n\\u202e" in seen(pilot)[2]


async def test_wide_characters_keep_the_columns_in_line() -> None:
    app = ListApp([Section("", [("水-1", "oil"), ("P-1", "oil"), ("水水水水水水水", "oil")])])
    async with app.run_test(size=(40, 6)) as pilot:
        await settle_down(pilot)
        places = {cell_len(line[: line.index("oil")]) for line in seen(pilot)[1:4]}
        assert places == {1 + 12 + 2}


async def test_what_is_too_long_is_cut_with_a_mark() -> None:
    app = ListApp([Section("", [("P-1", "a task with a name longer than thirty columns")])])
    async with app.run_test(size=(60, 6)) as pilot:
        await settle_down(pilot)
        assert "a task with a name longer tha…" in seen(pilot)[1]


async def test_an_empty_list_says_why() -> None:
    app = ListApp([], "Nothing here.\nAdd something.")
    async with app.run_test(size=(40, 8)) as pilot:
        await press(pilot, "down", "end", "pageup")
        assert seen(pilot)[2].strip() == "Nothing here."
        assert seen(pilot)[3].strip() == "Add something."


def test_where_it_is_narrow_columns_are_left_out_in_their_order() -> None:
    columns = (
        column("TAG", lambda row: row[0], 6, 6),  # takes the 3 it needs
        column("A", lambda row: "x" * 10, 10, 10, drop=1),
        column("B", lambda row: "x" * 10, 10, 10, drop=2),
    )
    rows = many(3)
    titles = [[column.title for column, _ in share(columns, rows, width)] for width in (27, 26, 15, 14, 1)]
    assert titles == [["TAG", "A", "B"], ["TAG", "A"], ["TAG", "A"], ["TAG"], ["TAG"]]


def test_columns_are_as_wide_as_their_rows_need_the_first_one_served_first() -> None:
    columns = (
        column("T", lambda row: row[0], 4, 20),
        column("TASK", lambda row: "x" * 30, 6, 40),
    )
    assert [wide for _, wide in share(columns, many(3), 80)] == [3, 30]
    assert [wide for _, wide in share(columns, many(3), 25)] == [3, 20]
