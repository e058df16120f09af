"""Screens without a terminal: an app on a small yard, keys pressed, and what stands on the screen then."""

import asyncio
import contextlib
import io
import shlex
import shutil
from collections.abc import AsyncIterator, Awaitable, Callable
from contextlib import AbstractAsyncContextManager, asynccontextmanager
from pathlib import Path

import pytest
from textual._context import active_app
from textual.pilot import Pilot
from textual.screen import Screen
from textual.worker import WorkerCancelled

from fleetcare.cli.main import run
from fleetcare.context import Context
from fleetcare.tui.app import FleetApp
from tests.cli.conftest import no_screens
from tests.conftest import NOW, counted_uids
from tests.tui.yard import BENCH, LINES

TODAY = "2026-05-01"

_MOST_TURNS = 100_000
_QUIET_TURNS = 3
"""Turns of the event loop without a message: one sent from a thread needs two to arrive. Never more than the most."""

Settle = Callable[[Pilot[None]], Awaitable[None]]
Grow = Callable[[Path], None]
Grown = Callable[[Path, Grow, Path], Path]
Opened = Callable[..., AbstractAsyncContextManager[Pilot[None]]]


def type_in(db: Path, *words: str) -> None:
    """Type a command line, as somebody in another window would."""
    when = [] if "--as-of" in words else ["--as-of", TODAY]
    said = io.StringIO()
    with contextlib.redirect_stdout(said), contextlib.redirect_stderr(said):
        status = run([*words, "--db", str(db), *when], no_screens)
    assert status == 0, f"{words}: {said.getvalue()}"


