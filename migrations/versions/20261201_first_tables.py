"""The first tables.

A figure is text, because SQLite would keep a number as a binary fraction; words are held to their list by a CHECK.
Constraints are named by the convention that env.py hands over.
"""

from typing import Any

import sqlalchemy as sa
from alembic import op

revision = "20261201_first_tables"
down_revision = None
branch_labels = None
depends_on = None

TABLES = [
    "ledger",
    "person",
    "setting",
    "site",
    "item",
    "duty_factor",
    "engine",
    "fitting",
    "lash_spec",
    "log_entry",
    "meter",
    "start_figure",
    "status_spell",
    "task",
    "deferral",
    "log_part",
    "log_task",
    "meter_fit",
    "reading",
    "sheet",
    "task_call",
    "task_origin",
    "task_version",
    "deferral_figure",
    "origin_figure",
    "reading_mark",
    "sheet_value",
    "task_cover",
    "task_part",
    "task_trigger",
]


def word(name: str, **more: Any) -> sa.Column[str]:
    return column(name, sa.String(), **more)


def number(name: str, **more: Any) -> sa.Column[int]:
    return column(name, sa.Integer(), **more)


def day(name: str, **more: Any) -> sa.Column[Any]:
    return column(name, sa.Date(), **more)


def flag(name: str) -> sa.Column[bool]:
    return column(name, sa.Boolean())


def choice(name: str, *words: str, **more: Any) -> sa.Column[str]:
    kind = sa.Enum(*words, name=name, native_enum=False, create_constraint=True, length=20)
    return column(name, kind, **more)


def ref(name: str, table: str, *, nullable: bool = False, unique: bool = False) -> sa.Column[int]:
    to = sa.ForeignKey(f"{table}.id")
    return column(name, sa.Integer(), to, nullable=nullable, unique=unique, index=not unique)


def column(name: str, *kind: Any, nullable: bool = False, unique: bool = False, index: bool = False) -> sa.Column[Any]:
    return sa.Column(name, *kind, nullable=nullable, unique=unique, index=index)


def table(name: str, *columns: Any) -> None:
    op.create_table(
        name,
        sa.Column("id", sa.Integer(), primary_key=True),
        word("uid", unique=True),
        column("recorded_at", sa.DateTime(timezone=True)),
        *columns,
    )


