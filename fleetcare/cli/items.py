"""`engine` and `machine`: add, edit, list, fit, and what an engine's status is."""

import argparse
from decimal import Decimal

from fleetcare.cli import output
from fleetcare.cli.parser import CommandParser, Commands, day, number
from fleetcare.cli.shop import add_options, context_of, option_label, options_of, say_moved
from fleetcare.domain.engines import Status
from fleetcare.errors import Refused

_SHARED = {
    "--name": ("TEXT", "what it is called besides its tag"),
    "--site": ("NAME", "where it stands"),
    "--in-service": ("DATE", "first day in service"),
}
_NAMEPLATE = {
    "--machine": ("TAG", "machine it is fitted in"),
    "--position": ("TEXT", "where in the machine, such as port"),
    "--duty": ("TEXT", "what it is used for, such as standby"),
    "--cylinders": ("N", "number of cylinders"),
    "--layout": ("LAYOUT", "inline, v, opposed or single"),
    "--numbering": ("HOW", "cylinders of a V: by-bank or alternating"),
    "--firing-order": ("ORDER", "such as 1-5-3-6-2-4"),
    "--fuel": ("TEXT", "such as diesel"),
    "--bore": ("MM", "bore in mm"),
    "--stroke": ("MM", "stroke in mm"),
    "--rod": ("MM", "connecting rod length in mm"),
    "--compression-ratio": ("RATIO", "such as 17.5"),
    "--valves-per-cylinder": ("N", "2 to 5"),
    "--intake-closes": ("DEG", "degrees after bottom dead centre"),
    "--adjuster": ("KIND", "screw, shim or hydraulic"),
    "--lash-intake": ("RANGE", "check range, such as 0.20-0.30 (mm) or 0.008-0.012in"),
    "--lash-exhaust": ("RANGE", "check range, such as 0.40-0.50"),
    "--lash-set-intake": ("LASH", "what to set when outside the check range"),
    "--lash-set-exhaust": ("LASH", "what to set when outside the check range"),
    "--lash-when": ("WHEN", "cold, hot or any"),
    "--oil-grade": ("GRADE", "such as 15W-40"),
    "--sump": ("L", "oil capacity in litres"),
    "--rated-rpm": ("RPM", "rated speed"),
    "--rated-kw": ("KW", "rated power"),
    "--altitude": ("M", "site altitude in metres"),
}


def add_commands(commands: Commands) -> None:
    """Add `engine` and `machine`."""
    engine = commands.add_parser("engine", help="add, edit, list, fit, lay up engines").add_subparsers(
        metavar="ACTION", required=True
    )
    machine = commands.add_parser("machine", help="add, edit, list machines").add_subparsers(
        metavar="ACTION", required=True
    )
    for group, kind in ((engine, "engine"), (machine, "machine")):
        for action, run in (("add", _add), ("edit", _edit)):
            parser = group.add_parser(action, help=f"{action} {'an' if kind == 'engine' else 'a'} {kind}")
            _add_item_options(parser, is_engine=kind == "engine")
            parser.set_defaults(run=run, is_engine=kind == "engine")
        listing = group.add_parser("list", help=f"list the {kind}s")
        listing.add_argument("--json", action="store_true", help="print one JSON array")
        listing.set_defaults(run=_list, is_engine=kind == "engine")
    _add_status_commands(engine)


def _add_item_options(parser: CommandParser, *, is_engine: bool) -> None:
    parser.add_argument("tag", metavar="TAG", help="the shop's tag")
    add_options(parser, _SHARED)
    parser.add_argument("--start-at", action="append", metavar="VALUE", help="dial figure on its first day")
    parser.add_argument("--as-new", action="store_true", help="new or overhauled: every task counts from the start")
    parser.add_argument("--meter", action="append", metavar="KIND[:UNIT]", help="hours, distance, fuel or starts")
    parser.add_argument(
        "--meter-digits", action="append", metavar="[KIND:]N.N", help="digits before and after the point, such as 5.1"
    )
    if is_engine:
        add_options(parser, _NAMEPLATE)


def _add_status_commands(engine: Commands) -> None:
    fit = engine.add_parser("fit", help="fit an engine in a machine, or take it out")
    fit.add_argument("tag", metavar="TAG")
    where = fit.add_mutually_exclusive_group(required=True)
    where.add_argument("--machine", metavar="TAG", help="machine it goes into")
    where.add_argument("--out", action="store_true", help="take it out of its machine")
    fit.add_argument("--position", default="", metavar="TEXT", help="where in the machine, such as port")
    fit.add_argument("--on", type=day, metavar="DATE", help="day of the move, else the as-of day")
    fit.set_defaults(run=_fit)
    for name, status, text in (
        ("withdraw", Status.WITHDRAWN, "take out of the fleet; history stays, the tag is free again"),
        ("lay-up", Status.LAID_UP, "lay up for a while"),
        ("return", Status.IN_SERVICE, "return to service; prints what must be done before"),
        ("stand-down", Status.STOOD_DOWN, "mark as not to be run"),
    ):
        parser = engine.add_parser(name, help=text)
        parser.add_argument("tag", metavar="TAG")
        parser.add_argument("--on", type=day, metavar="DATE", help="first day, else the as-of day")
        parser.add_argument("--why", default="", metavar="TEXT", help="reason")
        parser.add_argument("--by", required=name == "return", metavar="NAME", help="who says so")
        parser.set_defaults(run=_status, status=status)
    factor = engine.add_parser("factor", help="shorten the intervals of one kind: dust, short trips, salt")
    factor.add_argument("tag", metavar="TAG")
    factor.add_argument("kind", metavar="KIND", help="hours, distance, fuel, starts or calendar")
    factor.add_argument("factor", type=number, metavar="F", help="above 0, up to 1")
    factor.add_argument("--on", type=day, required=True, metavar="DATE", help="first day it holds")
    factor.add_argument("--why", required=True, metavar="TEXT", help="reason")
    factor.set_defaults(run=_factor)


