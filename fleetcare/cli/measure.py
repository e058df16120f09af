"""`measure`: sheets of measurements, judged as they come in."""

import argparse
from typing import TYPE_CHECKING

from fleetcare.cli import output
from fleetcare.cli.parser import CommandParser, Commands, day
from fleetcare.cli.sheet_json import sheet_object
from fleetcare.cli.sheet_words import say_report
from fleetcare.cli.shop import context_of, option_label, options_of, say_moved

if TYPE_CHECKING:
    from fleetcare.drafts.sheets import SheetIn
    from fleetcare.operations.measure import Measured

_CSV = "FILE is CSV with the header quantity,point,phase,value,unit and a value a row, or - for standard input."
_VALUE = (
    "Value: a figure, comma or point, nothing between thousands. Leave out what was not measured. Unit: empty takes the"
    " one named first."
)
_PRESSURE = "kPa, bar, psi, kgf/cm2 or MPa"
_RUNNING = (
    f"oil_pressure ({_PRESSURE}), coolant, oil_temperature, exhaust (°C or °F; point: the cylinder, or empty), crankcase"
    " (kPa, mbar, Pa), cranking_volts, cranking_speed"
)
_LASH = (
    f"{_CSV} Quantity: lash,"
    " or shim for the thickness fitted, in mm. Point: cylinder, I or E, and a number where there are several: 3E, 3I2; a"
    " bridged pair is one. Phase: found or left; empty means found. Value: 0.25, 0,25, the digits on the blade (30 is 0.30"
    " mm, 8 is 0.008 in), 0.25..0.30 where the first goes and the second does not, <0.05 where the thinnest does not go."
    " Unit: mm or in; empty takes that of the engine's limits."
)
_KINDS = {
    "lash": ("valve lash, found and left", _LASH),
    "compression": (
        "compression of each cylinder, dry and wet",
        f"{_CSV} Quantity: pressure ({_PRESSURE}; point: the cylinder; phase: dry or wet, empty means dry),"
        f" cranking_speed (rpm), oil_temperature (°C, °F), throttle (open or closed). {_VALUE}",
    ),
    "leakdown": (
        "leak-down of each cylinder",
        f"{_CSV} Point: the cylinder. Quantity: leak (%), or the pair supply and held ({_PRESSURE}; a supply without a"
        f" point is that of every cylinder), heard (intake, exhaust, crankcase, coolant or next). {_VALUE}",
    ),
    "run": (
        "a test run",
        f"{_CSV} Quantity: minutes (min, h), load (%, kW, hp, PS), purpose (emergency, test, supplemental, 36-month or"
        " other), exhaust_temperature_held (yes or no: the maker's least), and what was read off:"
        f" {_RUNNING}. The stages of a run in stages are the points 1 and 2 of minutes and load. {_VALUE}",
    ),
    "spot": ("readings taken on a round", f"{_CSV} Quantity: {_RUNNING}. {_VALUE}"),
    "oil": (
        "an oil sample, as the laboratory reports it",
        f"{_CSV} Quantity: hours_on_oil, top_up (L, galus, galimp; since the change), grade, tbn_method (perchloric or"
        " hydrochloric), repair (sealant or other: since the sample before), iso4406 (18/16/13), and what was found: kv40,"
        " kv100, tbn, tan, ph, water, fuel, soot, insolubles (%, ppm), glycol (ppm, %), oxidation, nitration,"
        " flash_point, and elements by symbol (Fe, Cu, ... in ppm). Phase: empty for the sample, new for fresh oil. Value:"
        " a figure, <1 or ND where the laboratory could not detect it. Leave out what it does not report.",
    ),
}


def add_commands(commands: Commands) -> None:
    """Add `measure`."""
    kinds = commands.add_parser("measure", help="judge and keep measurements from a sheet").add_subparsers(
        metavar="KIND", required=True
    )
    for kind, (text, form) in _KINDS.items():
        _add_kind(kinds.add_parser(kind, help=text, description=form.replace("%", "%%")), kind)


def _add_kind(parser: CommandParser, kind: str) -> None:
    parser.add_argument("tag", metavar="TAG")
    parser.add_argument("file", metavar="FILE", help="the sheet, or - to read it here")
    parser.add_argument("--on", type=day, metavar="DATE", help="day it was taken, else the as-of day")
    parser.add_argument("--at", action="append", metavar="VALUE", help="what the dial showed, such as 1234h")
    parser.add_argument("--by", metavar="NAME", help="who measured")
    parser.add_argument("--note", metavar="TEXT", help="anything worth keeping")
    add_sheet_options(parser)
    parser.add_argument("--dry-run", action="store_true", help="only judge it, store nothing")
    parser.add_argument("--json", action="store_true", help="print one JSON object, figures unrounded")
    parser.set_defaults(run=_measure, kind=kind)


def add_sheet_options(parser: CommandParser) -> None:
    """Add what a sheet was taken with, for every command that takes one."""
    parser.add_argument("--gauge", metavar="TEXT", help="the gauge, tester or laboratory")
    parser.add_argument(
        "--when", choices=("cold", "hot"), help="what the engine was; left out, what its limits ask for"
    )
    parser.add_argument("--received", type=day, metavar="DATE", help="day the results came, where that was later")
    parser.add_argument("--lab-no", metavar="TEXT", help="number of the laboratory's report")
    parser.add_argument("--sure", action="store_true", help="the sheet is right, odd or unfinished as it looks")


def read_sheet_option(name: str | None) -> "SheetIn | None":
    """Read the file a sheet option names; None where none was given. Raises Refused for what is no sheet."""
    if name is None:
        return None
    from fleetcare.exchange.sheet_in import read_sheet

    return read_sheet(name)


def _measure(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.work import LogDraft
    from fleetcare.operations.due import watch_moves
    from fleetcare.operations.measure import measure

    context = context_of(given)
    values = options_of(given, "file", "dry_run")
    values |= {"on": given.on or context.today(), "sheet": read_sheet_option(given.file)}
    draft = read_draft(LogDraft, values, option_label)
    with context.write() as session:
        with watch_moves(session, draft.tag, context.today()) as moves:
            measured = measure(session, draft, context.today())
        if given.dry_run:
            session.rollback()
    if given.json:
        output.deliver(output.json_text(sheet_object(measured, is_stored=not given.dry_run)))
        return
    say_report(measured.report)
    for note in measured.notes:
        output.say(f"Note: {note}.")
    output.say(_say_stored(measured, is_dry=given.dry_run))
    if not given.dry_run:
        say_moved(moves.moved)


def _say_stored(measured: "Measured", *, is_dry: bool) -> str:
    entry, tag = measured.report.sheet.entry, measured.report.tag
    if not measured.is_new:
        return f"Nothing new: entry {entry} of {tag} has this sheet already; what is wrong in it is put right with correct."
    return "This was a dry run, nothing is stored." if is_dry else f"Kept as entry {entry} of {tag}."
