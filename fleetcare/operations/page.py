"""One engine or machine with all a screen shows of it: its page, its lines, its life totals as curves."""

from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from fleetcare.operations.due_words import group_of
from fleetcare.operations.find import find_item
from fleetcare.operations.finding_rows import FindingRecord, finding_rows
from fleetcare.operations.lash_past import Trends, lash_trends
from fleetcare.operations.life_plot import LifeCurve, life_curves
from fleetcare.operations.measured_past import MeasuredTrends, measured_trends
from fleetcare.operations.review import ReviewLine
from fleetcare.operations.show import ItemPage, item_page
from fleetcare.rules.explain import Label

if TYPE_CHECKING:
    from sqlalchemy import Connection


@dataclass(frozen=True, slots=True)
class FullPage:
    """A page; `cautions` are those of its tasks, by task; `lash` and `measured` are what its
    sheets show over time, a machine has no `findings`."""

    item: ItemPage
    lines: tuple[ReviewLine, ...]
    curves: tuple[LifeCurve, ...]
    cautions: tuple[Label, ...]
    lash: Trends
    measured: MeasuredTrends
    findings: tuple[FindingRecord, ...]


def full_page(connection: "Connection", tag: str, on: date, *, is_future: bool = False) -> FullPage:
    """Load the page of an engine or machine; refuses an unknown tag."""
    found = item_page(connection, tag, on, is_future=is_future)
    name, item = found.facts.item.name, find_item(connection, tag, on=on, even_withdrawn=True)
    return FullPage(
        item=found,
        lines=tuple(
            ReviewLine(row, name, line.version.work, group_of(row))
            for row, line in zip(found.rows, found.lines, strict=True)
        ),
        curves=tuple(life_curves(found.facts, found.lines, is_future=is_future)),
        findings=tuple(row for row in finding_rows(connection, on) if row.engine == found.facts.item.tag),
        cautions=tuple((line.task.name, line.version.caution) for line in found.lines if line.version.caution),
        lash=lash_trends(connection, item, found.facts, found.lines),
        measured=measured_trends(connection, item, found.facts, found.lines),
    )