def _add(given: argparse.Namespace) -> None:
    from fleetcare.drafts.items import EngineDraft, MachineDraft
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.operations.items import add_item

    context = context_of(given)
    kind = EngineDraft if given.is_engine else MachineDraft
    draft = read_draft(kind, options_of(given, "is_engine"), option_label)
    with context.write() as session:
        item = add_item(session, draft, context.today())
    output.say(f"{item.tag} added.")


def _edit(given: argparse.Namespace) -> None:
    from fleetcare.drafts.items import EngineDraft, MachineDraft
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.operations.due import watch_moves
    from fleetcare.operations.find import find_engine, find_machine
    from fleetcare.operations.items import edit_item, stored_draft

    context = context_of(given)
    options = {name: value for name, value in options_of(given, "is_engine").items() if value not in (None, False)}
    if len(options) == 1:
        raise Refused("nothing to edit", "give what should change, such as --site NAME")
    if "machine" in options:
        raise Refused(
            "an engine moves between machines on a day", "use fleetcare engine fit TAG --machine TAG --on DATE"
        )
    with context.write() as session:
        find = find_engine if given.is_engine else find_machine
        item = find(session.connection(), given.tag)
        stored = stored_draft(session, item)
        draft = read_draft(EngineDraft if given.is_engine else MachineDraft, {**stored, **options}, option_label)
        with watch_moves(session, given.tag, context.today()) as moves:
            edit_item(session, item, draft, context.today())
    output.say(f"{item.tag} edited.")
    say_moved(moves.moved)


def _list(given: argparse.Namespace) -> None:
    from fleetcare.operations.listing import list_items

    context = context_of(given)
    with context.read() as connection:
        rows = list_items(connection, context.today(), engines=given.is_engine)
    if given.json:
        output.deliver(output.json_text(rows))
        return
    if not rows:
        output.say("None yet.")
        return
    headers = list(rows[0])
    output.say(output.table([name.replace("_", " ") for name in headers], [list(row.values()) for row in rows]))


def _fit(given: argparse.Namespace) -> None:
    from fleetcare.operations.due import watch_moves
    from fleetcare.operations.find import find_engine
    from fleetcare.operations.items import fit_engine
    from fleetcare.operations.log import refuse_future

    context = context_of(given)
    on = given.on or context.today()
    refuse_future(on, context.today())
    with context.write() as session:
        engine = find_engine(session.connection(), given.tag)
        with watch_moves(session, given.tag, context.today()) as moves:
            fit_engine(session, engine, None if given.out else given.machine, on, given.position)
    output.say(f"{engine.tag} {'taken out of its machine' if given.out else f'fitted in {given.machine}'} on {on}.")
    say_moved(moves.moved)


def _status(given: argparse.Namespace) -> None:
    from fleetcare.operations.due import Filters, due_rows, watch_moves
    from fleetcare.operations.find import find_engine
    from fleetcare.operations.log import refuse_future
    from fleetcare.operations.spells import change_status

    context = context_of(given)
    on = given.on or context.today()
    refuse_future(on, context.today())
    with context.write() as session:
        engine = find_engine(session.connection(), given.tag)
        waiting = due_rows(session.connection(), context.today(), Filters(engine=engine.tag))
        with watch_moves(session, given.tag, context.today()) as moves:
            change_status(session, engine, given.status, on, why=given.why, by=given.by)
    output.say(f"{engine.tag} is {given.status} from {on}.")
    say_moved(moves.moved)
    if given.status is Status.LAID_UP:
        _warn_of_pauses(given)
    if given.status is Status.IN_SERVICE:
        from fleetcare.cli.due import say_before_return

        say_before_return(engine.tag, waiting)


def _warn_of_pauses(given: argparse.Namespace) -> None:
    from fleetcare.operations.listing import pausing_tasks

    context = context_of(given)
    with context.read() as connection:
        paused = pausing_tasks(connection, given.tag, context.today())
    for name in paused:
        output.say(
            f"Note: the calendar of {name} pauses while laid up; oil, coolant, belts and batteries age all the same."
        )


def _factor(given: argparse.Namespace) -> None:
    from fleetcare.drafts.fields import parse_kind
    from fleetcare.operations.due import watch_moves
    from fleetcare.operations.find import find_item
    from fleetcare.operations.spells import set_factor

    context = context_of(given)
    kind = parse_kind(given.kind)
    with context.write() as session:
        item = find_item(session.connection(), given.tag)
        with watch_moves(session, given.tag, context.today()) as moves:
            set_factor(session, item, kind, Decimal(given.factor), given.on, given.why)
    output.say(f"{item.tag}: {kind} intervals × {given.factor} from {given.on} ({given.why}).")
    say_moved(moves.moved)
