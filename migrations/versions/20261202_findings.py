"""What people answer to findings, the shop's own rules, and what rules made of each engine, kept to be read fast.

`judged_engine` is derived: it can be made anew from the rest at any time, so the ledger does not know it. No row changes.
"""

import sqlalchemy as sa
from alembic import op

revision = "20261202_findings"
down_revision = "20261201_first_tables"
branch_labels = None
depends_on = None


def upgrade() -> None:
    op.create_table(
        "finding_answer",
        sa.Column("id", sa.Integer(), nullable=False),
        sa.Column("uid", sa.String(), nullable=False),
        sa.Column("recorded_at", sa.DateTime(), nullable=False),
        sa.Column("item_id", sa.Integer(), nullable=False),
        sa.Column("finding", sa.String(), nullable=False),
        sa.Column("cause", sa.String(), nullable=False),
        sa.Column("subject", sa.String(), nullable=False),
        sa.Column(
            "severity",
            sa.Enum("alert", "alarm", name="severity", native_enum=False, create_constraint=True, length=20),
            nullable=False,
        ),
        sa.Column(
            "kind",
            sa.Enum("accept", "follow-up", name="kind", native_enum=False, create_constraint=True, length=20),
            nullable=False,
        ),
        sa.Column("why", sa.String(), nullable=False),
        sa.Column("person_id", sa.Integer(), nullable=False),
        sa.Column("on", sa.Date(), nullable=False),
        sa.Column("call_id", sa.Integer(), nullable=True),
        sa.ForeignKeyConstraint(["item_id"], ["item.id"]),
        sa.ForeignKeyConstraint(["person_id"], ["person.id"]),
        sa.ForeignKeyConstraint(["call_id"], ["task_call.id"]),
        sa.PrimaryKeyConstraint("id"),
        sa.UniqueConstraint("uid"),
    )
    for column in ("item_id", "person_id", "call_id"):
        op.create_index(op.f(f"ix_finding_answer_{column}"), "finding_answer", [column])
    op.create_table(
        "shop_rules",
        sa.Column("id", sa.Integer(), nullable=False),
        sa.Column("uid", sa.String(), nullable=False),
        sa.Column("recorded_at", sa.DateTime(), nullable=False),
        sa.Column("name", sa.String(), nullable=False),
        sa.Column("text", sa.String(), nullable=False),
        sa.Column("is_dropped", sa.Boolean(), nullable=False),
        sa.Column("from_on", sa.Date(), nullable=False),
        sa.Column("why", sa.String(), nullable=False),
        sa.Column("person_id", sa.Integer(), nullable=False),
        sa.ForeignKeyConstraint(["person_id"], ["person.id"]),
        sa.PrimaryKeyConstraint("id"),
        sa.UniqueConstraint("uid"),
    )
    op.create_index(op.f("ix_shop_rules_person_id"), "shop_rules", ["person_id"])
    op.create_table(
        "judged_engine",
        sa.Column("item_id", sa.Integer(), nullable=False),
        sa.Column("seq", sa.Integer(), nullable=False),
        sa.Column("book", sa.String(), nullable=False),
        sa.Column("facts", sa.String(), nullable=False),
        sa.Column("content", sa.String(), nullable=False),
        sa.ForeignKeyConstraint(["item_id"], ["item.id"]),
        sa.PrimaryKeyConstraint("item_id"),
    )


def downgrade() -> None:
    for name in ("judged_engine", "shop_rules", "finding_answer"):
        op.drop_table(name)
