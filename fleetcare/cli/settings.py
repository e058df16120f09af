"""`setting`: the shop's settings, to look at and to change."""

import argparse

from fleetcare.cli import output
from fleetcare.cli.parser import Commands
from fleetcare.cli.shop import context_of


def add_commands(commands: Commands) -> None:
    """Add `setting`."""
    setting = commands.add_parser("setting", help="the shop's settings: show or change them")
    setting.add_argument("name", metavar="NAME", nargs="?", help="one setting, else all")
    setting.add_argument("value", metavar="VALUE", nargs="?", help="its new value; '' goes back to the default")
    setting.set_defaults(run=_setting)


def _setting(given: argparse.Namespace) -> None:
    from fleetcare.operations.settings import SETTINGS, change_setting, read_settings, spec_of

    specs = SETTINGS if given.name is None else (spec_of(given.name),)
    context = context_of(given)
    if given.value is not None:
        with context.write() as session:
            change_setting(session, given.name, given.value)
    with context.read() as connection:
        values = read_settings(connection)
    rows = [[spec.name, values[spec.name] or "-", spec.default or "-", spec.meaning] for spec in specs]
    output.say(output.table(["setting", "value", "default", "meaning"], rows))
