"""What was done, and what was decided about due points."""

from datetime import date
from decimal import Decimal

from sqlalchemy import UniqueConstraint

from fleetcare.db.columns import Row, choice, exact, key, ref
from fleetcare.domain.quantities import Kind


class LogEntry(Row, table=True):
    """Something done or seen on a day. Never edited: a correction is a new entry that supersedes this one.

    `supersedes_id` is unique, so two corrections of one entry collide instead of forking its history.
    """

    __tablename__ = "log_entry"

    item_id: int = ref("item")
    on: date
    kind: str = choice("kind", "scheduled", "repair", "defect", "top-up", "other")
    person_id: int | None = ref("person", default=None)
    title: str = ""
    note: str = ""
    component: str = ""
    downtime_hours: Decimal | None = exact(default=None)
    litres: Decimal | None = exact(default=None)
    litres_unit: str = ""
    supersedes_id: int | None = ref("log_entry", unique=True, default=None)
    is_void: bool = False
    why: str = ""
    import_key: str | None = key(unique=True, default=None)


class LogTask(Row, table=True):
    """A task done, or done in part, by an entry. `covered_by_id` is the bigger job it was done along with."""

    __tablename__ = "log_task"
    __table_args__ = (UniqueConstraint("entry_id", "task_id"),)

    entry_id: int = ref("log_entry")
    task_id: int = ref("task")
    part_done: bool = False
    covered_by_id: int | None = ref("log_task", default=None)
    served_period: str = ""


class LogPart(Row, table=True):
    """A part used by an entry."""

    __tablename__ = "log_part"

    entry_id: int = ref("log_entry")
    name: str
    quantity: Decimal = exact()


class Deferral(Row, table=True):
    """One due point moved by somebody, known by the entry it counts from, None for the start point."""

    __tablename__ = "deferral"

    task_id: int = ref("task")
    on: date
    counts_from_id: int | None = ref("log_entry", default=None)
    until_on: date | None = None
    why: str
    person_id: int = ref("person")


class DeferralFigure(Row, table=True):
    """A figure a deferral ends at: `until` as somebody said it, or a `cap` worked out on that day."""

    __tablename__ = "deferral_figure"

    deferral_id: int = ref("deferral")
    kind: Kind = choice("kind", Kind)
    role: str = choice("role", "until", "cap")
    meter_id: int | None = ref("meter", default=None)
    value: Decimal = exact()
    unit: str


class TaskCall(Row, table=True):
    """A follow-up, or an on-condition task called for; `entry_id` is the entry that raised it."""

    __tablename__ = "task_call"

    task_id: int = ref("task")
    entry_id: int | None = ref("log_entry", default=None)
    on: date
    due_on: date
    why: str = ""
