"""What stands around every screen: views and day above, a notice and the keys below."""

from collections.abc import Iterable, Iterator
from datetime import date
from typing import TYPE_CHECKING, Any, ClassVar, cast

from textual.content import Content
from textual.screen import Screen
from textual.widget import Widget

from fleetcare.tui.actions import actions_of, bindings, called
from fleetcare.tui.widgets.long_list import LongList
from fleetcare.tui.widgets.text import columns_of, fit, wrap

if TYPE_CHECKING:
    from fleetcare.context import Context
    from fleetcare.tui.app import FleetApp

VIEWS = (("due", "1 Due"), ("engines", "2 Engines"), ("findings", "3 Findings"), ("rules", "4 Rules"))
_WEEKDAYS = ("Mon", "Tue", "Wed", "Thu", "Fri", "Sat", "Sun")
_MOST_LINES = 3


def say_day(day: date) -> str:
    """Say a day with its weekday, whatever the computer's language."""
    return f"{_WEEKDAYS[day.weekday()]} {day.isoformat()}"


class TopBar(Widget):
    """The views, the one in front marked, and whose shop on which day."""

    def __init__(self) -> None:
        super().__init__()
        self._words, self._day = "", ""

    def tell(self, day: str, words: str = "") -> None:
        """Put a day at the right end, and before it some words, of which only what has room is shown."""
        self._words, self._day = words, day
        self.refresh()

    def render(self) -> Content:
        """Draw the bar."""
        parts = []
        for view, title in VIEWS:
            style = "bold reverse" if view == self.app.current_mode else "bold"
            parts.append(Content.from_markup(f"[{style} @click=app.view('{view}')] {title} [/]"))
        left = Content.assemble(" ", *parts)
        day = f"  {self._day} "
        room = max(self.size.width - left.cell_length - columns_of(day) - 1, 0)
        return Content.assemble(left, " ", fit(self._words, room, to_right=True), day)


class Notice(Widget):
    """One thing said, until another is: what was done, or what is wrong and how to mend it."""

    def __init__(self) -> None:
        super().__init__()
        self._lines: tuple[str, ...] = ()
        self.is_about_reading = False

    def say(self, *lines: str, is_wrong: bool = False, is_about_reading: bool = False) -> None:
        """Say something; nothing at all takes the notice away. What is about reading ends with the next reading."""
        self.is_about_reading = is_about_reading
        if lines != self._lines:
            self._lines = lines
            self.set_class(is_wrong, "-wrong")
            self.display = bool(lines)
            self.refresh(layout=True)

    def get_content_height(self, container: Any, viewport: Any, width: int) -> int:
        """As high as its text, up to a few lines."""
        return len(self._wrapped(width))

    def render(self) -> Content:
        """Draw the text, literally."""
        return Content("\n".join(self._wrapped(self.size.width)))

    def _wrapped(self, width: int) -> list[str]:
        lines = [line for said in self._lines for line in wrap(said, max(width, 1))]
        over = lines[_MOST_LINES - 1 :]
        return [*lines[: _MOST_LINES - 1], fit(" ".join(over), max(width, 1)).rstrip()] if over else lines


class KeyLine(Widget):
    """The keys of a place, as many as there is room for; help and quit always."""

    def __init__(self, place: str) -> None:
        super().__init__()
        self._actions = [action for action in actions_of(place) if action.in_foot]

    def render(self) -> Content:
        """Draw the keys; each can be clicked."""
        entries = [(f"{action.keys_said[0]} ", action.word, called(action)) for action in self._actions]
        room = self.size.width - 2
        while entries and sum(columns_of(key + word) + 2 for key, word, _ in entries) > room + 2 and len(entries) > 2:
            entries.pop(-3)
        parts = [
            Content.from_markup(f"[@click={call}][bold $primary]$key[/]$word[/]  ", key=key, word=word)
            for key, word, call in entries
        ]
        return Content.assemble(" ", *parts)


class FramedScreen(Screen[Any]):
    """A screen with the frame around its body. `place` names its actions."""

    place: ClassVar[str] = ""
    AUTO_FOCUS = "LongList, Prose"

    def __init_subclass__(cls, **settings: Any) -> None:
        cls.BINDINGS = bindings(cls.place)
        super().__init_subclass__(**settings)

    @property
    def fleet_app(self) -> "FleetApp":
        """The app, as what it is."""
        return cast("FleetApp", self.app)

    @property
    def context(self) -> "Context":
        """The shop's database and day."""
        return self.fleet_app.context

    def body(self) -> Iterable[Widget]:
        """Give the widgets between top bar and notice."""
        raise NotImplementedError

    def compose(self) -> Iterator[Widget]:
        """Put the frame around the body."""
        yield TopBar()
        yield from self.body()
        yield Notice()
        yield KeyLine(self.place)

    @property
    def notice(self) -> Notice:
        """Where something can be said."""
        return self.query_one(Notice)

    @property
    def holds_keys(self) -> bool:
        """Whether what is typed now waits: the screen stores something, or has nothing yet to type it in."""
        return False

    def action_hush(self) -> None:
        """Take away what was said."""
        self.notice.say()

    def action_to_group(self, step: int) -> None:
        """Go to another heading of the list."""
        self.query_one(LongList).action_to_section(step)

    def action_back(self) -> None:
        """Go back to the screen before."""
        self.app.pop_screen()
