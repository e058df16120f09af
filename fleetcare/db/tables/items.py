"""Engines and machines, where they stand, who works on them, and the dated facts about them."""

from datetime import date
from decimal import Decimal

from sqlalchemy import Index, UniqueConstraint, text

from fleetcare.db.columns import Row, choice, exact, key, ref
from fleetcare.domain.engines import Status
from fleetcare.domain.quantities import Kind


class Site(Row, table=True):
    """A place engines stand at; exists once named. `name_key` is the name casefolded."""

    __tablename__ = "site"

    name: str
    name_key: str = key(unique=True)


class Person(Row, table=True):
    """Somebody who records or decides; exists once named. `name_key` is the name casefolded."""

    __tablename__ = "person"

    name: str
    name_key: str = key(unique=True)


class Setting(Row, table=True):
    """One setting of the shop, as typed."""

    __tablename__ = "setting"

    name: str = key(unique=True)
    value: str = ""


class Item(Row, table=True):
    """An engine or a machine: whatever carries a tag, meters and tasks.

    A tag is taken by one item at a time, engines and machines together, and free again once that
    item is withdrawn. `tag_key` is the tag casefolded.
    """

    __tablename__ = "item"
    __table_args__ = (
        Index(
            "uq_item_tag_key_in_use",
            "tag_key",
            unique=True,
            sqlite_where=text("withdrawn_on IS NULL"),
            postgresql_where=text("withdrawn_on IS NULL"),
        ),
    )

    tag: str
    tag_key: str
    is_engine: bool
    name: str = ""
    site_id: int | None = ref("site", default=None)
    in_service_on: date | None = None
    as_new: bool = False
    withdrawn_on: date | None = None


class Engine(Row, table=True):
    """The nameplate of an engine. Lengths in mm, volume in L, power in kW, altitude in m, angles in degrees."""

    __tablename__ = "engine"

    item_id: int = ref("item", unique=True)
    duty: str = ""
    cylinders: int | None = None
    layout: str = choice("layout", "", "inline", "v", "opposed", "single", default="")
    numbering: str = choice("numbering", "", "by-bank", "alternating", default="")
    firing_order: str = ""
    fuel: str = ""
    bore_mm: Decimal | None = exact(default=None)
    stroke_mm: Decimal | None = exact(default=None)
    rod_mm: Decimal | None = exact(default=None)
    compression_ratio: Decimal | None = exact(default=None)
    valves_per_cylinder: int | None = None
    intake_closes_deg: Decimal | None = exact(default=None)
    bridged: str = choice("bridged", "", "none", "intake", "exhaust", "both", default="")
    adjuster: str = choice("adjuster", "", "screw", "shim", "hydraulic", default="")
    screw_pitch_mm: Decimal | None = exact(default=None)
    screw_at: str = choice("screw_at", "", "pushrod", "valve", "centre", default="")
    rocker_ratio: Decimal | None = exact(default=None)
    shim_step_mm: Decimal | None = exact(default=None)
    oil_grade: str = ""
    sump_l: Decimal | None = exact(default=None)
    rated_rpm: Decimal | None = exact(default=None)
    rated_kw: Decimal | None = exact(default=None)
    altitude_m: Decimal | None = exact(default=None)


class LashSpec(Row, table=True):
    """Check ranges and setting values of the valve lash, in force from a day until the next spec."""

    __tablename__ = "lash_spec"

    item_id: int = ref("item")
    from_on: date
    unit: str = choice("unit", "mm", "in")
    intake_low: Decimal | None = exact(default=None)
    intake_high: Decimal | None = exact(default=None)
    exhaust_low: Decimal | None = exact(default=None)
    exhaust_high: Decimal | None = exact(default=None)
    set_intake: Decimal | None = exact(default=None)
    set_exhaust: Decimal | None = exact(default=None)
    condition: str = choice("condition", "cold", "hot", "any")


class StartFigure(Row, table=True):
    """The life total an item came with, one for each kind of meter."""

    __tablename__ = "start_figure"
    __table_args__ = (UniqueConstraint("item_id", "kind"),)

    item_id: int = ref("item")
    kind: Kind = choice("kind", Kind)
    value: Decimal = exact()
    unit: str


class StatusSpell(Row, table=True):
    """A status in force from a day until the next spell."""

    __tablename__ = "status_spell"

    item_id: int = ref("item")
    status: Status = choice("status", Status)
    from_on: date
    why: str = ""
    person_id: int | None = ref("person", default=None)


class Fitting(Row, table=True):
    """An engine in a machine; `to_on` is the day it came out, None while it is in."""

    __tablename__ = "fitting"

    engine_id: int = ref("item")
    machine_id: int = ref("item")
    position: str = ""
    from_on: date
    to_on: date | None = None


class DutyFactor(Row, table=True):
    """A factor on the intervals of one kind, in force from a day until the next factor of that kind."""

    __tablename__ = "duty_factor"

    item_id: int = ref("item")
    kind: Kind = choice("kind", Kind)
    factor: Decimal = exact()
    from_on: date
    why: str = ""
