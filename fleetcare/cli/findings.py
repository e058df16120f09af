"""`findings` and `answer`: what the rules make of what was measured, and what people decide about it."""

import argparse
from collections.abc import Sequence
from typing import TYPE_CHECKING

from fleetcare.cli import output
from fleetcare.cli.parser import Commands
from fleetcare.cli.shop import context_of, label_with, null, options_of, say_entered, say_progress
from fleetcare.domain.cautions import GENERAL

if TYPE_CHECKING:
    from fleetcare.operations.finding_rows import FindingRecord


def add_commands(commands: Commands) -> None:
    """Add `findings` and `answer`."""
    findings = commands.add_parser("findings", help="what the rules make of what was measured, each with its working")
    findings.add_argument("--open", action="store_true", help="only those that want an answer")
    findings.add_argument("--engine", metavar="TAG", help="one engine only")
    findings.add_argument("--format", choices=("table", "csv", "json"), default="table", help="table, csv or json")
    findings.add_argument("--out", metavar="FILE", help="write to a file instead of the screen")
    findings.set_defaults(run=_findings)
    answer = commands.add_parser("answer", help="decide about a finding: accept it, or raise a follow-up")
    answer.add_argument("finding", metavar="FINDING", help="its id, as findings shows it")
    what = answer.add_mutually_exclusive_group(required=True)
    what.add_argument("--accept", action="store_true", help="live with it, until it gets graver")
    what.add_argument("--follow-up", action="store_true", help="have something done: a line of the due list")
    answer.add_argument("--why", required=True, metavar="TEXT", help="reason")
    answer.add_argument("--by", required=True, metavar="NAME", help="who decides it")
    answer.set_defaults(run=_answer)


def _findings(given: argparse.Namespace) -> None:
    from fleetcare.operations.finding_rows import finding_rows

    context = context_of(given)
    with context.read() as connection:
        rows = finding_rows(
            connection, context.today(), engine=given.engine, only_open=given.open, progress=say_progress
        )
    text = _RENDER[given.format](rows)
    if given.format == "table" and given.out is None:
        output.say(text.rstrip("\n"))
    else:
        output.deliver(text, given.out)
        if given.out is not None:
            output.say(f"{len(rows)} {'finding' if len(rows) == 1 else 'findings'} written to {given.out}")


def _answer(given: argparse.Namespace) -> None:
    from fleetcare.drafts.findings import AnswerDraft
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.operations.answer import enter_answer

    context = context_of(given)
    draft = read_draft(AnswerDraft, options_of(given) | {"on": context.today()}, label_with(finding="FINDING"))
    with context.write() as session:
        entered = enter_answer(session, draft, context.today())
    say_entered(entered)


def _csv(rows: "Sequence[FindingRecord]") -> str:
    from fleetcare.operations.finding_rows import findings_csv

    return findings_csv(rows)


def _json(rows: "Sequence[FindingRecord]") -> str:
    from fleetcare.operations.finding_rows import FINDING_COLUMNS

    return output.json_text([{name: null(getattr(row, name)) for name in FINDING_COLUMNS} for row in rows])


def _table(rows: "Sequence[FindingRecord]") -> str:
    """Give each finding as a block of its own: a head line, then what it rests on, line by line."""
    blocks = [_block(row) for row in rows]
    return "\n\n".join(blocks or ["No findings."]) + f"\n\n{GENERAL}\n"


def _block(row: "FindingRecord") -> str:
    from fleetcare.operations.finding_rows import say_figures

    lines = [
        ("measured", say_figures(row)),
        ("explanation", row.explanation),
        ("working", row.working),
        ("evidence", row.evidence),
        ("since", row.since.isoformat()),
        ("rule", row.rule),
        ("source", row.source),
        ("next step", row.next_step),
        ("due by", row.due_by.isoformat() if row.due_by else ""),
        ("because", row.because),
        ("caution", row.caution.removesuffix(GENERAL).rstrip()),
    ]
    head = f"{row.id}  {row.engine}, {row.subject}: {row.cause} ({row.severity}, {row.state})"
    return f"{output.clean(head)}\n{output.labelled([line for line in lines if line[1]], indent='  ')}"


_RENDER = {"table": _table, "csv": _csv, "json": _json}
