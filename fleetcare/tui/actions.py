"""Everything a key does, in one list: keys, foot line, help and command palette are all made from it."""

from dataclasses import dataclass

from textual.binding import Binding, BindingType

EVERYWHERE = "everywhere"
TYPED_IN = frozenset({"form", "entry", "sheet", "sum"})
"""Places where letters are typed, so that no letter does anything else."""

_SAID = {
    "slash": "/",
    "question_mark": "?",
    "enter": "Enter",
    "escape": "Esc",
    "space": "Space",
    "left": "←",
    "right": "→",
    "up": "↑",
    "down": "↓",
    "tab": "Tab",
    "shift+tab": "Shift Tab",
    "ctrl+s": "Ctrl S",
    "ctrl+n": "Ctrl N",
    "f1": "F1",
    "pagedown": "PgDn",
    "pageup": "PgUp",
}


@dataclass(frozen=True, slots=True)
class Action:
    """What a key does in one place. `word` stands in the foot line, `tells` in help and palette.

    `method` is what the app or screen does; one with `in_foot` False is left out of the foot line. One that `goes_on`
    from a field acts at once, so that keys typed without waiting go where the cursor goes.
    """

    place: str
    key: str
    method: str
    word: str
    tells: str
    in_foot: bool = True
    goes_on: bool = False

    @property
    def keys_said(self) -> tuple[str, ...]:
        """The keys as people say them."""
        return tuple(_SAID.get(key, key) for key in self.key.split(","))


