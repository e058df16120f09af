"""`reading`: what a meter shows, or that a reading was wrong."""

import argparse

from fleetcare.cli.parser import Commands, day, whole
from fleetcare.cli.shop import context_of, option_label, options_of, say_entered
from fleetcare.errors import Misread


def add_commands(commands: Commands) -> None:
    """Add `reading`."""
    reading = commands.add_parser("reading", help="write down what a meter shows")
    reading.add_argument("tag", metavar="TAG", nargs="?")
    reading.add_argument("value", metavar="VALUE", nargs="?", help="what the dial shows, such as 1250 or 1250.5h")
    reading.add_argument("--meter", metavar="KIND", help="hours, distance, fuel or starts, where there are several")
    reading.add_argument("--on", metavar="DATE", type=day, help="day it was read, else the as-of day")
    reading.add_argument("--by", metavar="NAME", help="who read it")
    reading.add_argument("--note", metavar="TEXT", help="anything worth keeping")
    reading.add_argument(
        "--replaced",
        nargs=2,
        metavar=("OLD_LAST", "NEW_FIRST"),
        help="a new meter: last figure of the old, first of the new",
    )
    reading.add_argument(
        "--unmetered", metavar="VALUE", help="run between the meters without being counted, such as 150h"
    )
    reading.add_argument("--rolled-over", action="store_true", help="the dial went round to 0")
    reading.add_argument("--sure", action="store_true", help="it is right though it breaks with the past")
    reading.add_argument("--void", type=whole, metavar="ID", help="this reading was wrong; needs --why")
    reading.add_argument("--restore", type=whole, metavar="ID", help="this suspect or voided reading was right")
    reading.add_argument("--why", metavar="TEXT", help="reason for --void, and for --restore if there is one")
    reading.set_defaults(run=_reading)


def _reading(given: argparse.Namespace) -> None:
    if given.void is not None or given.restore is not None:
        _amend(given)
    elif given.tag is None or given.value is None:
        raise Misread("TAG and VALUE are needed", "write it like fleetcare reading P-01 1250")
    else:
        _record(given)


def _record(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.work import ReadingDraft
    from fleetcare.operations.entering import enter_reading

    if given.why is not None:
        raise Misread("--why belongs to --void", "use --note for a remark")
    context = context_of(given)
    values = options_of(given, "void", "restore", "why") | {"on": given.on or context.today()}
    draft = read_draft(ReadingDraft, values, option_label)
    with context.write() as session:
        entered = enter_reading(session, draft, context.today())
    say_entered(entered)


def _amend(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.work import RestoreDraft, VoidDraft
    from fleetcare.operations.entering import enter_restored, enter_void

    others = (given.tag, given.value, given.meter, given.on, given.by, given.note, given.replaced, given.unmetered)
    if any(other is not None for other in others) or given.rolled_over or (given.sure and given.void is not None):
        raise Misread("--void and --restore stand by themselves", "leave the other options out")
    if given.void is not None and given.restore is not None:
        raise Misread("--void and --restore contradict each other", "give one")
    if given.void is not None and not (given.why or "").strip():
        raise Misread("--void needs a reason", "give --why TEXT")
    context = context_of(given)
    with context.write() as session:
        if given.void is not None:
            void = read_draft(VoidDraft, {"reading": given.void, "why": given.why}, option_label)
            entered = enter_void(session, void, context.today())
        else:
            told = {"reading": given.restore, "why": given.why, "sure": given.sure}
            entered = enter_restored(session, read_draft(RestoreDraft, told, option_label), context.today())
    say_entered(entered)
