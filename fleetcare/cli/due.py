"""`due` and `show`: what is due, and the whole working of it."""

import argparse
from collections.abc import Sequence
from typing import TYPE_CHECKING

from fleetcare.cli import output
from fleetcare.cli.parser import Commands, whole
from fleetcare.cli.sheet_words import lash_table, measures_table
from fleetcare.cli.shop import context_of, null
from fleetcare.domain.cautions import GENERAL
from fleetcare.domain.lines import State

if TYPE_CHECKING:
    from datetime import date

    from sqlalchemy import Connection

    from fleetcare.operations.due import Filters
    from fleetcare.operations.sheet_report import SheetReport
    from fleetcare.operations.show import ItemPage
    from fleetcare.rules.due.row import DueRow


def add_commands(commands: Commands) -> None:
    """Add `due` and `show`."""
    due = commands.add_parser("due", help="what each engine needs next, worst first")
    due.add_argument("--within", type=whole, metavar="DAYS", help="leave out what is clear for longer than this")
    due.add_argument("--site", metavar="NAME", help="one site only")
    due.add_argument("--engine", metavar="TAG", help="one engine or machine only")
    due.add_argument(
        "--state",
        action="append",
        choices=[state.value for state in State],
        metavar="STATE",
        help="one state only; may be repeated",
    )
    due.add_argument("--recorded-only", action="store_true", help="no estimates and no forecasts of meters")
    due.add_argument("--format", choices=("table", "csv", "json"), default="table", help="table, csv or json")
    due.add_argument("--out", metavar="FILE", help="write to a file instead of the screen")
    due.set_defaults(run=_due)
    show = commands.add_parser("show", help="nameplate, meters, lines with their full working")
    show.add_argument("tag", metavar="TAG")
    show.add_argument("task", metavar="TASK", nargs="?")
    show.set_defaults(run=_show)


def _due(given: argparse.Namespace) -> None:
    from fleetcare.operations.due import Filters, due_rows

    context = context_of(given)
    filters = Filters(
        days=given.within,
        site=given.site,
        engine=given.engine,
        states=tuple(State(state) for state in given.state or ()),
        recorded_only=given.recorded_only,
    )
    with context.read() as connection:
        rows = due_rows(connection, context.today(), filters, is_future=context.is_future)
        wanting = _wanting(connection, context.today(), filters) if given.format == "table" else ""
    text = f"{_RENDER[given.format](rows)}{wanting}"
    if given.format == "table" and given.out is None:
        output.say(text.rstrip("\n"))
    else:
        output.deliver(text, given.out)
        if given.out is not None:
            output.say(f"{len(rows)} {'line' if len(rows) == 1 else 'lines'} written to {given.out}")


def _wanting(connection: "Connection", on: "date", filters: "Filters") -> str:
    """Say which findings of the shop, or of its one engine or site, want an answer, in a closing line for people."""
    from fleetcare.operations.due import tags_within
    from fleetcare.operations.open_findings import open_findings, say_open

    said = say_open(open_findings(connection, on, tags=tags_within(connection, on, filters)))
    return f"\n{said}; see fleetcare findings --open.\n" if said else ""


def _csv(rows: "Sequence[DueRow]") -> str:
    from fleetcare.operations.due_file import due_csv

    return due_csv(rows)


def _json(rows: "Sequence[DueRow]") -> str:
    from fleetcare.operations.due import COLUMNS

    return output.json_text([{name: null(getattr(row, name)) for name in COLUMNS} for row in rows])


def _table(rows: "Sequence[DueRow]") -> str:
    """Group the rows as a morning needs them."""
    from fleetcare.operations.due_words import grouped

    blocks = [
        f"{group.upper()} ({len(found)})\n{output.table(_HEADERS, [_cells(row) for row in found])}"
        for group, found in grouped(rows).items()
        if found
    ]
    return "\n\n".join(blocks or ["No lines."]) + f"\n\n{GENERAL}\n"


_HEADERS = ("engine", "site", "task", "due at", "due on", "remaining", "likely", "note")


