"""`engine fit`, `withdraw`, `lay-up`, `return`, `stand-down`, `factor`: what changes for an engine on a day."""

import argparse

from fleetcare.cli.parser import Commands, day
from fleetcare.cli.shop import context_of, label_with, option_label, options_of, say_entered
from fleetcare.domain.engines import Status

_STATUSES = (
    ("withdraw", Status.WITHDRAWN, "take out of the fleet; history stays, the tag is free again"),
    ("lay-up", Status.LAID_UP, "lay up for a while"),
    ("return", Status.IN_SERVICE, "return to service; prints what waits for it"),
    ("stand-down", Status.STOOD_DOWN, "mark as not to be run"),
)


def add_spell_commands(engine: Commands) -> None:
    """Add the actions of `engine` that hold from a day on."""
    fit = engine.add_parser("fit", help="fit an engine in a machine, or take it out")
    fit.add_argument("tag", metavar="TAG")
    where = fit.add_mutually_exclusive_group(required=True)
    where.add_argument("--machine", metavar="TAG", help="machine it goes into")
    where.add_argument("--out", action="store_true", help="take it out of its machine")
    fit.add_argument("--position", metavar="TEXT", help="where in the machine, such as port")
    fit.add_argument("--on", type=day, metavar="DATE", help="day of the move, else the as-of day")
    fit.set_defaults(run=_fit)
    for name, status, text in _STATUSES:
        parser = engine.add_parser(name, help=text)
        parser.add_argument("tag", metavar="TAG")
        parser.add_argument("--on", type=day, metavar="DATE", help="first day, else the as-of day")
        parser.add_argument("--why", metavar="TEXT", help="reason")
        parser.add_argument("--by", required=name == "return", metavar="NAME", help="who says so")
        parser.set_defaults(run=_status, status=status)
    factor = engine.add_parser("factor", help="shorten the intervals of one kind: dust, short trips, salt")
    factor.add_argument("tag", metavar="TAG")
    factor.add_argument("kind", metavar="KIND", help="hours, distance, fuel, starts or calendar")
    factor.add_argument("factor", metavar="F", help="above 0, up to 1")
    factor.add_argument("--on", type=day, required=True, metavar="DATE", help="first day it holds")
    factor.add_argument("--why", required=True, metavar="TEXT", help="reason")
    factor.set_defaults(run=_factor)


def _fit(given: argparse.Namespace) -> None:
    from fleetcare.drafts.items import FitDraft
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.operations.entering import enter_move

    context = context_of(given)
    values = options_of(given) | {"on": given.on or context.today()}
    draft = read_draft(FitDraft, values, option_label)
    with context.write() as session:
        entered = enter_move(session, draft, context.today())
    say_entered(entered)


def _status(given: argparse.Namespace) -> None:
    from fleetcare.drafts.items import ReturnDraft, StatusDraft
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.operations.entering import enter_status

    context = context_of(given)
    status = given.status
    values = options_of(given, "status") | {"on": given.on or context.today()}
    draft = read_draft(ReturnDraft if status is Status.IN_SERVICE else StatusDraft, values, option_label)
    with context.write() as session:
        entered = enter_status(session, draft, status, context.today())
    say_entered(entered)
    if status is Status.IN_SERVICE:
        from fleetcare.cli.due import say_before_return

        say_before_return(draft.tag, entered.waiting)


def _factor(given: argparse.Namespace) -> None:
    from fleetcare.drafts.items import FactorDraft
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.operations.entering import enter_factor

    context = context_of(given)
    draft = read_draft(FactorDraft, options_of(given), label_with(kind="KIND", factor="F"))
    with context.write() as session:
        entered = enter_factor(session, draft, context.today())
    say_entered(entered)