ACTIONS = (
    Action("due", "enter", "working", "working", "show how the line comes about, with every figure behind it"),
    Action("due", "w", "write('log')", "log", "log work done on the line's engine or machine"),
    Action("due", "o", "write('defer')", "defer", "put the line off, with reason and name"),
    Action("due", "r", "write('reading')", "reading", "write down what the engine's meter shows"),
    Action("due", "x", "more", "more", "write down a status, a move or a new meter of the engine"),
    Action("due", "e", "item", "engine", "open the page of the line's engine or machine"),
    Action("due", "slash", "find", "find", "show only lines that hold some words"),
    Action("due", "f", "narrow", "narrow", "choose states, sites, kinds of work and engines to show"),
    Action("due", "a", "show_all", "all", "show all lines again", in_foot=False),
    Action("due", "s", "arrange", "arrange", "arrange by urgency, likely day, site or engine in turn"),
    Action("due", "c", "csv", "CSV", "write exactly the lines shown to a CSV file in this folder"),
    Action("due", "n", "to_group(1)", "next group", "go to the next heading", in_foot=False),
    Action("due", "p", "to_group(-1)", "group before", "go to the heading before", in_foot=False),
    Action("due", "escape", "hush", "hush", "take away what was said at the foot", in_foot=False),
    Action("engines", "enter", "item", "open", "open the page of the engine or machine"),
    Action("engines", "w", "write('log')", "log", "log work done on it"),
    Action("engines", "r", "write('reading')", "reading", "write down what its meter shows"),
    Action("engines", "x", "more", "more", "write down a status, a move or a new meter of it"),
    Action("engines", "a", "add('engine')", "add", "add an engine"),
    Action("engines", "m", "add('machine')", "machine", "add a machine, which engines are fitted in", in_foot=False),
    Action("engines", "o", "round", "round", "write down what all meters of this site show"),
    Action("engines", "s", "rename_site", "site name", "give the site under the cursor another name", in_foot=False),
    Action("engines", "b", "add('person-name')", "person name", "give a person another name", in_foot=False),
    Action("engines", "slash", "find", "find", "show only those that hold some words"),
    Action("engines", "n", "to_group(1)", "next group", "go to the next site", in_foot=False),
    Action("engines", "p", "to_group(-1)", "group before", "go to the site before", in_foot=False),
    Action("findings", "enter", "whole", "whole", "show the finding with all its working"),
    Action("findings", "a", "write('accept')", "accept", "live with the finding until it gets graver"),
    Action("findings", "f", "write('follow-up')", "follow-up", "have something done: a line of the due list"),
    Action("findings", "e", "item", "engine", "open the page of its engine"),
    Action("findings", "o", "all", "over too", "show those that are over too, or no longer"),
    Action("findings", "slash", "find", "find", "show only those that hold some words"),
    Action("findings", "n", "to_group(1)", "next group", "go to the next heading", in_foot=False),
    Action("findings", "p", "to_group(-1)", "group before", "go to the heading before", in_foot=False),
    Action(
        "findings",
        "escape",
        "stop",
        "stop",
        "stop judging, which harms nothing, or take away what was said",
        in_foot=False,
    ),
    Action("finding", "escape", "back", "back", "go back to where you came from"),
    Action("rules", "enter", "whole", "whole", "show the rule, whole"),
    Action("rules", "slash", "find", "find", "show only those that hold some words"),
    Action("rules", "n", "to_group(1)", "next group", "go to the next kind of sheet", in_foot=False),
    Action("rules", "p", "to_group(-1)", "group before", "go to the kind of sheet before", in_foot=False),
    Action("rule", "escape", "back", "back", "go back to where you came from"),
    Action("item", "escape", "back", "back", "go back to where you came from"),
    Action("item", "p", "part('plate')", "plate", "show nameplate and cautions"),
    Action("item", "m", "part('meters')", "meters", "show meters, with the plot; again for the next meter"),
    Action("item", "l", "part('lines')", "lines", "show what it needs next"),
    Action("item", "h", "part('history')", "history", "show all that was done to it"),
    Action("item", "f", "part('findings')", "findings", "show what the rules find in what was measured on it"),
    Action("item", "a", "answer('accept')", "accept", "live with the finding under the cursor", in_foot=False),
    Action("item", "y", "answer('follow-up')", "follow-up", "have something done about it", in_foot=False),
    Action("item", "g", "part('lash')", "lash", "show the gap at each valve over time; again for the next point"),
    Action("item", "k", "part('compression')", "compression", "show each cylinder over time; again for the next"),
    Action("item", "e", "part('oil')", "oil", "show what its oil samples said over time; again for the next"),
    Action("item", "w", "write('log')", "log", "log work done on it"),
    Action("item", "r", "write('reading')", "reading", "write down what its meter shows"),
    Action("item", "o", "write('defer')", "defer", "put off the line under the cursor", in_foot=False),
    Action("item", "x", "more", "more", "write down a status, a move or a new meter of it"),
    Action("item", "c", "entry('correct')", "correct", "correct the entry under the cursor of the history"),
    Action("item", "v", "take_back", "take back", "take back the entry or reading under the cursor: it is not true"),
    Action("item", "b", "bring_back", "bring back", "let the reading under the cursor count again", in_foot=False),
    Action("item", "s", "sheet", "sheet", "open the sheet of the entry under the cursor of the history, to mend it"),
    Action("item", "u", "sums", "bench sums", "work out a bench sum, filled from its nameplate", in_foot=False),
    Action("item", "left", "turn(-1)", "left", "turn to the part on the left", in_foot=False),
    Action("item", "right", "turn(1)", "right", "turn to the part on the right", in_foot=False),
    Action("item", "enter", "working", "working", "show how the line comes about", in_foot=False),
    Action("working", "escape", "back", "back", "go back to where you came from"),
    Action("working", "e", "item", "engine", "open the page of the line's engine or machine"),
    Action("more", "enter", "choose", "open", "write down what is under the cursor"),
    Action("more", "v", "write('lash')", "valve lash", "measure its valve lash without closing a task", in_foot=False),
    Action("more", "c", "write('compression')", "compression", "measure its compression", in_foot=False),
    Action("more", "a", "write('leakdown')", "leak-down", "measure where its cylinders lose test air", in_foot=False),
    Action("more", "u", "write('run')", "test run", "write down a test run", in_foot=False),
    Action("more", "p", "write('spot')", "spot readings", "pressures and temperatures as read off", in_foot=False),
    Action("more", "o", "write('oil')", "oil sample", "what the laboratory found in its oil", in_foot=False),
    Action("more", "l", "write('lay-up')", "lay up", "it is laid up for a while", in_foot=False),
    Action(
        "more", "r", "write('return')", "return", "it returns to service; what waits for that is shown", in_foot=False
    ),
    Action("more", "s", "write('stand-down')", "stand down", "it is not to be run", in_foot=False),
    Action("more", "w", "write('withdraw')", "withdraw", "it leaves the fleet; its history stays", in_foot=False),
    Action("more", "m", "write('move')", "move", "it goes into another machine, or out of its own", in_foot=False),
    Action("more", "n", "write('swap')", "new meter", "its meter was replaced by another", in_foot=False),
    Action("more", "f", "write('factor')", "hard use", "its intervals are shortened: dust, short trips", in_foot=False),
    Action("more", "e", "write('edit')", "plate", "change its nameplate, site, start or meters", in_foot=False),
    Action("more", "t", "write('task')", "task", "a task it needs from now on", in_foot=False),
    Action("more", "k", "tasks", "all tasks", "all its tasks, to change or end them", in_foot=False),
    Action("more", "d", "write('schedule')", "schedule", "all tasks of a ready-made schedule", in_foot=False),
    Action("tasks", "enter", "write('task-edit')", "change", "change the task under the cursor from a day on"),
    Action("tasks", "a", "write('task')", "add", "add a task"),
    Action("tasks", "v", "write('task-end')", "end", "end the task under the cursor; its history stays"),
    Action("tasks", "d", "write('schedule')", "schedule", "add all tasks of a ready-made schedule"),
    Action("tasks", "o", "write('schedule-out')", "write out", "write its tasks down as a schedule of your own"),
    Action("tasks", "escape", "back", "back", "go back to where you came from"),
    Action("more", "escape,x", "back", "back", "go back to where you came from"),
    Action("form", "ctrl+s", "store", "store", "write it down"),
    Action("form", "enter,down,tab", "next(1)", "next field", "go to the next field", goes_on=True),
    Action("form", "up,shift+tab", "next(-1)", "field before", "go to the field before", in_foot=False, goes_on=True),
    Action(
        "form",
        "right",
        "take",
        "take name",
        "take the first name suggested, at the end of what is typed",
        in_foot=False,
    ),
    Action("form", "space", "say_yes", "yes or no", "change a yes to a no and back", in_foot=False),
    Action("form", "ctrl+n", "anew", "begin anew", "throw away what was typed and begin anew"),
    Action("form", "f1", "help", "keys", "show the keys of where you are"),
    Action("form", "escape", "back", "back", "leave; what is typed stays for the next time"),
    Action("entry", "enter", "store", "store", "store the line as it is read back, or take the answer marked"),
    Action("entry", "down", "answer(1)", "answers", "go to the answers to what is asked, and through them"),
    Action("entry", "up", "answer(-1)", "answer before", "go to the answer before", in_foot=False),
    Action("entry", "ctrl+n", "anew", "begin anew", "throw away what was typed and begin anew"),
    Action("entry", "f1", "help", "keys", "show the keys of where you are"),
    Action("entry", "escape", "back", "back", "close the line; what is typed stays for the next time"),
    Action("sheet", "ctrl+s", "store", "store", "write it down"),
    Action("sheet", "enter,tab", "next(1)", "next", "go to the next value, in the order valves can be set"),
    Action("sheet", "shift+tab", "next(-1)", "before", "go to the value before", in_foot=False),
    Action("sheet", "pagedown", "scroll(1)", "cautions", "scroll down, to the cautions below"),
    Action("sheet", "pageup", "scroll(-1)", "up", "scroll up", in_foot=False),
    Action("sheet", "ctrl+n", "anew", "begin anew", "throw away what was typed and begin anew"),
    Action("sheet", "f1", "help", "keys", "show the keys of where you are"),
    Action("sheet", "escape", "back", "back", "leave; what is typed stays for the next time"),
    Action("sums", "enter", "open", "open", "work out the sum under the cursor"),
    Action("sums", "escape", "back", "back", "go back to where you came from"),
    Action("sum", "enter,down,tab", "next(1)", "next figure", "go to the next figure", goes_on=True),
    Action("sum", "up,shift+tab", "next(-1)", "figure before", "go to the figure before", in_foot=False, goes_on=True),
    Action("sum", "f1", "help", "keys", "show the keys of where you are"),
    Action("sum", "escape", "back", "back", "go back to the list of sums"),
    Action("narrow", "enter,space", "choose", "choose", "choose what is under the cursor, or no longer"),
    Action("narrow", "n", "to_group(1)", "next group", "go to the next heading", in_foot=False),
    Action("narrow", "p", "to_group(-1)", "group before", "go to the heading before", in_foot=False),
    Action("narrow", "a", "none", "none", "choose nothing, so that all lines show"),
    Action("narrow", "escape,f", "back", "done", "show the lines chosen"),
    Action("keys", "escape,question_mark", "back", "back", "go back to where you came from"),
    Action(EVERYWHERE, "1", "view('due')", "due", "what each engine needs next", in_foot=False),
    Action(EVERYWHERE, "2", "view('engines')", "engines", "all engines and machines", in_foot=False),
    Action(EVERYWHERE, "3", "view('findings')", "findings", "what the rules find in what was measured", in_foot=False),
    Action(EVERYWHERE, "4", "view('rules')", "rules", "the rules of measurement, with their sources", in_foot=False),
    Action(
        EVERYWHERE,
        "i",
        "entry_line",
        "entry line",
        "write work or a reading down in one line; what it would do is read back before it is stored",
        in_foot=False,
    ),
    Action(EVERYWHERE, "d", "daylight", "day or night", "change between dark and light colours", in_foot=False),
    Action(EVERYWHERE, "question_mark", "keys", "keys", "show the keys of where you are"),
    Action(EVERYWHERE, "q", "quit", "quit", "leave"),
)


def actions_of(place: str) -> tuple[Action, ...]:
    """Give what keys do in a place, those good everywhere last and only where the place has no other use for the key."""
    own = [action for action in ACTIONS if action.place == place]
    taken = {key for action in own for key in action.key.split(",")}
    shared = [
        a for a in ACTIONS if a.place == EVERYWHERE and place not in {EVERYWHERE, *TYPED_IN} and a.key not in taken
    ]
    return (*own, *shared)


def bindings(place: str) -> list[BindingType]:
    """Give a place's own actions as key bindings."""
    return [
        Binding(action.key, action.method, action.word, show=False, tooltip=action.tells, priority=action.goes_on)
        for action in ACTIONS
        if action.place == place
    ]


def called(action: Action) -> str:
    """Name an action as its method is called from anywhere: the app's, or that of the screen in front."""
    return f"{'app' if action.place == EVERYWHERE else 'screen'}.{action.method}"
