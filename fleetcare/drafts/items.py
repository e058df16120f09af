"""An engine or a machine as somebody states it: tag, nameplate, meters and start point."""

from decimal import Decimal
from typing import Annotated, Literal, Self

from pydantic import BeforeValidator, model_validator

from fleetcare.domain.engines import Bridged, Layout
from fleetcare.drafts.fields import Count, Day, Dials, Digits, KindField, Meters, Note, Number, Positive, Text
from fleetcare.drafts.reading_in import Draft, as_option
from fleetcare.errors import Misread, Refused
from fleetcare.rules.bounds import check_between
from fleetcare.rules.geometry import MOST_CYLINDERS, MOST_MM, MOST_RPM
from fleetcare.rules.lash_points import check_bridges
from fleetcare.rules.lash_setting import MOST_PITCH_MM, MOST_ROCKER_RATIO
from fleetcare.rules.nameplate import (
    UNIT_WORDS,
    LashUnit,
    check_firing_order,
    check_layout,
    parse_lash_range,
    parse_lash_setting,
)

LashRange = Annotated[
    tuple[Decimal, Decimal, LashUnit],
    BeforeValidator(lambda value: value if isinstance(value, tuple) else parse_lash_range(str(value))),
]


LashSetting = Annotated[
    tuple[Decimal, LashUnit],
    BeforeValidator(lambda value: value if isinstance(value, tuple) else parse_lash_setting(str(value))),
]

# Limits of sense for any four-stroke engine, least and most, with their units.
_PLATE = {
    "cylinders": (1, MOST_CYLINDERS, ""),
    "bore": (1, MOST_MM, "mm"),
    "stroke": (1, MOST_MM, "mm"),
    "rod": (1, 2 * MOST_MM, "mm"),
    "compression_ratio": (2, 50, ""),
    "valves_per_cylinder": (2, 8, ""),
    "intake_closes": (-180, 180, "degrees"),
    "screw_pitch": (0, MOST_PITCH_MM, "mm"),
    "rocker_ratio": (0, MOST_ROCKER_RATIO, ""),
    "shim_step": (0, 1, "mm"),
    "sump": (0, 100_000, "L"),
    "rated_rpm": (1, MOST_RPM, "rpm"),
    "rated_kw": (0, 200_000, "kW"),
    "altitude": (-500, 9_000, "m"),
}


def _as_new(value: object) -> bool:
    """Read a yes or no, as a CSV cell gives it."""
    if isinstance(value, bool):
        return value
    known = {"yes": True, "true": True, "1": True, "no": False, "false": False, "0": False}
    answer = known.get(str(value).strip().lower())
    if answer is None:
        raise Misread(f"{value!r} is neither yes nor no", "write yes or no")
    return answer


class ItemFields(Draft):
    """What is told of engines and machines alike, each field by itself."""

    tag: Text
    name: Text | None = None
    site: Text | None = None
    in_service: Day | None = None
    as_new: Annotated[bool, BeforeValidator(_as_new)] = False
    start_at: Dials = ()
    meter: Meters = ()
    meter_digits: Digits = ()


class ItemDraft(ItemFields):
    """An engine or a machine as a whole: its fields checked against each other."""

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


class EngineFields(ItemFields):
    """The nameplate of an engine, each field by itself; lengths in mm, volume in L, power in kW, altitude in m."""

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
    bridged: Literal["none", "intake", "exhaust", "both"] | None = None
    adjuster: Literal["screw", "shim", "hydraulic"] | None = None
    screw_pitch: Positive | None = None
    screw_at: Literal["pushrod", "valve", "centre"] | None = None
    rocker_ratio: Positive | None = None
    shim_step: Positive | None = None
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


class ItemChanges(EngineFields):
    """What should change of an engine or a machine; what is not given stays as it is."""


class EngineDraft(EngineFields, ItemDraft):
    """An engine as a whole: its fields checked against each other."""

    @model_validator(mode="after")
    def _check_nameplate(self) -> Self:
        if self.position is not None and self.machine is None:
            raise Refused("a position is one in a machine", "give --machine as well")
        for field, (least, most, unit) in _PLATE.items():
            value = getattr(self, field)
            if value is not None:
                check_between(field.replace("_", " "), Decimal(value), least, most, unit)
        if self.layout is not None and self.cylinders is not None:
            check_layout(self.layout, self.cylinders)
        if self.firing_order is not None:
            if self.cylinders is None:
                raise Refused("a firing order needs the number of cylinders", "give --cylinders as well")
            check_firing_order(self.firing_order, self.cylinders)
        if self.bridged not in {None, Bridged.NONE}:
            if self.valves_per_cylinder is None:
                raise Refused("a bridge needs the number of valves", "give --valves-per-cylinder as well")
            check_bridges(self.valves_per_cylinder, Bridged(self.bridged))
        for name, given in self.lash_figures().items():
            if given[-1] != self.lash_unit:
                units = f"{UNIT_WORDS[given[-1]]}, another lash figure in {UNIT_WORDS[str(self.lash_unit)]}"
                raise Refused(f"{as_option(name)} is in {units}", "give all of them in one unit")
        return self

    @property
    def lash_unit(self) -> LashUnit | None:
        """The unit the lash figures are in, None where there are none."""
        return next((given[-1] for given in self.lash_figures().values()), None)

    def lash_figures(self) -> dict[str, tuple[Decimal, Decimal, LashUnit] | tuple[Decimal, LashUnit]]:
        """Give the lash figures that are stated, by their names."""
        figures = {
            "lash_intake": self.lash_intake,
            "lash_exhaust": self.lash_exhaust,
            "lash_set_intake": self.lash_set_intake,
            "lash_set_exhaust": self.lash_set_exhaust,
        }
        return {name: figure for name, figure in figures.items() if figure is not None}


class RenameDraft(Draft):
    """A site or a person under the name known, and the name it should have."""

    known: Text
    name: Text


class StatusDraft(Draft):
    """A status that begins on a day; `by` says so."""

    tag: Text
    on: Day
    by: Text | None = None
    why: Note = ""


class ReturnDraft(StatusDraft):
    """A return to service: somebody must stand for it."""

    by: Text


class FactorDraft(Draft):
    """A duty factor that shortens the intervals of a kind from a day on."""

    tag: Text
    kind: KindField
    factor: Number
    on: Day
    why: Text


class FitDraft(Draft):
    """A move of an engine into a machine, or `out` of the one it is in."""

    tag: Text
    machine: Text | None = None
    out: bool = False
    position: Text | None = None
    on: Day

    @model_validator(mode="after")
    def _check_where(self) -> Self:
        if self.out is (self.machine is not None):
            raise Misread("an engine goes into a machine or out of one", "give --machine TAG or --out")
        return self
