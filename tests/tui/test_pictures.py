"""Pictures of the screens, in fixed sizes, on a fixed day, in fixed colours: what people see does not change unseen.

After a change that is meant, WRITE_PICTURES=1 pytest tests/tui/test_pictures.py draws them anew; look at each.
"""

import os
import re
from collections.abc import Mapping
from pathlib import Path
from typing import NamedTuple

import pytest

from fleetcare.context import Context
from tests.tui.conftest import Grown, Opened, seen
from tests.tui.wear_yard import wear

PICTURES = Path(__file__).with_name("pictures")
SMALL, LARGE = (80, 24), (120, 40)


class Picture(NamedTuple):
    """What is pressed, in which size, what the terminal says of itself, and the fixture of another yard than the small one."""

    size: tuple[int, int]
    keys: tuple[str, ...] = ()
    terminal: Mapping[str, str] = {}
    yard: str = ""


def _typed(text: str) -> tuple[str, ...]:
    """Give the keys that type a text."""
    return tuple("space" if letter == " " else letter for letter in text)


SCREENS = {
    "due": Picture(SMALL),
    "due-large": Picture(LARGE, ("down",)),
    "due-daylight": Picture(SMALL, ("d",)),
    "due-sixteen-colours": Picture(SMALL, (), {"COLORTERM": "", "TERM": "xterm"}),
    "due-no-colour": Picture(SMALL, (), {"NO_COLOR": "1"}),
    "due-narrowed": Picture(SMALL, ("slash", *"air", "enter")),
    "due-finding": Picture(SMALL, ("slash", *"oil")),
    "due-by-day-large": Picture(LARGE, ("s",)),
    "narrow": Picture(SMALL, ("f", "down", "enter")),
    "keys": Picture(SMALL, ("question_mark",)),
    "working": Picture(SMALL, ("down", "enter")),
    "engines-large": Picture(LARGE, ("2",)),
    "plate": Picture(SMALL, ("down", "e")),
    "meters": Picture(SMALL, ("down", "e", "m")),
    "meters-large": Picture(LARGE, ("down", "e", "m")),
    "lines": Picture(SMALL, ("e", "l")),
    "history": Picture(SMALL, ("e", "h", "down")),
    "log": Picture(SMALL, ("down", "w", *"30", "ctrl+s")),
    "log-no-colour": Picture(SMALL, ("down", "w", *"30x", "ctrl+s"), {"NO_COLOR": "1"}),
    "log-large": Picture(LARGE, ("down", "w", *"305", "enter", *"f")),
    "entry": Picture(SMALL, ("i", *_typed("ps1 oil 310 fenn"))),
    "entry-asked": Picture(SMALL, ("down", "i", *_typed("ps1 oil 29 fenn"), "down"), {"NO_COLOR": "1"}),
    "return": Picture(SMALL, ("x", "r")),
    "more": Picture(SMALL, ("x",)),
    "edit": Picture(SMALL, ("down", "x", "e", *("down",) * 10, *"six", "ctrl+s")),
    "schedule": Picture(SMALL, ("down", "x", "d", *"diesel-g", "right")),
    "round": Picture(SMALL, ("2", "o", *"Fenn", "enter", *"25", "enter", *"4811", "ctrl+s")),
}


def _sheet(engine: str, *keys: str, size: tuple[int, int] = SMALL, terminal: Mapping[str, str] = {}) -> Picture:
    """Give the picture of the lash sheet of an engine of the bench, with some values in it."""
    down = ("down",) * ("B-1", "B-2", "B-4", "B-6", "B-8").index(engine)
    return Picture(size, (*down, "w", *"1000", "enter", *"Fenn", "ctrl+s", *keys), terminal, "bench")


