"""A judged sheet as one JSON object: the sheet, each value with its verdict, and what the rules find."""

from decimal import Decimal, InvalidOperation
from typing import TYPE_CHECKING, Any

from fleetcare.cli.shop import null

if TYPE_CHECKING:
    from fleetcare.operations.findings import EngineFinding
    from fleetcare.operations.measure import Measured
    from fleetcare.operations.sheet_report import SheetReport
    from fleetcare.operations.sheets_judge import JudgedRow, JudgedSheet
    from fleetcare.rules.explain_measured import MeasuredRow


def sheet_object(measured: "Measured", *, is_stored: bool) -> dict[str, Any]:
    """Give the whole answer of `measure` as one JSON object."""
    report = measured.report
    sheet, lash, is_kept = report.sheet, report.lash, is_stored or not measured.is_new
    told: dict[str, Any] = {
        "engine": report.tag,
        "kind": sheet.kind,
        "entry": sheet.entry if is_kept else None,
        "is_new": measured.is_new,
        "taken_on": sheet.on,
        "by": null(sheet.by),
        "condition": null(sheet.condition),
        "gauge": null(sheet.gauge),
        "note": null(sheet.note),
    }
    told |= _lash_sheet(lash) if lash is not None else _measured_sheet(report)
    return {
        "sheet": told,
        "judged": [_lash_value(row) for row in lash.rows] if lash else [_value(row) for row in report.rows],
        "findings": [finding_object(finding) for finding in report.findings],
        "notes": [*(lash.notes() if lash else report.notes), *measured.notes],
        "follow_up": null(lash.raise_command()) if lash else None,
        "cautions": report.cautions,
    }


def finding_object(finding: "EngineFinding") -> dict[str, Any]:
    """Give a finding as an object."""
    row = finding.row
    return {
        "id": finding.id,
        "engine": row.engine,
        "rule": row.rule,
        "severity": row.severity,
        "subject": row.subject,
        "measured": row.measured,
        "unit": null(row.unit),
        "limit": row.limit,
        "margin": row.margin,
        "since": row.since,
        "source": row.source,
        "explanation": row.explanation,
        "next_step": row.next_step,
        "state": finding.state,
        "cause": row.cause,
        "working": row.working,
        "evidence": row.evidence,
        "caution": row.caution,
        "due_by": row.due_by,
    }


def _lash_sheet(judged: "JudgedSheet") -> dict[str, Any]:
    stand = judged.stand
    return {
        "limits": judged.limits,
        "is_complete": stand.is_complete,
        "missing": stand.missing,
        "found_out": stand.found_out,
        "left_out": stand.left_out,
        "not_judged": stand.untold,
    }


def _measured_sheet(report: "SheetReport") -> dict[str, Any]:
    sheet, hours = report.sheet, report.engine_hours
    return {
        "lab_number": null(sheet.lab_number),
        "received_on": sheet.received_on,
        "engine_hours": hours.value if hours else None,
        "engine_hours_estimated": hours.approximate if hours else None,
        "words": [{"quantity": one.quantity, "point": one.point, "word": one.qualifier} for _, one in report.words],
        "is_complete": not report.incomplete,
        "incomplete": null(report.incomplete),
        "missing": report.missing,
    }


def _lash_value(row: "JudgedRow") -> dict[str, Any]:
    return {
        "quantity": row.quantity,
        "point": row.point,
        "phase": row.phase,
        "value": _figure(row.value),
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


def _value(row: "MeasuredRow") -> dict[str, Any]:
    return {
        "quantity": row.quantity,
        "point": row.point,
        "phase": row.phase,
        "value": _figure(row.value),
        "unit": row.unit,
        "verdict": row.verdict,
        "why": null(row.why),
        "rule": null(row.rule),
        "measured": row.measured,
        "limit": row.limit,
        "margin": row.margin,
        "limit_unit": null(row.limit_unit),
        "source": null(row.source),
    }


def _figure(text: str) -> Decimal | str:
    """Give a value as a number, or as it is where it is a range between two blades, a bound, or ND."""
    try:
        return Decimal(text)
    except InvalidOperation:
        return text
