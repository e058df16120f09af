"""An engine with its sheets and all that judging them takes, for the laws of judging."""

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date
from functools import cached_property

from hypothesis.vendor.pretty import RepresentationPrinter

from fleetcare.domain.engines import ValveTrain
from fleetcare.domain.measured import MeasuredEngine, MeasuredSheet
from fleetcare.domain.rule_book import Rule, RuleBook
from fleetcare.domain.sheets import Judgement, LashSpec, SheetValue
from fleetcare.rules.judge_engine import Background
from fleetcare.rules.judge_lash import judge_sheet as judge_lash
from fleetcare.rules.judging.applies import rules_for
from fleetcare.rules.judging.pools import NO_FAMILY, Family
from fleetcare.rules.lash_points import lash_points
from tests.property.shop import BOOKS


@dataclass(frozen=True)
class Case:
    """An engine with its sheets, oldest first, and all that judging takes. `conditions` of lash sheets are by entry."""

    engine: MeasuredEngine
    train: ValveTrain | None
    book: RuleBook
    sheets: tuple[MeasuredSheet, ...]
    spec: LashSpec | None
    conditions: Mapping[int, str]
    fresh: tuple[SheetValue, ...] = ()
    family: Family = NO_FAMILY

    def __repr__(self) -> str:
        """What a person needs to see of a case in which a law does not hold; the rule book is one of a few."""
        sheets = "".join(
            f"\n  {sheet.entry}: {sheet.kind} on {sheet.on} {sheet.gauge} at {sheet.engine_hours} h,"
            f" {self.conditions.get(sheet.entry, '')} {[f'{word.quantity} {word.text}' for word in sheet.words]}: "
            + "; ".join(f"{one.quantity}{one.point} {one.phase} {one} {one.unit}" for one in sheet.values)
            for sheet in self.sheets
        )
        new = [f"{one.quantity} {one} {one.unit}" for one in self.fresh]
        return f"book {BOOKS.index(self.book)}, {self.engine}\n  {self.spec}\n  new oil {new}{sheets}"

    def _repr_pretty_(self, printer: RepresentationPrinter, cycle: bool) -> None:
        printer.text(repr(self))

    @cached_property
    def rules(self) -> tuple[Rule, ...]:
        """The rules for the engine."""
        return rules_for(self.book, self.engine)

    @cached_property
    def lash(self) -> dict[int, tuple[Judgement, ...]]:
        """Its lash sheets held against its check ranges."""
        points = lash_points(self.train) if self.train else ()
        return {
            sheet.entry: judge_lash(sheet.values, points, self.spec, self.conditions[sheet.entry])
            for sheet in self.sheets
            if sheet.kind == "lash"
        }

    @cached_property
    def background(self) -> Background:
        """What is known beside the sheets."""
        return Background(self.fresh, self.family, self.lash, frozenset({date(2026, 4, 20)}))