_BLADES = (*"25", "enter", "enter", *"36", "enter", *"45", "enter", *"18")
SCREENS |= {
    "lash-single": _sheet("B-1", *"25", "enter", "enter", *"38", "enter", "enter", "ctrl+s"),
    "lash-opposed": _sheet("B-2", *"5", "enter", "enter", *"12", "enter"),
    "lash-four-valves": _sheet("B-4", *"25", "enter", "enter", *"15", "enter", *"2.75", "enter"),
    "lash-six": _sheet("B-6", *_BLADES),
    "lash-six-slip": _sheet("B-6", *"3.0", "enter"),
    "lash-six-no-colour": _sheet("B-6", *_BLADES, terminal={"NO_COLOR": "1"}),
    "lash-eight": _sheet("B-8", *_BLADES),
    "lash-eight-large": _sheet("B-8", *_BLADES, size=LARGE),
}

_CLOSING = ("2", "slash", *"ps-03", "enter", "enter", "g", *("down",) * 7)
SCREENS |= {
    "trend-closing": Picture(SMALL, _CLOSING, {"NO_COLOR": "1"}, "demo"),
    "trend-closing-large": Picture(LARGE, _CLOSING, yard="demo"),
}

_WORN = ("2", "slash", *"ps-1", "enter", "enter")
SCREENS |= {
    "trend-compression": Picture(SMALL, (*_WORN, *"kkk"), {"NO_COLOR": "1"}, "worn"),
    "trend-oil": Picture(SMALL, (*_WORN, *"eeeeeeee"), yard="worn"),
}


def _measured(key: str, *texts: str, size: tuple[int, int] = SMALL) -> Picture:
    """Give the picture of a sheet the rule book judges, of the inline six of the bench, with values in it."""
    typed = [letter for text in texts for letter in (*text, "enter")]
    return Picture(size, ("down", "down", "down", "x", key, *"1000", "enter", *"Fenn", "ctrl+s", *typed), yard="bench")


_OIL = ("240", "0", "102", "14.1", "2.2", "2.4", "", "0.25", "1.1", "0.9", "ND", "", "12", "9", "", "131", "2", "24")
SCREENS |= {
    "compression": _measured("c", "25bar", "25", "17", "25", "24", "25", "25", "25", "17.2"),
    "leakdown": _measured("a", "80psi", "72psi", "58", "ex", "74"),
    "run": _measured("u", "test", "", "20", "20"),
    "spot": _measured("p", "90", "104", "", "1.2"),
    "oil": _measured("o", *_OIL),
    "oil-large": _measured("o", *_OIL, size=LARGE),
}
SCREENS |= {
    "findings": Picture(SMALL, ("3",), yard="found"),
    "finding": Picture(SMALL, ("3", "enter"), yard="found"),
    "rules": Picture(SMALL, ("4", "down"), yard="found"),
}


@pytest.fixture
def worn(ctx: Context, made_yard: Path, grown: Grown, db: Path) -> Context:
    """The small yard, PS-1 of which was tested and sampled for two years."""
    grown(made_yard, wear, db)
    return ctx


@pytest.mark.parametrize("name", SCREENS)
async def test_a_screen_looks_as_it_did(
    opened: Opened, request: pytest.FixtureRequest, monkeypatch: pytest.MonkeyPatch, name: str
) -> None:
    picture = SCREENS[name]
    for variable, value in picture.terminal.items():
        monkeypatch.setenv(variable, value)
    context = request.getfixturevalue(picture.yard) if picture.yard else None
    async with opened(*picture.keys, size=picture.size, context=context) as pilot:
        drawn = without_fonts(pilot.app.export_screenshot(title=f"fleetcare, {name}"))
        text = "\n".join(seen(pilot))
    path = PICTURES / f"{name}.svg"
    if os.environ.get("WRITE_PICTURES"):
        path.write_text(drawn, encoding="utf-8")
    assert path.read_text(encoding="utf-8") == drawn, f"{name} looks different now:\n{text}"


def test_every_picture_kept_is_one_that_is_compared() -> None:
    assert {path.stem for path in PICTURES.iterdir()} == set(SCREENS)


def without_fonts(svg: str) -> str:
    """Leave out the fonts a picture would fetch from elsewhere; it is shown in the fixed-width one at hand."""
    return re.sub(r"\s*@font-face \{[^}]*\}", "", svg)
