"""`measure`: sheets of measurements, judged as they come in."""

import argparse
from decimal import Decimal, InvalidOperation
from typing import TYPE_CHECKING, Any

from fleetcare.cli import output
from fleetcare.cli.parser import CommandParser, Commands, day
from fleetcare.cli.shop import context_of, null, option_label, options_of, say_moved
from fleetcare.domain.cautions import LASH as CAUTIONS

if TYPE_CHECKING:
    from fleetcare.drafts.sheets import SheetIn
    from fleetcare.operations.measure import Measured
    from fleetcare.operations.sheets_judge import JudgedRow, JudgedSheet

_FORM = (
    "FILE is CSV with the header quantity,point,phase,value,unit and a value a row, or - for standard input. Quantity: lash,"
    " or shim for the thickness fitted, in mm. Point: cylinder, I or E, and a number where there are several: 3E, 3I2; a"
    " bridged pair is one. Phase: found or left; empty means found. Value: 0.25, 0,25, the digits on the blade (30 is 0.30"
    " mm, 8 is 0.008 in), 0.25..0.30 where the first goes and the second does not, <0.05 where the thinnest does not go."
    " Unit: mm or in; empty takes that of the engine's limits."
)
_HEADERS = ("point", "phase", "value", "verdict", "why", "to mend", "last time")


def add_commands(commands: Commands) -> None:
    """Add `measure`."""
    kinds = commands.add_parser("measure", help="judge and keep measurements from a sheet").add_subparsers(
        metavar="KIND", required=True
    )
    lash = kinds.add_parser("lash", help="valve lash, found and left", description=_FORM)
    lash.add_argument("tag", metavar="TAG")
    lash.add_argument("file", metavar="FILE", help="the sheet, or - to read it here")
    lash.add_argument("--on", type=day, metavar="DATE", help="day it was taken, else the as-of day")
    lash.add_argument("--at", action="append", metavar="VALUE", help="what the dial showed, such as 1234h")
    lash.add_argument("--by", metavar="NAME", help="who measured")
    lash.add_argument("--note", metavar="TEXT", help="anything worth keeping")
    add_sheet_options(lash)
    lash.add_argument("--dry-run", action="store_true", help="only judge it, store nothing")
    lash.add_argument("--json", action="store_true", help="print one JSON object, figures unrounded")
    lash.set_defaults(run=_lash)


def add_sheet_options(parser: CommandParser) -> None:
    """Add what a sheet was taken with, for every command that takes one."""
    parser.add_argument("--gauge", metavar="TEXT", help="the gauge or tester used")
    parser.add_argument(
        "--when", choices=("cold", "hot"), help="what the engine was; left out, what its limits ask for"
    )
    parser.add_argument("--sure", action="store_true", help="the sheet is right, odd or unfinished as it looks")


def read_sheet_option(name: str | None) -> "SheetIn | None":
    """Read the file a sheet option names; None where none was given. Raises Refused for what is no sheet."""
    if name is None:
        return None
    from fleetcare.exchange.sheet_in import read_sheet

    return read_sheet(name)


def _lash(given: argparse.Namespace) -> None:
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
        output.deliver(output.json_text(_object(measured, is_stored=not given.dry_run)))
        return
    say_sheet(measured.sheet)
    for note in measured.notes:
        output.say(f"Note: {note}.")
    output.say(_say_stored(measured, is_dry=given.dry_run))
    if not given.dry_run:
        say_moved(moves.moved)


def say_sheet(judged: "JudgedSheet") -> None:
    """Print a judged sheet: what each value is, what it says of the engine, and the cautions of the job."""
    sheet = judged.sheet
    taken = ", ".join(part for part in (sheet.condition, sheet.gauge and f"gauge {sheet.gauge}") if part)
    output.say(f"Valve lash of {judged.form.tag} on {sheet.on}{f', {taken}' if taken else ''}.")
    output.say(f"Limits: {judged.limits}.")
    output.say(sheet_table(judged))
    for note in judged.notes():
        output.say(f"Note: {note}.")
    output.say(f"{_say_counts(judged)}.")
    if judged.defect():
        output.say(f"{judged.defect()}. To raise it: {judged.raise_command()}")
    for caution in CAUTIONS:
        output.say(f"Caution: {caution}")


def sheet_table(judged: "JudgedSheet") -> str:
    """Give the values of a sheet as a table; columns that would be empty are left out."""
    rows = [_cells(row) for row in judged.rows]
    kept = [place for place in range(len(_HEADERS)) if any(row[place] for row in rows)]
    return output.table([_HEADERS[place] for place in kept], [[row[place] for place in kept] for row in rows])


def _cells(row: "JudgedRow") -> list[str]:
    what = "" if row.quantity == "lash" else f" {row.quantity}"
    return [row.point, row.phase, f"{row.value} {row.unit}{what}", row.verdict, row.note, row.mending, row.last]


def _say_counts(judged: "JudgedSheet") -> str:
    """Say how many values have which verdict, and which points were found and are left out of limits."""
    verdicts = [row.verdict for row in judged.rows]
    counts = ", ".join(f"{verdicts.count(verdict)} {verdict}" for verdict in dict.fromkeys(verdicts))
    stand = judged.stand
    out = f"; found out of limits: {', '.join(stand.found_out)}" if stand.found_out else ""
    left = f"; now out of limits: {', '.join(stand.left_out)}" if stand.left_out else ""
    return f"{len(verdicts)} {'value' if len(verdicts) == 1 else 'values'}: {counts}{out}{left}"


def _say_stored(measured: "Measured", *, is_dry: bool) -> str:
    entry, tag = measured.sheet.sheet.entry, measured.sheet.form.tag
    if not measured.is_new:
        return f"Nothing new: entry {entry} of {tag} has this sheet already; what is wrong in it is put right with correct."
    return "This was a dry run, nothing is stored." if is_dry else f"Kept as entry {entry} of {tag}."


def _object(measured: "Measured", *, is_stored: bool) -> dict[str, Any]:
    """Give the whole answer as one JSON object."""
    judged = measured.sheet
    sheet, stand, is_kept = judged.sheet, judged.stand, is_stored or not measured.is_new
    return {
        "sheet": {
            "engine": judged.form.tag,
            "kind": sheet.kind,
            "entry": sheet.entry if is_kept else None,
            "is_new": measured.is_new,
            "taken_on": sheet.on,
            "by": null(sheet.by),
            "condition": null(sheet.condition),
            "gauge": null(sheet.gauge),
            "note": null(sheet.note),
            "limits": judged.limits,
            "is_complete": stand.is_complete,
            "missing": stand.missing,
            "found_out": stand.found_out,
            "left_out": stand.left_out,
            "not_judged": stand.untold,
        },
        "judged": [_judged(row) for row in judged.rows],
        "findings": [],
        "notes": [*judged.notes(), *measured.notes],
        "follow_up": null(judged.raise_command()),
        "cautions": CAUTIONS,
    }


def _judged(row: "JudgedRow") -> dict[str, Any]:
    try:
        value: Decimal | str = Decimal(row.value)
    except InvalidOperation:
        value = row.value  # two blades, or a bound
    return {
        "quantity": row.quantity,
        "point": row.point,
        "phase": row.phase,
        "value": value,
        "unit": row.unit,
        "verdict": row.verdict,
        "place": null(row.place),
        "limit_low": row.limit_low,
        "limit_high": row.limit_high,
        "limit_unit": null(row.limit_unit),
        "margin": row.margin,
        "why": null(row.note),
        "to_mend": null(row.mending),
        "last": null(row.last),
    }
