"""`backup`, `check` and `upgrade`: look after the file."""

import argparse
from pathlib import Path

from fleetcare.cli import output
from fleetcare.cli.parser import Commands
from fleetcare.cli.shop import context_of
from fleetcare.errors import Refusals, Refused


def add_commands(commands: Commands) -> None:
    """Add `backup`, `check` and `upgrade`."""
    backup = commands.add_parser("backup", help="copy the database, whoever is using it")
    backup.add_argument("file", metavar="FILE", nargs="?", help="new file, else one beside the database with the day")
    backup.set_defaults(run=_backup)
    check = commands.add_parser("check", help="whether anything was changed behind the tool's back")
    check.add_argument("--head", metavar="SEQ:HASH", help="a head printed earlier; finds a ledger cut short since")
    check.set_defaults(run=_check)
    upgrade = commands.add_parser("upgrade", help="bring an older database up to this program")
    upgrade.set_defaults(run=_upgrade)


def _backup(given: argparse.Namespace) -> None:
    from fleetcare.operations.upkeep import backup

    out = backup(context_of(given), Path(given.file) if given.file else None)
    output.say(f"The database is copied to {out}.")


def _check(given: argparse.Namespace) -> None:
    from fleetcare.operations.upkeep import check

    found = check(context_of(given), given.head)
    if found.problems:
        remedy = "go back to a backup that is sound; if only the tables are older, run fleetcare upgrade"
        raise Refusals([Refused(problem, remedy) for problem in found.problems])
    output.say(f"sound, head {found.head}")


def _upgrade(given: argparse.Namespace) -> None:
    from fleetcare.operations.upkeep import upgrade

    context = context_of(given)
    copy = upgrade(context)
    if copy is None:
        output.say(f"{context.path} is up to this program; nothing to do.")
    else:
        output.say(f"{context.path} is brought up to this program; as it was before, it is kept in {copy}.")