def upgrade() -> None:
    op.create_table(
        "ledger",
        sa.Column("seq", sa.Integer(), primary_key=True),
        word("kind"),
        word("row_uid"),
        number("payload_version"),
        word("payload"),
        word("previous_hash"),
        word("hash"),
    )
    table(
        "person",
        word("name"),
        word("name_key", unique=True),
    )
    table(
        "setting",
        word("name", unique=True),
        word("value"),
    )
    table(
        "site",
        word("name"),
        word("name_key", unique=True),
    )
    table(
        "item",
        word("tag"),
        word("tag_key"),
        flag("is_engine"),
        word("name"),
        ref("site_id", "site", nullable=True),
        day("in_service_on", nullable=True),
        flag("as_new"),
        day("withdrawn_on", nullable=True),
    )
    op.create_index(
        "uq_item_tag_key_in_use",
        "item",
        ["tag_key"],
        unique=True,
        sqlite_where=sa.text("withdrawn_on IS NULL"),
        postgresql_where=sa.text("withdrawn_on IS NULL"),
    )
    table(
        "duty_factor",
        ref("item_id", "item"),
        choice("kind", "hours", "distance", "fuel", "starts", "calendar"),
        word("factor"),
        day("from_on"),
        word("why"),
    )
    table(
        "engine",
        ref("item_id", "item", unique=True),
        word("duty"),
        number("cylinders", nullable=True),
        choice("layout", "", "inline", "v", "opposed", "single"),
        choice("numbering", "", "by-bank", "alternating"),
        word("firing_order"),
        word("fuel"),
        word("bore_mm", nullable=True),
        word("stroke_mm", nullable=True),
        word("rod_mm", nullable=True),
        word("compression_ratio", nullable=True),
        number("valves_per_cylinder", nullable=True),
        word("intake_closes_deg", nullable=True),
        choice("bridged", "", "none", "intake", "exhaust", "both"),
        choice("adjuster", "", "screw", "shim", "hydraulic"),
        word("screw_pitch_mm", nullable=True),
        choice("screw_at", "", "pushrod", "valve", "centre"),
        word("rocker_ratio", nullable=True),
        word("shim_step_mm", nullable=True),
        word("oil_grade"),
        word("sump_l", nullable=True),
        word("rated_rpm", nullable=True),
        word("rated_kw", nullable=True),
        word("altitude_m", nullable=True),
    )
    table(
        "fitting",
        ref("engine_id", "item"),
        ref("machine_id", "item"),
        word("position"),
        day("from_on"),
        day("to_on", nullable=True),
    )
    table(
        "lash_spec",
        ref("item_id", "item"),
        day("from_on"),
        choice("unit", "mm", "in"),
        word("intake_low", nullable=True),
        word("intake_high", nullable=True),
        word("exhaust_low", nullable=True),
        word("exhaust_high", nullable=True),
        word("set_intake", nullable=True),
        word("set_exhaust", nullable=True),
        choice("condition", "cold", "hot", "any"),
    )
    table(
        "log_entry",
        ref("item_id", "item"),
        day("on"),
        choice("kind", "scheduled", "repair", "defect", "top-up", "other"),
        ref("person_id", "person", nullable=True),
        word("title"),
        word("note"),
        word("component"),
        word("downtime_hours", nullable=True),
        word("litres", nullable=True),
        word("litres_unit"),
        ref("supersedes_id", "log_entry", nullable=True, unique=True),
        flag("is_void"),
        word("why"),
        word("import_key", nullable=True, unique=True),
    )
    table(
        "meter",
        ref("item_id", "item"),
        choice("kind", "hours", "distance", "fuel", "starts", "calendar"),
        word("unit"),
        number("digits", nullable=True),
        number("decimals", nullable=True),
        word("counts"),
    )
    table(
        "start_figure",
        ref("item_id", "item"),
        choice("kind", "hours", "distance", "fuel", "starts", "calendar"),
        word("value"),
        word("unit"),
        sa.UniqueConstraint("item_id", "kind"),
    )
    table(
        "status_spell",
        ref("item_id", "item"),
        choice("status", "in service", "laid up", "stood down", "withdrawn"),
        day("from_on"),
        word("why"),
        ref("person_id", "person", nullable=True),
    )
    table(
        "task",
        ref("item_id", "item"),
        word("name"),
        word("name_key"),
        day("removed_on", nullable=True),
    )
    op.create_index(
        "uq_task_item_id_name_key_in_use",
        "task",
        ["item_id", "name_key"],
        unique=True,
        sqlite_where=sa.text("removed_on IS NULL"),
        postgresql_where=sa.text("removed_on IS NULL"),
    )
    table(
        "deferral",
        ref("task_id", "task"),
        day("on"),
        ref("counts_from_id", "log_entry", nullable=True),
        day("until_on", nullable=True),
        word("why"),
        ref("person_id", "person"),
    )
    table(
        "log_part",
        ref("entry_id", "log_entry"),
        word("name"),
        word("quantity"),
    )
    table(
        "log_task",
        ref("entry_id", "log_entry"),
        ref("task_id", "task"),
        flag("part_done"),
        ref("covered_by_id", "log_task", nullable=True),
        word("served_period"),
        sa.UniqueConstraint("entry_id", "task_id"),
    )
    table(
        "meter_fit",
        ref("meter_id", "meter"),
        ref("item_id", "item"),
        day("from_on", nullable=True),
        word("first", nullable=True),
        day("to_on", nullable=True),
        word("last", nullable=True),
        word("unmetered"),
    )
    table(
        "reading",
        ref("meter_id", "meter"),
        day("on"),
        word("value"),
        word("unit"),
        sa.Column("value_sort", sa.Float(), sa.Computed("CAST(value AS REAL)", persisted=True), nullable=False),
        flag("rolled_over"),
        ref("entry_id", "log_entry", nullable=True),
        word("note"),
        ref("person_id", "person", nullable=True),
        word("import_key", nullable=True, unique=True),
    )
    table(
        "sheet",
        ref("item_id", "item"),
        ref("entry_id", "log_entry"),
        word("kind"),
        day("taken_on"),
        word("conditions"),
        word("gauge"),
        word("lab_number"),
        day("received_on", nullable=True),
        word("import_key", unique=True, nullable=True),
    )
    table(
        "task_call",
        ref("task_id", "task"),
        ref("entry_id", "log_entry", nullable=True),
        day("on"),
        day("due_on"),
        word("why"),
    )
    table(
        "task_origin",
        ref("task_id", "task"),
        flag("as_new"),
        day("stated_on"),
        day("on", nullable=True),
    )
    table(
        "task_version",
        ref("task_id", "task"),
        day("from_on"),
        choice("combine", "first", "last"),
        choice("anchor", "from-done", "from-due", "on-grid", nullable=True),
        word("not_later_than"),
        word("needs_sheet"),
        flag("once"),
        flag("on_condition"),
        flag("pause_while_laid_up"),
        flag("law"),
        flag("insurer"),
        flag("deferrable"),
        word("work"),
        word("labour_hours", nullable=True),
        word("caution"),
        word("source"),
    )
    table(
        "deferral_figure",
        ref("deferral_id", "deferral"),
        choice("kind", "hours", "distance", "fuel", "starts", "calendar"),
        choice("role", "until", "cap"),
        ref("meter_id", "meter", nullable=True),
        word("value"),
        word("unit"),
    )
    table(
        "origin_figure",
        ref("origin_id", "task_origin"),
        ref("meter_id", "meter"),
        word("value"),
        word("unit"),
        sa.UniqueConstraint("origin_id", "meter_id"),
    )
    table(
        "reading_mark",
        ref("reading_id", "reading"),
        choice("mark", "suspect", "void", "restored"),
        word("why"),
        day("on"),
    )
    table(
        "sheet_value",
        ref("sheet_id", "sheet"),
        word("quantity"),
        word("point"),
        choice("phase", "", "found", "left", "dry", "wet", "new"),
        word("value", nullable=True),
        word("low", nullable=True),
        word("high", nullable=True),
        word("unit"),
        word("qualifier"),
    )
    table(
        "task_cover",
        ref("version_id", "task_version"),
        ref("covered_id", "task"),
        sa.UniqueConstraint("version_id", "covered_id"),
    )
    table(
        "task_part",
        ref("version_id", "task_version"),
        word("name"),
        word("quantity"),
    )
    table(
        "task_trigger",
        ref("version_id", "task_version"),
        number("place"),
        choice("kind", "hours", "distance", "fuel", "starts", "calendar"),
        word("every", nullable=True),
        word("every_unit"),
        word("first", nullable=True),
        word("first_unit"),
        word("ahead", nullable=True),
        word("ahead_unit"),
        word("grace", nullable=True),
        word("grace_unit"),
        choice("once_each", "", "week", "month", "quarter", "year"),
        number("window_days", nullable=True),
        flag("month_end"),
        word("grid_origin"),
        word("grid_unit"),
        day("grid_on", nullable=True),
        sa.UniqueConstraint("version_id", "kind"),
    )


def downgrade() -> None:
    for name in reversed(TABLES):
        op.drop_table(name)
