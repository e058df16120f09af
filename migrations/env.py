"""How Alembic reaches a database: on the connection the program hands over, or `alembic -x db=FILE ...`."""

from pathlib import Path
from typing import Any, Literal

from alembic import context
from alembic.autogenerate.api import AutogenContext
from sqlalchemy import Connection
from sqlalchemy.types import TypeDecorator

from fleetcare.db.session import engine
from fleetcare.db.tables import metadata


def render_item(kind: str, item: Any, autogenerate: AutogenContext) -> str | Literal[False]:
    """Write the plain SQLAlchemy type under a type of ours or of SQLModel, so revisions import neither."""
    if kind == "type" and isinstance(item, TypeDecorator):
        return f"sa.{item.impl!r}"
    return False


def migrate(connection: Connection) -> None:
    """Run the migrations asked for, all in one transaction."""
    context.configure(
        connection=connection,
        target_metadata=metadata,
        render_as_batch=True,
        render_item=render_item,
        transactional_ddl=True,
    )
    with context.begin_transaction():
        context.run_migrations()


handed_over = context.config.attributes.get("connection")
if handed_over is not None:
    migrate(handed_over)
else:
    database = Path(context.get_x_argument(as_dictionary=True)["db"])
    database.touch()
    with engine(database, foreign_keys=False).begin() as opened:
        migrate(opened)
