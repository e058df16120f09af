"""A judged sheet as text: its values in a table, what the rules find, what is missing, and the cautions of the job."""

from collections.abc import Sequence
from typing import TYPE_CHECKING

from fleetcare.cli import output
from fleetcare.domain.cautions import GENERAL
from fleetcare.domain.quantities import plain, tenth

if TYPE_CHECKING:
    from fleetcare.operations.findings import EngineFinding
    from fleetcare.operations.sheet_report import SheetReport
    from fleetcare.operations.sheets_judge import JudgedRow, JudgedSheet

_LASH_HEADERS = ("point", "phase", "value", "verdict", "why", "to mend", "last time")
_HEADERS = ("what", "point", "phase", "value", "verdict", "why", "rule")


def say_report(report: "SheetReport") -> None:
    """Print a judged sheet."""
    sheet, lash = report.sheet, report.lash
    taken = [sheet.condition, sheet.gauge and f"gauge {sheet.gauge}"]
    if sheet.lab_number:
        taken.append(f"report {sheet.lab_number}")
    if sheet.received_on is not None:
        taken.append(f"received {sheet.received_on}")
    if lash is None and report.engine_hours is not None:
        mark = "~" if report.engine_hours.approximate else ""
        taken.append(f"{mark}{plain(tenth(report.engine_hours.value))} h of life")
    told = ", ".join(filter(None, taken))
    output.say(f"{report.title} of {report.tag} on {sheet.on}{f', {told}' if told else ''}.")
    if lash is not None:
        _say_lash(lash, report.notes)
    else:
        _say_measures(report)
    for finding in report.findings:
        _say_finding(finding)
    for caution in report.cautions:
        output.say(f"Caution: {caution}")


def _say_lash(judged: "JudgedSheet", notes: Sequence[str]) -> None:
    output.say(f"Limits: {judged.limits}.")
    output.say(lash_table(judged))
    for note in (*judged.notes(), *notes):
        output.say(f"Note: {note}.")
    output.say(f"{_say_counts([row.verdict for row in judged.rows])}{_say_out(judged)}.")
    if judged.defect():
        output.say(f"{judged.defect()}. To raise it: {judged.raise_command()}")


def lash_table(judged: "JudgedSheet") -> str:
    """Give the values of a lash sheet as a table; columns that would be empty are left out."""
    return _filled(_LASH_HEADERS, [_lash_cells(row) for row in judged.rows])


def _lash_cells(row: "JudgedRow") -> list[str]:
    what = "" if row.quantity == "lash" else f" {row.quantity}"
    return [row.point, row.phase, f"{row.value} {row.unit}{what}", row.verdict, row.note, row.mending, row.last]


def _say_out(judged: "JudgedSheet") -> str:
    """Say which points were found and are left out of limits."""
    stand = judged.stand
    out = f"; found out of limits: {', '.join(stand.found_out)}" if stand.found_out else ""
    return out + (f"; now out of limits: {', '.join(stand.left_out)}" if stand.left_out else "")


def _say_measures(report: "SheetReport") -> None:
    for column, word in report.words:
        where = f" at {word.point}" if word.point else ""
        output.say(f"{column.title[0].upper()}{column.title[1:]}{where}: {word.qualifier}.")
    if report.rows:
        output.say(measures_table(report))
    for note in report.notes:
        output.say(f"Note: {note}.")
    if report.incomplete:
        output.say(f"Note: {report.incomplete}.")
    output.say(f"{_say_counts([row.verdict for row in report.rows])}.")


def measures_table(report: "SheetReport") -> str:
    """Give the values of any other sheet as a table; columns that would be empty are left out."""
    cells = [[row.title, row.point, row.phase, row.figure, row.verdict, row.why, row.rule] for row in report.rows]
    return _filled(_HEADERS, cells)


def _filled(headers: Sequence[str], rows: Sequence[Sequence[str]]) -> str:
    kept = [place for place in range(len(headers)) if any(row[place] for row in rows)]
    return output.table([headers[place] for place in kept], [[row[place] for place in kept] for row in rows])


def _say_counts(verdicts: Sequence[str]) -> str:
    """Say how many values have which verdict."""
    counts = ", ".join(f"{verdicts.count(verdict)} {verdict}" for verdict in dict.fromkeys(verdicts))
    return f"{len(verdicts)} {'value' if len(verdicts) == 1 else 'values'}{f': {counts}' if counts else ''}"


def _say_finding(finding: "EngineFinding") -> None:
    """Print a finding with its working, its source, and what to do next; the caution of all work comes last, once."""
    row = finding.row
    lines = [
        *(("worked out", working) for working in row.working),
        ("source", row.source),
        ("next step", row.next_step),
        ("caution", row.caution.removesuffix(GENERAL).rstrip()),
    ]
    output.say(f"{row.severity.capitalize()} {finding.id}: {row.explanation}")
    output.say(output.labelled([line for line in lines if line[1]], indent="  "))
