"""`defer`: move one due point, with reason and name."""

import argparse

from fleetcare.cli import output
from fleetcare.cli.parser import Commands
from fleetcare.cli.shop import context_of, label_with, options_of, say_moved


def add_commands(commands: Commands) -> None:
    """Add `defer`."""
    defer = commands.add_parser("defer", help="move one due point, with reason and name")
    defer.add_argument("tag", metavar="TAG")
    defer.add_argument("task", metavar="TASK")
    defer.add_argument(
        "--until", action="append", required=True, metavar="DATE|VALUE", help="a day, a dial figure, or both"
    )
    defer.add_argument("--why", required=True, metavar="TEXT", help="reason")
    defer.add_argument("--by", required=True, metavar="NAME", help="who decides it")
    defer.set_defaults(run=_defer)


def _defer(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.work import DeferralDraft
    from fleetcare.operations.deferrals import defer
    from fleetcare.operations.due import watch_moves

    context = context_of(given)
    draft = read_draft(DeferralDraft, options_of(given) | {"on": context.today()}, label_with(task="TASK"))
    with context.write() as session, watch_moves(session, draft.tag, context.today()) as moves:
        deferred = defer(session, draft)
    until = " or ".join(deferred.until)
    output.say(f"{deferred.task} of {deferred.item.tag} deferred until {until} by {draft.by}: {draft.why}")
    say_moved(moves.moved)
