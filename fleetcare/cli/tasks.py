"""`task`: add, edit, list and remove the pieces of work an engine or machine needs."""

import argparse

from fleetcare.cli import output
from fleetcare.cli.parser import CommandParser, Commands, day
from fleetcare.cli.shop import add_options, context_of, label_with, options_of, say_entered

_REPEATED = {
    "--every": ("INTERVAL", "such as 250h, 10000km or 12mo; once for each kind"),
    "--first": ("INTERVAL", "first interval of a new engine, such as 50h"),
    "--ahead": ("INTERVAL", "how long before it is near; a tenth of the interval if not given"),
    "--grace": ("INTERVAL", "how far it may be overrun before it is overdue"),
    "--grid-origin": ("DATE|VALUE", "where the grid of --anchor on-grid begins"),
    "--last-done": ("DATE|VALUE", "when it was last done, before the log began"),
    "--part": ("NAME[:N]", "a part it takes, such as 'Oil filter:1'"),
}
_PLAIN = {
    "--combine": ("HOW", "due by the first interval, or only by the last"),
    "--anchor": ("ANCHOR", "count from-done, from-due or on-grid"),
    "--once-each": ("PERIOD", "once each calendar week, month, quarter or year"),
    "--window": ("DAYS", "days either side of the nominal date, such as 10d"),
    "--not-later-than": ("SPAN", "bound of --combine last, such as 5y"),
    "--work": (
        "KIND",
        "drain (the engine's own oil and nothing else), coolant, gear-oil, fuel, filter, lash, inspection, ...",
    ),
    "--needs-sheet": ("KIND", "closes only with a sheet: lash, compression, leakdown, run, spot or oil"),
    "--deferrable": ("yes|no", "may its due point be moved; no for once-each, else yes"),
    "--labour": ("HOURS", "working time, such as 1.5h"),
    "--caution": ("TEXT", "what can hurt"),
    "--source": ("TEXT", "manual, law or insurer it comes from"),
}
_FLAGS = {
    "--through-month-end": "due through the last day of the month",
    "--law": "required by law: never deferrable",
    "--insurer": "required by the insurer: never deferrable",
    "--once": "done once, then no more",
    "--on-condition": "no interval: done when called for",
    "--pause-while-laid-up": "its calendar stands still while the engine is laid up",
}


def add_commands(commands: Commands) -> None:
    """Add `task`."""
    task = commands.add_parser("task", help="add, edit, list, remove tasks").add_subparsers(
        metavar="ACTION", required=True
    )
    add = task.add_parser("add", help="add a task to an engine or machine")
    _add_task_options(add, unset=False)
    add.set_defaults(run=_add)
    edit = task.add_parser("edit", help="change a task from a day on", epilog="An empty value takes an option away.")
    _add_task_options(edit, unset=None)
    edit.add_argument("--without", action="append", metavar="KIND", help="drop the interval of this kind")
    edit.add_argument("--on", type=day, metavar="DATE", help="first day of the change, else the as-of day")
    edit.set_defaults(run=_edit)
    listing = task.add_parser("list", help="list the tasks of an engine or machine")
    listing.add_argument("tag", metavar="TAG")
    listing.add_argument("--json", action="store_true", help="print one JSON array")
    listing.set_defaults(run=_list)
    remove = task.add_parser("remove", help="end a task; its history stays")
    remove.add_argument("tag", metavar="TAG")
    remove.add_argument("name", metavar="TASK")
    remove.add_argument("--on", type=day, metavar="DATE", help="first day without it, else the as-of day")
    remove.set_defaults(run=_remove)


def _add_task_options(parser: CommandParser, *, unset: bool | None) -> None:
    parser.add_argument("tag", metavar="TAG")
    parser.add_argument("name", metavar="TASK")
    add_options(parser, _REPEATED, action="append")
    add_options(parser, _PLAIN)
    parser.add_argument(
        "--covers", action="extend", nargs="+", metavar="NAME", help="tasks that are done along with this one"
    )
    for flag, text in _FLAGS.items():
        # An edit must be able to take a mark away again.
        action = "store_true" if unset is False else argparse.BooleanOptionalAction
        parser.add_argument(flag, action=action, default=unset, help=text)


def _add(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.tasks import TaskDraft
    from fleetcare.operations.adding import enter_task

    context = context_of(given)
    draft = read_draft(TaskDraft, options_of(given, "tag"), label_with(name="TASK"))
    with context.write() as session:
        entered = enter_task(session, given.tag, draft, context.today())
    say_entered(entered)


def _edit(given: argparse.Namespace) -> None:
    from fleetcare.drafts.fields import parse_kind
    from fleetcare.operations.editing import enter_task_edit

    context = context_of(given)
    changes = {
        name: [] if value == [""] else value
        for name, value in options_of(given, "tag", "name", "without", "on").items()
        if value is not None
    }
    without = [parse_kind(kind) for kind in given.without or ()]
    on = given.on or context.today()
    with context.write() as session:
        entered = enter_task_edit(session, given.tag, given.name, changes, without, on, context.today())
    say_entered(entered)


def _list(given: argparse.Namespace) -> None:
    from fleetcare.operations.listing import list_tasks

    context = context_of(given)
    with context.read() as connection:
        rows = list_tasks(connection, given.tag, context.today())
    if given.json:
        output.deliver(output.json_text([row.options for row in rows]))
    elif rows:
        cells = [[row.name, row.every, row.work, row.also, row.source] for row in rows]
        output.say(output.table(["task", "every", "work", "also", "source"], cells))
    else:
        output.say("None yet.")


def _remove(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.tasks import TaskEnd
    from fleetcare.operations.editing import enter_task_end

    context = context_of(given)
    values = {"name": given.name, "on": given.on or context.today()}
    draft = read_draft(TaskEnd, values, label_with(name="TASK"))
    with context.write() as session:
        entered = enter_task_end(session, given.tag, draft, context.today())
    say_entered(entered)
