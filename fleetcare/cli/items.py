"""`engine` and `machine`: add, edit, list."""

import argparse

from fleetcare.cli import output
from fleetcare.cli.parser import CommandParser, Commands
from fleetcare.cli.shop import add_options, changes_of, context_of, null, option_label, options_of, say_entered
from fleetcare.cli.spells import add_spell_commands
from fleetcare.domain.quantities import plain, tenth
from fleetcare.errors import Refused

_SHARED = {
    "--name": ("TEXT", "what it is called besides its tag"),
    "--site": ("NAME", "where it stands"),
    "--in-service": ("DATE", "first day in service"),
}
_NAMEPLATE = {
    "--machine": ("TAG", "machine it is fitted in"),
    "--position": ("TEXT", "where in the machine, such as port"),
    "--duty": ("TEXT", "what it is used for, such as standby or marine propulsion; rules for marine engines go by it"),
    "--cylinders": ("N", "number of cylinders"),
    "--layout": ("LAYOUT", "inline, v, opposed or single"),
    "--numbering": ("HOW", "cylinders of a V: by-bank or alternating"),
    "--firing-order": ("ORDER", "such as 1-5-3-6-2-4"),
    "--fuel": ("TEXT", "such as diesel"),
    "--bore": ("MM", "bore in mm"),
    "--stroke": ("MM", "stroke in mm"),
    "--rod": ("MM", "connecting rod length in mm"),
    "--compression-ratio": ("RATIO", "such as 17.5"),
    "--valves-per-cylinder": ("N", "such as 4"),
    "--intake-closes": ("DEG", "degrees after bottom dead centre"),
    "--bridged": ("SIDE", "two valves under one bridge: none, intake, exhaust or both"),
    "--adjuster": ("KIND", "screw, shim or hydraulic"),
    "--screw-pitch": ("MM", "thread pitch of the adjusting screw"),
    "--screw-at": ("WHERE", "end of the rocker it sits at: pushrod, valve or centre"),
    "--rocker-ratio": ("R", "valve lift over cam lift, such as 1.5"),
    "--shim-step": ("MM", "step between stocked shims, such as 0.05"),
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
    add_spell_commands(engine)


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


def _add(given: argparse.Namespace) -> None:
    from fleetcare.drafts.items import EngineDraft, MachineDraft
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.operations.adding import enter_item

    context = context_of(given)
    kind = EngineDraft if given.is_engine else MachineDraft
    draft = read_draft(kind, options_of(given, "is_engine"), option_label)
    with context.write() as session:
        entered = enter_item(session, draft, context.today())
    say_entered(entered)


def _edit(given: argparse.Namespace) -> None:
    from fleetcare.operations.editing import enter_item_edit
    from fleetcare.operations.find import find_engine, find_machine

    context = context_of(given)
    options = changes_of(given, "is_engine", "tag")
    if options.keys() & {"machine", "position"}:
        raise Refused(
            "an engine moves between machines on a day", "use fleetcare engine fit TAG --machine TAG --on DATE"
        )
    with context.write() as session:
        find = find_engine if given.is_engine else find_machine
        item = find(session.connection(), given.tag)
        entered = enter_item_edit(session, item, options, context.today())
    say_entered(entered)


def _list(given: argparse.Namespace) -> None:
    from fleetcare.operations.listing import list_items

    context = context_of(given)
    with context.read() as connection:
        rows = list_items(connection, context.today(), engines=given.is_engine)
    if given.json:
        output.deliver(output.json_text([{name: null(value) for name, value in row.items()} for row in rows]))
        return
    if not rows:
        output.say("None yet.")
        return
    cells = [[_say_reads(value) if name == "last_read" else value for name, value in row.items()] for row in rows]
    output.say(output.table([name.replace("_", " ") for name in rows[0]], cells))


def _say_reads(reads: object) -> str:
    assert isinstance(reads, list)
    return ", ".join(f"{plain(tenth(read['value']))} {read['unit']} on {read['on']}" for read in reads)
