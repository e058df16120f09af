"""How it looks: two themes of true colour and one of the terminal's own sixteen, and a tone for every state.

Colours follow IEC 60073: red danger, yellow abnormal, green normal, blue a person must act; they never stand alone.
"""

from rich.style import Style
from textual.theme import BUILTIN_THEMES, Theme
from textual.widget import Widget

TONES = ("overdue", "due", "near", "probably", "unset", "before-return", "clear", "quiet", "strong", "wrong")
"""Tones a cell may have: one for each group of the due list, and a few for plain text."""

TONE_CLASSES = frozenset(f"tone--{tone}" for tone in TONES)
"""Component classes of a widget that draws in tones; the style sheet says how each looks."""

MARKS = {
    "overdue": "!!",
    "due": "!",
    "near": ">",
    "probably": "~",
    "unset": "?",
    "before-return": "=",
    "clear": "-",
}
"""The mark of each group, in characters every keyboard and terminal has."""


def tone_of(group: str) -> str:
    """Name the tone and mark of a group of the due list."""
    return {"probably due by estimate": "probably", "before return": "before-return"}.get(group, group)


BAY = Theme(
    name="bay",
    primary="#8fb3c7",
    background="#14191c",
    surface="#14191c",
    panel="#20282d",
    foreground="#d5dbdd",
    error="#ff7b72",
    warning="#e8c34a",
    success="#83c08a",
    accent="#7db7ff",
    dark=True,
    variables={"quiet": "#9fadb4", "cursor": "#263a46", "near": "#d9c27e", "probably": "#cfa56b"},
)
OFFICE = Theme(
    name="office",
    primary="#2f5f78",
    background="#f6f5f0",
    surface="#f6f5f0",
    panel="#e6e5dc",
    foreground="#23292c",
    error="#b3261e",
    warning="#7a5700",
    success="#2c6b34",
    accent="#1253a4",
    dark=False,
    variables={"quiet": "#4d565b", "cursor": "#cfdfe8", "near": "#6b5716", "probably": "#7d4f12"},
)
SIXTEEN = Theme(
    name="sixteen",
    ansi=True,
    primary="ansi_cyan",
    background="ansi_default",
    surface="ansi_default",
    panel="ansi_default",
    foreground="ansi_default",
    error="ansi_bright_red",
    warning="ansi_yellow",
    success="ansi_green",
    accent="ansi_bright_blue",
    variables=BUILTIN_THEMES["ansi-dark"].variables
    | {"quiet": "ansi_default", "cursor": "ansi_default", "near": "ansi_yellow", "probably": "ansi_yellow"},
)


def tone_style(widget: Widget, tone: str) -> Style:
    """Give what a tone changes about the plain style of a widget that has TONE_CLASSES; nothing for no tone."""
    return widget.get_component_rich_style(f"tone--{tone}", partial=True) if tone else Style.null()