@pytest.fixture(autouse=True)
def terminal(monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    """The same terminal for every test: true colour, whatever the one outside is; files go to the test's own folder.

    A key has been dealt with once no message waits any more, rather than once the process is idle.
    """
    monkeypatch.chdir(tmp_path)
    monkeypatch.setenv("TERM", "xterm-256color")
    monkeypatch.setenv("COLORTERM", "truecolor")
    monkeypatch.delenv("NO_COLOR", raising=False)
    monkeypatch.setattr("textual.app.wait_for_idle", until_quiet)


@pytest.fixture(scope="session")
def made_yard(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The small yard, entered once a worker by its command lines; never written to."""
    return enter(tmp_path_factory.mktemp("yard") / "yard.db", LINES)


@pytest.fixture(scope="session")
def made_bench(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The yard of engines whose valves are due, entered once a worker; never written to."""
    return enter(tmp_path_factory.mktemp("bench") / "bench.db", BENCH)


def enter(path: Path, lines: str) -> Path:
    """Enter command lines into a database."""
    for line in filter(None, lines.splitlines()):
        type_in(path, *shlex.split(line))
    return path


@pytest.fixture(scope="session")
def grown(tmp_path_factory: pytest.TempPathFactory) -> Grown:
    """Give a copy of a yard with something added to it, which is added once a worker."""
    kept: dict[Grow, Path] = {}

    def grow(yard: Path, add: Grow, to: Path) -> Path:
        if add not in kept:
            kept[add] = Path(shutil.copy(yard, tmp_path_factory.mktemp("grown") / yard.name))
            add(kept[add])
        return Path(shutil.copy(kept[add], to))

    return grow


@pytest.fixture
def bench(made_bench: Path, tmp_path: Path) -> Context:
    """The yard of engines whose valves are due, of the test's own, on 1 May 2026."""
    path = shutil.copy(made_bench, tmp_path / "bench.db")
    return Context(str(path), clock=lambda: NOW, uids=counted_uids())


@pytest.fixture
def demo(tmp_path: Path) -> Context:
    """The demo fleet as it is committed, a copy of the test's own, on the day it stands on."""
    path = shutil.copy(Path(__file__).parents[2] / "demo_fleet.db", tmp_path / "demo.db")
    return Context(str(path), clock=lambda: NOW, uids=counted_uids())


@pytest.fixture
def found(bench: Context, made_bench: Path, grown: Grown) -> Context:
    """The bench with a cylinder of B-6 low, and a good compression of B-1."""
    grown(made_bench, press_two, Path(bench.path))
    return bench


def press_two(db: Path) -> None:
    """Test the compression of two engines of the bench."""
    for tag, values in (("B-6", ["25", "25", "17", "25", "24", "25"]), ("B-1", ["9"])):
        lines = [f"pressure,{number},dry,{value},bar" for number, value in enumerate(values, 1)]
        sheet = db.with_name(f"{tag}.csv")
        sheet.write_text("\n".join(["quantity,point,phase,value,unit", *lines]))
        type_in(db, "measure", "compression", tag, str(sheet), "--on", "2026-04-20", "--by", "Fenn")


@pytest.fixture
def db(made_yard: Path, tmp_path: Path) -> Path:
    """The small yard, of the test's own."""
    return Path(shutil.copy(made_yard, tmp_path / "yard.db"))


_MOST_ROUNDS = 100  # what is begun begins something else in turn, but not for ever


async def settle_down(pilot: Pilot[None]) -> None:
    """Wait until all that was begun is done: workers, the messages they sent, what those began in turn, and its drawing."""
    for _ in range(_MOST_ROUNDS):
        with contextlib.suppress(WorkerCancelled):  # as a newer one took its place, or its screen went
            await pilot.app.workers.wait_for_complete()
        await pilot._wait_for_screen()
        for screen in pilot.app.screen_stack:
            screen._on_timer_update()
        await until_quiet()
        if all(worker.is_finished for worker in pilot.app.workers) and all(map(is_drawn, pilot.app.screen_stack)):
            return
    raise AssertionError(f"not done after {_MOST_ROUNDS} rounds")


def is_drawn(screen: Screen[object]) -> bool:
    """Whether nothing on a screen in sight has still to be laid out or drawn, and nothing waits for that.

    One behind another asks to be painted as a whole for ever: that one does it.
    """
    is_whole = screen._repaint_required and screen is screen.app.screen
    still = screen._layout_required or screen._scroll_required or screen._recompose_required or is_whole
    return not screen.is_current or not (still or screen._dirty_widgets or screen._callbacks)


async def until_quiet(min_sleep: float = 0, max_sleep: float = 0) -> None:
    """Wait until no message waits in any queue of the app, or it fell over. Takes what the library's own wait takes.

    That one sleeps until the process used under 1 ms in 20 ms, at a key twice: most of the time of these tests, and more
    where other processes take theirs.
    """
    app, quiet = active_app.get(), 0
    for _ in range(_MOST_TURNS):
        await asyncio.sleep(0)
        if quiet == _QUIET_TURNS or not app.is_running or app._exception is not None:
            return
        pumps = (app, *(widget for screen in app.screen_stack for widget in screen.walk_children(with_self=True)))
        quiet = 0 if any(pump.message_queue_size or pump._next_callbacks for pump in pumps) else quiet + 1


@pytest.fixture
def settle() -> Settle:
    """Wait until all that was begun is done."""
    return settle_down


@pytest.fixture
def app(ctx: Context) -> FleetApp:
    """The screens on the test's database."""
    return FleetApp(ctx)


@pytest.fixture
def opened(ctx: Context) -> Opened:
    """Open the screens in a size, press keys, and wait after each until all is done."""

    @asynccontextmanager
    async def open_screens(
        *keys: str, size: tuple[int, int] = (80, 24), context: Context | None = None
    ) -> AsyncIterator[Pilot[None]]:
        app = FleetApp(context or ctx)
        async with app.run_test(size=size) as pilot:
            await settle_down(pilot)
            await press(pilot, *keys)
            yield pilot

    return open_screens


async def press(pilot: Pilot[None], *keys: str) -> None:
    """Press keys, and wait after each until all is done."""
    for key in keys:
        await pilot.press(key)
        await settle_down(pilot)


def seen(pilot: Pilot[None]) -> list[str]:
    """Give what stands on the screen, line by line."""
    strips = pilot.app.screen._compositor.render_strips(pilot.app.size)
    return ["".join(segment.text for segment in strip).rstrip() for strip in strips]


def line_with(pilot: Pilot[None], *words: str) -> str:
    """Give the one line on the screen that holds all the words."""
    lines = seen(pilot)
    found = [line for line in lines if all(word in line for word in words)]
    assert len(found) == 1, "\n".join([f"{len(found)} lines hold {words} in", *lines])
    return found[0]
