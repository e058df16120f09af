"""${message}

Before this is committed:
- It imports nothing of fleetcare or SQLModel: tables change later, this file never does.
- SQLite changes a table by rebuilding it: use op.batch_alter_table.
- It runs with foreign keys off; they are checked before the commit.
- A change to rows is tested with rows, and the ledger's payloads must still equal the rows.
- HEAD in fleetcare/db/session.py names it.
"""

import sqlalchemy as sa
from alembic import op
${imports if imports else ""}
revision = ${repr(up_revision)}
down_revision = ${repr(down_revision)}
branch_labels = ${repr(branch_labels)}
depends_on = ${repr(depends_on)}


def upgrade() -> None:
    ${upgrades if upgrades else "pass"}


def downgrade() -> None:
    ${downgrades if downgrades else "pass"}
