"""`schedule`: named sets of tasks, shipped or of the shop's own, to look at and to give to engines and machines."""

import argparse
from typing import TYPE_CHECKING

from fleetcare.cli import output
from fleetcare.cli.parser import Commands
from fleetcare.cli.shop import context_of, option_label, say_entered
from fleetcare.errors import Misread

if TYPE_CHECKING:
    from fleetcare.rulebook.schedules import Schedule

_NAME_HELP = "id of a shipped schedule, or a TOML file of your own"


def add_commands(commands: Commands) -> None:
    """Add `schedule`."""
    schedule = commands.add_parser("schedule", help="sets of tasks: list, show, apply").add_subparsers(
        metavar="ACTION", required=True
    )
    listing = schedule.add_parser("list", help="list the shipped schedules")
    listing.add_argument("--json", action="store_true", help="print one JSON array")
    listing.set_defaults(run=_list)
    show = schedule.add_parser("show", help="show a schedule with its source and tasks")
    show.add_argument("name", metavar="NAME", help=_NAME_HELP)
    form = show.add_mutually_exclusive_group()
    form.add_argument("--json", action="store_true", help="print one JSON object")
    form.add_argument("--toml", action="store_true", help="print its file, to change and apply as your own")
    show.add_argument("--out", metavar="FILE", help="with --json or --toml: the file to write, else the screen")
    show.set_defaults(run=_show)
    apply = schedule.add_parser("apply", help="add all tasks of a schedule to engines or machines")
    apply.add_argument("name", metavar="NAME", help=_NAME_HELP)
    apply.add_argument("tags", nargs="+", metavar="TAG")
    apply.add_argument(
        "--from",
        dest="counts_from",
        action="append",
        metavar="START",
        help="start, unset, or when last done: DATE, VALUE, or both; needed unless the engine counts as new",
    )
    apply.set_defaults(run=_apply)


def _list(given: argparse.Namespace) -> None:
    from fleetcare.rulebook.schedules import shipped_schedules

    schedules = shipped_schedules()
    if given.json:
        output.deliver(output.json_text([_as_json(schedule) for schedule in schedules]))
        return
    output.say(
        output.table(
            ["schedule", "name", "fuel", "duty", "tasks"],
            [[each.id, each.name, each.fuel, each.duty, len(each.tasks)] for each in schedules],
        )
    )


def _show(given: argparse.Namespace) -> None:
    from fleetcare.rulebook.schedules import find_schedule, is_file_name

    if given.out and not (given.json or given.toml):
        raise Misread("--out writes JSON or TOML", "add --json or --toml")
    schedule = find_schedule(given.name)
    if is_file_name(given.name):
        # A shipped schedule is tried out before it is shipped; a shop's own is tried out here.
        from fleetcare.drafts.schedules import read_tasks

        read_tasks(schedule)
    if given.json:
        output.deliver(output.json_text(_as_json(schedule)), given.out)
    elif given.toml:
        output.deliver(schedule.text, given.out)
    else:
        _say_schedule(schedule)


def _as_json(schedule: "Schedule") -> dict[str, object]:
    return {
        "schedule": schedule.id,
        "name": schedule.name,
        "engines": schedule.engines,
        "fuel": schedule.fuel,
        "duty": schedule.duty,
        "source": schedule.source,
        "note": schedule.note,
        "tasks": schedule.tasks,
    }


def _say_schedule(schedule: "Schedule") -> None:
    from fleetcare.rulebook.schedule_words import say_every, say_rest

    output.say(f"{schedule.id}: {schedule.name}")
    for label in ("engines", "fuel", "duty", "source", "note"):
        output.say(f"{label + ':':<9}{getattr(schedule, label) or '-'}")
    output.say("")
    output.say(
        output.table(
            ["task", "every", "work", "also"],
            [[task["name"], say_every(task), task.get("work", ""), say_rest(task)] for task in schedule.tasks],
        )
    )
    for label in ("caution", "source"):
        for text in dict.fromkeys(task.get(label) for task in schedule.tasks):
            names = [str(task["name"]) for task in schedule.tasks if task.get(label) == text]
            if text and text != schedule.source:
                output.say(f"\n{label} ({', '.join(names)}): {text}")


def _apply(given: argparse.Namespace) -> None:
    from fleetcare.drafts.reading_in import read_draft
    from fleetcare.drafts.schedules import StartDraft
    from fleetcare.operations.adding import enter_schedule
    from fleetcare.rulebook.schedules import find_schedule

    context = context_of(given)
    schedule = find_schedule(given.name)
    start = read_draft(StartDraft, {"counts_from": given.counts_from}, lambda _: option_label("from"))
    with context.write() as session:
        entered = enter_schedule(session, schedule, given.tags, start, context.today())
    for one in entered:
        say_entered(one)
