"""`log` and `correct`: what was done, and what an entry should have said."""

import argparse
from typing import TYPE_CHECKING

from fleetcare.cli import output
from fleetcare.cli.measure import add_sheet_options, read_sheet_option
from fleetcare.cli.parser import CommandParser, Commands, day, whole
from fleetcare.cli.sheet_words import say_report
from fleetcare.cli.shop import changes_of, context_of, label_with, option_label, options_of

if TYPE_CHECKING:
    from fleetcare.operations.entering import Entered
    from fleetcare.operations.sheet_report import SheetReport


def add_commands(commands: Commands) -> None:
    """Add `log` and `correct`."""
    log = commands.add_parser("log", help="write down what was done")
    log.add_argument("tag", metavar="TAG")
    log.add_argument("task", metavar="TASK", nargs="*", help="tasks that were done")
    _add_shared_options(log)
    log.add_argument("--follow-up", action="store_true", help="raise a follow-up from the defect")
    log.add_argument("--until", type=day, metavar="DATE", help="last day for the follow-up, else at once")
    log.add_argument("--part-done", action="store_true", help="done in part: closes nothing")
    log.set_defaults(run=_log)
    correct = commands.add_parser("correct", help="correct or void an entry")
    correct.add_argument("entry", type=whole, metavar="ENTRY", help="number of the entry")
    correct.add_argument("--task", action="append", metavar="TASK", help="tasks that were really done")
    _add_shared_options(correct)
    correct.add_argument(
        "--part-done", action=argparse.BooleanOptionalAction, default=None, help="done in part, or not"
    )
    correct.add_argument("--void", action="store_true", help="nothing of it is true")
    correct.add_argument("--why", metavar="TEXT", help="reason")
    correct.set_defaults(run=_correct)


def _add_shared_options(parser: CommandParser) -> None:
    parser.add_argument("--on", type=day, metavar="DATE", help="day it was done, else the as-of day")
    parser.add_argument("--at", action="append", metavar="VALUE", help="what the dial showed, such as 1234h")
    parser.add_argument("--by", metavar="NAME", help="who did it")
    parser.add_argument("--note", metavar="TEXT", help="anything worth keeping")
    parser.add_argument("--top-up", metavar="VOLUME", help="oil topped up, such as 8L")
    parser.add_argument("--repair", metavar="TEXT", help="what was repaired")
    parser.add_argument("--defect", metavar="TEXT", help="a defect seen")
    parser.add_argument("--part", action="append", metavar="NAME[:N]", help="a part used")
    parser.add_argument("--component", metavar="TEXT", help="what was worked on, such as injector 3")
    parser.add_argument("--downtime", metavar="HOURS", help="time out of service, such as 6h")
    parser.add_argument(
        "--sheet", metavar="FILE", help="measurements that came of it, as for measure; - reads them here"
    )
    add_sheet_options(parser)


def _log(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.work import LogDraft
    from fleetcare.operations.entering import enter_work
    from fleetcare.operations.sheet_report import report_logged

    context = context_of(given)
    values = options_of(given) | {"on": given.on or context.today(), "sheet": read_sheet_option(given.sheet)}
    draft = read_draft(LogDraft, values, label_with(task="TASK"))
    with context.write() as session:
        entered = enter_work(session, draft, context.today())
        report = report_logged(session.connection(), entered.logged, context.today())
    _say(entered, report)


def _correct(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.work import CorrectionDraft
    from fleetcare.operations.entering import enter_correction
    from fleetcare.operations.sheet_report import report_logged

    context = context_of(given)
    sheet = read_sheet_option(given.sheet)
    draft = read_draft(
        CorrectionDraft, changes_of(given) | {"part_done": given.part_done, "sheet": sheet}, option_label
    )
    with context.write() as session:
        entered = enter_correction(session, draft, context.today())
        is_judged_anew = draft.model_fields_set & {"sheet", "when", "on", "received"}
        report = report_logged(session.connection(), entered.logged, context.today()) if is_judged_anew else None
    _say(entered, report)


def _say(entered: "Entered", report: "SheetReport | None") -> None:
    """Print what an entry stored, its sheet where it is judged anew, and the lines it moved."""
    for line in entered.said:
        output.say(line)
    if report is not None:
        say_report(report)
    for line in entered.moved:
        output.say(line)
