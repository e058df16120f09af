"""An engine or a machine as somebody states it: tag, nameplate, meters and start point."""

from datetime import date
from decimal import Decimal
from typing import Annotated, Literal, Self

from pydantic import BeforeValidator, model_validator

from fleetcare.domain.engines import Layout
from fleetcare.drafts.fields import Count, Day, Dials, Digits, Meters, Number, Positive, Text
from fleetcare.drafts.reading_in import Draft
from fleetcare.errors import Misread, Refused
from fleetcare.rules.nameplate import LashUnit, check_firing_order, check_layout, parse_lash_range

LashRange = Annotated[
    tuple[Decimal, Decimal, LashUnit],
    BeforeValidator(lambda value: value if isinstance(value, tuple) else parse_lash_range(str(value))),
]


def _lash_setting(value: object) -> tuple[Decimal, LashUnit]:
    """Read a setting value: 0.25 (mm) or 0.010in."""
    if isinstance(value, tuple):
        return value
    text = str(value).strip()
    low, _, unit = parse_lash_range(
        f"{text.removesuffix('in').removesuffix('mm').strip()}-99{'in' if text.endswith('in') else ''}"
    )
    return low, unit


LashSetting = Annotated[tuple[Decimal, LashUnit], BeforeValidator(_lash_setting)]


def _as_new(value: object) -> bool:
    """Read a yes or no, as a CSV cell gives it."""
    if isinstance(value, bool):
        return value
    known = {"yes": True, "true": True, "1": True, "no": False, "false": False, "0": False}
    answer = known.get(str(value).strip().lower())
    if answer is None:
        raise Misread(f"{value!r} is neither yes nor no", "write yes or no")
    return answer


class ItemDraft(Draft):
    """What engines and machines share."""

    tag: Text
    name: str | None = None
    site: Text | None = None
    in_service: Day | None = None
    as_new: Annotated[bool, BeforeValidator(_as_new)] = False
    start_at: Dials = ()
    meter: Meters = ()
    meter_digits: Digits = ()

    @model_validator(mode="after")
    def _check_start(self) -> Self:
        if self.start_at and self.in_service is None:
            raise Refused("a start figure needs its day", "give --in-service as well")
        if self.as_new and (self.in_service is None or not self.start_at):
            raise Refused(
                "an item counted as new needs the day and the figure it starts from",
                "give --in-service DATE and --start-at VALUE",
            )
        kinds = [kind for kind, _ in self.meter]
        if len(set(kinds)) < len(kinds):
            raise Refused("--meter names one kind twice", "an item has one meter of each kind")
        return self


class MachineDraft(ItemDraft):
    """A machine: what engines are fitted in."""


class EngineDraft(ItemDraft):
    """An engine with its nameplate; lengths in mm, volume in L, power in kW, altitude in m."""

    machine: Text | None = None
    position: Text | None = None
    duty: Text | None = None
    cylinders: Count | None = None
    layout: Layout | None = None
    numbering: Literal["by-bank", "alternating"] | None = None
    firing_order: Text | None = None
    fuel: Text | None = None
    bore: Positive | None = None
    stroke: Positive | None = None
    rod: Positive | None = None
    compression_ratio: Positive | None = None
    valves_per_cylinder: Count | None = None
    intake_closes: Number | None = None
    adjuster: Literal["screw", "shim", "hydraulic"] | None = None
    lash_intake: LashRange | None = None
    lash_exhaust: LashRange | None = None
    lash_set_intake: LashSetting | None = None
    lash_set_exhaust: LashSetting | None = None
    lash_when: Literal["cold", "hot", "any"] | None = None
    oil_grade: Text | None = None
    sump: Positive | None = None
    rated_rpm: Positive | None = None
    rated_kw: Positive | None = None
    altitude: Number | None = None

    @model_validator(mode="after")
    def _check_nameplate(self) -> Self:
        if self.layout is not None and self.cylinders is not None:
            check_layout(self.layout, self.cylinders)
        if self.firing_order is not None:
            if self.cylinders is None:
                raise Refused("a firing order needs the number of cylinders", "give --cylinders as well")
            check_firing_order(self.firing_order, self.cylinders)
        units = {given[-1] for given in self._lash_figures()}
        if len(units) > 1:
            raise Refused("the lash figures mix mm and inches", "give all of them in one unit")
        return self

    @property
    def lash_unit(self) -> LashUnit | None:
        """The unit the lash figures are in, None where there are none."""
        return next((given[-1] for given in self._lash_figures()), None)

    def _lash_figures(self) -> list[tuple[Decimal, Decimal, LashUnit] | tuple[Decimal, LashUnit]]:
        figures = (self.lash_intake, self.lash_exhaust, self.lash_set_intake, self.lash_set_exhaust)
        return [figure for figure in figures if figure is not None]


class SpellDraft(Draft):
    """A dated change of an item's status, fitting or duty."""

    on: date
    by: Text | None = None
    why: str = ""
