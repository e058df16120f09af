"""Tasks, their dated versions with triggers, and what their counting starts from."""

from datetime import date
from decimal import Decimal

from sqlalchemy import Index, UniqueConstraint, text

from fleetcare.db.columns import Row, choice, exact, ref
from fleetcare.domain.quantities import Kind
from fleetcare.domain.schedules import Anchor, Combine, Period


class Task(Row, table=True):
    """One piece of work on an item. Names are taken once an item, and free again once the task is removed."""

    __tablename__ = "task"
    __table_args__ = (
        Index(
            "uq_task_item_id_name_key_in_use",
            "item_id",
            "name_key",
            unique=True,
            sqlite_where=text("removed_on IS NULL"),
            postgresql_where=text("removed_on IS NULL"),
        ),
    )

    item_id: int = ref("item")
    name: str
    name_key: str
    removed_on: date | None = None


class TaskVersion(Row, table=True):
    """A task as it stands from a day on; the first version holds on every earlier day too.

    `anchor` None means the default. `not_later_than` is a span such as 5y, or empty.
    """

    __tablename__ = "task_version"

    task_id: int = ref("task")
    from_on: date
    combine: Combine = choice("combine", Combine)
    anchor: Anchor | None = choice("anchor", Anchor, default=None)
    not_later_than: str = ""
    needs_sheet: str = ""
    once: bool = False
    on_condition: bool = False
    pause_while_laid_up: bool = False
    law: bool = False
    insurer: bool = False
    deferrable: bool = True
    work: str = ""
    labour_hours: Decimal | None = exact(default=None)
    caution: str = ""
    source: str = ""


class TaskTrigger(Row, table=True):
    """One interval of a version, at most one of a kind, all figures as entered with their units.

    `place` keeps the order of the options. `grid_origin` is empty, an ISO date, or a figure: in `grid_unit`, as the
    dial showed it on the day `grid_on`.
    """

    __tablename__ = "task_trigger"
    __table_args__ = (UniqueConstraint("version_id", "kind"),)

    version_id: int = ref("task_version")
    place: int
    kind: Kind = choice("kind", Kind)
    every: Decimal | None = exact(default=None)
    every_unit: str = ""
    first: Decimal | None = exact(default=None)
    first_unit: str = ""
    ahead: Decimal | None = exact(default=None)
    ahead_unit: str = ""
    grace: Decimal | None = exact(default=None)
    grace_unit: str = ""
    once_each: str = choice("once_each", "", *map(str, Period), default="")
    window_days: int | None = None
    month_end: bool = False
    grid_origin: str = ""
    grid_unit: str = ""
    grid_on: date | None = None


class TaskCover(Row, table=True):
    """A task of the same item that is done along with this version's."""

    __tablename__ = "task_cover"
    __table_args__ = (UniqueConstraint("version_id", "covered_id"),)

    version_id: int = ref("task_version")
    covered_id: int = ref("task")


class TaskPart(Row, table=True):
    """A part the work takes."""

    __tablename__ = "task_part"

    version_id: int = ref("task_version")
    name: str
    quantity: Decimal = exact()


class TaskOrigin(Row, table=True):
    """What a task counts from where no entry says; the newest row of a task holds.

    A figure without a day `on` of its own is what the dial showed on the day it was `stated_on`.
    """

    __tablename__ = "task_origin"

    task_id: int = ref("task")
    as_new: bool = False
    stated_on: date
    on: date | None = None


class OriginFigure(Row, table=True):
    """The dial figure of a start point, one for each meter that is known."""

    __tablename__ = "origin_figure"
    __table_args__ = (UniqueConstraint("origin_id", "meter_id"),)

    origin_id: int = ref("task_origin")
    meter_id: int = ref("meter")
    value: Decimal = exact()
    unit: str