def _cells(row: "DueRow") -> list[str]:
    from fleetcare.operations.due_words import notes, say_counted, say_remaining

    likely = row.likely_date.isoformat() if row.likely_date is not None else ""
    due_on = row.next_due_on.isoformat() if row.next_due_on is not None else ""
    note = "; ".join(notes(row))
    return [row.engine, row.site, row.task, say_counted(row), due_on, say_remaining(row), likely, note]


def _lines(rows: "Sequence[DueRow]") -> str:
    """Give the lines of one engine or machine, each with its state in front."""
    cells = ((row, _cells(row)[2:]) for row in rows)
    said_in_front = [[row.state, *cell[:-1], cell[-1].removeprefix(row.state).lstrip("; ")] for row, cell in cells]
    return _block(("state", *_HEADERS[2:]), said_in_front)


_READINGS = ("reading", "on", "shown", "remark")
_HISTORY = ("entry", "on", "kind", "what", "figures", "by", "remark")
_READINGS_SHOWN = 10
_RENDER = {"table": _table, "csv": _csv, "json": _json}


def say_before_return(tag: str, rows: "Sequence[DueRow]") -> None:
    """Print the lines that waited for an engine to run again."""
    if not rows:
        output.say(f"{tag} has no lines.")
        return
    output.say(f"BEFORE RETURN ({len(rows)})")
    output.say(_lines(rows))


def _show(given: argparse.Namespace) -> None:
    from fleetcare.operations.show import item_page, task_sheet, task_working

    context = context_of(given)
    with context.read() as connection:
        if given.task is None:
            page = item_page(connection, given.tag, context.today(), is_future=context.is_future)
            blocks = _page_blocks(page)
        else:
            working, past = task_working(
                connection, given.tag, given.task, context.today(), is_future=context.is_future
            )
            sheet = task_sheet(connection, given.tag, given.task, context.today())
            blocks = [("", _labels(working)), ("HISTORY", _labels(past)), ("LAST SHEET", _sheet(sheet))]
    for title, text in blocks:
        if text:
            output.say(f"{title}\n{text}\n" if title else f"{text}\n")
    output.say(GENERAL)


def _page_blocks(page: "ItemPage") -> list[tuple[str, str]]:
    readings = [[line.number, line.on, line.shown, line.remark] for line in page.readings[:_READINGS_SHOWN]]
    history = [[e.number, e.on, e.kind, e.what, e.figures, e.by, e.remark] for e in page.history]
    more = len(page.readings) - _READINGS_SHOWN
    return [
        ("", _labels(page.nameplate)),
        ("METERS", _labels(page.meters)),
        (f"READINGS{f', the newest {_READINGS_SHOWN}' if more > 0 else ''}", _block(_READINGS, readings)),
        ("LINES", _lines(page.rows)),
        ("LOG", _block(_HISTORY, history)),
    ]


def _sheet(report: "SheetReport | None") -> str:
    """Give a sheet value by value, with what it was held against."""
    if report is None:
        return ""
    sheet, lash = report.sheet, report.lash
    parts = [f"entry {sheet.entry}, {sheet.on}", sheet.condition, sheet.gauge and f"gauge {sheet.gauge}", sheet.by]
    told = ", ".join(output.clean(part) for part in parts if part)
    notes = "".join(f"\n{note}" for note in (lash.notes() if lash else report.notes))
    table = lash_table(lash) if lash else measures_table(report)
    return f"{told}{f'; limits: {lash.limits}' if lash else ''}\n{table}{notes}"


def _block(headers: Sequence[str], rows: Sequence[Sequence[object]]) -> str:
    return output.table(headers, rows) if rows else ""


def _labels(labels: "Sequence[tuple[str, str]]") -> str:
    wide = max((len(label) for label, _ in labels), default=0)
    # A line break somebody typed must not begin a line that looks like one of ours.
    return "\n".join(f"{label:<{wide}}  {output.clean(text)}" for label, text in labels)
