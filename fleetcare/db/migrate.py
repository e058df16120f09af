"""Making and upgrading the tables; only migrations do either."""

from pathlib import Path

from alembic import command
from alembic.config import Config
from alembic.script import ScriptDirectory
from sqlalchemy import Connection, text

import fleetcare
from fleetcare.db.failures import newer
from fleetcare.db.reading import HEAD, copy, require
from fleetcare.db.session import engine
from fleetcare.errors import NoDatabase


def scripts_folder() -> Path:
    """Give the folder of the migrations: inside an installed package, else beside it in a checkout."""
    package = Path(fleetcare.__file__).parent
    installed = package / "_migrations"
    return installed if installed.is_dir() else package.parent / "migrations"


def config(scripts: Path, connection: Connection | None = None) -> Config:
    """Give Alembic's settings for a folder of migrations, working on `connection`."""
    settings = Config(attributes={"connection": connection})
    settings.set_main_option("script_location", str(scripts).replace("%", "%%"))
    return settings


def run(connection: Connection, scripts: Path | None = None) -> None:
    """Bring the tables to the newest revision inside the open transaction of `connection`."""
    command.upgrade(config(scripts or scripts_folder(), connection), "head")


def bring_up(path: Path, scripts: Path) -> Path:
    """Upgrade an older file to the newest of `scripts`, and give the copy made before.

    Raises NoDatabase, the file unchanged, where it is newer or would break.
    """
    known = {script.revision for script in ScriptDirectory.from_config(config(scripts)).walk_revisions()}
    if require(path) not in known:
        raise newer(path)
    backup = _free_name(path)
    copy(path, backup)
    # A batch rebuild drops the old table, which with foreign keys on would take its children along;
    # the switch does nothing once a transaction is open.
    with engine(path, foreign_keys=False).begin() as connection:
        run(connection, scripts)
        if orphans := {row.table for row in connection.execute(text("PRAGMA foreign_key_check"))}:
            raise NoDatabase(
                f"{path} cannot be upgraded: in {', '.join(sorted(orphans))} something refers to rows that are not there",
                f"run fleetcare check; nothing was changed, a copy is in {backup.name}",
            )
    return backup


def _free_name(path: Path) -> Path:
    """Give a name for the copy beside `path` that is not taken by the copy of an earlier attempt."""
    name = path.with_name(f"{path.name}.before-{HEAD}.db")
    attempt = 1
    while name.exists():
        attempt += 1
        name = path.with_name(f"{path.name}.before-{HEAD}-{attempt}.db")
    return name
