"""The command line as a tree of commands; each group stands in a file of its own and loads what it needs when run."""

from collections.abc import Callable, Sequence

from fleetcare import __version__
from fleetcare.cli import (
    calc,
    defer,
    demo,
    due,
    forecast,
    imports,
    items,
    log,
    output,
    readings,
    schedules,
    settings,
    tasks,
    upkeep,
)
from fleetcare.cli.parser import CommandParser, Commands
from fleetcare.cli.screens import OpenScreens, shop_screens
from fleetcare.errors import FleetError

GROUPS: tuple[Callable[[Commands], None], ...] = (
    due.add_commands,
    items.add_commands,
    tasks.add_commands,
    schedules.add_commands,
    readings.add_commands,
    log.add_commands,
    defer.add_commands,
    forecast.add_commands,
    imports.add_commands,
    settings.add_commands,
    upkeep.add_commands,
    demo.add_commands,
    calc.add_commands,
)


def build_parser() -> CommandParser:
    """Give the parser of the whole command line; a parsed command carries its handler as `run`, no command the screens."""
    parser = CommandParser(
        prog="fleetcare",
        description="What each engine of a small fleet needs next, with the working shown.",
        epilog="Exit status: 0 done, 1 refused, 2 the command line is wrong, 3 no database, 130 interrupted.",
    )
    parser.set_defaults(run=shop_screens)
    parser.add_argument("--version", action="version", version=f"fleetcare {__version__}")
    commands = parser.add_subparsers(title="commands", metavar="COMMAND")
    for add_commands in GROUPS:
        add_commands(commands)
    return parser


def run(arguments: Sequence[str], open_screens: OpenScreens) -> int:
    """Run one command line and give its exit status. What is not a FleetError is a fault of ours and passes through.

    A command that wants the screens gives the database to show on them, to be held while they are open.
    """
    try:
        parsed = build_parser().parse_args(arguments)
        shown = parsed.run(parsed)
        if shown is None:
            return 0
        with shown as context:
            return open_screens(context)
    except FleetError as error:
        output.complain(*error.lines())
        return error.exit_code
    except SystemExit as end:  # --help and --version
        return int(end.code or 0)
