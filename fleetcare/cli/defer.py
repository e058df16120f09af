"""`defer`: move one due point, with reason and name."""

import argparse

from fleetcare.cli.parser import Commands
from fleetcare.cli.shop import context_of, label_with, options_of, say_entered


def add_commands(commands: Commands) -> None:
    """Add `defer`."""
    defer = commands.add_parser("defer", help="move one due point, with reason and name")
    defer.add_argument("tag", metavar="TAG")
    defer.add_argument("task", metavar="TASK")
    until = defer.add_mutually_exclusive_group(required=True)
    until.add_argument("--until", action="append", metavar="DATE|VALUE", help="a day, a dial figure, or both")
    until.add_argument(
        "--as-advised",
        action="store_true",
        help="until the figure up to which a sound oil is advised to stay in; for supervisors",
    )
    defer.add_argument("--why", required=True, metavar="TEXT", help="reason")
    defer.add_argument("--by", required=True, metavar="NAME", help="who decides it")
    defer.set_defaults(run=_defer)


def _defer(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.work import DeferralDraft
    from fleetcare.operations.entering import enter_deferral

    context = context_of(given)
    draft = read_draft(DeferralDraft, options_of(given) | {"on": context.today()}, label_with(task="TASK"))
    with context.write() as session:
        entered = enter_deferral(session, draft, context.today())
    say_entered(entered)
