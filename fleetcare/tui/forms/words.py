"""What is said for a command line, said for the screens: options by the labels of their fields, commands by keys."""

import re
from collections.abc import Mapping

_OPTION = re.compile(r"--([a-z][a-z-]+)(?: [A-Z][A-Z_|:]*)?")

_ITEM = "fleetcare (?:engine|machine)"
_PHRASES = tuple(
    (re.compile(pattern), words)
    for pattern, words in (
        (rf"add it anew with {_ITEM} add", "add it anew: 2, then a"),
        (rf"see {_ITEM} list", "see the list of engines: 2"),
        ("add one with fleetcare machine add", "add one: 2, then m"),
        ("add one with fleetcare task add .+ --every INTERVAL", "add one: x, then t"),
        (rf"add one (?:by editing|with {_ITEM} edit) (.+?) (?:with )?--meter \S+", r"add one to \1: x, then e"),
        (
            rf"give it with {_ITEM} edit (.+) --in-service DATE --start-at VALUE",
            r"give first day and figure of \1 first: x, then e",
        ),
        (rf"give them first: {_ITEM} edit (.+) --meter-digits \S+", r"give the digits of \1 first: x, then e"),
        (rf"mend its valves with {_ITEM} edit", "mend its valves: x, then e"),
        (
            "name (them|another): fleetcare setting supervisors .+",
            r"name \1 on the command line, in the setting supervisors",
        ),
        ("use fleetcare task edit", "change that one: x, then k"),
        (
            "end them with fleetcare task remove .+ NAME, or .+FILE.toml",
            "end them (x, then k), or name a file of your own without them",
        ),
        ("allow it: fleetcare task edit .+ --deferrable yes", "allow it, in the task: x, then k"),
        ("a new one is told by fleetcare reading --replaced", "one that replaces it: x, then n"),
        (
            "give --from start, --from unset, or when they were last done: --from DATE, --from VALUE or both",
            "write start, unset, or when they were last done: a day, a dial figure, or both",
        ),
        ("first give fleetcare reading .+ --sure", "first write it down as a reading: r"),
        ("see fleetcare show TAG for", "see its page for"),
        (r"bring it back with --restore \S+", "bring it back: b on its page"),
        (r"--restore \d+ brings it back", "b on its page brings it back"),
        (", or enter another reading with --rolled-over before it", ""),
        (", or a later --as-of", ""),
        (", or --void --why TEXT", ""),
        ("see fleetcare schedule list, or", "take one of those suggested, or"),
        (
            "use the options of fleetcare task add, with _ for -",
            "check its spelling against a file that is in order",
        ),
        (r"; to close it with this sheet give fleetcare correct (\d+) .+", r"; correct entry \1 to close it"),
        ("(?:, or )?give it with --sheet FILE", ""),
        ("correct the entry and give --at", "correct the entry with its figure"),
    )
)


def options_in(text: str) -> list[str]:
    """Give the options a text names, save those of another command it leads to."""
    return _OPTION.findall(_with_keys(text))


def on_screen(text: str, labels: Mapping[str, str] | None = None) -> str:
    """Say commands by keys and options by their labels; an option without one by its own words."""
    known = labels or {}
    return _OPTION.sub(lambda match: f"“{known.get(match[1], match[1].replace('-', ' '))}”", _with_keys(text))


def _with_keys(text: str) -> str:
    for pattern, words in _PHRASES:
        text = pattern.sub(words, text)
    return text
