"""`rules`: the rule book as it stands in the shop, and the shop's own rules put in force or dropped."""

import argparse
from collections.abc import Sequence
from dataclasses import asdict
from pathlib import Path
from typing import TYPE_CHECKING

from fleetcare.cli import output
from fleetcare.cli.parser import Commands
from fleetcare.cli.shop import context_of, label_with, null, say_progress
from fleetcare.domain.cautions import GENERAL
from fleetcare.errors import Misread

if TYPE_CHECKING:
    from fleetcare.operations.rule_rows import RuleRow
    from fleetcare.operations.shop_rules import Rejudged


_FEW = 8  # tags that still fit on a line


def add_commands(commands: Commands) -> None:
    """Add `rules`."""
    rules = commands.add_parser("rules", help="the rules of measurement: limits, source, which engines each judges")
    rules.add_argument("rule", metavar="ID", nargs="?", help="one rule, whole")
    rules.add_argument("--json", action="store_true", help="print a JSON array, figures and words as in the table")
    change = rules.add_mutually_exclusive_group()
    change.add_argument("--use", metavar="FILE", help="put the shop's rules of a TOML file in force, under its name")
    change.add_argument("--drop", metavar="NAME", help="put the shop's rules of a name out of force")
    rules.add_argument("--why", metavar="TEXT", help="reason, with --use or --drop")
    rules.add_argument("--by", metavar="NAME", help="who decides it, with --use or --drop")
    rules.set_defaults(run=_rules)


def _rules(given: argparse.Namespace) -> None:
    if given.use is not None or given.drop is not None:
        _change(given)
        return
    if given.why is not None or given.by is not None:
        raise Misread("--why and --by say who changes the rules", "give --use FILE or --drop NAME as well")
    from fleetcare.operations.rule_rows import find_rule, rule_rows

    context = context_of(given)
    with context.read() as connection:
        rows = rule_rows(connection, context.today())
    if given.rule is not None:
        rows = [find_rule(rows, given.rule)]
    if given.json:
        output.deliver(output.json_text([{name: null(cell) for name, cell in asdict(row).items()} for row in rows]))
    elif given.rule is not None:
        output.say(_whole(rows[0]))
    else:
        output.say(_table(rows))


def _change(given: argparse.Namespace) -> None:
    """Judge the fleet by other rules first, which takes its time and stores nothing; then store them at one stroke."""
    from fleetcare.drafts.findings import RulesDraft
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.operations.shop_rules import store_rules, try_rules, try_without

    if given.rule is not None or given.json:
        raise Misread("one thing at a time: rules are shown, or changed", "leave out ID and --json")
    missing = [option for option in ("why", "by") if getattr(given, option) is None]
    if missing:
        raise Misread(f"a change of the rules needs --{' and --'.join(missing)}", "say who decides it, and why")
    context = context_of(given)
    values = {"why": given.why, "by": given.by, "on": context.today()}
    draft = read_draft(RulesDraft, values, label_with())
    with context.read() as connection:
        if given.use is not None:
            rejudged = try_rules(connection, Path(given.use), context.today(), say_progress)
        else:
            rejudged = try_without(connection, given.drop, context.today(), say_progress)
    with context.write() as session:
        store_rules(session, rejudged, draft)
    _say_rejudged(rejudged)


def _say_rejudged(rejudged: "Rejudged") -> None:
    done = "dropped" if rejudged.text is None else "in force"
    output.say(f"Rules {rejudged.name} {done}; {_count(len(rejudged.kept), 'engine')} judged anew.")
    for note in rejudged.notes:
        output.say(f"Note: {note}.")
    for title, rows in (("Came", rejudged.came), ("Went", rejudged.went)):
        for row in rows:
            output.say(f"{title}: {row.id}  {row.engine}, {row.subject}: {row.cause} ({row.severity}, {row.state})")
    if not rejudged.came and not rejudged.went:
        output.say("No finding came or went.")


def _count(number: int, what: str) -> str:
    return f"{number} {what}" if number == 1 else f"{number} {what}s"


def _table(rows: "Sequence[RuleRow]") -> str:
    """Give each rule as a block: what it judges, its limits, for which engines, and where they are from."""
    return "\n\n".join([*map(_block, rows), GENERAL])


def _block(row: "RuleRow") -> str:
    lines = [("limits", row.limits), ("engines", _judged(row)), ("because", row.because), ("source", row.source)]
    head = f"{row.id}  {row.kinds}: {row.judges} ({row.state}, {row.origin})"
    return f"{output.clean(head)}\n{output.labelled([line for line in lines if line[1]], indent='  ')}"


def _judged(row: "RuleRow") -> str:
    """Name the engines a rule judges, or say how many they are where that would be a long list."""
    tags = row.engines.split(", ") if row.engines else []
    return row.engines if 0 < len(tags) <= _FEW else f"{len(tags)} engines" if tags else "none"


def _whole(row: "RuleRow") -> str:
    labels = [(name.replace("_", " "), text) for name, text in asdict(row).items() if text]
    return f"{output.labelled(labels)}\n\n{GENERAL}"
